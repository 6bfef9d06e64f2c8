package balance

import (
	"encoding/json"
	"math"
	"os"
	"testing"
)

// TestEquilibria compares compositions of invented systems with those of an
// independent root finder in 60 digits; testdata/equilibria.py wrote the values.
func TestEquilibria(t *testing.T) {
	var file struct {
		By      string
		Systems []struct {
			Name      string
			T         float64
			Species   []string
			G, Start  []float64
			Reactions [][2][]int
			Want      []float64
		}
	}
	data, err := os.ReadFile("testdata/equilibria.json")
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(data, &file); err != nil {
		t.Fatal(err)
	}
	if len(file.Systems) == 0 {
		t.Fatal("no systems in testdata/equilibria.json")
	}
	for _, s := range file.Systems {
		t.Run(s.Name, func(t *testing.T) {
			p := Problem{T: s.T, G: s.G, Start: s.Start}
			side := func(species []int) (out []Term) {
				for _, i := range species {
					out = append(out, Term{i, 1})
				}
				return out
			}
			for _, r := range s.Reactions {
				p.Reactions = append(p.Reactions, Reaction{From: side(r[0]), To: side(r[1])})
			}
			r, err := Solve(p)
			if err != nil {
				t.Fatal(err)
			}
			for i, w := range s.Want {
				if e := math.Abs(r.C[i]-w) / w; !(e <= 1e-10) {
					t.Errorf("[%s] = %.16g mol/L, want %.16g (rel. error %.1e)\nsource: %s", s.Species[i], r.C[i], w, e, file.By)
				}
			}
		})
	}
}
