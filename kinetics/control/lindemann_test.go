package control_test

import (
	"testing"

	"saddlebook/kinetics"
)

// Lindemann's mechanism: A + M <=> X + M, X -> P. With k∞ = k1 k2/k−1 and k0 = k1
// the steady state gives k = k∞/(1 + k∞/(k0 [M])), half of k∞ at [M] = k∞/k0.
// Source: Lindemann, Trans. Faraday Soc. 17, 598 (1922), from memory.
func TestLindemann(t *testing.T) {
	const T, k1, km1, k2 = 298.15, 3e4, 2e9, 5e6
	m := mechanism(t, T, []level{{"A", 0}, {"M", 0}, {"X", 0}, {"P", 0}}, []way{{"up", "A + M <=> X + M", 0}, {"out", "X -> P", 0}})
	for i := range m.Species {
		m.Species[i].Unknown = true
	}
	m.Steps[0].Law = &kinetics.Law{Kind: kinetics.Measured, Forward: &kinetics.Constant{K: k1, At: T}, Back: &kinetics.Constant{K: km1, At: T}}
	m.Steps[1].Law = &kinetics.Law{Kind: kinetics.Measured, Forward: &kinetics.Constant{K: k2, At: T}}
	const inf = k1 * k2 / km1
	for _, M := range []float64{1e-9, 1e-4, inf / k1, 1, 100} {
		r := analyse(t, m, T, point(t, m, "P", map[string]float64{"A": 1, "M": M, "P": 0}, nil))
		near(t, "rate", r.Rate, inf/(1+inf/(k1*M)), 1e-12)
		near(t, "order in M", order(t, m, r, "M"), 1/(1+k1*M/inf), 1e-9)
	}
}
