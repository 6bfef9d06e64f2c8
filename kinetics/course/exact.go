package course

import (
	"math"

	"saddlebook/kinetics/firstorder"
)

// most is the largest first-order network that is solved exactly: beyond it the
// integrator is quicker.
const most = 30

// An exact is the solution of a stretch at constant temperature in which every
// step and removal is of first order.
type exact struct {
	full, limit *firstorder.Chain // limit is nil without a twin
	from        float64
	start, feed []float64
	width       int
	fed         bool
	y           []float64 // scratch
}

func (x *exact) At(t float64, out []float64) {
	w := x.width
	x.one(x.full, x.start[:w], t, out[:w])
	if x.limit != nil {
		x.one(x.limit, x.start[w:], t, out[w:])
	}
}

func (x *exact) one(c *firstorder.Chain, start []float64, t float64, out []float64) {
	t = math.Max(0, t-x.from)
	if x.fed {
		c.Fed(start, x.feed, t, out)
	} else {
		c.At(start, t, out)
	}
}

// exactly returns the exact solution of a stretch, nil if there is none, and the
// largest rate constant.
func (w *walk) exactly(s *stretch) (*exact, float64) {
	p := w.p
	if p.notFirst != "" || s.net == nil {
		return nil, 0
	}
	x := &exact{from: s.from, start: append([]float64(nil), w.y...), feed: make([]float64, p.width), width: p.width, fed: s.fed, y: make([]float64, len(w.y))}
	copy(x.feed, s.feed)
	fastest := 0.0
	var full, limit []firstorder.Exchange
	for i := range s.net.Reactions {
		r := &s.net.Reactions[i]
		if !p.happens[2*i] && !p.happens[2*i+1] {
			continue
		}
		a, b := r.LnForward+math.Log(s.rates.share[2*i]), r.LnBack+math.Log(s.rates.share[2*i+1])
		fastest = math.Max(fastest, math.Exp(math.Max(a, b)))
		only := func(happens []bool) firstorder.Exchange {
			e := firstorder.Exchange{From: p.moving(r.From)[0].Species, To: p.moving(r.To)[0].Species, LnForward: math.Inf(-1), LnBack: math.Inf(-1)}
			if happens[2*i] {
				e.LnForward = a
			}
			if happens[2*i+1] {
				e.LnBack = b
			}
			return e
		}
		full, limit = append(full, only(p.happens)), append(limit, only(p.limit))
	}
	for i, v := range p.sinks {
		if k := s.rates.sinks[i]; k > 0 {
			e := firstorder.Exchange{From: p.run.Removals[v].Species, To: p.n + i, LnForward: math.Log(k), LnBack: math.Inf(-1)}
			full, limit = append(full, e), append(limit, e)
			fastest = math.Max(fastest, k)
		}
	}
	var err error
	if x.full, err = firstorder.New(p.width, full); err != nil {
		return nil, 0
	}
	if p.twin {
		if x.limit, err = firstorder.New(p.width, limit); err != nil {
			return nil, 0
		}
	}
	return x, fastest
}

// solve passes through a stretch on its exact solution. Looks are four to an
// octave of time from well before the fastest step, at times that are short
// sums of powers of two: those cost least.
func (w *walk) solve(s *stretch, x *exact, fastest float64) (ended int, t float64, err error) {
	w.exact++
	span := s.to - s.from
	_, e := math.Frexp(math.Min(span, 1/math.Max(fastest, 1e-300)))
	first := e - 8
	a := s.from
	y := make([]float64, len(w.y))
	for k := 0; a < s.to; k++ {
		if k&63 == 0 {
			if err := w.ctx.Err(); err != nil {
				return 0, 0, err
			}
		}
		b := s.from + math.Ldexp(float64(4+k%4), first+k/4)
		if b <= a {
			continue
		}
		b = math.Min(b, s.to)
		x.At(b, y)
		if i, root := w.ends(x, a, b, y); i >= 0 {
			w.pass(x, a, root)
			x.At(root, w.y)
			x.Slope(root, w.slope)
			return i, root, nil
		}
		w.pass(x, a, b)
		a = b
	}
	x.At(s.to, w.y)
	x.Slope(s.to, w.slope)
	return -1, s.to, nil
}

// ends returns the first end that is reached between a and b, where the state is
// y, and when; -1 if none is.
func (w *walk) ends(x *exact, a, b float64, y []float64) (int, float64) {
	first, when := -1, math.Inf(1)
	var z []float64
	for i := range w.p.run.Until {
		now := sign(w.until(i, b, y))
		before := w.sides[i]
		if now == 0 || before == 0 || now == before {
			if before == 0 {
				w.sides[i] = now
			}
			continue
		}
		if z == nil {
			z = make([]float64, len(y))
		}
		lo, hi := a, b
		for range 100 {
			mid := lo + (hi-lo)/2
			if mid <= lo || mid >= hi {
				break
			}
			x.At(mid, z)
			if sign(w.until(i, mid, z)) == before {
				lo = mid
			} else {
				hi = mid
			}
		}
		if hi < when {
			first, when = i, hi
		}
	}
	return first, when
}
