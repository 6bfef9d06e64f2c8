package kinetics

import (
	"math"
	"math/rand/v2"
	"testing"

	"saddlebook/kinetics/rate"
)

// At equilibrium every reversible step obeys its own constant, whatever the charge.
func TestEquilibriumObeysK(t *testing.T) {
	n := at(t, addition(), 298.15)
	c, err := n.Equilibrium([]float64{0.2, 0.22, 0, 0})
	if err != nil {
		t.Fatal(err)
	}
	for _, r := range n.Reactions {
		ln := 0.0
		for _, x := range r.To {
			ln += float64(x.N) * c.LnC[x.Species]
		}
		for _, x := range r.From {
			ln -= float64(x.N) * c.LnC[x.Species]
		}
		near(t, "Q of "+r.Name, math.Exp(ln), r.K, 1e-9)
	}
	near(t, "R in all", c.C[0]+c.C[2]+c.C[3], 0.2, 1e-12)
	near(t, "X in all", c.C[1]+c.C[2]+c.C[3], 0.22, 1e-12)
	ratio, ok := n.EquilibriumRatio(2, 3)
	if !ok {
		t.Fatal("A and B have no ratio")
	}
	near(t, "A:B", ratio, c.C[2]/c.C[3], 1e-9)
	near(t, "A:B from energies", ratio, math.Exp(-((-11.5+298.15*0.033)-(-17+298.15*0.034))*kcal/(rate.R*298.15)), 1e-9)
	if _, err := n.Equilibrium([]float64{-1, 0, 0, 0}); err == nil {
		t.Error("a negative charge passed")
	}
}

func TestEquilibriumRatio(t *testing.T) {
	m := build(t, 298.15, []state{{"R", 0}, {"X", 0}, {"A", -5}, {"B", -6}, {"A2", -12}, {"C", -7}, {"D", -20}},
		[]state{{"T1: R + X <=> A", 15}, {"T2: R + X <=> B", 15}, {"T3: 2 A <=> A2", 5}, {"T4: B <=> C", 15}, {"T5: C -> D", 20}})
	n := at(t, m, 298.15)
	for _, tt := range []struct {
		a, b string
		want float64 // ΔG, kcal/mol
		ok   bool
	}{{"A", "B", 1, true}, {"C", "A", -2, true}, {"R", "R", 0, true}, {"A", "R", 0, false}, {"A2", "A", 0, false}, {"D", "C", 0, false}} {
		ratio, ok := n.EquilibriumRatio(m.Index(tt.a), m.Index(tt.b))
		if ok != tt.ok {
			t.Errorf("%s:%s: ok is %v", tt.a, tt.b, ok)
		}
		if ok {
			near(t, tt.a+":"+tt.b, ratio, math.Exp(-tt.want*kcal/(rate.R*298.15)), 1e-9)
		}
	}
	for name, want := range map[string]bool{"A": true, "R": true, "A2": true, "D": false} {
		if got := n.Drained(m.Index(name)); got != want {
			t.Errorf("%s drained: %v", name, got)
		}
	}
}

// A composition at equilibrium stays the same if both directions are charged.
func TestEquilibriumOfRandomNetworks(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 10))
	for trial := 0; trial < 40; trial++ {
		n := at(t, random(r), 298.15)
		charge := make([]float64, len(n.Names))
		for i := range charge {
			charge[i] = r.Float64()
		}
		c, err := n.Equilibrium(charge)
		if err != nil {
			t.Fatal(err)
		}
		for _, x := range n.Reactions {
			ln := 0.0
			for _, s := range x.To {
				ln += float64(s.N) * c.LnC[s.Species]
			}
			for _, s := range x.From {
				ln -= float64(s.N) * c.LnC[s.Species]
			}
			if want := -x.DeltaG / (rate.R * n.T); math.Abs(ln-want) > 1e-8*math.Max(1, math.Abs(want)) {
				t.Errorf("trial %d: ln Q of %s is %g, want %g", trial, x.Name, ln, want)
			}
		}
	}
}
