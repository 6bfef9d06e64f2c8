package control

import (
	"math"
	"slices"
)

// small is zero for numbers that come from small whole ones.
const small = 1e-9

func identity(n int) []int {
	out := make([]int, n)
	for i := range out {
		out[i] = i
	}
	return out
}

func dot(a, b []float64) float64 {
	sum := 0.0
	for i, x := range a {
		sum += x * b[i]
	}
	return sum
}

// nullspace returns a basis of the vectors v with rows·v = 0. order lists the
// columns; the earliest possible ones are solved for, and each vector of the
// basis has 1 in one of the columns left free and 0 in the others.
func nullspace(rows [][]float64, order []int) [][]float64 {
	m := make([][]float64, len(rows))
	for i := range rows {
		m[i] = slices.Clone(rows[i])
	}
	pivot := map[int]int{} // column to the row solved for it
	done := 0
	for _, j := range order {
		best := done
		for i := done; i < len(m); i++ {
			if math.Abs(m[i][j]) > math.Abs(m[best][j]) {
				best = i
			}
		}
		if best >= len(m) || math.Abs(m[best][j]) < small {
			continue
		}
		m[done], m[best] = m[best], m[done]
		f := m[done][j]
		for k := range m[done] {
			m[done][k] /= f
		}
		for i := range m {
			f := m[i][j]
			if i == done || f == 0 {
				continue
			}
			for k := range m[i] {
				if m[i][k] -= f * m[done][k]; math.Abs(m[i][k]) < small {
					m[i][k] = 0
				}
			}
		}
		pivot[j] = done
		done++
	}
	var basis [][]float64
	for _, f := range order {
		if _, ok := pivot[f]; ok {
			continue
		}
		v := make([]float64, len(order))
		v[f] = 1
		for j, i := range pivot {
			if x := m[i][f]; x != 0 {
				v[j] = -x
			}
		}
		basis = append(basis, v)
	}
	return basis
}

// lu is a factorised square matrix.
type lu struct {
	m    [][]float64
	swap []int
}

// factorise destroys m. ok is false if m is singular to rounding.
func factorise(m [][]float64) (f lu, ok bool) {
	f = lu{m: m, swap: make([]int, len(m))}
	for j := range m {
		p := j
		for i := j + 1; i < len(m); i++ {
			if math.Abs(m[i][j]) > math.Abs(m[p][j]) {
				p = i
			}
		}
		if !(math.Abs(m[p][j]) > 0) || math.IsInf(m[p][j], 0) {
			return f, false
		}
		f.swap[j] = p
		m[j], m[p] = m[p], m[j]
		for i := j + 1; i < len(m); i++ {
			x := m[i][j] / m[j][j]
			m[i][j] = x
			if x == 0 {
				continue
			}
			for k := j + 1; k < len(m); k++ {
				m[i][k] -= x * m[j][k]
			}
		}
	}
	return f, true
}

// solve overwrites b with the solution of m·x = b.
func (f lu) solve(b []float64) {
	for j, p := range f.swap {
		b[j], b[p] = b[p], b[j]
	}
	for i := range b {
		for k := range i {
			b[i] -= f.m[i][k] * b[k]
		}
	}
	for i := len(b) - 1; i >= 0; i-- {
		for k := i + 1; k < len(b); k++ {
			b[i] -= f.m[i][k] * b[k]
		}
		b[i] /= f.m[i][i]
	}
}

// logAdd returns ln(exp(a) + exp(b)).
func logAdd(a, b float64) float64 {
	if a < b {
		a, b = b, a
	}
	if math.IsInf(b, -1) {
		return a
	}
	return a + math.Log1p(math.Exp(b-a))
}
