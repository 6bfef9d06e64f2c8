package rate_test

import (
	"fmt"

	"saddlebook/kinetics/rate"
)

const kcal = 1000 * rate.Calorie

// How fast is a step over 20 kcal/mol at 25 °C?
func ExampleEyring() {
	k, err := rate.Eyring(20*kcal, 298.15)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("k = %.3f 1/s, half-life %.0f s\n", k, rate.HalfLife(k))
	// Output: k = 0.014 1/s, half-life 51 s
}

// Which barrier gives a half-life of one hour at 25 °C?
func ExampleBarrier() {
	dG, err := rate.Barrier(0.6931471805599453/3600, 298.15)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.2f kcal/mol\n", dG/kcal)
	// Output: 22.52 kcal/mol
}

// An uphill step has a late transition state.
func ExamplePosition() {
	chi := rate.Position(25*kcal, 5*kcal)
	fmt.Printf("%.2f, %s\n", chi, rate.PositionWord(chi))
	// Output: 0.69, late
}

// What an energy at 1 atm gains at 1 mol/L.
func ExampleStandard_Shift() {
	gas := rate.Standard{Pressure: rate.Atmosphere}
	fmt.Printf("%.2f kcal/mol at 25 °C, %.2f at -78 °C\n", gas.Shift(298.15)/kcal, gas.Shift(195.15)/kcal)
	// Output: 1.89 kcal/mol at 25 °C, 1.08 at -78 °C
}

// A temperature left in °C is refused where it cannot be one in K.
func ExampleDomainError() {
	_, err := rate.Eyring(20*kcal, -78)
	fmt.Println(err)
	// Output: temperature (K) of -78 is not possible; give a finite one above zero
}
