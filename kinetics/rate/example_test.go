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

// Tunnelling through an invented barrier with an imaginary frequency of 1500 cm-1:
// the factor that multiplies the constants of both directions.
func ExampleTunnelling_Factor() {
	t := rate.Tunnelling{By: rate.ByEckart, Imaginary: 150000, Forward: 12 * kcal, Back: 18 * kcal}
	for _, T := range []float64{250, 300, 400} {
		kappa, err := t.Factor(T)
		if err != nil {
			fmt.Println(err)
			return
		}
		fmt.Printf("%.0f K: %.1f\n", T, kappa)
	}
	// Output:
	// 250 K: 113.3
	// 300 K: 18.1
	// 400 K: 4.2
}

// Bell's parabola has no answer for so much tunnelling.
func ExampleBell() {
	_, err := rate.Bell(150000, 298.15)
	fmt.Println(err)
	// Output: u = hν/(kB·T) in the correction of Bell of 7.2385 is not possible; it must stay below 2π: take the correction of Eckart, or a temperature above 343.5 K
}

// A constant of 1e9 in a liquid where partners meet at 7.4e9.
func ExampleLimited() {
	k, err := rate.Limited(1e9, rate.Diffusion(298.15, 0.89e-3))
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.2g L/mol/s\n", k)
	// Output: 8.8e+08 L/mol/s
}

// Breaking a C-H bond of 2900 cm-1 against a C-D bond of 2100 cm-1.
func ExampleZeroPointEffect() {
	ratio, err := rate.ZeroPointEffect(290000, 210000, 298.15)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("kH/kD %.1f\n", ratio)
	// Output: kH/kD 6.9
}
