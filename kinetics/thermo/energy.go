// Package thermo gives the free energy of one state, a species or a transition
// state, as a function of temperature: a constant, an enthalpy with an entropy,
// what a frequency calculation gives, or a Boltzmann sum over conformers.
//
// # Units
//
// Energies are J/mol, entropies and heat capacities J/mol/K, temperatures K,
// frequencies and rotational constants 1/m, masses kg/mol, coordinates m.
//
// # Sources
//
//   - Boltzmann sum over conformers: McQuarrie, Statistical Mechanics (1976)
//   - Constant heat capacity (Kirchhoff's law): common practice
//   - Rigid rotor, harmonic oscillator, ideal gas: McQuarrie, as above
//   - Free rotors among low modes: Grimme, Chem. Eur. J. 18, 9955 (2012)
package thermo

import (
	"fmt"
	"math"

	"saddlebook/kinetics/rate"
)

// Reference is the temperature, in K, at which H and S hold if a Heat does not
// say otherwise.
const Reference = 298.15

// Energy is the free energy of one state. Exactly one of G, Heat, Molecule and
// Conformers says it; the zero Energy is a constant 0. It encodes to JSON and is never
// changed in place: Plus returns a new one.
type Energy struct {
	G          float64   `json:",omitempty"` // J/mol, held at every temperature
	Heat       *Heat     `json:",omitempty"` // follows temperature
	Molecule   *Molecule `json:",omitempty"` // follows temperature
	Conformers []Energy  `json:",omitempty"` // summed: −R·T ln Σ exp(−Gᵢ/(R·T))
	Forms      int       `json:",omitempty"` // indistinct forms of equal energy: −R·T ln n; 0 is 1
	Offset     float64   `json:",omitempty"` // J/mol, added at every temperature
}

// Heat is an enthalpy and an entropy, with a constant heat capacity if one is
// known: H(T) = H + Cp·(T − T0), S(T) = S + Cp·ln(T/T0).
type Heat struct {
	H  float64 // J/mol
	S  float64 // J/mol/K
	Cp float64 `json:",omitempty"` // J/mol/K
	T0 float64 `json:",omitempty"` // K, where H and S hold; 0: Reference; without Cp it has no effect
}

// Constant returns the free energy g, in J/mol, held at every temperature.
func Constant(g float64) Energy { return Energy{G: g} }

// Following returns the free energy h − T·s of an enthalpy h (J/mol) and an
// entropy s (J/mol/K).
func Following(h, s float64) Energy { return Energy{Heat: &Heat{H: h, S: s}} }

// At returns the free energy at T (K), in J/mol, at the standard state of the
// numbers given. A temperature that is not positive and finite gives NaN.
// A single conformer has the energy it has alone.
func (e Energy) At(T float64) float64 {
	if !(T > 0) || math.IsInf(T, 0) {
		return math.NaN()
	}
	g := e.G
	switch {
	case len(e.Conformers) > 0:
		g = boltzmann(e.Conformers, T)
	case e.Heat != nil:
		g = e.Heat.at(T)
	case e.Molecule != nil:
		g = e.Molecule.free(T)
	}
	if e.Forms > 1 {
		g -= rate.R * T * math.Log(float64(e.Forms))
	}
	return g + e.Offset
}

func (h *Heat) at(T float64) float64 {
	if h.Cp == 0 {
		return h.H - T*h.S
	}
	T0 := h.T0
	if T0 == 0 {
		T0 = Reference
	}
	return h.H + h.Cp*(T-T0) - T*(h.S+h.Cp*math.Log(T/T0))
}

// boltzmann sums relative to the lowest conformer, so that neither very low nor
// very high energies leave the range of numbers.
func boltzmann(conformers []Energy, T float64) float64 {
	g := make([]float64, len(conformers))
	lowest := 0
	for i, c := range conformers {
		g[i] = c.At(T)
		if g[i] < g[lowest] {
			lowest = i
		}
	}
	rest := 0.0
	for i := range g {
		if i != lowest {
			rest += math.Exp((g[lowest] - g[i]) / (rate.R * T))
		}
	}
	return g[lowest] - rate.R*T*math.Log1p(rest)
}

// Plus returns the energy raised by d, in J/mol, at every temperature.
func (e Energy) Plus(d float64) Energy {
	e.Offset += d
	return e
}

// Follows reports whether the energy follows temperature: it is an enthalpy with
// an entropy or a molecule, or all of its conformers are.
func (e Energy) Follows() bool {
	follow, constant := e.count()
	return follow > 0 && constant == 0
}

// Mixed reports whether some conformers follow temperature and some do not.
// Away from the temperature at which the constants hold, the sum then means
// nothing.
func (e Energy) Mixed() bool {
	follow, constant := e.count()
	return follow > 0 && constant > 0
}

func (e Energy) count() (follow, constant int) {
	switch {
	case len(e.Conformers) > 0:
		for _, c := range e.Conformers {
			f, k := c.count()
			follow, constant = follow+f, constant+k
		}
	case e.Heat != nil, e.Molecule != nil:
		follow = 1
	default:
		constant = 1
	}
	return follow, constant
}

// Check returns rate.ErrDomain if a number is not finite, T0 or Forms is
// negative, the energy is said in more than one way, or Molecule.Check refuses.
func (e Energy) Check() error {
	said := 0
	for _, given := range []bool{e.G != 0, e.Heat != nil, e.Molecule != nil, len(e.Conformers) > 0} {
		if given {
			said++
		}
	}
	if said > 1 {
		return fmt.Errorf("%w: an energy is said twice; give one of G, Heat, Molecule and Conformers", rate.ErrDomain)
	}
	if e.Forms < 0 {
		return &rate.DomainError{What: "number of forms", Value: float64(e.Forms), Fix: "give one or more"}
	}
	type number struct {
		what  string
		value float64
	}
	numbers := []number{{"free energy (J/mol)", e.G}, {"offset (J/mol)", e.Offset}}
	if h := e.Heat; h != nil {
		if h.T0 < 0 {
			return &rate.DomainError{What: "reference temperature (K)", Value: h.T0, Fix: "give one above zero"}
		}
		numbers = append(numbers, number{"enthalpy (J/mol)", h.H}, number{"entropy (J/mol/K)", h.S},
			number{"heat capacity (J/mol/K)", h.Cp}, number{"reference temperature (K)", h.T0})
	}
	for _, n := range numbers {
		if math.IsNaN(n.value) || math.IsInf(n.value, 0) {
			return &rate.DomainError{What: n.what, Value: n.value, Fix: "give a finite one"}
		}
	}
	if e.Molecule != nil {
		if err := e.Molecule.Check(); err != nil {
			return err
		}
	}
	for i, c := range e.Conformers {
		if err := c.Check(); err != nil {
			return fmt.Errorf("conformer %d: %w", i+1, err)
		}
	}
	return nil
}
