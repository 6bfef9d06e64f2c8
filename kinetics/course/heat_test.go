package course

import (
	"errors"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"saddlebook/kinetics"
)

// A → B with −50 kJ/mol: released heat, its rate and what is left follow the
// concentration.
func TestHeatOfOneStep(t *testing.T) {
	w := newNetwork(2)
	w.step(0.01, side(0), side(1))
	r := Run{Charge: []float64{2, 0}, Basis: 0, Programme: hold(500), Report: []float64{0, 100}, Trace: 20,
		Doses: []Dose{{Species: 0, Amount: 1, From: 300}}}
	for _, c := range []*Course{simulate(t, w.m, r), integrate(t, w.m, r)} {
		h, err := c.Heat(HeatData{Steps: []float64{-50e3}, PerKelvin: 2000})
		if err != nil {
			t.Fatal(err)
		}
		near(t, "whole heat", h.Whole, 150e3, 1e-12)
		near(t, "adiabatic rise", h.Rise, 75, 1e-12)
		for i, a := range []float64{2, 2 * math.Exp(-1)} {
			p := h.Report[i]
			near(t, "released", p.Released, 50e3*(2-a), 1e-8)
			near(t, "rate", p.Rate, 50e3*0.01*a, 1e-7)
			near(t, "left", p.Left, 50e3*a, 1e-8)
			near(t, "rise of what is left", p.Rise, 25*a, 1e-8)
		}
		end := h.Report[2]
		near(t, "released and left at the end", end.Released+end.Left, 150e3, 1e-12)
		if len(h.Trace) != len(c.Trace) {
			t.Errorf("%d points of heat for %d", len(h.Trace), len(c.Trace))
		}
	}
}

// The rate of heat, integrated, is the heat released: through a ramp, doses and
// removal, with a fast exchange whose own rates are large numbers.
func TestHeatRateIntegrates(t *testing.T) {
	m := addition()
	m.Species = append(m.Species, m.Species[0])
	m.Species[4].Name = "R2"
	m.Steps = append(m.Steps, kinetics.Step{Name: "flip", From: side(0), To: side(4), Returns: true, Energy: m.Steps[0].Energy})
	flip := *m.Steps[2].Energy.Heat
	flip.H, flip.S = 5e3, 0
	m.Steps[2].Energy.Heat = &flip
	r := coldRun()
	r.Charge = []float64{0.1, 0.22, 0, 0, 0.1} // the exchange begins at rest: a jump of it has its own, real, spike of heat
	r.Trace = 3000
	r.Doses = []Dose{{Species: 1, Amount: 0.05, From: 9000, Lasts: 1800}, {Species: 1, Amount: 0.03, From: 20000}}
	r.Removals = []Removal{{Species: 1, From: 30000, To: 40000, K: 1e-4}}
	c := simulate(t, m, r)
	h, err := c.Heat(HeatData{Species: []float64{0, 0, -11.5 * kcal, -17 * kcal, 300}})
	if err != nil {
		t.Fatal(err)
	}
	if !math.IsNaN(h.Rise) {
		t.Error("a rise without a heat capacity")
	}
	sum, off := 0.0, 0.0
	for i := 1; i < len(h.Trace); i++ {
		a, b := h.Trace[i-1], h.Trace[i]
		sum += (b.T - a.T) * (a.Rate + b.Rate) / 2
		off = math.Max(off, math.Abs(sum-b.Released))
	}
	if total := h.Trace[len(h.Trace)-1].Released; off > 1e-3*total {
		t.Errorf("the integral of the rate misses the heat released by %g of %g J/L", off, total)
	}
	if c.Balance > 1e-12 {
		t.Errorf("balance %g", c.Balance)
	}
}

func TestHeatNotKnown(t *testing.T) {
	w := newNetwork(4)
	w.step(1, side(0), side(1))
	w.step(1, side(1), side(2))
	w.step(1, side(2), side(3))
	c := simulate(t, w.m, Run{Charge: []float64{1, 0, 0, 0}, Basis: 0, Programme: hold(10)})
	nan := math.NaN()
	h, err := c.Heat(HeatData{Species: []float64{0, -10e3, nan, -30e3}, Steps: []float64{nan, nan, nan}})
	if err != nil {
		t.Fatal(err)
	}
	if !slices.Equal(h.Missing, []string{"TSb", "TSc"}) || h.Report != nil || !math.IsNaN(h.Whole) {
		t.Errorf("%+v, want TSb and TSc not known and nothing else", h)
	}
}

func TestHeatRefusals(t *testing.T) {
	loop := newNetwork(3)
	loop.exchange(1, 1, side(0), side(1))
	loop.exchange(1, 1, side(1), side(2))
	loop.exchange(1, 1, side(2), side(0))
	free := newNetwork(2)
	free.step(1, side(0), side(0, 1))
	for _, tt := range []struct {
		name string
		w    network
		d    HeatData
	}{
		{"around a cycle", loop, HeatData{Steps: []float64{-10e3, -10e3, 19e3}}},
		{"against the species", loop, HeatData{Species: []float64{0, 1e3, 2e3}, Steps: []float64{-10e3, -10e3, 20e3}}},
		{"without end", free, HeatData{Steps: []float64{-1e3}}},
		{"infinite", free, HeatData{Steps: []float64{math.Inf(1)}}},
		{"heat capacity", free, HeatData{PerKelvin: -1}},
	} {
		t.Run(tt.name, func(t *testing.T) {
			c := simulate(t, tt.w.m, Run{Charge: make([]float64, len(tt.w.m.Species)), Basis: -1, Programme: hold(1)})
			if tt.name == "without end" {
				c = simulate(t, tt.w.m, Run{Charge: []float64{1, 0}, Basis: -1, Programme: hold(1)})
			}
			if _, err := c.Heat(tt.d); !errors.Is(err, ErrHeat) {
				t.Errorf("error %v, want one that matches ErrHeat", err)
			}
		})
	}
}

// The most heat against all corners of what can be reached: every choice of
// which of the constraints hold with equality, solved by elimination.
func TestMostHeatAgainstCorners(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 9))
	for trial := range 60 {
		m := random(r, 4, 3, 0.5)
		net, err := m.At(room)
		if err != nil {
			t.Fatal(err)
		}
		h := make([]float64, 4)
		c := make([]float64, 4)
		for i := range h {
			h[i] = 100e3 * r.NormFloat64()
			if r.IntN(3) > 0 {
				c[i] = r.Float64()
			}
		}
		nets := stepNets(net)
		enthalpy := make([]float64, 3)
		for i := range nets {
			enthalpy[i] = dot(nets[i], h)
		}
		best := newRelease(net, nets, enthalpy)
		got, _, ok := best.most(c)
		if !ok {
			t.Fatalf("trial %d: without bound", trial)
		}
		want := corners(best, c)
		if math.Abs(got-want) > 1e-9*(math.Abs(want)+1) {
			t.Errorf("trial %d: most heat %.12g, corners give %.12g", trial, got, want)
		}
	}
}

// corners finds the best basic solution by trying every basis.
func corners(r *release, c []float64) float64 {
	m := len(r.change)
	width := m + r.n
	best := 0.0
	pick := make([]int, 0, r.n)
	var choose func(from int)
	choose = func(from int) {
		if len(pick) == r.n {
			a := make([][]float64, r.n)
			for s := range a {
				a[s] = make([]float64, r.n+1)
				for k, j := range pick {
					if j < m {
						a[s][k] = -r.change[j][s]
					} else if j-m == s {
						a[s][k] = 1
					}
				}
				a[s][r.n] = c[s]
			}
			x := gauss(a)
			if x == nil || slices.Min(x) < -1e-12 {
				return
			}
			sum := 0.0
			for k, j := range pick {
				if j < m {
					sum += r.gain[j] * x[k]
				}
			}
			best = math.Max(best, sum)
			return
		}
		for j := from; j < width; j++ {
			pick = append(pick, j)
			choose(j + 1)
			pick = pick[:len(pick)-1]
		}
	}
	choose(0)
	return best
}

func gauss(a [][]float64) []float64 {
	n := len(a)
	for col := range n {
		best := col
		for i := col; i < n; i++ {
			if math.Abs(a[i][col]) > math.Abs(a[best][col]) {
				best = i
			}
		}
		if math.Abs(a[best][col]) < 1e-9 {
			return nil
		}
		a[col], a[best] = a[best], a[col]
		for i := range n {
			if i != col {
				f := a[i][col] / a[col][col]
				for k := range a[i] {
					a[i][k] -= f * a[col][k]
				}
			}
		}
	}
	x := make([]float64, n)
	for i := range x {
		x[i] = a[i][n] / a[i][i]
	}
	return x
}

func TestWarmings(t *testing.T) {
	m, r := addition(), coldRun()
	r.Report = []float64{7200}
	c := simulate(t, m, r)
	if len(c.Warmings) != 1 {
		t.Fatalf("%d warmings, want 1", len(c.Warmings))
	}
	w := c.Warmings[0]
	if w.T != 7200 || w.From != zero-78 || w.To != zero+20 {
		t.Errorf("warming %+v", w)
	}
	near(t, "unreacted", w.Unreacted, 1-c.Report[0].Conversion, 1e-12)
	h, err := c.Heat(HeatData{Species: []float64{0, 0, -11.5 * kcal, -17 * kcal}, PerKelvin: 1800})
	if err != nil {
		t.Fatal(err)
	}
	// All that is left of R becomes B, and A turns over to B.
	p := c.Report[0]
	near(t, "left where warming starts", h.Warmings[0], 17*kcal*p.C[0]+5.5*kcal*p.C[2], 1e-9)
}
