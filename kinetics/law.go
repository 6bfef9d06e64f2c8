package kinetics

import (
	"math"

	"saddlebook/kinetics/rate"
)

// LawKind says how a Law gives a rate.
type LawKind string

// The laws.
const (
	// Measured is a rate constant as it was measured: Forward, and Back if that
	// was measured too.
	Measured LawKind = "measured"
	// AtDiffusion puts the direction in which two molecules meet at the diffusion
	// limit; where two meet in both, the downhill one. The other follows from K.
	AtDiffusion LawKind = "diffusion"
	// KeptFast is an equilibrium that is to stay fast beside the other steps: the
	// downhill direction runs at the diffusion limit if two molecules meet in it,
	// else at FastRate. The other follows from K.
	KeptFast LawKind = "fast"
)

// FastRate is the rate constant, in 1/s, of the downhill direction of a step of
// one molecule that is kept fast.
const FastRate = 1e9

// Law is the rate of a step in place of an energy of its transition state. Its
// constants hold at 1 mol/L. Degeneracy, Transmission, Tunnelling and the limit
// of the step multiply it, as they do any rate.
type Law struct {
	Kind    LawKind
	Forward *Constant `json:",omitempty"` // Measured only
	Back    *Constant `json:",omitempty"` // Measured only; nil: from Step.K, or from the species
	Shift   float64   `json:",omitempty"` // J/mol, on the free energy of activation of both directions
	Slower  float64   `json:",omitempty"` // both directions are divided by it; 0 reads as 1
}

// Constant is a rate constant, L^(n−1)/mol^(n−1)/s: K at the temperature At,
// with Ea for other temperatures; or A and Ea of Arrhenius. Without Ea the free
// energy of activation that K implies is held.
type Constant struct {
	K  float64  `json:",omitempty"`
	At float64  `json:",omitempty"` // K
	A  float64  `json:",omitempty"` // in place of K and At
	Ea *float64 `json:",omitempty"` // J/mol
}

// StatedK is an equilibrium constant, (mol/L)^(molecules to − molecules from).
// At other temperatures it follows Step.Heat by van 't Hoff's equation; without
// that, the free energy of reaction that it implies is held.
type StatedK struct {
	K  float64
	At float64 // K
}

// ln returns ln k at T.
func (c *Constant) ln(T float64) float64 {
	switch {
	case c.A != 0:
		return math.Log(c.A) - *c.Ea/(rate.R*T)
	case c.Ea != nil:
		return math.Log(c.K) - *c.Ea/rate.R*(1/T-1/c.At)
	}
	return lnTry(T) + (math.Log(c.K)-lnTry(c.At))*c.At/T
}

// heldAt tells whether the constant is carried to T by a free energy that is
// held.
func (c *Constant) heldAt(T float64) bool { return c.Ea == nil && !sameTemperature(T, c.At) }

// lnTry is ln(kB·T/h).
func lnTry(T float64) float64 { return math.Log(rate.Boltzmann/rate.Planck) + math.Log(T) }

func sameTemperature(a, b float64) bool { return math.Abs(a-b) <= 1e-9*b }

// statesK tells whether the step has an equilibrium constant of its own, from
// constants both ways or from K.
func (s *Step) statesK() bool {
	return s.Returns && (s.K != nil || s.Law != nil && s.Law.Forward != nil && s.Law.Back != nil)
}

// lnK returns ln of the equilibrium constant that the step states, at T.
func (s *Step) lnK(T float64) float64 {
	var ln float64
	if s.K != nil {
		ln = math.Log(s.K.K)
		if s.Heat != nil {
			ln -= *s.Heat / rate.R * (1/T - 1/s.K.At)
		} else {
			ln *= s.K.At / T
		}
	} else {
		ln = s.Law.Forward.ln(T) - s.Law.Back.ln(T)
	}
	return ln - s.shiftK/(rate.R*T)
}

// Slowed returns the mechanism with every step that is kept fast slowed by the
// factor, both ways: if that moves a conclusion, the step was not fast enough
// to be taken as an equilibrium.
func (m *Mechanism) Slowed(factor float64) *Mechanism {
	c := *m
	c.Steps = append([]Step(nil), m.Steps...)
	for i := range c.Steps {
		if l := c.Steps[i].Law; l != nil && l.Kind == KeptFast {
			slow := *l
			slow.Slower = factorOf(slow.Slower) * factor
			c.Steps[i].Law = &slow
		}
	}
	return &c
}

// FastSteps returns the names of the steps that are kept fast.
func (m *Mechanism) FastSteps() []string {
	var names []string
	for _, s := range m.Steps {
		if s.Law != nil && s.Law.Kind == KeptFast {
			names = append(names, s.Name)
		}
	}
	return names
}

// waterlike is the viscosity taken where none is stated, in Pa s.
const waterlike = 1e-3

// DiffusionLimit returns the rate constant, in L/mol/s, at which two molecules
// meet at T (K) in the solvent of the mechanism; see rate.Diffusion.
func (m *Mechanism) DiffusionLimit(T float64) float64 {
	if m.Viscosity == 0 {
		return rate.Diffusion(T, waterlike)
	}
	return rate.Diffusion(T, m.Viscosity)
}
