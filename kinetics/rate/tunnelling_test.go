package rate

import (
	"encoding/csv"
	"encoding/json"
	"errors"
	"math"
	"math/rand/v2"
	"os"
	"strconv"
	"strings"
	"testing"
)

const cm = 100 // 1/m

const quadrature = "independent quadrature with 30 digits of the definitions in Johnston and Heicklen, J. Phys. Chem. 66, 532 (1962), and Brown, J. Res. NBS 86, 357 (1981); not read in their tables"

// Barriers forward and back are equal: 10, 15 and 20 kcal/mol.
var corrections = []struct {
	nu, T, u, wigner, bell float64 // nu in cm-1; bell 0: refused
	skodjeTruhlar, eckart  [3]float64
}{
	{1000.0, 298.15, 4.82568129298653, 1.97029999756167, 3.62321492861661, [3]float64{3.60298248647688, 3.62163332364162, 3.62309129182182}, [3]float64{3.06503009898, 3.18631708256, 3.26309733996}},
	{1500.0, 298.15, 7.23852193947979, 3.18317499451376, 0, [3]float64{62.7157367076908, 206.523885345748, 644.541709234646}, [3]float64{13.9891411719, 20.7277107221, 28.6862698069}},
	{500.0, 298.15, 2.41284064649326, 1.24257499939042, 1.29119182542454, [3]float64{1.29119182542345, 1.29119182542454, 1.29119182542454}, [3]float64{1.30078690541, 1.29756960506, 1.29596758325}},
	{1000.0, 500.0, 2.87755375500787, 1.34501315053999, 1.45140690070813, [3]float64{1.45140122808828, 1.45140688600999, 1.45140690067005}, [3]float64{1.46461671275, 1.45982068234, 1.45755351547}},
	{1500.0, 300.0, 7.19388438751967, 3.15633219087497, 0, [3]float64{58.1401059219123, 183.046650075931, 544.200700960635}, [3]float64{13.4669177817, 19.7071226248, 26.9513977708}},
	{800.0, 250.0, 4.60408600801259, 1.88323366538239, 3.09272028872186, [3]float64{3.09094222870467, 3.09267501084016, 3.09271913573121}, [3]float64{2.78936910878, 2.86333071586, 2.90791127356}},
	{1200.0, 400.0, 4.3163306325118, 1.77627958871499, 2.59269724374652, [3]float64{2.58559024508779, 2.59229279999125, 2.59267422773667}, [3]float64{2.38184106794, 2.43029543012, 2.46054026218}},
}

func TestCorrections(t *testing.T) {
	const source = "recomputed with 30 digits from exact SI constants; Wigner 1932, Bell 1959, Skodje and Truhlar 1981; Eckart: " + quadrature
	check := func(what string, nu, T, got float64, err error, want, tol float64) {
		t.Helper()
		if err != nil || !near(got, want, tol) {
			t.Errorf("%s at %g cm-1 and %g K: %v, %v; want %v\nsource: %s", what, nu, T, got, err, want, source)
		}
	}
	for _, a := range corrections {
		nu := a.nu * cm
		w, err := Wigner(nu, a.T)
		check("Wigner", a.nu, a.T, w, err, a.wigner, 1e-13)
		b, err := Bell(nu, a.T)
		if a.bell != 0 {
			check("Bell", a.nu, a.T, b, err, a.bell, 1e-13)
		} else if !errors.Is(err, ErrDomain) {
			t.Errorf("Bell at u = %g: %v, %v; want ErrDomain", a.u, b, err)
		}
		for i, v := range []float64{10 * kcal, 15 * kcal, 20 * kcal} {
			s, err := SkodjeTruhlar(nu, v, v, a.T)
			check("Skodje-Truhlar", a.nu, a.T, s, err, a.skodjeTruhlar[i], 1e-12)
			e, err := Eckart(nu, v, v, a.T)
			check("Eckart", a.nu, a.T, e, err, a.eckart[i], 1e-10)
		}
	}
}

// grid reads alpha1, alpha2, u and the factor.
func grid(t *testing.T) [][4]float64 {
	t.Helper()
	file, err := os.Open("testdata/eckart_grid.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	r := csv.NewReader(file)
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out [][4]float64
	for _, row := range rows[1:] {
		var v [4]float64
		for i := range v {
			if v[i], err = strconv.ParseFloat(row[i], 64); err != nil {
				t.Fatal(err)
			}
		}
		out = append(out, v)
	}
	if len(out) != 198 {
		t.Fatalf("%d rows, want 198", len(out))
	}
	return out
}

func TestEckartGrid(t *testing.T) {
	const nu, T = 1000 * cm, 298.15
	quantum := waveHeat * nu * R // h·nu in J/mol
	for _, v := range grid(t) {
		at := waveHeat * nu / v[2]
		got, err := Eckart(nu, v[0]*quantum/(2*math.Pi), v[1]*quantum/(2*math.Pi), at)
		if err != nil || !near(got, v[3], 2e-11) {
			t.Errorf("alpha %g and %g, u %g: %v, %v; want %v\nsource: %s", v[0], v[1], v[2], got, err, v[3], quadrature)
		}
	}
}

// The plain formula, by the midpoint rule in the square root of the energy: slow,
// and blind to overflow, but of another make.
func plainEckart(alpha1, alpha2, u float64) float64 {
	v1, v2 := alpha1*u/(2*math.Pi), alpha2*u/(2*math.Pi)
	D := 1 / (1/math.Sqrt(alpha1) + 1/math.Sqrt(alpha2))
	cosD := 0.0
	if x := alpha1*alpha2 - math.Pi*math.Pi/4; x >= 0 {
		cosD = math.Cosh(2 * math.Sqrt(x))
	} else {
		cosD = math.Cos(2 * math.Sqrt(-x))
	}
	low := max(0, v1-v2)
	end := math.Sqrt(v1 - low + 40)
	const n = 60000
	sum := 0.0
	for i := range n {
		s := (float64(i) + 0.5) / n * end
		e := low + s*s
		a, b := 2*D*math.Sqrt(alpha1*e/v1), 2*D*math.Sqrt((e/v1-1)*alpha1+alpha2)
		p := 1 - (math.Cosh(a-b)+cosD)/(math.Cosh(a+b)+cosD)
		sum += p * math.Exp(v1-e) * 2 * s * end / n
	}
	return sum
}

func TestEckartPlain(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 3))
	for range 8 {
		a1, a2, u := 0.3+15*rng.Float64(), 0.3+15*rng.Float64(), 0.5+12*rng.Float64()
		got, ok := eckart(a1*u/(2*math.Pi), a2*u/(2*math.Pi), u)
		if want := plainEckart(a1, a2, u); !ok || !near(got, want, 2e-8) {
			t.Errorf("alpha %g and %g, u %g: %v, by the midpoint rule %v", a1, a2, u, got, want)
		}
	}
}

// The same factor both ways, at any barrier that can be thought of, keeps detailed
// balance.
func TestEckartBothWays(t *testing.T) {
	rng := rand.New(rand.NewPCG(4, 4))
	for range 300 {
		nu, T := (20+2980*rng.Float64())*cm, 100+900*rng.Float64()
		f, b := 200e3*math.Pow(10, -4*rng.Float64()), 200e3*math.Pow(10, -4*rng.Float64())
		there, err1 := Eckart(nu, f, b, T)
		back, err2 := Eckart(nu, b, f, T)
		if err1 != nil || err2 != nil || !near(there, back, 1e-8) {
			t.Errorf("%g cm-1, %g and %g J/mol, %g K: %v %v there, %v %v back", nu/cm, f, b, T, there, err1, back, err2)
		}
		a, err1 := SkodjeTruhlar(nu, f, b, T)
		c, err2 := SkodjeTruhlar(nu, b, f, T)
		if err1 != nil || err2 != nil || a != c {
			t.Errorf("Skodje-Truhlar: %v %v there, %v %v back", a, err1, c, err2)
		}
	}
}

// All corrections tend to Wigner's first term as u falls, and to 1.
func TestSmallU(t *testing.T) {
	const source = "Bell = 1 + u²/24 + 7·u⁴/5760 + …"
	const T = 300
	for _, u := range []float64{1e-3, 0.01, 0.1, 0.5} {
		nu := u * T / waveHeat
		w, err := Wigner(nu, T)
		if err != nil {
			t.Fatal(err)
		}
		b, err := Bell(nu, T)
		if err != nil || math.Abs(b-w-7*u*u*u*u/5760) > u*u*u*u*u*u/1000+1e-15 {
			t.Errorf("u = %g: Bell %v, %v; Wigner %v\nsource: %s", u, b, err, w, source)
		}
		s, err := SkodjeTruhlar(nu, 40*R*T, 50*R*T, T)
		if err != nil || !near(s, b, 1e-12) {
			t.Errorf("u = %g: Skodje-Truhlar %v, %v; Bell %v", u, s, err, b)
		}
		// A high Eckart barrier is a parabola near its top, but for its fourth order:
		// the factor differs from Bell's by terms of u²/(barrier in kB·T).
		e, err := Eckart(nu, 4000*R*T, 4000*R*T, T)
		if err != nil || math.Abs(e-b) > u*u/1000+1e-12 {
			t.Errorf("u = %g: Eckart %v, %v; Bell %v", u, e, err, b)
		}
	}
}

// At the crossover Bell has no value and Skodje-Truhlar passes smoothly through
// the height of the barrier in kB·T.
func TestCrossover(t *testing.T) {
	const nu, v = 1000 * cm, 50e3
	T := Crossover(nu)
	if _, err := Bell(nu, T*(1-1e-9)); !errors.Is(err, ErrDomain) || !strings.Contains(err.Error(), "temperature above 229 K") {
		t.Errorf("Bell below the crossover: %v", err)
	}
	if b, err := Bell(nu, T*(1+1e-9)); err != nil || b < 1e8 {
		t.Errorf("Bell above the crossover: %v, %v", b, err)
	}
	want := v / (R * T)
	for _, d := range []float64{-1e-4, -1e-7, -1e-10, -1e-13, 0, 1e-13, 1e-10, 1e-7, 1e-4} {
		if got, err := SkodjeTruhlar(nu, v, 2*v, T*(1+d)); err != nil || !near(got, want, 30*math.Abs(d)+1e-9) {
			t.Errorf("Skodje-Truhlar at %g of the crossover: %v, %v; want %v", d, got, err, want)
		}
	}
	// Both branches of the series agree where they meet.
	lo, _ := SkodjeTruhlar(nu, v, v, T/(1-0.00999/math.Pi))
	hi, _ := SkodjeTruhlar(nu, v, v, T/(1-0.01001/math.Pi))
	if math.Abs(lo/hi-1) > 1e-4 {
		t.Errorf("Skodje-Truhlar jumps from %v to %v", lo, hi)
	}
	if got := Crossover(-1); !math.IsNaN(got) {
		t.Errorf("Crossover(-1) = %v", got)
	}
}

func TestTunnellingFactor(t *testing.T) {
	e, errE := Eckart(1200*cm, 60e3, 80e3, 300)
	for _, a := range []struct {
		t    Tunnelling
		want float64
		says string
	}{
		{Tunnelling{By: ByEckart, Imaginary: 1200 * cm, Forward: 60e3, Back: 80e3}, e, ""},
		{Tunnelling{By: ByWigner, Imaginary: 0.0 + 2400/waveHeat, Forward: 0}, 1 + 64.0/24, ""},
		{Tunnelling{By: ByWigner, Imaginary: 1200 * cm, Forward: 1}, 0, "barrier height (J/mol) of 1 is not possible; leave it out: the correction of Wigner takes none"},
		{Tunnelling{By: ByBell, Imaginary: 2000 * cm}, 0, "u = hν/(kB·T) in the correction of Bell of 9.5918"},
		{Tunnelling{By: "bell", Imaginary: 1}, 0, `the tunnelling correction "bell" is not known; give "Wigner", "Bell", "Eckart" or "Skodje-Truhlar"`},
		{Tunnelling{By: ByEckart, Imaginary: 1200 * cm, Forward: 60e3}, 0, "barrier height back (J/mol) of 0 is not possible; give a finite one above zero: an energy with zero point"},
		{Tunnelling{By: BySkodjeTruhlar, Imaginary: 1200 * cm, Back: 60e3}, 0, "barrier height forward (J/mol) of 0"},
		{Tunnelling{By: ByEckart, Imaginary: -1200 * cm, Forward: 60e3, Back: 1}, 0, "imaginary frequency (1/m) of -120000 is not possible; give its magnitude"},
		{Tunnelling{By: ByEckart, Imaginary: 3000 * cm, Forward: 900e3, Back: 900e3}, 0, "tunnelling factor of +Inf is not possible; give a temperature above 10 K"},
	} {
		T := 300.0
		if strings.Contains(a.says, "10 K") {
			T = 10
		}
		got, err := a.t.Factor(T)
		if a.says != "" {
			if !errors.Is(err, ErrDomain) || !strings.Contains(err.Error(), a.says) {
				t.Errorf("%+v: error %v, want one that says %q", a.t, err, a.says)
			}
			continue
		}
		if err != nil || errE != nil || !near(got, a.want, 1e-14) {
			t.Errorf("%+v: %v, %v; want %v", a.t, got, err, a.want)
		}
		text, err := json.Marshal(a.t)
		var back Tunnelling
		if err != nil || json.Unmarshal(text, &back) != nil || back != a.t {
			t.Errorf("%s comes back as %+v", text, back)
		}
	}
	for _, T := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		for _, by := range []Correction{ByWigner, ByBell, ByEckart, BySkodjeTruhlar} {
			x := Tunnelling{By: by, Imaginary: 1e5}
			if by == ByEckart || by == BySkodjeTruhlar {
				x.Forward, x.Back = 1e4, 1e4
			}
			if _, err := x.Factor(T); !errors.Is(err, ErrDomain) {
				t.Errorf("%s at %g K: %v", by, T, err)
			}
		}
	}
}

// Whatever is given, the factor is a number above 0 or an error.
func FuzzTunnelling(f *testing.F) {
	f.Add(1e5, 60e3, 80e3, 298.15)
	f.Add(1e5, 60e3, 1e-3, 20.0)
	f.Add(1.0, 1e6, 1e6, 1000.0)
	f.Add(3e5, 1e-9, 1e9, 5.0)
	f.Add(-1.0, 0.0, math.Inf(1), math.NaN())
	f.Fuzz(func(t *testing.T, nu, forward, back, T float64) {
		for _, by := range []Correction{ByWigner, ByBell, ByEckart, BySkodjeTruhlar} {
			x := Tunnelling{By: by, Imaginary: nu}
			if by == ByEckart || by == BySkodjeTruhlar {
				x.Forward, x.Back = forward, back
			}
			k, err := x.Factor(T)
			if err != nil && (!errors.Is(err, ErrDomain) || err.Error() == "") {
				t.Errorf("%+v at %g K: %v", x, T, err)
			}
			if err == nil && (!(k >= 0) || math.IsInf(k, 0)) {
				t.Errorf("%+v at %g K: %g", x, T, k)
			}
		}
	})
}

func BenchmarkEckart(b *testing.B) {
	for b.Loop() {
		if _, err := Eckart(1500*cm, 80e3, 120e3, 300); err != nil {
			b.Fatal(err)
		}
	}
}
