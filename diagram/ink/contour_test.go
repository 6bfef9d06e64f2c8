package ink

import (
	"bytes"
	"fmt"
	"math"
	"testing"

	"saddlebook/diagram"
)

// mapGrid gives n temperatures by k times and a value at each.
func mapGrid(m diagram.ContourMap, f func(temp, t float64) float64) diagram.ContourMap {
	m.Values = mapMeasure(m, f)
	return m
}

func mapMeasure(m diagram.ContourMap, f func(temp, t float64) float64) [][]float64 {
	out := make([][]float64, len(m.Temps))
	for i, temp := range m.Temps {
		for _, t := range m.Times {
			out[i] = append(out[i], f(temp, t))
		}
	}
	return out
}

func even(n int, from, to float64) []float64 {
	out := make([]float64, n)
	for i := range out {
		out[i] = from + (to-from)*float64(i)/float64(n-1)
	}
	return out
}

func evenLog(n int, from, to float64) []float64 {
	out := even(n, math.Log(from), math.Log(to))
	for i := range out {
		out[i] = math.Exp(out[i])
	}
	return out
}

// opposing is an invented pair of products: one forms faster, the other is more
// stable, and they turn into each other by way of the reactant. All in kJ/mol.
func opposing(temp, t float64) (ratio, control float64) {
	rt := 8.314e-3 * (temp + 273.15)
	k := func(barrier float64) float64 { return 2.0836619e10 * (temp + 273.15) * math.Exp(-barrier/rt) }
	kinetic, equilibrium := k(72)/k(76), math.Exp(-9/rt)
	turned := 1 - math.Exp(-k(91)*t)
	a0, a1 := kinetic/(1+kinetic), equilibrium/(1+equilibrium)
	a := a0 + (a1-a0)*turned
	return a / (1 - a), turned
}

func ratioMap(n int, width float64) diagram.ContourMap {
	m := diagram.ContourMap{
		ID: fmt.Sprint("map-", n, "-", width), Axis: "1,2-adduct : 1,4-adduct", Ratio: true, LogValues: true, Log: true, Width: width,
		Times: evenLog(n, 60, 7*86400), Temps: even(n, -40, 80),
		Levels: []diagram.MapLevel{{Value: 5}, {Value: 2}, {Value: 1}, {Value: 0.5}, {Value: 0.1}, {Value: 100}},
		Runs:   []diagram.MapPoint{{Name: "cold", T: 7200, Temp: -30}, {Name: "overnight", T: 16 * hour, Temp: 22}, {Name: "reflux", T: 5 * hour, Temp: 66}},
	}
	m = mapGrid(m, func(temp, t float64) float64 { r, _ := opposing(temp, t); return r })
	m.Regions = []diagram.MapRegion{
		{Name: "kinetic control", Border: true, Measure: mapMeasure(m, func(temp, t float64) float64 { _, c := opposing(temp, t); return 0.5 - c })},
		{Name: "thermodynamic control", Measure: mapMeasure(m, func(temp, t float64) float64 { _, c := opposing(temp, t); return c - 0.5 })},
	}
	return m
}

var contourMaps = []golden{
	{"map_ratio", ratioMap(60, 0)},
	{"map_ratio_column", ratioMap(60, 340)},
	{"map_yield_window", func() scener {
		m := diagram.ContourMap{ID: "map-yield", Axis: "yield of 1,2-adduct", Share: true, Times: even(40, 0, 6*hour), Temps: even(40, -60, 30), Nothing: "equilibrium is not reachable",
			Levels: []diagram.MapLevel{{Value: 0.5}, {Value: 0.8}, {Value: 0.9}, {Value: 0.95}},
			Runs:   []diagram.MapPoint{{Name: "first try", T: 2 * hour, Temp: 0}, {Name: "held too long", T: 5.6 * hour, Temp: 18}}}
		yield := func(temp, t float64) float64 {
			rt := 8.314e-3 * (temp + 273.15)
			k := func(barrier float64) float64 { return 2.0836619e10 * (temp + 273.15) * math.Exp(-barrier/rt) }
			a, b := k(74), k(88)
			return a / (a - b) * (math.Exp(-b*t) - math.Exp(-a*t))
		}
		m = mapGrid(m, func(temp, t float64) float64 {
			if temp > 20 && t < 2*hour {
				return math.NaN()
			}
			return yield(temp, t)
		})
		m.Feasible = &diagram.MapRegion{Name: "all wishes hold", Measure: mapMeasure(m, func(temp, t float64) float64 { return math.Min(yield(temp, t)-0.93, (5*hour-t)/hour/40) })}
		m.Best = &diagram.MapPoint{Name: "most room", T: 2.6 * hour, Temp: -26}
		return m
	}()},
	{"map_coarse", func() scener {
		m := diagram.ContourMap{ID: "map-coarse", Title: "A saddle on nine points by nine", Axis: "ee", Unit: "%", Times: even(9, 0, 80), Temps: even(9, 0, 40),
			Levels: []diagram.MapLevel{{Value: -20}, {Value: 0}, {Value: 20}, {Value: 40}}}
		return mapGrid(m, func(temp, t float64) float64 { return (temp - 20) * (t - 40) / 10 })
	}()},
	{"map_wild", func() scener {
		m := diagram.ContourMap{ID: `m" onload="x`, Title: wild, Desc: wild, Axis: wild, Unit: wild, TempAxis: wild, TempUnit: wild, Nothing: wild, Times: even(5, 0, 10), Temps: even(5, 0, 10), Width: 480,
			Levels: []diagram.MapLevel{{Value: 5, Text: wild}}, Runs: []diagram.MapPoint{{Name: wild, T: 5, Temp: 4}}, Best: &diagram.MapPoint{Name: wild, T: 20, Temp: 3}}
		m = mapGrid(m, func(temp, t float64) float64 {
			if temp > 8 && t > 8 {
				return math.NaN()
			}
			return temp + t
		})
		m.Regions = []diagram.MapRegion{{Name: wild, Measure: m.Values}}
		m.Feasible = &m.Regions[0]
		return m
	}()},
}

func init() { figures = append(figures, contourMaps...) }

// TestShades: the published colours are among the shades, lightness rises from
// each to the next, and what is written on a shade has a contrast of 4.5:1 or more
// (WCAG 2.1, 1.4.3).
func TestShades(t *testing.T) {
	for i, c := range cividis {
		if got := shadeColour(i * (diagram.MapShades - 1) / 8); got != c {
			t.Errorf("shade of %s is %s", c, got)
		}
	}
	was := 100.0
	for k := range diagram.MapShades {
		c := shadeColour(k)
		now := contrast(t, c, "#ffffff")
		if !(now < was) {
			t.Errorf("shade %d, %s, is no lighter than the one before", k, c)
		}
		was = now
		white, black := now, contrast(t, c, "#000000")
		if math.Max(white, black) < 4.5 {
			t.Errorf("neither black nor white reads on %s: %.2f and %.2f", c, black, white)
		}
		text := "#ffffff"
		if k >= diagram.FirstLightShade {
			text = "#000000"
		}
		if got := contrast(t, c, text); got < 4.5 {
			t.Errorf("%s on %s has a contrast of %.2f", text, c, got)
		}
	}
}

// TestMapBytes: 60 by 60 values stay small.
func TestMapBytes(t *testing.T) {
	rough := diagram.ContourMap{ID: "rough", Times: even(60, 0, 1e4), Temps: even(60, 0, 100), Levels: []diagram.MapLevel{{Value: -1}, {Value: 0}, {Value: 1}}}
	rough = mapGrid(rough, func(temp, t float64) float64 { return math.Sin(temp/7)*math.Cos(t/800) + math.Sin(t/500+temp/11) })
	for _, m := range []diagram.ContourMap{ratioMap(60, 0), ratioMap(60, 340), rough} {
		s, err := m.Scene()
		if err != nil {
			t.Fatal(err)
		}
		var b bytes.Buffer
		if err := Inline(&b, s); err != nil {
			t.Fatal(err)
		}
		t.Logf("%s: %d bytes", m.ID, b.Len())
		if b.Len() > 120_000 {
			t.Errorf("%s has %d bytes, want 120000 at most", m.ID, b.Len())
		}
	}
}

// BenchmarkMap lays out and writes a map of 60 by 60 values; beside it, for the
// ratios, the same scene is written alone, and its bytes are copied.
func BenchmarkMap(b *testing.B) {
	m := ratioMap(60, 0)
	var out bytes.Buffer
	draw := func() {
		s, err := m.Scene()
		if err == nil {
			out.Reset()
			err = Inline(&out, s)
		}
		if err != nil {
			b.Fatal(err)
		}
	}
	b.Run("draw=map", func(b *testing.B) {
		b.ReportAllocs()
		for b.Loop() {
			draw()
		}
	})
	draw()
	b.Run("draw=written", func(b *testing.B) {
		s, err := m.Scene()
		if err != nil {
			b.Fatal(err)
		}
		var again bytes.Buffer
		for b.Loop() {
			again.Reset()
			if err := Inline(&again, s); err != nil {
				b.Fatal(err)
			}
		}
	})
	b.Run("draw=bytes", func(b *testing.B) {
		b.SetBytes(int64(out.Len()))
		var copied bytes.Buffer
		for b.Loop() {
			copied.Reset()
			copied.Write(out.Bytes())
		}
	})
}
