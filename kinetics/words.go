package kinetics

import (
	"math"
	"strconv"
	"strings"

	"saddlebook/kinetics/unit"
)

const joulesPerCalorie = 4.184

// energyText prints an energy (J/mol) for a message.
func energyText(x float64) string {
	return fixed(x/(1000*joulesPerCalorie)) + " kcal/mol (" + fixed(x/1000) + " kJ/mol)"
}

// fixed keeps one decimal, or three digits of what is smaller than that.
func fixed(x float64) string {
	if a := math.Abs(x); a != 0 && a < 0.05 {
		return unit.Digits(x, 2)
	}
	return unit.Fixed(x, 1)
}

// temperatureText prints a temperature (K) in °C.
func temperatureText(T float64) string {
	if !(math.Abs(T) < 1e9) {
		return strconv.FormatFloat(T, 'g', 4, 64) + " K"
	}
	c := T - 273.15
	if math.Abs(c-math.Round(c)) < 0.005 {
		return unit.Fixed(c, 0) + " °C"
	}
	return unit.Fixed(c, 2) + " °C"
}

// sideText prints a sum of species as a reaction has it.
func sideText(side []Term, names []string) string {
	var b strings.Builder
	for i, t := range side {
		if i > 0 {
			b.WriteString(" + ")
		}
		if t.N != 1 {
			b.WriteString(strconv.Itoa(t.N) + " ")
		}
		b.WriteString(names[t.Species])
	}
	return b.String()
}
