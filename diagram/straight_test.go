package diagram

import (
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"reflect"
	"strings"
	"testing"
)

// fivePoints lie on ln(k/T) = 14 - 10·1000 K/T, the last 0.3 above.
func fivePoints() StraightPlot {
	p := StraightPlot{ID: "p", Slope: -10, Intercept: 14, Facts: []string{"ΔH‡ = 83.1 kJ/mol"}}
	for i := range 5 {
		t := 280 + 10*float64(i)
		p.Points = append(p.Points, StraightPoint{T: t, Y: 14 - 1e4/t})
	}
	p.Points[4].Y += 0.3
	p.Points[4].Name, p.Points[4].Outlier = "run 5", true
	return p
}

func TestStraightPlotRefuses(t *testing.T) {
	one, two := 1.0, 2.0
	for _, tt := range []struct {
		change func(*StraightPlot)
		msg    string
	}{
		{func(p *StraightPlot) { p.Width = 200 }, "200 wide"},
		{func(p *StraightPlot) { p.Slope = math.NaN() }, "slope NaN"},
		{func(p *StraightPlot) { p.Points = nil }, "0 points"},
		{func(p *StraightPlot) { p.Points = p.Points[:1] }, "1 points at one temperature"},
		{func(p *StraightPlot) { p.Points = make([]StraightPoint, 1001) }, "1001 points"},
		{func(p *StraightPlot) { p.Points[1].T = 0 }, "point 2 of an eyring plot stands at 0 K"},
		{func(p *StraightPlot) { p.Points[1].Y, p.Arrhenius = math.Inf(-1), true }, "point 2 of an arrhenius plot has the value -Inf"},
		{func(p *StraightPlot) { p.Points[1].Low = &one }, "one end"},
		{func(p *StraightPlot) { p.Points[1].Low, p.Points[1].High = &two, &one }, "from 2 to 1"},
		{func(p *StraightPlot) { p.Band = []StraightBand{{T: 300, Low: 1}} }, "band of an eyring plot goes from 1 to 0"},
		{func(p *StraightPlot) {
			p.Points = nil
			for i := range 17 {
				p.Points = append(p.Points, StraightPoint{Name: "x", T: 300 + float64(i), Excluded: true})
			}
		}, "17 named points"},
	} {
		p := fivePoints()
		tt.change(&p)
		_, err := p.Scene()
		refuses(t, err, tt.msg)
	}
}

func TestStraightPlotWords(t *testing.T) {
	p := fivePoints()
	p.Points[0].Excluded = true
	s, err := p.Scene()
	if err != nil {
		t.Fatal(err)
	}
	if want := "Eyring plot: ΔH‡ = 83.1 kJ/mol"; s.Title != want {
		t.Errorf("title %q, want %q", s.Title, want)
	}
	want := "The line goes from ln(k/T) = −21.71 at 6.9 °C to −17.25 at 46.9 °C, a slope of −10000 K. ΔH‡ = 83.1 kJ/mol. " +
		"4 points used, the largest residual 0.30 at 46.9 °C. Outliers: run 5. Not used: point 1."
	if got := strings.ReplaceAll(s.Desc, "\u00a0", " "); got != want {
		t.Errorf("description\n%q, want\n%q", got, want)
	}
}

// TestStraightPlaces: points on the line are drawn on it, at the zero of the strip,
// and the axis of °C agrees with that of 1000 K/T.
func TestStraightPlaces(t *testing.T) {
	s, err := fivePoints().Scene()
	if err != nil {
		t.Fatal(err)
	}
	var dots []Dot
	var line []spot
	zero := 0.0
	ticks := map[float64][2]float64{}
	for i, m := range s.Marks {
		switch m := m.(type) {
		case Dot:
			if m.Role != "meet" {
				dots = append(dots, m)
			}
		case Curve:
			if m.Role == "path path-1" {
				line = []spot{{m.Path[0].X, m.Path[0].Y}, {m.Path[1].X, m.Path[1].Y}}
			}
		case Line:
			if m.Role == "zero" {
				zero = m.Y1
			}
			if m.Role == "tick" && m.X1 == m.X2 {
				if w, ok := s.Marks[i+1].(Words); ok {
					var v float64
					fmt.Sscan(w.Runs[0].Text, &v)
					ticks[v] = [2]float64{m.X1, m.Y1}
				}
			}
		}
	}
	if len(dots) != 10 || len(line) != 2 {
		t.Fatalf("%d dots, a line of %d", len(dots), len(line))
	}
	x := func(inv float64) float64 { // by the ticks of 1000 K/T
		a, b := ticks[3.2], ticks[3.4]
		return a[0] + (inv-3.2)/0.2*(b[0]-a[0])
	}
	for i := range 5 {
		plot, strip := dots[2*i], dots[2*i+1]
		on := line[0].y + (plot.X-line[0].x)/(line[1].x-line[0].x)*(line[1].y-line[0].y)
		if off := math.Abs(plot.Y - on); (off < 1e-6) != (i < 4) {
			t.Errorf("point %d stands %g off the line", i, off)
		}
		if off := math.Abs(strip.Y - zero); (off < 1e-6) != (i < 4) || strip.X != plot.X {
			t.Errorf("the residual of point %d stands %g off zero", i, off)
		}
		if want := x(1000 / (280 + 10*float64(i))); math.Abs(plot.X-want) > 1e-6 {
			t.Errorf("point %d at x %g, want %g", i, plot.X, want)
		}
	}
	if got, want := ticks[20][0], x(1000/293.15); math.Abs(got-want) > 1e-6 {
		t.Errorf("20 °C at %g, want %g", got, want)
	}
}

func randomStraight(r *rand.Rand) StraightPlot {
	low := 180 + 300*r.Float64()
	span := []float64{0.5, 15, 60, 300}[r.IntN(4)]
	p := StraightPlot{ID: "p", Arrhenius: r.IntN(2) == 0, Slope: -20 * r.Float64(), Intercept: 30 * r.Float64(), Width: float64(280 + 60*r.IntN(12))}
	noise := []float64{0, 0.02, 0.3, 3}[r.IntN(4)]
	named := 0
	for i := range 2 + r.IntN(40) {
		t := low + span*r.Float64()
		if i < 2 {
			t = low + span*float64(i)
		}
		q := StraightPoint{T: t, Y: p.line(t) + noise*r.NormFloat64()}
		if r.IntN(2) == 0 {
			a, b := q.Y-noise, q.Y+noise
			q.Low, q.High = &a, &b
		}
		if named < mostNamed && r.IntN(4) == 0 {
			named++
			q.Name, q.Outlier = someNames[r.IntN(len(someNames))], true
			if r.IntN(2) == 0 {
				q.Excluded, q.Y, q.Low, q.High = true, q.Y+20*noise*r.NormFloat64(), nil, nil
			}
		}
		p.Points = append(p.Points, q)
	}
	if r.IntN(2) == 0 {
		for i := range 20 {
			t := low + span*(1.4*float64(i)/19-0.2)
			half := noise * (0.3 + math.Abs(float64(i)-10)/10)
			p.Band = append(p.Band, StraightBand{t, p.line(t) - half, p.line(t) + half})
		}
		p.BandText = "95 % confidence"
	}
	for range r.IntN(5) {
		p.Facts = append(p.Facts, someNames[r.IntN(len(someNames))]+" = 85.2 ± 1.3 kJ/mol")
	}
	return p
}

// TestRandomStraightPlots: no text covers another, the line, a point or an error
// bar, none leaves the frame, and every name and fact stands somewhere.
func TestRandomStraightPlots(t *testing.T) {
	for seed := range 400 {
		p := randomStraight(rand.New(rand.NewPCG(uint64(seed), 24)))
		name := fmt.Sprint("seed ", seed)
		s, err := p.Scene()
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		if err := s.Check(); err != nil {
			t.Errorf("%s: %v", name, err)
		}
		if again, _ := p.Scene(); seed%10 == 0 && !reflect.DeepEqual(s, again) {
			t.Errorf("%s: two layouts differ", name)
		}
		boxes, words := spacious(t, name, s)
		for i, a := range boxes {
			for _, m := range s.Marks {
				switch m := m.(type) {
				case Line:
					if m.Role == "whisker" && crosses(m, a) || m.Role == "map-leader" && crosses(m, a.grown(-0.5)) {
						t.Errorf("%s: %q %.5g is crossed by a %s", name, words[i], a, m.Role)
					}
				case Dot:
					if m.Bounds().meets(a) {
						t.Errorf("%s: %q %.5g covers a point", name, words[i], a)
					}
				case Curve:
					if strings.HasPrefix(string(m.Role), "path") && covers(m.Path, a.grown(2)) {
						t.Errorf("%s: %q %.5g covers the line", name, words[i], a)
					}
				}
			}
		}
		all := strings.NewReplacer(" ", "", "\u00a0", "").Replace(strings.Join(words, " "))
		if n := strings.Count(all, "=85.2±1.3kJ/mol"); n != len(p.Facts) {
			t.Errorf("%s: %d facts shown of %d: %q", name, n, len(p.Facts), words)
		}
	}
}

// FuzzStraightPlot: whatever the numbers and texts, a plot is sound or refused with
// a remedy.
func FuzzStraightPlot(f *testing.F) {
	f.Add(uint64(1), 720.0, -10.0, 14.0, 300.0, "run 4")
	f.Add(uint64(2), 280.0, 0.0, 0.0, 1.0, "</text>")
	f.Add(uint64(3), 4000.0, 1e6, -1e6, 1e5, "")
	f.Add(uint64(4), 300.0, 5e-324, 1e-300, math.NaN(), " ")
	f.Fuzz(func(t *testing.T, seed uint64, width, slope, intercept, temp float64, text string) {
		p := randomStraight(rand.New(rand.NewPCG(seed, 9)))
		p.Width, p.Slope, p.Intercept, p.BandText = math.Min(width, 1200), slope, intercept, text
		p.Facts = append(p.Facts, text)
		p.Points[0] = StraightPoint{Name: text, T: temp, Y: intercept, Outlier: true}
		s, err := p.Scene()
		if err != nil {
			var e *Error
			if !errors.As(err, &e) || e.Fix == "" {
				t.Errorf("error %v without a remedy", err)
			}
			return
		}
		if err := s.Check(); err != nil {
			t.Error(err)
		}
	})
}
