package stiff

import (
	"math"
	"math/bits"
)

// An ordering says in which order species are eliminated, and holds the
// pattern of the factors that follows: row i has the columns
// cols[rowAt[i]:rowAt[i+1]], ascending, in the new numbering, with its
// diagonal at diag[i].
type ordering struct {
	place []int32 // species to its place
	rowAt []int32
	cols  []int32
	diag  []int32
	flops int // multiply-and-subtract operations of a factorisation
}

// counted is how many times the least number of elements touched an elimination
// may touch so that its fill is counted: that of a species with many partners
// is large, and takes long to count.
const counted = 2

// newOrdering chooses the order by the rule of least fill on the diagonal: at
// each step, of the species whose elimination touches few elements, the one
// that makes the fewest new ones; of equals, the one that touches the fewest,
// then the first. Those in first go before all others, as given. Rows and
// columns are bit sets; fill is added as it arises, and counted anew only where
// it can have changed.
// Sources: H. M. Markowitz, Management Sci. 3, 255 (1957), for few elements;
// W. F. Tinney and J. W. Walker, Proc. IEEE 55, 1801 (1967), for least fill.
func newOrdering(n int, positions, first []int) *ordering {
	words := (n + 63) / 64
	set := make([]uint64, 2*n*words)
	row := func(i int) []uint64 { return set[i*words:][:words] }
	col := func(j int) []uint64 { return set[(n+j)*words:][:words] }
	nr, nc := make([]int32, n), make([]int32, n) // off-diagonal counts among those left
	for _, p := range positions {
		i, j := p/n, p%n
		row(i)[j/64] |= 1 << (j % 64)
		col(j)[i/64] |= 1 << (i % 64)
		nr[i]++
		nc[j]++
	}
	o := &ordering{place: make([]int32, n)}
	left := make([]bool, n)
	fill := make([]int64, n)
	stale := make([]uint64, words) // species whose fill is to be counted
	for i := range left {
		left[i] = true
		stale[i/64] |= 1 << (i % 64)
	}
	order := make([]int, 0, n)
	total := n
	// The final pattern of a pivot's row and column is what is set among the
	// species left when it goes; those gone earlier keep their own record.
	upper := make([]uint64, n*words)
	lower := make([]uint64, n*words)
	for turn := range n {
		best, cost, least := -1, int64(0), int64(math.MaxInt64)
		if turn < len(first) {
			best = first[turn]
		} else {
			for i, l := range left {
				if l {
					least = min(least, int64(nr[i])*int64(nc[i]))
				}
			}
		}
		for i, l := range left {
			touched := int64(nr[i]) * int64(nc[i])
			if !l || touched > counted*least || turn < len(first) {
				continue
			}
			if stale[i/64]&(1<<(i%64)) != 0 {
				stale[i/64] &^= 1 << (i % 64)
				fill[i] = fillOf(i, words, row(i), col(i), set)
			}
			if c := fill[i]<<32 + touched; best < 0 || c < cost {
				best, cost = i, c
			}
		}
		k := best
		left[k] = false
		order = append(order, k)
		o.place[k] = int32(turn)
		o.flops += int(nr[k]) * int(nc[k])
		total += int(nr[k]) + int(nc[k])
		rk, ck := row(k), col(k)
		copy(upper[k*words:], rk)
		copy(lower[k*words:], ck)
		for w, b := range rk {
			stale[w] |= b | ck[w]
			for ; b != 0; b &= b - 1 {
				j := w*64 + bits.TrailingZeros64(b)
				col(j)[k/64] &^= 1 << (k % 64)
				nc[j]--
			}
		}
		for w, b := range ck {
			for ; b != 0; b &= b - 1 {
				i := w*64 + bits.TrailingZeros64(b)
				ri := row(i)
				ri[k/64] &^= 1 << (k % 64)
				nr[i]--
				for v := range ri {
					fresh := rk[v] &^ ri[v]
					if i/64 == v {
						fresh &^= 1 << (i % 64)
					}
					ri[v] |= fresh
					stale[v] |= ri[v]
					nr[i] += int32(bits.OnesCount64(fresh))
					for ; fresh != 0; fresh &= fresh - 1 {
						j := v*64 + bits.TrailingZeros64(fresh)
						col(j)[i/64] |= 1 << (i % 64)
						nc[j]++
					}
				}
			}
		}
	}
	// Rows in the new numbering: lower part from the columns of earlier pivots,
	// which arrive in ascending order, then the diagonal, then the upper part.
	o.rowAt, o.diag = make([]int32, n+1), make([]int32, n)
	for k := 0; k < n; k++ {
		for w, b := range upper[k*words:][:words] {
			o.rowAt[o.place[k]+1] += int32(bits.OnesCount64(b))
			b = lower[k*words+w]
			for ; b != 0; b &= b - 1 {
				o.rowAt[o.place[w*64+bits.TrailingZeros64(b)]+1]++
			}
		}
		o.rowAt[o.place[k]+1]++
	}
	for i := 0; i < n; i++ {
		o.rowAt[i+1] += o.rowAt[i]
	}
	o.cols = make([]int32, total)
	next := append([]int32(nil), o.rowAt[:n]...)
	for p, k := range order {
		for w, b := range lower[k*words:][:words] {
			for ; b != 0; b &= b - 1 {
				i := o.place[w*64+bits.TrailingZeros64(b)]
				o.cols[next[i]] = int32(p)
				next[i]++
			}
		}
	}
	for p, k := range order {
		o.diag[p] = next[p]
		o.cols[next[p]] = int32(p)
		at := next[p] + 1
		first := at
		for w, b := range upper[k*words:][:words] {
			for ; b != 0; b &= b - 1 {
				j := o.place[w*64+bits.TrailingZeros64(b)]
				x := at
				for ; x > first && o.cols[x-1] > j; x-- {
					o.cols[x] = o.cols[x-1]
				}
				o.cols[x] = j
				at++
			}
		}
	}
	return o
}

// fillOf counts the elements that the elimination of k adds to the rows of set.
func fillOf(k, words int, rk, ck, set []uint64) int64 {
	sum := 0
	for w, b := range ck {
		for ; b != 0; b &= b - 1 {
			i := w*64 + bits.TrailingZeros64(b)
			for v, have := range set[i*words:][:words] {
				sum += bits.OnesCount64(rk[v] &^ have)
			}
			if rk[i/64]&(1<<(i%64)) != 0 {
				sum-- // the diagonal of i
			}
		}
	}
	return int64(sum)
}

// find returns the place of an element in cols.
func (o *ordering) find(row, col int32) int32 {
	lo, hi := o.rowAt[row], o.rowAt[row+1]
	for lo < hi {
		mid := (lo + hi) / 2
		if o.cols[mid] < col {
			lo = mid + 1
		} else {
			hi = mid
		}
	}
	return lo
}
