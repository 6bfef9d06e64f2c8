package kinetics

import (
	"math"
	"slices"

	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/spread"
	"saddlebook/kinetics/thermo"
)

// Term is one species of one side of a reaction, N times.
type Term struct{ Species, N int }

// Species is a minimum of the energy: reactant, intermediate, product.
type Species struct {
	Name, Label, Source string
	Energy              thermo.Energy
	Forms               int           // 0 or 1: one form; n: G − RT ln n
	Standard            rate.Standard // of Energy
	SD                  *float64      // J/mol, its own error; nil: taken as exact
	SDEntropy           *float64      // J/mol/K, own error of the entropy that Energy is given by; nil: taken as exact
	Formula             string        // as ParseFormula reads it; "": not given
}

// Step is one elementary step over one transition state.
type Step struct {
	Name, Label, Source string
	From, To            []Term
	Returns             bool          // reversible; a step that does not return has no rate back
	Energy              thermo.Energy // of the transition state, or above the reactants if Above
	// Above makes Energy a barrier above the sum of the reactants as they stand,
	// forms included. It is a difference and not on the scale of the species: it
	// may stay constant where they follow temperature (Held then says so).
	Above                    bool
	Degeneracy, Transmission float64       // both directions; 0 reads as 1
	Standard                 rate.Standard // of Energy; for a barrier, of all states in it
	SD                       *float64      // J/mol, its own error; nil: taken as exact
	SDEntropy                *float64      // J/mol/K, own error of the entropy that Energy is given by; nil: taken as exact
}

// Common is an error that states have in common, fully correlated. States are
// numbered species first, then steps.
type Common struct {
	States []int
	SD     float64 // J/mol
}

// Mechanism is species and steps under one name. It encodes to JSON and back
// without loss.
type Mechanism struct {
	ID, Title, Method string
	Temperature       float64 // K, at which constant energies hold
	Species           []Species
	Steps             []Step
	Common            []Common
	SharingStated     bool // the author said which errors are shared, if only that none are

	// RaiseLow makes At raise a transition state that lies below a side to that
	// side and mark it, instead of refusing. Only samples of the errors do that:
	// Shifted sets it.
	RaiseLow bool `json:"-"`
}

// States returns the names of all states: species, then steps.
func (m *Mechanism) States() []string {
	names := make([]string, 0, len(m.Species)+len(m.Steps))
	for _, s := range m.Species {
		names = append(names, s.Name)
	}
	for _, s := range m.Steps {
		names = append(names, s.Name)
	}
	return names
}

// Index returns the number of the species of that name, or -1.
func (m *Mechanism) Index(species string) int {
	for i, s := range m.Species {
		if s.Name == species {
			return i
		}
	}
	return -1
}

// Shifted returns the mechanism with d[i] (J/mol) added to the energy of state
// i, species first, then steps; for a barrier above the reactants, to the
// barrier. The new mechanism raises transition states that come to lie below a
// side (see RaiseLow). The length of d is the number of states, or that of a
// plan of Plans, which goes on with the shifts (J/mol/K) of the entropies that
// have an error of their own.
func (m *Mechanism) Shifted(d []float64) *Mechanism {
	states := len(m.Species) + len(m.Steps)
	entropies := m.uncertainEntropies()
	if len(d) != states && len(d) != states+len(entropies) {
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
		c.Steps[i].Energy = c.Steps[i].Energy.Plus(d[len(c.Species)+i])
	}
	for k, ds := range d[states:] {
		if i := entropies[k]; i < len(c.Species) {
			c.Species[i].Energy = c.Species[i].Energy.PlusEntropy(ds)
		} else {
			c.Steps[i-len(c.Species)].Energy = c.Steps[i-len(c.Species)].Energy.PlusEntropy(ds)
		}
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
// out: as many as the conservation laws leave free to choose, and no more.
func (m *Mechanism) ExactStates() []string {
	p := m.stated()
	entropies := m.uncertainEntropies()
	free := m.freeZeros()
	var names []string
	for i, name := range m.States() {
		if p.SD(i) == 0 && !slices.Contains(entropies, i) && !free[i] {
			names = append(names, name)
		}
	}
	return names
}

// setsZero tells whether a species stands at 0 at all temperatures.
func (m *Mechanism) setsZero(species int) bool {
	e := m.Species[species].Energy
	T := m.Temperature
	return e.At(T) == 0 && e.At(T+math.Max(1, T/2)) == 0
}

// Plans returns the plans by which the errors of m are sampled. There is none
// if nothing has an error. There is one, as stated, if the author states how
// errors are shared or if fewer than two transition states have an error. Else
// there are two, independent and strongly shared, because the answer differs
// several-fold between them.
func (m *Mechanism) Plans() []spread.Plan {
	if !m.HasErrors() {
		return nil
	}
	plan := m.stated()
	var uncertain []int
	for i := len(m.Species); i < len(m.Species)+len(m.Steps); i++ {
		if plan.Own[i] > 0 {
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
