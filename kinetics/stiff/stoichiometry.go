package stiff

import (
	"math"
	"slices"
	"sort"
)

// An entry is one non-zero of a sparse row.
type entry struct {
	at int32
	co float64
}

// A rowOp takes f times one row off another.
type rowOp struct {
	from, to int32
	f        float64
}

// An echelon is the stoichiometry after row operations: one row of it for each
// eliminated channel in turn holds that channel, and no later row does.
type echelon struct {
	ops    []rowOp
	pivots []int32   // row by eliminated channel, in order
	chosen []int32   // the channel of each pivot
	rows   [][]entry // by row: channels, ascending
	sums   [][]entry // by row: the species summed in it, ascending
	used   []bool    // rows that are pivots
}

// eliminate works through the channels in the given order. In each it takes
// as pivot the row not used before that prefer likes best (the lowest number of
// equals), and clears the channel from the other unused rows. A channel that no
// unused row holds depends on those before.
func eliminate(n int, net func(ch int) []Term, channels, order []int, prefer func(ch, row int, sum []entry) float64) *echelon {
	e := &echelon{rows: make([][]entry, n), sums: make([][]entry, n), used: make([]bool, n)}
	for i := range n {
		e.sums[i] = []entry{{int32(i), 1}}
	}
	for _, c := range channels {
		for _, t := range net(c) {
			e.rows[t.Species] = append(e.rows[t.Species], entry{int32(c), t.Coef})
		}
	}
	for i := range e.rows {
		sort.Slice(e.rows[i], func(a, b int) bool { return e.rows[i][a].at < e.rows[i][b].at })
	}
	// Rows that hold a channel, or did at some time, in any order.
	holding := map[int32][]int{}
	for i, row := range e.rows {
		for _, x := range row {
			holding[x.at] = append(holding[x.at], i)
		}
	}
	var holders []int
	for _, c := range order {
		candidates := holding[int32(c)]
		sort.Ints(candidates)
		holders = holders[:0]
		best, liked := -1, 0.0
		for _, i := range slices.Compact(candidates) {
			if e.used[i] || lookup(e.rows[i], int32(c)) == 0 {
				continue
			}
			holders = append(holders, i)
			if like := prefer(c, i, e.sums[i]); best < 0 || like > liked {
				best, liked = i, like
			}
		}
		if best < 0 {
			continue
		}
		e.used[best] = true
		e.pivots = append(e.pivots, int32(best))
		e.chosen = append(e.chosen, int32(c))
		p := lookup(e.rows[best], int32(c))
		for _, i := range holders {
			if i == best {
				continue
			}
			f := lookup(e.rows[i], int32(c)) / p
			e.rows[i] = minus(e.rows[i], e.rows[best], f, int32(c))
			e.sums[i] = minus(e.sums[i], e.sums[best], f, -1)
			e.ops = append(e.ops, rowOp{int32(best), int32(i), f})
			for _, x := range e.rows[best] {
				holding[x.at] = append(holding[x.at], i)
			}
		}
	}
	return e
}

func lookup(row []entry, at int32) float64 {
	i, ok := slices.BinarySearchFunc(row, at, func(e entry, at int32) int { return int(e.at - at) })
	if !ok {
		return 0
	}
	return row[i].co
}

// minus returns a - f b, without the element gone and without rounding
// remnants of coefficients that cancel.
func minus(a, b []entry, f float64, gone int32) []entry {
	out := make([]entry, 0, len(a)+len(b))
	for len(a) > 0 || len(b) > 0 {
		switch {
		case len(b) == 0 || len(a) > 0 && a[0].at < b[0].at:
			out = append(out, a[0])
			a = a[1:]
		case len(a) == 0 || b[0].at < a[0].at:
			out = append(out, entry{b[0].at, -f * b[0].co})
			b = b[1:]
		default:
			co := a[0].co - f*b[0].co
			if a[0].at != gone && math.Abs(co) > 1e-9*math.Abs(a[0].co) {
				out = append(out, entry{a[0].at, co})
			}
			a, b = a[1:], b[1:]
		}
	}
	return out
}

// laws returns the weights of a basis of the conservation laws of a system:
// the rows that the elimination of every channel leaves empty.
func laws(s *System) [][]entry {
	all := make([]int, len(s.channels))
	for i := range all {
		all[i] = i
	}
	// Species in few channels go first: their rows are short, and so the laws.
	count := make([]int, s.species)
	for _, c := range s.channels {
		for _, t := range c.net {
			count[t.Species]++
		}
	}
	e := eliminate(s.species, func(c int) []Term { return s.channels[c].net }, all, all,
		func(c, row int, _ []entry) float64 { return -float64(count[row]) })
	var out [][]entry
	for i, u := range e.used {
		if !u {
			out = append(out, e.sums[i])
		}
	}
	return out
}
