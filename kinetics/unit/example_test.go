package unit_test

import (
	"errors"
	"fmt"

	"saddlebook/kinetics/unit"
)

func ExampleParse() {
	for _, text := range []string{"9.9 ± 0.3", "41.4 kJ/mol", "18.4 kcal", "2 h"} {
		q, err := unit.Parse(text, unit.Must("kcal/mol"), unit.MolarEnergy)
		var fault *unit.Error
		if errors.As(err, &fault) {
			fmt.Printf("character %d: %v\n", fault.At, fault)
			continue
		}
		fmt.Printf("%v is %.1f J/mol\n", q, q.SI)
	}
	// Output:
	// 9.9 ± 0.3 kcal/mol is 41421.6 J/mol
	// 41.4 kJ/mol is 41400.0 J/mol
	// character 5: unit "kcal" is not known; write "kcal/mol" or "kJ/mol"
	// character 2: unit "h" measures a time where an energy per mole is wanted; write it as in "18.4 kcal/mol"
}

// Spaces in printed text are no-break; the Output comment has them too.
func ExamplePrint() {
	fmt.Println(unit.Print(76985.6, unit.Must("kcal/mol"), unit.FormEnergy))
	fmt.Println(unit.Print(76985.6, unit.Must("cm-1", unit.MolarEnergy), unit.FormEnergy))
	fmt.Println(unit.Print(4.71e-5, unit.Must("M-1 s-1"), unit.FormRate))
	fmt.Println(unit.Span(14_700))
	fmt.Println(unit.Ratio(21.7), unit.RatioToOne(21.7))
	// Output:
	// 18.4 kcal/mol
	// 6435 cm⁻¹
	// 4.7 × 10⁻⁵ M⁻¹ s⁻¹
	// 4.1 h
	// 96:4 21.7:1
}
