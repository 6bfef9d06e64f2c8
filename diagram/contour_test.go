package diagram

import (
	"errors"
	"math"
	"strings"
	"testing"

	"saddlebook/diagram/lettering"
)

// refuses checks that a figure is refused with a message and a remedy.
func refuses(t *testing.T, err error, msg string) {
	t.Helper()
	var e *Error
	if !errors.As(err, &e) || !strings.Contains(e.Msg, msg) || e.Fix == "" {
		t.Errorf("error %v, want one with %q and a remedy", err, msg)
	}
}

// tilted is a map of the value temp + t, 0 to 20.
func tilted() ContourMap {
	m := ContourMap{ID: "m"}
	for i := range 11 {
		m.Times, m.Temps = append(m.Times, float64(i)), append(m.Temps, float64(i))
		m.Values = append(m.Values, make([]float64, 11))
		for k := range 11 {
			m.Values[i][k] = float64(i + k)
		}
	}
	return m
}

func TestContourMapRefuses(t *testing.T) {
	one, two := 1.0, 2.0
	for _, tt := range []struct {
		change func(*ContourMap)
		msg    string
	}{
		{func(m *ContourMap) { *m = ContourMap{} }, "0 temperatures and 0 times"},
		{func(m *ContourMap) { m.Width = 100 }, "100 wide"},
		{func(m *ContourMap) { m.Share, m.Ratio = true, true }, "both shares and ratios"},
		{func(m *ContourMap) { m.Times = make([]float64, 401) }, "401 times"},
		{func(m *ContourMap) { m.Values = m.Values[:3] }, "3 rows for 11"},
		{func(m *ContourMap) { m.Values[2] = nil }, "0 values in row 3 for 11"},
		{func(m *ContourMap) { m.Values[2][1] = math.Inf(1) }, "value +Inf"},
		{func(m *ContourMap) { m.Values[2][1], m.LogValues = -4, true }, "value -4 at 2 °C and 1 s on a logarithmic"},
		{func(m *ContourMap) {
			for i := range m.Values {
				for k := range m.Values[i] {
					m.Values[i][k] = math.NaN()
				}
			}
		}, "without a value"},
		{func(m *ContourMap) { m.Times[3] = 2 }, "time 2 s behind 2 s"},
		{func(m *ContourMap) { m.Times[0] = -1 }, "time -1 s"},
		{func(m *ContourMap) { m.Log = true }, "from 0 s"},
		{func(m *ContourMap) { m.Temps[3] = math.NaN() }, "temperature NaN"},
		{func(m *ContourMap) { m.Temps[3] = 1 }, "temperature 1 behind 2"},
		{func(m *ContourMap) { m.Low = &one }, "one end only"},
		{func(m *ContourMap) { m.Low, m.High = &two, &one }, "from 2 to 1"},
		{func(m *ContourMap) { m.Levels = make([]MapLevel, 13) }, "13 levels"},
		{func(m *ContourMap) { m.Levels = []MapLevel{{Value: math.NaN()}} }, "level 1 of the map is NaN"},
		{func(m *ContourMap) { m.Levels = []MapLevel{{Value: 2}, {Value: 2}} }, "two levels"},
		{func(m *ContourMap) { m.Runs = make([]MapPoint, 25) }, "25 runs"},
		{func(m *ContourMap) { m.Runs = []MapPoint{{Name: "cold", T: math.NaN()}} }, `"cold" stands at NaN s`},
		{func(m *ContourMap) { m.Best = &MapPoint{Name: "best", T: -1} }, `"best" stands at -1 s`},
		{func(m *ContourMap) { m.Regions = []MapRegion{{Measure: m.Values}} }, "region 1 of the map has no name"},
		{func(m *ContourMap) { m.Regions = []MapRegion{{Name: "kinetic"}} }, "region kinetic in 0 rows"},
		{func(m *ContourMap) {
			f := tilted().Values
			f[0][0] = math.Inf(1)
			m.Feasible = &MapRegion{Name: "wishes", Measure: f}
		}, `"wishes" has the measure +Inf`},
	} {
		m := tilted()
		tt.change(&m)
		_, err := m.Scene()
		refuses(t, err, tt.msg)
	}
}

// TestContourMapWords: the defaults tell the range, the share of the map at each
// level, runs with the value there, regions and what has no value.
func TestContourMapWords(t *testing.T) {
	m := tilted()
	m.Axis, m.Unit = "amount", "mmol"
	m.Levels = []MapLevel{{Value: 10}}
	m.Runs = []MapPoint{{"cold", 3, 2.5}, {"far", 30, 2}}
	m.Regions = []MapRegion{{Name: "upper", Measure: tilted().Values}}
	m.Values[0][10] = math.NaN()
	s, err := m.Scene()
	if err != nil {
		t.Fatal(err)
	}
	plain := func(s string) string { return strings.ReplaceAll(s, "\u00a0", " ") }
	if got, want := plain(s.Title), "Amount, 0 mmol to 20.0 mmol, over 0 to 10 °C and 0 s to 10 s"; got != want {
		t.Errorf("title %q, want %q", got, want)
	}
	// 65 of 121 points have a value of 10 or more, 120 a sum above 0.
	want := "Highest 20.0 mmol at 10 °C and 10 s, lowest 0 mmol at 0 °C and 0 s. Of the points computed: 10.0 mmol or more at 53.7 %. " +
		"Upper: 99.2 % of the points. Runs: cold at 2.5 °C and 3.0 s, 5.50 mmol; far at 2 °C and 30 s (outside the map). No value: 0.8 % of the points."
	if got := plain(s.Desc); got != want {
		t.Errorf("description\n%q, want\n%q", got, want)
	}
	_, words := texts(s.Marks)
	if all := plain(strings.Join(words, "|")); !strings.Contains(all, "outside the map: far at 2 °C and 30 s") {
		t.Errorf("a run outside the map is not said to be: %s", all)
	}
}

// TestRegionNames: a name stands where its region is, and one without a place is
// said to be nowhere.
func TestRegionNames(t *testing.T) {
	m := tilted()
	part := func(f func(x, y float64) float64) [][]float64 {
		out := make([][]float64, 11)
		for i := range out {
			for k := range 11 {
				out[i] = append(out[i], f(float64(k), float64(i)))
			}
		}
		return out
	}
	m.Regions = []MapRegion{
		{Name: "low corner", Measure: part(func(x, y float64) float64 { return 7 - x - y })},
		{Name: "high corner", Measure: part(func(x, y float64) float64 { return x + y - 13 })},
		{Name: "never", Measure: part(func(x, y float64) float64 { return -1 })},
	}
	s, err := m.Scene()
	if err != nil {
		t.Fatal(err)
	}
	boxes, words := texts(s.Marks)
	at := map[string]Rect{}
	for i, w := range words {
		at[strings.TrimSpace(w)] = boxes[i]
	}
	low, high := at["low corner"], at["high corner"]
	if low.X1 == 0 || high.X1 == 0 || low.X1 > s.Width/2 || high.X0 < s.Width/2 || low.Y0 < s.Height/2 || high.Y1 > s.Height/2 {
		t.Errorf("the names of the corners stand at %v and %v", low, high)
	}
	if _, ok := at["nowhere on this map: never"]; !ok {
		t.Errorf("no word of the region that is nowhere: %q", words)
	}
}

// TestRefined: the finer grid has the values of the coarse one, and none beyond
// those of the square around.
func TestRefined(t *testing.T) {
	f := field{xs: []float64{0, 30, 50, 100}, ys: []float64{90, 40, 0}, at: [][]float64{{0, 9, 1, 1}, {2, math.NaN(), 5, 8}, {3, 3, 3, 100}}}
	g := f.refined(4)
	if len(g.xs) != 1+8+5+10 || len(g.ys) != 1+10+10 {
		t.Fatalf("a grid of %d by %d", len(g.ys), len(g.xs))
	}
	for i, y := range f.ys {
		for k, x := range f.xs {
			for gi, gy := range g.ys {
				for gk, gx := range g.xs {
					if gx == x && gy == y && g.at[gi][gk] != f.at[i][k] && !math.IsNaN(f.at[i][k]) {
						t.Errorf("at %g, %g: %g, want %g", x, y, g.at[gi][gk], f.at[i][k])
					}
				}
			}
		}
	}
	for _, row := range g.at {
		for _, v := range row {
			if v < 0 || v > 100 {
				t.Errorf("a value of %g, beyond all", v)
			}
		}
	}
}

// smallest gives the size of the smallest type in points at 84 mm, the width of a
// journal column (common practice).
func smallest(s Scene) float64 {
	pt := math.Inf(1)
	var look func([]Mark)
	look = func(marks []Mark) {
		for _, m := range marks {
			switch m := m.(type) {
			case Group:
				look(m.Marks)
			case Words:
				if len(lettering.Text(m.Runs)) > 0 {
					pt = math.Min(pt, m.Size*84/25.4*72/s.Width)
				}
			}
		}
	}
	look(s.Marks)
	return pt
}

// TestColumnFigures: laid out up to 400 wide, no figure has type below 7 pt in a
// column.
func TestColumnFigures(t *testing.T) {
	for _, width := range []float64{280, 340, 400} {
		m, o, p := tilted(), twoOver(), fivePoints()
		m.Width, o.Width, p.Width = width, width, width
		m.Levels = []MapLevel{{Value: 10}}
		for _, f := range []interface{ Scene() (Scene, error) }{m, o, p} {
			s, err := f.Scene()
			if err != nil {
				t.Fatal(err)
			}
			if pt := smallest(s); pt < 7 {
				t.Errorf("%T at %g: type of %.1f pt", f, width, pt)
			}
		}
	}
}
