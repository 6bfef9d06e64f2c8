package rate

import (
	"errors"
	"math"
	"strings"
	"testing"
)

const fromSI = "recomputed with 30 digits from exact SI constants"

func TestZeroPointEffect(t *testing.T) {
	const source = "formula as in Westheimer 1961; trade value 6.9 at 25 °C; " + fromSI
	for _, a := range []struct{ light, heavy, T, want float64 }{ // cm-1
		{2900.0, 2100.0, 195.15, 19.0881680687886},
		{2900.0, 2100.0, 273.15, 8.22304295300444},
		{2900.0, 2100.0, 298.15, 6.8913880074347},
		{2900.0, 2100.0, 373.15, 4.67535004519306},
		{2900.0, 2100.0, 500.0, 3.16142065836854},
		{3000.0, 2200.0, 195.15, 19.0881680687886},
		{3000.0, 2200.0, 273.15, 8.22304295300444},
		{3000.0, 2200.0, 298.15, 6.8913880074347},
		{3000.0, 2200.0, 373.15, 4.67535004519306},
		{3000.0, 2200.0, 500.0, 3.16142065836854},
		{2900.0, 2050.60966544099, 195.15, 22.9000256486711},
		{2900.0, 2050.60966544099, 273.15, 9.3653662096679},
		{2900.0, 2050.60966544099, 298.15, 7.76357965798216},
		{2900.0, 2050.60966544099, 373.15, 5.14241429466067},
		{2900.0, 2050.60966544099, 500.0, 3.39425118744661},
		{3300.0, 2400.0, 195.15, 27.5968670622954},
		{3300.0, 2400.0, 273.15, 10.7006862045932},
		{3300.0, 2400.0, 298.15, 8.77192764259937},
		{3300.0, 2400.0, 373.15, 5.66944959822327},
		{3300.0, 2400.0, 500.0, 3.65062793488867},
		{3400.0, 2500.0, 195.15, 27.5968670622954},
		{3400.0, 2500.0, 273.15, 10.7006862045932},
		{3400.0, 2500.0, 298.15, 8.77192764259937},
		{3400.0, 2500.0, 373.15, 5.66944959822327},
		{3400.0, 2500.0, 500.0, 3.65062793488867},
	} {
		got, err := ZeroPointEffect(a.light*cm, a.heavy*cm, a.T)
		if err != nil || !near(got, a.want, 1e-12) {
			t.Errorf("%g and %g cm-1 at %g K: %v, %v; want %v\nsource: %s", a.light, a.heavy, a.T, got, err, a.want, source)
		}
	}
	// Tritium after Swain and Schaad: frequencies as the inverse root of the mass.
	h := 2900.0 * cm
	dd, err1 := ZeroPointEffect(h, h/math.Sqrt2, 298.15)
	tt, err2 := ZeroPointEffect(h, h/math.Sqrt(3), 298.15)
	if got := math.Log(tt) / math.Log(dd); err1 != nil || err2 != nil || !near(got, 1.44301644306612, 1e-12) {
		t.Errorf("exponent %v, want 1.443\nsource: Swain, Stivers, Reuwer and Schaad, J. Am. Chem. Soc. 80, 5885 (1958), from memory: 1.442", got)
	}
}

// ratio of one state, frequencies in cm-1.
func ratio(t *testing.T, light, heavy []float64, T float64) float64 {
	t.Helper()
	l, h := make([]float64, len(light)), make([]float64, len(heavy))
	for i := range light {
		l[i] = light[i] * cm
	}
	for i := range heavy {
		h[i] = heavy[i] * cm
	}
	ln, err := LnPartitionRatio(l, h, T)
	if err != nil {
		t.Fatal(err)
	}
	return math.Exp(ln)
}

func TestPartitionRatio(t *testing.T) {
	const hf = "DCl + HF = HCl + DF, harmonic frequencies read in a university page; ratios " + fromSI
	for _, a := range []struct{ T, HF, HCl, K float64 }{
		{298.15, 11.3650503039422, 5.52247638004227, 2.05796268228769},
		{500.0, 3.74083226312557, 2.42696773012815, 1.54136052848467},
		{1000.0, 1.66395133698439, 1.36243249078043, 1.22130920118563},
	} {
		f, cl := ratio(t, []float64{4139}, []float64{2998}, a.T), ratio(t, []float64{2991}, []float64{2145}, a.T)
		if !near(f, a.HF, 1e-12) || !near(cl, a.HCl, 1e-12) || !near(f/cl, a.K, 1e-12) {
			t.Errorf("at %g K: %v, %v, K %v; want %v, %v, %v\nsource: %s", a.T, f, cl, f/cl, a.HF, a.HCl, a.K, hf)
		}
	}
	const water = "H2O + D2O = 2 HDO, fundamentals of Shimanouchi, NSRDS-NBS 39 (1972), read; ratios " + fromSI
	h2o, hdo, d2o := []float64{3657, 1595, 3756}, []float64{3707, 1402, 2727}, []float64{2788, 1178, 2671}
	for _, a := range []struct{ T, HDO, D2O, K float64 }{
		{298.15, 10.9463233486715, 122.550398781024, 3.91094589803081},
		{500.0, 3.52089479031905, 12.4397223316722, 3.98616618409018},
	} {
		h, d := ratio(t, h2o, hdo, a.T), ratio(t, h2o, d2o, a.T)
		// The symmetry numbers give the statistical factor 4.
		if K := 4 * h * h / d; !near(h, a.HDO, 1e-12) || !near(d, a.D2O, 1e-12) || !near(K, a.K, 1e-12) {
			t.Errorf("at %g K: %v, %v, K %v; want %v, %v, %v\nsource: %s", a.T, h, d, K, a.HDO, a.D2O, a.K, water)
		}
	}
}

func TestIsotopeEffect(t *testing.T) {
	const source = "Bigeleisen and Mayer 1947, invented frequencies, " + fromSI
	for _, a := range []struct{ T, reactant, ts, effect, wigner float64 }{
		{298.15, 16.2942519844707, 3.49853204389462, 6.23766157747693, 8.95546952264044},
		{373.15, 7.858587435048, 2.3986301294367, 4.38787696237964, 5.91070289438258},
	} {
		r := ratio(t, []float64{2900, 1400, 1400}, []float64{2100, 1030, 1030}, a.T)
		s := ratio(t, []float64{1300, 1200, 900}, []float64{940, 900, 700}, a.T)
		e, err := IsotopeEffect(1500*cm, 1120*cm, math.Log(r), math.Log(s))
		h, err1 := Wigner(1500*cm, a.T)
		d, err2 := Wigner(1120*cm, a.T)
		if err != nil || err1 != nil || err2 != nil || !near(r, a.reactant, 1e-12) || !near(s, a.ts, 1e-12) || !near(e, a.effect, 1e-12) || !near(e*h/d, a.wigner, 1e-12) {
			t.Errorf("at %g K: %v, %v, kH/kD %v, with tunnelling %v; want %v\nsource: %s", a.T, r, s, e, e*h/d, a, source)
		}
	}
}

// Hot, an isotope effect of equilibrium is gone; a molecule against itself has none.
func TestIsotopeLimits(t *testing.T) {
	light, heavy := []float64{2900, 1400, 300}, []float64{2100, 1030, 280}
	if got := ratio(t, light, heavy, 1e6); math.Abs(got-1) > 1e-5 {
		t.Errorf("at 1e6 K the ratio is %v, want 1", got)
	}
	if got := ratio(t, light, light, 300); got != 1 {
		t.Errorf("against itself %v", got)
	}
	last := math.Inf(1)
	for T := 100.0; T < 2000; T *= 1.3 {
		if got := ratio(t, light, heavy, T); !(got < last && got > 1) {
			t.Errorf("at %g K %v, before %v", T, got, last)
		} else {
			last = got
		}
	}
}

func TestIsotopeErrors(t *testing.T) {
	nan := math.NaN()
	for _, a := range []struct {
		err  func() error
		says string
	}{
		{func() error { _, err := ZeroPointEffect(0, 1, 300); return err }, "frequency of the light isotope (1/m) of 0"},
		{func() error { _, err := ZeroPointEffect(1, nan, 300); return err }, "frequency of the heavy isotope (1/m) of NaN"},
		{func() error { _, err := ZeroPointEffect(1e9, 1, 1); return err }, "isotope effect of +Inf"},
		{func() error { _, err := ZeroPointEffect(1, 1, 0); return err }, "temperature (K) of 0"},
		{func() error { _, err := LnPartitionRatio([]float64{1}, nil, 300); return err }, "1 frequencies of the light isotope stand against 0"},
		{func() error { _, err := LnPartitionRatio([]float64{1}, []float64{-1}, 300); return err }, "frequency 1 (1/m) of -1"},
		{func() error { _, err := LnPartitionRatio(nil, nil, nan); return err }, "temperature (K) of NaN"},
		{func() error { _, err := IsotopeEffect(-1, 1, 0, 0); return err }, "imaginary frequency of the light isotope (1/m) of -1"},
		{func() error { _, err := IsotopeEffect(1, 0, 0, 0); return err }, "imaginary frequency of the heavy isotope (1/m) of 0"},
		{func() error { _, err := IsotopeEffect(1, 1, 1e4, 0); return err }, "isotope effect of +Inf"},
	} {
		if err := a.err(); !errors.Is(err, ErrDomain) || !strings.Contains(err.Error(), a.says) {
			t.Errorf("error %v, want one that says %q", err, a.says)
		}
	}
}
