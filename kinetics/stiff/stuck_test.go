package stiff

import (
	"context"
	"errors"
	"math"
	"testing"
)

// TestBlowUp: 2 A -> 3 A has no solution beyond its pole, 1/(k a). The run ends
// there with ErrStuck, and what it gives before is right.
func TestBlowUp(t *testing.T) {
	const pole = 0.5
	sys, k := build(t, 2, []step{{4, []int{0, 0}, []int{0, 0, 0}}, {1e-3, []int{1}, nil}})
	for _, rtol := range []float64{1e-4, 1e-8} {
		at := []float64{0.1, 0.25, 0.49, 0.6, 1}
		c, err := Solve(context.Background(), sys, Options{RTol: rtol}, Problem{To: 1, Start: []float64{0.5, 1}, Rates: k}, at)
		var stuck *StuckError
		if !errors.Is(err, ErrStuck) || !errors.As(err, &stuck) {
			t.Fatalf("rtol %g: error %v, want ErrStuck", rtol, err)
		}
		if c == nil || len(c.T) != 3 {
			t.Fatalf("rtol %g: course %+v, want the three times before the pole", rtol, c)
		}
		for i, x := range c.T {
			near(t, "A", c.Y[i][0], 1/(2-4*x), 1000*rtol, "closed form 1/(1/a - k t)")
		}
		if !(stuck.T > 0.999*pole && stuck.T < pole*(1+100*rtol)) || stuck.T != c.End {
			t.Errorf("rtol %g: stuck at %.12g s, course to %.12g s, want just before the pole at %g s", rtol, stuck.T, c.End, pole)
		}
		for i, y := range c.Final {
			if !finite(y) {
				t.Errorf("rtol %g: y[%d] = %g in the last state, want a finite number", rtol, i, y)
			}
		}
	}
}

// sick rates are sound up to 1 s only.
type sick struct{ after float64 }

func (sick) Corners() []float64 { return nil }
func (sick) Held(int) bool      { return false }
func (s sick) At(_ int, t float64, k, dk []float64) {
	k[0] = 1
	clear(dk)
	if t > 1 {
		k[0] = s.after
	}
}

// TestSickRates: a rate constant that turns into no number, or into infinity,
// in mid run ends the run there, and not with a wrong answer.
func TestSickRates(t *testing.T) {
	sys, _ := build(t, 2, chain(1))
	for _, after := range []float64{math.NaN(), math.Inf(1)} {
		c, err := Solve(context.Background(), sys, Options{}, Problem{To: 3, Start: []float64{1, 0}, Rates: sick{after}}, nil)
		if !errors.Is(err, ErrStuck) {
			t.Fatalf("constant %g from 1 s on: error %v, want ErrStuck", after, err)
		}
		if !(c.End > 0.99 && c.End <= 1) {
			t.Errorf("constant %g: reached %g s, want just below 1 s", after, c.End)
		}
		near(t, "A", c.Final[0], math.Exp(-c.End), 1e-5, "closed form exp(-t)")
		s := forced(t, sys, Options{})
		err = s.Run(context.Background(), &Problem{To: 3, Start: []float64{1, 0}, Rates: sick{after}}, nil)
		var stuck *StuckError
		if !errors.As(err, &stuck) || stuck.Why != tooShort {
			t.Fatalf("constant %g, multistep: error %v, want ErrStuck of the Rosenbrock method, which takes over", after, err)
		}
		y := make([]float64, 2)
		s.Y(y)
		near(t, "A, multistep", y[0], math.Exp(-s.T()), 1e-5, "closed form exp(-t)")
		if st := s.Stats(); !(s.T() > 0.99 && s.T() <= 1) || st.Multistep == 0 {
			t.Errorf("constant %g, multistep: reached %g s by %+v, want just below 1 s", after, s.T(), st)
		}
		if _, err := Solve(context.Background(), sys, Options{}, Problem{From: 2, To: 3, Start: []float64{1, 0}, Rates: sick{after}}, nil); !errors.Is(err, ErrInput) {
			t.Errorf("constant %g from the start: error %v, want ErrInput", after, err)
		}
	}
}

// TestStepLimit: the limit counts tried steps over all pieces, with events and
// slopes too, and leaves the solver at the last state within tolerance.
func TestStepLimit(t *testing.T) {
	sys, _ := build(t, 2, []step{{1, []int{0}, []int{1}}})
	p := ramped(t, Node{0, 280}, Node{50, 300}, Node{100, 300})
	run := Problem{To: 200, Start: []float64{1, 0}, Rates: p, Params: []Param{{Start: []float64{1, 0}}},
		Events: []Event{{G: func(_ float64, y []float64) float64 { return y[0] - 0.3 }}}}
	opt := Options{RTol: 1e-9, ATol: 1e-14}
	free, err := Solve(context.Background(), sys, opt, run, nil)
	if err != nil {
		t.Fatal(err)
	}
	all := free.Stats.Steps + free.Stats.Rejected
	for _, limit := range []int{1, all / 2, all - 1} {
		opt.MaxSteps = limit
		c, err := Solve(context.Background(), sys, opt, run, nil)
		var stuck *StuckError
		if !errors.As(err, &stuck) {
			t.Fatalf("limit %d of %d: error %v, want ErrStuck", limit, all, err)
		}
		if n := c.Stats.Steps + c.Stats.Rejected; n != limit || stuck.Steps != c.Stats.Steps {
			t.Errorf("limit %d: %d steps tried, error says %d taken", limit, n, stuck.Steps)
		}
		if !(c.End < 200) || c.End != stuck.T {
			t.Errorf("limit %d: reached %g s, error says %g s", limit, c.End, stuck.T)
		}
		near(t, "A + B", c.Final[0]+c.Final[1], 1, 1e-14, "conservation")
	}
	opt.MaxSteps = all
	if _, err := Solve(context.Background(), sys, opt, run, nil); err != nil {
		t.Errorf("limit %d, as many as needed: %v", all, err)
	}
}
