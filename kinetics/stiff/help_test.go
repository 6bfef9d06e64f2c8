package stiff

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"
)

// step is a reaction written out: k, reactants, products.
type step struct {
	k        float64
	lhs, rhs []int
}

func build(t testing.TB, n int, steps []step) (*System, Constant) {
	t.Helper()
	var list []Reaction
	var k Constant
	for i, s := range steps {
		r := Reaction{In: s.lhs, K: i}
		for _, a := range s.lhs {
			r.Net = append(r.Net, Term{a, -1})
		}
		for _, a := range s.rhs {
			r.Net = append(r.Net, Term{a, 1})
		}
		list = append(list, r)
		k = append(k, s.k)
	}
	sys, err := NewSystem(n, len(k), list)
	if err != nil {
		t.Fatal(err)
	}
	return sys, k
}

// end runs a problem and returns the end state and the solver.
func end(t testing.TB, sys *System, opt Options, p *Problem) ([]float64, *Solver) {
	t.Helper()
	s, err := NewSolver(sys, opt)
	if err != nil {
		t.Fatal(err)
	}
	if err := s.Run(context.Background(), p, nil); err != nil {
		t.Fatal(err)
	}
	y := make([]float64, sys.species)
	s.Y(y)
	return y, s
}

func near(t *testing.T, what string, got, want, rel float64, source string) {
	t.Helper()
	if e := math.Abs(got-want) / math.Abs(want); !(e <= rel) {
		t.Errorf("%s = %.16g, want %.16g (rel. error %.1e, allowed %.1e)\nsource: %s", what, got, want, e, rel, source)
	}
}

// randomNetwork draws reversible and one-way steps among n species of unit
// mass, so that the sum of all concentrations does not change. Rates span the
// given number of decades around one.
func randomNetwork(r *rand.Rand, n, m int, decades float64) []step {
	var out []step
	for range m {
		k := math.Pow(10, decades*(r.Float64()-0.5))
		pick := func() int { return r.IntN(n) }
		var s step
		switch r.IntN(4) {
		case 0, 1:
			s = step{k, []int{pick()}, []int{pick()}}
		case 2:
			s = step{k, []int{pick(), pick()}, []int{pick(), pick()}}
		case 3:
			s = step{k, []int{pick(), pick(), pick()}, []int{pick(), pick(), pick()}}
		}
		out = append(out, s)
		if r.IntN(3) > 0 {
			out = append(out, step{k * math.Pow(10, decades*(r.Float64()-0.5)), s.rhs, s.lhs})
		}
	}
	return out
}
