package stiff

import (
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"testing"
)

func FuzzNetwork(f *testing.F) {
	for i := range uint64(20) {
		f.Add(i, i*7, 1.0+float64(i))
	}
	f.Fuzz(func(t *testing.T, a, b uint64, decades float64) {
		if !(math.Abs(decades) < 25) {
			return
		}
		r := rand.New(rand.NewPCG(a, b))
		n := 1 + r.IntN(12)
		steps := randomNetwork(r, n, 1+r.IntN(20), decades)
		sys, k := build(t, n, steps)
		start := make([]float64, n)
		sum := 0.0
		for j := range start {
			if r.IntN(3) > 0 {
				start[j] = math.Pow(10, -6*r.Float64())
				sum += start[j]
			}
		}
		opt := Options{RTol: math.Pow(10, -3-5*r.Float64()), ATol: 1e-15, MaxSteps: 20000}
		s, err := NewSolver(sys, opt)
		if err != nil {
			t.Fatal(err)
		}
		if a%2 == 0 {
			s = forced(t, sys, opt)
		}
		c, err := s.course(context.Background(), Problem{To: math.Pow(10, 8*r.Float64()-3), Start: start, Rates: k}, nil)
		if err != nil {
			if !errors.Is(err, ErrStuck) {
				t.Fatal(err)
			}
			return
		}
		got := 0.0
		for _, v := range c.Final {
			got += v
			if !(v >= -1e-15-1e-15*sum) {
				t.Errorf("concentration %g, below zero", v)
			}
		}
		if !(math.Abs(got-sum) <= 1e-12*sum) {
			t.Errorf("sum %.17g, want %.17g", got, sum)
		}
	})
}
