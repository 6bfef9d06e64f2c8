package kinetics

import (
	"fmt"
	"math"
	"strings"

	"saddlebook/kinetics/rate"
)

// lowTolerance is how far below a side, relative to the energies compared, a
// transition state may lie by rounding.
const lowTolerance = 1e-9

// reaction computes one step with the free energy of reaction dG, NaN if that
// is not known; the energies of the species stand in n.
func (m *Mechanism) reaction(n *Network, i int, dG float64) (Reaction, *Complaint) {
	s := &m.Steps[i]
	r := Reaction{Step: i, Name: s.Name, Label: labelOr(s.Label, s.Name), From: s.From, To: s.To, Returns: s.Returns, DeltaG: dG, Tunnelling: 1, LimitFactor: 1}
	if s.Returns && math.IsNaN(dG) {
		return r, m.noReturn(s)
	}
	var bad *Complaint
	if s.Law != nil {
		bad = m.byLaw(n, s, &r)
	} else {
		bad = m.byEnergy(n, s, &r)
	}
	if bad != nil {
		return r, bad
	}
	r.K = math.Exp(-dG / (rate.R * n.T))
	if bad := m.correct(n, s, &r); bad != nil {
		return r, bad
	}
	r.Forward, r.Back = math.Exp(r.LnForward), math.Exp(r.LnBack)
	if !r.Returns {
		r.Back, r.LnBack = 0, math.Inf(-1)
	}
	return r, nil
}

// byEnergy fills in the barriers of a transition state and their rates.
func (m *Mechanism) byEnergy(n *Network, s *Step, r *Reaction) *Complaint {
	if !s.Above {
		if c := n.offScale(s); c != nil {
			return c
		}
	}
	low := n.sum(s.From)
	high := low + r.DeltaG // NaN: not known
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
		return &c
	}
	top := low
	if high > low {
		top = high
	}
	if r.TS < top {
		switch {
		case top-r.TS <= lowTolerance*math.Max(math.Abs(r.TS), math.Abs(top)):
		case m.RaiseLow:
			r.Raised = true
		default:
			c := lowComplaint(s, n, r.TS, low, high)
			return &c
		}
		r.TS = top
	}
	r.Barrier, r.BarrierBack = r.TS-low, r.TS-high
	lnTry := lnTry(n.T)
	r.LnForward = lnTry - r.Barrier/(rate.R*n.T)
	r.LnBack = lnTry - r.BarrierBack/(rate.R*n.T)
	r.Position = rate.Position(r.Barrier, r.BarrierBack)
	return nil
}

// byLaw fills in the rates of a law and the barriers that they imply.
func (m *Mechanism) byLaw(n *Network, s *Step, r *Reaction) *Complaint {
	r.Law = s.Law.Kind
	RT := rate.R * n.T
	lnK := -r.DeltaG / RT
	switch s.Law.Kind {
	case Measured:
		r.LnForward = s.Law.Forward.ln(n.T)
	default:
		back := s.Law.back(s, r.DeltaG)
		r.LnForward = math.Log(FastRate)
		side := s.From
		if back {
			side = s.To
		}
		if Molecules(side) == 2 {
			r.LnForward = math.Log(m.DiffusionLimit(n.T))
		}
		if back {
			r.LnForward += lnK
		}
	}
	r.LnForward -= s.Law.Shift/RT + math.Log(factorOf(s.Law.Slower))
	r.LnBack = r.LnForward - lnK
	if math.IsNaN(r.LnForward) || math.IsInf(r.LnForward, 0) {
		return &Complaint{State: s.Name, Fatal: true, Msg: fmt.Sprintf("step %s has no rate constant at %s", s.Name, temperatureText(n.T)), Fix: "check its rate constants and the viscosity"}
	}
	r.Barrier = RT * (lnTry(n.T) - r.LnForward)
	r.BarrierBack = r.Barrier - r.DeltaG
	r.TS = n.sum(s.From) + r.Barrier
	r.Position = math.NaN()
	if s.Law.Kind == Measured {
		r.Position = rate.Position(r.Barrier, r.BarrierBack)
	}
	return nil
}

// back tells which direction of a step runs at the limit: that in which two
// molecules meet, for a step that is kept fast the downhill one.
func (l *Law) back(s *Step, dG float64) bool {
	from, to := Molecules(s.From), Molecules(s.To)
	if !s.Returns {
		return false
	}
	if l.Kind == AtDiffusion && (from == 2) != (to == 2) || from > 2 || to > 2 {
		return from != 2
	}
	return dG > 0
}

// correct multiplies both directions by what the options of the step ask for.
func (m *Mechanism) correct(n *Network, s *Step, r *Reaction) *Complaint {
	ln := 0.0
	for _, f := range []struct {
		key, what string
		value     float64
	}{{"degeneracy", "path degeneracy", s.Degeneracy}, {"transmission", "transmission coefficient", s.Transmission}} {
		x := factorOf(f.value)
		if !(x > 0) || math.IsInf(x, 0) {
			return &Complaint{State: s.Name, Key: f.key, Fatal: true, Msg: fmt.Sprintf("step %s has no rate constant: %s of %g is not possible", s.Name, f.what, x), Fix: "give a finite number above 0"}
		}
		ln += math.Log(x)
	}
	if s.Tunnelling != nil {
		kappa, err := s.Tunnelling.Factor(n.T)
		if err != nil {
			return &Complaint{State: s.Name, Key: "tunnelling", Fatal: true, Msg: fmt.Sprintf("tunnelling in step %s at %s: %v", s.Name, temperatureText(n.T), err), Fix: "or leave tunnelling out"}
		}
		r.Tunnelling = kappa
		ln += math.Log(kappa)
	}
	r.LnForward += ln
	r.LnBack += ln
	if s.Limited {
		met := math.Inf(-1) // ln k of the faster direction in which two molecules meet
		if Molecules(s.From) == 2 {
			met = r.LnForward
		}
		if Molecules(s.To) == 2 && s.Returns {
			met = math.Max(met, r.LnBack)
		}
		lnLimit := rate.LnLimitFactor(met, m.DiffusionLimit(n.T))
		r.LimitFactor = math.Exp(lnLimit)
		r.LnForward += lnLimit
		r.LnBack += lnLimit
	}
	if r.LnForward > math.Log(math.MaxFloat64) || r.Returns && r.LnBack > math.Log(math.MaxFloat64) {
		return &Complaint{State: s.Name, Fatal: true, Msg: fmt.Sprintf("the rate constant of step %s is too large for a number at %s", s.Name, temperatureText(n.T)), Fix: "check its energies, constants and factors"}
	}
	return nil
}

func factorOf(x float64) float64 {
	if x == 0 {
		return 1
	}
	return x
}

// noReturn words a reversible step whose return nothing gives.
func (m *Mechanism) noReturn(s *Step) *Complaint {
	c := &Complaint{State: s.Name, Fatal: true, Fix: "give the step k-back or K, or all its species an energy, or write -> for a step without return"}
	c.Msg = fmt.Sprintf("step %s is reversible, and nothing says how fast it returns: %s", s.Name, withoutEnergy(m.without(s.From, s.To)))
	if s.Law != nil && s.Law.Kind != Measured || s.Above {
		c.Fix = strings.Replace(c.Fix, "k-back or K", "K", 1)
	}
	return c
}

func withoutEnergy(names []string) string {
	if len(names) == 1 {
		return names[0] + " has no energy"
	}
	return listed(names, "and") + " have no energy"
}

// without names the species of the sides that have no energy.
func (m *Mechanism) without(sides ...[]Term) []string {
	var names []string
	seen := map[int]bool{}
	for _, side := range sides {
		for _, t := range side {
			if m.Species[t.Species].Unknown && !seen[t.Species] {
				names = append(names, m.Species[t.Species].Name)
			}
			seen[t.Species] = true
		}
	}
	return names
}

// offScale refuses a transition state on the energy scale between species that
// are not on it.
func (n *Network) offScale(s *Step) *Complaint {
	var names []string
	for _, t := range s.From {
		if !n.Known[t.Species] {
			names = append(names, n.Names[t.Species])
		}
	}
	if len(names) == 0 {
		return nil
	}
	return &Complaint{State: s.Name, Fatal: true, Msg: fmt.Sprintf("step %s is given by the energy of its transition state, and %s", s.Name, withoutEnergy(names)),
		Fix: "give every species of the step an energy, or give the step a barrier above its reactants, or k"}
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
