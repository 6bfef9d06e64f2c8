package kinetics

import (
	"errors"
	"reflect"
	"strings"
	"testing"
	"unicode/utf8"
)

func TestParseFormula(t *testing.T) {
	for _, tt := range []struct{ text, want string }{
		{"C6H10O", "C6H10O"},
		{"H2O", "H2O"},
		{"H₂O", "H2O"},
		{"I_2", "I2"},
		{"BrH4N", "BrH4N"},
		{"CO", "CO"},
		{"Co", "Co"},
		{"((CH3)3C)2O", "C8H18O"},
		{"CH2(I)2", "CH2I2"},
		{"K4[Fe(CN)6]", "C6FeK4N6"},
		{"{[Ag(NH3)2]}+", "AgH6N2⁺"},
		{"AcOH", "AcHO"}, // actinium: symbols are elements

		{"NH4+", "H4N⁺"},
		{"ClO4-", "ClO4⁻"},
		{"ClO4−", "ClO4⁻"},
		{"Ca++", "Ca²⁺"},
		{"H+", "H⁺"},
		{"H3+", "H3⁺"},
		{"C15H25+", "C15H25⁺"},
		{"SO4^2-", "O4S²⁻"},
		{"SO4^-2", "O4S²⁻"},
		{"SO4^{2-}", "O4S²⁻"},
		{"SO4^--", "O4S²⁻"},
		{"SO4²⁻", "O4S²⁻"},
		{"SO₄²⁻", "O4S²⁻"},
		{"SO₄-", "O4S⁻"},
		{"O2⁻", "O2⁻"},
		{"Cu⁺²", "Cu²⁺"},
		{"Cu2^+", "Cu2⁺"},
		{"Hg2^2+", "Hg2²⁺"},
		{"Fe(CN)6^3-", "C6FeN6³⁻"},
		{"[Fe(CN)6]3-", "C6FeN6³⁻"},
		{"[Fe(CN)6]^3-", "C6FeN6³⁻"},
		{"[Cu(NH3)4]2+", "CuH12N4²⁺"},
		{"[AlH4]-", "AlH4⁻"},

		{"CuSO4·5H2O", "CuH10O9S"},
		{"CuSO4 · 5 H2O", "CuH10O9S"},
		{"BF3•C4H10O", "C4H10BF3O"},
		{"Na+·2H2O", "H4NaO2⁺"},
		{"CaSO4·2Na+", "CaNa2O4S²⁺"},
		{"·OH", "HO"},
		{"HO•", "HO"},
		{"O2••", "O2"},
		{"O2•-", "O2⁻"},
		{"C10H16•+", "C10H16⁺"},
		{"C10H16^•+", "C10H16⁺"},
		{"C10H16^+•", "C10H16⁺"},

		{"D2O", "D2O"},
		{"HDO", "DHO"},
		{"²H2O", "D2O"},
		{"^3HCl", "ClT"},
		{"¹H2O", "O¹H2"},
		{"¹³CO2", "O2¹³C"},
		{"C6^13C2H8", "C6H8¹³C2"},
		{"CuSO4·²H2O", "CuD2O5S"},
		{"³⁵Cl⁻", "³⁵Cl⁻"},

		{"e-", "e⁻"},
		{"e⁻", "e⁻"},
		{"e^-", "e⁻"},
	} {
		t.Run(tt.text, func(t *testing.T) {
			f, err := ParseFormula(tt.text)
			if err != nil {
				t.Fatal(err)
			}
			if f.String() != tt.want {
				t.Errorf("reads as %s, want %s", f, tt.want)
			}
			again, err := ParseFormula(f.String())
			if err != nil || !reflect.DeepEqual(again, f) {
				t.Errorf("%s reads again as %+v, %v", f, again, err)
			}
		})
	}
}

func TestParseFormulaErrors(t *testing.T) {
	for _, tt := range []struct {
		text, want string
		at         int
		fix        string
	}{
		{"", "is empty", 0, "leave the key out"},
		{" ", "is empty", 0, ""},
		{"Cu(I)", "oxidation number", 2, "Cu^+"},
		{"[Fe(III)(CN)6]3-", "oxidation number", 3, "charge of the whole"},
		{"VO(V)Cl3", "oxidation number", 2, "element V is meant"},
		{"Cu2+", "two ways", 2, "write Cu2^+ if 2 is a count, or Cu^2+ if the charge is 2+"},
		{"O2-", "two ways", 1, "O^2-"},
		{"SO42-", "two ways", 2, "SO4^2- if the charge is 2-"},
		{"Fe(CN)63-", "two ways", 6, "Fe(CN)6^3-"},
		{"Na[AlH4]2-", "two ways", 8, "Na[AlH4]^2-"},
		{"C60-", "two ways", 1, "write C60^- if 60 is a count"},
		{"Cu2++", "two ways", 2, "write Cu2^++"},
		{"SO4-2", "its number behind the sign", 3, "SO4^2-"},
		{"SO4 2-", "a space", 3, "SO4^2-"},
		{"C6H10O ", "a space", 6, "leave it out"},
		{"PhCl", `"Ph"`, 0, "Ph is C6H5"},
		{"C6H5L", `"L"`, 4, "write groups and ligands out"},
		{"NACL", `"A"`, 1, "did you mean Na?"},
		{"CL", `"L"`, 1, "did you mean Cl?"},
		{"h2o", "'h'", 0, "H"},
		{"H2o", "'o'", 2, "O"},
		{"CH3-CH3", "does not stand at the end", 3, "leave out bonds"},
		{"CH2=CH2", "'='", 3, "atoms and counts only"},
		{"2H2O", "begins with the number 2", 0, "in the reaction"},
		{"13CH4", "begins with the number 13", 0, "^13C"},
		{"(13C)H4", "in front of its element", 1, "^13C"},
		{"CuSO4.5H2O", "'.'", 5, "CuSO4·5H2O"},
		{"CuSO4·5", "ends where an element is due", 7, ""},
		{"CuSO4·0H2O", "the number 0", 6, ""},
		{"H02", "the number 02", 1, ""},
		{"C9999999999999999999999", "makes no sense", 1, ""},
		{"((C1000)1000)1000", "more than a million atoms", 0, ""},
		{"C·1000000C^1000000+·1000000C^1000000+", "makes no sense", 0, ""},
		{"C1000000C", "more than a million atoms", 0, ""},
		{strings.Repeat("(", 20) + "C" + strings.Repeat(")", 20), "brackets in one another", 16, ""},
		{"(CH3", "not closed", 0, "close it with )"},
		{"(CH3]", "not closed", 0, "close it with )"},
		{"CH3)", "closes no bracket", 3, ""},
		{"()", "nothing in front of it", 1, ""},
		{"[NH4+]Cl", "a charge inside its brackets", 4, "at the end"},
		{"H^", "has no sign", 1, "SO4^2-"},
		{"SO4²", "has no sign", 3, "SO4²⁻"},
		{"SO4^{2-", "not closed", 3, ""},
		{"SO4^2--", "a number and several signs", 3, ""},
		{"H+-", "more than one charge", 2, ""},
		{"H+²⁺", "more than one charge", 2, ""},
		{"^2-", "neither a charge nor an isotope", 0, ""},
		{"¹C", "is no isotope", 0, ""},
		{"C⁹⁹H", "is no isotope", 1, ""},
		{"²D", "is no isotope", 0, ""},
		{"H_", "no number behind it", 1, ""},
		{"H₂2", "'2'", 2, ""},
		{"e", "neither a formula nor the electron", 0, "e-"},
		{"e+", "neither a formula nor the electron", 0, ""},
		{"enone", "neither a formula nor the electron", 0, "C6H10O"},
		{"-", "no atoms in front", 0, ""},
		{"·", "ends where an element is due", 1, ""},
		{"H₂O½", "'½'", 3, ""},
	} {
		t.Run(tt.text, func(t *testing.T) {
			f, err := ParseFormula(tt.text)
			var e *FormulaError
			if !errors.As(err, &e) {
				t.Fatalf("reads as %s, error %v", f, err)
			}
			if !strings.Contains(e.Msg, tt.want) || e.At != tt.at || e.Fix == "" || !strings.Contains(e.Fix, tt.fix) || e.Text != tt.text {
				t.Errorf("got %q at %d, fix %q; want %q at %d, fix %q", e.Msg, e.At, e.Fix, tt.want, tt.at, tt.fix)
			}
		})
	}
}

// Atomic numbers at the ends of the rows and blocks of the periodic table (IUPAC,
// from memory): a symbol left out or doubled would shift one of them.
func TestElements(t *testing.T) {
	if len(symbols) != 118 || len(atomicNumber) != 120 { // D and T beside them
		t.Errorf("%d elements, %d symbols", len(symbols), len(atomicNumber))
	}
	for symbol, z := range map[string]int{"H": 1, "He": 2, "Ne": 10, "Ar": 18, "Zn": 30, "Kr": 36, "Cd": 48, "Xe": 54, "Ba": 56, "Lu": 71,
		"Hg": 80, "Rn": 86, "Ra": 88, "Lr": 103, "Cn": 112, "Og": 118} {
		if atomicNumber[symbol] != z {
			t.Errorf("%s has the number %d, want %d", symbol, atomicNumber[symbol], z)
		}
	}
	for _, s := range symbols {
		f, err := ParseFormula(s)
		if err != nil || !reflect.DeepEqual(f, Formula{Atoms: []Atom{{s, 1}}}) {
			t.Errorf("%s reads as %+v, %v", s, f, err)
		}
	}
	for group, atoms := range groupAtoms {
		if atomicNumber[group] > 0 {
			t.Errorf("%s is an element", group)
		}
		if _, err := ParseFormula(atoms); err != nil {
			t.Errorf("%s: %v", group, err)
		}
	}
}

// What String writes reads again as the same; two of it in brackets are twice
// the atoms.
func FuzzParseFormula(f *testing.F) {
	for _, s := range []string{"C6H10O", "NH4+", "SO4^2-", "[Fe(CN)6]3-", "Cu(I)", "H₂O", "SO₄²⁻", "e-", "CuSO4·5H2O", "¹³CO2", "^13CH4",
		"C10H16•+", "SO42-", "Cu2+", "((CH3)3C)2O", "I_2", "SO4^{2-}", "·", "[NH4+]", "C99999999", "((((C"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		got, err := ParseFormula(text)
		if err != nil {
			var e *FormulaError
			if !errors.As(err, &e) {
				t.Fatalf("error %T", err)
			}
			if e.At < 0 || e.At > utf8.RuneCountInString(text) || e.Msg == "" || e.Fix == "" {
				t.Fatalf("error at %d of %q: %s; %s", e.At, text, e.Msg, e.Fix)
			}
			return
		}
		if again, err := ParseFormula(got.String()); err != nil || !reflect.DeepEqual(got, again) {
			t.Fatalf("%q reads as %+v and that, written %s, as %+v, %v", text, got, got, again, err)
		}
		if got.Charge != 0 || len(got.Atoms) == 0 {
			return
		}
		twice, err := ParseFormula("(" + got.String() + ")_2")
		for _, a := range got.Atoms {
			if a.N > mostAtoms/2 {
				return
			}
		}
		if err != nil || !reflect.DeepEqual(twice.less(got), got) {
			t.Fatalf("twice %s is %s, %v", got, twice, err)
		}
	})
}
