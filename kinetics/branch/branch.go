// Package branch finds where a first-order network ends: the shares in which an
// absorbing Markov chain reaches its absorbing states.
//
// States are eliminated one by one, each handing its way in to its ways out.
// Only sums, products and quotients of positive numbers occur, never a
// difference, so every share keeps nearly all its digits even if the rates lie
// many orders of magnitude apart. Numbers carry an exponent of their own: nothing
// underflows on the way.
//
// # Sources
//
//   - Grassmann, Taksar and Heyman, Oper. Res. 33, 1107 (1985), doi:10.1287/opre.33.5.1107
//   - Kemeny and Snell, Finite Markov Chains (1960), chapter 3 (absorbing chains)
package branch

import (
	"errors"
	"fmt"
	"math"
)

// Rate is the first-order constant, in 1/s or any one unit, from state From to
// state To.
type Rate struct {
	From, To int
	K        float64
}

// ErrDomain is matched by errors about impossible input.
var ErrDomain = errors.New("impossible input")

// ErrNoExit is matched by *NoExit.
var ErrNoExit = errors.New("no way to an end")

// NoExit says that a state which the chain can reach has no path to any
// absorbing state.
type NoExit struct{ State int }

func (e *NoExit) Error() string {
	return fmt.Sprintf("state %d has no way to any end; give it a rate out or make it an end", e.State)
}

// Unwrap returns ErrNoExit.
func (e *NoExit) Unwrap() error { return ErrNoExit }

// Absorb returns the share of each absorbing state once everything has been
// absorbed. The states 0 to transient-1 are passed through, the absorbing ones
// follow them: transient to transient+absorbing-1, in the order of the shares.
// Shares sum to 1; one below 1e-308 loses digits and then rounds to 0.
//
// start holds the amounts at the outset, in any one unit, of the transient
// states or of all states. Several rates between the same states add up; a rate
// of 0 is no path; a rate from a state to itself changes nothing.
//
// Absorb returns ErrDomain for negative, infinite or NaN rates and amounts, a
// start of nothing, a rate out of an absorbing state and indices out of range,
// and ErrNoExit (a *NoExit) if some of the start can be caught in transient
// states for ever. States which the start cannot reach play no part.
func Absorb(transient, absorbing int, rates []Rate, start []float64) (shares []float64, err error) {
	all := transient + absorbing
	if transient < 0 || absorbing < 0 {
		return nil, fmt.Errorf("%w: %d transient and %d absorbing states; give numbers of zero or more", ErrDomain, transient, absorbing)
	}
	q, err := table(transient, all, rates)
	if err != nil {
		return nil, err
	}
	held, err := amounts(transient, all, start)
	if err != nil {
		return nil, err
	}
	within, err := reach(transient, q, held)
	if err != nil {
		return nil, err
	}

	for k := transient - 1; k >= 0; k-- {
		if !within[k] {
			continue
		}
		// What is left: the states before k and the ends. within[j] holds where q[k][j] > 0.
		var out wide
		for j, v := range q[k] {
			if j < k || j >= transient {
				out = out.plus(v)
			}
		}
		for j, v := range q[k] {
			if v.m == 0 || j >= k && j < transient {
				continue
			}
			part := v.over(out)
			held[j] = held[j].plus(held[k].times(part))
			for i := range k {
				// From i to k and back to i is no change: it is dropped, not subtracted.
				if i != j && q[i][k].m != 0 {
					q[i][j] = q[i][j].plus(q[i][k].times(part))
				}
			}
		}
	}

	var sum wide
	for _, v := range held[transient:] {
		sum = sum.plus(v)
	}
	shares = make([]float64, absorbing)
	for j, v := range held[transient:] {
		shares[j] = v.over(sum).float()
	}
	return shares, nil
}

func table(transient, all int, rates []Rate) ([][]wide, error) {
	q := make([][]wide, transient)
	for i := range q {
		q[i] = make([]wide, all)
	}
	for _, r := range rates {
		switch {
		case r.From < 0 || r.From >= all || r.To < 0 || r.To >= all:
			return nil, fmt.Errorf("%w: rate from state %d to %d; states run from 0 to %d", ErrDomain, r.From, r.To, all-1)
		case !(r.K >= 0) || math.IsInf(r.K, 0):
			return nil, fmt.Errorf("%w: rate %g from state %d to %d; give a finite one, zero or more", ErrDomain, r.K, r.From, r.To)
		case r.From == r.To || r.K == 0:
		case r.From >= transient:
			return nil, fmt.Errorf("%w: rate out of state %d, which is an end; leave it out", ErrDomain, r.From)
		default:
			q[r.From][r.To] = q[r.From][r.To].plus(widen(r.K))
		}
	}
	return q, nil
}

func amounts(transient, all int, start []float64) ([]wide, error) {
	if len(start) != transient && len(start) != all {
		return nil, fmt.Errorf("%w: %d starting amounts; give %d, one a transient state, or %d, one a state", ErrDomain, len(start), transient, all)
	}
	held := make([]wide, all)
	some := false
	for i, c := range start {
		if !(c >= 0) || math.IsInf(c, 0) {
			return nil, fmt.Errorf("%w: starting amount %g of state %d; give a finite one, zero or more", ErrDomain, c, i)
		}
		held[i] = widen(c)
		some = some || c > 0
	}
	if !some {
		return nil, fmt.Errorf("%w: nothing at the start; give at least one amount above zero", ErrDomain)
	}
	return held, nil
}

// reach marks the transient states that the start can get to, and makes sure
// that each of them can get to an end.
func reach(transient int, q [][]wide, held []wide) ([]bool, error) {
	within := make([]bool, transient)
	leaves := make([]bool, transient)
	for i := range transient {
		within[i] = held[i].m != 0
		for _, v := range q[i][transient:] {
			leaves[i] = leaves[i] || v.m != 0
		}
	}
	for more := true; more; {
		more = false
		for i := range transient {
			for j := range transient {
				if q[i][j].m == 0 {
					continue
				}
				if within[i] && !within[j] {
					within[j], more = true, true
				}
				if leaves[j] && !leaves[i] {
					leaves[i], more = true, true
				}
			}
		}
	}
	for i := range transient {
		if within[i] && !leaves[i] {
			return nil, &NoExit{State: i}
		}
	}
	return within, nil
}
