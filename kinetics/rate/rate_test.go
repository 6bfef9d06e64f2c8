package rate

import (
	"encoding/json"
	"errors"
	"math"
	"strings"
	"testing"
)

func TestEyringEdges(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	for _, a := range []struct {
		name                            string
		dG, T, degeneracy, transmission float64
		says                            string
	}{
		{"T zero", 1, 0, 1, 1, "temperature (K) of 0 is not possible; give a finite one above zero"},
		{"T negative", 1, -3, 1, 1, "temperature (K) of -3"},
		{"T NaN", 1, nan, 1, 1, "temperature (K) of NaN"},
		{"T infinite", 1, inf, 1, 1, "temperature (K) of +Inf"},
		{"negative barrier", -1, 300, 1, 1, "free energy of activation (J/mol) of -1 is not possible; give a finite one, zero or more"},
		{"NaN barrier", nan, 300, 1, 1, "free energy of activation"},
		{"infinite barrier", inf, 300, 1, 1, "free energy of activation"},
		{"degeneracy zero", 1, 300, 0, 1, "path degeneracy of 0"},
		{"transmission negative", 1, 300, 1, -1, "transmission coefficient of -1"},
		{"transmission NaN", 1, 300, 1, nan, "transmission coefficient of NaN"},
		{"too large", 1, 1e300, 1, 1, "rate constant of +Inf"},
	} {
		_, err := Constant(a.dG, a.T, a.degeneracy, a.transmission)
		if !errors.Is(err, ErrDomain) || !strings.Contains(err.Error(), a.says) {
			t.Errorf("%s: error %v, want one that says %q", a.name, err, a.says)
		}
		if _, err := LnConstant(a.dG, a.T, a.degeneracy, a.transmission); a.T < 1e300 && !errors.Is(err, ErrDomain) {
			t.Errorf("%s: LnConstant gives %v", a.name, err)
		}
	}
	for _, a := range [][2]float64{{0, 300}, {-1, 300}, {nan, 300}, {inf, 300}, {1, 0}, {1, nan}} {
		if _, err := Barrier(a[0], a[1]); !errors.Is(err, ErrDomain) {
			t.Errorf("Barrier(%g, %g) gives %v, want ErrDomain", a[0], a[1], err)
		}
	}
}

// Constants from 1e-300 to the largest agree with ln k, and the barrier comes back.
func TestEyringRange(t *testing.T) {
	for _, T := range []float64{10, 195.15, 298.15, 373.15, 2000, 1e8} {
		for x := 0.0; x < 715; x += 7.3 {
			dG := x * R * T
			k, err := Eyring(dG, T)
			if err != nil {
				t.Fatal(err)
			}
			ln, err := LnConstant(dG, T, 1, 1)
			if err != nil {
				t.Fatal(err)
			}
			if math.Abs(math.Log(k)-ln) > 1e-12 {
				t.Errorf("at %g K and %g RT: ln k = %v and %v", T, x, math.Log(k), ln)
			}
			back, err := Barrier(k, T)
			if err != nil {
				t.Fatal(err)
			}
			if math.Abs(back-dG) > 1e-12*R*T {
				t.Errorf("at %g K: barrier %v comes back as %v", T, dG, back)
			}
		}
	}
	ln, err := LnConstant(5e6, 195.15, 1, 1)
	if want := math.Log(Boltzmann/Planck*195.15) - 5e6/(R*195.15); err != nil || math.Abs(ln-want) > 1e-11 {
		t.Errorf("ln k far below the smallest number = %v, %v; want %v", ln, err, want)
	}
}

func TestFactors(t *testing.T) {
	plain, err := Eyring(70e3, 300)
	if err != nil {
		t.Fatal(err)
	}
	got, err := Constant(70e3, 300, 3, 0.5)
	if err != nil || !near(got, 1.5*plain, 1e-15) {
		t.Errorf("3 paths and a transmission of 0.5: %v, %v; want %v", got, err, 1.5*plain)
	}
	a, err := LnConstant(70e3, 300, 3, 0.5)
	if err != nil || math.Abs(a-math.Log(1.5*plain)) > 1e-14 {
		t.Errorf("its ln = %v, %v; want %v", a, err, math.Log(1.5*plain))
	}
}

// Common practice: equal barriers give equal constants and so equal shares under
// kinetic control.
func TestEqualBarriers(t *testing.T) {
	a, errA := Eyring(64321.5, 195.15)
	b, errB := Eyring(64321.5, 195.15)
	if errA != nil || errB != nil || a/(a+b) != 0.5 {
		t.Errorf("share %v, want 0.5", a/(a+b))
	}
}

func TestHalfLives(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	const source = "integrated rate laws, common practice"
	for _, a := range []struct {
		name      string
		got, want float64
	}{
		{"first order", HalfLife(2), math.Ln2 / 2},
		{"equal amounts", HalfLifeEqual(0.3, 2), 1 / 0.6},
		{"pseudo first order", HalfLifePseudo(0.5, 0.2), math.Ln2 / 0.1},
		{"no rate", HalfLife(0), inf},
		{"none there", HalfLifeEqual(1, 0), inf},
		{"very slow", HalfLife(1e-300), math.Ln2 * 1e300},
		{"negative", HalfLife(-1), nan},
		{"NaN", HalfLifeEqual(nan, 1), nan},
		{"negative amount", HalfLifePseudo(1, -1), nan},
	} {
		same := a.got == a.want || math.IsNaN(a.got) && math.IsNaN(a.want) || near(a.got, a.want, 1e-15)
		if !same {
			t.Errorf("%s: %v, want %v\nsource: %s", a.name, a.got, a.want, source)
		}
	}
	// 2 A loses two A an event: -da/dt = 2 k a², so a = a0/(1 + 2 k a0 t).
	k, a0 := 0.15, 2.0
	half := HalfLifeEqual(2*k, a0)
	if got := a0 / (1 + 2*k*a0*half); !near(got, a0/2, 1e-15) {
		t.Errorf("2 A: %v left at the half-life, want %v", got, a0/2)
	}
}

func TestPosition(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	for _, a := range []struct {
		f, r, want float64
		word       string
	}{
		{1, 1, 0.5, "central"},
		{0, 1, 0, "early"},
		{1, 0, 1, "late"},
		{0, 0, nan, "none"},
		{-1, 1, nan, "none"},
		{1, nan, nan, "none"},
		{inf, 1, nan, "none"},
		{1, 4, 1.0 / 3, "early"},
		{9, 1, 0.75, "late"},
		{math.MaxFloat64, math.MaxFloat64, 0.5, "central"},
		{5e-324, 5e-324, 0.5, "central"},
		{5e-324, math.MaxFloat64, 0, "early"},
	} {
		got := Position(a.f, a.r)
		if !(math.Abs(got-a.want) < 1e-15 || math.IsNaN(got) && math.IsNaN(a.want)) {
			t.Errorf("Position(%g, %g) = %v, want %v", a.f, a.r, got, a.want)
		}
		if w := PositionWord(got); w != a.word {
			t.Errorf("PositionWord(%v) = %q, want %q", got, w, a.word)
		}
	}
	for _, a := range []struct {
		chi  float64
		word string
	}{{0.4499, "early"}, {0.45, "central"}, {0.55, "central"}, {0.5501, "late"}} {
		if w := PositionWord(a.chi); w != a.word {
			t.Errorf("PositionWord(%v) = %q, want %q", a.chi, w, a.word)
		}
	}
}

// Hammond 1955, common practice: the transition state is nearer the side of higher
// energy, on the axis of energy and on the axis of the reaction alike.
func TestPositionIsHammonds(t *testing.T) {
	for f := 0.5e3; f < 200e3; f *= 1.37 {
		for r := 0.5e3; r < 200e3; r *= 1.41 {
			chi, uphill := Position(f, r), f > r
			if (chi > 0.5) != uphill {
				t.Errorf("barriers %g and %g: χ = %v, uphill %v", f, r, chi, uphill)
			}
			// The drop to the nearer side is the smaller one.
			if (r < f) != (chi > 0.5) {
				t.Errorf("barriers %g and %g: χ = %v is on the wrong side", f, r, chi)
			}
			if back := Position(r, f); math.Abs(chi+back-1) > 1e-15 {
				t.Errorf("barriers %g and %g: χ = %v, seen from the products %v", f, r, chi, back)
			}
		}
	}
}

// The Marcus relation: with intrinsic barrier g and reaction energy d the barrier
// is (4g+d)²/16g, and its slope against d is ½ + d/8g, which is χ.
func TestPositionIsMarcus(t *testing.T) {
	const source = "Marcus, J. Phys. Chem. 72, 891 (1968)"
	for _, g := range []float64{20e3, 50e3, 90e3} {
		for _, part := range []float64{-0.99, -0.5, -0.1, 0, 0.2, 0.7, 0.99} {
			d := 4 * g * part
			f := (4*g + d) * (4*g + d) / (16 * g)
			if got, want := Position(f, f-d), 0.5+d/(8*g); math.Abs(got-want) > 1e-12 {
				t.Errorf("g = %g, d = %g: χ = %v, want %v\nsource: %s", g, d, got, want, source)
			}
		}
	}
}

func TestStandardJSON(t *testing.T) {
	for _, s := range []Standard{{}, {Atmosphere}} {
		text, err := json.Marshal(s)
		if err != nil {
			t.Fatal(err)
		}
		var back Standard
		if err := json.Unmarshal(text, &back); err != nil || back != s {
			t.Errorf("%s comes back as %v, %v", text, back, err)
		}
	}
}

func FuzzEyring(f *testing.F) {
	f.Add(80e3, 298.15)
	f.Add(0.0, 10.0)
	f.Add(-1.0, 300.0)
	f.Add(5e6, 195.15)
	f.Fuzz(func(t *testing.T, dG, T float64) {
		k, err := Eyring(dG, T)
		if err != nil {
			if !errors.Is(err, ErrDomain) || err.Error() == "" {
				t.Errorf("Eyring(%g, %g): %v", dG, T, err)
			}
			return
		}
		if !(k >= 0) || math.IsInf(k, 0) {
			t.Errorf("Eyring(%g, %g) = %g", dG, T, k)
		}
	})
}
