package kinetics

import (
	"fmt"
	"math"
	"strings"
)

// home tells whether T is the mechanism's own temperature.
func (m *Mechanism) home(T float64) bool {
	return math.Abs(T-m.Temperature) <= 1e-9*m.Temperature
}

// mixed tells whether the energies of step i partly follow temperature and
// partly do not. A barrier is a difference and stands apart.
func (m *Mechanism) mixed(i int) (Complaint, bool) {
	s := &m.Steps[i]
	var follow, constant, both []string
	put := func(name string, follows, mixed bool) {
		switch {
		case mixed:
			both = append(both, name)
		case follows:
			follow = append(follow, name)
		default:
			constant = append(constant, name)
		}
	}
	if s.Above {
		if s.Energy.Mixed() {
			both = append(both, s.Name)
		}
	} else {
		put(s.Name, s.Energy.Follows(), s.Energy.Mixed())
	}
	for _, side := range [][]Term{s.From, s.To} {
		for _, t := range side {
			put(m.Species[t.Species].Name, m.Species[t.Species].Energy.Follows(), m.Species[t.Species].Energy.Mixed())
		}
	}
	c := Complaint{State: s.Name, Fix: "give H and S for all states of the step (H = 0, S = 0 for one that sets the zero), or G for all of them"}
	switch {
	case len(both) > 0:
		c.Msg = fmt.Sprintf("the energy of %s in step %s is in part a constant G and in part follows temperature", listText(both), s.Name)
	case len(follow) > 0 && len(constant) > 0:
		c.Msg = fmt.Sprintf("step %s mixes energies that follow temperature (%s) with a constant G (%s)", s.Name, listText(follow), listText(constant))
	default:
		return Complaint{}, false
	}
	return c, true
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
	if m.home(T) {
		return ""
	}
	s := &m.Steps[step]
	what, price := "", "barrier"
	species := false
	for _, side := range [][]Term{s.From, s.To} {
		for _, t := range side {
			species = species || !m.Species[t.Species].Energy.Follows()
		}
	}
	switch {
	case s.Above && !s.Energy.Follows():
		what = "its barrier is"
	case !s.Above && !s.Energy.Follows():
		what = "its G is"
	case species:
		what, price = "the G of its species is", "reaction energy"
	default:
		return ""
	}
	entropy := "ΔS‡"
	if price != "barrier" {
		entropy = "ΔS"
	}
	span := math.Abs(T - m.Temperature)
	return fmt.Sprintf("%s: %s held constant from %s to %s; over %.0f K an unknown %s of −30 cal/mol/K would move this %s by %s",
		s.Name, what, temperatureText(m.Temperature), temperatureText(T), span, entropy, price, energyText(math.Abs(unknownEntropy)*span))
}
