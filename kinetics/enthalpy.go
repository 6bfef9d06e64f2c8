package kinetics

import "math"

// SpeciesEnthalpy returns the enthalpy of every species at T (K), in J/mol; NaN
// where none is known: of a constant free energy, and of a species without an
// energy. The standard state is of no matter: the enthalpy of an ideal gas or an
// ideal solution does not depend on it.
func (m *Mechanism) SpeciesEnthalpy(T float64) []float64 {
	h := make([]float64, len(m.Species))
	for i, s := range m.Species {
		h[i] = math.NaN()
		if !s.Unknown {
			h[i] = s.Energy.Enthalpy(T)
		}
	}
	return h
}

// Enthalpy returns the enthalpy of reaction of every step at T (K), in J/mol:
// Step.Heat where it is stated, else that of the species, else of rate constants
// both ways Ea less that of the return (van 't Hoff). missing names the steps
// that have none, whose entry is NaN.
func (m *Mechanism) Enthalpy(T float64) (perStep []float64, missing []string) {
	h := m.SpeciesEnthalpy(T)
	perStep = make([]float64, len(m.Steps))
	for i := range m.Steps {
		s := &m.Steps[i]
		dH := 0.0
		for _, t := range s.To {
			dH += float64(t.N) * h[t.Species]
		}
		for _, t := range s.From {
			dH -= float64(t.N) * h[t.Species]
		}
		switch l := s.Law; {
		case s.Heat != nil:
			dH = *s.Heat
		case math.IsNaN(dH) && l != nil && l.Forward != nil && l.Back != nil && l.Forward.Ea != nil && l.Back.Ea != nil:
			dH = *l.Forward.Ea - *l.Back.Ea
		}
		perStep[i] = dH
		if math.IsNaN(dH) {
			missing = append(missing, s.Name)
		}
	}
	return perStep, missing
}
