package kinetics

import (
	"math"
	"testing"
)

// Half-lives against the integrated rate laws (common practice): with k = 2 and
// 0.1 mol/L of all that is held.
func TestHalfLife(t *testing.T) {
	species := []string{"A", "B", "C", "D", "Q"}
	const k, c = 2.0, 0.1
	for _, tt := range []struct {
		reaction string
		want     float64
	}{
		{"A -> B", math.Ln2 / k},
		{"A + B -> C", math.Ln2 / (k * c)},
		{"2 A -> B", 1 / (2 * k * c)},
		{"2 A -> A + D", 1 / (k * c)},            // one is lost
		{"3 A -> B", 3.0 / (2 * 3 * k * c * c)},  // 1/c² grows by 3/c² at 6 k a second
		{"2 A + B -> C", 1 / (2 * k * c * c)},    // B held
		{"A + 2 B -> C", math.Ln2 / (k * c * c)}, // B held
		{"Q + A -> Q + D", math.Ln2 / (k * c)},   // Q is a catalyst
		{"Q + A -> 2 Q", math.Ln2 / (k * c)},     // A is used up
		{"A -> 2 A", 0},                          // nothing is used up
	} {
		from, to, _, err := ParseReaction(tt.reaction, species)
		if err != nil {
			t.Fatal(err)
		}
		r := Reaction{From: from, To: to, Forward: k}
		if got := r.HalfLife(false, c); math.Abs(got-tt.want) > 1e-12*tt.want {
			t.Errorf("%s: %g s, want %g s", tt.reaction, got, tt.want)
		}
		if got := r.HalfLife(true, c); got != 0 {
			t.Errorf("%s: %g s for a return that is not there", tt.reaction, got)
		}
	}
}
