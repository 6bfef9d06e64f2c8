package kind_test

import (
	"math"
	"strings"
	"testing"
)

// Every number of the step table against the closed forms, written out here
// anew from exact constants.
func TestMechanismAgainstClosedForms(t *testing.T) {
	s := good(t, addition, nil)
	kcal := 1000 * calorie
	dG := 9.0*kcal + cold*24.6*calorie
	back := dG - (-11.5*kcal + cold*33*calorie)
	kT := boltzmann * cold / planck
	k := kT * math.Exp(-dG/(gasConstant*cold))
	kBack := kT * math.Exp(-back/(gasConstant*cold))
	for _, tt := range []struct {
		key  string
		want float64
	}{
		{"addition/barrier/TSa", dG},
		{"addition/barrier-back/TSa", back},
		{"addition/reaction-energy/TSa", dG - back},
		{"addition/rate/TSa", k},
		{"addition/rate-back/TSa", kBack},
		{"addition/equilibrium-constant/TSa", k / kBack},
		{"addition/half-life/TSa", math.Ln2 / k}, // the other at 1 M
		{"addition/half-life-back/TSa", math.Ln2 / kBack},
		{"addition/position/TSa", math.Sqrt(dG) / (math.Sqrt(dG) + math.Sqrt(back))},
	} {
		near(t, tt.key, value(t, s, tt.key), tt.want, 1e-12)
	}
	if got := result(t, s, "addition/character/TSa").Value.Text; got != "early" && got != "central" {
		t.Errorf("character = %q", got)
	}
}

func TestHalfLifeNeedsAConcentration(t *testing.T) {
	note := strings.Replace(addition, "[species]", "half-life-at = \"0.2 M\"\n[species]", 1)
	s := good(t, note, nil)
	near(t, "half-life at 0.2 M", value(t, s, "addition/half-life/TSa"), math.Ln2/(0.2*value(t, s, "addition/rate/TSa")), 1e-12)
	if a := strings.Join(result(t, s, "addition/half-life/TSa").Assumes, "; "); !strings.Contains(a, "0.2 M") {
		t.Errorf("the half-life does not say its concentration: %q", a)
	}
}

// A racemisation constant is twice the enantiomerisation constant (common
// practice); both are results.
func TestRacemisationIsTwiceTheExchange(t *testing.T) {
	s := good(t, "# Test\n\n```toml mechanism\n"+`id = "m"
temperature = "25 °C"
enantiomers = ["R", "S"]
[species]
R = { G = 0 }
S = { same-as = "R" }
[step]
TS = { reaction = "R <=> S", G = 25 }
`+"```\n", nil)
	k := value(t, s, "m/rate/TS")
	near(t, "racemisation", value(t, s, "m/racemisation/TS"), 2*k, 1e-15)
	near(t, "ee halves in", value(t, s, "m/racemisation-half-life/TS"), math.Ln2/(2*k), 1e-15)
	ee := math.Exp(-2 * k * value(t, s, "m/ee-loss/TS"))
	near(t, "ee left", ee, 0.99, 1e-14)
}

// Energies from a table beside the note add up to what the same numbers give
// in the block.
func TestMechanismFromTable(t *testing.T) {
	inline := good(t, "# T\n\n```toml mechanism\nid = \"m\"\ntemperature = \"25 °C\"\n[species]\nA = { G = 0 }\nB = { G = -2.75 }\n[step]\nTS = { reaction = \"A <=> B\", G = 19.5 }\n```\n", nil)
	table := good(t, "# T\n\n```toml mechanism\nid = \"m\"\ntemperature = \"25 °C\"\ntable = { file = \"e.csv\", sum = [\"E\", \"Gcorr\"] }\n```\n",
		map[string]string{"e.csv": "name,reaction,E,Gcorr\nA,,0,0\nB,,-3.5,0.75\nTS,A <=> B,18,1.5\n"})
	for _, key := range []string{"m/barrier/TS", "m/rate-back/TS", "m/equilibrium-constant/TS"} {
		near(t, key, value(t, table, key), value(t, inline, key), 1e-12)
	}
}

func TestMechanismHeldConstantIsFlagged(t *testing.T) {
	s := good(t, "# T\n\n```toml mechanism\nid = \"m\"\ntemperature = \"25 °C\"\nat = [\"25 °C\", \"128 °C\"]\n[species]\nA = { G = 0 }\nB = { G = -2 }\n[step]\nTS = { reaction = \"A <=> B\", G = 19.5 }\n```\n", nil)
	if a := result(t, s, "m/barrier/TS@25 °C").Assumes; len(a) != 0 {
		t.Errorf("flagged at its own temperature: %q", a)
	}
	if a := strings.Join(result(t, s, "m/barrier/TS@128 °C").Assumes, "; "); !strings.Contains(a, "3.1 kcal/mol") {
		t.Errorf("the price over 103 K is not 3.1 kcal/mol: %q", a)
	}
}

// A formula that cannot be read stands at its own character; a step that does
// not balance stands at its reaction.
func TestFormulas(t *testing.T) {
	note := func(r, x, a string) string {
		return "# T\n\n```toml mechanism\nid = \"m\"\ntemperature = \"25 °C\"\n[species]\nR = { G = 0, formula = \"" + r + "\" }\nX = { G = 0" + x + " }\nA = { G = -2, formula = \"" + a +
			"\" }\n[step]\nTS = { reaction = \"R + X <=> A\", G = 19.5 }\n```\n"
	}
	good(t, note("C6H10O", `, formula = "CH3OH"`, "C7H14O2"), nil)
	for _, tt := range []struct{ name, note, want string }{
		{"unreadable", note("SO42-", `, formula = "H2"`, "H2SO4"),
			`note.md:7:27: error: mechanism "m", species.R.formula: "42-" at the end of formula "SO42-" can be read two ways; write SO42^- if 42 is a count, or SO4^2- if the charge is 2-`},
		{"unbalanced", note("C6H10O", `, formula = "HCN"`, "C7H10NO-"),
			`note.md:11:19: error: mechanism "m", step.TS.reaction: step TS loses 1 H and gains charge −1: left C7H11NO, right C7H10NO⁻; name what is missing on the right side (H⁺), or correct the formula of R, X or A`},
		{"partial", note("C6H10O", "", "C7H14O2"),
			`note.md:8:1: warning: mechanism "m", species.X: X has no formula and others in the same step do, so the atoms of step TS are not checked; give it a formula, or leave formulas out of the whole step`},
	} {
		t.Run(tt.name, func(t *testing.T) {
			_, faults := evaluate(t, tt.note, nil)
			var b strings.Builder
			faults.Write(&b)
			if strings.TrimSpace(b.String()) != tt.want {
				t.Errorf("got  %swant %s", b.String(), tt.want)
			}
		})
	}
}

// An error of an entropy grows with temperature: the standard deviation of
// H - TS is that of both parts together, at the temperature in use.
func TestErrorOfAnEntropyFollowsTemperature(t *testing.T) {
	note := "# T\n\n```toml mechanism\n" + `id = "m"
temperature = "25 °C"
at = ["-78 °C", "25 °C", "150 °C"]
[species]
R = { H = 0, S = 0 }
P = { H = -5, S = "0 cal/mol/K" }
[step]
TS = { reaction = "R <=> P", H = "18 ± 1", S = "-10 ± 4 cal/mol/K" }
TT = { reaction = "R <=> P", same-as = "TS" }
` + "```\n"
	s := good(t, note, nil)
	for at, T := range map[string]float64{"@-78 °C": cold, "@25 °C": 298.15, "@150 °C": 423.15} {
		r := result(t, s, "m/barrier/TS"+at)
		half := (*r.High - *r.Low) / 2
		want := 1.6448536269514722 * math.Hypot(1, 0.004*T) * 1000 * calorie
		near(t, "half width"+at, half, want, 0.02)
		twin := result(t, s, "m/barrier/TT"+at)
		near(t, "the same of its twin"+at, (*twin.High-*twin.Low)/2, half, 1e-12)
	}
}

// Only what rests on a held energy is flagged.
func TestOnlyTheStepThatIsHeldIsFlagged(t *testing.T) {
	s := good(t, "# T\n\n```toml mechanism\nid = \"m\"\ntemperature = \"25 °C\"\nat = [\"80 °C\"]\n[species]\nA = { H = 0, S = 0 }\nB = { H = -2, S = 0 }\n"+
		"[step]\nT1 = { reaction = \"A <=> B\", H = 19.5, S = 0 }\nT2 = { reaction = \"A <=> B\", barrier = 22 }\n```\n", nil)
	if a := result(t, s, "m/barrier/T1").Assumes; len(a) != 0 {
		t.Errorf("T1 follows temperature and is flagged: %q", a)
	}
	if a := result(t, s, "m/barrier/T2").Assumes; len(a) == 0 {
		t.Error("T2 is held constant and is not flagged")
	}
}
