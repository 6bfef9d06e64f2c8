package kinetics

import (
	"fmt"
	"math"

	"saddlebook/kinetics/rate"
)

// Network is a mechanism at one temperature.
type Network struct {
	T         float64   // K
	Names     []string  // species
	Labels    []string  // species, as figures name them; the name where none is given
	G         []float64 // J/mol at 1 mol/L, forms included
	Known     []bool    // by species: G is on the scale that energies are given on; else it holds only relative to what constants join it with, some species of which stands at 0
	Reactions []Reaction
	Warnings  Complaints // of the energies and constants at this temperature

	frame *frame // nil: every energy is known
}

// Reaction is a step at one temperature, with every energy at 1 mol/L.
type Reaction struct {
	Step        int
	Name, Label string // of the step
	From, To    []Term
	Returns     bool
	Law         LawKind // ""; else the barriers and TS are those that an Eyring rate constant of the same size would have
	TS          float64 // J/mol
	// Barrier, BarrierBack and DeltaG are J/mol. A step without return has a
	// BarrierBack and a K as well: those of its energies. Where nothing gives
	// these, they, K and Position are NaN; TS then stands on the scale of the
	// reactants.
	Barrier, BarrierBack, DeltaG float64
	K                            float64 // (mol/L)^(molecules to − molecules from); 0 or +Inf beyond a float64
	Forward, Back                float64 // L^(n−1)/mol^(n−1)/s; Back is 0 when there is no return
	LnForward, LnBack            float64 // their natural logarithms; −Inf when there is no return
	Position                     float64 // 0 early to 1 late; NaN: no barrier either way, or no transition state of its own
	Tunnelling                   float64 // factor within Forward and Back; 1: none is counted
	LimitFactor                  float64 // of diffusion, within Forward and Back; 1: it is not limited
	Raised                       bool    // by a sample, to its higher side
}

// At returns the network at temperature T (K). The error is Complaints if T is
// not positive and finite, if a step mixes energies that follow temperature
// with constant ones away from where these hold, if a transition state lies
// below a side (unless RaiseLow is set), if constants that steps state break
// detailed balance, if nothing says how fast a reversible step returns, or if a
// number makes no sense.
func (m *Mechanism) At(T float64) (*Network, error) {
	if !(T > 0) || math.IsInf(T, 0) {
		return nil, Complaints{{Key: "temperature", Fatal: true, Msg: fmt.Sprintf("temperature %g K makes no sense", T), Fix: "give a temperature above 0 K"}}
	}
	var bad Complaints
	n := &Network{T: T, G: make([]float64, len(m.Species)), Known: make([]bool, len(m.Species)), Reactions: make([]Reaction, 0, len(m.Steps))}
	for i, s := range m.Species {
		n.Names = append(n.Names, s.Name)
		n.Labels = append(n.Labels, labelOr(s.Label, s.Name))
		if s.Unknown {
			continue // settle fills it in
		}
		n.G[i] = s.Energy.At(T) + s.Standard.Shift(T)
		if s.Forms > 1 {
			n.G[i] -= rate.R * T * math.Log(float64(s.Forms))
		}
		if math.IsNaN(n.G[i]) || math.IsInf(n.G[i], 0) {
			bad = append(bad, noNumber(s.Name, T))
		}
	}
	for i := range m.Steps {
		if c, refused := m.refuses(i, T); refused {
			bad = append(bad, c)
		}
	}
	if len(bad) > 0 {
		return nil, bad
	}
	dG, bad := m.settle(n)
	if len(bad) > 0 {
		return nil, bad
	}
	for i := range m.Steps {
		r, wrong := m.reaction(n, i, dG[i])
		if wrong != nil {
			bad = append(bad, *wrong)
			continue
		}
		n.Reactions = append(n.Reactions, r)
	}
	if len(bad) > 0 {
		return nil, bad
	}
	return n, nil
}

// refuses returns why step i cannot be used at T.
func (m *Mechanism) refuses(i int, T float64) (Complaint, bool) {
	s := &m.Steps[i]
	if c, mixed := m.mixed(i, T); mixed {
		c.Fatal = true
		c.Msg += fmt.Sprintf(", so it has no meaning at %s", temperatureText(T))
		return c, true
	}
	if n := Molecules(s.From); n > MaxMolecules {
		return Complaint{State: s.Name, Key: "reaction", Fatal: true, Msg: tooMany(n, "left"), Fix: splitStep}, true
	}
	if n := Molecules(s.To); s.Returns && n > MaxMolecules {
		return Complaint{State: s.Name, Key: "reaction", Fatal: true, Msg: tooMany(n, "right"), Fix: splitStep}, true
	}
	return m.lawFault(i)
}

func labelOr(label, name string) string {
	if label != "" {
		return label
	}
	return name
}

func noNumber(state string, T float64) Complaint {
	return Complaint{State: state, Fatal: true, Msg: fmt.Sprintf("the energy of %s is not a finite number at %s", state, temperatureText(T)), Fix: "check its energy and the temperature"}
}

// sum returns the energy of a side.
func (n *Network) sum(side []Term) float64 {
	g := 0.0
	for _, t := range side {
		g += float64(t.N) * n.G[t.Species]
	}
	return g
}
