package stiff

import "math"

// Limits of the step-size control.
const (
	safety   = 0.9
	shortest = 0.15 // of the step before
	longest  = 30.0
	smooth   = 1e-3 // error below which the last one alone decides
)

// firstStep takes a fraction of the shortest time in which some species would
// change by its own size and its rate by its own size, t with
// |J f| t^2 = |f| t + |y|: a species that starts at zero and grows in a straight
// line does not hold it back.
func (s *Solver) firstStep(span float64) float64 {
	if s.opt.FirstStep > 0 {
		return min(s.opt.FirstStep, span)
	}
	e := &s.e
	e.times(e.f0, e.acc)
	if e.moving {
		axpy(1, e.ft, e.acc)
	}
	least := span
	for i, f := range e.f0 {
		f, g, y := math.Abs(f), math.Abs(e.acc[i]), math.Abs(e.y[i])
		if f == 0 && y == 0 || g == 0 {
			continue
		}
		if t := (f + math.Sqrt(f*f+4*g*y)) / (2 * g); t < least {
			least = t
		}
	}
	return min(max(0.5*math.Pow(e.rtol, 1/float64(e.method.estimate))*least, 1e-250), span)
}

// times writes J x to out.
func (e *engine) times(x, out []float64) {
	for i := range out {
		sum := 0.0
		for p := e.sparse.rowAt[i]; p < e.sparse.rowAt[i+1]; p++ {
			sum += e.jac[p] * x[e.sparse.cols[p]]
		}
		out[i] = sum
	}
}

// negative reports whether the new state has a concentration below zero by
// more than its absolute tolerance and more than the roundoff of the largest.
// It keeps account of those it lets pass.
func (s *Solver) negative() bool {
	e := &s.e
	lowest, at, over := 0.0, 0, 0.0
	for i, y := range e.next[:e.n] {
		if y < 0 {
			if y < lowest {
				lowest, at = y, i
			}
			if y < -e.atol[i] {
				over = min(over, y)
			}
		}
	}
	if lowest == 0 {
		return false
	}
	big := 0.0
	for _, y := range e.next[:e.n] {
		big = max(big, y)
	}
	if over < -1e-15*big {
		return true
	}
	if lowest < s.stats.Lowest {
		s.stats.Lowest = lowest
		for i, p := range e.order.place {
			if int(p) == at {
				s.stats.LowestSpecies = i
			}
		}
	}
	return false
}

// stuck describes where the run stands.
func (s *Solver) stuck(h float64, why string) error {
	e := &s.e
	fastest, at := 0.0, -1
	for i := range e.n {
		rate := e.out[i]
		for c, ch := range s.sys.channels {
			for _, t := range ch.net {
				if int(e.order.place[t.Species]) == i {
					rate += math.Abs(t.Coef) * e.plain.partial(c, int32(i), e.y)
				}
			}
		}
		if rate > fastest {
			fastest, at = rate, i
		}
	}
	out := &StuckError{T: s.t, H: h, Steps: s.stats.Steps, Fastest: fastest, Species: -1, Reaction: -1, Why: why}
	if at < 0 {
		return out
	}
	for i, p := range e.order.place {
		if int(p) == at {
			out.Species = i
		}
	}
	most := 0.0
	for c, ch := range s.sys.channels {
		for _, t := range ch.net {
			if p := math.Abs(t.Coef) * e.plain.partial(c, int32(at), e.y); t.Species == out.Species && p > most {
				most, out.Reaction = p, ch.first
			}
		}
	}
	return out
}
