package control

import (
	"errors"
	"fmt"
	"math"
	"strings"

	"saddlebook/kinetics"
)

// A Problem asks what decides at one point. Slices by species have the length
// of the mechanism's.
type Problem struct {
	// Held is the concentration, mol/L, of each species that is held; NaN: free.
	Held []float64
	// Total is the amount, mol/L, of a free species as if all of it were charged:
	// it sets the totals of the conservation laws. NaN: not stated, which is right
	// for a state that forms from others. nil: none.
	Total []float64

	RateOf []kinetics.Term // the product, or a sum, whose net rate of formation is meant
	// Pair are two products, or sums, whose ratio of rates of formation is wanted
	// besides; both nil: none.
	Pair [2][]kinetics.Term

	Catalyst int   // species that turnover is counted by; -1: none
	Turnover []int // steps of one turn, in order, by number; nil: found from the network
}

// Errors that a PointError matches.
var (
	ErrNotStated     = errors.New("a concentration is not stated")
	ErrNoSteadyState = errors.New("no steady state")
	ErrNoRate        = errors.New("no rate")
	ErrCycle         = errors.New("no such cycle")
)

// PointError is a point at which nothing can be said.
type PointError struct {
	Of      error // ErrNotStated, ErrNoSteadyState, ErrNoRate or ErrCycle
	Species []int // at fault
	Step    int   // at fault; -1: none
	Msg     string
	Fix     string
}

func (e *PointError) Error() string { return e.Msg + "; " + e.Fix }

// Unwrap returns the error that it is one of.
func (e *PointError) Unwrap() error { return e.Of }

// check refuses what has no meaning, and panics on lengths that do not fit.
func (p *Problem) check(n *kinetics.Network) error {
	species := len(n.Names)
	if len(p.Held) != species || p.Total != nil && len(p.Total) != species {
		panic("control: one concentration for each species is needed")
	}
	if p.Catalyst >= species || p.Catalyst < -1 {
		panic("control: the catalyst is no species")
	}
	if len(p.RateOf) == 0 {
		return &PointError{Of: ErrNoRate, Step: -1, Msg: "no product is named whose rate is meant", Fix: "name one"}
	}
	for s := range species {
		h, t := p.Held[s], p.total(s)
		for _, c := range []float64{h, t} {
			if c < 0 || math.IsInf(c, 0) {
				return &PointError{Of: ErrNotStated, Species: []int{s}, Step: -1, Msg: fmt.Sprintf("%g mol/L of %s makes no sense", c, n.Names[s]), Fix: "state 0 or more"}
			}
		}
		if !math.IsNaN(h) && !math.IsNaN(t) {
			return &PointError{Of: ErrNotStated, Species: []int{s}, Step: -1, Msg: fmt.Sprintf("%s has a concentration that is held and a total", n.Names[s]), Fix: "state one of the two"}
		}
	}
	for _, side := range [][]kinetics.Term{p.RateOf, p.Pair[0], p.Pair[1]} {
		for _, t := range side {
			if math.IsNaN(p.Held[t.Species]) {
				name := n.Names[t.Species]
				return &PointError{Of: ErrNotStated, Species: []int{t.Species}, Step: -1,
					Msg: fmt.Sprintf("%s is to be formed, so it cannot be at its own steady state", name), Fix: "state its concentration, 0 mol/L for an initial rate"}
			}
		}
	}
	return nil
}

func (p *Problem) total(s int) float64 {
	if p.Total == nil {
		return math.NaN()
	}
	return p.Total[s]
}

// names lists species for a message.
func names(n *kinetics.Network, species []int) string {
	var out []string
	for _, s := range species {
		out = append(out, n.Names[s])
	}
	if len(out) < 2 {
		return strings.Join(out, "")
	}
	return strings.Join(out[:len(out)-1], ", ") + " and " + out[len(out)-1]
}
