package stiff

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"
)

// Laws whose species are all absent hold rounding and nothing else: with row
// exchange some 1e-39 stands where 0 was. That is no broken law, and the run
// goes on. These networks of isomers, catalysed isomers and adducts once had
// every other step taken again, to no end.
func TestLawsOfAbsentSpecies(t *testing.T) {
	for _, seed := range []uint64{13, 121, 142, 682, 1473} {
		r := rand.New(rand.NewPCG(seed, 7))
		n := 4 + r.IntN(4)
		var reactions []Reaction
		var k []float64
		add := func(in, out []int) {
			change := make([]float64, n)
			for _, s := range in {
				change[s]--
			}
			for _, s := range out {
				change[s]++
			}
			one := Reaction{In: in, K: len(k)}
			for s, x := range change {
				if x != 0 {
					one.Net = append(one.Net, Term{s, x})
				}
			}
			reactions = append(reactions, one)
			k = append(k, math.Pow(10, -6+18*r.Float64()))
		}
		for range 4 + r.IntN(4) {
			a, b, c := r.IntN(n), r.IntN(n), r.IntN(n)
			switch r.IntN(3) {
			case 0:
				add([]int{a}, []int{b})
				add([]int{b}, []int{a})
			case 1:
				add([]int{a, c}, []int{b, c})
				add([]int{b, c}, []int{a, c})
			case 2:
				add([]int{a, b}, []int{c})
				add([]int{c}, []int{a, b})
			}
		}
		sys, err := NewSystem(n, len(k), reactions)
		if err != nil {
			t.Fatal(err)
		}
		start := make([]float64, n)
		start[r.IntN(n)] = 0.5
		start[r.IntN(n)] = 0.2
		c, err := Solve(context.Background(), sys, Options{RTol: 1e-9, ATol: 1e-15, MaxSteps: 20_000}, Problem{To: 1e4, Start: start, Rates: Constant(k)}, nil)
		if err != nil {
			t.Errorf("network %d: %v", seed, err)
		} else if c.Stats.Leaks > 10 {
			t.Errorf("network %d: %d steps broke a law", seed, c.Stats.Leaks)
		}
	}
}
