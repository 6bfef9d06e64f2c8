package firstorder

import (
	"fmt"
	"math"
)

// At writes to out the amounts at the time t (s, 0 or more; +Inf for the rest) of
// what is start at time 0, one number a state. out may be start. It allocates
// nothing, and panics if a length is not that of the network or t is below zero or
// NaN.
//
// An amount below zero at the start is carried along, by linearity; then only the
// error against the largest amount is small.
func (c *Chain) At(start []float64, t float64, out []float64) {
	c.check(start, t, out)
	copy(out, start)
	for i := range c.parts {
		p := &c.parts[i]
		v, total := c.take(p, c.a, start)
		p.put(c.run(p, v, t), total, out)
	}
}

// Rest writes to out what start becomes in the end, as At does for t = +Inf.
func (c *Chain) Rest(start, out []float64) { c.At(start, math.Inf(1), out) }

// Fed is At with something fed at constant rates, one a state, per second. t must
// be finite, and out neither start nor feed. With a start of nothing and amounts
// in the place of the feed it gives their integral over time; that times a rate
// constant is what has gone through a step in one direction.
func (c *Chain) Fed(start, feed []float64, t float64, out []float64) {
	c.check(start, t, out)
	if len(feed) != c.n || math.IsInf(t, 0) {
		panic(fmt.Sprintf("firstorder: %d feeds of %d states for a time of %g s", len(feed), c.n, t))
	}
	for i, x := range start {
		out[i] = x + feed[i]*t // of what is not connected with anything
	}
	for i := range c.parts {
		p := &c.parts[i]
		v, total := c.take(p, c.a, start)
		f, more := c.take(p, c.f, feed)
		if more == 0 {
			p.put(c.run(p, v, t), total, out)
			continue
		}
		p.put(c.runFed(p, v, f, more, t), total+more*t, out)
	}
}

func (c *Chain) check(start []float64, t float64, out []float64) {
	if len(start) != c.n || len(out) != c.n {
		panic(fmt.Sprintf("firstorder: %d and %d amounts of %d states", len(start), len(out), c.n))
	}
	if !(t >= 0) {
		panic(fmt.Sprintf("firstorder: a time of %g s", t))
	}
}

// take copies the amounts of a part to a vector, with their sum.
func (c *Chain) take(p *part, to, all []float64) (v []float64, total float64) {
	v = to[:len(p.states)]
	for i, s := range p.states {
		v[i] = all[s]
		total += v[i]
	}
	return v, total
}

// put brings the amounts of a part to the sum they must have, which they miss by
// rounding only, and writes them to out.
func (p *part) put(v []float64, total float64, out []float64) {
	if f := correction(v, total); f != 1 {
		for i := range v {
			v[i] *= f
		}
	}
	for i, s := range p.states {
		out[s] = v[i]
	}
}

// correction is the factor that brings the sum of v to total; 1 if v is not all
// one sign, where a factor mends nothing.
func correction(v []float64, total float64) float64 {
	sum := 0.0
	for _, x := range v {
		if x < 0 {
			return 1
		}
		sum += x
	}
	if !(sum > 0) || !(total > 0) || math.IsInf(total/sum, 0) {
		return 1
	}
	return total / sum
}

// run carries v over the time t and returns where the result stands.
func (c *Chain) run(p *part, v []float64, t float64) []float64 {
	w := c.b[:len(v)]
	switch {
	case math.IsInf(t, 1):
		return turn(v, p.rest, w)
	case p.out == 0:
		return v
	case t >= math.Ldexp(1, p.first+len(p.times)):
		return turn(v, p.late, w)
	}
	digits, low := split(t, p.first)
	if low > 0 {
		p.series(v, nil, low, c.c, c.d)
	}
	for k := digits.from; digits.m>>(k-digits.from) != 0; k++ {
		if digits.m>>(k-digits.from)&1 == 1 {
			v, w = turn(v, p.times[k-p.first], w), v
		}
	}
	return v
}

// runFed is run with the feed f, of the sum rate.
func (c *Chain) runFed(p *part, v, f []float64, rate, t float64) []float64 {
	w := c.b[:len(v)]
	if p.out == 0 {
		for i := range v {
			v[i] += f[i] * t
		}
		return v
	}
	digits, low := split(t, p.first)
	if low > 0 {
		p.series(v, f, low, c.c, c.d)
	}
	if digits.m == 0 {
		return v
	}
	// g is what a feed over 2^k leaves behind.
	g := c.e[:len(v)]
	clear(g)
	p.series(g, f, math.Ldexp(1, p.first), c.c, c.d)
	for k := p.first; ; k++ {
		m := p.late
		if k-p.first < len(p.times) {
			m = p.times[k-p.first]
		}
		if k >= digits.from {
			bit := k - digits.from
			if digits.m>>bit == 0 {
				return v
			}
			if digits.m>>bit&1 == 1 {
				v, w = turn(v, m, w), v
				for i, x := range g {
					v[i] += x
				}
			}
		}
		h := turn(g, m, w)
		for i, x := range h {
			g[i] += x
		}
		if s := correction(g, math.Ldexp(rate, k+1)); s != 1 {
			for i := range g {
				g[i] *= s
			}
		}
	}
}

// turn writes v·m to w.
func turn(v, m, w []float64) []float64 {
	clear(w)
	times(v, m, w)
	return w
}

// binary is m·2^from.
type binary struct {
	m    uint64
	from int
}

// split writes t as a whole number of 2^first, and what is left below, exactly.
func split(t float64, first int) (digits binary, low float64) {
	frac, e := math.Frexp(t)
	m := uint64(math.Ldexp(frac, 53))
	e -= 53
	if e >= first || m == 0 {
		return binary{m, e}, 0
	}
	if first-e >= 64 {
		return binary{0, first}, t
	}
	below := m & (1<<(first-e) - 1)
	return binary{m >> (first - e), first}, math.Ldexp(float64(below), e)
}
