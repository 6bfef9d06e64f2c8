package control

import (
	"math/bits"
	"slices"

	"saddlebook/kinetics"
)

// mostSpecies and mostLaws bound the search of StatesOf; networks that people
// write need a few.
const (
	mostSpecies = 64
	mostLaws    = 2000
)

// StatesOf returns the species that share a conserved total with the species of,
// which is among them: those of the conservation law with the fewest species
// that counts it and none of without, such as the product. With several such
// laws of one size, more than one list comes back; none, if there is no law or
// the network is too large to tell.
func StatesOf(m *kinetics.Mechanism, of int, without []int) [][]int {
	if len(m.Species) > mostSpecies {
		return nil
	}
	var fewest [][]int
	for _, l := range elementaryLaws(m) {
		if l.set&(1<<of) == 0 || slices.ContainsFunc(without, func(s int) bool { return l.set&(1<<s) != 0 }) {
			continue
		}
		var states []int
		for s := range m.Species {
			if l.set&(1<<s) != 0 {
				states = append(states, s)
			}
		}
		switch {
		case len(fewest) == 0 || len(states) < len(fewest[0]):
			fewest = [][]int{states}
		case len(states) == len(fewest[0]):
			fewest = append(fewest, states)
		}
	}
	return fewest
}

// elementaryLaw is a conservation law with no weight below 0, and what each step adds to
// the sum that it keeps.
type elementaryLaw struct {
	w, change []int
	set       uint64 // species with a weight
}

// elementaryLaws returns the conservation laws with no weight below 0 that have
// no other such law within them: species by species at first, then step by step
// the sums that the step leaves unchanged (Farkas' algorithm).
func elementaryLaws(m *kinetics.Mechanism) []elementaryLaw {
	laws := make([]elementaryLaw, len(m.Species))
	for s := range laws {
		laws[s] = elementaryLaw{w: make([]int, len(m.Species)), change: make([]int, len(m.Steps)), set: 1 << s}
		laws[s].w[s] = 1
	}
	for k, st := range m.Steps {
		for _, t := range st.From {
			laws[t.Species].change[k] -= t.N
		}
		for _, t := range st.To {
			laws[t.Species].change[k] += t.N
		}
	}
	for k := range m.Steps {
		var kept []elementaryLaw
		for _, l := range laws {
			if l.change[k] == 0 {
				kept = append(kept, l)
			}
		}
		for _, up := range laws {
			for _, down := range laws {
				if up.change[k] > 0 && down.change[k] < 0 {
					kept = append(kept, up.plus(down, -down.change[k], up.change[k]))
				}
			}
		}
		if laws = smallest(kept); len(laws) > mostLaws {
			return nil
		}
	}
	return laws
}

// plus is a times one law and b times another, in lowest terms.
func (l elementaryLaw) plus(o elementaryLaw, a, b int) elementaryLaw {
	sum := elementaryLaw{set: l.set | o.set}
	common := 0
	add := func(x, y []int) []int {
		out := make([]int, len(x))
		for i := range x {
			out[i] = a*x[i] + b*y[i]
			common = divisor(common, out[i])
		}
		return out
	}
	sum.w, sum.change = add(l.w, o.w), add(l.change, o.change)
	for _, list := range [][]int{sum.w, sum.change} {
		for i := range list {
			list[i] /= common
		}
	}
	return sum
}

func divisor(a, b int) int {
	if b < 0 {
		b = -b
	}
	for b != 0 {
		a, b = b, a%b
	}
	return a
}

// smallest keeps the laws that have no other within them.
func smallest(laws []elementaryLaw) []elementaryLaw {
	slices.SortStableFunc(laws, func(a, b elementaryLaw) int { return bits.OnesCount64(a.set) - bits.OnesCount64(b.set) })
	var out []elementaryLaw
	for _, l := range laws {
		if !slices.ContainsFunc(out, func(o elementaryLaw) bool { return o.set&^l.set == 0 }) {
			out = append(out, l)
		}
	}
	return out
}
