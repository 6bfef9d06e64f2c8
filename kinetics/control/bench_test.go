package control_test

import (
	"context"
	"math/rand/v2"
	"testing"

	"saddlebook/kinetics/control"
)

func BenchmarkAnalyse(b *testing.B) {
	for _, c := range []struct {
		name  string
		first bool
	}{{"cycle", true}, {"network", false}} {
		b.Run("mech="+c.name, func(b *testing.B) {
			m := linear(b, 298.15, []float64{0, -5, -3}, []float64{12, 10, 15}, -10)
			p := point(b, m, "P", map[string]float64{"S": 1, "P": 1}, map[string]float64{"I1": 1})
			if !c.first {
				m, p = draw(rand.New(rand.NewPCG(1, 9))).problem(b, 330)
			}
			b.ReportAllocs()
			for b.Loop() {
				if _, err := control.Analyse(context.Background(), m, 298.15, p); err != nil {
					b.Fatal(err)
				}
			}
			b.ReportMetric(float64(len(m.Species)+len(m.Steps)), "states")
		})
	}
}
