package kinetics

import (
	"fmt"
	"strings"
)

// LevelKind tells a state of a profile from a transition state.
type LevelKind int

// The kinds of levels.
const (
	StateLevel LevelKind = iota
	TransitionLevel
)

// Level is one level of an energy profile.
type Level struct {
	Name       string // as the path has it
	Label      string // of the species or the step, for figures
	Kind       LevelKind
	G          float64 // J/mol above the zero, at 1 mol/L
	Spectators string  // what stands beside it in this level; "" if nothing does
	Step       int     // index into Reactions; -1 for a state
}

// PathError is a path that cannot be walked or has no common zero.
type PathError struct {
	Element int // of the path, from 0; -1: the zero
	Msg     string
	Fix     string
}

func (e *PathError) Error() string { return e.Msg + "; " + e.Fix }

// Levels returns the levels of a path that alternates states and steps, such as
// "R + X", "TSa", "A". Each step is walked in the direction in which it joins
// its neighbours. Walking takes up and leaves species as the step does, so that
// what does not take part stands beside a level as a spectator and all levels
// have one composition. zero is the state whose energy is 0; nil takes the
// first state. A path that starts elsewhere is joined to the zero by the fewest
// steps. The error is a *PathError.
func (n *Network) Levels(path []string, zero []Term) ([]Level, error) {
	w, err := n.walk(path)
	if err != nil {
		return nil, err
	}
	if zero == nil {
		zero = w.sides[0]
	}
	for _, t := range zero {
		if t.Species < 0 || t.Species >= len(n.Names) || t.N < 1 {
			panic("kinetics: Levels: the zero names a species that is not there")
		}
	}
	start, err := n.fromZero(zero, w.sides[0])
	if err != nil {
		return nil, err
	}
	if err := w.carried(n, path, start); err != nil {
		return nil, err
	}
	if err := n.common(w, path, zero, start); err != nil {
		return nil, err
	}
	// What any level lacks stands beside all of them, the zero too.
	extra := make([]int, len(n.Names))
	for _, d := range w.moved {
		for s := range extra {
			extra[s] = max(extra[s], d.needs[s]-start[s]-d.change[s])
		}
	}
	reference := n.sum(zero)
	for s, k := range extra {
		reference += float64(k) * n.G[s]
	}
	levels := make([]Level, len(path))
	for i, d := range w.moved {
		l := Level{Name: strings.TrimSpace(path[i]), Step: -1}
		if d.step >= 0 {
			r := &n.Reactions[d.step]
			l.Kind, l.Step, l.Label, l.G = TransitionLevel, d.step, r.Label, r.TS
		} else {
			l.Label = sideText(w.sides[i/2], n.Labels)
			l.G = n.sum(w.sides[i/2])
		}
		var beside []Term
		for s := range extra {
			k := start[s] + d.change[s] + extra[s] - d.needs[s]
			if k > 0 {
				beside = append(beside, Term{s, k})
			}
		}
		l.G += n.sum(beside) - reference
		l.Spectators = sideText(beside, n.Labels)
		levels[i] = l
	}
	return levels, nil
}

// walked is a path with its states read and its steps directed.
type walked struct {
	sides [][]Term // of the states
	moved []moved  // by element of the path
}

// moved is one element of a path: the change of every species since the first
// state, and what the element itself takes.
type moved struct {
	step          int // of the network; -1: a state
	change, needs []int
}

// walk reads the path and directs its steps.
func (n *Network) walk(path []string) (*walked, error) {
	if len(path)%2 == 0 {
		return nil, &PathError{Element: max(len(path)-1, 0), Msg: fmt.Sprintf("a path of %d elements does not alternate states and steps", len(path)), Fix: "begin and end with a state, such as [\"R + X\", \"TSa\", \"A\"]"}
	}
	w := &walked{}
	steps := make([]int, len(path))
	for i, text := range path {
		steps[i] = -1
		if i%2 == 1 {
			k, err := n.stepNamed(text, i)
			if err != nil {
				return nil, err
			}
			steps[i] = k
			continue
		}
		side, err := parseSide(text, 0, len(text), "state", " in it", n.Names)
		if err != nil {
			e := err.(*ReactionError)
			for k := range n.Reactions {
				if n.Reactions[k].Name == strings.TrimSpace(text) {
					return nil, &PathError{Element: i, Msg: fmt.Sprintf("%q stands where a state belongs, and it is a step", text), Fix: "alternate states and steps, such as [\"R + X\", \"TSa\", \"A\"]"}
				}
			}
			return nil, &PathError{Element: i, Msg: e.Msg, Fix: e.Fix}
		}
		w.sides = append(w.sides, side)
	}
	change := make([]int, len(n.Names))
	for i := range path {
		if i%2 == 0 {
			w.moved = append(w.moved, moved{-1, append([]int(nil), change...), n.counts(w.sides[i/2])})
			continue
		}
		r := &n.Reactions[steps[i]]
		before, after := w.sides[i/2], w.sides[i/2+1]
		from, to := r.From, r.To
		ahead, back := fits(before, after, from, to), fits(before, after, to, from)
		if ahead == 0 && back == 0 {
			return nil, &PathError{Element: i, Msg: fmt.Sprintf("step %s does not join %q and %q: it joins %s and %s", r.Name, path[i-1], path[i+1], sideText(from, n.Names), sideText(to, n.Names)),
				Fix: "name the states that the step joins"}
		}
		if back > ahead {
			from, to = to, from
		}
		w.moved = append(w.moved, moved{steps[i], append([]int(nil), change...), n.counts(from)})
		for _, t := range from {
			change[t.Species] -= t.N
		}
		for _, t := range to {
			change[t.Species] += t.N
		}
	}
	return w, nil
}

// fits counts the molecules that the two states share with the sides of a step,
// 0 if either state shares none.
func fits(before, after, from, to []Term) int {
	common := func(a, b []Term) int {
		k := 0
		for _, t := range a {
			k += min(t.N, countOf(b, t.Species))
		}
		return k
	}
	x, y := common(before, from), common(after, to)
	if x == 0 || y == 0 {
		return 0
	}
	return x + y
}

// carried checks that each state holds only what the start and the steps before
// it bring.
func (w *walked) carried(n *Network, path []string, start []int) error {
	extra := make([]int, len(start)) // what the steps take beside the states
	for _, d := range w.moved {
		if d.step >= 0 {
			for s := range extra {
				extra[s] = max(extra[s], d.needs[s]-start[s]-d.change[s])
			}
		}
	}
	for i, d := range w.moved {
		for s, k := range d.needs {
			if have := start[s] + d.change[s] + extra[s]; d.step < 0 && k > have {
				return &PathError{Element: i, Msg: fmt.Sprintf("state %q needs %d %s, and the path up to there brings %d", path[i], k, n.Names[s], max(have, 0)),
					Fix: fmt.Sprintf("correct the state, or start the path with what it needs, such as %q", strings.TrimSpace(path[0])+" + "+n.Names[s])}
			}
		}
	}
	return nil
}

func (n *Network) counts(side []Term) []int {
	c := make([]int, len(n.Names))
	for _, t := range side {
		c[t.Species] += t.N
	}
	return c
}

func (n *Network) stepNamed(text string, element int) (int, error) {
	name := strings.TrimSpace(text)
	var known []string
	for k := range n.Reactions {
		if n.Reactions[k].Name == name {
			return k, nil
		}
		known = append(known, n.Reactions[k].Name)
	}
	return 0, &PathError{Element: element, Msg: fmt.Sprintf("%q is not a step of this mechanism", name), Fix: "write one of " + strings.Join(known, ", ")}
}
