package thermo_test

import (
	"fmt"

	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/thermo"
)

const kcal = 1000 * rate.Calorie

// A transition state with an entropy of activation of -30 cal/mol/K is 3.1
// kcal/mol lower 103 K further down.
func ExampleFollowing() {
	ts := thermo.Following(10*kcal, -30*rate.Calorie)
	fmt.Printf("%.1f and %.1f kcal/mol\n", ts.At(298.15)/kcal, ts.At(195.15)/kcal)
	// Output: 18.9 and 15.9 kcal/mol
}

// Two gauche forms 0.9 kcal/mol above one anti form: the mixture lies below the
// anti form alone.
func ExampleEnergy_At() {
	butane := thermo.Energy{Conformers: []thermo.Energy{
		thermo.Constant(0),
		{G: 0.9 * kcal, Forms: 2},
	}}
	fmt.Printf("%.2f kcal/mol\n", butane.At(298.15)/kcal)
	// Output: -0.22 kcal/mol
}
