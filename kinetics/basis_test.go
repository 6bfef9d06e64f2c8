package kinetics_test

import (
	"math"
	"testing"

	"saddlebook/kinetics"
)

// The units of the basis in a product, for cases that a chemist counts by hand.
func TestBasisUnits(t *testing.T) {
	nan := math.NaN()
	for _, tt := range []struct {
		name    string
		steps   []string
		basis   string
		outside []string
		of      string
		want    float64
	}{
		{"isomer", []string{"R <=> A"}, "R", nil, "A", 1},
		{"adduct", []string{"R + X <=> A"}, "R", []string{"X"}, "A", 1},
		{"dimer", []string{"2 R <=> D"}, "R", nil, "D", 2},
		{"trimer by way of the dimer", []string{"2 R <=> D", "D + R <=> T"}, "R", nil, "T", 3},
		{"two equal parts", []string{"R -> 2 P"}, "R", nil, "P", 0.5},
		{"two different parts", []string{"R -> P + Y"}, "R", nil, "P", 1},
		{"parts joined again", []string{"R -> P + Y", "P + Y -> Z"}, "R", nil, "Z", 1},
		{"by a catalyst", []string{"C + R <=> CR", "CR -> C + P"}, "R", []string{"C"}, "P", 1},
		{"by a catalyst charged as its adduct", []string{"C + R <=> CR", "CR -> C + P"}, "R", []string{"CR"}, "P", 1},
		{"dimer by a catalyst", []string{"C + R <=> CR", "CR + R -> C + D"}, "R", []string{"C"}, "D", 2},
		{"with a leaving group", []string{"R + X -> A + L"}, "R", []string{"X"}, "A", 1},
		{"made of the other reagent alone", []string{"R + X -> A", "2 X -> W"}, "R", []string{"X"}, "W", nan},
		{"out of reach", []string{"R -> A", "Y -> B"}, "R", nil, "B", nan},
		{"steps that cannot all balance", []string{"R <=> A", "R <=> B", "2 A <=> B"}, "R", nil, "A", nan},
		{"steps that make it of nothing", []string{"R <=> A", "2 C <=> 2 C + R"}, "R", []string{"C"}, "A", nan},
		{"an isomer charged beside the basis", []string{"E <=> Z", "E -> P"}, "E", []string{"Z"}, "P", 1},
	} {
		m := &kinetics.Mechanism{}
		index := map[string]int{}
		for _, name := range []string{"R", "X", "A", "B", "D", "T", "P", "Y", "Z", "C", "CR", "L", "W", "E"} {
			index[name] = len(m.Species)
			m.Species = append(m.Species, kinetics.Species{Name: name})
		}
		names := m.States()
		for _, reaction := range tt.steps {
			from, to, returns, err := kinetics.ParseReaction(reaction, names)
			if err != nil {
				t.Fatal(err)
			}
			m.Steps = append(m.Steps, kinetics.Step{From: from, To: to, Returns: returns})
		}
		outside := make([]bool, len(m.Species))
		for _, name := range tt.outside {
			outside[index[name]] = true
		}
		got := m.BasisUnits(index[tt.basis], outside)[index[tt.of]]
		if got != tt.want && !(math.IsNaN(got) && math.IsNaN(tt.want)) {
			t.Errorf("%s: %g units of %s in %s, want %g", tt.name, got, tt.basis, tt.of, tt.want)
		}
	}
}
