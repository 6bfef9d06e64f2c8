package kinetics

import (
	"fmt"
	"math"
	"strings"

	"saddlebook/kinetics/thermo"
)

// home tells whether T is the mechanism's own temperature.
func (m *Mechanism) home(T float64) bool {
	return math.Abs(T-m.Temperature) <= 1e-9*m.Temperature
}

// A basis is one thing that a step rests on: an energy or a constant.
type basis struct {
	name    string
	follows bool
	both    bool    // in part it follows temperature, in part not
	at      float64 // K, where it holds if it does not follow
}

// bases returns what the scale of a step rests on: all that must follow
// temperature together or not at all. A barrier above the reactants, and a rate
// constant without Ea, are differences and stand apart from what gives the
// return.
func (m *Mechanism) bases(i int) []basis {
	s := &m.Steps[i]
	var out []basis
	energy := func(name string, e thermo.Energy) {
		out = append(out, basis{name, e.Follows(), e.Mixed(), m.Temperature})
	}
	constant := func(name string, c *Constant) {
		out = append(out, basis{name, c.Ea != nil, false, c.At})
	}
	switch {
	case s.Law == nil && s.Above:
		if s.Energy.Mixed() {
			energy(s.Name, s.Energy)
		}
	case s.Law == nil:
		energy(s.Name, s.Energy)
	case s.Law.Forward != nil && (s.Law.Forward.Ea != nil || s.Law.Back != nil):
		constant("k", s.Law.Forward)
	}
	switch {
	case s.Law != nil && s.Law.Back != nil:
		constant("k-back", s.Law.Back)
	case s.K != nil:
		out = append(out, basis{"K", s.Heat != nil, false, s.K.At})
	case s.Law == nil || s.Returns:
		for _, side := range [][]Term{s.From, s.To} {
			for _, t := range side {
				if sp := &m.Species[t.Species]; !sp.Unknown {
					energy(sp.Name, sp.Energy)
				}
			}
		}
	}
	return out
}

// mixed tells whether what step i rests on partly follows temperature and
// partly does not, at T (K); NaN: at any temperature.
func (m *Mechanism) mixed(i int, T float64) (Complaint, bool) {
	s := &m.Steps[i]
	var follow, constant, both []string
	for _, b := range m.bases(i) {
		switch {
		case b.both && !sameTemperature(T, b.at):
			both = append(both, b.name)
		case b.follows:
			follow = append(follow, b.name)
		case !sameTemperature(T, b.at):
			constant = append(constant, b.name)
		}
	}
	c := Complaint{State: s.Name}
	switch {
	case len(both) > 0:
		c.Msg = fmt.Sprintf("the energy of %s in step %s is in part a constant G and in part follows temperature", listText(both), s.Name)
		c.Fix = "give H and S for all states of the step (H = 0, S = 0 for one that sets the zero), or G for all of them"
	case len(follow) == 0 || len(constant) == 0:
		return Complaint{}, false
	case s.Law == nil && s.K == nil:
		c.Msg = fmt.Sprintf("step %s mixes energies that follow temperature (%s) with a constant G (%s)", s.Name, listText(follow), listText(constant))
		c.Fix = "give H and S for all states of the step (H = 0, S = 0 for one that sets the zero), or G for all of them"
	default:
		c.Msg = fmt.Sprintf("step %s mixes what follows temperature (%s) with what is constant (%s)", s.Name, listText(follow), listText(constant))
		c.Fix = "give k and k-back both an Ea, K a heat and species H and S, or none of them"
	}
	return c, true
}

// mixedHome returns the temperature at which a step that mixes can be used.
func (m *Mechanism) mixedHome(i int) float64 {
	for _, b := range m.bases(i) {
		if !b.follows {
			return b.at
		}
	}
	return m.Temperature
}

func listText(names []string) string {
	var once []string
	seen := map[string]bool{}
	for _, n := range names {
		if !seen[n] {
			seen[n] = true
			once = append(once, n)
		}
	}
	return strings.Join(once, ", ")
}

// unknownEntropy prices a constant G: −30 cal/mol/K in J/mol/K, the size that
// ΔS‡ has when two molecules meet (common practice).
const unknownEntropy = -30 * joulesPerCalorie

// Held returns what is held constant when the mechanism is used at T (K), one
// sentence for each such step, with its price. At the mechanism's own
// temperature nothing is.
func (m *Mechanism) Held(T float64) []string {
	var out []string
	for i := range m.Steps {
		if text := m.HeldStep(i, T); text != "" {
			out = append(out, text)
		}
	}
	return out
}

// HeldStep is Held for the step of that number alone; "" if nothing is held.
func (m *Mechanism) HeldStep(step int, T float64) string {
	s := &m.Steps[step]
	type held struct {
		what, of, entropy string
		at                float64
	}
	const barrier, reaction = "barrier", "reaction energy"
	var all []held
	add := func(what, of string, at float64) {
		entropy := "ΔS‡"
		if of == reaction {
			entropy = "ΔS"
		}
		all = append(all, held{what, of, entropy, at})
	}
	away := !m.home(T)
	switch {
	case s.Law == nil && away && !s.Energy.Follows():
		if s.Above {
			add("its barrier is", barrier, m.Temperature)
		} else {
			add("its G is", barrier, m.Temperature)
		}
	case s.Law != nil && s.Law.Forward != nil && s.Law.Forward.heldAt(T):
		add("the ΔG‡ that k implies is", barrier, s.Law.Forward.At)
	}
	switch {
	case s.Law != nil && s.Law.Back != nil:
		if s.Law.Back.heldAt(T) && s.Returns {
			add("the ΔG‡ that k-back implies is", barrier, s.Law.Back.At)
		}
	case s.K != nil:
		if s.Heat == nil && s.Returns && !sameTemperature(T, s.K.At) {
			add("the ΔG that K implies is", reaction, s.K.At)
		}
	case away && (len(all) == 0 || s.Law != nil && s.Returns):
		for _, side := range [][]Term{s.From, s.To} {
			for _, t := range side {
				if sp := &m.Species[t.Species]; !sp.Unknown && !sp.Energy.Follows() && (len(all) == 0 || all[len(all)-1].of == barrier) {
					add("the G of its species is", reaction, m.Temperature)
				}
			}
		}
	}
	var texts []string
	for _, h := range all {
		span := math.Abs(T - h.at)
		texts = append(texts, fmt.Sprintf("%s held constant from %s to %s; over %.0f K an unknown %s of −30 cal/mol/K would move this %s by %s",
			h.what, temperatureText(h.at), temperatureText(T), span, h.entropy, h.of, energyText(math.Abs(unknownEntropy)*span)))
	}
	if len(texts) == 0 {
		return ""
	}
	return s.Name + ": " + strings.Join(texts, "; ")
}
