package control_test

import (
	"context"
	"fmt"
	"math"

	"saddlebook/kinetics"
	"saddlebook/kinetics/control"
	"saddlebook/kinetics/thermo"
)

// A catalyst that takes up S, releases P and rests beside the cycle.
func ExampleAnalyse() {
	const kcal = 4184
	m := &kinetics.Mechanism{ID: "cycle", Temperature: 298.15}
	names := []string{"S", "P", "cat", "int", "rest"}
	for i, g := range []float64{0, -10, 0, -2, -14} {
		m.Species = append(m.Species, kinetics.Species{Name: names[i], Energy: thermo.Constant(g * kcal)})
	}
	for _, s := range []struct {
		name, reaction string
		g              float64
	}{{"TS1", "cat + S <=> int", 14}, {"TS2", "int <=> cat + P", 16}, {"TSo", "cat + P <=> rest", 6}} {
		from, to, returns, err := kinetics.ParseReaction(s.reaction, names)
		if err != nil {
			fmt.Println(err)
			return
		}
		m.Steps = append(m.Steps, kinetics.Step{Name: s.name, From: from, To: to, Returns: returns, Energy: thermo.Constant(s.g * kcal)})
	}
	free := math.NaN()
	r, err := control.Analyse(context.Background(), m, 298.15, control.Problem{
		Held:     []float64{0.5, 0.1, free, free, free},
		Total:    []float64{free, free, 0.01, free, free},
		RateOf:   []kinetics.Term{{Species: 1, N: 1}},
		Catalyst: 2,
	})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("turnover %.3g per hour; rests as %s (%.1f %%)\n", 3600*r.Turnover, names[r.Resting], 100*r.RestingShare)
	for _, o := range r.Orders {
		fmt.Printf("order in %s %.2f\n", names[o.Species], o.Order)
	}
	ts := r.States[6]
	fmt.Printf("%s: X %.2f; 1 kcal/mol more multiplies the rate by %.3f\n", ts.Name, ts.X, ts.Factor)
	best := r.Cycle.Pairs[0]
	fmt.Printf("span %.1f kcal/mol, from %s to %s\n", r.Cycle.Span/kcal, r.Cycle.Levels[best.I].Name, r.Cycle.Levels[best.TS].Name)
	// Output:
	// turnover 201 per hour; rests as rest (85.0 %)
	// order in S 0.86
	// order in P -0.85
	// order in cat 1.00
	// TS2: X 0.97; 1 kcal/mol more multiplies the rate by 0.189
	// span 19.0 kcal/mol, from rest to TS2
}
