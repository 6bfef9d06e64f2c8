package thermo

import (
	"math"

	"saddlebook/kinetics/rate"
)

const (
	lightSpeed = 299792458.0 // m/s, exact (SI)
	// waveHeat turns a wavenumber (1/m) into a temperature (K): h·c/kB.
	waveHeat = rate.Planck * lightSpeed / rate.Boltzmann
	// waveEnergy turns a wavenumber (1/m) into an energy (J/mol): N·h·c.
	waveEnergy = rate.Planck * lightSpeed * rate.Avogadro
)

// Part is what one kind of motion adds.
type Part struct {
	H  float64 // J/mol, above 0 K
	S  float64 // J/mol/K
	Cp float64 // J/mol/K
}

// Contributions is the thermochemistry of a Molecule at one temperature, at its
// standard state.
type Contributions struct {
	T           float64 // K
	E           float64 // J/mol, as given
	ZPE         float64 // J/mol, of the zero point
	Translation Part    // with p·V = R·T in H and R in Cp
	Rotation    Part
	Vibration   Part
	Electronic  Part    // R·ln(multiplicity)
	Thermal     float64 // J/mol, H(T) − H(0)
	H           float64 // J/mol, E + ZPE + Thermal
	S           float64 // J/mol/K
	Cp          float64 // J/mol/K, dH/dT at constant pressure
	G           float64 // J/mol, H − T·S
	Soft        int     // modes below the cutoff, which LowModes treats
}

// At returns the thermochemistry at T (K).
//
// At a standard pressure −dG/dT is S. At 1 mol/L it is S − R, because the
// pressure of that state rises with temperature; and see FreeRotor. Errors are
// those of Check, and rate.ErrDomain if T is not positive and finite.
// Source: McQuarrie, Statistical Mechanics (1976), chapters 5, 6 and 8.
func (m *Molecule) At(T float64) (Contributions, error) {
	if !(T > 0) || math.IsInf(T, 0) {
		return Contributions{}, &rate.DomainError{What: "temperature (K)", Value: T, Fix: "give a finite one above zero"}
	}
	if err := m.Check(); err != nil {
		return Contributions{}, err
	}
	s, err := m.shape()
	if err != nil {
		return Contributions{}, err
	}
	c := m.at(T, s)
	if math.IsNaN(c.G) || math.IsInf(c.G, 0) {
		return Contributions{}, &rate.DomainError{What: "temperature (K)", Value: T, Fix: "give one at which the free energy is a number"}
	}
	return c, nil
}

// free returns G at T, NaN for a molecule that Check refuses to give a shape.
func (m *Molecule) free(T float64) float64 {
	s, err := m.shape()
	if err != nil {
		return math.NaN()
	}
	return m.at(T, s).G
}

func (m *Molecule) at(T float64, s shape) Contributions {
	c := Contributions{T: T, E: m.E, Translation: translation(s.mass, T, m.Standard), Rotation: rotation(s.rotation, T, m.Symmetry)}
	low := m.LowModes.Given()
	for _, f := range m.Frequencies {
		if !(f > 0) { // the imaginary mode of a transition state is its reaction coordinate
			continue
		}
		nu := f * m.scale()
		if nu < low.Cutoff {
			c.Soft++
		}
		p := mode(nu, T, low)
		c.ZPE += waveEnergy * nu / 2
		c.Vibration.H += p.H
		c.Vibration.S += p.S
		c.Vibration.Cp += p.Cp
	}
	if m.Multiplicity > 1 {
		c.Electronic.S = rate.R * math.Log(float64(m.Multiplicity))
	}
	for _, p := range []Part{c.Translation, c.Rotation, c.Vibration, c.Electronic} {
		c.Thermal += p.H
		c.S += p.S
		c.Cp += p.Cp
	}
	c.H = c.E + c.ZPE + c.Thermal
	c.G = c.H - T*c.S
	return c
}

// translation is the Sackur-Tetrode equation at the pressure of the standard
// state, with p·V.
func translation(mass, T float64, standard rate.Standard) Part {
	p := standard.Pressure
	if p == 0 {
		p = 1000 * rate.R * T // of 1 mol/L
	}
	kT := rate.Boltzmann * T
	wave := 2 * math.Pi * (mass / rate.Avogadro) / rate.Planck * (kT / rate.Planck) // 1/m², of the thermal wavelength squared
	lnq := 1.5*math.Log(wave) + math.Log(kT/p)
	return Part{H: 2.5 * rate.R * T, S: rate.R * (lnq + 2.5), Cp: 2.5 * rate.R}
}

// rotation is the classical rigid rotor with rotational constants in 1/m: none,
// one of a line, or three.
func rotation(constants []float64, T float64, symmetry int) Part {
	lnq := -math.Log(float64(max(symmetry, 1)))
	var half float64 // square terms in the energy
	switch len(constants) {
	case 0:
		return Part{}
	case 1:
		half = 2
		lnq += math.Log(T / (waveHeat * constants[0]))
	default:
		half = 3
		lnq += math.Log(math.Pi) / 2
		for _, b := range constants {
			lnq += math.Log(T/(waveHeat*b)) / 2
		}
	}
	return Part{H: half / 2 * rate.R * T, S: rate.R * (lnq + half/2), Cp: half / 2 * rate.R}
}

// mode is one vibration of nu (1/m) without its zero point.
func mode(nu, T float64, low LowModes) Part {
	if low.Treatment == Floor {
		nu = max(nu, low.Cutoff)
	}
	x := waveHeat * nu / T
	e, free := math.Exp(-x), -math.Expm1(-x)
	p := Part{H: rate.R * T * x * e / free, Cp: rate.R * (x / free) * (x / free) * e}
	p.S = p.H/T - rate.R*math.Log(free)
	if math.IsInf(x*x, 0) { // a mode frozen so hard that its square leaves the range of numbers
		return Part{}
	}
	if low.Treatment == FreeRotor {
		w := 1 / (1 + math.Pow(low.Cutoff/nu, low.Exponent))
		p.S = w*p.S + (1-w)*freeRotor(nu, T, low.Moment)
	}
	return p
}

// freeRotor is the entropy of a rotor about one axis whose moment of inertia is
// that of a rotor with the frequency nu, joined to the mean moment of molecules
// so that it does not grow without end as nu falls.
func freeRotor(nu, T, mean float64) float64 {
	moment := rate.Planck / (8 * math.Pi * math.Pi * lightSpeed * nu)
	moment = moment / (moment + mean) * mean
	q2 := 8 * math.Pi * math.Pi * math.Pi * moment / rate.Planck * (rate.Boltzmann * T / rate.Planck)
	return rate.R * (0.5 + math.Log(q2)/2)
}
