package kinetics

import (
	"fmt"
	"math"
	"strings"
)

// mostCompositions bounds the search for a way from the zero to a state.
const mostCompositions = 20000

// fromZero returns the composition, starting from zero and walking the fewest
// steps, that holds the state; what steps take up beside it counts negative
// until the caller completes the levels.
func (n *Network) fromZero(zero, state []Term) ([]int, error) {
	u := newUnion(len(n.Names))
	for i := range n.Reactions {
		u.step(n.Reactions[i].From, n.Reactions[i].To)
	}
	for _, t := range state {
		joined := countOf(zero, t.Species) >= t.N
		for _, z := range zero {
			joined = joined || u.root(z.Species) == u.root(t.Species)
		}
		if !joined {
			return nil, &PathError{Element: -1, Msg: fmt.Sprintf("%s and the zero %s belong to parts of the mechanism with no common state, so they have no common zero", n.Names[t.Species], sideText(zero, n.Names)),
				Fix: "add the step that joins them, or draw them on two profiles"}
		}
	}
	for _, borrow := range []bool{false, true} {
		if c := n.search(n.counts(zero), n.counts(state), borrow); c != nil {
			return c, nil
		}
	}
	return nil, &PathError{Element: -1, Msg: fmt.Sprintf("no steps lead from the zero %s to the first state %s", sideText(zero, n.Names), sideText(state, n.Names)),
		Fix: "take a zero that holds all that the states are made of, such as zero = \"R + X\""}
}

// search goes through compositions breadth first, in the order of the steps.
// With borrow, a step may take species that are not there if one of its
// reactants is.
func (n *Network) search(start, want []int, borrow bool) []int {
	key := func(c []int) string {
		var b strings.Builder
		for _, k := range c {
			fmt.Fprintf(&b, "%d ", k)
		}
		return b.String()
	}
	holds := func(c []int) bool {
		for s, k := range want {
			if k > 0 && c[s] < k {
				return false
			}
		}
		return true
	}
	seen := map[string]bool{key(start): true}
	queue := [][]int{start}
	for len(queue) > 0 && len(seen) < mostCompositions {
		c := queue[0]
		queue = queue[1:]
		if holds(c) {
			return c
		}
		for i := range n.Reactions {
			r := &n.Reactions[i]
			for _, way := range [2][2][]Term{{r.From, r.To}, {r.To, r.From}} {
				all, some := true, false
				for _, t := range way[0] {
					all = all && c[t.Species] >= t.N
					some = some || c[t.Species] >= t.N
				}
				if !all && !(borrow && some) {
					continue
				}
				next := append([]int(nil), c...)
				for _, t := range way[0] {
					next[t.Species] -= t.N
				}
				for _, t := range way[1] {
					next[t.Species] += t.N
				}
				if k := key(next); !seen[k] {
					seen[k] = true
					queue = append(queue, next)
				}
			}
		}
	}
	return nil
}

// common refuses a path to levels whose height above the zero nothing gives:
// beyond a step without return between species that have no energy.
func (n *Network) common(w *walked, path []string, zero []Term, start []int) error {
	if n.frame == nil {
		return nil
	}
	base := n.counts(zero)
	for i, d := range w.moved {
		row := make([]float64, len(n.Names))
		for s := range row {
			row[s] = float64(start[s] + d.change[s] - base[s])
		}
		if d.step >= 0 {
			r := &n.Reactions[d.step]
			for s, k := range n.counts(r.From) { // its height is known above From
				row[s] += float64(k - d.needs[s])
			}
		}
		if !n.frame.joins(row) {
			var open []string
			for _, e := range w.moved[:i+1] {
				if e.step >= 0 && math.IsNaN(n.Reactions[e.step].DeltaG) {
					open = append(open, n.Reactions[e.step].Name)
				}
			}
			why := "nothing gives the free energies that join them"
			if len(open) > 0 {
				why = fmt.Sprintf("nothing gives the free energy of reaction of step %s", open[0])
			}
			element := i
			if i == 0 {
				element = -1
			}
			return &PathError{Element: element, Msg: fmt.Sprintf("%s and the zero %s have no common zero: %s", strings.TrimSpace(path[i]), sideText(zero, n.Names), why),
				Fix: "give the species energies, or end the path before that step"}
		}
	}
	return nil
}
