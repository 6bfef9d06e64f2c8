package firstorder

import (
	"errors"
	"fmt"
	"math"
)

// MaxStates is the largest number of states that exchanges may connect.
const MaxStates = 128

// Rates are taken between these ln k: beyond the upper the shortest time would not
// be a number; those below the lower do nothing within any finite time.
const maxLn, minLn = 680, -680

// ErrDomain is matched by errors about impossible input.
var ErrDomain = errors.New("impossible input")

// Exchange is a first-order step between two states, there and back.
type Exchange struct {
	From, To          int
	LnForward, LnBack float64 // ln of the rate constants, 1/s; −Inf: none, such as no return
}

// Chain is a network of first-order exchanges, ready to be asked for times. It
// holds scratch: one goroutine at a time; see Copy.
type Chain struct {
	n     int
	parts []part
	// Vectors of a part: a and b amounts, f and e what is fed, c and d of a series.
	a, b, c, d, e, f []float64
}

// part is a set of states that exchanges connect.
type part struct {
	states []int
	out    float64 // 1/s, of the fastest state
	// The matrix Q + out in rows: rates from each state, and what is left of out.
	moves []move
	stay  []float64
	// times[k] is exp(Q·2^(first+k)), in rows. From 2^(first+len(times)) on it is
	// late, which is rest unless something is too slow for any number.
	first      int
	times      [][]float64
	late, rest []float64
}

type move struct {
	from, to int // within the part
	k        float64
}

// New prepares the network of n states, numbered from 0. Several exchanges between
// the same states add up; one from a state to itself changes nothing.
//
// New returns ErrDomain for an index out of range, for ln k that is NaN or above
// 680, and for more than MaxStates connected states.
func New(n int, exchanges []Exchange) (*Chain, error) {
	if n < 0 {
		return nil, fmt.Errorf("%w: %d states; give a number of zero or more", ErrDomain, n)
	}
	for _, x := range exchanges {
		if x.From < 0 || x.From >= n || x.To < 0 || x.To >= n {
			return nil, fmt.Errorf("%w: exchange from state %d to %d; states run from 0 to %d", ErrDomain, x.From, x.To, n-1)
		}
		for _, ln := range []float64{x.LnForward, x.LnBack} {
			if math.IsNaN(ln) || ln > maxLn {
				return nil, fmt.Errorf("%w: ln k of %g between states %d and %d; give one up to %d, or −Inf for none", ErrDomain, ln, x.From, x.To, maxLn)
			}
		}
	}
	c := &Chain{n: n}
	most := 0
	for _, states := range connected(n, exchanges) {
		if len(states) > MaxStates {
			return nil, fmt.Errorf("%w: %d connected states, and %d are the most that are solved exactly; use an integrator", ErrDomain, len(states), MaxStates)
		}
		if len(states) > 1 { // one alone keeps what it has
			c.parts = append(c.parts, newPart(n, states, exchanges))
			most = max(most, len(states))
		}
	}
	c.scratch(most)
	return c, nil
}

func (c *Chain) scratch(most int) {
	all := make([]float64, 6*most)
	for i, v := range []*[]float64{&c.a, &c.b, &c.c, &c.d, &c.e, &c.f} {
		*v = all[i*most : (i+1)*most : (i+1)*most]
	}
}

// Copy returns a Chain for another goroutine. It shares all tables.
func (c *Chain) Copy() *Chain {
	d := *c
	d.scratch(len(c.a))
	return &d
}

// States returns the number of states.
func (c *Chain) States() int { return c.n }

// Method says how the amounts are computed, in words for a page.
func (c *Chain) Method() string {
	return "exact solution of the first-order network: exponential of the rate matrix by repeated squaring, without subtraction"
}

// connected returns the sets of states that exchanges connect, in order.
func connected(n int, exchanges []Exchange) [][]int {
	set := make([]int, n) // the lowest state it is known to be connected with
	for i := range set {
		set[i] = i
	}
	root := func(i int) int {
		for set[i] != i {
			i = set[i]
		}
		return i
	}
	for _, x := range exchanges {
		if math.IsInf(x.LnForward, -1) && math.IsInf(x.LnBack, -1) {
			continue
		}
		a, b := root(x.From), root(x.To)
		set[max(a, b)] = min(a, b)
	}
	at := make([]int, n)
	var sets [][]int
	for i := range n {
		r := root(i)
		if r == i {
			at[i] = len(sets)
			sets = append(sets, nil)
		}
		sets[at[r]] = append(sets[at[r]], i)
	}
	return sets
}

func newPart(n int, states []int, exchanges []Exchange) part {
	size := len(states)
	within := make([]int, n)
	for i := range within {
		within[i] = -1
	}
	for i, s := range states {
		within[s] = i
	}
	ln := make([]float64, size*size) // of the rate constants, −Inf: none
	for i := range ln {
		ln[i] = math.Inf(-1)
	}
	for _, x := range exchanges {
		i, j := within[x.From], within[x.To]
		if i < 0 || j < 0 || i == j {
			continue
		}
		ln[i*size+j] = lnAdd(ln[i*size+j], x.LnForward)
		ln[j*size+i] = lnAdd(ln[j*size+i], x.LnBack)
	}

	p := part{states: states, stay: make([]float64, size)}
	for i := range size {
		for j := range size {
			if x := ln[i*size+j]; x > minLn {
				k := math.Exp(x)
				p.moves = append(p.moves, move{i, j, k})
				p.stay[i] += k
			}
		}
		p.out = max(p.out, p.stay[i])
	}
	for i, k := range p.stay {
		p.stay[i] = p.out - k
	}
	p.rest = rest(size, ln)
	p.square()
	return p
}
