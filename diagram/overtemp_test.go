package diagram

import (
	"fmt"
	"math"
	"math/rand/v2"
	"reflect"
	"strings"
	"testing"
)

// twoOver is a pair of lines that cross at 20 °C.
func twoOver() OverTemperature {
	temps := []float64{0, 10, 30, 40}
	return OverTemperature{ID: "o", Share: true, Lines: []TempLine{
		{Name: "A", Temps: temps, Y: []float64{0.9, 0.7, 0.3, 0.1}}, {Name: "B", Temps: temps, Y: []float64{0.1, 0.3, 0.7, 0.9}}},
		Cross: []TempCross{{A: "A", B: "B", Text: "as much A as B"}}}
}

func TestOverTemperatureRefuses(t *testing.T) {
	one, nan := 1.0, math.NaN()
	for _, tt := range []struct {
		change func(*OverTemperature)
		msg    string
	}{
		{func(o *OverTemperature) { o.Lines = nil }, "without a line"},
		{func(o *OverTemperature) { o.Lines = make([]TempLine, 13) }, "13 lines"},
		{func(o *OverTemperature) { o.Width = 10 }, "10 wide"},
		{func(o *OverTemperature) { o.Lines[1].Name = "" }, "line 2 of the figure"},
		{func(o *OverTemperature) { o.Lines[1].Name = "A" }, `the name "A"`},
		{func(o *OverTemperature) { o.Lines[0].Y = nil }, `"A" has 4 temperatures and 0 values`},
		{func(o *OverTemperature) { o.Lines[0].Low = []float64{1} }, "band of 1 and 0"},
		{func(o *OverTemperature) { o.Lines[0].Temps = []float64{0, 10, 5, 40} }, "5 behind 10"},
		{func(o *OverTemperature) { o.Lines[0].Temps = []float64{0, 10, nan, 40} }, "temperature NaN"},
		{func(o *OverTemperature) { o.Lines[0].Y[0] = math.Inf(1) }, "value +Inf"},
		{func(o *OverTemperature) { o.Lines[0].Y = []float64{nan, nan, nan, nan} }, "no value at any temperature"},
		{func(o *OverTemperature) { o.Lines[0].Low, o.Lines[0].High = o.Lines[0].Y, make([]float64, 4) }, "band from 0.9 to 0"},
		{func(o *OverTemperature) { o.Points = []TempPoint{{Line: "C"}} }, `point of "C"`},
		{func(o *OverTemperature) { o.Points = []TempPoint{{Temp: nan}} }, "at NaN °C"},
		{func(o *OverTemperature) { o.Points = []TempPoint{{Low: &one}} }, "one end"},
		{func(o *OverTemperature) { o.Marks = []TempMark{{Temp: 3}} }, "has no text"},
		{func(o *OverTemperature) { o.Marks = []TempMark{{Temp: nan, Text: "bath"}} }, `"bath" stands at NaN`},
		{func(o *OverTemperature) { o.Cross = []TempCross{{A: "C"}} }, `crossing of "C"`},
		{func(o *OverTemperature) { o.Cross = []TempCross{{A: "A", B: "C"}} }, `crossing with "C"`},
		{func(o *OverTemperature) { o.Cross, o.LogY = []TempCross{{A: "A"}}, true }, "with the value 0"},
		{func(o *OverTemperature) {
			o.Lines = []TempLine{{Name: "A", Temps: []float64{5}, Y: []float64{1}}}
			o.Cross = nil
		}, "from 5 °C to 5 °C"},
	} {
		o := twoOver()
		tt.change(&o)
		_, err := o.Scene()
		refuses(t, err, tt.msg)
	}
}

// TestCrossing: the line stands where the values are equal, on a logarithmic axis
// where their logarithms are.
func TestCrossing(t *testing.T) {
	s, err := twoOver().Scene()
	if err != nil {
		t.Fatal(err)
	}
	if want := "A: 90.0 % at 0 °C, 10.0 % at 40 °C. B: 10.0 % at 0 °C, 90.0 % at 40 °C. Crossing: as much A as B at 20 °C, 50.0 %."; strings.ReplaceAll(s.Desc, "\u00a0", " ") != want {
		t.Errorf("description %q, want %q", s.Desc, want)
	}
	if want := "Share of A: 90.0 % at 0 °C, 10.0 % at 40 °C"; strings.ReplaceAll(s.Title, "\u00a0", " ") != want {
		t.Errorf("title %q, want %q", s.Title, want)
	}
	o := OverTemperature{ID: "o", LogY: true, Lines: []TempLine{{Name: "A", Temps: []float64{0, 30}, Y: []float64{0.01, 10}}}, Cross: []TempCross{{A: "A", At: 1}}}
	l := overLayout{o: o}
	if l.findCrossings(); len(l.crossings) != 1 || math.Abs(l.crossings[0].temp-20) > 1e-9 || math.Abs(l.crossings[0].y-1) > 1e-9 {
		t.Errorf("crossings %v, want one at 20", l.crossings)
	}
	// Lines that touch in a given point cross there once.
	o.LogY, o.Lines[0] = false, TempLine{Name: "A", Temps: []float64{0, 10, 20}, Y: []float64{-1, 0, 1}}
	l = overLayout{o: o}
	l.o.Cross[0].At = 0
	if l.findCrossings(); len(l.crossings) != 1 || l.crossings[0].temp != 10 {
		t.Errorf("crossings %v, want one at 10", l.crossings)
	}
}

func randomOver(r *rand.Rand) OverTemperature {
	low := float64(r.IntN(200) - 100)
	span := []float64{0.4, 25, 100, 300}[r.IntN(4)]
	o := OverTemperature{ID: "o", Share: r.IntN(2) == 0, Width: float64(240 + 60*r.IntN(12))}
	o.LogY = !o.Share && r.IntN(2) == 0
	n := 2 + r.IntN(60)
	temps := make([]float64, n)
	for i := range temps {
		temps[i] = low + span*float64(i)/float64(n-1)
	}
	for i := range 1 + r.IntN(12) {
		a, b := 3*r.NormFloat64(), 6*r.NormFloat64()
		l := TempLine{Name: fmt.Sprint(someNames[r.IntN(len(someNames))], " ", i), Temps: temps, Emphasis: r.IntN(5) == 0}
		for k := range temps {
			y := 1 / (1 + math.Exp(-a-b*(float64(k)/float64(n-1)-0.5)))
			if !o.Share {
				y = math.Exp(a + b*float64(k)/float64(n-1))
			}
			l.Y = append(l.Y, y)
		}
		if r.IntN(3) == 0 {
			for _, y := range l.Y {
				l.Low, l.High = append(l.Low, 0.8*y), append(l.High, 1.15*y)
			}
		}
		o.Lines = append(o.Lines, l)
	}
	for range r.IntN(4) {
		o.Marks = append(o.Marks, TempMark{low + span*r.Float64(), someNames[r.IntN(len(someNames))]})
	}
	if k := len(o.Lines); k > 1 {
		o.Cross = append(o.Cross, TempCross{A: o.Lines[0].Name, B: o.Lines[1].Name, Text: "equal"}, TempCross{A: o.Lines[k-1].Name, At: 0.5})
	}
	return o
}

// TestRandomOverTemperature: no text covers another, a line or a vertical line,
// none leaves the frame.
func TestRandomOverTemperature(t *testing.T) {
	crossings := 0
	for seed := range 400 {
		o := randomOver(rand.New(rand.NewPCG(uint64(seed), 23)))
		name := fmt.Sprint("seed ", seed)
		s, err := o.Scene()
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		if err := s.Check(); err != nil {
			t.Errorf("%s: %v", name, err)
		}
		if again, _ := o.Scene(); !reflect.DeepEqual(s, again) {
			t.Errorf("%s: two layouts differ", name)
		}
		crossings += strings.Count(s.Desc, "Crossing: ")
		boxes, words := spacious(t, name, s)
		for i, a := range boxes {
			for _, m := range s.Marks {
				switch m := m.(type) {
				case Line:
					if (m.Role == "event" || m.Role == "leader" || m.Role == "whisker") && crosses(m, a.grown(1)) {
						t.Errorf("%s: %q %.5g is crossed by a %s", name, words[i], a, m.Role)
					}
				case Curve:
					if strings.HasPrefix(string(m.Role), "path") && covers(m.Path, a.grown(1)) {
						t.Errorf("%s: %q %.5g covers a line", name, words[i], a)
					}
				}
			}
		}
	}
	if crossings < 50 {
		t.Errorf("%d crossings in all: the test sees too few", crossings)
	}
}
