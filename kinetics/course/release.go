package course

import (
	"math"

	"saddlebook/kinetics"
)

// A release finds the most heat that steps can give from a composition: the
// largest Σ −ΔHᵢ·ξᵢ over all extents ξ that leave no concentration below zero,
// steps without return going forward only. It is a linear programme; where the
// equilibrium lies does not matter to it.
type release struct {
	n      int
	change [][]float64 // by direction of a step, by species
	gain   []float64   // J/mol, by direction
	step   []int       // by direction
	sign   []float64   // by direction: −1 backwards
}

func newRelease(net *kinetics.Network, nets [][]float64, enthalpy []float64) *release {
	r := &release{n: len(net.Names)}
	for i := range net.Reactions {
		r.change, r.gain = append(r.change, nets[i]), append(r.gain, -enthalpy[i])
		r.step, r.sign = append(r.step, i), append(r.sign, 1)
		if net.Reactions[i].Returns {
			back := make([]float64, r.n)
			for s, v := range nets[i] {
				back[s] = -v
			}
			r.change, r.gain = append(r.change, back), append(r.gain, enthalpy[i])
			r.step, r.sign = append(r.step, i), append(r.sign, -1)
		}
	}
	return r
}

// steps sums the extents of directions by step.
func (r *release) steps(extents []float64, n int) []float64 {
	out := make([]float64, n)
	for j, x := range extents {
		out[r.step[j]] += r.sign[j] * x
	}
	return out
}

// most returns the most heat from c, in J/L, and the extents by direction that
// give it, mol/L; not ok if there is no bound.
//
// It is the simplex method on a full table: one row by species, its slack what
// is left of it, from the start at no extent. The lowest-numbered gainful
// direction enters and, of rows that tie, the lowest-numbered basic variable
// leaves (Bland's rule), so that no start with many species at zero can cycle.
// Source: Bland, Math. Oper. Res. 2, 103 (1977), from memory, unverified.
func (r *release) most(c []float64) (heat float64, extents []float64, ok bool) {
	m := len(r.change)
	width := m + r.n
	size := 0.0
	for _, g := range r.gain {
		size = math.Max(size, math.Abs(g))
	}
	const zero = 1e-9
	rows := make([][]float64, r.n)
	basic := make([]int, r.n)
	for s := range rows {
		rows[s] = make([]float64, width+1)
		for j := range m {
			rows[s][j] = -r.change[j][s]
		}
		rows[s][m+s] = 1
		rows[s][width] = math.Max(0, c[s])
		basic[s] = m + s
	}
	cost := make([]float64, width+1)
	copy(cost, r.gain)
	for {
		in := -1
		for j := range width {
			if cost[j] > zero*size {
				in = j
				break
			}
		}
		if in < 0 {
			extents = make([]float64, m)
			for s, j := range basic {
				if j < m {
					extents[j] = rows[s][width]
				}
			}
			return -cost[width], extents, true
		}
		out, least := -1, math.Inf(1)
		for s := range rows {
			if rows[s][in] <= zero {
				continue
			}
			q := rows[s][width] / rows[s][in]
			if q < least || q == least && basic[s] < basic[out] {
				out, least = s, q
			}
		}
		if out < 0 {
			return math.Inf(1), nil, false
		}
		p := rows[out]
		f := p[in]
		for x := range p {
			p[x] /= f
		}
		p[in] = 1
		clear := func(row []float64) {
			f := row[in]
			if f == 0 {
				return
			}
			for x, v := range p {
				row[x] -= f * v
			}
			row[in] = 0
		}
		for s := range rows {
			if s != out {
				clear(rows[s])
				rows[s][width] = math.Max(0, rows[s][width])
			}
		}
		clear(cost)
		basic[out] = in
	}
}
