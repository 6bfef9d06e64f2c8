package stiff

import (
	"fmt"
	"math"
	"testing"
)

// TestExtremeRates has fast exchanges on both sides of a slow step, up to 25
// decades apart. In the limit of fast exchange half of A and B is B, so the
// slow step has half its rate constant; the correction is slow/fast.
func TestExtremeRates(t *testing.T) {
	for _, fast := range []float64{1e5, 1e9, 1e13} {
		for _, slow := range []float64{1e-4, 1e-8, 1e-12} {
			for _, rtol := range []float64{1e-4, 1e-8} {
				t.Run(fmt.Sprintf("fast=%g/slow=%g/rtol=%g", fast, slow, rtol), func(t *testing.T) {
					sys, k := build(t, 4, []step{
						{fast, []int{0}, []int{1}}, {fast, []int{1}, []int{0}},
						{slow, []int{1}, []int{2}},
						{fast, []int{2}, []int{3}}, {fast, []int{3}, []int{2}}})
					y, s := end(t, sys, Options{RTol: rtol, ATol: 1e-12}, &Problem{To: 1 / slow, Start: []float64{1, 0, 0, 0}, Rates: k})
					const source = "1 - exp(-k t/2), the limit of fast exchange"
					near(t, "C + D", y[2]+y[3], -math.Expm1(-0.5), max(rtol, 2*slow/fast), source)
					near(t, "D/C", y[3]/y[2], 1, max(rtol, 2*slow/fast), "detailed balance")
					near(t, "sum", y[0]+y[1]+y[2]+y[3], 1, 1e-14, "conservation")
					if s.Stats().Steps > 600 {
						t.Errorf("%d steps, want at most 600", s.Stats().Steps)
					}
				})
			}
		}
	}
}

// TestFastBimolecular has a binding equilibrium of 1e9 /M/s before a slow step
// over hours: A + B <-> AB, AB -> P, with B regenerated.
func TestFastBimolecular(t *testing.T) {
	kf, kr, ks := 1e9, 1e6, 1e-5 // K = 1000 /M
	sys, k := build(t, 4, []step{
		{kf, []int{0, 1}, []int{2}}, {kr, []int{2}, []int{0, 1}}, {ks, []int{2}, []int{3, 1}}})
	for _, rtol := range []float64{1e-5, 1e-8} {
		a0, b0 := 0.5, 0.01
		y, _ := end(t, sys, Options{RTol: rtol, ATol: 1e-14}, &Problem{To: 3e6, Start: []float64{a0, b0, 0, 0}, Rates: k})
		near(t, "A + AB + P", y[0]+y[2]+y[3], a0, 1e-14, "conservation")
		near(t, "B + AB", y[1]+y[2], b0, 1e-13, "conservation")
		near(t, "AB/(A B)", y[2]/(y[0]*y[1]), kf/kr, max(rtol, 1e-9), "equilibrium, with a correction of ks/kr")
		// The total of free and bound A falls by ks AB: separate variables in
		// the free A, a: total = a + b0 K a/(1 + K a).
		want := freeAfter(a0, b0, kf/kr, ks, 3e6)
		near(t, "A", y[0], want, 20*rtol, "quadrature of the equilibrium limit")
	}
}

// freeAfter inverts t(a) = integral of d(total)/(-ks AB) in closed form:
// d(total)/da = 1 + b0 K/(1+K a)^2, AB = b0 K a/(1+K a).
func freeAfter(a0, b0, K, ks, t float64) float64 {
	// start: free a from total a0
	s := a0 - b0 - 1/K
	start := (s + math.Sqrt(s*s+4*a0/K)) / 2
	// integral of (1+Ka)/(b0 K a) + 1/(a (1+K a)) over a
	g := func(a float64) float64 {
		return math.Log(a)/(b0*K) + a/b0 + math.Log(a/(1+K*a))
	}
	lo, hi := 1e-300, start
	for range 400 {
		mid := math.Sqrt(lo * hi)
		if (g(start)-g(mid))/ks > t {
			lo = mid
		} else {
			hi = mid
		}
	}
	return hi
}
