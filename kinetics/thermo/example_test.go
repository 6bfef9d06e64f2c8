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

// Water from its measured rotations and vibrations: an entropy of 188.7 J/mol/K at
// 1 bar, where the tables have 188.8.
func ExampleMolecule_At() {
	const cm = 100 // 1/m
	water := thermo.Molecule{
		Mass:        18.01528 * thermo.MassUnit,
		Rotation:    []float64{27.8806 * cm, 14.5216 * cm, 9.2778 * cm},
		Frequencies: []float64{3657 * cm, 1595 * cm, 3756 * cm},
		Symmetry:    2,
		Standard:    rate.Standard{Pressure: rate.Bar},
	}
	c, err := water.At(298.15)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("S %.1f J/mol/K, Cp %.1f J/mol/K, zero point %.1f kJ/mol\n", c.S, c.Cp, c.ZPE/1000)
	// Output: S 188.7 J/mol/K, Cp 33.5 J/mol/K, zero point 53.9 kJ/mol
}

// What the choice for low modes is worth: an invented molecule with one mode of
// 20 cm-1.
func ExampleLowModes() {
	const cm = 100 // 1/m
	for _, choice := range []thermo.Treatment{thermo.Harmonic, thermo.Floor, thermo.FreeRotor} {
		m := thermo.Molecule{
			Mass:        0.15,
			Rotation:    []float64{0.08 * cm, 0.03 * cm, 0.025 * cm},
			Frequencies: []float64{20 * cm, 400 * cm, 1600 * cm},
			LowModes:    thermo.LowModes{Treatment: choice},
		}
		e := thermo.Energy{Molecule: &m}
		fmt.Printf("%s: %.2f kcal/mol\n", choice, e.At(298.15)/kcal)
	}
	// Output:
	// harmonic: -15.41 kcal/mol
	// floor: -14.56 kcal/mol
	// free rotor: -14.76 kcal/mol
}

// An imaginary mode where none can be.
func ExampleMolecule_Check() {
	m := thermo.Molecule{Mass: 0.03, Rotation: []float64{190}, Frequencies: []float64{-50000}}
	fmt.Println(m.Check())
	// Output: frequency 1 (cm-1) of -500 is not possible; a minimum has no imaginary mode: optimise it again, or say that it is a transition state
}
