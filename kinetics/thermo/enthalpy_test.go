package thermo

import (
	"math"
	"testing"

	"saddlebook/kinetics/rate"
)

// Gibbs and Helmholtz: H = −T²·d(G/T)/dT at a standard pressure.
func TestEnthalpyFromFreeEnergy(t *testing.T) {
	molecule := func(e float64) Energy {
		return Energy{Molecule: &Molecule{E: e, Mass: 0.0180106, Rotation: []float64{2788, 1451, 928}, Frequencies: []float64{365700, 159500, 375600},
			Symmetry: 2, Standard: rate.Standard{Pressure: rate.Bar}}}
	}
	for _, tt := range []struct {
		name string
		e    Energy
	}{
		{"enthalpy and entropy", Following(-12e3, 40)},
		{"heat capacity", Energy{Heat: &Heat{H: -12e3, S: 40, Cp: 75, T0: 300}}},
		{"molecule", molecule(-2e5)},
		{"shifted", molecule(-2e5).Plus(1234)},
		{"conformers", Energy{Conformers: []Energy{Following(0, 0), Following(2e3, 5), molecule(-1e3)}, Forms: 3}},
	} {
		for _, T := range []float64{200, 298.15, 700} {
			h := T * 1e-4
			slope := (tt.e.At(T+h)/(T+h) - tt.e.At(T-h)/(T-h)) / (2 * h)
			got, want := tt.e.Enthalpy(T), -T*T*slope
			if !(math.Abs(got-want) <= 1e-6*(1e4+math.Abs(want))) {
				t.Errorf("%s at %g K: %.10g, want %.10g", tt.name, T, got, want)
			}
		}
	}
	for name, e := range map[string]Energy{"constant": Constant(5), "a constant among conformers": {Conformers: []Energy{Following(0, 0), Constant(1)}}} {
		if h := e.Enthalpy(298.15); !math.IsNaN(h) {
			t.Errorf("%s: %g", name, h)
		}
	}
	if !math.IsNaN(Following(0, 0).Enthalpy(0)) || !math.IsNaN(Following(0, 0).Enthalpy(math.Inf(1))) {
		t.Error("a temperature that makes no sense")
	}
	// H(298.15) − H(0) of N2, CODATA key values 1989: 8.670 kJ/mol; of the model
	// from the constants of Huber and Herzberg 1979: 8.676714530147049.
	n2 := Energy{Molecule: &Molecule{Mass: 0.0280134, Rotation: []float64{198.958}, Frequencies: []float64{232992}, Symmetry: 2}}
	if got := (n2.Enthalpy(298.15) - 13936.016390645646) / 1000; math.Abs(got-8.676714530147049) > 1e-6 {
		t.Errorf("H(298.15) − H(0) of N2: %.10g", got)
	}
}
