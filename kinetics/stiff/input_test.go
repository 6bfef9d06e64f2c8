package stiff

import (
	"context"
	"errors"
	"math"
	"testing"
)

func TestInput(t *testing.T) {
	sys, k := build(t, 2, []step{{1, []int{0}, []int{1}}})
	ok := Problem{To: 1, Start: []float64{1, 0}, Rates: k}
	for name, change := range map[string]func(*Problem){
		"end before start":   func(p *Problem) { p.To = -1 },
		"wrong length":       func(p *Problem) { p.Start = []float64{1} },
		"below zero":         func(p *Problem) { p.Start = []float64{1, -1} },
		"not a number":       func(p *Problem) { p.Start = []float64{math.NaN(), 0} },
		"no rates":           func(p *Problem) { p.Rates = nil },
		"too few rates":      func(p *Problem) { p.Rates = Constant{} },
		"rate below zero":    func(p *Problem) { p.Rates = Constant{-1} },
		"feed of no species": func(p *Problem) { p.Feeds = []Feed{{0, 1, 2, 1}} },
		"removal below zero": func(p *Problem) { p.Removals = []Removal{{0, 1, 0, -1}} },
		"jump of NaN":        func(p *Problem) { p.Jumps = []Jump{{T: math.NaN()}} },
		"event without G":    func(p *Problem) { p.Events = []Event{{}} },
		"weight of no rate":  func(p *Problem) { p.Params = []Param{{Weights: []Weight{{3, 1}}}} },
	} {
		p := ok
		change(&p)
		if _, err := Solve(context.Background(), sys, Options{}, p, nil); !errors.Is(err, ErrInput) {
			t.Errorf("%s: error %v, want ErrInput", name, err)
		}
	}
	for name, r := range map[string]Reaction{
		"rate constant":        {In: []int{0}, K: 1},
		"reactant":             {In: []int{2}},
		"net species":          {In: []int{0}, Net: []Term{{-1, 1}}},
		"coefficient":          {In: []int{0}, Net: []Term{{0, math.Inf(1)}}},
		"used but not in rate": {In: []int{0}, Net: []Term{{1, -1}}},
		"order":                {In: make([]int, 9)},
	} {
		if _, err := NewSystem(2, 1, []Reaction{r}); !errors.Is(err, ErrInput) {
			t.Errorf("%s: error %v, want ErrInput", name, err)
		}
	}
	for name, o := range map[string]Options{"rtol": {RTol: 2}, "rtol NaN": {RTol: math.NaN()}, "atol": {ATol: -1}, "atols": {ATols: []float64{1}}} {
		if _, err := NewSolver(sys, o); !errors.Is(err, ErrInput) {
			t.Errorf("%s: error %v, want ErrInput", name, err)
		}
	}
}

// TestNoReactions: a feed alone, into one species.
func TestNoReactions(t *testing.T) {
	sys, err := NewSystem(1, 0, nil)
	if err != nil {
		t.Fatal(err)
	}
	y, _ := end(t, sys, Options{}, &Problem{To: 10, Start: []float64{0.5}, Rates: Constant{}, Feeds: []Feed{{2, 4, 0, 0.25}}})
	near(t, "y", y[0], 1, 1e-15, "0.5 + 2 s at 0.25 /s")
}
