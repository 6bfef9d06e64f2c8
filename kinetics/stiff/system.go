package stiff

import (
	"fmt"
	"math"
	"sort"
)

// A Term is one species and its net coefficient in a reaction: made (above
// zero) or used up (below zero).
type Term struct {
	Species int
	Coef    float64
}

// A Reaction has the rate k[K] times the product of the concentrations in In,
// where an index given twice is a square. An empty In is a constant source.
// Every species then changes by its coefficient in Net times the rate.
type Reaction struct {
	In  []int
	Net []Term
	K   int
}

// MaxOrder is the largest number of reactants of one reaction.
const MaxOrder = 8

// A System is a checked list of reactions. It does not change and may be
// shared by any number of solvers and goroutines.
type System struct {
	species, rates int
	channels       []channel // in kernel order: one-way, pairs, long
	oneWay, pairs  int
	laws           [][]entry // conservation laws
	positions      []int     // of the Jacobian, row*species+column, ascending, without the diagonal
}

// A channel is one reaction, or two that undo each other, with one column of
// net stoichiometry.
type channel struct {
	fwd, back   []int // reactants; back is used when kb is not below zero
	kf, kb      int
	net         []Term
	first, last int // the reactions, as numbered by the caller; last is -1 without a way back
}

// NewSystem checks and compiles reactions of the given number of species and
// of rate constants.
//
// It refuses, with ErrInput, indices out of range, coefficients that are not
// finite, more than MaxOrder reactants, and a reaction that uses up a species
// whose concentration is not in its rate: such a rate law leads below zero.
// Reactions without a net change are accepted and have no effect.
func NewSystem(species, rates int, reactions []Reaction) (*System, error) {
	if species < 1 {
		return nil, fmt.Errorf("%w: %d species; give at least one", ErrInput, species)
	}
	s := &System{species: species, rates: rates}
	var one, pair, long []channel
	partner := map[string]int{} // net column to place in one, for pairs
	for i, r := range reactions {
		net, err := checkReaction(i, r, species, rates)
		if err != nil {
			return nil, err
		}
		if len(net) == 0 {
			continue
		}
		c := channel{fwd: append([]int(nil), r.In...), kf: r.K, kb: -1, net: net, first: i, last: -1}
		if len(r.In) > 2 {
			long = append(long, c)
			continue
		}
		if j, ok := partner[netKey(net, -1)]; ok {
			one[j].back, one[j].kb, one[j].last = c.fwd, c.kf, i
			delete(partner, netKey(net, -1))
			continue
		}
		partner[netKey(net, 1)] = len(one)
		one = append(one, c)
	}
	kept := one[:0]
	for _, c := range one {
		if c.kb >= 0 {
			pair = append(pair, c)
		} else {
			kept = append(kept, c)
		}
	}
	s.oneWay, s.pairs = len(kept), len(pair)
	s.channels = append(append(append(s.channels, kept...), pair...), long...)

	seen := map[int]bool{}
	for _, c := range s.channels {
		for _, in := range [2][]int{c.fwd, c.back} {
			for _, col := range in {
				for _, t := range c.net {
					if t.Species != col {
						seen[t.Species*species+col] = true
					}
				}
			}
		}
	}
	for p := range seen {
		s.positions = append(s.positions, p)
	}
	sort.Ints(s.positions)
	s.laws = laws(s)
	return s, nil
}

// Species returns the number of species.
func (s *System) Species() int { return s.species }

// Rates returns the number of rate constants.
func (s *System) Rates() int { return s.rates }

func checkReaction(i int, r Reaction, species, rates int) ([]Term, error) {
	if r.K < 0 || r.K >= rates {
		return nil, fmt.Errorf("%w: reaction %d: rate constant %d of %d; use 0 to %d", ErrInput, i, r.K, rates, rates-1)
	}
	if len(r.In) > MaxOrder {
		return nil, fmt.Errorf("%w: reaction %d: %d reactants; write it as steps of at most %d", ErrInput, i, len(r.In), MaxOrder)
	}
	for _, a := range r.In {
		if a < 0 || a >= species {
			return nil, fmt.Errorf("%w: reaction %d: reactant %d of %d species; use 0 to %d", ErrInput, i, a, species, species-1)
		}
	}
	sum := map[int]float64{}
	for _, t := range r.Net {
		if t.Species < 0 || t.Species >= species {
			return nil, fmt.Errorf("%w: reaction %d: net change of species %d of %d; use 0 to %d", ErrInput, i, t.Species, species, species-1)
		}
		if math.IsNaN(t.Coef) || math.IsInf(t.Coef, 0) {
			return nil, fmt.Errorf("%w: reaction %d: coefficient %g of species %d; use a finite number", ErrInput, i, t.Coef, t.Species)
		}
		sum[t.Species] += t.Coef
	}
	var net []Term
	for sp, co := range sum {
		if co == 0 {
			continue
		}
		used := false
		for _, a := range r.In {
			used = used || a == sp
		}
		if co < 0 && !used {
			return nil, fmt.Errorf("%w: reaction %d uses up species %d without it in the rate, so its concentration would fall below zero; add it to the reactants", ErrInput, i, sp)
		}
		net = append(net, Term{sp, co})
	}
	sort.Slice(net, func(x, y int) bool { return net[x].Species < net[y].Species })
	return net, nil
}

func netKey(net []Term, sign float64) string {
	return fmt.Sprint(scaled(net, sign))
}

func scaled(net []Term, sign float64) []Term {
	out := make([]Term, len(net))
	for i, t := range net {
		out[i] = Term{t.Species, sign * t.Coef}
	}
	return out
}
