package unit

import (
	"errors"
	"slices"
	"testing"
)

func TestLookupWritings(t *testing.T) {
	for want, texts := range map[string][]string{
		"kcal/mol":      {"kcal/mol", "kcal mol-1", "kcal mol^-1", "kcal·mol⁻¹", "kcal*mol-1", "kcal / mol", " kcal/mol ", "kcal\u00a0mol\u22121"},
		"J/mol/K":       {"J/mol/K", "J/(mol K)", "J/(mol·K)", "J mol-1 K-1", "J K-1 mol-1", "J⋅mol⁻¹⋅K⁻¹", "J/mol K-1"},
		"cal/mol/K":     {"cal/mol/K", "cal mol-1 K-1", "cal/(mol*K)"},
		"s-1":           {"s-1", "s^-1", "s⁻¹", "/s", "1/s", "1 / s", "s\u22121", "sec-1"},
		"M-1 s-1":       {"M-1 s-1", "M⁻¹ s⁻¹", "M-1s-1", "M^-1 s^-1", "M⁻¹·s⁻¹", "/M/s", "1/(M s)", "1/M/s", "s-1 M-1", "M-1/s"},
		"L mol-1 s-1":   {"L/mol/s", "L mol-1 s-1", "l mol⁻¹ s⁻¹", "L/(mol s)", "L.mol-1.s-1"},
		"dm3 mol-1 s-1": {"dm3 mol-1 s-1", "dm³ mol⁻¹ s⁻¹", "dm^3/mol/s"},
		"L2 mol-2 s-1":  {"L2 mol-2 s-1", "L²/mol²/s"},
		"M s-1":         {"M/s", "M s-1"},
		"mol/m3":        {"mol/m3", "mol m-3", "mol/m³", "mol m^-3"},
		"°C":            {"°C", "C", "℃", "ºC"},
		"µs":            {"µs", "\u03bcs", "us"},
		"µM":            {"µM", "\u03bcM", "uM"},
		"Å":             {"Å", "\u212b", "A\u030a"},
		"mPa s":         {"mPa s", "mPa·s", "mPa*s"},
		"equiv":         {"equiv", "eq", "eq.", "equiv."},
		"mol%":          {"mol%", "mol %"},
		"year":          {"a", "year", "years", "yr"},
		"Eh":            {"Eh", "hartree", "E_h"},
		"%":             {"%"},
		"":              {"", " "},
		"cm-1":          {"cm-1", "cm⁻¹", "1/cm", "/cm"},
		"mEh":           {"mEh"},
		"h-1":           {"h-1", "1/h", "hour-1"},
		"kJ/mol":        {"kJ/mol", "kJ mol⁻¹", "(kJ)/(mol)"},
		"M-1":           {"M-1", "1/M"},
		"L/mol":         {"L/mol", "L mol-1"},
		"mol L-1 s-1":   {"mol/L/s", "mol L-1 s-1", "mol/(L s)"},
		"J/g/K":         {"J/(g K)", "J g-1 K-1"},
		"cm6 mol-2 s-1": {"cm6 mol-2 s-1", "cm⁶ mol⁻² s⁻¹"},
		"kcal/mol/K":    {"kcal/mol/K"},
		"mol/L":         {"mol/L", "mol l-1", "mol L⁻¹"},
	} {
		for _, text := range texts {
			u, err := Lookup(text)
			if err != nil {
				t.Errorf("%q: %v", text, err)
			} else if u.Symbol != want {
				t.Errorf("%q gave %q, want %q", text, u.Symbol, want)
			}
		}
	}
}

func TestLookupFaults(t *testing.T) {
	for _, tt := range []struct {
		text string
		want []Dim
		err  string
		at   int
	}{
		{"kcal", []Dim{MolarEnergy}, `unit "kcal" is not known; write "kcal/mol" or "kJ/mol"`, 0},
		{"  kcal", []Dim{MolarEnergy}, `unit "kcal" is not known; write "kcal/mol" or "kJ/mol"`, 2},
		{"KJ/mol", []Dim{MolarEnergy}, `unit "KJ/mol" is not known; write "kJ/mol"`, 0},
		{"kcal/mole", []Dim{MolarEnergy}, `unit "kcal/mole" is not known; write "kcal/mol" or "cal/mol"`, 0},
		{"eV/mol", []Dim{MolarEnergy}, `unit "eV/mol" is not known; write "J/mol" or "kJ/mol"`, 0},
		{"MM", []Dim{Concentration}, `unit "MM" is not known; write "mM"`, 0},
		{"mm", []Dim{Concentration}, `unit "mm" measures a length where a concentration is wanted; write "mM"`, 0},
		{"m", []Dim{Concentration}, `unit "m" measures a length where a concentration is wanted; write "M"`, 0},
		{"h", []Dim{MolarEnergy}, `unit "h" measures a time where an energy per mole is wanted; write it as in "18.4 kcal/mol"`, 0},
		{"h", []Dim{Temperature, Concentration}, `unit "h" measures a time where a temperature or a concentration is wanted; write it as in "-78 °C" or "0.20 M"`, 0},
		{"M-1 s-1", []Dim{RateConstant(1)}, `unit "M-1 s-1" measures a rate constant of order 2 where a rate constant of order 1 is wanted; write it as in "3.5e-4 s-1"`, 0},
		{"", []Dim{Time}, `a unit is missing where a time is wanted; write "h" or "min"`, 0},
		{"J/mol K", []Dim{MolarEntropy}, `unit "J/mol K" does not say what stands below the line; put it in brackets, as in "J/(mol K)", or divide again, as in "J/mol/K"`, 0},
		{"cal/mol/°C", []Dim{MolarEntropy}, `unit "cal/mol/°C" has a degree Celsius in a product; write K there, as in "cal/mol/K"`, 0},
		{"°F", []Dim{Temperature}, `unit "°F" is not known; write "°C" or "K"`, 0},
		{"furlong", nil, `unit "furlong" is not known; write a unit such as "kcal/mol", "°C", "h" or "M"`, 0},
	} {
		_, err := Lookup(tt.text, tt.want...)
		var e *Error
		if !errors.As(err, &e) {
			t.Errorf("%q: no *Error but %v", tt.text, err)
			continue
		}
		if e.Error() != tt.err || e.At != tt.at {
			t.Errorf("%q:\ngot  %s at %d\nwant %s at %d", tt.text, e, e.At, tt.err, tt.at)
		}
	}
	for _, text := range []string{
		"kcal/mol/mol", "s s", "M M-1 s-1", "()", "(s", "s)", "s/", "/", "·s", "s··M", "1", "1/", "(1/s)", "s^", "s0", "s-0", "s99",
		"s+1", "s-", "M*/s", "((s))", "(M s)-1", "h/min", "mol/mol", "-1", "⁻¹", "J", "kJ", "% %", "%2", "equiv/s", "cm2",
	} {
		if u, err := Lookup(text); err == nil {
			t.Errorf("%q was read as %q", text, u.Symbol)
		}
	}
}

func TestWavenumberOrEnergy(t *testing.T) {
	for _, tt := range []struct {
		want []Dim
		dim  Dim
	}{
		{nil, Wavenumber}, {[]Dim{Wavenumber}, Wavenumber}, {[]Dim{MolarEnergy}, MolarEnergy},
		{[]Dim{Wavenumber, MolarEnergy}, Wavenumber},
	} {
		if u, err := Lookup("cm-1", tt.want...); err != nil || u.Dim != tt.dim {
			t.Errorf("wanting %v: %v, %v", tt.want, u, err)
		}
	}
	if _, err := Lookup("m-1", MolarEnergy); err == nil {
		t.Error("m-1 was taken for an energy")
	}
}

// Every unit worth suggesting is of the kind it is suggested for, and its
// symbol, plain or raised, reads back as the same unit.
func TestKnown(t *testing.T) {
	for _, k := range kinds {
		for _, symbol := range k.units {
			u, err := Lookup(symbol, k.dim)
			if err != nil {
				t.Errorf("%s: %v", k.name, err)
				continue
			}
			if u.Symbol != symbol {
				t.Errorf("%q is written as %q", symbol, u.Symbol)
			}
			for _, text := range []string{u.Symbol, Superscript(u.Symbol)} {
				if again, err := Lookup(text, k.dim); err != nil || again != u {
					t.Errorf("%q reads back as %v, %v", text, again, err)
				}
			}
		}
		if _, err := Parse(k.example, Unit{}, k.dim); err != nil {
			t.Errorf("example of %s: %v", k.name, err)
		}
		if got := Known(k.dim); !slices.IsSorted(got) || len(got) != len(k.units) {
			t.Errorf("Known(%s) = %q", k.name, got)
		}
	}
	for _, p := range parts {
		u, err := Lookup(p.symbol)
		if p.dim == (Dim{Energy: 1}) {
			u, err = Lookup(p.symbol + "/mol")
		}
		if p.dim == (Dim{Energy: 1, Time: -1}) {
			u, err = Lookup(p.symbol + "/L")
		}
		if err != nil || u.Scale != p.num/p.den {
			t.Errorf("%q: %v, %v", p.symbol, u, err)
		}
	}
	if all := Known(); !slices.IsSorted(all) || !slices.Contains(all, "kcal/mol") || !slices.Contains(all, "°C") {
		t.Errorf("Known() = %q", all)
	}
}

func TestMust(t *testing.T) {
	if u := Must("cm-1", MolarEnergy); u.Dim != MolarEnergy {
		t.Errorf("got %v", u)
	}
	defer func() {
		if recover() == nil {
			t.Error("an unknown unit in code did not panic")
		}
	}()
	Must("furlong")
}

func TestDimWords(t *testing.T) {
	odd := Dim{Energy: 3}
	if odd.String() == "" || odd.Example() != "" {
		t.Errorf("%q, %q", odd, odd.Example())
	}
	if MolarEnergy.String() != "an energy per mole" || Temperature.String() != "a temperature" || Time.Example() != "2 h" {
		t.Error("the words for messages have changed")
	}
	if (Unit{}).Of(3) != 3 || (Unit{}).Base(3) != 3 {
		t.Error("the zero Unit changes numbers")
	}
}
