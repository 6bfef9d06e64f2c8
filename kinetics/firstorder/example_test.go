package firstorder_test

import (
	"fmt"
	"math"

	"saddlebook/kinetics/firstorder"
)

// An invented rearrangement: R to A there and back, and R to B without return.
func Example() {
	const r, a, b = 0, 1, 2
	c, err := firstorder.New(3, []firstorder.Exchange{
		{From: r, To: a, LnForward: math.Log(1e-3), LnBack: math.Log(1e-5)},
		{From: r, To: b, LnForward: math.Log(2e-5), LnBack: math.Inf(-1)},
	})
	if err != nil {
		fmt.Println(err)
		return
	}
	out := make([]float64, 3)
	for _, t := range []float64{1e-9, 3600, 86400, 1e8, math.Inf(1)} {
		c.At([]float64{1, 0, 0}, t, out)
		fmt.Printf("%8.2g s: R %.3g, A %.3g, B %.3g\n", t, out[r], out[a], out[b])
	}
	// Output:
	//    1e-09 s: R 1, A 1e-12, B 2e-14
	//  3.6e+03 s: R 0.0338, A 0.947, B 0.0194
	//  8.6e+04 s: R 0.00937, A 0.955, B 0.0356
	//    1e+08 s: R 3.5e-11, A 3.57e-09, B 1
	//     +Inf s: R 0, A 0, B 1
}

// What is fed at 1e-6 mol/L/s and lost at 1e-4 1/s comes to 0.01 mol/L; with the
// amounts in the place of the feed, Fed is their integral.
func ExampleChain_Fed() {
	c, err := firstorder.New(2, []firstorder.Exchange{{From: 0, To: 1, LnForward: math.Log(1e-4), LnBack: math.Inf(-1)}})
	if err != nil {
		fmt.Println(err)
		return
	}
	out := make([]float64, 2)
	c.Fed([]float64{0, 0}, []float64{1e-6, 0}, 1e6, out)
	fmt.Printf("%.4f mol/L\n", out[0])
	c.Fed([]float64{0, 0}, []float64{1, 0}, 1e6, out)
	fmt.Printf("%.4f of it has reacted\n", 1e-4*out[0])
	// Output:
	// 0.0100 mol/L
	// 1.0000 of it has reacted
}
