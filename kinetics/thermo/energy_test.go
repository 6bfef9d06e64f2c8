package thermo

import (
	"encoding/json"
	"errors"
	"math"
	"math/rand/v2"
	"reflect"
	"strings"
	"testing"

	"saddlebook/kinetics/rate"
)

const kcal = 1000 * rate.Calorie

func near(got, want, tol float64) bool { return math.Abs(got-want) <= tol*math.Abs(want) }

func TestAt(t *testing.T) {
	for _, a := range []struct {
		name   string
		e      Energy
		T      float64
		want   float64
		source string
	}{
		{"nothing", Energy{}, 300, 0, "a constant 0"},
		{"constant", Constant(12345.5), 195.15, 12345.5, "as given"},
		{"shifted", Constant(12345.5).Plus(-0.25).Plus(100), 195.15, 12445.25, "as given"},
		{"enthalpy and entropy", Following(-50e3, -130), 200, -50e3 + 130*200, "G = H − T·S"},
		{"heat capacity at its temperature", Energy{Heat: &Heat{H: 40e3, S: -10, Cp: 75}}, 298.15, 40e3 + 10*298.15, "G = H − T·S at T0"},
		{"heat capacity", Energy{Heat: &Heat{H: 40e3, S: -10, Cp: 75, T0: 300}}, 400,
			40e3 + 75*100 - 400*(-10+75*math.Log(4.0/3)), "Kirchhoff's law"},
		{"a racemate", Energy{G: 1000, Forms: 2}, 300, 1000 - rate.R*300*math.Ln2, "G − R·T ln n"},
		{"two equal conformers", Energy{Conformers: []Energy{Constant(1000), Constant(1000)}}, 300, 1000 - rate.R*300*math.Ln2, "G − R·T ln 2"},
	} {
		if got := a.e.At(a.T); !near(got, a.want, 1e-15) {
			t.Errorf("%s: %v, want %v\nsource: %s", a.name, got, a.want, a.source)
		}
	}
	for _, T := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		if got := Following(1, 1).At(T); !math.IsNaN(got) {
			t.Errorf("at %g K: %v, want NaN", T, got)
		}
	}
}

// Water from liquid to gas at 1 bar: zero near the boiling point.
func TestBoiling(t *testing.T) {
	const source = "ΔvapH 44.0 kJ/mol, ΔvapS 118.9 J/mol/K and ΔCp −41.7 J/mol/K at 25 °C after CODATA key values (1989), from memory, unverified; boiling point 99.6 °C at 1 bar"
	gas := Energy{Heat: &Heat{H: 44.0e3, S: 118.9, Cp: -41.7}}
	if g := gas.At(372.75); math.Abs(g) > 150 {
		t.Errorf("ΔG at 99.6 °C = %v J/mol, want 0 within 150\nsource: %s", g, source)
	}
	if g := gas.At(298.15); math.Abs(g-8.56e3) > 30 {
		t.Errorf("ΔG at 25 °C = %v J/mol, want 8.56 kJ/mol\nsource: %s", g, source)
	}
}

// share of the first state over all, from free energies.
func share(T float64, first Energy, rest ...Energy) float64 {
	all := Energy{Conformers: append([]Energy{first}, rest...)}
	return math.Exp((all.At(T) - first.At(T)) / (rate.R * T))
}

func TestButane(t *testing.T) {
	const source = "gauche 3.8 kJ/mol (0.9 kcal/mol) above anti, two gauche forms: OpenStax Organic Chemistry (2023), section 4.7; shares recomputed from exact SI constants"
	for _, a := range []struct{ gauche, percent float64 }{{3.8e3, 69.84137295420096}, {0.9 * kcal, 69.54828079284218}} {
		forms := share(298.15, Constant(0), Energy{G: a.gauche, Forms: 2})
		listed := share(298.15, Constant(0), Constant(a.gauche), Constant(a.gauche))
		if !near(100*forms, a.percent, 1e-13) || !near(100*listed, a.percent, 1e-13) {
			t.Errorf("anti %v %% with forms, %v %% with conformers; want %v\nsource: %s", 100*forms, 100*listed, a.percent, source)
		}
	}
}

func TestEquatorialShare(t *testing.T) {
	for _, a := range []struct {
		group         string
		kcal, percent float64
		source        string
	}{
		{"CH3", 1.74, 94.96351075233476, "A value: Eliel and Wilen, Stereochemistry of Organic Compounds (1994)"},
		{"CH(CH3)2", 2.15, 97.41381484261886, "A value: Hirsch, Top. Stereochem. 1, 199 (1967), and later compilations"},
		{"C(CH3)3", 4.8, 99.96969990623077, "A value: Eliel and Wilen, Stereochemistry of Organic Compounds (1994)"},
		{"OH", 0.87, 81.28128137517359, "A value: Hirsch, Top. Stereochem. 1, 199 (1967), and later compilations"},
		{"CN", 0.17, 57.12436750426381, "A value: Hirsch, Top. Stereochem. 1, 199 (1967), and later compilations"},
	} {
		if got := 100 * share(298.15, Constant(0), Constant(a.kcal*kcal)); !near(got, a.percent, 1e-13) {
			t.Errorf("%s: %v %% equatorial, want %v\nsource: %s; share recomputed from exact SI constants", a.group, got, a.percent, a.source)
		}
	}
}

// A list of one is the energy itself, to the last bit.
func TestOneConformer(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 1))
	for range 200 {
		e := Energy{Heat: &Heat{H: 1e5 * rng.NormFloat64(), S: 200 * rng.NormFloat64(), Cp: 100 * rng.Float64(), T0: 298.15}, Forms: rng.IntN(3)}
		T := 150 + 300*rng.Float64()
		if got, want := (Energy{Conformers: []Energy{e}}).At(T), e.At(T); got != want {
			t.Errorf("a list of one gives %v, alone %v", got, want)
		}
	}
}

// The sum lies below its lowest member by R·T ln n at most, does not depend on
// order, moves with a common shift, and cannot overflow.
func TestSum(t *testing.T) {
	rng := rand.New(rand.NewPCG(2, 2))
	for range 500 {
		T := 150 + 300*rng.Float64()
		n := 1 + rng.IntN(6)
		list, lifted := make([]Energy, n), make([]Energy, n)
		lowest, direct := math.Inf(1), 0.0
		for i := range list {
			list[i] = Constant(1e4 * rng.NormFloat64())
			lifted[i] = list[i].Plus(-7e6)
			lowest = min(lowest, list[i].G)
			direct += math.Exp(-list[i].G / (rate.R * T))
		}
		got := Energy{Conformers: list}.At(T)
		if want := -rate.R * T * math.Log(direct); math.Abs(got-want) > 1e-9 {
			t.Errorf("sum %v, directly %v", got, want)
		}
		if got > lowest || got < lowest-rate.R*T*math.Log(float64(n))-1e-9 {
			t.Errorf("sum %v of %d with the lowest at %v", got, n, lowest)
		}
		if far := (Energy{Conformers: lifted}).At(T); math.Abs(far+7e6-got) > 1e-8 {
			t.Errorf("shifted sum %v, want %v", far+7e6, got)
		}
		rng.Shuffle(n, func(i, j int) { list[i], list[j] = list[j], list[i] })
		if again := (Energy{Conformers: list}).At(T); math.Abs(again-got) > 1e-9 {
			t.Errorf("in another order %v, want %v", again, got)
		}
	}
}

func TestFollows(t *testing.T) {
	constant, follow := Constant(1), Following(1, 1)
	for _, a := range []struct {
		name           string
		e              Energy
		follows, mixed bool
	}{
		{"zero", Energy{}, false, false},
		{"constant", constant, false, false},
		{"follow", follow.Plus(3), true, false},
		{"at zero", Following(0, 0), true, false},
		{"all constant", Energy{Conformers: []Energy{constant, constant}}, false, false},
		{"all follow", Energy{Conformers: []Energy{follow, follow}}, true, false},
		{"some follow", Energy{Conformers: []Energy{follow, constant}}, false, true},
		{"nested", Energy{Conformers: []Energy{follow, {Conformers: []Energy{follow, constant}}}}, false, true},
	} {
		if a.e.Follows() != a.follows || a.e.Mixed() != a.mixed {
			t.Errorf("%s: follows %v, mixed %v; want %v, %v", a.name, a.e.Follows(), a.e.Mixed(), a.follows, a.mixed)
		}
	}
}

// Plus leaves the original, and what it shares with others, alone.
func TestPlus(t *testing.T) {
	e := Energy{Conformers: []Energy{Following(100, 1), Constant(5)}, Forms: 2}
	before := e.At(300)
	if got := e.Plus(64).At(300); got != before+64 {
		t.Errorf("raised by 64: %v, want %v", got, before+64)
	}
	if e.At(300) != before {
		t.Error("Plus changed the energy it was called on")
	}
}

func TestJSON(t *testing.T) {
	for _, e := range []Energy{
		{}, Constant(3), Following(0, 0), {Heat: &Heat{H: 1, S: 2, Cp: 3, T0: 4}, Offset: 5},
		{Conformers: []Energy{{G: 1, Forms: 2}, Following(1, 2)}, Offset: -1},
	} {
		text, err := json.Marshal(e)
		if err != nil {
			t.Fatal(err)
		}
		var back Energy
		if err := json.Unmarshal(text, &back); err != nil || !reflect.DeepEqual(back, e) {
			t.Errorf("%s comes back as %+v, %v", text, back, err)
		}
	}
}

func TestCheck(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	for _, a := range []struct {
		name string
		e    Energy
		says string
	}{
		{"said twice", Energy{G: 1, Heat: &Heat{}}, "said twice"},
		{"said thrice", Energy{G: 1, Heat: &Heat{}, Conformers: []Energy{{}}}, "give one of G, Heat, Molecule and Conformers"},
		{"forms", Energy{Forms: -1}, "number of forms of -1"},
		{"NaN", Constant(nan), "free energy (J/mol) of NaN"},
		{"infinite offset", Constant(1).Plus(inf), "offset (J/mol) of +Inf"},
		{"infinite entropy", Following(0, inf), "entropy (J/mol/K) of +Inf"},
		{"T0", Energy{Heat: &Heat{T0: -1}}, "reference temperature (K) of -1"},
		{"within", Energy{Conformers: []Energy{{}, Constant(nan)}}, "conformer 2: free energy"},
	} {
		err := a.e.Check()
		if !errors.Is(err, rate.ErrDomain) || !strings.Contains(err.Error(), a.says) {
			t.Errorf("%s: error %v, want one that says %q", a.name, err, a.says)
		}
	}
	if err := (Energy{Conformers: []Energy{Following(0, 0), Constant(-4).Plus(1)}, Forms: 3}).Check(); err != nil {
		t.Errorf("a sound energy is refused: %v", err)
	}
}

func FuzzAt(f *testing.F) {
	f.Add(1e3, -50.0, 75.0, 0.0, 300.0)
	f.Add(-7e6, 0.0, 0.0, 298.15, 195.15)
	f.Fuzz(func(t *testing.T, h, s, cp, T0, T float64) {
		e := Energy{Conformers: []Energy{{Heat: &Heat{h, s, cp, T0}}, {Heat: &Heat{h, s, cp, T0}, Offset: 1000}}}
		if e.Check() != nil || !(T > 1) || T > 1e4 || math.Abs(h) > 1e9 || math.Abs(s) > 1e5 || math.Abs(cp) > 1e5 || T0 != 0 && (T0 < 1 || T0 > 1e4) {
			return
		}
		if g, one := e.At(T), e.Conformers[0].At(T); math.IsNaN(g) || g > one {
			t.Errorf("sum %v above its member %v", g, one)
		}
	})
}
