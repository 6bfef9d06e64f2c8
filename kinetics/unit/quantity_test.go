package unit

import (
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"
	"unicode/utf8"
)

func TestParse(t *testing.T) {
	kcal := Must("kcal/mol")
	for _, tt := range []struct {
		text   string
		bare   Unit
		want   []Dim
		si, sd float64
		symbol string
	}{
		{"18.4", kcal, []Dim{MolarEnergy}, 76985.6, 0, "kcal/mol"},
		{"9.9 ± 0.3", kcal, []Dim{MolarEnergy}, 41421.6, 1255.2, "kcal/mol"},
		{"9.9 +/- 0.3", kcal, []Dim{MolarEnergy}, 41421.6, 1255.2, "kcal/mol"},
		{"9.9+-0.3kJ/mol", kcal, []Dim{MolarEnergy}, 9900, 300, "kJ/mol"},
		{"(9.9 ± 0.3) kJ/mol", Unit{}, []Dim{MolarEnergy}, 9900, 300, "kJ/mol"},
		{"( 1.5 ± 0.1 ) × 10⁻³ M", Unit{}, nil, 1.5e-3, 1e-4, "M"},
		{"1.5e-3 M", Unit{}, []Dim{Concentration}, 1.5e-3, 0, "M"},
		{"1.5E−3 M", Unit{}, []Dim{Concentration}, 1.5e-3, 0, "M"},
		{"1.5 × 10⁻³ M", Unit{}, []Dim{Concentration}, 1.5e-3, 0, "M"},
		{"1.5×10^-3 ± 1×10^-4 M", Unit{}, []Dim{Concentration}, 1.5e-3, 1e-4, "M"},
		{"1.5 x 10-3 M", Unit{}, []Dim{Concentration}, 1.5e-3, 0, "M"},
		{"10⁻³ M", Unit{}, []Dim{Concentration}, 1e-3, 0, "M"},
		{"-10^2 kJ/mol", Unit{}, []Dim{MolarEnergy}, -1e5, 0, "kJ/mol"},
		{"-78 °C", Unit{}, []Dim{Temperature}, 195.15, 0, "°C"},
		{"−78 °C", Unit{}, []Dim{Temperature}, 195.15, 0, "°C"},
		{"–78\u202f°C", Unit{}, []Dim{Temperature}, 195.15, 0, "°C"},
		{"25 C", Unit{}, []Dim{Temperature}, 298.15, 0, "°C"},
		{"298.15 K", Unit{}, []Dim{Temperature}, 298.15, 0, "K"},
		{"25 ± 0.5 °C", Unit{}, []Dim{Temperature}, 298.15, 0.5, "°C"},
		{"-273.15 °C", Unit{}, []Dim{Temperature}, 0, 0, "°C"},
		{"2 h", Unit{}, []Dim{Time}, 7200, 0, "h"},
		{"30 min", Unit{}, []Dim{Time}, 1800, 0, "min"},
		{"90 %", Unit{}, []Dim{None}, 0.9, 0, "%"},
		{"0.9", Unit{}, []Dim{None}, 0.9, 0, ""},
		{"5 mol%", Unit{}, []Dim{Equivalent, Concentration}, 0.05, 0, "mol%"},
		{"1.1 equiv", Unit{}, []Dim{Equivalent, Concentration}, 1.1, 0, "equiv"},
		{"3 µs", Unit{}, []Dim{Time}, 3e-6, 0, "µs"},
		{"3 μs", Unit{}, []Dim{Time}, 3e-6, 0, "µs"},
		{"+5 s", Unit{}, []Dim{Time}, 5, 0, "s"},
		{".5 s", Unit{}, []Dim{Time}, 0.5, 0, "s"},
		{"5. s", Unit{}, []Dim{Time}, 5, 0, "s"},
		{"5 1/s", Unit{}, []Dim{RateConstant(1)}, 5, 0, "s-1"},
		{"5 /s", Unit{}, []Dim{RateConstant(1)}, 5, 0, "s-1"},
		{"2 Eh", Unit{}, []Dim{MolarEnergy}, 2 * 2625499.639479163, 0, "Eh"},
		{"2E0 eV", Unit{}, []Dim{MolarEnergy}, 2 * 96485.33212331002, 0, "eV"},
		{"2eV", Unit{}, []Dim{MolarEnergy}, 2 * 96485.33212331002, 0, "eV"},
		{"0", Unit{}, []Dim{MolarEntropy}, 0, 0, "cal/mol/K"},
		{"-0.0", Unit{}, []Dim{MolarEnergy}, 0, 0, "kcal/mol"},
		{"0e9 M", Unit{}, []Dim{Concentration}, 0, 0, "M"},
		{"7", Must("°C"), []Dim{Temperature}, 280.15, 0, "°C"},
		{"7", kcal, []Dim{None}, 7, 0, ""},
	} {
		t.Run(tt.text, func(t *testing.T) {
			q, err := Parse(tt.text, tt.bare, tt.want...)
			if err != nil {
				t.Fatal(err)
			}
			if !close(q.SI, tt.si) || !close(q.SD, tt.sd) || q.Unit.Symbol != tt.symbol {
				t.Errorf("got %.17g ± %.17g %q, want %.17g ± %.17g %q", q.SI, q.SD, q.Unit.Symbol, tt.si, tt.sd, tt.symbol)
			}
			if q.SI == 0 && math.Signbit(q.SI) {
				t.Error("a negative zero")
			}
		})
	}
}

func close(a, b float64) bool { return a == b || math.Abs(a-b) <= 3e-16*math.Abs(b) }

func TestParseFaults(t *testing.T) {
	for _, tt := range []struct {
		text string
		want []Dim
		err  string
		at   int
	}{
		{"", []Dim{Time}, `the quantity is empty; write it as in "2 h"`, 0},
		{" \t", []Dim{Time}, `the quantity is empty; write it as in "2 h"`, 0},
		{"abc", []Dim{Time}, `"abc" has no number where one is due; write it as in "2 h"`, 0},
		{"-", []Dim{Time}, `"-" lacks a number; write it as in "2 h"`, 0},
		{"9 ±", []Dim{Time}, `"9 ±" lacks a number; write it as in "2 h"`, 3},
		{"NaN s", []Dim{Time}, `"NaN s" is not a finite number; write it as in "2 h"`, 0},
		{"-Inf s", []Dim{Time}, `"-Inf s" is not a finite number; write it as in "2 h"`, 0},
		{"∞ s", []Dim{Time}, `"∞ s" is not a finite number; write it as in "2 h"`, 0},
		{"1e400 s", []Dim{Time}, `"1e400 s" has a number that is too large; check its power of ten`, 0},
		{"1e99999999999999999999 s", []Dim{Time}, `"1e99999999999999999999 s" has a number that is too large; check its power of ten`, 0},
		{"1e-400 s", []Dim{Time}, `"1e-400 s" has a number that is too small; check its power of ten, or write 0`, 0},
		{"1e308 kcal/mol", []Dim{MolarEnergy}, `"1e308 kcal/mol" is too large; check its power of ten`, 0},
		{"1e-323 ns", []Dim{Time}, `"1e-323 ns" is too small; check its power of ten, or write 0`, 0},
		{"5 ± 3 ± 2 s", []Dim{Time}, `"5 ± 3 ± 2 s" has ± twice; write one standard deviation, as in "9.9 ± 0.3 kcal/mol"`, 6},
		{"5 ± 3 +/- 2 s", []Dim{Time}, `"5 ± 3 +/- 2 s" has ± twice; write one standard deviation, as in "9.9 ± 0.3 kcal/mol"`, 6},
		{"5 ± -3 s", []Dim{Time}, `"5 ± -3 s" has a standard deviation below 0; write it without a sign`, 4},
		{"5 s ± 3 s", []Dim{Time}, `"5 s ± 3 s" has its unit before ±; write it last, as in "9.9 ± 0.3 kcal/mol"`, 2},
		{"(5 ± 3 s", []Dim{Time}, `"(5 ± 3 s" has a bracket that is not closed behind the numbers; write it as in "(9.9 ± 0.3) kcal/mol"`, 7},
		{"9.9(3) s", []Dim{Time}, `"9.9(3) s" has a standard deviation in brackets; write it behind ±, as in "9.9 ± 0.3"`, 3},
		{"1,5 s", []Dim{Time}, `"1,5 s" has a comma; write the decimal point: "1.5"`, 1},
		{"1,500 s", []Dim{Time}, `"1,500 s" has a comma; write "1500" or "1.500"`, 1},
		{"1 000 s", []Dim{Time}, `"1 000 s" has digits in groups; write "1000"`, 2},
		{"1_000 s", []Dim{Time}, `"1_000 s" has digits in groups; write "1000"`, 1},
		{"1'000 s", []Dim{Time}, `"1'000 s" has digits in groups; write "1000"`, 1},
		{"1.2.3 s", []Dim{Time}, `"1.2.3 s" has more than one decimal point; write one point and no sign between groups of digits`, 0},
		{"1٣ s", []Dim{Time}, `"1٣ s" has a digit other than 0 to 9; write it as in "2 h"`, 1},
		{"5 × 3 s", []Dim{Time}, `"5 × 3 s" has a × without a power of ten; write it as in "1.5e-3" or "1.5 × 10^-3"`, 2},
		{">5 s", []Dim{Time}, `">5 s" has a sign before the number; write the number alone, or with its standard deviation, as in "9.9 ± 0.3"`, 0},
		{"10-20 s", []Dim{Time}, `"10-20 s" holds more than one number; write one value, or one value and its standard deviation, as in "9.9 ± 0.3"`, 2},
		{"10 to 20 s", []Dim{Time}, `"10 to 20 s" holds more than one number; write one value, or one value and its standard deviation, as in "9.9 ± 0.3"`, 3},
		{"2 h 30 min", []Dim{Time}, `"2 h 30 min" holds more than one quantity; write one value in one unit, as in "2 h"`, 2},
		{"2 h at most", []Dim{Time}, `"2 h at most" has "at most" behind its unit; leave that out`, 2},
		{"2 h;", []Dim{Time}, `unit "h;" is not known; write "h" or "min"`, 2},
		{" 18.4 kcal", []Dim{MolarEnergy}, `unit "kcal" is not known; write "kcal/mol" or "kJ/mol"`, 6},
		{"18.4", []Dim{MolarEnergy}, `"18.4" has no unit where an energy per mole is wanted; write "18.4 kcal/mol" or "18.4 kJ/mol"`, 4},
		{"0 ± 1", []Dim{MolarEnergy}, `"0 ± 1" has no unit where an energy per mole is wanted; write "0 ± 1 kcal/mol" or "0 ± 1 kJ/mol"`, 5},
		{"0", []Dim{Temperature}, `"0" has no unit where a temperature is wanted; write "0 °C" or "0 K"`, 1},
		{"2 h", []Dim{MolarEnergy}, `unit "h" measures a time where an energy per mole is wanted; write it as in "18.4 kcal/mol"`, 2},
		{"-1 K", []Dim{Temperature}, `"-1 K" is below absolute zero; write a temperature of at least "0 K" or "-273.15 °C"`, 0},
		{"-300 °C", nil, `"-300 °C" is below absolute zero; write a temperature of at least "0 K" or "-273.15 °C"`, 0},
		{"5 \xff", []Dim{Time}, `"5 �" holds bytes that are not UTF-8; save the file as UTF-8`, 0},
	} {
		t.Run(tt.text, func(t *testing.T) {
			q, err := Parse(tt.text, Unit{}, tt.want...)
			var e *Error
			if !errors.As(err, &e) {
				t.Fatalf("no *Error but %v, %v", q, err)
			}
			if e.Error() != tt.err || e.At != tt.at {
				t.Errorf("\ngot  %s at %d\nwant %s at %d", e, e.At, tt.err, tt.at)
			}
		})
	}
}

// What Parse has read, String writes so that Parse reads it again, to the bit.
func TestStringRoundTrip(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for _, k := range kinds {
		for _, symbol := range append([]string{""}, k.units...) {
			u, err := Lookup(symbol, k.dim)
			if err != nil {
				if symbol == "" {
					continue
				}
				t.Fatal(err)
			}
			for range 200 {
				x := math.Round(rng.NormFloat64()*1e4) / 10 * math.Pow(10, float64(rng.IntN(13)-6))
				sd := 0.0
				if rng.IntN(2) == 0 {
					sd = math.Abs(rng.NormFloat64())
				}
				if k.dim == Temperature {
					x = math.Abs(x)
				}
				text := fmt.Sprintf("%g ± %g %s", x, sd, symbol)
				q, err := Parse(text, Unit{}, k.dim)
				if err != nil {
					t.Fatal(err)
				}
				again, err := Parse(q.String(), Unit{}, k.dim)
				if err != nil || again != q {
					t.Fatalf("%q is written %q and read back as %v, %v", text, q, again, err)
				}
				if q.Unit != u {
					t.Fatalf("%q has unit %v, want %v", text, q.Unit, u)
				}
			}
		}
	}
}

func TestString(t *testing.T) {
	for _, text := range []string{
		"18.4 ± 0.6 kcal/mol", "-78 °C", "25 ± 0.5 °C", "2 h", "0.2 M", "90 %", "1.1 equiv", "0.07 mM",
		"5e-05 s-1", "0.12 M-1 s-1", "-33 cal/mol/K", "1e+22 s-1", "0.9", "-273.15 °C", "100000 Pa",
	} {
		q, err := Parse(text, Unit{})
		if err != nil || q.String() != text {
			t.Errorf("%q is written %q (%v)", text, q, err)
		}
	}
}

func TestBare(t *testing.T) {
	kJ := Must("kJ/mol")
	for _, tt := range []struct {
		value float64
		bare  Unit
		want  []Dim
		si    float64
		err   string
	}{
		{2, kJ, []Dim{MolarEnergy}, 2000, ""},
		{0, Unit{}, []Dim{MolarEnergy}, 0, ""},
		{2, Unit{}, []Dim{None}, 2, ""},
		{2, Unit{}, []Dim{MolarEnergy}, 0, `"2" has no unit where an energy per mole is wanted; write "2 kcal/mol" or "2 kJ/mol"`},
		{2, kJ, []Dim{Time}, 0, `"2" has no unit where a time is wanted; write "2 h" or "2 min"`},
		{math.NaN(), kJ, []Dim{MolarEnergy}, 0, `the number NaN is not finite; write a number of decimal digits`},
		{math.Inf(-1), kJ, []Dim{MolarEnergy}, 0, `the number -Inf is not finite; write a number of decimal digits`},
		{1e308, kJ, []Dim{MolarEnergy}, 0, `"1e+308" is too large; check its power of ten`},
		{-1, Must("K"), []Dim{Temperature}, 0, `"-1" is below absolute zero; write a temperature of at least "0 K" or "-273.15 °C"`},
	} {
		q, err := Bare(tt.value, tt.bare, tt.want...)
		got := ""
		if err != nil {
			got = err.Error()
		}
		if got != tt.err || q.SI != tt.si {
			t.Errorf("%g: got %v, %q, want %g, %q", tt.value, q.SI, got, tt.si, tt.err)
		}
	}
}

func TestParseRatio(t *testing.T) {
	for _, tt := range []struct {
		text string
		want float64
		err  string
	}{
		{"15:1", 15, ""},
		{"96:4", 24, ""},
		{"21.7", 21.7, ""},
		{" 1 : 4 ", 0.25, ""},
		{"0:1", 0, ""},
		{"1e3∶1", 1000, ""},
		{"5.4 × 10³:1", 5400, ""},
		{"", 0, `the ratio is empty; write it as in "15:1"`},
		{"1:0", 0, `"1:0" has a right side of 0; write a number above 0 there, as in "99:1"`},
		{"1:1:1", 0, `"1:1:1" has more in it than a ratio; write two numbers and no unit, as in "15:1" or "96:4"`},
		{"90 %", 0, `"90 %" has more in it than a ratio; write two numbers and no unit, as in "15:1" or "96:4"`},
		{"-3:1", 0, `"-3:1" has a side below 0; write it as in "15:1"`},
		{">99:1", 0, `">99:1" has a sign before the number; write the number alone, or with its standard deviation, as in "9.9 ± 0.3"`},
		{"1:", 0, `"1:" lacks a number; write it as in "15:1"`},
		{"1e300:1e-300", 0, `"1e300:1e-300" is a ratio too large or too small to compute with; check its powers of ten`},
		{"1e-300:1e300", 0, `"1e-300:1e300" is a ratio too large or too small to compute with; check its powers of ten`},
		{"inf", 0, `"inf" is not a finite number; write it as in "15:1"`},
	} {
		r, err := ParseRatio(tt.text)
		got := ""
		if err != nil {
			got = err.Error()
		}
		if r != tt.want || got != tt.err {
			t.Errorf("%q: got %g, %q, want %g, %q", tt.text, r, got, tt.want, tt.err)
		}
	}
}

func FuzzParse(f *testing.F) {
	for _, text := range []string{
		"18.4 ± 0.6 kcal/mol", "(9.9 ± 0.3) × 10⁻³ M⁻¹ s⁻¹", "−78 °C", "1/(M s)", "5 1/s", "10⁻³ M", "1,5", "1 000", "nan",
		"1e400", "5 ± 3 ± 2", "5 mol %", "J/(mol K)", "9.9(3)", "", "(", "+", ".", "±", "\xff", "2 h 30 min", "3 μs", "x10", "0x10-3",
	} {
		f.Add(text)
	}
	bares := []Unit{{}, Must("kcal/mol"), Must("°C")}
	wants := [][]Dim{nil, {MolarEnergy}, {Temperature, Time}, {None}, {Concentration, Equivalent}, {RateConstant(2)}}
	f.Fuzz(func(t *testing.T, text string) {
		for _, bare := range bares {
			for _, want := range wants {
				q, err := Parse(text, bare, want...)
				if err != nil {
					checkError(t, text, err)
					continue
				}
				if math.IsNaN(q.SI) || math.IsInf(q.SI, 0) || math.IsInf(q.SD, 0) || !(q.SD >= 0) {
					t.Fatalf("%q gave %v", text, q)
				}
				again, err := Parse(q.String(), Unit{}, q.Unit.Dim)
				if err != nil || again != q {
					t.Fatalf("%q is written %q and read back as %v, %v", text, q, again, err)
				}
				if s := Print(q.SI, q.Unit, FormPlain); s == "" || !utf8.ValidString(s) {
					t.Fatalf("%q prints as %q", text, s)
				}
			}
		}
		if r, err := ParseRatio(text); err != nil {
			checkError(t, text, err)
		} else if !(r >= 0) || math.IsInf(r, 0) {
			t.Fatalf("ratio %q gave %g", text, r)
		}
	})
}

func checkError(t *testing.T, text string, err error) {
	t.Helper()
	var e *Error
	if !errors.As(err, &e) || e.Msg == "" || e.Fix == "" || e.At < 0 || e.At > utf8.RuneCountInString(text) {
		t.Fatalf("%q gave the error %#v", text, err)
	}
	if s := err.Error(); !utf8.ValidString(s) || strings.ContainsAny(s, "\n\r\x1b") {
		t.Fatalf("%q gave the message %q", text, s)
	}
}
