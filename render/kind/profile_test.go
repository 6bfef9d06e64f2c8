package kind_test

import (
	"math"
	"testing"
)

// Levels are completed by spectators: after R + X has become A, a path that
// goes on without X still compares.
func TestProfileLevels(t *testing.T) {
	s := good(t, "# T\n\n```toml mechanism\n"+`id = "m"
temperature = "25 °C"
[species]
R = { G = 0 }
I = { G = 4 }
X = { G = 1 }
A = { G = -5 }
[step]
T1 = { reaction = "R <=> I", G = 12 }
T2 = { reaction = "I + X <=> A", G = 16 }
`+"```\n\n```toml profile\n"+`id = "hills"
mechanism = "m"
path = [{ through = ["R", "T1", "I", "T2", "A"] }]
zero = "R + X"
`+"```\n", nil)
	for state, kcal := range map[string]float64{"R": 0, "T1": 12, "I": 4, "T2": 15, "A": -6} {
		got := value(t, s, "hills/level/"+state)
		want := kcal * 1000 * calorie
		if got != want && (got-want > 1e-6 || want-got > 1e-6) {
			t.Errorf("level of %s is %g J/mol, want %g", state, got, want)
		}
	}
}

// A catalyst that comes back beside its product stands at another level.
func TestProfileOfATurn(t *testing.T) {
	s := good(t, "# T\n\n```toml mechanism\n"+`id = "m"
temperature = "25 °C"
[species]
Cat = { G = 0 }
S = { G = 0 }
I = { G = -2 }
P = { G = -10 }
[step]
T1 = { reaction = "Cat + S <=> I", G = 12 }
T2 = { reaction = "I <=> Cat + P", G = 15 }
`+"```\n\n```toml profile\n"+`id = "turn"
mechanism = "m"
zero = "Cat + S"
path = [{ through = ["Cat", "T1", "I", "T2", "Cat"] }]
`+"```\n", nil)
	kcal := 1000 * calorie
	for state, want := range map[string]float64{"Cat": 0, "T1": 12, "I": -2, "T2": 15, "Cat + P": -10} {
		if got := value(t, s, "turn/level/"+state); math.Abs(got-want*kcal) > 1e-6 {
			t.Errorf("level of %s is %g J/mol, want %g", state, got, want*kcal)
		}
	}
}
