package stiff

// jump applies the jumps at time t.
func (s *Solver) jump(p *Problem, t float64) error {
	e := &s.e
	for x, j := range p.Jumps {
		if j.T != t {
			continue
		}
		for i, c := range e.order.place {
			if j.Scale != nil {
				e.y[c] *= j.Scale[i]
				if e.sens != nil {
					for _, q := range e.sens.list {
						q.s[c] *= j.Scale[i]
					}
				}
			}
			if j.Add != nil && j.Add[i] != 0 {
				e.y[c] += j.Add[i]
				if e.y[c] < 0 && j.Add[i] < 0 {
					return bad("jump %d at %g s takes %g of species %d, more than the %g there; take away less, or use a Scale", x, t, -j.Add[i], i, e.y[c]-j.Add[i])
				}
			}
		}
	}
	return nil
}

// piece sets sources, losses and rate constants for the piece from s.t to to.
func (s *Solver) piece(p *Problem, to float64) error {
	e := &s.e
	mid := s.t + (to-s.t)/2
	e.origin = s.t
	e.sourced = false
	clear(e.feed)
	clear(e.out)
	clear(e.jac)
	if e.careful != nil {
		e.kept = e.careful
	}
	if e.kept != nil {
		clear(e.kept.jac)
	}
	e.careful, e.net = nil, e.plain
	for _, f := range p.Feeds {
		if f.From <= mid && mid < f.To {
			e.feed[e.order.place[f.Species]] += f.Rate
			e.sourced = true
		}
	}
	for _, r := range p.Removals {
		if r.From <= mid && mid < r.To {
			e.out[e.order.place[r.Species]] += r.K
			e.sourced = true
		}
	}
	e.piece = 0
	for _, c := range p.Rates.Corners() {
		if c <= mid {
			e.piece++
		}
	}
	e.moving = !p.Rates.Held(e.piece)
	e.ratesAt(0, false)
	for i, k := range e.k {
		if !finite(k) || k < 0 {
			return bad("rate constant %d is %g at %g s; give finite constants, not below zero", i, k, s.t)
		}
	}
	for i := range e.laws {
		e.laws[i].begin(e)
	}
	s.stats.Restarts++
	return nil
}
