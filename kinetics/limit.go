package kinetics

import (
	"fmt"
	"math"
	"slices"
)

// Limit asks for the kinetic limit: what forms from one species if no listed
// product ever reacts again.
type Limit struct {
	From     int       // the species that is followed
	Products []int     // the species whose shares are wanted
	Start    []float64 // amounts of the carriers at the start, by species; nil: all of it is From
	Held     []float64 // concentrations of partners, mol/L, by species; NaN: not stated; nil: none is
}

// Limits are the shares of the products without return.
type Limits struct {
	Shares []float64 // by product; with Elsewhere they sum to 1
	// PreEquilibrium is the shares if the states that products form from
	// exchanged infinitely fast: each transition state into a product counts by
	// its energy alone. nil if that is not defined; NoExchange says why.
	PreEquilibrium []float64
	NoExchange     string
	// Sources counts the states from which products form. With one there is
	// nothing to exchange, and the two sets of shares are the same.
	Sources      int
	FastExchange bool     // the ratios of all pairs agree between the two within 5 %
	Elsewhere    float64  // the share that ends where no listed product can form
	Assumes      []string // what the shares rest on
}

// exchangeTolerance is how far ratios may differ where fast exchange holds.
const exchangeTolerance = 0.05

// LimitError is a kinetic limit that is not defined.
type LimitError struct {
	Species int // the species at fault; -1: none
	Msg     string
	Fix     string
}

func (e *LimitError) Error() string { return e.Msg + "; " + e.Fix }

// KineticLimit returns the shares of the products when every direction that
// consumes a listed product (negative net coefficient) is removed, after all
// has reacted. The unit followed must pass from one species to one species in
// each step; partners multiply the rate by their concentration, and need one
// only where the shares depend on it. Shares keep all digits whatever the
// spread of the rates. The error is a *LimitError.
func (n *Network) KineticLimit(l Limit) (*Limits, error) {
	start, err := n.checkLimit(l)
	if err != nil {
		return nil, err
	}
	ways := n.waysWithout(l.Products)
	touched := n.touch(start, ways)
	out := &Limits{}
	var wanted []int
	for _, p := range l.Products {
		switch {
		case touched[p]:
			wanted = append(wanted, p)
		case n.touch(start, n.waysWithout(nil))[p]:
			out.Assumes = append(out.Assumes, fmt.Sprintf("%s forms only by way of another listed product, so its share without return is 0", n.Names[p]))
		default:
			return nil, &LimitError{Species: p, Msg: fmt.Sprintf("no steps lead from %s to %s", n.Names[l.From], n.Names[p]), Fix: "list products that form from it, or add the steps"}
		}
	}
	if len(wanted) == 0 {
		return nil, &LimitError{Species: l.From, Msg: fmt.Sprintf("no listed product forms from %s without return", n.Names[l.From]), Fix: "list the products that form first"}
	}
	var moves []move
	_, err = n.carriers(l.From, l.Products, n.turning(ways, touched), func(w []int8) bool {
		moves = n.moves(ways, touched, w)
		reached := reached(moves, start)
		for _, p := range wanted {
			if !reached[p] {
				return false
			}
		}
		for s, a := range start {
			if a > 0 && w[s] != 1 {
				return false
			}
		}
		return true
	})
	if err != nil {
		return nil, err
	}
	c := n.newChain(l, moves, start)
	if err := c.shares(out); err != nil {
		return nil, err
	}
	c.preEquilibrium(out)
	return out, nil
}

// checkLimit checks the numbers of a limit and returns the amounts at the start.
func (n *Network) checkLimit(l Limit) ([]float64, error) {
	if l.Start != nil && len(l.Start) != len(n.Names) || l.Held != nil && len(l.Held) != len(n.Names) {
		panic("kinetics: KineticLimit: one number for each species is needed")
	}
	if len(l.Products) == 0 {
		return nil, &LimitError{Species: -1, Msg: "no products are listed", Fix: "list at least one product"}
	}
	for k, p := range l.Products {
		if p == l.From {
			return nil, &LimitError{Species: p, Msg: fmt.Sprintf("%s is the species followed and a product of it", n.Names[p]), Fix: "list what forms from it"}
		}
		if slices.Contains(l.Products[:k], p) {
			return nil, &LimitError{Species: p, Msg: fmt.Sprintf("%s is listed twice", n.Names[p]), Fix: "list each product once"}
		}
	}
	for s, c := range l.Held {
		if c < 0 || math.IsInf(c, 0) {
			return nil, &LimitError{Species: s, Msg: fmt.Sprintf("concentration %g mol/L of %s makes no sense", c, n.Names[s]), Fix: "give 0 or more"}
		}
	}
	start := make([]float64, len(n.Names))
	if l.Start == nil {
		start[l.From] = 1
		return start, nil
	}
	total := 0.0
	for s, a := range l.Start {
		if !(a >= 0) || math.IsInf(a, 0) {
			return nil, &LimitError{Species: s, Msg: fmt.Sprintf("amount %g of %s at the start makes no sense", a, n.Names[s]), Fix: "give 0 or more"}
		}
		total += a
	}
	if total == 0 {
		return nil, &LimitError{Species: l.From, Msg: "there is nothing at the start", Fix: "give an amount above 0"}
	}
	copy(start, l.Start)
	return start, nil
}

// way is one direction of a reaction.
type way struct {
	reaction int
	back     bool
}

func (n *Network) sides(w way) (from, to []Term) {
	r := &n.Reactions[w.reaction]
	if w.back {
		return r.To, r.From
	}
	return r.From, r.To
}

// waysWithout returns all directions but those that consume one of the products.
func (n *Network) waysWithout(products []int) []way {
	var ways []way
	for i := range n.Reactions {
		for _, back := range []bool{false, true} {
			if back && !n.Reactions[i].Returns {
				continue
			}
			w := way{i, back}
			from, to := n.sides(w)
			consumes := false
			for _, p := range products {
				consumes = consumes || countOf(from, p) > countOf(to, p)
			}
			if !consumes {
				ways = append(ways, w)
			}
		}
	}
	return ways
}

// touch marks the species that the start can come to have a part in, partners
// taken as present.
func (n *Network) touch(start []float64, ways []way) []bool {
	touched := make([]bool, len(n.Names))
	for s, a := range start {
		touched[s] = a > 0
	}
	for more := true; more; {
		more = false
		for _, w := range ways {
			from, to := n.sides(w)
			if !anyOf(from, touched) {
				continue
			}
			for _, t := range to {
				if !touched[t.Species] {
					touched[t.Species], more = true, true
				}
			}
		}
	}
	return touched
}

func anyOf(side []Term, marked []bool) bool {
	for _, t := range side {
		if marked[t.Species] {
			return true
		}
	}
	return false
}

// turning returns the reactions of which a direction can turn.
func (n *Network) turning(ways []way, touched []bool) []int {
	var out []int
	for _, w := range ways {
		from, _ := n.sides(w)
		if anyOf(from, touched) && (len(out) == 0 || out[len(out)-1] != w.reaction) {
			out = append(out, w.reaction)
		}
	}
	return out
}

// move is one way for the unit from one carrier to another. Its rate is
// exp(ln) times the concentrations of the partners.
type move struct {
	from, to int
	reaction int
	ln       float64
	partners []Term
}

// moves returns the moves of the carriers (weight 1).
func (n *Network) moves(ways []way, touched []bool, weight []int8) []move {
	carrier := func(side []Term) int {
		for _, t := range side {
			if weight[t.Species] == 1 {
				return t.Species
			}
		}
		return -1
	}
	var out []move
	for _, w := range ways {
		from, to := n.sides(w)
		m := move{from: carrier(from), to: carrier(to), reaction: w.reaction, ln: n.Reactions[w.reaction].LnForward}
		if m.from < 0 || m.to < 0 || m.from == m.to || !touched[m.from] {
			continue
		}
		if w.back {
			m.ln = n.Reactions[w.reaction].LnBack
		}
		for _, t := range from {
			if t.Species != m.from {
				m.partners = append(m.partners, t)
			}
		}
		out = append(out, m)
	}
	return out
}

// reached marks the species that moves lead to from the start.
func reached(moves []move, start []float64) map[int]bool {
	seen := map[int]bool{}
	for s, a := range start {
		if a > 0 {
			seen[s] = true
		}
	}
	for more := true; more; {
		more = false
		for _, m := range moves {
			if seen[m.from] && !seen[m.to] {
				seen[m.to], more = true, true
			}
		}
	}
	return seen
}
