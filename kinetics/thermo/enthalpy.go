package thermo

import (
	"math"

	"saddlebook/kinetics/rate"
)

// Enthalpy returns the enthalpy at T (K), in J/mol: that of an enthalpy with its
// heat capacity, or of a molecule (E, zero point and thermal part, for any low
// modes that of the treatment chosen); of conformers the mean by their Boltzmann
// weights at T. It is NaN where none is known, of a constant G, and at a
// temperature that is not positive and finite.
func (e Energy) Enthalpy(T float64) float64 {
	if !(T > 0) || math.IsInf(T, 0) {
		return math.NaN()
	}
	h := math.NaN()
	switch {
	case len(e.Conformers) > 0:
		all := boltzmann(e.Conformers, T)
		h = 0
		for _, c := range e.Conformers {
			if w := math.Exp((all - c.At(T)) / (rate.R * T)); w > 0 {
				h += w * c.Enthalpy(T)
			}
		}
	case e.Heat != nil:
		T0 := e.Heat.T0
		if T0 == 0 {
			T0 = Reference
		}
		h = e.Heat.H + e.Heat.Cp*(T-T0)
	case e.Molecule != nil:
		if s, err := e.Molecule.shape(); err == nil {
			h = e.Molecule.at(T, s).H
		}
	}
	return h + e.Offset
}
