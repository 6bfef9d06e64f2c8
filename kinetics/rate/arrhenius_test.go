package rate

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"
)

// An Arrhenius line and an Eyring line through the same points: their parameters
// belong together near the middle of 1/T, within what the curvature makes.
func TestActivationOfMeasurements(t *testing.T) {
	for _, a := range []struct {
		name       string
		low, high  float64 // K
		ea, lnA    float64 // J/mol
		dH, dS     float64 // J/mol, J/mol/K
		tolH, tolS float64
		source     string
	}{
		{"dithionate and acid", 323.15, 363.15, 123.11615422425463e3, 31.959620913488997, 120.26937207926909e3, 11.332490624809118, 30, 0.1,
			"Lente, Fabian and Poe, New J. Chem. 29, 759 (2005): ΔH‡ 120.27 ± 0.15 kJ/mol, ΔS‡ 11.33 ± 0.45 J/mol/K; Arrhenius line recomputed from the same table"},
	} {
		mid := 2 / (1/a.low + 1/a.high)
		dH, dS, err := Activation(math.Exp(a.lnA), a.ea, mid)
		if err != nil || math.Abs(dH-a.dH) > a.tolH || math.Abs(dS-a.dS) > a.tolS {
			t.Errorf("%s: ΔH‡ %v, ΔS‡ %v, %v; want %v, %v\nsource: %s", a.name, dH, dS, err, a.dH, a.dS, a.source)
		}
	}
}

// The two laws touch: equal constants and equal slopes at T, and the way back is
// exact.
func TestActivation(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 7))
	for range 200 {
		dH, dS, T := 150e3*rng.Float64(), 300*(rng.Float64()-0.7), 180+300*rng.Float64()
		lnA, ea, err := ArrheniusOf(dH, dS, T)
		if err != nil {
			t.Fatal(err)
		}
		h, s, err := Activation(math.Exp(lnA), ea, T)
		if err != nil || math.Abs(h-dH) > 1e-9*(1+dH) || math.Abs(s-dS) > 1e-10 {
			t.Errorf("ΔH‡ %v, ΔS‡ %v come back as %v, %v, %v", dH, dS, h, s, err)
		}
		arrhenius := func(T float64) float64 { return lnA - ea/(R*T) }
		eyring := func(T float64) float64 { return math.Log(Boltzmann/Planck) + math.Log(T) + dS/R - dH/(R*T) }
		if d := arrhenius(T) - eyring(T); math.Abs(d) > 1e-11 {
			t.Errorf("ln k differs by %v", d)
		}
		step := 1e-3 * T
		if d := (arrhenius(T+step) - eyring(T+step)) - (arrhenius(T-step) - eyring(T-step)); math.Abs(d) > 1e-8 {
			t.Errorf("slopes differ by %v", d/(2*step))
		}
		if k, err := Arrhenius(math.Exp(lnA), ea, T); err == nil && math.Abs(math.Log(k)-eyring(T)) > 1e-10 {
			t.Errorf("k %v, want exp(%v)", k, eyring(T))
		}
	}
}

func TestCarried(t *testing.T) {
	const source = "Arrhenius' law; common practice: a barrier of 53 kJ/mol doubles the rate from 298 to 308 K"
	k, err := Carried(3e-4, 298.15, 52.9e3, 308.15)
	if err != nil || !near(k, 6e-4, 3e-3) {
		t.Errorf("k %v, %v; want twice 3e-4\nsource: %s", k, err, source)
	}
	if k, err := Carried(3e-4, 298.15, 52.9e3, 298.15); err != nil || k != 3e-4 {
		t.Errorf("at its own temperature k is %v, %v", k, err)
	}
	a, err1 := Arrhenius(1e13, 80e3, 250)
	b, err2 := Arrhenius(1e13, 80e3, 350)
	c, err3 := Carried(a, 250, 80e3, 350)
	if err1 != nil || err2 != nil || err3 != nil || !near(c, b, 1e-13) {
		t.Errorf("carried %v, direct %v; %v %v %v", c, b, err1, err2, err3)
	}
}

// Ionisation of water, where the heat capacity matters, and against an integral.
func TestLnEquilibrium(t *testing.T) {
	const source = "pKw 13.995 at 25 °C and 13.262 at 50 °C, ΔH 55.8 kJ/mol, ΔCp −225 J/mol/K: Marshall and Franck, J. Phys. Chem. Ref. Data 10, 295 (1981), and common tables, from memory"
	ln, err := LnEquilibrium(-13.995*math.Ln10, 298.15, 55.8e3, -225, 323.15)
	if err != nil || math.Abs(ln/-math.Ln10-13.262) > 0.02 {
		t.Errorf("pKw at 50 °C: %v, %v\nsource: %s", ln/-math.Ln10, err, source)
	}
	// d ln K/dT = (ΔH + ΔCp·(T − T0))/(R·T²), by Simpson's rule
	rng := rand.New(rand.NewPCG(8, 8))
	for range 50 {
		dH, dCp, T0, T := 1e5*rng.NormFloat64(), 200*rng.NormFloat64(), 200+200*rng.Float64(), 200+200*rng.Float64()
		const n = 200
		h := (T - T0) / n
		sum := 0.0
		for i := 0; i <= n; i++ {
			w := []float64{2, 4}[i%2]
			if i == 0 || i == n {
				w = 1
			}
			x := T0 + float64(i)*h
			sum += w * h / 3 * (dH + dCp*(x-T0)) / (R * x * x)
		}
		got, err := LnEquilibrium(3, T0, dH, dCp, T)
		if err != nil || math.Abs(got-3-sum) > 1e-6*(1+math.Abs(sum)) {
			t.Errorf("ln K %v, %v; by integration %v", got, err, 3+sum)
		}
		there, err := LnEquilibrium(got, T, dH+dCp*(T-T0), dCp, T0)
		if err != nil || math.Abs(there-3) > 1e-9 {
			t.Errorf("there and back: %v, %v", there, err)
		}
	}
}

func TestLimited(t *testing.T) {
	for _, a := range []struct{ k, limit, want float64 }{
		{0, 7e9, 0}, {7e9, 7e9, 3.5e9}, {1e3, 1e10, 1e3 / (1 + 1e-7)}, {1e300, 2, 2}, {1e-300, 1e10, 1e-300},
	} {
		k, err := Limited(a.k, a.limit)
		f, err2 := LimitFactor(a.k, a.limit)
		if err != nil || err2 != nil || !near(k, a.want, 1e-15) || f < 0 || f > 1 || !near(f*a.k, k, 1e-14) {
			t.Errorf("%g limited to %g: %v, %v, factor %v; want %v", a.k, a.limit, k, err, f, a.want)
		}
		if a.k > 0 {
			if ln := LnLimitFactor(math.Log(a.k), a.limit); math.Abs(ln-math.Log(f)) > 1e-12*(1+math.Abs(ln)) {
				t.Errorf("ln factor %v, want %v", ln, math.Log(f))
			}
		}
	}
	if got, want := LnLimitFactor(2000, 1), -2000.0; got != want {
		t.Errorf("ln factor far beyond numbers %v, want %v", got, want)
	}
	if !math.IsNaN(LnLimitFactor(1, 0)) || LnLimitFactor(math.Inf(-1), 1) != 0 {
		t.Error("edges of LnLimitFactor")
	}
	// K stands when both ways take the factor of one.
	f, err := LimitFactor(4e11, 7e9)
	if err != nil || !near((4e11*f)/(5e8*f), 4e11/5e8, 1e-15) {
		t.Errorf("the equilibrium constant moved: %v", err)
	}
}

func TestArrheniusErrors(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	call := func(f func() error) { // every one of these is outside
		t.Helper()
		if err := f(); !errors.Is(err, ErrDomain) || err.Error() == "" {
			t.Errorf("error %v, want ErrDomain", err)
		}
	}
	for _, bad := range []float64{0, -1, nan, inf} {
		call(func() error { _, err := Arrhenius(bad, 1, 300); return err })
		call(func() error { _, err := Arrhenius(1, 1, bad); return err })
		call(func() error { _, err := Carried(bad, 300, 1, 300); return err })
		call(func() error { _, err := Carried(1, bad, 1, 300); return err })
		call(func() error { _, err := Carried(1, 300, 1, bad); return err })
		call(func() error { _, _, err := Activation(bad, 1, 300); return err })
		call(func() error { _, _, err := Activation(1, 1, bad); return err })
		call(func() error { _, _, err := ArrheniusOf(1, 1, bad); return err })
		call(func() error { _, err := LnEquilibrium(1, bad, 1, 1, 300); return err })
		call(func() error { _, err := LnEquilibrium(1, 300, 1, 1, bad); return err })
		call(func() error { _, err := Limited(1, bad); return err })
		call(func() error { _, err := LimitFactor(1, bad); return err })
	}
	for _, bad := range []float64{nan, inf, -inf} {
		call(func() error { _, err := Arrhenius(1, bad, 300); return err })
		call(func() error { _, err := Carried(1, 300, bad, 300); return err })
		call(func() error { _, _, err := Activation(1, bad, 300); return err })
		call(func() error { _, _, err := ArrheniusOf(bad, 1, 300); return err })
		call(func() error { _, _, err := ArrheniusOf(1, bad, 300); return err })
		call(func() error { _, err := LnEquilibrium(bad, 300, 1, 1, 300); return err })
		call(func() error { _, err := LnEquilibrium(1, 300, bad, 1, 300); return err })
		call(func() error { _, err := LnEquilibrium(1, 300, 1, bad, 300); return err })
		call(func() error { _, err := Limited(bad, 1); return err })
	}
	call(func() error { _, err := Limited(-1, 1); return err })
	call(func() error { _, err := Arrhenius(1e300, -1e6, 300); return err })
	call(func() error { _, err := Carried(1, 300, 1e9, 3000); return err })
}
