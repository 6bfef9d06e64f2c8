package rate_test

import (
	"math"
	"testing"

	"saddlebook/kinetics/rate"
)

const (
	cm    = 100.0 // 1/m
	exact = "recomputed with 40 digits from the exact SI constants of 2019 (BIPM, SI brochure, 9th ed.)"
)

func near(got, want, tol float64) bool { return math.Abs(got-want) <= tol*math.Abs(want) }

// check fails with the source unless got is want, to a relative tolerance.
func check(t *testing.T, what string, got float64, err error, want, tol float64, source string) {
	t.Helper()
	if err != nil || !near(got, want, tol) {
		t.Errorf("%s: %.16g, %v; want %.16g\nsource: %s", what, got, err, want, source)
	}
}

func TestOutsideConstants(t *testing.T) {
	const gold = "Gold Book entry G02631, with older constants; read"
	const second = 1.438776877503934 // cm K
	for _, a := range []struct {
		name           string
		got, want, tol float64
		source         string
	}{
		{"R in cal", rate.R / rate.Calorie, 1.987204258640832, 2e-16, exact},
		{"R in L atm", rate.R * 1000 / rate.Atmosphere, 0.08205736608095968, 3e-16, exact},
		{"R in L bar", rate.R * 1000 / rate.Bar, 0.0831446261815324, 3e-16, exact},
		{"ln kB/h", math.Log(rate.Boltzmann / rate.Planck), 23.75997781050422, 2e-16, exact},
		{"kB·T/h at 25 °C", rate.Boltzmann / rate.Planck * 298.15, 6212437991620.116, 3e-16, exact},
		{"RT at 25 °C", rate.R * 298.15 / kcal, 0.592484949713764, 2e-15, exact},
		{"kB/h", rate.Boltzmann / rate.Planck, 2.08358e10, 5e-5, gold},
		// The second radiation constant h·c/kB by way of the crossover, 2π·kB·T = h·c·ν.
		{"hc/kB", rate.Crossover(cm) * 2 * math.Pi, second, 1e-14, exact},
		{"kB in 1/cm", 1 / (rate.Crossover(cm) * 2 * math.Pi), 0.6950348004861274, 1e-14, exact},
		{"1/cm in kJ/mol", rate.R * rate.Crossover(cm) * 2 * math.Pi / 1000, 0.0119626565638697, 1e-14, exact},
		{"1/cm in kcal/mol", rate.R * rate.Crossover(cm) * 2 * math.Pi / kcal, 0.002859143538209776, 1e-14, exact},
	} {
		check(t, a.name, a.got, nil, a.want, a.tol, a.source)
	}
	k, err := rate.Eyring(0, 298.15)
	check(t, "k without a barrier", k, err, 6212437991620.116, 1e-15, exact)
}

// The barrier of a half-life, in kcal/mol as most of the trade has it.
func TestOutsideHalfLives(t *testing.T) {
	times := []struct {
		name string
		s    float64
	}{{"1 ms", 1e-3}, {"1 s", 1}, {"1 min", 60}, {"1 h", 3600}, {"1 d", 86400}, {"1 a (365.25 d)", 31557600}}
	for _, a := range []struct {
		T    float64
		kcal [6]float64
	}{
		{195.15, [6]float64{8.72265850749223, 11.4015061136666, 12.9893048538354, 14.5771035940041, 15.8095621209622, 18.0978250172263}},
		{273.15, [6]float64{12.3915596190056, 16.1411226404073, 18.3635526987065, 20.5859827570057, 22.3110457682206, 25.5139102832837}},
		{298.15, [6]float64{13.5775819119876, 17.6703229510903, 20.0961604831493, 22.5219980152083, 24.4049470790696, 27.9009531386195}},
		{310.15, [6]float64{14.1483751342397, 18.4058416218389, 20.9293147413026, 23.4527878607662, 25.4115222298979, 29.0482362308015}},
		{373.15, [6]float64{17.1594256116463, 22.2817007038522, 25.3177606571904, 28.3538206105287, 30.7104278323294, 35.0858585253398}},
	} {
		for i, half := range times {
			dG, err := rate.Barrier(math.Ln2/half.s, a.T)
			check(t, "barrier of "+half.name, dG/kcal, err, a.kcal[i], 1e-13, exact)
			k, err := rate.Eyring(a.kcal[i]*kcal, a.T)
			check(t, "half-life", rate.HalfLife(k), err, half.s, 1e-12, exact)
		}
	}
	dG, err := rate.Barrier(1, 298.15)
	check(t, "barrier of 1 a second", dG/kcal, err, 17.45316956177, 1e-13, exact)
}

// Factors of ten and a textbook table of ratios at 300 K.
func TestOutsideRatios(t *testing.T) {
	for _, a := range []struct{ T, kJ float64 }{
		{298.15, 5.70800950253526}, {310.15, 5.93774659470505}, {273.15, 5.22939056051486},
		{195.15, 3.73609946141122}, {373.15, 7.14386632859645}, {300, 5.74342730424477},
	} {
		slow, err1 := rate.Barrier(1, a.T)
		fast, err2 := rate.Barrier(10, a.T)
		if err1 != nil || err2 != nil || !near((slow-fast)/1000, a.kJ, 1e-12) {
			t.Errorf("a factor of ten at %g K: %v kJ/mol, %v, %v; want %v\nsource: %s", a.T, (slow-fast)/1000, err1, err2, a.kJ, exact)
		}
	}
	const lowry = "Lowry and Richardson, Mechanism and Theory in Organic Chemistry, table 2.12, at 300 K; to ten digits recomputed"
	one, err := rate.Barrier(1, 300)
	if err != nil {
		t.Fatal(err)
	}
	for _, a := range []struct{ ratio, kcal float64 }{{2, 0.4132275087}, {10, 1.372712071}, {1e2, 2.745424142}, {1e4, 5.490848283}, {1e6, 8.236272425}} {
		dG, err := rate.Barrier(a.ratio, 300)
		check(t, "ratio", (one-dG)/kcal, err, a.kcal, 1e-9, lowry)
	}
	k, err := rate.Eyring(0, 300)
	check(t, "log kB·T/h", math.Log10(k), err, 12.79594851, 1e-9, lowry)
	lnA, ea, err := rate.ArrheniusOf(0, 0, 300)
	check(t, "log e·kB·T/h", lnA/math.Ln10, err, 13.23024299, 1e-9, lowry)
	check(t, "Ea − ΔH‡", ea, err, rate.R*300, 1e-14, "Ea = ΔH‡ + RT; Evans and Polanyi 1935")
	lnA, _, err = rate.ArrheniusOf(50e3, 0, 298.15)
	check(t, "ln A without an entropy", lnA, err, 30.4575745260733, 1e-14, exact)
	for _, a := range []struct{ kcal, ratio float64 }{{1, 5.40760656536583}, {2, 29.2422087657876}} {
		hi, err1 := rate.Eyring(15*kcal, 298.15)
		lo, err2 := rate.Eyring((15+a.kcal)*kcal, 298.15)
		if err1 != nil || err2 != nil || !near(hi/lo, a.ratio, 1e-12) {
			t.Errorf("%g kcal/mol is a factor of %v, want %v\nsource: %s", a.kcal, hi/lo, a.ratio, exact)
		}
	}
}

// Two lines of equal size that merge exchange at k = π·Δν/√2.
func TestOutsideCoalescence(t *testing.T) {
	const source = "k = π·Δν/√2, common practice; invented input, " + exact
	for _, a := range []struct{ dnu, T, k, kJ, kcal float64 }{
		{9.1, 391.15, 20.215117368620565, 86.90741888159637, 20.77137162562055},
		{20, 298.15, 44.42882938158366, 63.619174708489076, 15.205347683673297},
		{57.6, 212.15, 127.95502861896094, 42.802400028268224, 10.23001912721516},
		{100, 250, 222.1441469079183, 49.63341791704001, 11.862671586290634},
	} {
		k := math.Pi * a.dnu / math.Sqrt2
		check(t, "k", k, nil, a.k, 1e-14, source)
		dG, err := rate.Barrier(k, a.T)
		check(t, "barrier in kJ/mol", dG/1000, err, a.kJ, 1e-13, source)
		check(t, "barrier in kcal/mol", dG/kcal, err, a.kcal, 1e-13, source)
	}
	const exercise = "Levitt, Spin Dynamics, exercise 19.1, statement read in a stored page: A 1e14 1/s, Ea 60 kJ/mol, 300 K; answers recomputed"
	k, err := rate.Arrhenius(1e14, 60e3, 300)
	check(t, "k at 300 K", k, err, 3574.999421719933, 1e-13, exercise)
	check(t, "Δν in Hz", k*math.Sqrt2/math.Pi, err, 1609.3151548133374, 1e-13, exercise)
}

func TestOutsideStandardStates(t *testing.T) {
	const T = 298.15
	const source = "ideal-gas law, " + exact
	atm, bar := rate.Standard{Pressure: rate.Atmosphere}, rate.Standard{Pressure: rate.Bar}
	check(t, "1 atm to 1 mol/L in kJ/mol", atm.Shift(T)/1000, nil, 7.92587021594751, 1e-13, source)
	check(t, "1 bar to 1 mol/L in kJ/mol", bar.Shift(T)/1000, nil, 7.95850069392739, 1e-13, source)
	check(t, "molar volume at 1 atm", math.Exp(atm.Shift(T)/(rate.R*T)), nil, 24.4654036970381, 1e-13, source)
	check(t, "molar volume at 1 bar", math.Exp(bar.Shift(T)/(rate.R*T)), nil, 24.7895702960239, 1e-13, source)
	check(t, "S at 1 bar less S at 1 atm", (bar.Shift(T)-atm.Shift(T))/T, nil, 0.109443159416017, 1e-10, source)
	// A step with water is faster by its 55.34 mol/L.
	alone, err1 := rate.Barrier(1e-3, T)
	in, err2 := rate.Barrier(55.34e-3, T)
	if err1 != nil || err2 != nil || !near((alone-in)/kcal, 2.37793596054436, 1e-12) {
		t.Errorf("55.34 mol/L of water are %v kcal/mol, want 2.37793596054436\nsource: RT ln 55.34 at 25 °C, %s", (alone-in)/kcal, exact)
	}
}

func TestOutsideIsotopes(t *testing.T) {
	const stretch = "stretches of 2900 and 2100 cm-1, Westheimer 1961; " + exact
	kie, err := rate.ZeroPointEffect(2900*cm, 2100*cm, 298)
	check(t, "kH/kD at 298 K", kie, err, 6.89808702822175, 1e-13, stretch)
	check(t, "zero-point difference in kJ/mol", rate.R*298*math.Log(kie)/1000, err, 4.78506262554788, 1e-13, stretch)
	check(t, "zero-point difference in kcal/mol", rate.R*298*math.Log(kie)/kcal, err, 1.14365741528391, 1e-13, stretch)
	check(t, "kH/kD at 298 K", kie, err, 6.9, 1e-3, "trade value, common practice")

	const e2 = "1-bromo-2-phenylethane, kH/kD 7.11, C-H and C-D apart by 5.0 kJ/mol: OpenStax Organic Chemistry, section 11.8, read; 25 °C is assumed"
	slow, err1 := rate.Barrier(1, 298.15)
	fast, err2 := rate.Barrier(7.11, 298.15)
	if err1 != nil || err2 != nil || math.Abs(slow-fast-5000) > 200 {
		t.Errorf("7.11 is %v J/mol, want 5000\nsource: %s", slow-fast, e2)
	}

	const hf = "DCl + HF = HCl + DF, zero points alone, harmonic frequencies read in a university page; " + exact
	for _, a := range []struct{ T, K float64 }{{298.15, 2.03763126931555}, {500, 1.52873283352478}, {1000, 1.23641935989566}} {
		f, err1 := rate.ZeroPointEffect(4139*cm, 2998*cm, a.T)
		cl, err2 := rate.ZeroPointEffect(2991*cm, 2145*cm, a.T)
		if err1 != nil || err2 != nil || !near(f/cl, a.K, 1e-12) {
			t.Errorf("at %g K: K %v, %v, %v; want %v\nsource: %s", a.T, f/cl, err1, err2, a.K, hf)
		}
	}

	const water = "H2O + D2O = 2 HDO in the gas, K 3.85 at 25 °C: Wolfsberg, Massa and Pyper 1970, from memory, unverified; fundamentals in the place of harmonic frequencies explain most of the rest"
	h2o := []float64{3657 * cm, 1595 * cm, 3756 * cm}
	hdo, err1 := rate.LnPartitionRatio(h2o, []float64{3707 * cm, 1402 * cm, 2727 * cm}, 298.15)
	d2o, err2 := rate.LnPartitionRatio(h2o, []float64{2788 * cm, 1178 * cm, 2671 * cm}, 298.15)
	if K := 4 * math.Exp(2*hdo-d2o); err1 != nil || err2 != nil || !near(K, 3.85, 0.02) {
		t.Errorf("K %v, %v, %v; want 3.85 within 2 %%\nsource: %s", K, err1, err2, water)
	}
}
