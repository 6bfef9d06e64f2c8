package kinetics

import (
	"fmt"
	"math"
	"strings"

	"saddlebook/kinetics/thermo"
)

// strongestBond is above any bond there is, in J/mol (that of CO has 257 kcal/mol
// at 25 °C; from memory): energies further apart in one step do not stand on one
// scale.
const strongestBond = 300 * 1000 * joulesPerCalorie

// enthalpyTolerance is how far an enthalpy of reaction that is stated may be from
// that of the species, in J/mol: 1 kcal/mol.
const enthalpyTolerance = 1000 * joulesPerCalorie

// doubts tells what is doubtful of the network at the mechanism's temperature.
func (m *Mechanism) doubts(n *Network, say func(state, key string, fatal bool, msg, fix string)) {
	enthalpies := m.SpeciesEnthalpy(n.T)
	for i := range n.Reactions {
		r := &n.Reactions[i]
		m.doubtBarriers(n, r, say)
		s := &m.Steps[r.Step]
		if names := m.symmetric(s); s.Degeneracy != 0 && s.Degeneracy != 1 && len(names) > 0 {
			say(s.Name, "degeneracy", false, fmt.Sprintf("step %s has a degeneracy of %.3g beside symmetry numbers (%s), so the same paths may be counted twice", s.Name, s.Degeneracy, listed(names, "and")),
				"keep the symmetry numbers or the degeneracy: the ratio of symmetry numbers is a count of paths already")
		}
		if s.Heat == nil {
			continue
		}
		of := 0.0
		for species, v := range r.net(len(m.Species)) {
			if v != 0 {
				of += v * enthalpies[species]
			}
		}
		if math.Abs(of-*s.Heat) > enthalpyTolerance {
			say(s.Name, "heat", false, fmt.Sprintf("the heat of step %s is %s, and the enthalpies of its species give %s", s.Name, energyText(*s.Heat), energyText(of)),
				"correct one of them; a heat of reaction is negative for an exotherm")
		}
	}
}

// doubtBarriers tells of barriers that are too low or too high to be those of a step.
func (m *Mechanism) doubtBarriers(n *Network, r *Reaction, say func(state, key string, fatal bool, msg, fix string)) {
	apart := r.Barrier
	if x := math.Abs(r.DeltaG); x > apart {
		apart = x
	}
	if apart > strongestBond {
		say(r.Name, "", false, fmt.Sprintf("the energies of step %s lie %s apart, more than any bond holds", r.Name, energyText(apart)),
			"give all its states on one scale, with one zero and one unit")
		return
	}
	if r.Law == AtDiffusion || r.Law == KeptFast {
		return // the author knows that there is no barrier to speak of
	}
	var ways []string
	if r.Barrier < lowBarrier {
		ways = append(ways, fmt.Sprintf("%s from %s", energyText(r.Barrier), sideText(r.From, n.Names)))
	}
	if r.Returns && r.BarrierBack < lowBarrier {
		ways = append(ways, fmt.Sprintf("%s from %s", energyText(r.BarrierBack), sideText(r.To, n.Names)))
	}
	switch {
	case len(ways) == 0:
	case r.Law == Measured:
		say(r.Name, "", false, fmt.Sprintf("the rate constant of step %s leaves a barrier of only %s at %s, and few steps are that fast", r.Name, strings.Join(ways, " and "), temperatureText(n.T)),
			"check its value, its unit and what gives its return")
	default:
		say(r.Name, "", false, fmt.Sprintf("step %s has a barrier of only %s at %s, and below 3 kcal/mol transition state theory does not give its rate", r.Name, strings.Join(ways, " and "), temperatureText(n.T)),
			"take its rate as an upper bound, or join the two states it links into one")
	}
}

// symmetric names the states of a step that have a symmetry number above 1.
func (m *Mechanism) symmetric(s *Step) []string {
	var names []string
	if s.Law == nil && symmetry(s.Energy) {
		names = append(names, s.Name)
	}
	seen := map[int]bool{}
	for _, side := range [][]Term{s.From, s.To} {
		for _, t := range side {
			if symmetry(m.Species[t.Species].Energy) && !seen[t.Species] {
				names = append(names, m.Species[t.Species].Name)
			}
			seen[t.Species] = true
		}
	}
	return names
}

func symmetry(e thermo.Energy) bool {
	if e.Molecule != nil && e.Molecule.Symmetry > 1 {
		return true
	}
	for _, c := range e.Conformers {
		if symmetry(c) {
			return true
		}
	}
	return false
}
