package kinetics

import "fmt"

// AlikeName is the name of one of several steps that share a rate, numbered
// from 1: TS.1, TS.2.
func AlikeName(step string, number int) string { return fmt.Sprintf("%s.%d", step, number) }

// ShareErrors makes the errors of states with one energy, or one rate, common to
// them, so that one draw moves them all. Each group numbers its states, species
// first, then steps; they have the same errors.
func (m *Mechanism) ShareErrors(groups [][]int) {
	type own struct{ sd, entropy, back **float64 }
	errorsOf := func(state int) own {
		if state < len(m.Species) {
			s := &m.Species[state]
			var none *float64
			return own{&s.SD, &s.SDEntropy, &none}
		}
		st := &m.Steps[state-len(m.Species)]
		return own{&st.SD, &st.SDEntropy, &st.SDReturn}
	}
	// Errors of entropies and of returns stand behind those of all states.
	entropyAt, returnAt := map[int]int{}, map[int]int{}
	next := len(m.Species) + len(m.Steps)
	for _, i := range m.uncertainEntropies() {
		entropyAt[i] = next
		next++
	}
	for _, i := range m.uncertainReturns() {
		returnAt[len(m.Species)+i] = next
		next++
	}
	for _, group := range groups {
		var energy, entropy, back Common
		for _, state := range group {
			e := errorsOf(state)
			energy.States = append(energy.States, state)
			if *e.sd != nil {
				energy.SD = **e.sd
			}
			*e.sd = nil
			if at, ok := entropyAt[state]; ok {
				entropy.States, entropy.SD = append(entropy.States, at), **e.entropy
				*e.entropy = new(float64) // its own part is none
			}
			if at, ok := returnAt[state]; ok {
				back.States, back.SD = append(back.States, at), **e.back
				*e.back = new(float64)
				if m.Steps[state-len(m.Species)].Law != nil && m.Steps[state-len(m.Species)].Law.Back != nil {
					energy.States = append(energy.States, at) // what moves k alone moves K too
				}
			}
		}
		for _, c := range []Common{energy, entropy, back} {
			if c.SD > 0 {
				m.Common = append(m.Common, c)
			}
		}
	}
}
