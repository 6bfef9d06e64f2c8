package unit

import (
	"math"
	"strings"
	"testing"
)

// plain writes printed text with the space and minus of a keyboard.
var plain = strings.NewReplacer(space, " ", minus, "-").Replace

func TestPrint(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for _, tt := range []struct {
		value float64 // in the unit
		unit  string
		dim   Dim
		form  Form
		want  string // with keyboard space and minus
	}{
		{18.449, "kcal/mol", MolarEnergy, FormEnergy, "18.4 kcal/mol"},
		{-0.04, "kcal/mol", MolarEnergy, FormEnergy, "0.0 kcal/mol"},
		{-0.06, "kJ/mol", MolarEnergy, FormEnergy, "-0.1 kJ/mol"},
		{0.80036, "eV", MolarEnergy, FormEnergy, "0.800 eV"},
		{800.36, "meV", MolarEnergy, FormEnergy, "800 meV"},
		{0.029412, "Eh", MolarEnergy, FormEnergy, "0.0294 Eh"},
		{6452.7, "cm-1", MolarEnergy, FormEnergy, "6453 cm⁻¹"},
		{77194.4, "J/mol", MolarEnergy, FormEnergy, "77194 J/mol"},
		{nan, "kcal/mol", MolarEnergy, FormEnergy, "none"},
		{-inf, "kcal/mol", MolarEnergy, FormEnergy, "-∞ kcal/mol"},
		{-24.63, "cal/mol/K", MolarEntropy, FormEntropy, "-24.6 cal/mol/K"},
		{-103.06, "J/mol/K", MolarEntropy, FormEntropy, "-103.1 J/mol/K"},
		{-0.0246, "kcal/mol/K", MolarEntropy, FormEntropy, "-0.0246 kcal/mol/K"},
		{6.212e12, "s-1", RateConstant(1), FormRate, "6.2 × 10¹² s⁻¹"},
		{0.0123, "M-1 s-1", RateConstant(2), FormRate, "0.012 M⁻¹ s⁻¹"},
		{351, "s-1", RateConstant(1), FormRate, "350 s⁻¹"},
		{3510, "s-1", RateConstant(1), FormRate, "3.5 × 10³ s⁻¹"},
		{0, "s-1", RateConstant(1), FormRate, "0 s⁻¹"},
		{4.7e-5, "M-2 s-1", RateConstant(3), FormRate, "4.7 × 10⁻⁵ M⁻² s⁻¹"},
		{2.5e4, "M-1", EquilibriumConstant(-1), FormConstant, "2.5 × 10⁴ M⁻¹"},
		{1.04, "", None, FormFactor, "1.0"},
		{0.721, "", None, FormPercent, "72.1 %"},
		{72.1, "%", None, FormPercent, "72.1 %"},
		{24, "", None, FormRatio, "96:4"},
		{11520, "s", Time, FormSpan, "3.2 h"},
		{3.2, "h", Time, FormSpan, "3.2 h"},
		{11520, "s", Time, FormTime, "11500 s"},
		{3.2, "h", Time, FormTime, "3.20 h"},
		{0.4449, "", None, FormPosition, "0.44"},
		{nan, "", None, FormPosition, "none"},
		{0.2, "M", Concentration, FormMolar, "0.200 M"},
		{0.01, "M", Concentration, FormMolar, "0.0100 M"},
		{0.001, "M", Concentration, FormMolar, "1.00 mM"},
		{6.3e-6, "M", Concentration, FormMolar, "6.30 µM"},
		{9.999e-4, "M", Concentration, FormMolar, "1.00 mM"},
		{-3.14159e-7, "M", Concentration, FormMolar, "-314 nM"},
		{4.2e-22, "M", Concentration, FormMolar, "4.20 × 10⁻²² M"},
		{0, "M", Concentration, FormMolar, "0 M"},
		{2e-7, "mM", Concentration, FormMolar, "2.00 × 10⁻⁷ mM"},
		{87.4, "%", None, FormWhole, "87 %"},
		{-0.4, "%", None, FormWhole, "0 %"},
		{-78, "°C", Temperature, FormKelvin, "-78 °C"},
		{195.15, "K", Temperature, FormKelvin, "195.15 K"},
		{195.1549, "K", Temperature, FormKelvin, "195.15 K"},
		{9.618, "K", Temperature, FormRise, "9.6 K"},
		{-121.3, "K", Temperature, FormRise, "-120 K"},
		{-78, "°C", Temperature, FormPlain, "-78 °C"},
		{0, "°C", Temperature, FormPlain, "0 °C"},
		{298.15, "K", Temperature, FormPlain, "298.15 K"},
		{0.2, "M", Concentration, FormPlain, "0.2 M"},
		{120000, "Pa", Pressure, FormPlain, "120000 Pa"},
		{1.5e-5, "M", Concentration, FormPlain, "1.5 × 10⁻⁵ M"},
		{0, "M", Concentration, FormPlain, "0 M"},
		{nan, "M", Concentration, FormPlain, "none"},
	} {
		u := Must(tt.unit, tt.dim)
		if got := plain(Print(u.Base(tt.value), u, tt.form)); got != tt.want {
			t.Errorf("%g %s in form %d: got %q, want %q", tt.value, tt.unit, tt.form, got, tt.want)
		}
	}
}

func TestPrintBare(t *testing.T) {
	kcal := Must("kcal/mol")
	for _, tt := range []struct{ got, want string }{
		{PrintBare(kcal.Base(-18.449), kcal, FormEnergy), "−18.4"},
		{PrintBare(0.721, Unit{}, FormPercent), "72.1"},
		{PrintBare(0.99999, Unit{}, FormPercent), ">99.9"},
		{PrintBare(7200, Must("h"), FormSpan), "2.00"},
		{PrintBare(24, Unit{Scale: 1}, FormRatio), "96:4"},
	} {
		if tt.got != tt.want {
			t.Errorf("got %q, want %q", tt.got, tt.want)
		}
	}
}

// Nothing in printed text lets a line break or passes for a hyphen.
func TestPrintedSpaces(t *testing.T) {
	for form := FormPlain; form <= FormRise; form++ {
		for _, x := range []float64{0, -1, 0.3, 1, -3e-9, 4e12, math.NaN(), math.Inf(-1)} {
			if s := Print(x, Must("M-1 s-1"), form); s == "" || strings.ContainsAny(s, " -") {
				t.Errorf("%g in form %d prints %q", x, form, s)
			}
		}
	}
	if got := Print(3e-9, Must("M-1 s-1"), FormRate); got != "3.0\u00a0×\u00a010⁻⁹\u00a0M⁻¹\u00a0s⁻¹" {
		t.Errorf("got %q", got)
	}
}

func TestFixedAndDigits(t *testing.T) {
	for _, tt := range []struct{ got, want string }{
		{Fixed(-0.04, 1), "0.0"},
		{Fixed(math.Copysign(0, -1), 2), "0.00"},
		{Fixed(-1.25, 1), "-1.2"}, // the binary tie goes to even
		{Fixed(2.5, -1), "2"},
		{Fixed(1e20, 1), "1.00000 × 10²⁰"},
		{Fixed(math.NaN(), 1), "none"},
		{Digits(0, 3), "0"},
		{Digits(0.0012345, 3), "0.00123"},
		{Digits(0.00099996, 3), "0.00100"},
		{Digits(0.00099949, 3), "9.99 × 10⁻⁴"},
		{Digits(12345, 3), "12300"},
		{Digits(99999, 2), "1.0 × 10⁵"},
		{Digits(-1.2e-5, 2), "-1.2 × 10⁻⁵"},
		{Digits(5, 0), "5"},
		{Digits(9.96, 2), "10"},
		{Digits(math.Inf(1), 2), "∞"},
	} {
		if plain(tt.got) != tt.want {
			t.Errorf("got %q, want %q", plain(tt.got), tt.want)
		}
	}
}

func TestPercent(t *testing.T) {
	for _, tt := range []struct {
		fraction float64
		want     string
	}{
		{0, "0 %"}, {1, "100 %"}, {-1, "-100 %"}, {0.5, "50.0 %"}, {0.7209, "72.1 %"},
		{0.0005, "0.1 %"}, {math.Nextafter(0.0005, 0), "0.05 %"}, {4.1e-4, "0.04 %"}, {-1.4e-4, "-0.01 %"}, {9.4e-5, "0.009 %"}, {1.04e-5, "0.001 %"},
		{9.51e-6, "0.001 %"}, {9.49e-6, "9.5 × 10⁻⁴ %"}, {3.1e-7, "3.1 × 10⁻⁵ %"}, {-3.1e-7, "-3.1 × 10⁻⁵ %"},
		{0.9994, "99.9 %"}, {0.9995, ">99.9 %"}, {math.Nextafter(1, 0), ">99.9 %"}, {-0.9996, "<-99.9 %"},
		{math.Nextafter(1, 2), "100.0 %"}, {1.05, "105.0 %"}, {math.NaN(), "none"}, {5e-324, "4.9 × 10⁻³²² %"},
	} {
		if got := plain(Percent(tt.fraction)); got != tt.want {
			t.Errorf("%g: got %q, want %q", tt.fraction, got, tt.want)
		}
	}
}

func TestRatio(t *testing.T) {
	for _, tt := range []struct {
		r           float64
		want, toOne string
	}{
		{1, "50:50", "1.0:1"}, {24, "96:4", "24.0:1"}, {21.7, "96:4", "21.7:1"}, {1 / 3.2, "24:76", "1:3.2"},
		{99, "99:1", "99.0:1"}, {99.01, ">99:1", "99.0:1"}, {1.0 / 99, "1:99", "1:99.0"}, {0.0101, "<1:99", "1:99.0"},
		{99.96, ">99:1", "100:1"}, {350, ">99:1", "350:1"}, {999.7, ">99:1", "1.0 × 10³:1"}, {5412, ">99:1", "5.4 × 10³:1"},
		{1 / 5412.0, "<1:99", "1:5.4 × 10³"}, {0, "<1:99", "1:∞"}, {math.Inf(1), ">99:1", "∞:1"},
		{math.NaN(), "none", "none"}, {-1, "none", "none"},
	} {
		if got := Ratio(tt.r); got != tt.want {
			t.Errorf("Ratio(%g) = %q, want %q", tt.r, got, tt.want)
		}
		if got := plain(RatioToOne(tt.r)); got != tt.toOne {
			t.Errorf("RatioToOne(%g) = %q, want %q", tt.r, got, tt.toOne)
		}
	}
	for r := 1.0 / 99; r <= 99; r *= 1.01 { // what is printed lies within half a hundredth
		printed, err := ParseRatio(Ratio(r))
		if err != nil || math.Abs(printed/(1+printed)-r/(1+r)) > 0.005+1e-12 {
			t.Errorf("%g is printed as %q", r, Ratio(r))
		}
	}
}

func TestSpan(t *testing.T) {
	for _, tt := range []struct {
		seconds float64
		want    string
	}{
		{0, "0 s"}, {2.1e-3, "2.1 ms"}, {45, "45 s"}, {59.7, "1.0 min"}, {59.4, "59 s"}, {90, "1.5 min"}, {1800, "30 min"},
		{3600, "1.0 h"}, {11520, "3.2 h"}, {36 * 3600, "36 h"}, {48 * 3600, "2.0 d"}, {12 * 86400, "12 d"}, {330 * 86400, "330 d"},
		{4 * year, "4.0 years"}, {350 * year, "350 years"}, {2000 * year, "2000 years"}, {2e4 * year, "2 × 10⁴ years"},
		{2.14e4 * year, "2.1 × 10⁴ years"}, {1e99 * year, "1 × 10⁹⁹ years"}, {3.4e-7, "340 ns"}, {9.996e-7, "1.0 µs"},
		{2.5e-6, "2.5 µs"}, {1.11e-13, "0.11 ps"}, {1.5e-14, "1.5 × 10⁻² ps"}, {-90, "-1.5 min"},
		{math.Inf(1), "∞"}, {math.NaN(), "none"},
	} {
		if got := plain(Span(tt.seconds)); got != tt.want {
			t.Errorf("%g s: got %q, want %q", tt.seconds, got, tt.want)
		}
	}
	// What is printed reads back within half a last digit of two.
	for s := 1e-12; s < 1e15; s *= 1.37 {
		q, err := Parse(Span(s), Unit{}, Time)
		if err != nil || math.Abs(q.SI-s) > 0.05*s {
			t.Errorf("%g s prints %q and reads back as %v, %v", s, Span(s), q, err)
		}
	}
}

// Printed text with digits to spare reads back as what it was printed from.
func TestPrintReadsBack(t *testing.T) {
	for _, tt := range []struct {
		symbol string
		dim    Dim
		form   Form
		tol    float64
	}{
		{"kcal/mol", MolarEnergy, FormEnergy, 0.05 * 4184}, {"cm-1", MolarEnergy, FormEnergy, 0.5 * 12}, {"Eh", MolarEnergy, FormEnergy, 5e-5 * 2625500},
		{"J/mol/K", MolarEntropy, FormEntropy, 0.05}, {"°C", Temperature, FormKelvin, 0.005}, {"K", Temperature, FormPlain, 0.0005},
	} {
		u := Must(tt.symbol, tt.dim)
		for x := 250.0; x < 900; x += 7.77 {
			q, err := Parse(Print(x, u, tt.form), Unit{}, tt.dim)
			if err != nil || math.Abs(q.SI-x) > tt.tol*(1+1e-9) {
				t.Errorf("%g prints %q and reads back as %v, %v", x, Print(x, u, tt.form), q, err)
			}
		}
	}
}

func TestSuperscript(t *testing.T) {
	for symbol, want := range map[string]string{
		"M-1 s-1": "M⁻¹ s⁻¹", "kcal/mol": "kcal/mol", "cm-1": "cm⁻¹", "mol/m3": "mol/m³", "M⁻¹": "M⁻¹", "": "", "%": "%", "L2 mol-2 s-1": "L² mol⁻² s⁻¹",
	} {
		if got := Superscript(symbol); got != want {
			t.Errorf("%q: got %q, want %q", symbol, got, want)
		}
	}
}

// A difference of 9.6 K is one of 9.6 °C: the zero of a scale has no part in it.
func TestPrintRise(t *testing.T) {
	if got := Print(9.618, Must("°C"), FormRise); got != "9.6\u00a0°C" {
		t.Errorf("got %q", got)
	}
}
