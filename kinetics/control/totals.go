package control

import (
	"fmt"
	"math"

	"saddlebook/kinetics"
)

// Totals returns the Total of a Problem whose free species start at the
// concentrations c (mol/L, by species) of some composition: every conservation
// law that holds among them is counted as one species, the first of them as the
// catalyst (−1: none). held is that of the Problem.
//
// The error is a *PointError, ErrNotStated, where no law counts the catalyst:
// some state of it is held.
func Totals(n *kinetics.Network, held, c []float64, catalyst int) ([]float64, error) {
	if len(held) != len(n.Names) || len(c) != len(n.Names) {
		panic("control: one concentration for each species is needed")
	}
	var free []int
	if catalyst >= 0 {
		free = append(free, catalyst)
	}
	for s := range held {
		if math.IsNaN(held[s]) && s != catalyst {
			free = append(free, s)
		}
	}
	rows := make([][]float64, len(n.Reactions))
	for k := range n.Reactions {
		r := &n.Reactions[k]
		rows[k] = make([]float64, len(free))
		for i, s := range free {
			for _, t := range r.From {
				if t.Species == s {
					rows[k][i] -= float64(t.N)
				}
			}
			for _, t := range r.To {
				if t.Species == s {
					rows[k][i] += float64(t.N)
				}
			}
		}
	}
	total := make([]float64, len(n.Names))
	for s := range total {
		total[s] = math.NaN()
	}
	leads, laws := countable(rows, len(free), catalyst >= 0)
	if leads == nil {
		if catalyst >= 0 {
			return nil, &PointError{Of: ErrNotStated, Species: []int{catalyst}, Step: -1,
				Msg: fmt.Sprintf("%s has no total: it turns into species that are held", n.Names[catalyst]), Fix: "let every state of the catalyst be at its steady state"}
		}
		return nil, &PointError{Of: ErrNotStated, Species: free, Step: -1,
			Msg: fmt.Sprintf("what is conserved among %s cannot be counted", names(n, free)), Fix: "let fewer species be at their steady state"}
	}
	for k, w := range laws {
		sum := 0.0
		for i, x := range w {
			sum += x * math.Max(0, c[free[i]])
		}
		total[free[leads[k]]] = sum
	}
	return total, nil
}

// mostTried bounds the search for leads; networks that people write need a few.
const mostTried = 20_000

// countable finds conservation laws with no weight below 0, each 1 for a lead
// of its own and 0 for the other leads, the first place among the leads if that
// is asked. nil: there are none.
func countable(rows [][]float64, n int, first bool) (leads []int, laws [][]float64) {
	size := len(nullspace(rows, identity(n)))
	if size == 0 {
		if first {
			return nil, nil
		}
		return []int{}, nil
	}
	tried := 0
	var search func(chosen []int) bool
	search = func(chosen []int) bool {
		if len(chosen) == size {
			tried++
			laws = ledBy(rows, n, chosen)
			leads = chosen
			return laws != nil
		}
		from := 0
		if len(chosen) > 0 {
			from = chosen[len(chosen)-1] + 1
		}
		for i := from; i < n && tried < mostTried; i++ {
			if search(append(chosen[:len(chosen):len(chosen)], i)) {
				return true
			}
			if first && len(chosen) == 0 {
				return false
			}
		}
		return false
	}
	if !search(nil) {
		return nil, nil
	}
	return leads, laws
}

// ledBy returns the laws of these leads, or nil if these cannot lead or a weight
// is below 0.
func ledBy(rows [][]float64, n int, leads []int) [][]float64 {
	var order []int
	isLead := map[int]bool{}
	for _, i := range leads {
		isLead[i] = true
	}
	for i := range n {
		if !isLead[i] {
			order = append(order, i)
		}
	}
	laws := nullspace(rows, append(order, leads...))
	for k, w := range laws {
		if w[leads[k]] != 1 {
			return nil
		}
		for i, x := range w {
			if x < 0 || i != leads[k] && isLead[i] && x != 0 {
				return nil
			}
		}
	}
	return laws
}
