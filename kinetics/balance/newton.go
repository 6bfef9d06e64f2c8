package balance

import (
	"cmp"
	"math"
	"slices"
)

// newton fills s.step with the Newton step of ln c.
//
// The equations Σ_l (Σ_i n_ki n_li c_i) x_l = −(error of law k) are divided by
// the concentration of the lead of each law. As leads are abundant, all numbers
// are then of order one, whatever the concentrations.
func (s *search) newton() {
	m := len(s.lead)
	s.errors()
	order := make([]int, m) // laws by falling abundance of their leads
	for k := range order {
		order[k] = k
	}
	slices.SortStableFunc(order, func(a, b int) int { return cmp.Compare(s.ln[s.lead[b]], s.ln[s.lead[a]]) })
	place := make([]int, m)
	for i, k := range order {
		place[k] = i
	}
	a := make([][]float64, m)
	x := make([]float64, m)
	for i, k := range order {
		a[i] = make([]float64, m)
		a[i][i] = 1
		x[i] = -s.off[k]
	}
	for j := range s.ln {
		for _, p := range s.links[j] {
			w := p.n * math.Exp(s.ln[j]-s.ln[s.lead[p.law]])
			for _, q := range s.links[j] {
				a[place[p.law]][place[q.law]] += w * q.n
			}
		}
	}
	eliminateDown(a, x)
	for i, k := range order {
		s.step[s.lead[k]] = x[i]
	}
	for j := range s.ln {
		if len(s.links[j]) > 0 {
			s.step[j] = 0
			for _, p := range s.links[j] {
				s.step[j] += p.n * s.step[s.lead[p.law]]
			}
		}
	}
}

// eliminateDown solves a·x = x in place. Row scaling apart, a is the unit matrix
// plus a positive one: it needs no pivoting, and every pivot is 1 or more.
func eliminateDown(a [][]float64, x []float64) {
	m := len(a)
	for k := range m {
		for i := k + 1; i < m; i++ {
			if a[i][k] == 0 {
				continue
			}
			f := a[i][k] / a[k][k]
			for j := k; j < m; j++ {
				a[i][j] -= f * a[k][j]
			}
			x[i] -= f * x[k]
		}
	}
	for k := m - 1; k >= 0; k-- {
		for j := k + 1; j < m; j++ {
			x[k] -= a[k][j] * x[j]
		}
		x[k] /= a[k][k]
	}
}

// length returns the part of the Newton step to take: the whole, or less where
// the whole would not descend. With d the step of ln c, the change of the convex
// function sought is exactly Σ c (e^(t·d) − 1 − t·d − t·d²), a sum without
// cancellation between species; at t·d ≤ 1 every term descends by itself.
func (s *search) length() float64 {
	up, size := 0.0, 0.0
	for _, d := range s.step {
		up, size = max(up, d), max(size, math.Abs(d))
	}
	safe := 1.0
	if up > 1 {
		safe = 1 / up
	}
	t := 1.0
	if size > 600 {
		t = max(600/size, safe)
	}
	for ; t > safe; t /= 2 {
		change, slope := 0.0, 0.0
		for i, d := range s.step {
			c := math.Exp(s.ln[i])
			rise := t * d
			if rise > 1 {
				change += math.Exp(s.ln[i]+rise) - c*(1+rise+rise*d)
			} else {
				change += c * (math.Expm1(rise) - rise - rise*d)
			}
			slope += c * d * d
		}
		if change <= -0.05*t*slope {
			return t
		}
	}
	return min(t, safe)
}
