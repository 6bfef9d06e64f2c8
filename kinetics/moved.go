package kinetics

// Moved returns the mechanism with the free energy of one state, numbered as in
// States, d (J/mol) higher, and every other state where it stands at the
// temperature of n, the network of m there. Shifted moves what the author gave:
// a rate constant or a barrier then keeps its value, and its transition state
// goes along with the species that it starts from. Here transition states stay,
// whatever gives their rates.
func (m *Mechanism) Moved(n *Network, state int, d float64) *Mechanism {
	shifts := make([]float64, len(m.Species)+len(m.Steps))
	shifts[state] = d
	if state >= len(m.Species) {
		return m.Shifted(shifts)
	}
	for k := range n.Reactions {
		i := n.Reactions[k].Step
		s := &m.Steps[i]
		side := s.From
		if s.Law == nil && !s.Above {
			continue
		}
		if s.Law != nil && s.Law.Kind != Measured && s.Law.back(s, n.Reactions[k].DeltaG) {
			side = s.To
		}
		shifts[len(m.Species)+i] -= float64(count(side, state)) * d
	}
	c := m.Shifted(shifts)
	if m.Species[state].Unknown {
		return c // its shift reaches every constant that is stated
	}
	for i := range c.Steps {
		if s := &c.Steps[i]; s.statesK() {
			s.shiftK += float64(count(s.To, state)-count(s.From, state)) * d
		}
	}
	return c
}

// count is how many molecules of a species a side has.
func count(side []Term, species int) int {
	n := 0
	for _, t := range side {
		if t.Species == species {
			n += t.N
		}
	}
	return n
}
