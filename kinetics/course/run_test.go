package course

import (
	"context"
	"errors"
	"math"
	"slices"
	"strings"
	"testing"

	"saddlebook/kinetics"
	"saddlebook/kinetics/stiff"
)

// Doses and removals by closed forms: a species without reaction that is fed,
// removed by first order and cut at an instant; beside it A → B.
func TestDosesAndRemovals(t *testing.T) {
	w := newNetwork(3)
	w.step(0.1, side(0), side(1))
	r := Run{Charge: []float64{1, 0, 0.5}, Basis: 0, Programme: hold(40), Products: []Product{{"B", []int{1}}},
		Doses: []Dose{
			{Species: 2, Amount: 1, From: 0, Lasts: 10},
			{Species: 0, Amount: 0.5, From: 10},
			{Species: 0, Amount: 0.25, From: 0},
			{Species: 0, Amount: 9, From: 50},
		},
		Removals: []Removal{{Species: 2, From: 10, To: 20, K: 0.2}, {Species: 1, From: 30, Leaves: 0.1}, {Species: 1, From: 60, Leaves: 0.1}},
		Report:   []float64{0, 5, 10, 15, 20, 30}}
	e := math.Exp
	a10 := 1.25*e(-1) + 0.5
	for _, c := range []*Course{simulate(t, w.m, r), integrate(t, w.m, r)} {
		p := c.Report
		for _, x := range []struct {
			what      string
			got, want float64
		}{
			{"A at 0", p[0].C[0], 1.25}, {"A at 5", p[1].C[0], 1.25 * e(-0.5)}, {"A at 10, dose included", p[2].C[0], a10},
			{"C at 5", p[1].C[2], 1}, {"C at 10", p[2].C[2], 1.5}, {"C at 15", p[3].C[2], 1.5 * e(-1)}, {"C at 20", p[4].C[2], 1.5 * e(-2)}, {"C at 30", p[5].C[2], 1.5 * e(-2)},
			{"conversion at 5, of what came by then", p[1].Conversion, 1 - e(-0.5)}, {"conversion at 10", p[2].Conversion, 1 - a10/1.75},
			{"yield at 10", p[2].Yields[0], 1.25 * (1 - e(-1)) / 1.75},
			{"B at 30, quenched", p[5].C[1], 0.1 * (1.75 - a10*e(-2))},
			{"B made at 30", p[5].Made[1], 1.75 - a10*e(-2)},
			{"A at the end", last(c).C[0], a10 * e(-3)},
		} {
			near(t, x.what, x.got, x.want, 1e-9)
		}
		if len(c.Warnings) != 2 || !strings.Contains(c.Warnings[0], "dose of A") || !strings.Contains(c.Warnings[1], "B is not removed") {
			t.Errorf("warnings %q, want that the last dose and removal do not come", c.Warnings)
		}
		if c.Balance > 1e-12 {
			t.Errorf("balance %g", c.Balance)
		}
		if c.Lowest < -1e-16 {
			t.Errorf("lowest %g", c.Lowest)
		}
	}
}

func TestUntil(t *testing.T) {
	// A → B (0.02), A → C (0.01), C → B (0.05), all without return.
	w := newNetwork(3)
	w.step(0.02, side(0), side(1))
	w.step(0.01, side(0), side(2))
	w.step(0.05, side(2), side(1))
	base := Run{Charge: []float64{2, 0, 0}, Basis: 0, Programme: hold(1000), Products: []Product{{"B", []int{1}}, {"C", []int{2}}}, PerBasis: []float64{1, 2}}
	for _, tt := range []struct {
		name  string
		until Until
		of    func(p Point) float64
	}{
		{"conversion", Until{Of: Conversion, Value: 0.95}, func(p Point) float64 { return p.Conversion }},
		{"amount falling", Until{Of: Amount, Index: 0, Value: 0.3}, func(p Point) float64 { return p.C[0] }},
		{"amount rising", Until{Of: Amount, Index: 1, Value: 0.3}, func(p Point) float64 { return p.C[1] }},
		{"yield", Until{Of: Yield, Index: 1, Value: 0.15}, func(p Point) float64 { return p.Yields[1] }},
		{"ratio", Until{Of: Ratio, Index: 0, Value: 10}, func(p Point) float64 { return p.C[1] / p.C[2] }},
	} {
		for name, f := range map[string]func(testing.TB, *kinetics.Mechanism, Run) *Course{"exact": simulate, "integrated": integrate} {
			r := base
			r.Until = []Until{{Of: Amount, Index: 0, Value: 1e-9}, tt.until}
			r.Trace = 50
			c := f(t, w.m, r)
			if c.Ended != 1 {
				t.Fatalf("%s, %s: ended by %d, want 1", tt.name, name, c.Ended)
			}
			near(t, tt.name+", "+name, tt.of(last(c)), tt.until.Value, 1e-10)
			// The points for drawing are spread over the run as it was.
			if n := len(c.Trace); n < 40 || c.Trace[n-1].T != c.End {
				t.Errorf("%s, %s: %d points to %g s of %g s", tt.name, name, n, c.Trace[n-1].T, c.End)
			}
		}
	}
}

// An end that a dose or a quench jumps over is met there; one that was never
// away from its value is not, nor is one that stays away.
func TestUntilAtJumps(t *testing.T) {
	w := newNetwork(2)
	w.step(1e-3, side(0), side(1))
	r := Run{Charge: []float64{1, 0}, Basis: 0, Programme: hold(100)}
	quench, dose := r, r
	quench.Removals = []Removal{{Species: 0, From: 50, Leaves: 0}}
	quench.Until = []Until{{Of: Amount, Index: 0, Value: 0.1}}
	dose.Doses = []Dose{{Species: 1, Amount: 1, From: 40}}
	dose.Until = []Until{{Of: Amount, Index: 1, Value: 0.5}}
	for _, f := range []func(testing.TB, *kinetics.Mechanism, Run) *Course{simulate, integrate} {
		if c := f(t, w.m, quench); c.Ended != 0 || c.End != 50 {
			t.Errorf("quench: ended by %d at %g s, want 0 at 50 s", c.Ended, c.End)
		}
		if c := f(t, w.m, dose); c.Ended != 0 || c.End != 40 {
			t.Errorf("dose: ended by %d at %g s, want 0 at 40 s", c.Ended, c.End)
		}
		never := r
		never.Until = []Until{{Of: Amount, Index: 1, Value: 0}, {Of: Conversion, Value: 0.5}}
		if c := f(t, w.m, never); c.Ended != -1 || c.End != 100 || len(c.Warnings) != 1 {
			t.Errorf("never: ended by %d at %g s with %q, want the end of the programme with a warning", c.Ended, c.End, c.Warnings)
		}
	}
}

// Limits that are no numbers, and say why.
func TestPairs(t *testing.T) {
	run := func(m *kinetics.Mechanism, seconds float64) *Course {
		r := Run{Charge: make([]float64, len(m.Species)), Basis: 0, Programme: hold(seconds), Products: []Product{{"B", []int{1}}, {"C", []int{2}}}, Report: []float64{seconds / 100}, Trace: 20}
		r.Charge[0] = 1
		return simulate(t, m, r)
	}
	same := newNetwork(3) // B and C form and rest in the same ratio
	same.exchange(1, 0.1, side(0), side(1))
	same.exchange(2, 0.1, side(0), side(2))
	c := run(same.m, 100)
	if q := c.Pairs[0]; !q.Coincide || q.Unreachable != "" || !math.IsNaN(q.Changeover) || !math.IsNaN(q.Even) {
		t.Errorf("limits that coincide: %+v", q)
	}
	if !math.IsNaN(last(c).Control[0]) {
		t.Error("control has a number where the limits coincide")
	}
	near(t, "x at equilibrium", last(c).Rest[0], 1.0/3, 1e-12)

	drained := newNetwork(4)
	drained.exchange(1, 0.1, side(0), side(1))
	drained.exchange(0.5, 0.1, side(0), side(2))
	drained.step(0.1, side(2), side(3))
	c = run(drained.m, 100)
	if q := c.Pairs[0]; q.Coincide || !strings.Contains(q.Unreachable, "not reachable") {
		t.Errorf("a drained product: %+v", q)
	}
	if p := last(c); !math.IsNaN(p.Control[0]) || !math.IsNaN(p.Rest[0]) || math.IsNaN(p.Kinetic[0]) {
		t.Errorf("a drained product: control %g, equilibrium %g, kinetic %g", p.Control[0], p.Rest[0], p.Kinetic[0])
	}

	oneWay := newNetwork(3) // what forms stays: equilibrium over no step is the composition itself
	oneWay.step(1, side(0), side(1))
	oneWay.step(3, side(0), side(2))
	c = run(oneWay.m, 100)
	if q := c.Pairs[0]; q.Unreachable == "" && !q.Coincide {
		t.Errorf("parallel steps without return: %+v", q)
	}
	near(t, "x without return", last(c).Shares[0], 0.25, 1e-9)

	nothing := newNetwork(3)
	nothing.exchange(1, 1, side(1), side(2))
	c = run(nothing.m, 100)
	if p := last(c); !math.IsNaN(p.Shares[0]) || !math.IsNaN(p.Control[0]) || p.C[1] != 0 {
		t.Errorf("where nothing forms: %+v", p)
	}
}

// A product that is a sum, and a pair whose equilibrium depends on the charge.
func TestSums(t *testing.T) {
	w := newNetwork(5) // A → B, C (one product) and 2 A ⇌ D (another); E stands by
	w.exchange(0.1, 0.01, side(0), side(1))
	w.exchange(0.3, 0.03, side(0), side(2))
	w.exchange(0.2, 0.001, side(0, 0), side(3))
	r := Run{Charge: []float64{0.5, 0, 0, 0, 0}, Basis: 0, Programme: hold(1e7), Products: []Product{{"mono", []int{1, 2}}, {"D", []int{3}}}, PerBasis: []float64{1, 2}, Report: []float64{1e-4}}
	c := simulate(t, w.m, r)
	p := last(c)
	near(t, "x at rest", (p.C[1]+p.C[2])/(p.C[1]+p.C[2]+p.C[3]), p.Rest[0], 1e-9)
	near(t, "control at rest", p.Control[0], 1, 1e-8)
	near(t, "balance of yields", p.Yields[0]+p.Yields[1]+1-p.Conversion, 1, 1e-12)
	early := c.Report[0]
	near(t, "x at once", early.Kinetic[0], 0.4/(0.4+0.2*0.5), 1e-3)
	if math.Abs(early.Control[0]) > 1e-3 {
		t.Errorf("control at once is %g", early.Control[0])
	}
}

func TestRefusals(t *testing.T) {
	m := addition()
	for _, tt := range []struct {
		name string
		with func(r *Run)
		says string
	}{
		{"charge", func(r *Run) { r.Charge = r.Charge[:3] }, "3 concentrations are charged for 4 species"},
		{"negative charge", func(r *Run) { r.Charge[1] = -1 }, "-1 mol/L of X"},
		{"no programme", func(r *Run) { r.Programme = nil }, "empty"},
		{"ramp first", func(r *Run) { r.Programme[0].Ramp = true }, "begin with a hold"},
		{"no time", func(r *Run) { r.Programme[1].Lasts = 0 }, "leg 2"},
		{"cold", func(r *Run) { r.Programme[1].To = 0 }, "leg 2"},
		{"lost leg", func(r *Run) { r.Programme[1].Lasts = 1e-20 }, "rounding"},
		{"endless", func(r *Run) { r.Programme[0].Lasts, r.Programme[1].Lasts = 1.5e308, 1.5e308 }, "longer than any number"},
		{"dose", func(r *Run) { r.Doses = []Dose{{Species: 9}} }, "dose 1 names species 9"},
		{"dose amount", func(r *Run) { r.Doses = []Dose{{Amount: math.NaN()}} }, "NaN mol/L of R"},
		{"removal", func(r *Run) { r.Removals = []Removal{{Species: -1}} }, "removal 1"},
		{"leaves", func(r *Run) { r.Removals = []Removal{{Leaves: 1.1}} }, "fraction 1.1 of R"},
		{"removal times", func(r *Run) { r.Removals = []Removal{{K: 1, From: 2, To: 1}} }, "in order"},
		{"removal constant", func(r *Run) { r.Removals = []Removal{{K: -1}} }, "-1 1/s"},
		{"basis", func(r *Run) { r.Basis = 4 }, "basis is species 4"},
		{"per basis", func(r *Run) { r.PerBasis = []float64{1} }, "1 numbers of basis units"},
		{"no species", func(r *Run) { r.Products[0].Members = nil }, "A has no species"},
		{"unknown member", func(r *Run) { r.Products[0].Members = []int{7} }, "species 7"},
		{"twice", func(r *Run) { r.Products[0].Members = []int{2, 2} }, "counts A twice"},
		{"pair", func(r *Run) { r.Pairs = [][2]int{{0, 2}} }, "product 2"},
		{"pair in common", func(r *Run) { r.Pairs = [][2]int{{0, 0}} }, "no species in common"},
		{"report", func(r *Run) { r.Report = []float64{2, 1} }, "ascending"},
		{"until", func(r *Run) { r.Until = []Until{{Of: Yield, Index: 2}} }, "yield of number 2"},
		{"until what", func(r *Run) { r.Until = []Until{{Of: 9}} }, "measure 9"},
		{"until basis", func(r *Run) { r.Basis = -1; r.Until = []Until{{Of: Conversion, Value: 0.5}} }, "needs a basis"},
		{"until value", func(r *Run) { r.Until = []Until{{Of: Conversion, Value: math.Inf(1)}} }, "+Inf"},
		{"trace", func(r *Run) { r.Trace = -1 }, "-1 points"},
		{"tolerance", func(r *Run) { r.RTol = 0.5 }, "0.5"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			r := coldRun()
			r.Products = slices.Clone(r.Products)
			tt.with(&r)
			_, err := Simulate(context.Background(), m, r)
			if !errors.Is(err, ErrRun) || !strings.Contains(err.Error(), tt.says) {
				t.Errorf("error %v, want one that matches ErrRun and says %q", err, tt.says)
			}
		})
	}
	low := addition()
	h := *low.Steps[0].Energy.Heat
	h.S = 9 * kcal / 250 // level with the reactants at 250 K
	low.Steps[0].Energy.Heat = &h
	var bad kinetics.Complaints
	if _, err := Simulate(context.Background(), low, coldRun()); !errors.As(err, &bad) {
		t.Errorf("error %v, want complaints of a transition state that falls below its side in the ramp", err)
	}
}

// A catalyst written on both sides is taken into the constants, whatever its
// amount; what can never form is left out.
func TestCatalystOnBothSides(t *testing.T) {
	w := newNetwork(5) // A + C ⇌ B + C; D + C → E + C cannot happen
	w.exchange(10, 1, side(0, 2), side(2, 1))
	w.step(1e9, side(3, 2), side(4, 2))
	r := Run{Charge: []float64{1, 0, 0.01, 0, 0}, Basis: 0, Programme: hold(20), Products: []Product{{"B", []int{1}}, {"E", []int{4}}},
		Doses:    []Dose{{Species: 2, Amount: 0.02, From: 5}},
		Removals: []Removal{{Species: 2, From: 10, Leaves: 0}}}
	for _, f := range []func(testing.TB, *kinetics.Mechanism, Run) *Course{simulate, integrate} {
		c := f(t, w.m, r)
		// a = 1/11 + 10/11 exp(−11·C·t)
		near(t, "A", last(c).C[0], 1.0/11+10.0/11*math.Exp(-11*(0.01*5+0.03*5)), 1e-9)
		if last(c).C[4] != 0 || last(c).C[2] != 0 {
			t.Errorf("E is %g, C is %g, want none", last(c).C[4], last(c).C[2])
		}
	}
	if c := simulate(t, w.m, r); !strings.HasPrefix(c.Method, "exact") {
		t.Errorf("method %q, want the exact one", c.Method)
	}
}

func TestStuck(t *testing.T) {
	err := error(&stiff.StuckError{T: 7, Steps: 3, Species: 1, Fastest: 1e9, Why: "the step has become too short"})
	p, _ := Prepare(addition(), coldRun())
	w := newWalk(context.Background(), p, addition())
	if e := w.stretches(); e != nil {
		t.Fatal(e)
	}
	w.at = &w.list[0]
	err = w.stuck(err)
	const want = "the time course could not go on at 7 s and 195.15 K, after 3 steps: the step has become too short; fastest is what uses up X, at 1e+09 1/s; check the rate constants of X, or make one species of it and what it exchanges with"
	if err.Error() != want || !errors.Is(err, stiff.ErrStuck) {
		t.Errorf("error %q\nwant  %q, matching ErrStuck", err, want)
	}
}

func TestTooFast(t *testing.T) {
	m := addition()
	m.Steps[0].Degeneracy = 1e300
	m.Steps[0].Transmission = 1e10
	if _, err := Simulate(context.Background(), m, coldRun()); err == nil {
		t.Error("no error for a rate constant beyond any number")
	}
}
