package course

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"saddlebook/kinetics"
	"saddlebook/kinetics/stiff"
)

// Bounds on what is called a number.
const (
	// apart is how far x at equilibrium and x of the kinetic limit must lie
	// apart for control to have a meaning.
	apart = 0.02
	// formed is how many times the absolute tolerance two products must sum to
	// before their share means anything: it is then right to 1e-6.
	formed = 1e6
)

// charged returns what was put in of a species up to t.
func (w *walk) charged(s int, t float64) float64 {
	return w.in[s] + w.at.feed[s]*(t-w.since)
}

// sum returns the amount of a product; what rounding left below zero is none.
func (w *walk) sum(product int, y []float64) float64 {
	sum := 0.0
	for _, s := range w.p.run.Products[product].Members {
		sum += y[s]
	}
	return max(0, sum)
}

// share returns a/(a+b), NaN where neither has formed.
func (w *walk) share(a, b float64) float64 {
	if !(a+b > formed*w.p.atol) {
		return math.NaN()
	}
	return a / (a + b)
}

// until is zero where the end is reached.
func (w *walk) until(i int, t float64, y []float64) float64 {
	u := &w.p.run.Until[i]
	switch u.Of {
	case Conversion:
		b := w.p.run.Basis
		return (1-u.Value)*w.charged(b, t) - y[b]
	case Amount:
		return y[u.Index] - u.Value
	case Yield:
		return w.perBasis(u.Index)*w.sum(u.Index, y) - u.Value*w.charged(w.p.run.Basis, t)
	}
	q := w.p.pairs[u.Index]
	a, b := w.sum(q[0], y), w.sum(q[1], y)
	if !(a+b > formed*w.p.atol) {
		return 0
	}
	return a - u.Value*b
}

func (w *walk) perBasis(product int) float64 {
	if w.p.run.PerBasis == nil {
		return 1
	}
	return w.p.run.PerBasis[product]
}

// met tells which end was crossed, between what was last seen and t.
func (w *walk) met(t float64) int {
	first := -1
	for i := range w.sides {
		g := w.until(i, t, w.y)
		side := 0
		switch {
		case g > 0:
			side = 1
		case g < 0:
			side = -1
		}
		if w.sides[i] != 0 && side != w.sides[i] && first < 0 {
			first = i
		}
		if side != 0 {
			w.sides[i] = side
		}
	}
	return first
}

// jump does what happens at an instant, and reports whether anything does.
func (w *walk) jump(t float64) bool {
	p := w.p
	any := false
	for _, d := range p.run.Doses {
		if d.Lasts == 0 && d.From == t {
			w.in[d.Species] += d.Amount
			w.y[d.Species] += d.Amount
			if p.twin {
				w.y[p.width+d.Species] += d.Amount
			}
			any = true
		}
	}
	for _, v := range p.run.Removals {
		if v.K == 0 && v.From == t {
			w.gone[v.Species] += (1 - v.Leaves) * w.y[v.Species]
			w.y[v.Species] *= v.Leaves
			if p.twin {
				w.y[p.width+v.Species] *= v.Leaves
			}
			any = true
		}
	}
	if any {
		w.rest, w.restAt = nil, math.NaN()
	}
	return any
}

// point measures the state y at time t.
func (w *walk) point(t float64, y, slope []float64) Point {
	p := w.p
	pt := Point{T: t, Kelvin: w.at.leg.kelvin(t), C: make([]float64, p.n),
		Made: make([]float64, p.n), Making: make([]float64, p.n), Conversion: math.NaN(),
		Yields: make([]float64, len(p.run.Products)), Shares: make([]float64, len(p.run.Products)),
		Control: make([]float64, len(p.pairs)), Kinetic: make([]float64, len(p.pairs)), Rest: make([]float64, len(p.pairs))}
	in := pt.Made
	for s := range in {
		in[s] = w.charged(s, t)
	}
	if deviation(p.laws, y[:p.width], in, w.gone) > 1e-14 {
		y = slices.Clone(y)
		restore(p.laws, y[:p.width], in, w.gone)
	}
	w.c.Balance = math.Max(w.c.Balance, deviation(p.laws, y[:p.width], in, w.gone))
	copy(pt.C, y)
	for s := range pt.Made {
		pt.Made[s] = y[s] + w.gone[s] - in[s]
		pt.Making[s] = slope[s] - w.at.feed[s]
	}
	for i, v := range p.sinks {
		s := p.run.Removals[v].Species
		pt.Made[s] += y[p.n+i]
		pt.Making[s] += slope[p.n+i]
	}
	basis := 0.0
	if p.run.Basis >= 0 {
		if basis = w.charged(p.run.Basis, t); basis > 0 {
			pt.Conversion = 1 - y[p.run.Basis]/basis
		}
	}
	total := 0.0
	for i := range pt.Yields {
		a := w.sum(i, y)
		total += a
		pt.Shares[i] = a
		pt.Yields[i] = math.NaN()
		if basis > 0 {
			pt.Yields[i] = w.perBasis(i) * a / basis
		}
	}
	for i := range pt.Shares {
		if !(total > formed*p.atol) {
			pt.Shares[i] = math.NaN()
		} else {
			pt.Shares[i] /= total
		}
	}
	for i := range p.pairs {
		s := w.control(i, t, y)
		pt.Control[i], pt.Kinetic[i], pt.Rest[i] = s.control, s.kinetic, s.rest
	}
	return pt
}

// note takes the state for drawing.
func (w *walk) note(t float64) {
	if w.p.run.Trace > 0 {
		w.c.Trace = append(w.c.Trace, w.point(t, w.y, w.slope))
	}
}

// pass looks at the solution from a to b.
func (w *walk) pass(d dense, a, b float64) {
	at := func(t float64) Point {
		slope := w.between
		d.At(t, w.look)
		d.Slope(t, slope)
		return w.point(t, w.look, slope)
	}
	for ; w.nextReport < len(w.report) && w.report[w.nextReport] < b; w.nextReport++ {
		w.c.Report = append(w.c.Report, at(w.report[w.nextReport]))
	}
	for ; w.nextTrace < len(w.trace) && w.trace[w.nextTrace] < b; w.nextTrace++ {
		if t := w.trace[w.nextTrace]; t > a {
			w.c.Trace = append(w.c.Trace, at(t))
		}
	}
	w.climb(d, a, b)
	if len(w.p.pairs) > 0 {
		w.search(d, a, b)
	}
}

// arrive takes the results wanted at the very time t.
func (w *walk) arrive(t float64) {
	for w.nextReport < len(w.report) && w.report[w.nextReport] <= t {
		w.c.Report = append(w.c.Report, w.point(w.report[w.nextReport], w.y, w.slope))
		w.nextReport++
	}
}

// finish closes the course at t.
func (w *walk) finish(t float64) {
	w.c.End = t
	for _, h := range w.high {
		if w.p.run.Peaks {
			w.c.Peaks = append(w.c.Peaks, h.best)
			if h.point != nil && h.best.T < t {
				w.c.Trace = append(w.c.Trace, *h.point)
			}
		}
	}
	w.c.Report = append(w.c.Report, w.point(t, w.y, w.slope))
	for i := range w.watch {
		h, q := &w.watch[i], &w.c.Pairs[i]
		for k, c := range []*crossing{&h.half, &h.even} {
			if !c.found {
				continue
			}
			if k == 0 {
				q.Changeover, q.ChangeoverKelvin = c.at.T, c.at.Kelvin
			} else {
				q.Even, q.EvenKelvin = c.at.T, c.at.Kelvin
			}
			if w.p.run.Trace > 0 {
				w.c.Trace = append(w.c.Trace, c.at)
			}
		}
		q.Coincide = h.close && !h.wide
	}
	sortPoints(w.c.Trace)
	w.words()
}

// A stuckError is a stiff.StuckError in words of the mechanism.
type stuckError struct {
	text string
	err  error
}

func (e *stuckError) Error() string { return e.text }
func (e *stuckError) Unwrap() error { return e.err }

// stuck words an error of the integration.
func (w *walk) stuck(err error) error {
	if d, ok := w.at.rates.law.(*direct); ok && d.err != nil {
		return d.err
	}
	var s *stiff.StuckError
	if !errors.As(err, &s) {
		return err
	}
	fast, remedy := "", "check the rate constants of the mechanism"
	if i := s.Species % w.p.width; s.Species >= 0 && i < w.p.n {
		fast = fmt.Sprintf("; fastest is what uses up %s, at %.2g 1/s", w.p.names[i], s.Fastest)
		remedy = fmt.Sprintf("check the rate constants of %s, or make one species of it and what it exchanges with", w.p.names[i])
	}
	return &stuckError{fmt.Sprintf("the time course could not go on at %.6g s and %.2f K, after %d steps: %s%s; %s",
		s.T, w.at.leg.kelvin(s.T), s.Steps, s.Why, fast, remedy), err}
}

// network returns the network at time t of the stretch.
func (w *walk) network(t float64) (*kinetics.Network, error) {
	if w.at.net != nil {
		return w.at.net, nil
	}
	return w.m.At(w.at.leg.kelvin(t))
}
