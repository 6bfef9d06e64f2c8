package lettering

import (
	"math"
	"strings"
	"testing"
	"unicode/utf8"
)

// written shows runs with _ before low and ^ before high ones.
func written(runs []Run) string {
	var b strings.Builder
	for _, r := range runs {
		t := r.Text
		switch r.Shift {
		case Sub:
			t = "_{" + t + "}"
		case Super:
			t = "^{" + t + "}"
		}
		if r.Italic {
			t = "/" + t + "/"
		}
		b.WriteString(t)
	}
	return b.String()
}

func TestRuns(t *testing.T) {
	for _, tt := range []struct{ text, want string }{
		// formulas
		{"H2O", "H_{2}O"}, {"CO2", "CO_{2}"}, {"NH4+", "NH_{4}^{+}"}, {"SO4^2-", "SO_{4}^{2−}"}, {"Cu2+", "Cu^{2+}"},
		{"Fe3+ and Fe2+", "Fe^{3+} and Fe^{2+}"}, {"Cl-", "Cl^{−}"}, {"Br−", "Br^{−}"}, {"OH-", "OH^{−}"}, {"BF4-", "BF_{4}^{−}"},
		{"Cu(I)", "Cu(I)"}, {"Cu(I)Cl2-", "Cu(I)Cl_{2}^{−}"}, {"Pd(PPh3)4", "Pd(PPh_{3})_{4}"}, {"Pd(0)", "Pd(0)"}, {"Pd2(dba)3", "Pd_{2}(dba)_{3}"},
		{"Pd(OAc)2", "Pd(OAc)_{2}"}, {"[Cu(NH3)4]2+", "[Cu(NH_{3})_{4}]^{2+}"}, {"[Cu(NH3)4]^2+", "[Cu(NH_{3})_{4}]^{2+}"},
		{"Et2O", "Et_{2}O"}, {"C6H10O", "C_{6}H_{10}O"}, {"2H2O", "2H_{2}O"}, {"H2", "H_{2}"}, {"CDCl3", "CDCl_{3}"}, {"PdL2", "PdL_{2}"},
		{"R2NH", "R_{2}NH"}, {"RCO2H", "RCO_{2}H"}, {"CS2", "CS_{2}"}, {"H2O/MeOH", "H_{2}O/MeOH"}, {"trans-PdCl2(PPh3)2", "trans-PdCl_{2}(PPh_{3})_{2}"},
		{"HX + NEt3", "HX + NEt_{3}"}, {"Cs2CO3.", "Cs_{2}CO_{3}."}, {"(NH3)", "(NH_{3})"}, {"(in H2O)", "(in H_{2}O)"}, {"CH3CN·BF3", "CH_{3}CN·BF_{3}"}, {"H+", "H^{+}"},
		// names
		{"TS1", "TS1"}, {"TS2", "TS2"}, {"TS2'", "TS2′"}, {"TS2''", "TS2′′"}, {"TSa‡", "TSa^{‡}"}, {"TSa'", "TSa′"}, {"Ts2", "Ts2"},
		{"R2", "R2"}, {"I2", "I2"}, {"P1", "P1"}, {"A2", "A2"}, {"B2", "B2"}, {"C3", "C3"}, {"IN2", "IN2"}, {"PC2", "PC2"}, {"PR2", "PR2"},
		{"Int2", "Int2"}, {"INT2", "INT2"}, {"Pr2", "Pr2"}, {"Cat2", "Cat2"}, {"path 2", "path 2"}, {"enone 3", "enone 3"}, {"Met2", "Met2"},
		{"1,2-adduct", "1,2-adduct"}, {"B3LYP/6-31G(d)", "B3LYP/6-31G(d)"}, {"B3LYP-D3", "B3LYP-D3"}, {"BP86", "BP86"}, {"M06-2X", "M06-2X"}, {"PBE0", "PBE0"},
		{"C- and O-attack", "C- and O-attack"}, {"R + X", "R + X"}, {"A+B", "A+B"}, {"(R)-2-ol", "(R)-2-ol"}, {"R-form", "R-form"},
		{"SN2", "S_{N}2"}, {"SN2'", "S_{N}2′"}, {"SNAr", "S_{N}Ar"}, {"SN2-type", "S_{N}2-type"}, {"SN", "SN"}, {"HOMO", "HOMO"},
		{"the reactants' energy", "the reactants' energy"}, {"it's", "it's"}, {"2' position", "2′ position"},
		// written out
		{"I_2", "I_{2}"}, {"TS_a", "TS_{a}"}, {"k_obs", "k_{obs}"}, {"k_{-1}", "k_{−1}"}, {"^13C", "^{13}C"}, {"mol^-1", "mol^{−1}"}, {"my_long_name", "my_long_name"},
		{"kcal mol⁻¹", "kcal mol^{−1}"}, {"10⁻⁵", "10^{−5}"}, {"2 × 10^-7", "2 × 10^{−7}"}, {"H₂O", "H_{2}O"}, {"ΔΔG‡", "ΔΔG^{‡}"}, {"a^b", "a^b"}, {"^", "^"}, {"_", "_"},
		// spaces, signs, odd bytes
		{"-78 °C", "−78 °C"}, {"at (-5)", "at (−5)"}, {"  a \n\t b ", "a b"}, {"a\x00b", "a\uFFFDb"}, {"a\xffb", "a\uFFFDb"}, {"", ""},
	} {
		if got := written(Runs(tt.text)); got != tt.want {
			t.Errorf("Runs(%q) = %s, want %s", tt.text, got, tt.want)
		}
	}
}

func TestQuantity(t *testing.T) {
	for _, tt := range []struct{ name, unit, want string }{
		{"ΔG", "kcal/mol", "Δ/G/ / kcal mol^{−1}"}, {"ΔG‡", "kJ/mol", "Δ/G/^{‡} / kJ mol^{−1}"}, {"G", "eV", "/G/ / eV"}, {"ΔΔG", "cm-1", "ΔΔ/G/ / cm^{−1}"},
		{"S", "cal/mol/K", "/S/ / cal mol^{−1} K^{−1}"}, {"k", "1/s", "/k/ / s^{−1}"}, {"k", "L/mol/s", "/k/ / L mol^{−1} s^{−1}"}, {"k", "s^-1", "/k/ / s^{−1}"},
		{"share at equilibrium", "%", "share at equilibrium / %"}, {"ΔG", "", "Δ/G/"}, {"", "eV", " / eV"}, {"a", "m/s2", "/a/ / m s^{−2}"},
	} {
		if got := written(Quantity(tt.name, tt.unit)); got != tt.want {
			t.Errorf("Quantity(%q, %q) = %s, want %s", tt.name, tt.unit, got, tt.want)
		}
	}
}

func TestWidth(t *testing.T) {
	// Advance widths in thousandths of an em, from the Core 14 font metrics
	// of Helvetica (Adobe, Font Metrics for PDF Core 14 Fonts: Helvetica.afm), quoted
	// from memory.
	for text, want := range map[string]float64{"A": 667, "i": 222, "m": 833, "0": 556, " ": 278, "W": 944, "+": 584} {
		if got := Width([]Run{{Text: text}}, 1000); math.Abs(got-want) > 1 {
			t.Errorf("Width(%q) = %g, want %g (Helvetica.afm, from memory)", text, got, want)
		}
	}
	if a, b := Width(Runs("H_2"), 10), Width(Plain("H"), 10)+Small*Width(Plain("2"), 10); math.Abs(a-b) > 1e-9 {
		t.Errorf("a low letter is %g wide, want %g", a, b)
	}
	for _, r := range "ΔΑωπ‡′−→×·±–°≈≤" {
		if advances()[r] < 0 {
			t.Errorf("the font has no %q", r)
		}
	}
}

func TestWrap(t *testing.T) {
	for _, tt := range []struct {
		text string
		max  float64
		want string
	}{
		{"one two", 500, "one two"},
		{"solvent-separated ion pair", 90, "solvent-|separated|ion pair"},
		{"1,2-adduct", 40, "1,2-|adduct"}, // only because nothing else does
		{"the 1,2-adduct", 70, "the|1,2-adduct"},
		{"Pd(PPh3)2 + ArBr", 70, "Pd(PPh3)2|+ ArBr"},
		{"a b c d e f", 34, "a b c|d e f"}, // even lines
		{"", 50, ""},
		{"ab", 1, "a|b"},
	} {
		var got []string
		for _, l := range Wrap(tt.text, 13, tt.max) {
			got = append(got, Text(l))
		}
		if s := strings.Join(got, "|"); s != tt.want {
			t.Errorf("Wrap(%q, 13, %g) = %s, want %s", tt.text, tt.max, s, tt.want)
		}
	}
}

// FuzzWrap: no letter is lost or made, lines keep to the measure where a letter
// fits, and no run is empty or holds what XML cannot.
func FuzzWrap(f *testing.F) {
	for _, s := range []string{"Pd(PPh3)4", "solvent-separated ion pair", "SO4^2-", "k_{obs", "((((((((((", "遷移状態 e\u0301", "TS2'", "a^{", "\xff\x00"} {
		f.Add(s, 60.0)
	}
	f.Fuzz(func(t *testing.T, text string, max float64) {
		if math.IsNaN(max) {
			return
		}
		runs := Runs(text)
		for i, r := range runs {
			if r.Text == "" || !utf8.ValidString(r.Text) || strings.ContainsAny(r.Text, "\x00\n\t") {
				t.Errorf("run %d of %q is %q", i, text, r.Text)
			}
			if i > 0 && runs[i-1].Shift == r.Shift {
				t.Errorf("runs %d and %d of %q are alike", i-1, i, text)
			}
		}
		var all strings.Builder
		for _, l := range Wrap(text, 13, max) {
			if len(l) == 0 {
				t.Errorf("%q has an empty line", text)
			}
			if w := Width(l, 13); w > math.Max(max, 0)+1e-6 && utf8.RuneCountInString(Text(l)) > 1 && max > 30 {
				t.Errorf("a line of %q is %g wide, more than %g: %q", text, w, max, Text(l))
			}
			all.WriteString(Text(l))
		}
		squeeze := func(s string) string { return strings.ReplaceAll(s, " ", "") }
		if squeeze(all.String()) != squeeze(Text(runs)) {
			t.Errorf("%q became %q in lines", Text(runs), all.String())
		}
	})
}

func BenchmarkRuns(b *testing.B) {
	b.ReportAllocs()
	for b.Loop() {
		Width(Runs("trans-PdBr(Ar)(PPh3)2 + H2O"), 13)
	}
}
