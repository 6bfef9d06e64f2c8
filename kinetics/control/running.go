package control

import (
	"fmt"
	"math"
	"slices"

	"saddlebook/kinetics"
)

// system is the part of a network that runs at a point.
type system struct {
	n     *kinetics.Network
	held  []float64 // mol/L; NaN: free
	total []float64 // mol/L; 0 where none is stated
	free  []int     // the free species that can be there
	place []int     // species to its place in free; -1
	steps []step
	net   [][]float64 // by free species, then step: the change in one turn
}

// step is one reaction that runs, held species put into its rate constants.
type step struct {
	r        *kinetics.Reaction
	number   int     // in n.Reactions
	from, to []place // free species
	lnF, lnB float64 // ln of rate constant times held concentrations; −Inf: never that way
}

// place is one free species of a side, n times.
type place struct{ at, n int }

// newSystem finds what runs. Every free species has to be there, or to be
// stated as absent.
func newSystem(n *kinetics.Network, p *Problem) (*system, error) {
	species := len(n.Names)
	s := &system{n: n, held: p.Held, total: make([]float64, species), place: make([]int, species)}
	seeds := make([]bool, species)
	for i := range species {
		if t := p.total(i); !math.IsNaN(t) {
			s.total[i] = t
		}
		seeds[i] = p.Held[i] > 0 || s.total[i] > 0
	}
	there := closure(n, seeds, p.Held)
	var lacking []int
	for i := range species {
		if !there[i] && math.IsNaN(p.Held[i]) && math.IsNaN(p.total(i)) {
			lacking = append(lacking, i)
		}
	}
	if lacking = without(n, p, seeds, lacking); len(lacking) > 0 {
		what := "concentration"
		if len(lacking) > 1 {
			what = "concentrations"
		}
		return nil, &PointError{Of: ErrNotStated, Species: lacking, Step: -1,
			Msg: fmt.Sprintf("%s cannot form from what is stated", names(n, lacking)),
			Fix: fmt.Sprintf("state the %s, or the total where it is a catalyst; 0 M if there is none", what)}
	}
	for i := range s.place {
		s.place[i] = -1
		if math.IsNaN(p.Held[i]) && there[i] {
			s.place[i] = len(s.free)
			s.free = append(s.free, i)
		}
	}
	for k := range n.Reactions {
		if st := s.step(k, there); !math.IsInf(st.lnF, -1) || !math.IsInf(st.lnB, -1) {
			s.steps = append(s.steps, st)
		}
	}
	s.net = make([][]float64, len(s.free))
	for i := range s.net {
		s.net[i] = make([]float64, len(s.steps))
	}
	for k, st := range s.steps {
		for _, t := range st.from {
			s.net[t.at][k] -= float64(t.n)
		}
		for _, t := range st.to {
			s.net[t.at][k] += float64(t.n)
		}
	}
	return s, nil
}

// closure marks what can form from what is there. A species held at 0 is taken
// away as it forms.
func closure(n *kinetics.Network, seeds []bool, held []float64) []bool {
	there := slices.Clone(seeds)
	has := func(side []kinetics.Term) bool {
		for _, t := range side {
			if !there[t.Species] {
				return false
			}
		}
		return true
	}
	for more := true; more; {
		more = false
		put := func(side []kinetics.Term) {
			for _, t := range side {
				if !there[t.Species] && math.IsNaN(held[t.Species]) {
					there[t.Species], more = true, true
				}
			}
		}
		for i := range n.Reactions {
			r := &n.Reactions[i]
			if has(r.From) {
				put(r.To)
			}
			if r.Returns && has(r.To) {
				put(r.From)
			}
		}
	}
	return there
}

// without keeps of the species that are not there the fewest whose presence
// would make the others: the catalyst if it is one of them, else those named
// first in the mechanism.
func without(n *kinetics.Network, p *Problem, seeds []bool, lacking []int) []int {
	kept := slices.Clone(lacking)
	for i := len(lacking) - 1; i >= 0; i-- {
		if lacking[i] == p.Catalyst {
			continue
		}
		trial := slices.Clone(seeds)
		for _, s := range kept {
			trial[s] = trial[s] || s != lacking[i]
		}
		there := closure(n, trial, p.Held)
		if there[lacking[i]] {
			kept = slices.DeleteFunc(kept, func(s int) bool { return s == lacking[i] })
		}
	}
	return kept
}

func (s *system) step(k int, there []bool) step {
	r := &s.n.Reactions[k]
	st := step{r: r, number: k, lnF: r.LnForward, lnB: r.LnBack}
	put := func(side []kinetics.Term, ln *float64) (free []place) {
		for _, t := range side {
			switch i := s.place[t.Species]; {
			case i >= 0:
				free = append(free, place{i, t.N})
			case there[t.Species]:
				*ln += float64(t.N) * math.Log(s.held[t.Species])
			default:
				*ln = math.Inf(-1)
			}
		}
		return free
	}
	st.from, st.to = put(r.From, &st.lnF), put(r.To, &st.lnB)
	return st
}

// again puts the rate constants of another network of the same mechanism in.
func (s *system) again(n *kinetics.Network) *system {
	c := *s
	c.n = n
	there := make([]bool, len(n.Names))
	for i := range there {
		there[i] = c.place[i] >= 0 || c.held[i] > 0
	}
	c.steps = make([]step, len(s.steps))
	for k := range s.steps {
		c.steps[k] = c.step(s.steps[k].number, there)
	}
	return &c
}

// formed returns, by step, how much of a sum one turn of it makes.
func (s *system) formed(sum []kinetics.Term) []float64 {
	out := make([]float64, len(s.steps))
	for k, st := range s.steps {
		for _, p := range sum {
			for _, t := range st.r.From {
				if t.Species == p.Species {
					out[k] -= float64(p.N * t.N)
				}
			}
			for _, t := range st.r.To {
				if t.Species == p.Species {
					out[k] += float64(p.N * t.N)
				}
			}
		}
	}
	return out
}

// possible refuses a point at which steady state means standstill.
func (s *system) possible(p *Problem, sum []kinetics.Term) error {
	order := identity(len(s.steps))
	null := nullspace(s.net, order)
	makes := func(null [][]float64) bool {
		f := s.formed(sum)
		for _, v := range null {
			if math.Abs(dot(f, v)) > small {
				return true
			}
		}
		return false
	}
	if !makes(null) {
		return s.standstill(p, sum, makes)
	}
	for k, st := range s.steps {
		if !math.IsInf(st.lnF, -1) && !math.IsInf(st.lnB, -1) {
			continue
		}
		runs := false
		for _, v := range null {
			runs = runs || math.Abs(v[k]) > small
		}
		if !runs {
			return &PointError{Of: ErrNoSteadyState, Species: s.species(st), Step: st.r.Step,
				Msg: fmt.Sprintf("there is no steady state: %s has no return and nothing brings back what it uses up (%s)", st.r.Name, names(s.n, s.species(st))),
				Fix: "state the concentrations of its products, leave the step out, or take the composition of a run"}
		}
	}
	return nil
}

// totalsKept refuses a total that no conservation law of the free species
// holds: some state that it counts is held, and exchanges with the rest.
func (s *system) totalsKept(p *Problem) error {
	for i, of := range s.free {
		if !(p.total(of) > 0) || s.conserved(i, nil) {
			continue
		}
		var held []int
		for h := range p.Held {
			if !math.IsNaN(p.Held[h]) && h != of && s.conserved(i, []int{h}) {
				held = append(held, h)
			}
		}
		into, fix := "species that are held", "let every state of it be at its steady state"
		if len(held) > 0 {
			into = names(s.n, held)
			fix = fmt.Sprintf("leave out the concentration of %s, which then is at steady state", into)
			into += ", which is held"
			if len(held) > 1 {
				fix = fmt.Sprintf("leave out the concentrations of %s, which then are at steady state", names(s.n, held))
				into = names(s.n, held) + ", which are held"
			}
		}
		return &PointError{Of: ErrNotStated, Species: append([]int{of}, held...), Step: -1,
			Msg: fmt.Sprintf("the total of %s is not kept: it exchanges with %s", s.n.Names[of], into), Fix: fix}
	}
	return nil
}

// conserved tells whether some law counts the free species i and, with the same
// sign, every one of more, which are taken as free besides.
func (s *system) conserved(i int, more []int) bool {
	rows := make([][]float64, len(s.steps))
	for k, st := range s.steps {
		for j := range s.free {
			rows[k] = append(rows[k], s.net[j][k])
		}
		for _, h := range more {
			n := 0
			for _, t := range st.r.From {
				if t.Species == h {
					n -= t.N
				}
			}
			for _, t := range st.r.To {
				if t.Species == h {
					n += t.N
				}
			}
			rows[k] = append(rows[k], float64(n))
		}
	}
	for _, w := range nullspace(rows, identity(len(s.free)+len(more))) {
		counts := math.Abs(w[i]) > small
		for j := range more {
			counts = counts && w[i]*w[len(s.free)+j] > small
		}
		if counts {
			return true
		}
	}
	return false
}

// species returns the free species of a step.
func (s *system) species(st step) []int {
	var out []int
	for _, side := range [][]place{st.from, st.to} {
		for _, t := range side {
			if !slices.Contains(out, s.free[t.at]) {
				out = append(out, s.free[t.at])
			}
		}
	}
	return out
}

// standstill names the fewest free species that would have to be held.
func (s *system) standstill(p *Problem, sum []kinetics.Term, makes func([][]float64) bool) error {
	flows := func(held map[int]bool) bool {
		var rows [][]float64
		for i, row := range s.net {
			if !held[s.free[i]] {
				rows = append(rows, row)
			}
		}
		return makes(nullspace(rows, identity(len(s.steps))))
	}
	of := make([]int, len(sum))
	for i, t := range sum {
		of[i] = t.Species
	}
	hold := map[int]bool{}
	for _, i := range s.free {
		hold[i] = true
	}
	if !flows(hold) {
		return &PointError{Of: ErrNoRate, Species: of, Step: -1, Msg: fmt.Sprintf("no step that runs at this composition makes %s", names(s.n, of)), Fix: "check the concentrations, or ask for another product"}
	}
	// Species with a total are the first to be let go, then those named last.
	order := slices.Clone(s.free)
	slices.Reverse(order)
	slices.SortStableFunc(order, func(a, b int) int {
		return boolOrder(s.total[a] > 0 || a == p.Catalyst) - boolOrder(s.total[b] > 0 || b == p.Catalyst)
	})
	for _, i := range order {
		delete(hold, i)
		if !flows(hold) {
			hold[i] = true
		}
	}
	var lacking []int
	for _, i := range s.free {
		if hold[i] {
			lacking = append(lacking, i)
		}
	}
	return &PointError{Of: ErrNotStated, Species: lacking, Step: -1,
		Msg: fmt.Sprintf("%s comes to a standstill: nothing replaces, or nothing takes away, %s", names(s.n, of), names(s.n, lacking)),
		Fix: fmt.Sprintf("state the concentration of %s", names(s.n, lacking))}
}

func boolOrder(first bool) int {
	if first {
		return -1
	}
	return 0
}
