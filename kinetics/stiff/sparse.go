package stiff

import "math"

// A sparse factorisation on a pattern that never changes: pivots stay on the
// diagonal, in the order chosen once. The list to holds, for every multiplier
// in turn and every element right of the pivot, the place it is subtracted
// from, so that a refactorisation only multiplies and subtracts.
type sparseLU struct {
	n     int
	rowAt []int32
	cols  []int32
	diag  []int32
	to    []int32
	val   []float64
	dinv  []float64
	at    []int32 // column to place in the row at hand
	most  float64 // largest multiplier accepted
	loss  float64 // largest ratio of a diagonal element to the pivot left of it
}

// longestList is the number of operations up to which they are listed, for speed;
// beyond it the list would take more memory than the factors by far.
const longestList = 4 << 20

func newSparseLU(o *ordering, most float64) *sparseLU {
	n := len(o.diag)
	s := &sparseLU{n: n, most: most, at: make([]int32, n), rowAt: o.rowAt, cols: o.cols, diag: o.diag,
		val: make([]float64, len(o.cols)), dinv: make([]float64, n)}
	if o.flops > longestList {
		return s
	}
	s.to = make([]int32, 0, o.flops)
	at := s.at
	for i := 0; i < n; i++ {
		for p := o.rowAt[i]; p < o.rowAt[i+1]; p++ {
			at[o.cols[p]] = p
		}
		for p := o.rowAt[i]; p < o.diag[i]; p++ {
			k := o.cols[p]
			for q := o.diag[k] + 1; q < o.rowAt[k+1]; q++ {
				s.to = append(s.to, at[o.cols[q]])
			}
		}
	}
	return s
}

// load sets the matrix to -jac.
func (s *sparseLU) load(jac []float64) {
	val := s.val[:len(jac)]
	for i, x := range jac {
		val[i] = -x
	}
}

// shift adds x to the diagonal.
func (s *sparseLU) shift(x float64) {
	for _, d := range s.diag {
		s.val[d] += x
	}
}

// factor takes the loaded matrix apart and reports whether the pivots on the
// diagonal were good enough.
func (s *sparseLU) factor() bool {
	val := s.val
	dinv, diag, cols, to, rowAt := s.dinv, s.diag, s.cols, s.to, s.rowAt
	n := s.n
	grown, loss := 0.0, 1.0
	at := 0
	for i := 0; i < n; i++ {
		d := diag[i]
		if to == nil {
			for p := rowAt[i]; p < rowAt[i+1]; p++ {
				s.at[cols[p]] = p
			}
		}
		whole := math.Abs(val[d])
		for p := rowAt[i]; p < d; p++ {
			k := cols[p]
			l := val[p] * dinv[k]
			val[p] = l
			if m := math.Abs(l); m > grown {
				grown = m
			}
			row := val[diag[k]+1 : rowAt[k+1]]
			if to == nil {
				for x, c := range cols[diag[k]+1 : rowAt[k+1]] {
					val[s.at[c]] -= l * row[x]
				}
				continue
			}
			dst := to[at:][:len(row)]
			for x, u := range row {
				val[dst[x]] -= l * u
			}
			at += len(row)
		}
		inv := 1 / val[d]
		dinv[i] = inv
		if r := whole * math.Abs(inv); r > loss {
			loss = r
		}
	}
	s.loss = loss
	// Rows right of the diagonal are divided by their pivots, so that in a
	// solution no product has to wait for the sum before it.
	last := 0.0
	for i, x := range dinv {
		last += x * 0 // not a number when a pivot was zero or not finite
		row := val[diag[i]+1 : rowAt[i+1]]
		for j := range row {
			row[j] *= x
		}
	}
	return grown <= s.most && last == 0
}

// bound returns the largest multiplier accepted from a pivot on the diagonal.
// Those of a network without autocatalysis stay near the stoichiometric
// numbers; a larger one loses that many units of rounding, which a loose
// tolerance does not see.
func bound(rtol float64) float64 {
	return min(1e5, max(100, 1e-3*rtol/rounding))
}

func (s *sparseLU) solve(b []float64) {
	val, cols, dinv := s.val, s.cols[:len(s.val)], s.dinv
	n := s.n
	b, diag, rowAt, dinv := b[:n], s.diag[:n], s.rowAt[:n+1], dinv[:n]
	for i := range b {
		x := b[i]
		for p, d := rowAt[i], diag[i]; p < d; p++ {
			x -= val[p] * b[cols[p]]
		}
		b[i] = x
	}
	for i := n - 1; i >= 0; i-- {
		x := b[i] * dinv[i]
		for p, end := diag[i]+1, rowAt[i+1]; p < end; p++ {
			x -= val[p] * b[cols[p]]
		}
		b[i] = x
	}
}
