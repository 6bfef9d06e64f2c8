package kinetics

import (
	"math"
	"slices"

	"saddlebook/kinetics/spread"
)

// Shifted returns the mechanism with d[i] (J/mol) added to the energy of state
// i, species first, then steps; for a barrier above the reactants, to the
// barrier; for a step with a law, to the free energy of activation of both
// directions, so that its rate constants are multiplied by exp(−d/RT). A species
// without an energy moves with the constants that give it. The new mechanism
// raises transition states that come to lie below a side (see RaiseLow). The
// length of d is the number of states, or that of a plan of Plans, which goes on
// with the shifts (J/mol/K) of the entropies that have an error of their own, and
// then those (J/mol) of the returns that have one.
func (m *Mechanism) Shifted(d []float64) *Mechanism {
	states := len(m.Species) + len(m.Steps)
	entropies, returns := m.uncertainEntropies(), m.uncertainReturns()
	if len(d) != states && len(d) != states+len(entropies)+len(returns) {
		panic("kinetics: Shifted: one shift for each state is needed")
	}
	c := *m
	c.RaiseLow = true
	c.Species = append([]Species(nil), m.Species...)
	c.Steps = append([]Step(nil), m.Steps...)
	for i := range c.Species {
		c.Species[i].Energy = c.Species[i].Energy.Plus(d[i])
	}
	for i := range c.Steps {
		s, shift := &c.Steps[i], d[len(c.Species)+i]
		if s.Law == nil {
			s.Energy = s.Energy.Plus(shift)
			continue
		}
		law := *s.Law
		law.Shift += shift
		s.Law = &law
	}
	if len(d) == states {
		return &c
	}
	for k, i := range entropies {
		ds := d[states+k]
		if i < len(c.Species) {
			c.Species[i].Energy = c.Species[i].Energy.PlusEntropy(ds)
		} else {
			c.Steps[i-len(c.Species)].Energy = c.Steps[i-len(c.Species)].Energy.PlusEntropy(ds)
		}
	}
	for k, i := range returns {
		c.Steps[i].shiftK += d[states+len(entropies)+k]
	}
	return &c
}

// uncertainEntropies returns the states whose entropy has an error of its own.
func (m *Mechanism) uncertainEntropies() []int {
	var out []int
	for i, s := range m.Species {
		if s.SDEntropy != nil {
			out = append(out, i)
		}
	}
	for i, s := range m.Steps {
		if s.SDEntropy != nil {
			out = append(out, len(m.Species)+i)
		}
	}
	return out
}

// uncertainReturns returns the steps whose K or k-back has an error of its own.
func (m *Mechanism) uncertainReturns() []int {
	var out []int
	for i, s := range m.Steps {
		if s.SDReturn != nil {
			out = append(out, i)
		}
	}
	return out
}

// ownErrors returns the own standard deviation of every state, 0 where there is none.
func (m *Mechanism) ownErrors() []float64 {
	sd := make([]float64, 0, len(m.Species)+len(m.Steps))
	for _, s := range m.Species {
		sd = append(sd, orZero(s.SD))
	}
	for _, s := range m.Steps {
		sd = append(sd, orZero(s.SD))
	}
	return sd
}

func orZero(x *float64) float64 {
	if x == nil {
		return 0
	}
	return *x
}

// stated returns the plan of errors just as the author gives them.
func (m *Mechanism) stated() spread.Plan {
	p := spread.Plan{Case: spread.Stated, Own: m.ownErrors()}
	for _, i := range m.uncertainEntropies() {
		if i < len(m.Species) {
			p.Own = append(p.Own, *m.Species[i].SDEntropy)
		} else {
			p.Own = append(p.Own, *m.Steps[i-len(m.Species)].SDEntropy)
		}
	}
	for _, i := range m.uncertainReturns() {
		s := &m.Steps[i]
		p.Own = append(p.Own, *s.SDReturn)
		state := len(m.Species) + i
		if sd := p.Own[state]; sd > 0 && s.Law != nil && s.Law.Back != nil {
			// k and k-back have errors of their own: what moves k alone moves K too.
			p.Own[state] = 0
			p.Common = append(p.Common, spread.Part{States: []int{state, len(p.Own) - 1}, SD: []float64{sd, sd}})
		}
	}
	for _, c := range m.Common {
		part := spread.Part{States: append([]int(nil), c.States...)}
		for range c.States {
			part.SD = append(part.SD, c.SD)
		}
		p.Common = append(p.Common, part)
	}
	return p
}

// HasErrors reports whether any state has an error, its own or a shared one.
func (m *Mechanism) HasErrors() bool {
	p := m.stated()
	for i := range p.Own {
		if p.SD(i) > 0 {
			return true
		}
	}
	return false
}

// ExactStates returns the names of the states taken as exact: those without any
// error, in order. Species at constant zero that only set the scale are left
// out: as many as the conservation laws leave free to choose, and no more. So
// are species without an energy.
func (m *Mechanism) ExactStates() []string {
	p := m.stated()
	entropies := m.uncertainEntropies()
	free := m.freeZeros()
	var names []string
	for i, name := range m.States() {
		switch {
		case p.SD(i) > 0, slices.Contains(entropies, i), free[i]:
		case i < len(m.Species) && m.Species[i].Unknown:
		case i >= len(m.Species) && orZero(m.Steps[i-len(m.Species)].SDReturn) > 0:
		default:
			names = append(names, name)
		}
	}
	return names
}

// setsZero tells whether a species stands at 0 at all temperatures.
func (m *Mechanism) setsZero(species int) bool {
	if m.Species[species].Unknown {
		return false
	}
	e := m.Species[species].Energy
	T := m.Temperature
	return e.At(T) == 0 && e.At(T+math.Max(1, T/2)) == 0
}

// Plans returns the plans by which the errors of m are sampled. There is none
// if nothing has an error. There is one, as stated, if the author states how
// errors are shared or if fewer than two transition states have an error. Else
// there are two, independent and strongly shared, because the answer differs
// several-fold between them. A rate constant with an error was measured, and
// stays independent of the others.
func (m *Mechanism) Plans() []spread.Plan {
	if !m.HasErrors() {
		return nil
	}
	plan := m.stated()
	var uncertain []int
	for i := len(m.Species); i < len(m.Species)+len(m.Steps); i++ {
		if plan.Own[i] > 0 && m.Steps[i-len(m.Species)].Law == nil {
			uncertain = append(uncertain, i)
		}
	}
	if m.SharingStated || len(uncertain) < 2 {
		return []spread.Plan{plan}
	}
	shared := spread.Strong(plan.Own, uncertain)
	shared.Common = append(shared.Common, plan.Common...)
	plan.Case = spread.Independent
	return []spread.Plan{plan, shared}
}
