package stiff

import (
	"fmt"
	"math"
	"sort"
)

// A Problem is one run of a System. Times are s, concentrations mol/L (or any
// one unit of amount per volume that the rate constants share).
type Problem struct {
	From, To float64
	Start    []float64 // concentrations at From, none below zero
	Rates    Rates
	Feeds    []Feed
	Removals []Removal
	Jumps    []Jump
	Events   []Event
	Params   []Param
}

// A Feed adds a species at a constant rate over an interval.
type Feed struct {
	From, To float64
	Species  int
	Rate     float64 // mol/L/s, not below zero
}

// A Removal takes a species away by first order over an interval.
type Removal struct {
	From, To float64
	Species  int
	K        float64 // 1/s, not below zero
}

// A Jump changes concentrations at one instant: each is multiplied by its
// Scale (nil: 1), then Add (nil: 0) is added. Jumps at one time act in the
// order given; one at the start of the run acts before it, one at the end
// after the last step, and both are in the result.
type Jump struct {
	T          float64
	Scale, Add []float64
}

// An Event is a zero of a function of time and state. The function sees the
// caller's order of species and must not keep or change y.
type Event struct {
	G    func(t float64, y []float64) float64
	Side int  // 1: only where G rises, -1: only where it falls, 0: both
	Stop bool // the run ends there
}

// A Weight says how much ln k of one rate constant changes with a parameter.
type Weight struct {
	K int
	W float64
}

// A Param asks for the derivative of all concentrations by one parameter p,
// with d ln k[K]/dp = W * phi(t). Scale returns phi and its derivative in time
// for a piece of the Rates; nil stands for 1. Start is dy/dp at the start of
// the run (nil: 0).
//
// For a free energy G in a network at temperature T, the weight of a step is
// -1/(R T) for its transition state and +1/(R T) for each reactant.
type Param struct {
	Weights []Weight
	Scale   func(piece int, t float64) (phi, dphi float64)
	Start   []float64
}

func bad(format string, args ...any) error {
	return fmt.Errorf("%w: "+format, append([]any{ErrInput}, args...)...)
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }

func (p *Problem) check(s *System) error {
	n := s.species
	if !finite(p.From) || !finite(p.To) || p.To < p.From {
		return bad("run from %g s to %g s; give finite times, the end not before the start", p.From, p.To)
	}
	if len(p.Start) != n {
		return bad("%d concentrations for %d species; give one each", len(p.Start), n)
	}
	for i, y := range p.Start {
		if !finite(y) || y < 0 {
			return bad("species %d starts at %g; give a finite concentration, not below zero", i, y)
		}
	}
	if p.Rates == nil {
		return bad("no rate constants; set Rates")
	}
	if c, ok := p.Rates.(Constant); ok && len(c) != s.rates {
		return bad("%d rate constants given, %d needed; give one each", len(c), s.rates)
	}
	for i, c := range p.Rates.Corners() {
		if i > 0 && !(c >= p.Rates.Corners()[i-1]) {
			return bad("corner %d of the rates at %g s is out of order; give ascending times", i, c)
		}
	}
	for i, f := range p.Feeds {
		if f.Species < 0 || f.Species >= n || !finite(f.Rate) || f.Rate < 0 || !(f.To >= f.From) {
			return bad("feed %d: %g mol/L/s of species %d from %g s to %g s; give a rate not below zero, one of the %d species, and times in order", i, f.Rate, f.Species, f.From, f.To, n)
		}
	}
	for i, r := range p.Removals {
		if r.Species < 0 || r.Species >= n || !finite(r.K) || r.K < 0 || !(r.To >= r.From) {
			return bad("removal %d: %g 1/s of species %d from %g s to %g s; give a constant not below zero, one of the %d species, and times in order", i, r.K, r.Species, r.From, r.To, n)
		}
	}
	for i, j := range p.Jumps {
		if !finite(j.T) || (j.Scale != nil && len(j.Scale) != n) || (j.Add != nil && len(j.Add) != n) {
			return bad("jump %d at %g s with %d factors and %d amounts; give a finite time and none or %d of each", i, j.T, len(j.Scale), len(j.Add), n)
		}
		for x := range j.Scale {
			if !finite(j.Scale[x]) || j.Scale[x] < 0 {
				return bad("jump %d: factor %g of species %d; give a finite factor, not below zero", i, j.Scale[x], x)
			}
		}
		for x := range j.Add {
			if !finite(j.Add[x]) {
				return bad("jump %d: amount %g of species %d; give a finite amount", i, j.Add[x], x)
			}
		}
	}
	for i, e := range p.Events {
		if e.G == nil {
			return bad("event %d has no function; set G", i)
		}
	}
	for i, q := range p.Params {
		if q.Start != nil && len(q.Start) != n {
			return bad("parameter %d: %d starting slopes for %d species; give none or one each", i, len(q.Start), n)
		}
		for _, w := range q.Weights {
			if w.K < 0 || w.K >= s.rates || !finite(w.W) {
				return bad("parameter %d: weight %g of rate constant %d; give a finite weight and a constant from 0 to %d", i, w.W, w.K, s.rates-1)
			}
		}
	}
	return nil
}

// cuts appends the times at which the run must restart, ascending, without
// From and To themselves.
func (p *Problem) cuts(buf []float64) []float64 {
	buf = buf[:0]
	put := func(t float64) {
		if t > p.From && t < p.To {
			buf = append(buf, t)
		}
	}
	for _, t := range p.Rates.Corners() {
		put(t)
	}
	for _, f := range p.Feeds {
		put(f.From)
		put(f.To)
	}
	for _, r := range p.Removals {
		put(r.From)
		put(r.To)
	}
	for _, j := range p.Jumps {
		put(j.T)
	}
	sort.Float64s(buf)
	kept := buf[:0]
	for _, t := range buf {
		if len(kept) == 0 || t > kept[len(kept)-1] {
			kept = append(kept, t)
		}
	}
	return kept
}
