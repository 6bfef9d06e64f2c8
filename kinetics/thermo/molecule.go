package thermo

import (
	"fmt"
	"math"

	"saddlebook/kinetics/rate"
)

// MassUnit is the atomic mass unit, in kg/mol: CODATA 2022, 1.66053906892e-27 kg.
const MassUnit = 1.66053906892e-27 * rate.Avogadro

// Molecule is what a calculation leaves of one state: its energy, its shape and
// its vibrations. The free energy follows from them as that of an ideal gas of
// rigid rotors and harmonic oscillators, with the choice of LowModes for the
// modes that are neither. It is never changed in place.
//
// The shape is said by Atoms, or by Mass with Rotation. An atom has no Rotation,
// a linear molecule one rotational constant and any other three. Rotation is
// taken as classical, which makes H too high by about R·θ/3, θ the rotational
// temperature: 0.24 kJ/mol for H2, 0.04 for HCl, less for anything heavier.
type Molecule struct {
	E            float64       // J/mol, electronic energy at the stationary point, without the zero point
	Atoms        []Atom        `json:",omitempty"`
	Mass         float64       `json:",omitempty"` // kg/mol
	Rotation     []float64     `json:",omitempty"` // 1/m, rotational constants
	Frequencies  []float64     `json:",omitempty"` // 1/m, every mode, equal ones repeated; an imaginary one below zero
	Saddle       bool          `json:",omitempty"` // a transition state: exactly one imaginary mode, left out
	Symmetry     int           `json:",omitempty"` // rotational symmetry number; 0 reads as 1
	Multiplicity int           `json:",omitempty"` // of the spin; 0 reads as 1
	Scale        float64       `json:",omitempty"` // factor on every frequency; 0 reads as 1
	LowModes     LowModes      `json:",omitzero"`
	Standard     rate.Standard `json:",omitzero"` // of the ideal gas: a pressure, or 1 mol/L
}

// Treatment says how a vibration of low frequency is counted.
type Treatment string

const (
	// Harmonic takes every mode as it is. The empty Treatment reads as it.
	Harmonic Treatment = "harmonic"
	// Floor raises modes below the cutoff to it, in H, S and Cp alike; the zero
	// point keeps the frequency as it is. Source: Ribeiro, Marenich, Cramer and
	// Truhlar, J. Phys. Chem. B 115, 14556 (2011), from memory.
	Floor Treatment = "floor"
	// FreeRotor mixes the entropy of the oscillator with that of a free rotor of
	// the same frequency: S = w·S(oscillator) + (1 − w)·S(rotor) with
	// w = 1/(1 + (cutoff/ν)^exponent). H and Cp stay those of the oscillator, so
	// −dG/dT differs from S by up to R/2 a mode.
	// Source: Grimme, Chem. Eur. J. 18, 9955 (2012), doi:10.1002/chem.201200497.
	FreeRotor Treatment = "free rotor"
)

// LowModes is the choice for vibrations that are too soft to be harmonic. The
// zero LowModes takes them as harmonic.
type LowModes struct {
	Treatment Treatment `json:",omitempty"`
	Cutoff    float64   `json:",omitempty"` // 1/m, after Scale; 0: 10000 (100 cm-1)
	Exponent  float64   `json:",omitempty"` // of FreeRotor; 0: 4
	Moment    float64   `json:",omitempty"` // kg m², mean moment of inertia of FreeRotor; 0: 1e-44
}

// What LowModes takes for parameters that are not given: Grimme 2012, and common
// practice for the floor.
const (
	DefaultCutoff   = 100 * perCentimetre // 1/m
	DefaultExponent = 4
	DefaultMoment   = 1e-44 // kg m²
)

const perCentimetre = 100 // 1/m

// Given returns the choice with its parameters filled in.
func (l LowModes) Given() LowModes {
	if l.Treatment == "" {
		l.Treatment = Harmonic
	}
	if l.Treatment != Harmonic && l.Cutoff == 0 {
		l.Cutoff = DefaultCutoff
	}
	if l.Treatment == FreeRotor {
		if l.Exponent == 0 {
			l.Exponent = DefaultExponent
		}
		if l.Moment == 0 {
			l.Moment = DefaultMoment
		}
	}
	return l
}

func (l LowModes) check() error {
	switch l.Treatment {
	case "", Harmonic, Floor, FreeRotor:
	default:
		return fmt.Errorf("%w: the treatment of low modes %q is not known; give %q, %q or %q", rate.ErrDomain, string(l.Treatment), Harmonic, Floor, FreeRotor)
	}
	for _, n := range []struct {
		what  string
		value float64
		used  bool
	}{
		{"cutoff of low modes (cm-1)", l.Cutoff / perCentimetre, l.Treatment == Floor || l.Treatment == FreeRotor},
		{"exponent of the free rotor", l.Exponent, l.Treatment == FreeRotor},
		{"moment of inertia of the free rotor (kg m²)", l.Moment, l.Treatment == FreeRotor},
	} {
		if !(n.value >= 0) || math.IsInf(n.value, 0) {
			return &rate.DomainError{What: n.what, Value: n.value, Fix: "give a finite one above zero, or leave it out"}
		}
		if n.value != 0 && !n.used {
			return &rate.DomainError{What: n.what, Value: n.value, Fix: fmt.Sprintf("leave it out: the treatment %q does not use it", l.Given().Treatment)}
		}
	}
	return nil
}

// Imaginary returns the magnitude of the imaginary frequency, in 1/m and scaled;
// ok is false if there is none or more than one.
func (m *Molecule) Imaginary() (nu float64, ok bool) {
	n := 0
	for _, f := range m.Frequencies {
		if f < 0 {
			n, nu = n+1, -f*m.scale()
		}
	}
	if n != 1 {
		return 0, false
	}
	return nu, true
}

// Linear reports whether the molecule rotates about two axes alike and not about
// the third.
func (m *Molecule) Linear() bool {
	s, err := m.shape()
	return err == nil && len(s.rotation) == 1
}

// Soft returns how many real modes lie below the given frequency (1/m) after
// scaling. A harmonic entropy of modes below 100 cm-1 is not to be trusted.
func (m *Molecule) Soft(below float64) int {
	n := 0
	for _, f := range m.Frequencies {
		if f > 0 && f*m.scale() < below {
			n++
		}
	}
	return n
}

// Check returns an error that matches rate.ErrDomain if a number is not possible,
// the shape is said twice or not at all, a minimum has an imaginary mode, a
// transition state has not exactly one, or the number of modes does not fit the
// shape (3N − 6, linear 3N − 5, with the imaginary one).
func (m *Molecule) Check() error {
	if math.IsNaN(m.E) || math.IsInf(m.E, 0) {
		return &rate.DomainError{What: "electronic energy (J/mol)", Value: m.E, Fix: "give a finite one"}
	}
	for _, n := range []struct {
		what  string
		value int
	}{{"symmetry number", m.Symmetry}, {"multiplicity", m.Multiplicity}} {
		if n.value < 0 {
			return &rate.DomainError{What: n.what, Value: float64(n.value), Fix: "give one or more"}
		}
	}
	if !(m.Scale >= 0) || math.IsInf(m.Scale, 0) {
		return &rate.DomainError{What: "scale factor of frequencies", Value: m.Scale, Fix: "give a finite one above zero, such as 0.97"}
	}
	if !(m.Standard.Pressure >= 0) || math.IsInf(m.Standard.Pressure, 0) {
		return &rate.DomainError{What: "standard pressure (Pa)", Value: m.Standard.Pressure, Fix: "give a finite one above zero, or none for 1 mol/L"}
	}
	if err := m.LowModes.check(); err != nil {
		return err
	}
	if err := checkAtoms(m.Atoms); err != nil {
		return err
	}
	s, err := m.shape()
	if err != nil {
		return err
	}
	if len(s.rotation) == 0 && m.Symmetry > 1 {
		return &rate.DomainError{What: "symmetry number of an atom", Value: float64(m.Symmetry), Fix: "leave it out: an atom does not rotate"}
	}
	return m.checkModes(s)
}

func (m *Molecule) checkModes(s shape) error {
	imaginary := 0
	for i, f := range m.Frequencies {
		what := fmt.Sprintf("frequency %d (cm-1)", i+1)
		switch {
		case math.IsNaN(f) || math.IsInf(f, 0):
			return &rate.DomainError{What: what, Value: f, Fix: "give a finite one"}
		case math.Abs(f) < 1:
			return &rate.DomainError{What: what, Value: f / perCentimetre, Fix: "leave translations and rotations out of the list"}
		case f < 0 && !m.Saddle:
			return &rate.DomainError{What: what, Value: f / perCentimetre, Fix: "a minimum has no imaginary mode: optimise it again, or say that it is a transition state"}
		case f < 0:
			imaginary++
		}
	}
	if m.Saddle && imaginary != 1 {
		return &rate.DomainError{What: "number of imaginary modes in a transition state", Value: float64(imaginary), Fix: "a transition state has exactly one: optimise it again"}
	}
	n, got := len(m.Atoms), len(m.Frequencies)
	fix := ""
	switch kind := len(s.rotation); {
	case kind == 0 && got != 0:
		fix = "an atom has none; give rotation or atoms if this is a molecule"
	case kind == 1 && n > 0 && got != 3*n-5:
		fix = fmt.Sprintf("%d atoms on one line have %d, equal ones repeated", n, 3*n-5)
	case kind == 3 && n > 0 && got != 3*n-6:
		fix = fmt.Sprintf("%d atoms that are not on one line have %d, equal ones repeated", n, 3*n-6)
	case kind == 1 && got%3 != 1:
		fix = "a linear molecule of N atoms has 3N − 5, equal ones repeated"
	case kind == 3 && (got%3 != 0 || got == 0):
		fix = "a molecule of N atoms that is not linear has 3N − 6, equal ones repeated"
	default:
		return nil
	}
	return &rate.DomainError{What: "number of frequencies", Value: float64(got), Fix: fix}
}

func (m *Molecule) scale() float64 { return orOne(m.Scale) }

func orOne(x float64) float64 {
	if x == 0 {
		return 1
	}
	return x
}
