package rate

import "math"

// Standard is the standard state at which a free energy is given.
type Standard struct {
	Pressure float64 // Pa, of an ideal gas; 0: the state of 1 mol/L
}

// Shift returns what to add to a free energy at s, in J/mol, to have it at
// 1 mol/L at temperature T (K):
//
//	R·T · ln(c°·R·T/p°),   c° = 1000 mol/m³
//
// From 1 atm that is 1.894 kcal/mol at 25 °C and 1.08 at -78 °C. It applies to
// every species and every transition state alike. A temperature that is not
// positive, or a negative pressure, gives NaN. Source: ideal-gas law; common
// practice.
func (s Standard) Shift(T float64) float64 {
	if !(T > 0) || math.IsInf(T, 0) || !(s.Pressure >= 0) {
		return math.NaN()
	}
	if s.Pressure == 0 {
		return 0
	}
	return R * T * math.Log(1000*R*T/s.Pressure)
}

// Diffusion returns the rate constant, in L/mol/s, at which two equal spheres
// meet in a liquid of the given viscosity (Pa s) at T (K): 8·R·T/(3·η). No step
// of two molecules runs faster. An argument that is not positive gives NaN.
// Source: von Smoluchowski 1917 with the Stokes-Einstein relation.
func Diffusion(T, viscosity float64) float64 {
	if !(T > 0 && viscosity > 0) {
		return math.NaN()
	}
	return 8 * R * T / (3 * viscosity) * 1000 // from m³ to L
}
