package stiff

import (
	"context"
	"math"
)

// runMulti integrates from tau on with the multistep formulas. It ends at the
// end of the piece (done), with an error, or where step after step fails. Then it
// returns the time reached and a step for the Rosenbrock method to go on with.
func (s *Solver) runMulti(ctx context.Context, tau, span, to, h float64, visit func(*Step) error) (reached, next float64, done bool, err error) {
	e, m := &s.e, s.multi
	// The first step of order 1 instead of order 5.
	h = min(span, h*math.Pow(strict*e.rtol, 0.5)/math.Pow(e.rtol, 1/float64(e.method.estimate)))
	m.start(h)
	failures := 0
	for {
		if s.stats.Steps+s.stats.Rejected >= s.opt.MaxSteps {
			return tau, m.len, false, s.stuck(m.len, "step limit reached")
		}
		if s.stats.Steps&63 == 0 {
			if err := ctx.Err(); err != nil {
				return tau, m.len, false, err
			}
		}
		if s.opt.MaxStep > 0 && m.len > s.opt.MaxStep {
			m.stretch(s.opt.MaxStep)
		}
		final := false
		if left := span - tau; m.len >= left*(1-1e-10) {
			m.stretch(left)
			final = true
		}
		h := m.len
		if tau+h == tau || h < 1e-300 || failures > 20 {
			return tau, h, false, nil
		}
		m.predict()
		if c := h / formulas[m.order].alpha; c != m.at {
			if e.moving {
				e.ratesAt(tau, false)
			}
			if !e.factorise(s.sys, tau, c) {
				return tau, h, false, nil
			}
			m.at, m.rate = c, 0
		}
		if e.moving {
			e.ratesAt(tau+h, false)
		}
		ok := m.solve()
		if !ok {
			s.stats.Rejected++
			failures++
			if e.moving {
				e.ratesAt(tau, false)
			}
			if m.fresh {
				m.stretch(0.3 * h)
			} else {
				e.prepare(tau)
				m.fresh = true
			}
			m.at = 0
			continue
		}
		size := formulas[m.order].err * m.size(m.delta)
		if size <= 1 && !e.conserve(tau+h) {
			s.stats.Leaks++
			size = 32
		}
		if size <= 1 && s.negative() {
			s.stats.Negative++
			size = 32
		}
		if !(size <= 1) {
			s.stats.Rejected++
			failures++
			m.stretch(h * max(0.2, 0.85*math.Pow(size, -1/float64(m.order+1))))
			continue
		}
		failures = 0
		m.update()
		nextTau := tau + h
		if final {
			nextTau = span
		}
		m.end = nextTau
		s.step.set(e, tau, nextTau, to, final)
		s.step.multi = m
		s.stats.Steps++
		s.stats.Multistep++
		if visit != nil {
			if err := visit(&s.step); err != nil {
				return tau, h, false, err
			}
		}
		e.y, e.next = e.next, e.y
		tau = nextTau
		s.t = s.step.T1
		if final {
			return tau, h, true, nil
		}
		if m.equal > m.order {
			old := m.order
			f := m.adapt(size)
			if s.opt.MaxStep > 0 {
				f = min(f, s.opt.MaxStep/h)
			}
			if f >= grow || f < 0.9 {
				m.stretch(f * h)
			} else if m.order != old {
				m.equal = 0
			}
		}
	}
}
