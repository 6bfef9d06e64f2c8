package course

import (
	"math/rand/v2"
	"strings"
	"testing"
)

// The method that a course names is the one whose steps were taken.
func TestMethodNamed(t *testing.T) {
	multi := 0
	for _, n := range []int{6, 40} {
		m := random(rand.New(rand.NewPCG(7, uint64(n))), n, 20*n, 0)
		charge := make([]float64, n)
		charge[0], charge[1] = 1, 0.5
		p, err := Prepare(m, Run{Charge: charge, Programme: hold(3600), RTol: 1e-9})
		if err != nil {
			t.Fatal(err)
		}
		p.notFirst = "this is a test"
		c, err := p.Simulate(t.Context(), m)
		if err != nil {
			t.Fatal(err)
		}
		did := p.once.Stats()
		if did.Multistep > 0 {
			multi++
		}
		says := func(what string) bool { return strings.Contains(c.Method, what) }
		if says("differentiation formulas") != (did.Multistep > 0) || says("Rosenbrock") != (did.Multistep < did.Steps) {
			t.Errorf("%d species, %d of %d steps by the multistep formulas: %q", n, did.Multistep, did.Steps, c.Method)
		}
	}
	if multi != 1 {
		t.Errorf("%d of the networks were large, want 1", multi)
	}
}
