package stiff_test

import (
	"context"
	"errors"
	"fmt"
	"math"

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

// A -> B while the temperature rises from 280 K to 320 K in 1000 s.
func ExampleNewProgramme() {
	const kB, h, R, barrier = 1.380649e-23, 6.62607015e-34, 8.31446261815324, 90e3
	ramp, err := stiff.NewProgramme([]stiff.Node{{T: 0, Kelvin: 280}, {T: 1000, Kelvin: 320}}, func(T float64, k, dk []float64) {
		k[0] = kB * T / h * math.Exp(-barrier/(R*T))
		if dk != nil {
			dk[0] = k[0] * (1/T + barrier/(R*T*T))
		}
	})
	if err != nil {
		fmt.Println(err)
		return
	}
	sys, err := stiff.NewSystem(2, 1, []stiff.Reaction{{In: []int{0}, Net: []stiff.Term{{Species: 0, Coef: -1}, {Species: 1, Coef: 1}}, K: 0}})
	if err != nil {
		fmt.Println(err)
		return
	}
	c, err := stiff.Solve(context.Background(), sys, stiff.Options{}, stiff.Problem{To: 1000, Start: []float64{1, 0}, Rates: ramp}, []float64{500, 1000})
	if err != nil {
		fmt.Println(err)
		return
	}
	for i, t := range c.T {
		fmt.Printf("%4.0f s: %.4f of A\n", t, c.Y[i][0])
	}
	// Output:
	//  500 s: 0.7859 of A
	// 1000 s: 0.0527 of A
}

// The derivative of both concentrations of A <-> B by ln k of the way there,
// and every step seen as it is taken.
func ExampleSolver_Run() {
	sys, err := stiff.NewSystem(2, 2, []stiff.Reaction{
		{In: []int{0}, Net: []stiff.Term{{Species: 0, Coef: -1}, {Species: 1, Coef: 1}}, K: 0},
		{In: []int{1}, Net: []stiff.Term{{Species: 1, Coef: -1}, {Species: 0, Coef: 1}}, K: 1},
	})
	if err != nil {
		fmt.Println(err)
		return
	}
	s, err := stiff.NewSolver(sys, stiff.Options{RTol: 1e-8})
	if err != nil {
		fmt.Println(err)
		return
	}
	var highest float64
	y := make([]float64, 2)
	err = s.Run(context.Background(), &stiff.Problem{
		To: 100, Start: []float64{1, 0}, Rates: stiff.Constant{0.3, 0.1},
		Params: []stiff.Param{{Weights: []stiff.Weight{{K: 0, W: 1}}}},
	}, func(st *stiff.Step) error {
		st.SlopeAt(0, st.T1, y)
		highest = max(highest, y[1])
		return nil
	})
	if err != nil {
		fmt.Println(err)
		return
	}
	s.Slope(0, y)
	fmt.Printf("dB/d ln k: %.4f at the end, never above %.2f\n", y[1], highest)
	// Output: dB/d ln k: 0.1875 at the end, never above 0.34
}

// 2 A -> 3 A with rate a^2 from a = 1 has no solution beyond 1 s.
func ExampleStuckError() {
	sys, err := stiff.NewSystem(1, 1, []stiff.Reaction{{In: []int{0, 0}, Net: []stiff.Term{{Species: 0, Coef: 1}}, K: 0}})
	if err != nil {
		fmt.Println(err)
		return
	}
	_, err = stiff.Solve(context.Background(), sys, stiff.Options{}, stiff.Problem{To: 2, Start: []float64{1}, Rates: stiff.Constant{1}}, nil)
	var stuck *stiff.StuckError
	if errors.As(err, &stuck) {
		fmt.Printf("stopped at %.4f s: %v\n", stuck.T, errors.Is(err, stiff.ErrStuck))
	}
	// Output: stopped at 1.0000 s: true
}
