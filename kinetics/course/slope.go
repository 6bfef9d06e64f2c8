package course

import (
	"math"

	"saddlebook/kinetics/stiff"
)

// A dense is a part of the solution that can be asked for anywhere, and for its
// slope. Slopes are those of the solution found, not rates put together from
// concentrations: in a fast exchange those are small differences of large numbers.
type dense interface {
	At(t float64, out []float64)
	Slope(t float64, out []float64)
}

// A piece is a step of the integration, on which the solution is a polynomial
// of degree 4.
type piece struct {
	*stiff.Step
	five  [5][]float64 // the state at its ends and quarters
	known bool         // five is of this step
}

// take passes to a step.
func (s *piece) take(st *stiff.Step) { s.Step, s.known = st, false }

// At is that of the step, which in its middle and at its end may be known.
func (s *piece) At(t float64, out []float64) {
	switch {
	case s.known && t == s.T1:
		copy(out, s.five[4])
	case s.known && t == s.T0+(s.T1-s.T0)/2:
		copy(out, s.five[2])
	default:
		s.Step.At(t, out)
	}
}

// Slope differentiates the polynomial through five points of the step.
func (s *piece) Slope(t float64, out []float64) {
	h := (s.T1 - s.T0) / 4
	if !(h > 0) { // an end met as the step began: the slope is what it was
		return
	}
	if !s.known {
		for j := range s.five {
			at := s.T0 + h*float64(j)
			if j == 4 {
				at = s.T1
			}
			s.Step.At(at, s.five[j])
		}
		s.known = true
	}
	x := (t - s.T0) / h
	clear(out)
	for j := range 5 {
		weight := 0.0
		for k := range 5 {
			if k == j {
				continue
			}
			term := 1 / float64(j-k)
			for l := range 5 {
				if l != j && l != k {
					term *= (x - float64(l)) / float64(j-l)
				}
			}
			weight += term
		}
		for i, y := range s.five[j] {
			out[i] += weight / h * y
		}
	}
}

// Slope takes differences of order 4 over a thousandth of the time since the
// stretch began.
func (x *exact) Slope(t float64, out []float64) {
	h := 1e-3 * (t - x.from)
	if !(h > 0) {
		return
	}
	clear(out)
	for _, p := range [4][2]float64{{-2, 1.0 / 12}, {-1, -2.0 / 3}, {1, 2.0 / 3}, {2, -1.0 / 12}} {
		x.At(t+p[0]*h, x.y)
		for i, y := range x.y {
			out[i] += p[1] / h * y
		}
	}
}

// still is the state at an instant at which something jumps.
type still struct {
	w *walk
	s *stretch // what follows
}

func (s still) At(_ float64, out []float64) { copy(out, s.w.y) }

// Slope puts the rates of the steps together from the concentrations. What is
// removed moves to its sink, which makes no difference to what the steps make.
func (s still) Slope(t float64, out []float64) {
	p := s.w.p
	s.w.fix(s.s)
	k := make([]float64, 2*p.steps+len(p.sinks))
	s.s.rates.At(0, t, k, nil)
	clear(out)
	for i := range p.net.Reactions {
		r := &p.net.Reactions[i]
		forward, back := k[2*i], k[2*i+1]
		for _, a := range p.moving(r.From) {
			forward *= math.Pow(s.w.y[a.Species], float64(a.N))
		}
		for _, a := range p.moving(r.To) {
			back *= math.Pow(s.w.y[a.Species], float64(a.N))
		}
		if !r.Returns {
			back = 0
		}
		for _, a := range r.From {
			out[a.Species] -= float64(a.N) * (forward - back)
		}
		for _, a := range r.To {
			out[a.Species] += float64(a.N) * (forward - back)
		}
	}
	for sp, f := range s.s.feed {
		out[sp] += f
	}
}
