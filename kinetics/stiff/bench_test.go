package stiff

import (
	"context"
	"fmt"
	"math"
	"testing"
)

// BenchmarkTestSet reports steps and digits with the time: faster with fewer
// digits is not faster.
func BenchmarkTestSet(b *testing.B) {
	for _, p := range testProblems() {
		for _, rtol := range []float64{1e-2, 1e-5, 1e-8} {
			b.Run(fmt.Sprintf("problem=%s/rtol=%g", p.name, rtol), func(b *testing.B) {
				sys, k := build(b, p.n, p.steps)
				s, err := NewSolver(sys, Options{RTol: rtol, ATol: rtol * p.atol})
				if err != nil {
					b.Fatal(err)
				}
				run := &Problem{To: p.t, Start: p.start, Rates: k}
				b.ReportAllocs()
				for b.Loop() {
					if err := s.Run(context.Background(), run, nil); err != nil {
						b.Fatal(err)
					}
				}
				y := make([]float64, p.n)
				s.Y(y)
				worst := 0.0
				for i, w := range p.want {
					worst = max(worst, math.Abs(y[i]-w)/math.Abs(w))
				}
				b.ReportMetric(float64(s.Stats().Steps), "steps/op")
				b.ReportMetric(-math.Log10(worst), "digits")
			})
		}
	}
}
