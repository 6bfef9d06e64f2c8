package course

import "testing"

// The integrated rate law of Michaelis and Menten, s = Km W((s0/Km)
// exp((s0 − Vm t)/Km)), which holds to about the ratio of enzyme to substrate
// (here 1e-7 and 1e-6). Source: Schnell and
// Mendoza, J. Theor. Biol. 187, 207 (1997); the values are recomputed from it.
func TestMichaelisMentenIntegrated(t *testing.T) {
	for _, tt := range []struct{ s0, Km, Vm, t, s float64 }{
		{1, 0.5, 0.1, 5, 0.6874112640918117},
		{10, 1, 2, 4, 3.153934402775048},
	} {
		const enzyme = 1e-6
		kcat := tt.Vm / enzyme
		w := newNetwork(4) // substrate, enzyme, complex, product
		w.exchange(2*kcat/tt.Km, kcat, side(0, 1), side(2))
		w.step(kcat, side(2), side(1, 3))
		c := simulate(t, w.m, Run{Charge: []float64{tt.s0, enzyme, 0, 0}, Basis: 0, Programme: hold(tt.t)})
		near(t, "substrate", last(c).C[0], tt.s, 2e-6)
	}
}
