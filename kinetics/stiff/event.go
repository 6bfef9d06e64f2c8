package stiff

import "math"

// looks is the number of parts in which a step is searched for events; two
// crossings within one part cancel and are not seen.
const looks = 4

// events looks for the first event in the step just taken. If there is one it
// takes the step again so that it ends there, and returns its number and the
// new length; otherwise -1 and the old length.
func (s *Solver) events(p *Problem, st *Step, tau, h float64) (int, float64, error) {
	y := s.outY
	first, when := -1, math.Inf(1)
	for i := range p.Events {
		ev := &p.Events[i]
		side := s.sides[i]
		if side == 0 {
			st.At(st.T0, y)
			side = sign(ev.G(st.T0, y))
			s.sides[i] = side
		}
		lo := st.T0
		for j := 1; j <= looks; j++ {
			hi := st.T0 + (st.T1-st.T0)*float64(j)/looks
			if j == looks {
				hi = st.T1
			}
			st.At(hi, y)
			now := sign(ev.G(hi, y))
			if side != 0 && now != side && (ev.Side == 0 || int8(ev.Side) == -side) {
				if t := bisect(ev.G, st, y, lo, hi, side); t < when {
					first, when = i, t
				}
				break
			}
			if now != 0 {
				side = now
			}
			lo = hi
		}
	}
	if first < 0 {
		for i := range p.Events {
			st.At(st.T1, y)
			if g := sign(p.Events[i].G(st.T1, y)); g != 0 {
				s.sides[i] = g
			}
		}
		return -1, h, nil
	}
	g := p.Events[first].G
	// The slope of G along the dense output, then Newton on steps that end at
	// the event: each is a full step of the method.
	e := &s.e
	base := st.origin + tau
	length := when - base
	eps := 1e-4 * h
	a, b := max(st.T0, when-eps), min(st.T1, when+eps)
	st.At(a, y)
	ga := g(a, y)
	st.At(b, y)
	slope := (g(b, y) - ga) / (b - a)
	for range 8 {
		length = min(max(length, 1e-3*(when-base)), h)
		if !(length > 0) {
			break
		}
		if e.moving {
			e.ratesAt(tau, false)
		}
		if !e.factor(e.method.gamma * length) {
			return -1, h, s.stuck(length, "no factorisation at an event")
		}
		if math.IsInf(e.step(tau, length), 1) {
			return -1, h, s.stuck(length, "no finite step to an event")
		}
		e.conserve(tau + length)
		for i, q := range e.order.place {
			y[i] = e.next[q]
		}
		move := -g(base+length, y) / slope
		if !finite(move) || math.Abs(move) <= 4e-16*max(math.Abs(base+length), 0) || math.Abs(move) <= 1e-15*length {
			break
		}
		length += move
	}
	// The other events keep the side they have at the start of the new step's
	// end; this one has changed.
	for i := range p.Events {
		if i == first {
			s.sides[i] = -s.sides[i]
			continue
		}
		for j, q := range e.order.place {
			y[j] = e.next[q]
		}
		if v := sign(p.Events[i].G(base+length, y)); v != 0 && s.sides[i] == 0 {
			s.sides[i] = v
		}
	}
	return first, length, nil
}

func sign(x float64) int8 {
	switch {
	case x > 0:
		return 1
	case x < 0:
		return -1
	}
	return 0
}

// bisect narrows a change of sign on the dense output to neighbouring numbers.
func bisect(g func(float64, []float64) float64, st *Step, y []float64, lo, hi float64, side int8) float64 {
	for range 200 {
		mid := lo + (hi-lo)/2
		if mid <= lo || mid >= hi {
			break
		}
		st.At(mid, y)
		if sign(g(mid, y)) == side {
			lo = mid
		} else {
			hi = mid
		}
	}
	return hi
}
