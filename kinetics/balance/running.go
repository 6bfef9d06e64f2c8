package balance

import (
	"math"
	"slices"
)

// running returns the species that take part in a running reaction, the net
// stoichiometry of these reactions over them, and amounts, all above zero, that
// could arise: a first guess.
func (p Problem) running() (species []int, net [][]int64, guess []float64) {
	there := make([]bool, len(p.G))
	amount := slices.Clone(p.Start)
	scale := 0.0
	for i, c := range p.Start {
		there[i] = c > 0
		scale = max(scale, c)
	}
	if scale == 0 {
		scale = 1
	}
	runs := make([]bool, len(p.Reactions))
	for more := true; more; {
		more = false
		for i, r := range p.Reactions {
			if runs[i] {
				continue
			}
			from, to := r.From, r.To
			if !all(there, from) {
				from, to = to, from
			}
			if all(there, from) {
				runs[i], more = true, true
				form(there, amount, from, to, scale)
			}
		}
	}

	place := make([]int, len(p.G))
	for i := range place {
		place[i] = -1
	}
	for i, r := range p.Reactions {
		if !runs[i] {
			continue
		}
		sum := make(map[int]int64)
		for _, t := range r.From {
			sum[t.Species] -= int64(t.N)
		}
		for _, t := range r.To {
			sum[t.Species] += int64(t.N)
		}
		row := make([]int64, len(p.G))
		changes := false
		for j, n := range sum {
			if n != 0 {
				row[j], place[j], changes = n, 0, true
			}
		}
		if changes {
			net = append(net, row)
		}
	}
	for j := range place {
		if place[j] >= 0 {
			species = append(species, j)
		}
	}
	for i, row := range net {
		short := make([]int64, len(species))
		for k, j := range species {
			short[k] = row[j]
		}
		net[i] = short
	}
	// A long chain of reactions can take a guess down to nothing; any small number serves.
	guess = pick(amount, species)
	for i := range guess {
		guess[i] = max(guess[i], scale*1e-200, 1e-300)
	}
	return species, net, guess
}

func all(there []bool, side []Term) bool {
	for _, t := range side {
		if !there[t.Species] {
			return false
		}
	}
	return true
}

// form runs a reaction a little way, so that its products are there and its
// reactants still are.
func form(there []bool, amount []float64, from, to []Term, scale float64) {
	extent := math.Inf(1)
	for _, t := range from {
		extent = min(extent, amount[t.Species]/float64(t.N)/4/float64(len(from)))
	}
	if math.IsInf(extent, 1) {
		extent = scale
	}
	for _, t := range from {
		amount[t.Species] -= extent * float64(t.N)
	}
	for _, t := range to {
		amount[t.Species] += extent * float64(t.N)
		there[t.Species] = true
	}
}
