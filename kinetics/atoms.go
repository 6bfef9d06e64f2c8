package kinetics

import (
	"errors"
	"fmt"
	"strconv"
	"strings"
)

// checkFormulas complains of every formula that cannot be read and of every
// step that does not balance in atoms and charge. A step is checked if all its
// species have a formula. Where some of a step have one and some do not, one
// warning names all that do not.
func (m *Mechanism) checkFormulas(say func(state, key string, fatal bool, msg, fix string)) {
	formulas := make([]*Formula, len(m.Species))
	broken := make([]bool, len(m.Species))
	for i, s := range m.Species {
		if s.Formula == "" {
			continue
		}
		f, err := ParseFormula(s.Formula)
		var bad *FormulaError
		if errors.As(err, &bad) {
			broken[i] = true
			say(s.Name, "formula", true, bad.Msg, bad.Fix)
			continue
		}
		formulas[i] = &f
	}
	lacking := make([]bool, len(m.Species))
	var unchecked []string
	for _, s := range m.Steps {
		var known, without []int
		skip := false
		for _, side := range [][]Term{s.From, s.To} {
			for _, t := range side {
				switch {
				case broken[t.Species]:
					skip = true
				case formulas[t.Species] == nil:
					without = append(without, t.Species)
				default:
					known = append(known, t.Species)
				}
			}
		}
		switch {
		case skip || len(known) == 0:
		case len(without) > 0:
			unchecked = append(unchecked, s.Name)
			for _, i := range without {
				lacking[i] = true
			}
		default:
			m.balance(s, formulas, say)
		}
	}
	var names []string
	for i, s := range m.Species {
		if lacking[i] {
			names = append(names, s.Name)
		}
	}
	if len(names) > 0 {
		verb, object := "has", "it"
		if len(names) > 1 {
			verb, object = "have", "them"
		}
		steps := "step " + unchecked[0]
		if len(unchecked) > 1 {
			steps = "steps " + listed(unchecked, "and")
		}
		say(names[0], "", false, fmt.Sprintf("%s %s no formula and others in the same step do, so the atoms of %s are not checked", listed(names, "and"), verb, steps),
			fmt.Sprintf("give %s a formula, or leave formulas out of the whole step", object))
	}
}

// balance complains if the step does not have the same atoms and charge on both
// sides. Every species of it has a formula.
func (m *Mechanism) balance(s Step, formulas []*Formula, say func(state, key string, fatal bool, msg, fix string)) {
	left, right := sumOf(s.From, formulas), sumOf(s.To, formulas)
	lost, gained := left.less(right), right.less(left)
	if len(lost.Atoms) == 0 && lost.Charge == 0 {
		return
	}
	var changes []string
	if list := lost.positive(); len(list) > 0 {
		changes = append(changes, "loses "+listed(list, "and"))
	}
	list := gained.positive()
	if q := gained.Charge; q != 0 {
		list = append(list, "charge "+chargeText(q))
	}
	if len(list) > 0 {
		changes = append(changes, "gains "+listed(list, "and"))
	}
	var names []string
	seen := map[int]bool{}
	for _, side := range [][]Term{s.From, s.To} {
		for _, t := range side {
			if !seen[t.Species] {
				names = append(names, m.Species[t.Species].Name)
			}
			seen[t.Species] = true
		}
	}
	fix := "correct the reaction, or the formula of " + listed(names, "or")
	switch {
	case gained.whole():
		fix = fmt.Sprintf("name what is missing on the left side (%s), or correct the formula of %s", gained, listed(names, "or"))
	case lost.whole():
		fix = fmt.Sprintf("name what is missing on the right side (%s), or correct the formula of %s", lost, listed(names, "or"))
	}
	say(s.Name, "reaction", true, fmt.Sprintf("step %s %s: left %s, right %s", s.Name, strings.Join(changes, " and "), left, right), fix)
}

// sumOf is what one side is made of.
func sumOf(side []Term, formulas []*Formula) Formula {
	atoms, charge := map[string]int{}, 0
	for _, t := range side {
		f := formulas[t.Species]
		charge += t.N * f.Charge
		for _, a := range f.Atoms {
			atoms[a.Symbol] += t.N * a.N
		}
	}
	return newFormula(atoms, charge)
}

// less is f without g; counts may be negative.
func (f Formula) less(g Formula) Formula {
	atoms := map[string]int{}
	for _, a := range f.Atoms {
		atoms[a.Symbol] += a.N
	}
	for _, a := range g.Atoms {
		atoms[a.Symbol] -= a.N
	}
	return newFormula(atoms, f.Charge-g.Charge)
}

// positive lists the atoms of a difference that there are more of: "2 H".
func (f Formula) positive() []string {
	var list []string
	for _, a := range f.Atoms {
		if a.N > 0 {
			list = append(list, strconv.Itoa(a.N)+" "+a.Symbol)
		}
	}
	return list
}

// whole tells whether a difference can be a species of its own: atoms, or
// electrons alone.
func (f Formula) whole() bool {
	for _, a := range f.Atoms {
		if a.N < 0 {
			return false
		}
	}
	return len(f.Atoms) > 0 || f.Charge < 0
}

// listed joins names as a sentence has them: "R, X and A".
func listed(names []string, word string) string {
	if n := len(names); n > 1 {
		return strings.Join(names[:n-1], ", ") + " " + word + " " + names[n-1]
	}
	return strings.Join(names, "")
}
