package ink

import (
	"fmt"
	"math"

	"saddlebook/diagram"
)

// times gives n+1 times from 0 to end, even or, on a logarithmic scale, from low.
func times(n int, low, end float64) []float64 {
	out := make([]float64, n+1)
	for i := range out {
		f := float64(i) / float64(n)
		out[i] = end * f
		if low > 0 {
			out[i] = low * math.Pow(end/low, f)
		}
	}
	return out
}

func over(t []float64, f func(float64) float64) []float64 {
	out := make([]float64, len(t))
	for i, x := range t {
		out[i] = f(x)
	}
	return out
}

// chain is the share of member k (from 0) of n in a row of first-order steps that
// all have the rate constant 1/s; the last one stays.
func chain(k, n int, t float64) float64 {
	share := func(k int) float64 {
		p := math.Exp(-t)
		for i := 1; i <= k; i++ {
			p *= t / float64(i)
		}
		return p
	}
	if k < n-1 {
		return share(k)
	}
	rest := 1.0
	for i := range n - 1 {
		rest -= share(i)
	}
	return math.Max(0, rest)
}

const hour = 3600.0

// warming is an invented course: kinetic control in the cold, thermodynamic
// control after warming.
func warming(width float64) diagram.TimeCourse {
	t := times(340, 0, 17*hour)
	used := over(t, func(t float64) float64 {
		warm := math.Max(0, t/hour-2)
		return 1 - math.Exp(-0.64*math.Min(t/hour, 2)-3*warm)
	})
	turned := over(t, func(t float64) float64 { return 1 / (1 + math.Exp(-9*(t/hour-4.2))) })
	line := func(f func(u, r float64) float64) []float64 {
		out := make([]float64, len(t))
		for i := range t {
			out[i] = 0.2 * f(used[i], turned[i])
		}
		return out
	}
	return diagram.TimeCourse{
		ID: fmt.Sprint("warming-", width), Unit: "mol/L", Width: width,
		Lines: []diagram.TimeLine{
			{Name: "R", Label: "enone 3", T: t, Y: line(func(u, r float64) float64 { return 1 - u })},
			{Name: "A", Label: "1,2-adduct", T: t, Y: line(func(u, r float64) float64 { return u * (0.955 - 0.95*r) }), Emphasis: true},
			{Name: "B", Label: "1,4-adduct", T: t, Y: line(func(u, r float64) float64 { return u * (0.045 + 0.95*r) }), Emphasis: true},
		},
		Programme: []diagram.TimeNode{{T: 0, Value: -78}, {T: 2 * hour, Value: -78}, {T: 5 * hour, Value: 20}, {T: 17 * hour, Value: 20}},
		Events: []diagram.TimeMark{
			{T: 0, Text: "nucleophile in"}, {T: 4.2 * hour, Text: "changeover"}, {T: 4.33 * hour, Text: "ratio of 1"}, {T: 17 * hour, Text: "quench"},
		},
	}
}

var timeCourses = []golden{
	{"time_warming", warming(0)},
	{"time_warming_column", warming(340)},
	{"time_log", func() scener {
		t := times(400, 1e-3, 2e5)
		c := diagram.TimeCourse{ID: "time-log", Title: "Relaxation over eight decades", Axis: "share", Share: true, Log: true,
			Programme: []diagram.TimeNode{{T: 0, Value: 25}, {T: 600, Value: 25}, {T: 2 * hour, Value: 110}, {T: 3e5, Value: 110}},
			Events:    []diagram.TimeMark{{T: 0, Text: "base in"}, {T: 2 * hour, Text: "hot"}},
		}
		names := []string{"E-enolate", "Z-enolate", "kinetic ketone", "thermodynamic ketone"}
		for i, n := range names {
			c.Lines = append(c.Lines, diagram.TimeLine{Label: n, T: t, Y: over(t, func(t float64) float64 {
				return chain(i, len(names), 1.1*(math.Log10(t)+3))
			})})
		}
		return c
	}()},
	{"time_twelve", func() scener {
		t := times(300, 0, 40)
		c := diagram.TimeCourse{ID: "time-twelve", Title: "A row of eleven steps", Unit: "mmol/L"}
		for i := range 12 {
			c.Lines = append(c.Lines, diagram.TimeLine{Label: fmt.Sprint("intermediate I", i+1), T: t, Y: over(t, func(t float64) float64 { return 50 * chain(i, 12, t/2.5) })})
		}
		return c
	}()},
	{"time_measured", func() scener {
		t := times(100, 0, 90*60)
		c := diagram.TimeCourse{ID: "time-measured", Title: "Measured hydrolysis over the computed course", Axis: "c", Unit: "mol/L"}
		k := 4.1e-4
		for i, f := range []func(float64) float64{
			func(t float64) float64 { return 0.05 * math.Exp(-k*t) },
			func(t float64) float64 { return 0.05 * (1 - math.Exp(-k*t)) },
		} {
			name := []string{"ester", "acid"}[i]
			y := over(t, f)
			c.Lines = append(c.Lines, diagram.TimeLine{Name: name, Text: fmt.Sprintf("%.4f", y[100]), T: t, Y: y,
				Low: over(t, func(t float64) float64 { return f(t * 0.85) }), High: over(t, func(t float64) float64 { return f(t * 1.15) })})
			if i == 0 {
				l := &c.Lines[0]
				l.Low, l.High = l.High, l.Low
			}
			for m := 0.0; m < 9; m++ {
				at := 600 * (m + 0.5)
				v := f(at) + 0.0012*math.Sin(9*m+4*float64(i))
				c.Points = append(c.Points, diagram.TimePoint{Line: name, T: at, Y: v, Low: ref(v - 0.0015), High: ref(v + 0.0015)})
			}
		}
		return c
	}()},
	{"time_doses", func() scener {
		t := []float64{}
		y := []float64{}
		c := diagram.TimeCourse{ID: "time-doses", Title: "Slow addition in portions", Unit: "mol/L", LogY: true,
			Programme: []diagram.TimeNode{{T: 0, Value: 0}, {T: 120 * 60, Value: 0}, {T: 120 * 60, Value: 25}, {T: 200 * 60, Value: 25}}}
		level := 0.0
		for i := range 200 {
			at := float64(i) * 60
			t, y = append(t, at), append(y, level)
			if i%8 == 0 && i < 112 {
				level += 0.02
				t, y = append(t, at), append(y, level)
				c.Events = append(c.Events, diagram.TimeMark{T: at, Text: "0.02 mol/L of ArBr"})
			}
			level *= math.Exp(-60 * 1.8e-3)
		}
		c.Events = append(c.Events, diagram.TimeMark{T: 120 * 60, Text: "bath away"})
		c.Lines = []diagram.TimeLine{{Label: "ArBr", T: t, Y: y}}
		return c
	}()},
	{"time_wild", diagram.TimeCourse{ID: `t" onload="x`, Title: wild, Desc: wild, Axis: wild, Unit: wild, ProgrammeUnit: wild,
		Lines:     []diagram.TimeLine{{Name: wild, Text: wild, T: []float64{0, 1}, Y: []float64{0, 1}}, {Name: wild + "2", T: []float64{0, 1}, Y: []float64{1, 0}}},
		Programme: []diagram.TimeNode{{T: 0, Value: 1, Text: wild}, {T: 1, Value: 2, Text: wild}},
		Events:    []diagram.TimeMark{{T: 0.5, Text: wild}}, Width: 480}},
}
