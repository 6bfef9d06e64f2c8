package kinetics

import "fmt"

// carriers tells which species carry the followed unit: weight 1 for from, for
// the products and for what lies between, 0 for partners that only come and
// go. Each of the steps must keep the weight, with 0 or 1 on each side. Where
// that leaves a choice, accept tells whether the weights will do.
func (n *Network) carriers(from int, products []int, steps []int, accept func([]int8) bool) ([]int8, error) {
	a := &assignment{n: n, steps: steps, accept: accept, w: make([]int8, len(n.Names)), first: -1}
	for i := range a.w {
		a.w[i] = unknown
	}
	a.w[from] = 1
	for _, p := range products {
		a.w[p] = 1
	}
	switch {
	case a.solve():
		return a.w, nil
	case a.tries > mostTries:
		return nil, &LimitError{Species: from, Msg: fmt.Sprintf("which species carry %s could not be told in %d tries", n.Names[from], mostTries), Fix: chargeAndRun}
	}
	where := ""
	if a.first >= 0 {
		r := &n.Reactions[a.first]
		where = fmt.Sprintf(" (step %s, %s to %s)", r.Name, sideText(r.From, n.Names), sideText(r.To, n.Names))
	}
	return nil, &LimitError{Species: from, Msg: fmt.Sprintf("not first order in %s%s", n.Names[from], where), Fix: chargeAndRun}
}

const chargeAndRun = "the limit needs a charge and a run"

const unknown int8 = -1

// mostTries bounds the search for weights.
const mostTries = 4096

// assignment is a search for weights.
type assignment struct {
	n      *Network
	steps  []int
	accept func([]int8) bool
	w      []int8
	tries  int
	first  int // the first step seen to fail; -1: none
}

// solve fills in all weights and reports whether it could.
func (a *assignment) solve() bool {
	a.tries++
	if a.tries > mostTries || !a.propagate() {
		return false
	}
	s, guesses := a.choose()
	if s < 0 {
		return a.accept(a.w)
	}
	saved := append([]int8(nil), a.w...)
	for _, g := range guesses {
		copy(a.w, saved)
		a.w[s] = g
		if a.solve() {
			return true
		}
	}
	copy(a.w, saved)
	return false
}

// side returns the known weight of one side and the terms that are open.
func (a *assignment) side(side []Term) (sum int, open []Term) {
	for _, t := range side {
		if a.w[t.Species] == unknown {
			open = append(open, t)
		} else {
			sum += t.N * int(a.w[t.Species])
		}
	}
	return sum, open
}

// propagate draws every forced conclusion; false: a step cannot keep the weight.
func (a *assignment) propagate() bool {
	for again := true; again; {
		again = false
		for _, i := range a.steps {
			changed, fits := a.step(&a.n.Reactions[i])
			if !fits {
				if a.first < 0 {
					a.first = i
				}
				return false
			}
			again = again || changed
		}
	}
	return true
}

// step draws the conclusions of one step.
func (a *assignment) step(r *Reaction) (changed, fits bool) {
	set := func(terms []Term, w int8) {
		for _, t := range terms {
			a.w[t.Species] = w
			changed = true
		}
	}
	left, openLeft := a.side(r.From)
	right, openRight := a.side(r.To)
	total := max(left, right)
	if total > 1 {
		return false, false
	}
	for _, s := range []struct {
		sum   int
		open  []Term
		other []Term
	}{{left, openLeft, openRight}, {right, openRight, openLeft}} {
		switch {
		case total == 1 && s.sum == 1:
			set(s.open, 0) // a side holds at most one carrier
		case total == 1:
			var may []Term
			for _, t := range s.open {
				if t.N == 1 {
					may = append(may, t)
				} else {
					set([]Term{t}, 0) // two of a carrier would be two units
				}
			}
			if len(may) == 0 {
				return changed, false
			}
			if len(may) == 1 {
				set(may, 1)
			}
		case len(s.open) == 0:
			set(s.other, 0)
		default:
			for _, t := range s.open {
				if t.N > 1 {
					set([]Term{t}, 0)
				}
			}
		}
		if changed {
			return true, true // read the sides again
		}
	}
	return false, true
}

// choose picks an open species and the order in which to try its weights; -1:
// none is open. What stands across from a carrier is tried as the carrier first.
func (a *assignment) choose() (int, []int8) {
	for _, i := range a.steps {
		r := &a.n.Reactions[i]
		left, openLeft := a.side(r.From)
		right, openRight := a.side(r.To)
		if max(left, right) == 1 {
			if open := append(openLeft, openRight...); len(open) > 0 {
				return open[0].Species, []int8{1, 0}
			}
		}
	}
	for s, w := range a.w {
		if w == unknown {
			return s, []int8{0, 1}
		}
	}
	return -1, nil
}
