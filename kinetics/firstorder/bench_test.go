package firstorder

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"saddlebook/kinetics/stiff"
)

// The integrator's system of the same exchanges, reversible or not.
func integrated(t testing.TB, n int, list []Exchange) (*stiff.System, stiff.Constant) {
	t.Helper()
	var reactions []stiff.Reaction
	var k stiff.Constant
	add := func(i, j int, ln float64) {
		if !math.IsInf(ln, -1) {
			reactions = append(reactions, stiff.Reaction{In: []int{i}, Net: []stiff.Term{{Species: i, Coef: -1}, {Species: j, Coef: 1}}, K: len(k)})
			k = append(k, math.Exp(ln))
		}
	}
	for _, x := range list {
		add(x.From, x.To, x.LnForward)
		add(x.To, x.From, x.LnBack)
	}
	sys, err := stiff.NewSystem(n, len(k), reactions)
	if err != nil {
		t.Fatal(err)
	}
	return sys, k
}

// The integrator, which shares nothing with this package, comes to the same amounts
// within its tolerance.
func TestIntegrator(t *testing.T) {
	rng := rand.New(rand.NewPCG(9, 9))
	for c := range 30 {
		n := 3 + rng.IntN(6)
		list, _ := random(rng, n, 0.2)
		start := make([]float64, n)
		start[0] = 1
		times := []float64{1e-9, 1e-3, 1, 3600, 1e6}
		sys, k := integrated(t, n, list)
		run, err := stiff.Solve(context.Background(), sys, stiff.Options{RTol: 1e-9, ATol: 1e-16}, stiff.Problem{To: 1e6, Start: start, Rates: k}, times)
		if err != nil {
			t.Errorf("network %d: %v", c, err)
			continue
		}
		chain := newChain(t, n, list)
		for i, time := range times {
			for j, x := range chain.at(start, time) {
				if !(math.Abs(x-run.Y[i][j]) <= 1e-7*x+1e-13) {
					t.Errorf("network %d, %g s: state %d has %g, integrated %g", c, time, j, x, run.Y[i][j])
				}
			}
		}
	}
}

// BenchmarkCourse gives the amounts at 60 times, with the tables made each time, by
// this package and by the integrator, side by side.
func BenchmarkCourse(b *testing.B) {
	times := make([]float64, 60)
	for i := range times {
		times[i] = math.Pow(10, -6+12*float64(i)/59)
	}
	for _, n := range []int{4, 10, 30, 100} {
		rng := rand.New(rand.NewPCG(10, 10))
		list, _ := random(rng, n, 0.2)
		start, out := make([]float64, n), make([]float64, n)
		start[0] = 1
		b.Run(fmt.Sprintf("states=%d/exact", n), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				c := newChain(b, n, list)
				for _, t := range times {
					c.At(start, t, out)
				}
			}
		})
		b.Run(fmt.Sprintf("states=%d/at", n), func(b *testing.B) {
			b.ReportAllocs()
			c := newChain(b, n, list)
			for b.Loop() {
				for _, t := range times {
					c.At(start, t, out)
				}
			}
		})
		sys, k := integrated(b, n, list)
		for _, rtol := range []float64{1e-6, 1e-9} {
			b.Run(fmt.Sprintf("states=%d/integrator=%g", n, rtol), func(b *testing.B) {
				b.ReportAllocs()
				for b.Loop() {
					if _, err := stiff.Solve(context.Background(), sys, stiff.Options{RTol: rtol, ATol: rtol * 1e-6}, stiff.Problem{To: 1e6, Start: start, Rates: k}, times); err != nil {
						b.Fatal(err)
					}
				}
			})
		}
	}
}
