package spread_test

import (
	"fmt"

	"saddlebook/kinetics/spread"
)

// Two barriers of 1 kcal/mol uncertainty each: what becomes of their difference
// depends on how much of the error they share.
func ExampleSample() {
	sd := []float64{4184, 4184}
	for _, plan := range []spread.Plan{{Case: spread.Independent, Own: sd}, spread.Strong(sd, []int{0, 1})} {
		values, err := spread.Sample(plan, spread.Draws, func(shift []float64) ([]float64, error) {
			return []float64{(shift[1] - shift[0]) / 4184}, nil
		})
		if err != nil {
			fmt.Println(err)
			return
		}
		iv := spread.IntervalOf(plan.Case, values[0])
		fmt.Printf("%v: %.1f to %.1f kcal/mol\n", iv.Case, iv.Low, iv.High)
	}
	// Output:
	// independent: -2.3 to 2.3 kcal/mol
	// strongly shared: -0.7 to 0.7 kcal/mol
}
