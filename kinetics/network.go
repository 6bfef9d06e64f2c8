package kinetics

import (
	"fmt"
	"math"
	"strings"

	"saddlebook/kinetics/rate"
)

// Network is a mechanism at one temperature.
type Network struct {
	T         float64   // K
	Names     []string  // species
	Labels    []string  // species, as figures name them; the name where none is given
	G         []float64 // J/mol at 1 mol/L, forms included
	Reactions []Reaction
}

// Reaction is a step at one temperature, with every energy at 1 mol/L.
type Reaction struct {
	Step        int
	Name, Label string // of the step
	From, To    []Term
	Returns     bool
	TS          float64 // J/mol
	// Barrier, BarrierBack and DeltaG are J/mol. A step without return has a
	// BarrierBack and a K as well: those of its energies.
	Barrier, BarrierBack, DeltaG float64
	K                            float64 // (mol/L)^(molecules to − molecules from); 0 or +Inf beyond a float64
	Forward, Back                float64 // L^(n−1)/mol^(n−1)/s; Back is 0 when there is no return
	LnForward, LnBack            float64 // their natural logarithms; −Inf when there is no return
	Position                     float64 // 0 early to 1 late; NaN: no barrier either way
	Raised                       bool    // by a sample, to its higher side
}

// lowTolerance is how far below a side, relative to the energies compared, a
// transition state may lie by rounding.
const lowTolerance = 1e-9

// At returns the network at temperature T (K). The error is Complaints if T is
// not positive and finite, if a step mixes energies that follow temperature
// with constant ones away from the mechanism's own temperature, if a transition
// state lies below a side (unless RaiseLow is set), or if a number makes no sense.
func (m *Mechanism) At(T float64) (*Network, error) {
	if !(T > 0) || math.IsInf(T, 0) {
		return nil, Complaints{{Key: "temperature", Fatal: true, Msg: fmt.Sprintf("temperature %g K makes no sense", T), Fix: "give a temperature above 0 K"}}
	}
	var bad Complaints
	n := &Network{T: T, G: make([]float64, len(m.Species)), Reactions: make([]Reaction, 0, len(m.Steps))}
	for i, s := range m.Species {
		n.Names = append(n.Names, s.Name)
		n.Labels = append(n.Labels, labelOr(s.Label, s.Name))
		n.G[i] = s.Energy.At(T) + s.Standard.Shift(T)
		if s.Forms > 1 {
			n.G[i] -= rate.R * T * math.Log(float64(s.Forms))
		}
		if math.IsNaN(n.G[i]) || math.IsInf(n.G[i], 0) {
			bad = append(bad, noNumber(s.Name, T))
		}
	}
	away := !m.home(T)
	for i := range m.Steps {
		if away {
			if c, mixed := m.mixed(i); mixed {
				c.Fatal = true
				c.Msg += fmt.Sprintf(", so it has no meaning at %s", temperatureText(T))
				bad = append(bad, c)
				continue
			}
		}
		if n := Molecules(m.Steps[i].From); n > MaxMolecules {
			bad = append(bad, Complaint{State: m.Steps[i].Name, Key: "reaction", Fatal: true, Msg: tooMany(n, "left"), Fix: splitStep})
			continue
		}
		if n := Molecules(m.Steps[i].To); m.Steps[i].Returns && n > MaxMolecules {
			bad = append(bad, Complaint{State: m.Steps[i].Name, Key: "reaction", Fatal: true, Msg: tooMany(n, "right"), Fix: splitStep})
			continue
		}
		r, wrong := m.reaction(n, i)
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

func labelOr(label, name string) string {
	if label != "" {
		return label
	}
	return name
}

func noNumber(state string, T float64) Complaint {
	return Complaint{State: state, Fatal: true, Msg: fmt.Sprintf("the energy of %s is not a finite number at %s", state, temperatureText(T)), Fix: "check its energy and the temperature"}
}

// reaction computes one step; the energies of the species stand in n.
func (m *Mechanism) reaction(n *Network, i int) (Reaction, *Complaint) {
	s := &m.Steps[i]
	r := Reaction{Step: i, Name: s.Name, Label: labelOr(s.Label, s.Name), From: s.From, To: s.To, Returns: s.Returns}
	low, high := n.sum(s.From), n.sum(s.To)
	r.DeltaG = high - low
	r.TS = s.Energy.At(n.T)
	shift := s.Standard.Shift(n.T)
	if s.Above {
		// A difference between one state and n molecules: (1 − n) shifts.
		r.TS += low + float64(1-Molecules(s.From))*shift
	} else {
		r.TS += shift
	}
	if math.IsNaN(r.TS) || math.IsInf(r.TS, 0) {
		c := noNumber(s.Name, n.T)
		return r, &c
	}
	top := math.Max(low, high)
	if r.TS < top {
		switch {
		case top-r.TS <= lowTolerance*math.Max(math.Abs(r.TS), math.Abs(top)):
		case m.RaiseLow:
			r.Raised = true
		default:
			c := lowComplaint(s, n, r.TS, low, high)
			return r, &c
		}
		r.TS = top
	}
	r.Barrier, r.BarrierBack = r.TS-low, r.TS-high
	RT := rate.R * n.T
	r.K = math.Exp(-r.DeltaG / RT)
	degeneracy, transmission := factor(s.Degeneracy), factor(s.Transmission)
	var err error
	if r.LnForward, err = rate.LnConstant(r.Barrier, n.T, degeneracy, transmission); err == nil {
		r.LnBack, err = rate.LnConstant(r.BarrierBack, n.T, degeneracy, transmission)
	}
	if err != nil {
		return r, &Complaint{State: s.Name, Fatal: true, Msg: fmt.Sprintf("step %s has no rate constant: %v", s.Name, err), Fix: "check its energy, degeneracy and transmission"}
	}
	r.Forward, r.Back = math.Exp(r.LnForward), math.Exp(r.LnBack)
	if !r.Returns {
		r.Back, r.LnBack = 0, math.Inf(-1)
	}
	r.Position = rate.Position(r.Barrier, r.BarrierBack)
	return r, nil
}

func factor(x float64) float64 {
	if x == 0 {
		return 1
	}
	return x
}

// sum returns the energy of a side.
func (n *Network) sum(side []Term) float64 {
	g := 0.0
	for _, t := range side {
		g += float64(t.N) * n.G[t.Species]
	}
	return g
}

// lowComplaint words a transition state below one side or both.
func lowComplaint(s *Step, n *Network, ts, low, high float64) Complaint {
	c := Complaint{State: s.Name, Fatal: true}
	if s.Above && ts < low {
		c.Key = "barrier"
		c.Msg = fmt.Sprintf("the barrier of %s is %s at %s, below its reactants %s", s.Name, energyText(ts-low), temperatureText(n.T), sideText(s.From, n.Names))
		c.Fix = "give a barrier of 0 or more at 1 mol/L, or check its standard state"
		return c
	}
	var where []string
	for _, side := range []struct {
		word  string
		terms []Term
		g     float64
	}{{"reactants", s.From, low}, {"products", s.To, high}} {
		if ts < side.g {
			where = append(where, fmt.Sprintf("%s below its %s %s", energyText(side.g-ts), side.word, sideText(side.terms, n.Names)))
		}
	}
	c.Msg = fmt.Sprintf("transition state %s lies %s at %s", s.Name, strings.Join(where, " and "), temperatureText(n.T))
	c.Fix = "check the signs, units and standard states of these energies; a step without a barrier of its own needs a transition state level with its higher side"
	return c
}
