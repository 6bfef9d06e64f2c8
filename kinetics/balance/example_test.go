package balance_test

import (
	"fmt"

	"saddlebook/kinetics/balance"
	"saddlebook/kinetics/rate"
)

// A dimeric complex (species 1) opens with a ligand (species 2) to a monomer with
// ligand (species 3); the bare monomer is species 0. The numbers are invented.
func ExampleSolve() {
	const kcal = 1000 * rate.Calorie
	r, err := balance.Solve(balance.Problem{
		T: 298.15,
		G: []float64{0, -9 * kcal, 0, -7 * kcal},
		Reactions: []balance.Reaction{
			{From: []balance.Term{{Species: 0, N: 2}}, To: []balance.Term{{Species: 1, N: 1}}},
			{From: []balance.Term{{Species: 0, N: 1}, {Species: 2, N: 1}}, To: []balance.Term{{Species: 3, N: 1}}},
		},
		Start: []float64{0, 0.005, 0.02, 0},
	})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("bare %.1e, dimer %.1e, ligand %.1e, bound %.1e mol/L\n", r.C[0], r.C[1], r.C[2], r.C[3])
	// Output: bare 6.9e-06, dimer 1.9e-04, ligand 1.0e-02, bound 9.6e-03 mol/L
}
