package kinetics

import (
	"errors"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/thermo"
)

// The invented addition of the manual at -78 °C, worked by hand:
// ΔG‡(A) = 9.0 + 195.15 × 0.0246, ΔG‡(B) = 9.9 + 195.15 × 0.0261 kcal/mol.
func TestAdditionWorked(t *testing.T) {
	n := at(t, addition(), cold)
	a, b := n.Reactions[0], n.Reactions[1]
	near(t, "barrier A", a.Barrier/kcal, 13.80069, 1e-12)
	near(t, "barrier B", b.Barrier/kcal, 14.993415, 1e-12)
	near(t, "ΔG A", a.DeltaG/kcal, -11.5+195.15*0.033, 1e-12)
	near(t, "barrier back A", a.BarrierBack/kcal, 13.80069+11.5-195.15*0.033, 1e-12)
	near(t, "kinetic ratio A:B", a.Forward/b.Forward, math.Exp((14.993415-13.80069)*kcal/(rate.R*cold)), 1e-12)
	near(t, "k A", a.Forward, 1.380649e-23*cold/6.62607015e-34*math.Exp(-13.80069*kcal/(rate.R*cold)), 1e-12)
	near(t, "K A", a.K, math.Exp(-(-11.5+195.15*0.033)*kcal/(rate.R*cold)), 1e-12)
	chi := math.Sqrt(a.Barrier) / (math.Sqrt(a.Barrier) + math.Sqrt(a.BarrierBack))
	near(t, "position", a.Position, chi, 1e-12)

	l, err := n.KineticLimit(Limit{From: 0, Products: []int{2, 3}})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "limit A:B", l.Shares[0]/l.Shares[1], a.Forward/b.Forward, 1e-12)
	if len(l.Assumes) > 0 {
		t.Errorf("the partner cancels, yet the limit assumes %q", l.Assumes)
	}
}

func TestDetailedBalance(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for trial := 0; trial < 300; trial++ {
		m := random(r)
		T := 200 + 300*r.Float64()
		n := at(t, m, T)
		for _, x := range n.Reactions {
			near(t, "k/k-back", x.Forward/x.Back, x.K, 1e-9)
			near(t, "ln k - ln k-back", math.Exp(x.LnForward-x.LnBack), x.K, 1e-9)
			near(t, "ΔG", n.sum(x.To)-n.sum(x.From), x.DeltaG, 1e-12)
		}
	}
}

// Degeneracy and transmission act on both directions, and K stays.
func TestFactorsLeaveK(t *testing.T) {
	m := build(t, 298.15, []state{{"A", 0}, {"B", -2}}, []state{{"TS: A <=> B", 20}})
	plain := at(t, m, 298.15).Reactions[0]
	m.Steps[0].Degeneracy, m.Steps[0].Transmission = 3, 0.5
	r := at(t, m, 298.15).Reactions[0]
	near(t, "forward", r.Forward, 1.5*plain.Forward, 1e-12)
	near(t, "back", r.Back, 1.5*plain.Back, 1e-12)
	if r.K != plain.K || r.Barrier != plain.Barrier {
		t.Error("a factor changed K or the barrier")
	}
}

func TestStandardState(t *testing.T) {
	const T = 298.15
	const shift = 1.89432844549415 // kcal/mol; 1 atm to 1 mol/L at 25 °C, recomputed from exact constants
	m := build(t, T, []state{{"R", 0}, {"X", 0}, {"A", -5}}, []state{{"TS: R + X <=> A", 20}})
	gas := rate.Standard{Pressure: 101325}
	for i := range m.Species {
		m.Species[i].Standard = gas
	}
	m.Steps[0].Standard = gas
	r := at(t, m, T).Reactions[0]
	near(t, "barrier", r.Barrier/kcal, 20-shift, 1e-9) // one state less two
	near(t, "back", r.BarrierBack/kcal, 25, 1e-12)
	near(t, "ΔG", r.DeltaG/kcal, -5-shift, 1e-9)

	// The same barrier given above the reactants.
	m.Steps[0].Above = true
	b := at(t, m, T).Reactions[0]
	near(t, "barrier above", b.Barrier, r.Barrier, 1e-12)
	near(t, "k above", b.Forward, r.Forward, 1e-9)
	near(t, "back above", b.Back, r.Back, 1e-9)

	// Of one molecule it is the same at any standard state.
	one := build(t, T, []state{{"R", 3}, {"A", -5}}, []state{{"TS: R <=> A", 20}})
	one.Steps[0].Above, one.Steps[0].Standard = true, gas
	near(t, "barrier of one molecule", at(t, one, T).Reactions[0].Barrier/kcal, 20, 1e-12)
}

func TestForms(t *testing.T) {
	const T = 300
	m := build(t, T, []state{{"A", 0}, {"B", 0}}, []state{{"TS: A <=> B", 20}})
	m.Species[1].Forms = 2
	r := at(t, m, T).Reactions[0]
	near(t, "K of a pair of forms", r.K, 2, 1e-12)
	// A barrier stands above the reactants as they are, forms included.
	m.Steps[0].Above = true
	m.Species[0].Forms = 4
	near(t, "barrier", at(t, m, T).Reactions[0].Barrier/kcal, 20, 1e-12)
}

func TestShiftOfZeroChangesNothing(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	m := addition()
	n := at(t, m, cold)
	for trial := 0; trial < 50; trial++ {
		// R and X each bring a constant of their own into all that holds them.
		dr, dx := 1e4*r.NormFloat64(), 1e4*r.NormFloat64()
		s := at(t, m.Shifted([]float64{dr, dx, dr + dx, dr + dx, dr + dx, dr + dx}), cold)
		for i, x := range n.Reactions {
			near(t, "barrier", s.Reactions[i].Barrier, x.Barrier, 1e-11)
			near(t, "back", s.Reactions[i].BarrierBack, x.BarrierBack, 1e-11)
			near(t, "K", s.Reactions[i].K, x.K, 1e-9)
			near(t, "k", s.Reactions[i].Forward, x.Forward, 1e-9)
		}
		a, err := n.KineticLimit(Limit{From: 0, Products: []int{2, 3}})
		if err != nil {
			t.Fatal(err)
		}
		b, err := s.KineticLimit(Limit{From: 0, Products: []int{2, 3}})
		if err != nil {
			t.Fatal(err)
		}
		near(t, "share", b.Shares[0], a.Shares[0], 1e-9)
		la, _ := n.Levels([]string{"A", "TSa", "R", "TSb", "B"}, nil)
		lb, err := s.Levels([]string{"A", "TSa", "R", "TSb", "B"}, nil)
		if err != nil {
			t.Fatal(err)
		}
		for i := range la {
			if math.Abs(la[i].G-lb[i].G) > 1e-6 {
				t.Errorf("level %s moved from %g to %g", la[i].Name, la[i].G, lb[i].G)
			}
		}
	}
}

func TestAtRefuses(t *testing.T) {
	low := build(t, 298.15, []state{{"R", 0}, {"X", 1}, {"A", 3}}, []state{{"TS: R + X -> A", 2.5}})
	under := build(t, 298.15, []state{{"A", 0}, {"B", -1}}, []state{{"TS: A <=> B", -0.5}})
	barrier := build(t, 298.15, []state{{"A", 0}, {"B", -1}}, []state{{"TS: A <=> B", -0.5}})
	barrier.Steps[0].Above = true
	mixed := addition()
	mixed.Species[1].Energy = thermo.Constant(0)
	factor := build(t, 298.15, []state{{"A", 0}, {"B", -1}}, []state{{"TS: A <=> B", 20}})
	factor.Steps[0].Degeneracy = -2
	many := build(t, 298.15, []state{{"A", 0}, {"B", -1}}, []state{{"TS: A <=> B", 20}})
	many.Steps[0].From[0].N = 4
	nan := build(t, 298.15, []state{{"A", math.NaN()}, {"B", -1}}, []state{{"TS: A <=> B", 20}})
	for _, tt := range []struct {
		name  string
		m     *Mechanism
		T     float64
		state string
		want  string
	}{
		{"product side", low, 298.15, "TS", "TS lies 0.5 kcal/mol (2.1 kJ/mol) below its products A at 25 °C"},
		{"reactant side", under, 298.15, "TS", "0.5 kcal/mol (2.1 kJ/mol) below its reactants A at 25 °C"},
		{"barrier", barrier, 298.15, "TS", "the barrier of TS is −0.5 kcal/mol"},
		{"mixed scales", mixed, 273.15, "TSa", "step TSa mixes energies that follow temperature (TSa, R, A) with a constant G (X), so it has no meaning at 0 °C"},
		{"degeneracy", factor, 298.15, "TS", "-2"},
		{"four molecules", many, 298.15, "TS", "4 molecules meet"},
		{"not a number", nan, 298.15, "A", "not a finite number"},
		{"no temperature", low, -1, "", "temperature -1 K makes no sense"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			_, err := tt.m.At(tt.T)
			var cs Complaints
			if !errors.As(err, &cs) {
				t.Fatalf("error %v is no Complaints", err)
			}
			c := cs[0]
			if !c.Fatal || c.State != tt.state || !strings.Contains(c.Msg, tt.want) || c.Fix == "" {
				t.Errorf("got %+v; want %s: %q", c, tt.state, tt.want)
			}
		})
	}
	// At the mechanism's own temperature mixed scales do no harm.
	if _, err := mixed.At(mixed.Temperature); err != nil {
		t.Error(err)
	}
	// A transition state level with a side by rounding is no fault.
	level := build(t, 298.15, []state{{"A", 0}, {"B", 7}}, []state{{"TS: A <=> B", 7 * (1 - 1e-12)}})
	if r := at(t, level, 298.15).Reactions[0]; r.BarrierBack != 0 || r.Raised {
		t.Errorf("level with a side: barrier back %g, raised %v", r.BarrierBack, r.Raised)
	}
}

func TestHeld(t *testing.T) {
	m := build(t, cold, []state{{"R", 0}, {"A", -3}}, []state{{"TSa: R <=> A", 14}})
	if h := m.Held(cold); h != nil {
		t.Errorf("at its own temperature: %q", h)
	}
	want := "TSa: its G is held constant from −78 °C to 25 °C; over 103 K an unknown ΔS‡ of −30 cal/mol/K would move this barrier by 3.1 kcal/mol (12.9 kJ/mol)"
	if h := m.Held(298.15); len(h) != 1 || h[0] != want {
		t.Errorf("got %q\nwant %q", h, want)
	}
	if h := addition().Held(298.15); h != nil {
		t.Errorf("energies that follow temperature: %q", h)
	}
	m = addition()
	m.Steps[0].Above, m.Steps[0].Energy = true, thermo.Constant(14*kcal)
	if h := m.Held(298.15); len(h) != 1 || !strings.HasPrefix(h[0], "TSa: its barrier is held constant") {
		t.Errorf("a barrier beside species that follow temperature: %q", h)
	}
	if _, err := m.At(298.15); err != nil {
		t.Error(err)
	}
}

// Common practice: equal barriers give 50:50, and a lower barrier leads by
// exp(ΔΔG‡/RT), 10:1 at 25 °C for 1.36 kcal/mol.
func TestCommonPracticeRatios(t *testing.T) {
	for _, tt := range []struct{ ddG, want, rel float64 }{{0, 1, 1e-12}, {1.364, 10, 2e-3}, {2.728, 100, 4e-3}} {
		m := build(t, 298.15, []state{{"R", 0}, {"A", -3}, {"B", -3}}, []state{{"TSa: R <=> A", 20}, {"TSb: R <=> B", 20 + tt.ddG}})
		l, err := at(t, m, 298.15).KineticLimit(Limit{From: 0, Products: []int{1, 2}})
		if err != nil {
			t.Fatal(err)
		}
		near(t, "A:B", l.Shares[0]/l.Shares[1], tt.want, tt.rel)
	}
}

// Published kinetic ratios and the difference of barriers that each means,
// recomputed as RT ln(first/second) from exact constants by other code.
func TestPublishedRatios(t *testing.T) {
	for _, tt := range []struct {
		source        string
		T, a, b, kcal float64
	}{
		{"HBr + 1,3-butadiene, kinetic: OpenStax Organic Chemistry, section 14.3", 273.15, 71, 29, 0.486018797308133},
		{"HBr + 1,3-butadiene, kinetic: Solomons and Fryhle, Organic Chemistry, section 13.10", 193.15, 80, 20, 0.5320992887311351},
		{"naphthalene sulfonation, kinetic: Cerfontain and Telder, Rec. Trav. Chim. 86, 527 (1967)", 298.15, 5.9, 1, 1.05163255437423},
	} {
		t.Run(tt.source, func(t *testing.T) {
			m := build(t, tt.T, []state{{"R", 0}, {"A", -3}, {"B", -3}}, []state{{"TSa: R <=> A", 15}, {"TSb: R <=> B", 15 + tt.kcal}})
			l, err := at(t, m, tt.T).KineticLimit(Limit{From: 0, Products: []int{1, 2}})
			if err != nil {
				t.Fatal(err)
			}
			near(t, "ratio", l.Shares[0]/l.Shares[1], tt.a/tt.b, 1e-9)
		})
	}
}
