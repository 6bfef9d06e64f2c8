package kind

import (
	"fmt"
	"slices"
	"strings"

	"saddlebook/content/fault"
	"saddlebook/kinetics"
	"saddlebook/kinetics/control"
)

// statesOfCatalyst finds the species that share the total of the catalyst, for
// the composition of a run.
func statesOfCatalyst(m *kinetics.Mechanism, p *control.Problem) ([]int, *fault.Problem) {
	lists := sharingTotal(m, p)
	name := m.Species[p.Catalyst].Name
	var msg string
	switch len(lists) {
	case 1:
		return lists[0], nil
	case 0:
		msg = fmt.Sprintf("no conserved total counts %s and leaves out what is formed, so its states are not known", name)
	default:
		var ways []string
		for _, list := range lists {
			ways = append(ways, listWords(namesOf(m, list)))
		}
		msg = fmt.Sprintf("the states of %s can be told in more than one way: %s", name, strings.Join(ways, ", or "))
	}
	return nil, problem([]string{"catalyst"}, msg, "name its states, "+steadyExample(m, p))
}

// sharingTotal is every list of species that share a total with the catalyst.
func sharingTotal(m *kinetics.Mechanism, p *control.Problem) [][]int {
	var made []int
	for _, side := range [][]kinetics.Term{p.RateOf, p.Pair[0], p.Pair[1]} {
		for _, t := range side {
			made = append(made, t.Species)
		}
	}
	return control.StatesOf(m, p.Catalyst, made)
}

// steadyExample writes the key steady with the states of the catalyst, as far
// as they are known.
func steadyExample(m *kinetics.Mechanism, p *control.Problem) string {
	list := `"int", "rest"`
	if lists := sharingTotal(m, p); len(lists) > 0 {
		if others := slices.DeleteFunc(lists[0], func(i int) bool { return i == p.Catalyst }); len(others) > 0 {
			list = `"` + strings.Join(namesOf(m, others), `", "`) + `"`
		}
	}
	return "such as steady = [" + list + "]"
}

func namesOf(m *kinetics.Mechanism, species []int) []string {
	var out []string
	for _, i := range species {
		out = append(out, m.Species[i].Name)
	}
	return out
}

// resting words where the total rests: the state that holds most of it, and
// every state within 10 points of that.
func (v *controlValue) resting(q controlPoint, share func(species int) string) string {
	if q.Resting < 0 {
		return ""
	}
	var states []int
	for i := range v.Names {
		if float64(q.share(i)) >= float64(q.share(q.Resting))-0.10 {
			states = append(states, i)
		}
	}
	slices.SortStableFunc(states, func(a, b int) int {
		switch x, y := q.share(a), q.share(b); {
		case x > y:
			return -1
		case x < y:
			return 1
		}
		return 0
	})
	var parts []string
	for _, i := range states {
		parts = append(parts, fmt.Sprintf("%s (%s)", v.Labels[i], share(i)))
	}
	who := "The catalyst"
	if q.Counted != v.Catalyst {
		who = v.Labels[q.Counted]
	}
	return who + " rests as " + listWords(parts) + "."
}
