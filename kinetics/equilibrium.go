package kinetics

import (
	"fmt"
	"math"

	"saddlebook/kinetics/balance"
	"saddlebook/kinetics/rate"
)

// Composition is what a solution holds.
type Composition struct {
	T     float64   // K
	Names []string  // species
	C     []float64 // mol/L; 0 for what cannot form
	LnC   []float64 `json:"-"` // ln of it, also where C underflows; −Inf for what cannot form
}

// Equilibrium returns the composition at equilibrium over the reversible steps
// of what is charged (mol/L, by species). Steps without return do not count:
// see Drained for whether they would undo it. The error matches rate.ErrDomain
// for a charge that makes no sense, or balance.ErrNoConvergence.
func (n *Network) Equilibrium(charge []float64) (*Composition, error) {
	if len(charge) != len(n.Names) {
		panic("kinetics: Equilibrium: one concentration for each species is needed")
	}
	p := balance.Problem{G: n.G, T: n.T, Start: charge}
	for s, c := range charge {
		if !(c >= 0) || math.IsInf(c, 0) {
			return nil, fmt.Errorf("%w: a charge of %g mol/L of %s makes no sense; give 0 or more", rate.ErrDomain, c, n.Names[s])
		}
	}
	for _, r := range n.Reactions {
		if r.Returns {
			p.Reactions = append(p.Reactions, balance.Reaction{From: balanceTerms(r.From), To: balanceTerms(r.To)})
		}
	}
	res, err := balance.Solve(p)
	if err != nil {
		return nil, err
	}
	return &Composition{T: n.T, Names: n.Names, C: res.C, LnC: res.LnC}, nil
}

func balanceTerms(side []Term) []balance.Term {
	out := make([]balance.Term, len(side))
	for i, t := range side {
		out[i] = balance.Term(t)
	}
	return out
}

// net returns the change of every species in one turn of the step.
func (r *Reaction) net(species int) []float64 {
	v := make([]float64, species)
	for _, t := range r.From {
		v[t.Species] -= float64(t.N)
	}
	for _, t := range r.To {
		v[t.Species] += float64(t.N)
	}
	return v
}

// EquilibriumRatio returns the ratio of species a to species b at equilibrium,
// exp(−(Ga − Gb)/RT), which holds for any charge if reversible steps turn one
// b into one a and change nothing else. ok is false if they do not: then the
// ratio depends on the charge, or there is none. The ratio may be +Inf or 0
// beyond the range of a float64.
func (n *Network) EquilibriumRatio(a, b int) (ratio float64, ok bool) {
	if a == b {
		return 1, true
	}
	target := make([]float64, len(n.Names))
	target[a], target[b] = 1, -1
	var rows [][]float64
	for i := range n.Reactions {
		if n.Reactions[i].Returns {
			rows = append(rows, n.Reactions[i].net(len(n.Names)))
		}
	}
	if !spans(rows, target) {
		return 0, false
	}
	return math.Exp(-(n.G[a] - n.G[b]) / (rate.R * n.T)), true
}

// spans tells whether target is a linear combination of rows. It destroys both.
// Entries are small whole numbers, so elimination with pivoting is safe.
func spans(rows [][]float64, target []float64) bool {
	const zero = 1e-9
	for col := range target {
		best := -1
		for i, r := range rows {
			if math.Abs(r[col]) > zero && (best < 0 || math.Abs(r[col]) > math.Abs(rows[best][col])) {
				best = i
			}
		}
		if best < 0 {
			if math.Abs(target[col]) > zero {
				return false
			}
			continue
		}
		pivot := rows[best]
		rows[best] = rows[len(rows)-1]
		rows = rows[:len(rows)-1]
		clear := func(r []float64) {
			f := r[col] / pivot[col]
			if f == 0 {
				return
			}
			for k := col; k < len(r); k++ {
				r[k] -= f * pivot[k]
			}
			r[col] = 0
		}
		for _, r := range rows {
			clear(r)
		}
		clear(target)
	}
	return true
}

// Drained reports whether a step without return consumes the species, or
// anything that reversible steps connect with it: then its equilibrium is not
// reachable.
func (n *Network) Drained(species int) bool {
	u := newUnion(len(n.Names))
	for _, r := range n.Reactions {
		if r.Returns {
			u.step(r.From, r.To)
		}
	}
	home := u.root(species)
	for i := range n.Reactions {
		r := &n.Reactions[i]
		if r.Returns {
			continue
		}
		for _, t := range r.From {
			if u.root(t.Species) == home && countOf(r.To, t.Species) < t.N {
				return true
			}
		}
	}
	return false
}

// EquilibriumShares returns the shares of the products at equilibrium, which sum
// to 1: those of any charge where their ratios do not depend on one, else those
// of the charge given (mol/L, by species; nil: none is stated). whyNot says in
// words why there are none. The error is that of Equilibrium.
func (n *Network) EquilibriumShares(products []int, charge []float64) (shares []float64, whyNot string, err error) {
	for _, p := range products {
		if n.Drained(p) {
			return nil, "equilibrium is not reachable: a step without return drains " + n.Names[p], nil
		}
	}
	values := make([]float64, len(products))
	free, lowest := true, math.Inf(1)
	for _, p := range products {
		_, ok := n.EquilibriumRatio(p, products[0])
		free = free && ok
		lowest = math.Min(lowest, n.G[p])
	}
	if free {
		for i, p := range products {
			values[i] = math.Exp((lowest - n.G[p]) / (rate.R * n.T))
		}
		return normal(values), "", nil
	}
	for i := range n.Reactions {
		for _, p := range products {
			if r := &n.Reactions[i]; !r.Returns && countOf(r.To, p) > 0 {
				return nil, fmt.Sprintf("equilibrium is not reachable: %s forms by a step without return", n.Names[p]), nil
			}
		}
	}
	if charge == nil {
		return nil, "the ratio at equilibrium depends on the charge: state one", nil
	}
	eq, err := n.Equilibrium(charge)
	if err != nil {
		return nil, "", err
	}
	for i, p := range products {
		values[i] = eq.C[p]
	}
	if shares = normal(values); shares == nil {
		return nil, "none of the products can form from the charge", nil
	}
	return shares, "", nil
}

// normal divides by the sum; nil if there is nothing.
func normal(values []float64) []float64 {
	total := 0.0
	for _, x := range values {
		total += x
	}
	if !(total > 0) {
		return nil
	}
	for i := range values {
		values[i] /= total
	}
	return values
}
