package branch_test

import (
	"fmt"

	"saddlebook/kinetics/branch"
)

// An intermediate, state 1, returns to the reactant, state 0, or goes on to two
// products, states 2 and 3; the second product also forms directly.
func ExampleAbsorb() {
	shares, err := branch.Absorb(2, 2, []branch.Rate{
		{From: 0, To: 1, K: 1},
		{From: 1, To: 0, K: 1e9},
		{From: 1, To: 2, K: 3},
		{From: 0, To: 3, K: 1e-9},
	}, []float64{1, 0})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.3f %.3f\n", shares[0], shares[1])
	// Output: 0.750 0.250
}
