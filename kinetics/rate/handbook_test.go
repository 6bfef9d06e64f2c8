package rate

import (
	"math"
	"testing"
)

const kcal = 1000 * Calorie

// near reports whether got is want within a relative tolerance; NaN is not.
func near(got, want, tol float64) bool { return math.Abs(got-want) <= tol*math.Abs(want) }

const recomputed = "recomputed with 40 digits from the exact SI constants of 2019 (BIPM, SI brochure, 9th ed.)"

var anchors = []struct{ T, kcal, k, half float64 }{
	{298.15, 5.0, 1343496791.74983, 5.15927678291781e-10},
	{298.15, 10.0, 290543.524438684, 2.38569137584144e-06},
	{298.15, 15.0, 62.832706495194, 0.0110316301688033},
	{298.15, 20.0, 0.0135881500478748, 51.0111514899231},
	{298.15, 25.0, 2.93856228742401e-06, 235879.696519065},
	{298.15, 30.0, 6.35491092359641e-10, 1090726823.54401},
	{298.15, 35.0, 1.37430787224343e-13, 5043609183642.7},
	{195.15, 5.0, 10227586.1091925, 6.77723143232151e-08},
	{195.15, 10.0, 25.7247095768423, 0.0269448010089072},
	{195.15, 15.0, 6.47035063550423e-05, 10712.667977474},
	{195.15, 20.0, 1.62744062168374e-10, 4259124242.84222},
	{195.15, 25.0, 4.09338400081926e-16, 1693335344109460.0},
	{195.15, 30.0, 1.02957935023323e-21, 6.73233374778671e+20},
	{195.15, 35.0, 2.58962667126884e-27, 2.67662975613517e+26},
	{373.15, 5.0, 9169052073.12719, 7.55963839044422e-11},
	{373.15, 10.0, 10812800.2263193, 6.41043176653504e-08},
	{373.15, 15.0, 12751.2252959008, 5.43592607357331e-05},
	{373.15, 20.0, 15.0371544043746, 0.0460956349798667},
	{373.15, 25.0, 0.0177328850627157, 39.0882351128143},
	{373.15, 30.0, 2.09118829395012e-05, 33146.0912709412},
	{373.15, 35.0, 2.46607839913688e-08, 28107264.586663},
}

func TestAnchors(t *testing.T) {
	for _, a := range anchors {
		k, err := Eyring(a.kcal*kcal, a.T)
		if err != nil {
			t.Fatal(err)
		}
		if !near(k, a.k, 2e-13) {
			t.Errorf("k over %g kcal/mol at %g K = %v, want %v\nsource: %s", a.kcal, a.T, k, a.k, recomputed)
		}
		if h := HalfLife(k); !near(h, a.half, 2e-13) {
			t.Errorf("half-life over %g kcal/mol at %g K = %v, want %v\nsource: %s", a.kcal, a.T, h, a.half, recomputed)
		}
	}
}

var halfLives = []struct {
	T    float64
	name string
	half float64 // s
	kJ   float64
}{
	{195.15, "1 ms", 0.001, 36.4956031953475},
	{195.15, "1 s", 1.0, 47.7039015795812},
	{195.15, "1 min", 60.0, 54.3472515084472},
	{195.15, "1 h", 3600.0, 60.9906014373132},
	{195.15, "1 d", 86400.0, 66.1472079141057},
	{195.15, "1 a (365.25 d)", 31557600.0, 75.721299872075},
	{273.15, "1 ms", 0.001, 51.8462854459195},
	{273.15, "1 s", 1.0, 67.5344571274641},
	{273.15, "1 min", 60.0, 76.8331044913881},
	{273.15, "1 h", 3600.0, 86.131751855312},
	{273.15, "1 d", 86400.0, 93.3494154942351},
	{273.15, "1 a (365.25 d)", 31557600.0, 106.750200625259},
	{298.15, "1 ms", 0.001, 56.808602719756},
	{298.15, "1 s", 1.0, 73.9326312273618},
	{298.15, "1 min", 60.0, 84.0823354614965},
	{298.15, "1 h", 3600.0, 94.2320396956313},
	{298.15, "1 d", 86400.0, 102.110298578827},
	{298.15, "1 a (365.25 d)", 31557600.0, 116.737587931984},
	{310.15, "1 ms", 0.001, 59.1968015616587},
	{310.15, "1 s", 1.0, 77.0100413457739},
	{310.15, "1 min", 60.0, 87.5682528776099},
	{310.15, "1 h", 3600.0, 98.1264644094459},
	{310.15, "1 d", 86400.0, 106.321809009893},
	{310.15, "1 a (365.25 d)", 31557600.0, 121.537820389673},
	{373.15, "1 ms", 0.001, 71.7950367591281},
	{373.15, "1 s", 1.0, 93.2266357449174},
	{373.15, "1 min", 60.0, 105.929510589685},
	{373.15, "1 h", 3600.0, 118.632385434452},
	{373.15, "1 d", 86400.0, 128.492430050466},
	{373.15, "1 a (365.25 d)", 31557600.0, 146.799232070022},
}

func TestBarrierOfHalfLife(t *testing.T) {
	for _, a := range halfLives {
		dG, err := Barrier(math.Ln2/a.half, a.T)
		if err != nil {
			t.Fatal(err)
		}
		if !near(dG, 1000*a.kJ, 1e-13) {
			t.Errorf("barrier of a half-life of %s at %g K = %v, want %v kJ/mol\nsource: %s", a.name, a.T, dG/1000, a.kJ, recomputed)
		}
	}
}

var decades = []struct{ T, kcal, trade float64 }{
	{298.15, 1.36424701303424, 1.36},
	{310.15, 1.41915549586641, 1.42},
	{273.15, 1.24985434046722, 1.25},
	{195.15, 0.892949202058131, 0.89},
	{373.15, 1.70742503073529, 1.71},
	{300.0, 1.3727120708042, 1.37},
}

// Rules of thumb, common practice: 1.36 kcal/mol a power of ten at 25 °C, 1.37 at
// 300 K, 1.42 at 37 °C.
func TestPowersOfTen(t *testing.T) {
	for _, a := range decades {
		slow, err := LnConstant(80e3, a.T, 1, 1)
		if err != nil {
			t.Fatal(err)
		}
		fast, err := LnConstant(80e3-a.kcal*kcal, a.T, 1, 1)
		if err != nil {
			t.Fatal(err)
		}
		if !near(fast-slow, math.Ln10, 1e-12) {
			t.Errorf("%g kcal/mol at %g K is a factor of %v, want 10\nsource: %s", a.kcal, a.T, math.Exp(fast-slow), recomputed)
		}
		if math.Abs(a.kcal-a.trade) > 0.005 {
			t.Errorf("%g kcal/mol does not round to %g", a.kcal, a.trade)
		}
	}
}

// Differences of activation enthalpy for ratios of constants at 300 K.
func TestRatioTable(t *testing.T) {
	const source = "Lowry and Richardson, Mechanism and Theory in Organic Chemistry, table 2.12"
	for _, a := range []struct{ ratio, kcal float64 }{{2, 0.41}, {10, 1.37}, {1e2, 2.74}, {1e4, 5.49}, {1e6, 8.23}} {
		low, err := Barrier(a.ratio, 300)
		if err != nil {
			t.Fatal(err)
		}
		high, err := Barrier(1, 300)
		if err != nil {
			t.Fatal(err)
		}
		// The table cuts 8.236 to 8.23.
		if got := (high - low) / kcal; math.Abs(got-a.kcal) > 0.0065 {
			t.Errorf("a ratio of %g is %v kcal/mol, want %v\nsource: %s", a.ratio, got, a.kcal, source)
		}
	}
}

func TestMeasuredBarriers(t *testing.T) {
	for _, a := range []struct {
		name     string
		dG, T, k float64
		tol      float64
		source   string
	}{
		{"cyclohexane inversion", 45e3, 298.15, 81208.811053723, 1e-13,
			"barrier: OpenStax Organic Chemistry (2023), section 4.6; constant: " + recomputed},
		{"cyclohexane inversion", 10.8 * kcal, 298.15, 75302.10750543608, 1e-13,
			"barrier: OpenStax Organic Chemistry (2023), section 4.6; constant: " + recomputed},
		{"dimethylformamide rotation", 88e3, 298.15, 0.002378641973272921, 1e-13,
			"barrier: an encyclopedia page on NMR coalescence; constant: " + recomputed},
		{"coalescence, 20 Hz at 25 °C", 63.619174708489076e3, 298.15, math.Pi * 20 / math.Sqrt2, 1e-12,
			"k = π·Δν/√2, common practice; barrier: " + recomputed},
		{"coalescence, 9.1 Hz at 118 °C", 86.90741888159637e3, 391.15, math.Pi * 9.1 / math.Sqrt2, 1e-12,
			"k = π·Δν/√2, common practice; barrier: " + recomputed},
		{"one a second at 25 °C", 73.0240614464457e3, 298.15, 1, 1e-12, recomputed},
	} {
		k, err := Eyring(a.dG, a.T)
		if err != nil {
			t.Fatal(err)
		}
		if !near(k, a.k, a.tol) {
			t.Errorf("%s: k = %v, want %v\nsource: %s", a.name, k, a.k, a.source)
		}
	}
}

func TestConstants(t *testing.T) {
	const source = "BIPM, SI brochure, 9th ed. (2019), exact; quotients recomputed with 40 digits"
	for _, a := range []struct {
		name      string
		got, want float64
	}{
		{"R", R, 8.31446261815324},
		{"R in cal", R / Calorie, 1.987204258640832},
		{"kB/h", Boltzmann / Planck, 20836619123.32757},
		{"RT at 25 °C", R * 298.15, 2478.957029602389},
	} {
		if !near(a.got, a.want, 2.3e-16) {
			t.Errorf("%s = %v, want %v\nsource: %s", a.name, a.got, a.want, source)
		}
	}
}

func TestShift(t *testing.T) {
	const source = "ideal-gas law, " + recomputed + "; trade rule 1.89 kcal/mol at 25 °C, common practice"
	for _, a := range []struct{ pressure, T, kcal, tol float64 }{
		{Atmosphere, 298.15, 1.89432844549415, 1e-13},
		{Bar, 298.15, 1.90212731690425, 1e-13},
		{Atmosphere, 273.15, 1.68795175594114, 1e-13},
		{Atmosphere, 310.15, 1.99489177810035, 1e-13},
		{Atmosphere, 373.15, 2.53723533486608, 1e-13},
		{Atmosphere, 500, 3.6905079803208, 1e-13},
		{Atmosphere, 298.15, 1.89, 0.003},
		{Atmosphere, 195.15, 1.08, 0.005}, // from memory, to the digits given
		{0, 298.15, 0, 0},
	} {
		if got := (Standard{a.pressure}).Shift(a.T) / kcal; !near(got, a.kcal, a.tol) {
			t.Errorf("shift from %g Pa at %g K = %v kcal/mol, want %v\nsource: %s", a.pressure, a.T, got, a.kcal, source)
		}
	}
	for _, bad := range []float64{(Standard{Atmosphere}).Shift(0), (Standard{-1}).Shift(300), (Standard{math.NaN()}).Shift(300), (Standard{}).Shift(math.NaN())} {
		if !math.IsNaN(bad) {
			t.Errorf("an impossible shift is %g, want NaN", bad)
		}
	}
}

func TestDiffusion(t *testing.T) {
	const source = "von Smoluchowski 1917 with Stokes-Einstein, " + recomputed + "; trade value 7.4e9, common practice"
	k := Diffusion(298.15, 0.890e-3)
	if !near(k, 7427586605.55023, 1e-14) || !near(k, 7.4e9, 0.005) {
		t.Errorf("diffusion limit in water = %v, want 7.43e9 L/mol/s\nsource: %s", k, source)
	}
	dG, err := Barrier(k, 298.15)
	if err != nil || !near(dG/kcal, 3.98689503767904, 1e-13) {
		t.Errorf("its barrier = %v kcal/mol, %v\nsource: %s", dG/kcal, err, source)
	}
	for _, bad := range []float64{Diffusion(0, 1), Diffusion(300, 0), Diffusion(300, -1), Diffusion(math.NaN(), 1)} {
		if !math.IsNaN(bad) {
			t.Errorf("an impossible limit is %g, want NaN", bad)
		}
	}
}

// Fast exchange with barriers of 20 and 19 kcal/mol on a common zero: the ratio of
// products is that of the constants, whatever the populations.
func TestRatioOfTwoBarriers(t *testing.T) {
	const source = "Curtin-Hammett relation, common practice; " + recomputed
	a, err := Eyring(20*kcal, 298.15)
	if err != nil {
		t.Fatal(err)
	}
	b, err := Eyring(19*kcal, 298.15)
	if err != nil {
		t.Fatal(err)
	}
	if !near(b/a, 5.407606565365828, 1e-12) {
		t.Errorf("ratio = %v, want 5.4076\nsource: %s", b/a, source)
	}
}
