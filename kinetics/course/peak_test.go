package course

import (
	"math"
	"testing"
)

// Consecutive steps with k1 and k2: there is most of the intermediate after
// ln(k1/k2)/(k1 − k2), and then (k1/k2)^(k2/(k2−k1)) of it. Source as closedSource.
func TestPeaks(t *testing.T) {
	for _, tt := range []struct{ a, b float64 }{{1, 0.5}, {0.1, 0.01}, {0.02, 0.2}, {1e-3, 10}} {
		w := newNetwork(3)
		w.step(tt.a, side(0), side(1))
		w.step(tt.b, side(1), side(2))
		when := math.Log(tt.a/tt.b) / (tt.a - tt.b)
		most := math.Pow(tt.a/tt.b, tt.b/(tt.b-tt.a))
		r := Run{Charge: []float64{1, 0, 0}, Basis: 0, Programme: hold(20 / min(tt.a, tt.b)), Peaks: true,
			Products: []Product{{"B", []int{1}}, {"C", []int{2}}}}
		for _, c := range []*Course{simulate(t, w.m, r), integrate(t, w.m, r)} {
			b, last := c.Peaks[0], c.Peaks[1]
			if math.Abs(b.Amount-most) > 1e-8*most || math.Abs(b.T-when) > 1e-4*when {
				t.Errorf("k %g and %g: most of B is %.10g at %.8g s, want %.10g at %.8g s (%s; %s)", tt.a, tt.b, b.Amount, b.T, most, when, c.Method, closedSource)
			}
			if end := c.Report[len(c.Report)-1].C[2]; math.Abs(last.Amount-end) > 1e-8 {
				t.Errorf("k %g and %g: C rises throughout, and there is most of it, %g, before the end, %g", tt.a, tt.b, last.Amount, end)
			}
			// only the second step sets heat free: fastest when there is most B
			h, err := c.Heat(HeatData{Species: []float64{0, 0, -5e4}})
			if err != nil {
				t.Fatal(err)
			}
			if want := 5e4 * tt.b * most; math.Abs(h.Peak-want) > 0.01*want || math.Abs(h.PeakAt-when) > 0.2*when {
				t.Errorf("k %g and %g: heat comes fastest at %g W/L after %g s, want %g W/L after %g s (%s)", tt.a, tt.b, h.Peak, h.PeakAt, want, when, c.Method)
			}
		}
	}
}

// An exchange that is over in a billionth of the run does not have its rate taken
// for that of the run.
func TestPaceLeavesOutAFastExchange(t *testing.T) {
	w := newNetwork(3)
	w.exchange(1e8, 1e8, side(0), side(1))
	w.step(1e-3, side(0), side(2))
	r := Run{Charge: []float64{1, 0, 0}, Basis: 0, Programme: hold(5000), Peaks: true}
	for _, c := range []*Course{simulate(t, w.m, r), integrate(t, w.m, r)} {
		h, err := c.Heat(HeatData{Species: []float64{0, -1e4, -5e4}})
		if err != nil {
			t.Fatal(err)
		}
		// half of all is in 0: the step goes at 5e-4 M/s, and what it makes comes to
		// equal parts from both
		if want := 5e-4 * 4.5e4; math.Abs(h.Peak-want) > 0.02*want {
			t.Errorf("heat comes fastest at %g W/L, want %g (%s)", h.Peak, want, c.Method)
		}
	}
}

// What is dosed does not count in the heat left, and is told apart; the way to the
// most heat is named, and the run takes another.
func TestHeatOfDosesAndOfTheRun(t *testing.T) {
	w := newNetwork(4)
	w.step(1e-2, side(0, 1), side(2)) // 30 kJ/mol
	w.step(1e-9, side(0, 0), side(3)) // 80 kJ/mol for two
	r := Run{Charge: []float64{1, 0.2, 0, 0}, Basis: 0, Programme: hold(10_000), Peaks: true,
		Doses: []Dose{{Species: 1, Amount: 0.3, From: 0, Lasts: 5000}, {Species: 1, Amount: 0.1}}}
	c := simulate(t, w.m, r)
	h, err := c.Heat(HeatData{Species: []float64{0, 0, -3e4, -8e4}})
	if err != nil {
		t.Fatal(err)
	}
	// all into 3 gives 40 kJ/L; one of 0 with 1 gives 30 kJ and is not worth it
	if math.Abs(h.Whole-4e4) > 1e-6 || h.Way[0] != 0 || math.Abs(h.Way[1]-0.5) > 1e-12 || math.Abs(h.Dosed) > 1e-6 {
		t.Errorf("the most is %g by way of %v, doses %g", h.Whole, h.Way, h.Dosed)
	}
	if want := 3e4 * c.Report[len(c.Report)-1].C[2]; math.Abs(h.Run-want) > 1e-3*want {
		t.Errorf("the run sets free %g, want %g", h.Run, want)
	}
	h, err = c.Heat(HeatData{Species: []float64{0, 0, -5e4, -8e4}, PerKelvin: 2000})
	if err != nil {
		t.Fatal(err)
	}
	// 0.6 through the first step, the rest through the second
	if want := 0.6*5e4 + 0.2*8e4; math.Abs(h.Whole-want) > 1e-6 {
		t.Errorf("the most is %g, want %g", h.Whole, want)
	}
	if want := 0.3*5e4 - 0.15*8e4; math.Abs(h.Dosed-want) > 1e-6 {
		t.Errorf("the doses bring %g, want %g", h.Dosed, want)
	}
	if math.Abs(h.RunRise-h.Run/2000) > 1e-12 {
		t.Errorf("rise of the run %g for %g J/L", h.RunRise, h.Run)
	}
}

// The step that drains a product is named, whether it uses up the product or what
// exchanges with it.
func TestDrain(t *testing.T) {
	w := newNetwork(5)
	w.exchange(1, 1, side(0), side(1))
	w.exchange(1, 1, side(0), side(2))
	w.exchange(1, 1, side(1), side(3))
	w.step(1, side(3), side(4))
	r := Run{Charge: []float64{1, 0, 0, 0, 0}, Basis: 0, Programme: hold(1), Products: []Product{{"A", []int{1}}, {"B", []int{2}}, {"X", []int{3}}}}
	c := simulate(t, w.m, r)
	if d := c.Pairs[0].Drain; d.Step != 3 || d.Takes != 3 || d.From != 1 {
		t.Errorf("A and B are drained by %+v", d)
	}
	names := []string{"R", "A", "B", "X", "D"}
	if got := c.Pairs[0].Drain.Words("TSd", names); got != "equilibrium is not reachable, as step TSd, without return, takes X away from A" {
		t.Error(got)
	}
	if got := (Drain{3, 3, 3}).Words("TSd", names); got != "equilibrium is not reachable, as step TSd, without return, uses up X" {
		t.Error(got)
	}
	w = newNetwork(2)
	w.exchange(1, 1, side(0), side(1))
	c = simulate(t, w.m, Run{Charge: []float64{1, 0}, Basis: 0, Programme: hold(1), Products: []Product{{"A", []int{0}}, {"B", []int{1}}}})
	if d := c.Pairs[0].Drain; d.Step != -1 {
		t.Errorf("nothing drains, and here is %+v", d)
	}
}
