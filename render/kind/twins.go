package kind

import "saddlebook/kinetics"

// twin notes that two states have one energy, and so one error.
func (b *builder) twin(first, other string) {
	for i := range b.twins {
		if b.twins[i][0] == first {
			b.twins[i] = append(b.twins[i], other)
			return
		}
	}
	b.twins = append(b.twins, []string{first, other})
}

// shareTwins makes the errors of states with one energy common to them, so
// that one draw moves them all. index numbers the states by name.
func (b *builder) shareTwins(m *kinetics.Mechanism, index map[string]int) {
	errorsOf := func(state int) (sd, entropy **float64) {
		if state < len(m.Species) {
			return &m.Species[state].SD, &m.Species[state].SDEntropy
		}
		st := &m.Steps[state-len(m.Species)]
		return &st.SD, &st.SDEntropy
	}
	entropic := map[int]float64{} // by state, of the twins whose entropy has an error
	for _, twins := range b.twins {
		c := kinetics.Common{}
		for _, name := range twins {
			sd, entropy := errorsOf(index[name])
			c.States = append(c.States, index[name])
			if *sd != nil {
				c.SD = **sd
			}
			*sd = nil
			if *entropy != nil {
				entropic[index[name]] = **entropy
				*entropy = new(float64) // its own part is none; the common one follows
			}
		}
		if c.SD > 0 {
			m.Common = append(m.Common, c)
		}
	}
	if len(entropic) == 0 {
		return
	}
	place := map[int]int{} // of the entropy of a state among all errors
	next := len(m.Species) + len(m.Steps)
	for state := range len(m.Species) + len(m.Steps) {
		if _, entropy := errorsOf(state); *entropy != nil {
			place[state] = next
			next++
		}
	}
	for _, twins := range b.twins {
		c := kinetics.Common{}
		for _, name := range twins {
			if sd, ok := entropic[index[name]]; ok {
				c.States, c.SD = append(c.States, place[index[name]]), sd
			}
		}
		if len(c.States) > 0 {
			m.Common = append(m.Common, c)
		}
	}
}
