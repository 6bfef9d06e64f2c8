package control_test

import (
	"context"
	"math"
	"testing"

	"saddlebook/kinetics"
	"saddlebook/kinetics/control"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/thermo"
)

const kcal = 1000 * rate.Calorie

// level is one state of a mechanism, kcal/mol.
type level struct {
	name string
	g    float64
}

// way is one step: its transition state, kcal/mol.
type way struct {
	name, reaction string
	g              float64
}

func mechanism(t testing.TB, T float64, species []level, steps []way) *kinetics.Mechanism {
	t.Helper()
	m := &kinetics.Mechanism{ID: "test", Temperature: T}
	var names []string
	for _, s := range species {
		names = append(names, s.name)
		m.Species = append(m.Species, kinetics.Species{Name: s.name, Energy: thermo.Constant(s.g * kcal)})
	}
	for _, s := range steps {
		from, to, returns, err := kinetics.ParseReaction(s.reaction, names)
		if err != nil {
			t.Fatal(err)
		}
		m.Steps = append(m.Steps, kinetics.Step{Name: s.name, From: from, To: to, Returns: returns, Energy: thermo.Constant(s.g * kcal)})
	}
	return m
}

// point builds a problem by names.
func point(t testing.TB, m *kinetics.Mechanism, rateOf string, held, totals map[string]float64) control.Problem {
	t.Helper()
	p := control.Problem{Catalyst: -1}
	for range m.Species {
		p.Held = append(p.Held, math.NaN())
		p.Total = append(p.Total, math.NaN())
	}
	for name, c := range held {
		p.Held[index(t, m, name)] = c
	}
	for name, c := range totals {
		p.Total[index(t, m, name)] = c
	}
	p.RateOf = []kinetics.Term{{Species: index(t, m, rateOf), N: 1}}
	return p
}

func index(t testing.TB, m *kinetics.Mechanism, name string) int {
	t.Helper()
	for i, s := range m.States() {
		if s == name {
			return i
		}
	}
	t.Fatalf("no state %q", name)
	return -1
}

func analyse(t testing.TB, m *kinetics.Mechanism, T float64, p control.Problem) *control.Result {
	t.Helper()
	r, err := control.Analyse(context.Background(), m, T, p)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// near compares relative to want, or absolutely below 1e-300 of it.
func near(t testing.TB, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol*math.Abs(want)) {
		t.Errorf("%s = %.16g, want %.16g (off by %.1e)", what, got, want, math.Abs(got-want)/math.Abs(want))
	}
}

func close(t testing.TB, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.16g, want %.16g (off by %.1e)", what, got, want, math.Abs(got-want))
	}
}

func order(t testing.TB, m *kinetics.Mechanism, r *control.Result, name string) float64 {
	t.Helper()
	i := index(t, m, name)
	for _, o := range r.Orders {
		if o.Species == i {
			return o.Order
		}
	}
	t.Fatalf("no order in %s", name)
	return 0
}

// k is Eyring's rate constant for a barrier in kcal/mol.
func k(g, T float64) float64 {
	return rate.Boltzmann / rate.Planck * T * math.Exp(-g*kcal/(rate.R*T))
}
