package kinetics

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"saddlebook/kinetics/branch"
)

// elsewhere stands for every state from which no listed product can form.
const elsewhere = -1

// chain is the absorbing chain of one followed unit, reduced to the states
// where it has a choice.
type chain struct {
	n        *Network
	products []int
	moves    []move // out of states that are passed through
	start    map[int]float64
	held     []float64
	lost     []int // the states that elsewhere stands for
	used     map[int]bool
}

// newChain keeps what the start can reach, joins what cannot reach a product
// into elsewhere, puts in the stated concentrations and takes out every state
// that leads to one other only: its rate has no part in the shares.
func (n *Network) newChain(l Limit, moves []move, start []float64) *chain {
	c := &chain{n: n, products: l.Products, start: map[int]float64{}, held: l.Held, used: map[int]bool{}}
	for _, m := range moves {
		if m = c.stated(m); !math.IsInf(m.ln, -1) {
			c.moves = append(c.moves, m)
		}
	}
	within := reached(c.moves, start)
	leads := map[int]bool{}
	for _, p := range l.Products {
		leads[p] = true
	}
	for more := true; more; {
		more = false
		for _, m := range c.moves {
			if leads[m.to] && !leads[m.from] {
				leads[m.from], more = true, true
			}
		}
	}
	kept := c.moves[:0]
	for _, m := range c.moves {
		if !within[m.from] || !leads[m.from] {
			continue
		}
		if !leads[m.to] {
			if !slices.Contains(c.lost, m.to) {
				c.lost = append(c.lost, m.to)
			}
			m.to = elsewhere
		}
		kept = append(kept, m)
	}
	c.moves = kept
	for s, a := range start {
		switch {
		case a == 0:
		case leads[s]:
			c.start[s] += a
		default:
			c.start[elsewhere] += a
			c.lost = append(c.lost, s)
		}
	}
	for c.contract() {
	}
	return c
}

// stated puts the stated concentrations of partners into the rate of a move.
func (c *chain) stated(m move) move {
	var open []Term
	for _, t := range m.partners {
		if c.held == nil || math.IsNaN(c.held[t.Species]) {
			open = append(open, t)
			continue
		}
		m.ln += float64(t.N) * math.Log(c.held[t.Species])
	}
	slices.SortFunc(open, func(a, b Term) int { return a.Species - b.Species })
	m.partners = open
	return m
}

// states returns the states that are passed through, in order.
func (c *chain) states() []int {
	var out []int
	add := func(s int) {
		if s != elsewhere && !slices.Contains(c.products, s) && !slices.Contains(out, s) {
			out = append(out, s)
		}
	}
	for _, m := range c.moves {
		add(m.from)
		add(m.to)
	}
	for s := range c.start {
		add(s)
	}
	slices.Sort(out)
	return out
}

// contract takes out one state with a single destination; false: there is none.
func (c *chain) contract() bool {
	for _, s := range c.states() {
		to, one := 0, true
		first := true
		for _, m := range c.moves {
			if m.from != s {
				continue
			}
			if !first && m.to != to {
				one = false
				break
			}
			to, first = m.to, false
		}
		if first || !one {
			continue
		}
		kept := c.moves[:0]
		for _, m := range c.moves {
			if m.to == s {
				m.to = to
			}
			if m.from != s && m.from != m.to {
				kept = append(kept, m)
			}
		}
		c.moves = kept
		if a, ok := c.start[s]; ok {
			delete(c.start, s)
			c.start[to] += a
		}
		return true
	}
	return false
}

// shares solves the chain.
func (c *chain) shares(out *Limits) error {
	states := c.states()
	if err := c.partnersCancel(states, out); err != nil {
		return err
	}
	number := map[int]int{}
	for i, s := range states {
		number[s] = i
	}
	for i, p := range c.products {
		number[p] = len(states) + i
	}
	number[elsewhere] = len(states) + len(c.products)
	absorbing := len(c.products) + 1

	// Shares depend on the ratios of the ways out of each state only.
	top := map[int]float64{}
	for _, m := range c.moves {
		if t, ok := top[m.from]; !ok || m.ln > t {
			top[m.from] = m.ln
		}
	}
	var rates []branch.Rate
	for _, m := range c.moves {
		rates = append(rates, branch.Rate{From: number[m.from], To: number[m.to], K: math.Exp(m.ln - top[m.from])})
	}
	start := make([]float64, len(states)+absorbing)
	for s, a := range c.start {
		start[number[s]] = a
	}
	shares, err := branch.Absorb(len(states), absorbing, rates, start)
	if err != nil {
		var stuck *branch.NoExit
		if errors.As(err, &stuck) {
			s := states[stuck.State]
			return &LimitError{Species: s, Msg: fmt.Sprintf("the ways from %s to a product are more than 300 powers of ten slower than its exchange", c.n.Names[s]), Fix: "check the energies, and join the states that exchange"}
		}
		return &LimitError{Species: -1, Msg: "the chain of states could not be solved: " + err.Error(), Fix: chargeAndRun}
	}
	out.Shares = shares[:len(c.products):len(c.products)]
	out.Elsewhere = shares[len(c.products)]
	if len(c.lost) > 0 && out.Elsewhere > 0 {
		out.Assumes = append(out.Assumes, "what goes to "+c.names(c.lost)+" forms no listed product any more")
	}
	return nil
}

func (c *chain) names(species []int) string {
	species = slices.Clone(species)
	slices.Sort(species)
	var names []string
	for _, s := range slices.Compact(species) {
		names = append(names, c.n.Names[s])
	}
	return strings.Join(names, ", ")
}

// partnersCancel checks that partners without a concentration multiply all ways
// out of each state alike, and notes the concentrations that matter.
func (c *chain) partnersCancel(states []int, out *Limits) error {
	for _, s := range states {
		var first *move
		for i := range c.moves {
			m := &c.moves[i]
			if m.from != s {
				continue
			}
			if first == nil {
				first = m
				continue
			}
			for _, side := range [2][2][]Term{{m.partners, first.partners}, {first.partners, m.partners}} {
				for _, t := range side[0] {
					if countOf(side[1], t.Species) != t.N {
						return &LimitError{Species: t.Species,
							Msg: fmt.Sprintf("the shares from %s depend on how much %s there is", c.n.Names[s], c.n.Names[t.Species]),
							Fix: fmt.Sprintf("state a charge for %s", c.n.Names[t.Species])}
					}
				}
			}
			// The same for what is stated, to say so.
			for _, t := range append(c.partnersOf(m), c.partnersOf(first)...) {
				if countOf(c.partnersOf(m), t.Species) != countOf(c.partnersOf(first), t.Species) {
					c.used[t.Species] = true
				}
			}
		}
	}
	for s := range c.n.Names {
		if c.used[s] && c.held != nil && !math.IsNaN(c.held[s]) {
			out.Assumes = append(out.Assumes, fmt.Sprintf("%s is held at %.3g mol/L", c.n.Names[s], c.held[s]))
		}
	}
	return nil
}

// partnersOf returns all partners of a move, stated or not.
func (c *chain) partnersOf(m *move) []Term {
	r := &c.n.Reactions[m.reaction]
	side := r.From
	if countOf(r.From, m.from) == 0 {
		side = r.To
	}
	var out []Term
	for _, t := range side {
		if t.Species != m.from {
			out = append(out, t)
		}
	}
	return out
}
