package course

import (
	"math"
	"sort"

	"saddlebook/kinetics"
)

// A split is where a pair stands between its limits.
type split struct {
	x, kinetic, rest float64
	control          float64 // NaN: no number
	side             float64 // sign of rest − kinetic, where control has a number
}

// control compares x = a/(a+b) of a pair with its limits.
func (w *walk) control(pair int, t float64, y []float64) split {
	p := w.p
	q := p.pairs[pair]
	s := split{x: w.share(w.sum(q[0], y), w.sum(q[1], y)), control: math.NaN(), rest: math.NaN()}
	s.kinetic = s.x
	if p.twin {
		limit := y[p.width:]
		s.kinetic = w.share(w.sum(q[0], limit), w.sum(q[1], limit))
	}
	if p.unreachable[pair] != "" {
		return s
	}
	s.rest = w.equilibrium(pair, t, y)
	gap := s.rest - s.kinetic
	if math.IsNaN(gap) {
		return s
	}
	h := &w.watch[pair]
	if math.Abs(gap) < apart {
		h.close = true
		return s
	}
	h.wide = true
	s.side = math.Copysign(1, gap)
	s.control = (s.x - s.kinetic) / gap
	return s
}

// equilibrium returns x of a pair at equilibrium over the reversible steps, at
// the temperature of t and from the composition y.
func (w *walk) equilibrium(pair int, t float64, y []float64) float64 {
	q := w.p.pairs[pair]
	if w.p.closed[pair] {
		h := &w.watch[pair]
		if w.at.net != nil && h.stretch == w.at {
			return h.rest
		}
		if w.at.net != nil {
			columns(w.at.net, w.p.members, w.ln)
		} else {
			w.at.rates.law.at(w.at.leg.kelvin(t), w.ln, nil)
		}
		at := w.ln[2*w.p.steps:]
		h.stretch, h.rest = w.at, 1/(1+math.Exp(lnSum(at, w.p.places[q[1]])-lnSum(at, w.p.places[q[0]])))
		return h.rest
	}
	c := w.composition(t, y)
	if c == nil {
		return math.NaN()
	}
	a, b := lnSum(c.LnC, w.p.run.Products[q[0]].Members), lnSum(c.LnC, w.p.run.Products[q[1]].Members)
	if math.IsInf(a, -1) && math.IsInf(b, -1) {
		return math.NaN()
	}
	return 1 / (1 + math.Exp(b-a))
}

// lnSum returns the logarithm of the sum of exponentials.
func lnSum(ln []float64, at []int) float64 {
	top := math.Inf(-1)
	for _, i := range at {
		top = math.Max(top, ln[i])
	}
	if math.IsInf(top, 0) {
		return top
	}
	sum := 0.0
	for _, i := range at {
		sum += math.Exp(ln[i] - top)
	}
	return top + math.Log(sum)
}

// composition returns the equilibrium from y, nil if it was not found. While
// nothing but reversible steps acts and the temperature is held, it stays as
// it is.
func (w *walk) composition(t float64, y []float64) *kinetics.Composition {
	still := w.at.net != nil && !w.p.oneWay && !w.at.fed && !w.at.taken
	if w.rest != nil && (still || t == w.restAt) {
		return w.rest
	}
	n, err := w.network(t)
	if err != nil {
		w.restFail = true
		return nil
	}
	c := make([]float64, w.p.n)
	for i := range c {
		c[i] = max(0, y[i])
	}
	e, err := n.Equilibrium(c)
	if err != nil {
		w.restFail = true
		return nil
	}
	w.rest, w.restAt = e, t
	return e
}

// A watch looks for the crossings of a pair.
type watch struct {
	half, even  crossing
	side        float64
	close, wide bool // limits that coincide, or do not, were met
	stretch     *stretch
	rest        float64 // at equilibrium in the stretch, where that is one number
}

// A crossing is the first zero of a function of time that changes sign for
// good: rounding about zero is none.
type crossing struct {
	last  float64 // value at the point before; 0: none
	sure  int     // sign when last beyond doubt
	maybe Point   // last change of sign
	hit   bool    // there is one since the sign was sure
	found bool
	at    Point
}

func sign(x float64) int {
	switch {
	case x > 0:
		return 1
	case x < 0:
		return -1
	}
	return 0
}

// search looks for crossings in the middle of a step and at its end.
func (w *walk) search(d dense, a, b float64) {
	mid := a + (b-a)/2
	lo := a
	for _, hi := range [2]float64{mid, b} {
		d.At(hi, w.look)
		w.see(d, lo, hi)
		lo = hi
	}
}

// see takes the state at hi, which is in look, after the one at lo.
func (w *walk) see(d dense, lo, hi float64) {
	doubt := math.Max(1e-6, 100*w.p.rtol)
	for i := range w.watch {
		h := &w.watch[i]
		if !h.half.found && w.p.unreachable[i] == "" {
			s := w.control(i, hi, w.look)
			g := s.control - 0.5
			if math.IsNaN(g) || s.side != h.side {
				h.half.last, h.half.sure, h.half.hit = 0, 0, false
			}
			h.side = s.side
			if !math.IsNaN(g) {
				w.follow(&h.half, d, lo, hi, g, doubt, func(t float64, y []float64) float64 { return w.control(i, t, y).control - 0.5 })
			}
		}
		if !h.even.found {
			q := w.p.pairs[i]
			g := w.share(w.sum(q[0], w.look), w.sum(q[1], w.look)) - 0.5
			if !math.IsNaN(g) {
				w.follow(&h.even, d, lo, hi, g, doubt, func(_ float64, y []float64) float64 {
					return w.share(w.sum(q[0], y), w.sum(q[1], y)) - 0.5
				})
			}
		}
	}
}

// follow takes the value g at hi.
func (w *walk) follow(c *crossing, d dense, lo, hi, g, doubt float64, f func(t float64, y []float64) float64) {
	if sign(c.last)*sign(g) < 0 {
		c.maybe, c.hit = w.root(d, lo, hi, sign(c.last), f), true
	}
	if g != 0 {
		c.last = g
	}
	if math.Abs(g) < doubt {
		return
	}
	if c.sure != 0 && sign(g) != c.sure && c.hit {
		c.found, c.at = true, c.maybe
		return
	}
	c.sure, c.hit = sign(g), false
}

// root narrows a change of sign to neighbouring times.
func (w *walk) root(d dense, lo, hi float64, before int, f func(t float64, y []float64) float64) Point {
	y := make([]float64, len(w.look))
	for range 100 {
		mid := lo + (hi-lo)/2
		if mid <= lo || mid >= hi {
			break
		}
		d.At(mid, y)
		if sign(f(mid, y)) == before {
			lo = mid
		} else {
			hi = mid
		}
	}
	d.At(hi, y)
	slope := make([]float64, len(y))
	d.Slope(hi, slope)
	return w.point(hi, y, slope)
}

func sortPoints(p []Point) {
	sort.SliceStable(p, func(i, j int) bool { return p[i].T < p[j].T })
}
