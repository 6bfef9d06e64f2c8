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
