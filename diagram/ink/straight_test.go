package ink

import (
	"math"

	"saddlebook/diagram"
)

// eyring is an invented set of rate constants with an exact line beneath.
func eyring(width float64) diagram.StraightPlot {
	const slope, intercept = -10.25, 13.9 // 1000 K/T
	p := diagram.StraightPlot{ID: "eyring", Width: width, Slope: slope, Intercept: intercept, BandText: "95 % confidence",
		Facts: []string{"ΔH‡ = 85.2 ± 1.6 kJ/mol", "ΔS‡ = −82 ± 5 J/mol/K", "ΔG‡(25 °C) = 109.7 ± 0.3 kJ/mol"}}
	if width > 0 {
		p.ID = "eyring-column"
	}
	for i := range 9 {
		t := 288.15 + 7.5*float64(i)
		y := intercept + slope*1000/t + 0.09*math.Sin(2.4*float64(i)+0.5)
		q := diagram.StraightPoint{T: t, Y: y, Low: ref(y - 0.08), High: ref(y + 0.08)}
		if i == 3 {
			q.Y, q.Low, q.High, q.Name, q.Outlier = y+0.34, ref(y+0.26), ref(y+0.42), "run 4", true
		}
		if i == 8 {
			q.Y, q.Low, q.High, q.Name, q.Excluded = y-1.3, nil, nil, "run 9, solvent lost", true
		}
		p.Points = append(p.Points, q)
	}
	for i := range 41 {
		t := 278.15 + 2*float64(i)
		x := 1000 / t
		half := 0.05 * math.Sqrt(1+60*(x-3.25)*(x-3.25))
		p.Band = append(p.Band, diagram.StraightBand{T: t, Low: intercept + slope*x - half, High: intercept + slope*x + half})
	}
	return p
}

var straightPlots = []golden{
	{"eyring", eyring(0)},
	{"eyring_column", eyring(340)},
	{"arrhenius", func() scener {
		p := diagram.StraightPlot{ID: "arrhenius", Arrhenius: true, Unit: "M-1 s-1", Slope: -6.9, Intercept: 25.4, Facts: []string{"Ea = 57.4 kJ/mol", "A = 1.1 × 10^11 M^-1 s^-1"}}
		for i := range 6 {
			t := 273.15 + 10*float64(i)
			p.Points = append(p.Points, diagram.StraightPoint{T: t, Y: p.Intercept + p.Slope*1000/t + 0.03*math.Cos(3*float64(i))})
		}
		return p
	}()},
	{"straight_wild", diagram.StraightPlot{ID: `s" onload="x`, Title: wild, Desc: wild, Axis: wild, Unit: wild, BandText: wild, Facts: []string{wild}, Slope: -10, Intercept: 10, Width: 480,
		Points: []diagram.StraightPoint{{T: 300, Y: -23}, {T: 310, Y: -21, Name: wild, Excluded: true}, {T: 330, Y: -21, Name: wild, Outlier: true}},
		Band:   []diagram.StraightBand{{T: 300, Low: -24, High: -22}, {T: 330, Low: -21, High: -20}}}},
}

func init() { figures = append(figures, straightPlots...) }
