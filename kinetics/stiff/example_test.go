package stiff_test

import (
	"context"
	"fmt"

	"saddlebook/kinetics/stiff"
)

// A <-> B -> C, with half of B taken away at 100 s.
func ExampleSolve() {
	sys, err := stiff.NewSystem(3, 3, []stiff.Reaction{
		{In: []int{0}, Net: []stiff.Term{{Species: 0, Coef: -1}, {Species: 1, Coef: 1}}, K: 0},
		{In: []int{1}, Net: []stiff.Term{{Species: 1, Coef: -1}, {Species: 0, Coef: 1}}, K: 1},
		{In: []int{1}, Net: []stiff.Term{{Species: 1, Coef: -1}, {Species: 2, Coef: 1}}, K: 2},
	})
	if err != nil {
		fmt.Println(err)
		return
	}
	run := stiff.Problem{
		To:    1000,
		Start: []float64{1, 0, 0},
		Rates: stiff.Constant{1e4, 1e5, 0.01},
		Jumps: []stiff.Jump{{T: 100, Scale: []float64{1, 0.5, 1}}},
		Events: []stiff.Event{{G: func(_ float64, y []float64) float64 {
			return y[2] - 0.5 // half is product
		}}},
	}
	c, err := stiff.Solve(context.Background(), sys, stiff.Options{RTol: 1e-8}, run, []float64{50, 1000})
	if err != nil {
		fmt.Println(err)
		return
	}
	for i, t := range c.T {
		fmt.Printf("%5.0f s: %.5f %.5f %.5f\n", t, c.Y[i][0], c.Y[i][1], c.Y[i][2])
	}
	fmt.Printf("half product at %.3f s\n", c.Hits[0].T)
	// Output:
	//    50 s: 0.86869 0.08687 0.04444
	//  1000 s: 0.34962 0.03496 0.57392
	// half product at 806.614 s
}
