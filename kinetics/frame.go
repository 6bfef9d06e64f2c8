package kinetics

import (
	"fmt"
	"math"

	"saddlebook/kinetics/rate"
)

// roundedK is by what factor equilibrium constants around a cycle may miss 1:
// the rounding of digits as they are written.
const roundedK = 1.05

// exactK is below any rounding of written digits, in ln K.
const exactK = 1e-9

// frame finds the free energies of species that have none of their own from
// equilibrium constants that steps state. Each such constant is one linear
// equation; species with an energy are known from the start.
type frame struct {
	unknown []bool
	pivots  []equation
}

// equation is a reduced equation: row·G = value, made of the steps that made
// says.
type equation struct {
	pivot int
	row   []float64
	value float64
	made  map[int]float64
}

// needsFrame tells whether energies and constants stated of steps have to be
// brought together.
func (m *Mechanism) needsFrame() bool {
	for i := range m.Species {
		if m.Species[i].Unknown {
			return true
		}
	}
	for i := range m.Steps {
		if m.Steps[i].statesK() {
			return true
		}
	}
	return false
}

// reduce takes the pivots out of an equation, and reports whether anything of
// the unknown species is left.
func (f *frame) reduce(e *equation) (left bool) {
	const zero = 1e-9 // of small whole numbers
	for _, p := range f.pivots {
		c := e.row[p.pivot]
		if math.Abs(c) < zero {
			continue
		}
		for k := range e.row {
			e.row[k] -= c * p.row[k]
		}
		e.row[p.pivot] = 0
		e.value -= c * p.value
		for s, x := range p.made {
			if e.made != nil {
				e.made[s] -= c * x
			}
		}
	}
	for k, x := range e.row {
		if f.unknown[k] && math.Abs(x) >= zero {
			return true
		}
	}
	return false
}

// joins reports whether the equations give the free energy of a change of
// composition, by species.
func (f *frame) joins(row []float64) bool {
	e := equation{row: append([]float64(nil), row...)}
	for k := range e.row {
		if !f.unknown[k] {
			e.row[k] = 0
		}
	}
	return !f.reduce(&e)
}

// add makes a pivot of a reduced equation: of its last unknown species, so that
// the species named first, the reagents, are those left free.
func (f *frame) add(e equation) {
	for k := len(e.row) - 1; k >= 0; k-- {
		if f.unknown[k] && math.Abs(e.row[k]) >= 1e-9 {
			e.pivot = k
			break
		}
	}
	c := e.row[e.pivot]
	for k := range e.row {
		e.row[k] /= c
	}
	e.value /= c
	for s := range e.made {
		e.made[s] /= c
	}
	for i := range f.pivots { // keep every pivot out of the others
		p := &f.pivots[i]
		c := p.row[e.pivot]
		if c == 0 {
			continue
		}
		for k := range p.row {
			p.row[k] -= c * e.row[k]
		}
		p.row[e.pivot] = 0
		p.value -= c * e.value
		for s, x := range e.made {
			p.made[s] -= c * x
		}
	}
	f.pivots = append(f.pivots, e)
}

// equationOf returns the equation of one step, the known species put in.
func (m *Mechanism) equationOf(n *Network, i int, value float64) equation {
	e := equation{row: make([]float64, len(n.G)), value: value}
	put := func(side []Term, sign float64) {
		for _, t := range side {
			if m.Species[t.Species].Unknown {
				e.row[t.Species] += sign * float64(t.N)
				e.value += sign * float64(t.N) * m.Species[t.Species].Energy.Offset
			} else {
				e.value -= sign * float64(t.N) * n.G[t.Species]
			}
		}
	}
	put(m.Steps[i].From, -1)
	put(m.Steps[i].To, 1)
	return e
}

// settle fills in the energies of the species that have none, as far as the
// stated constants determine them, and 0 for those left free. It returns the
// free energy of reaction of each step, NaN where nothing gives it.
func (m *Mechanism) settle(n *Network) (dG []float64, bad Complaints) {
	dG = make([]float64, len(m.Steps))
	if !m.needsFrame() {
		for i := range n.Known {
			n.Known[i] = true
		}
		for i := range dG {
			dG[i] = n.sum(m.Steps[i].To) - n.sum(m.Steps[i].From)
		}
		return dG, nil
	}
	own := make([]bool, len(m.Steps))
	f := &frame{unknown: make([]bool, len(m.Species))}
	for i, s := range m.Species {
		f.unknown[i] = s.Unknown
	}
	RT := rate.R * n.T
	for i := range m.Steps {
		s := &m.Steps[i]
		if !s.statesK() {
			continue
		}
		lnK := s.lnK(n.T)
		if math.IsNaN(lnK) || math.IsInf(lnK, 0) {
			bad = append(bad, Complaint{State: s.Name, Fatal: true, Msg: fmt.Sprintf("step %s has no equilibrium constant at %s", s.Name, temperatureText(n.T)), Fix: "check its rate constants, K and temperatures"})
			continue
		}
		e := m.equationOf(n, i, -RT*lnK)
		e.made = map[int]float64{i: 1}
		dG[i] = -RT*lnK + m.offsets(i)
		if f.reduce(&e) {
			f.add(e)
			own[i] = true
			continue
		}
		// All of this step is said already: its own constant has to agree.
		if miss := e.value / RT; math.Abs(miss) > math.Log(roundedK) && !m.RaiseLow {
			bad = append(bad, m.contradiction(n, i, e, miss))
		} else if math.Abs(miss) > exactK*(1+math.Abs(lnK)) && !m.RaiseLow {
			n.Warnings = append(n.Warnings, m.rounded(n, i, e, miss))
		}
	}
	for i := range n.G {
		n.Known[i] = !f.unknown[i]
	}
	for _, p := range f.pivots {
		n.G[p.pivot] = p.value // species left free are 0
		n.Known[p.pivot] = true
		for k, x := range p.row {
			if k != p.pivot && math.Abs(x) >= 1e-9 {
				n.Known[p.pivot] = false
			}
		}
	}
	for i := range m.Steps {
		e := m.equationOf(n, i, 0)
		switch {
		case own[i]:
		case f.reduce(&e):
			dG[i] = math.NaN()
		default:
			dG[i] = n.sum(m.Steps[i].To) - n.sum(m.Steps[i].From)
		}
	}
	n.frame = f
	return dG, bad
}

// offsets is by how much shifts of species without an energy move the free
// energy of reaction that a step states.
func (m *Mechanism) offsets(i int) float64 {
	sum := 0.0
	add := func(side []Term, sign float64) {
		for _, t := range side {
			if m.Species[t.Species].Unknown {
				sum += sign * float64(t.N) * m.Species[t.Species].Energy.Offset
			}
		}
	}
	add(m.Steps[i].From, -1)
	add(m.Steps[i].To, 1)
	return sum
}

// cycle words the steps around which constants do not agree, and the species
// whose energies they contradict.
func (m *Mechanism) cycle(i int, e equation) (steps, species []string) {
	net := make([]float64, len(m.Species))
	for k := range m.Steps {
		c := e.made[k]
		if math.Abs(c) < 1e-9 {
			continue
		}
		steps = append(steps, m.Steps[k].Name)
		for _, t := range m.Steps[k].From {
			net[t.Species] -= c * float64(t.N)
		}
		for _, t := range m.Steps[k].To {
			net[t.Species] += c * float64(t.N)
		}
	}
	for k, x := range net {
		if math.Abs(x) >= 1e-9 {
			species = append(species, m.Species[k].Name)
		}
	}
	return steps, species
}

func returnKey(s *Step) string {
	if s.K != nil {
		return "K"
	}
	return "k-back"
}

func (m *Mechanism) contradiction(n *Network, i int, e equation, miss float64) Complaint {
	s := &m.Steps[i]
	steps, species := m.cycle(i, e)
	by := fmt.Sprintf("by %s at %s, a factor of %.3g in K", energyText(math.Abs(miss)*rate.R*n.T), temperatureText(n.T), math.Exp(math.Abs(miss)))
	c := Complaint{State: s.Name, Key: returnKey(s), Fatal: true}
	switch {
	case len(species) == 0:
		c.Msg = fmt.Sprintf("the constants around the cycle of %s break detailed balance %s", listed(steps, "and"), by)
		c.Fix = fmt.Sprintf("correct one of them, or leave out %s of %s: it then follows from the others", c.Key, s.Name)
	case len(steps) == 1:
		c.Msg = fmt.Sprintf("the constants of step %s contradict the free energies of %s %s", s.Name, listed(species, "and"), by)
		c.Fix = fmt.Sprintf("correct one of them, or leave out %s: the return then follows from the free energies", c.Key)
	default:
		c.Msg = fmt.Sprintf("the constants of steps %s contradict the free energies of %s %s", listed(steps, "and"), listed(species, "and"), by)
		c.Fix = fmt.Sprintf("correct one of them, or leave out %s of %s: it then follows from the others", c.Key, s.Name)
	}
	return c
}

func (m *Mechanism) rounded(n *Network, i int, e equation, miss float64) Complaint {
	s := &m.Steps[i]
	steps, species := m.cycle(i, e)
	with := "the other steps of the cycle " + listed(steps, "and")
	if len(species) > 0 {
		with = "the free energies of " + listed(species, "and")
	}
	return Complaint{State: s.Name, Key: returnKey(s), Msg: fmt.Sprintf("%s of step %s misses what follows from %s by %.2g %% at %s: it is taken from those", returnKey(s), s.Name, with, 100*(math.Exp(math.Abs(miss))-1), temperatureText(n.T)),
		Fix: fmt.Sprintf("leave out %s, or write more digits", returnKey(s))}
}
