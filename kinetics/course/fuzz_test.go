package course

import (
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"testing"
	"time"

	"saddlebook/kinetics"
	"saddlebook/kinetics/stiff"
)

// FuzzSimulate runs small random mechanisms through random programmes, doses
// and removals: no panic, no number that is not one, mass kept.
func FuzzSimulate(f *testing.F) {
	for seed := range uint64(40) {
		f.Add(seed, uint8(seed), uint8(3*seed))
	}
	f.Fuzz(func(t *testing.T, seed uint64, shape, extra uint8) {
		m, run, r := scenario(seed, shape, extra)
		n := len(m.Species)
		total := 0.0
		for _, l := range run.Programme {
			total += l.Lasts
		}
		ctx, cancel := context.WithTimeout(context.Background(), 20*time.Second)
		defer cancel()
		c, err := Simulate(ctx, m, run)
		if err != nil {
			var bad kinetics.Complaints
			if errors.As(err, &bad) || errors.Is(err, ErrRun) || errors.Is(err, stiff.ErrStuck) {
				return
			}
			t.Fatal(err)
		}
		if c.Balance > 1e-12 {
			t.Errorf("balance %.1e", c.Balance)
		}
		if !(c.End > 0 || c.Ended >= 0) || c.End > total*(1+1e-12) {
			t.Errorf("the run ends at %g s of %g s", c.End, total)
		}
		before := 0.0
		for _, p := range append(append([]Point(nil), c.Report...), c.Trace...) {
			for s, x := range p.C {
				if math.IsNaN(x) || math.IsInf(x, 0) || math.IsNaN(p.Making[s]) || math.IsNaN(p.Made[s]) || x < -c.Floor-1e-15 {
					t.Fatalf("at %g s species %d is %g, made %g at %g", p.T, s, x, p.Made[s], p.Making[s])
				}
			}
			sum := 0.0
			for _, x := range p.Shares {
				sum += x
			}
			if !math.IsNaN(sum) && math.Abs(sum-1) > 1e-12 {
				t.Errorf("shares sum to %g", sum)
			}
			for _, x := range append(append([]float64(nil), p.Kinetic...), p.Rest...) {
				if x < 0 || x > 1 {
					t.Errorf("a limit of %g", x)
				}
			}
		}
		for _, p := range c.Report {
			if p.T < before {
				t.Errorf("results out of order: %g after %g", p.T, before)
			}
			before = p.T
		}
		h := make([]float64, n)
		for i := range h {
			h[i] = 1e5 * r.NormFloat64()
		}
		heat, err := c.Heat(HeatData{Species: h, PerKelvin: 2000})
		if err != nil {
			t.Fatal(err)
		}
		for _, p := range append(heat.Report, heat.Trace...) {
			if !(p.Left >= 0) || math.IsNaN(p.Released) || math.IsNaN(p.Rate) || math.IsInf(p.Left, 0) {
				t.Errorf("heat %+v", p)
			}
		}
	})
}

// scenario draws a mechanism and a run.
func scenario(seed uint64, shape, extra uint8) (*kinetics.Mechanism, Run, *rand.Rand) {
	r := rand.New(rand.NewPCG(seed, uint64(shape)))
	n := 3 + int(shape%4)
	m := random(r, n, 1+int(shape/4)%6, 0.3)
	m.RaiseLow = true
	run := Run{Charge: make([]float64, n), Basis: int(extra%4) - 1, Products: []Product{{"C", []int{2}}, {"AB", []int{0, 1}}}, Trace: int(extra % 30), RTol: math.Pow(10, -6-4*r.Float64())}
	for i := range n {
		if r.IntN(3) > 0 {
			run.Charge[i] = math.Pow(10, -6*r.Float64())
		}
	}
	total := 0.0
	for i := range 1 + int(extra%3) {
		l := Leg{Ramp: i > 0 && r.IntN(2) == 0, To: room, Lasts: math.Pow(10, -3+10*r.Float64())}
		if r.IntN(2) == 0 {
			l.Lasts = math.Pow(10, 3*r.Float64())
		}
		run.Programme = append(run.Programme, l)
		total += l.Lasts
	}
	for range r.IntN(3) {
		run.Doses = append(run.Doses, Dose{Species: r.IntN(n), Amount: r.Float64(), From: 1.2 * total * r.Float64(), Lasts: float64(r.IntN(2)) * total * r.Float64()})
	}
	for range r.IntN(3) {
		v := Removal{Species: r.IntN(n), From: 1.2 * total * r.Float64(), Leaves: r.Float64(), K: float64(r.IntN(2)) * r.Float64() / total}
		v.To = v.From + total*r.Float64()
		run.Removals = append(run.Removals, v)
	}
	if r.IntN(2) == 0 {
		run.Until = append(run.Until, Until{Of: Amount, Index: r.IntN(n), Value: r.Float64()}, Until{Of: Ratio, Value: 2 * r.Float64()})
	}
	for range r.IntN(4) {
		run.Report = append(run.Report, total*float64(len(run.Report)+r.IntN(2))/4)
	}
	return m, run, r
}
