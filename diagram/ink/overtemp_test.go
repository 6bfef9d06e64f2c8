package ink

import (
	"math"

	"saddlebook/diagram"
)

// sharesOver gives the shares of species with the free energies h - T·s (kJ/mol,
// kJ/mol/K) at equilibrium over temperatures in °C.
func sharesOver(temps, h, s []float64) [][]float64 {
	out := make([][]float64, len(h))
	for _, t := range temps {
		k := t + 273.15
		sum := 0.0
		for i := range h {
			sum += math.Exp(-(h[i] - k*s[i]) / (8.314e-3 * k))
		}
		for i := range h {
			out[i] = append(out[i], math.Exp(-(h[i]-k*s[i])/(8.314e-3*k))/sum)
		}
	}
	return out
}

var overTemps = []golden{
	{"temp_shares", func() scener {
		o := diagram.OverTemperature{ID: "temp-shares", Axis: "share at equilibrium", Share: true,
			Marks: []diagram.TempMark{{Temp: -78, Text: "dry ice"}, {Temp: 25, Text: "bench"}}, Cross: []diagram.TempCross{{A: "adduct 5", B: "enone + diene", Text: "as much adduct as enone"}}}
		temps := even(91, -78, 150)
		h, s := []float64{-60, -52, 0}, []float64{-0.17, -0.142, 0}
		for i, y := range sharesOver(temps, h, s) {
			o.Lines = append(o.Lines, diagram.TempLine{Name: []string{"adduct 5", "adduct 6", "enone + diene"}[i], Temps: temps, Y: y, Emphasis: i == 0})
		}
		low, high := sharesOver(temps, []float64{-61.5, -52, 0}, s), sharesOver(temps, []float64{-58.5, -52, 0}, s)
		o.Lines[0].Low, o.Lines[0].High = high[0], low[0]
		return o
	}()},
	{"temp_ratio", func() scener {
		o := diagram.OverTemperature{ID: "temp-ratio", Axis: "1,2-adduct : 1,4-adduct", LogY: true, Width: 340,
			Cross: []diagram.TempCross{{A: "equilibrium", At: 1, Text: "ratio 1"}}}
		temps := even(61, -80, 60)
		y := func(h, s float64) []float64 {
			return over(temps, func(t float64) float64 { return math.Exp(-(h - (t+273.15)*s) / (8.314e-3 * (t + 273.15))) })
		}
		o.Lines = []diagram.TempLine{
			{Name: "kinetic", Temps: temps, Y: y(-9, -0.006), Low: y(-7.5, -0.006), High: y(-10.5, -0.006)},
			{Name: "equilibrium", Temps: temps, Y: y(14, 0.05)},
		}
		for _, t := range []float64{-60, -30, 0, 25} {
			v := math.Exp((9-(t+273.15)*0.006)/(8.314e-3*(t+273.15))) * (1 + 0.15*math.Sin(t))
			o.Points = append(o.Points, diagram.TempPoint{Line: "kinetic", Temp: t, Y: v, Low: ref(v * 0.85), High: ref(v * 1.18)})
		}
		return o
	}()},
	{"temp_wild", diagram.OverTemperature{ID: `o" onload="x`, Title: wild, Desc: wild, Axis: wild, Unit: wild, TempUnit: wild, Width: 480,
		Lines: []diagram.TempLine{{Name: wild, Text: wild, Temps: []float64{0, 1}, Y: []float64{0, 1}}, {Name: "x", Temps: []float64{0, 1}, Y: []float64{1, 0}}},
		Marks: []diagram.TempMark{{Temp: 0.2, Text: wild}}, Cross: []diagram.TempCross{{A: wild, B: "x", Text: wild}}}},
}

func init() { figures = append(figures, overTemps...) }
