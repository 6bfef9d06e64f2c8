package control

import (
	"errors"
	"fmt"
	"math"
	"slices"
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

	Brief bool // leave out how every state decides, which takes a solution each: no States in the Result
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
	if c := p.Catalyst; c >= 0 && p.total(c) == 0 {
		return &PointError{Of: ErrNotStated, Species: []int{c}, Step: -1, Msg: fmt.Sprintf("the total of %s is 0, and turnover is counted by it", n.Names[c]), Fix: "state a total above 0"}
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
	var lacking []int
	for _, side := range [][]kinetics.Term{p.RateOf, p.Pair[0], p.Pair[1]} {
		for _, t := range side {
			if math.IsNaN(p.Held[t.Species]) && !slices.Contains(lacking, t.Species) {
				lacking = append(lacking, t.Species)
			}
		}
	}
	switch len(lacking) {
	case 0:
		return nil
	case 1:
		return &PointError{Of: ErrNotStated, Species: lacking, Step: -1,
			Msg: fmt.Sprintf("%s is to be formed, so it cannot be at its own steady state", names(n, lacking)), Fix: "state its concentration, 0 M for an initial rate"}
	}
	return &PointError{Of: ErrNotStated, Species: lacking, Step: -1,
		Msg: fmt.Sprintf("%s are to be formed, so they cannot be at their own steady state", names(n, lacking)), Fix: "state their concentrations, 0 M for an initial rate"}
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
	return words(out)
}

// words joins names for a sentence.
func words(list []string) string {
	if len(list) < 2 {
		return strings.Join(list, "")
	}
	return strings.Join(list[:len(list)-1], ", ") + " and " + list[len(list)-1]
}
