package diagram

import (
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"sort"
	"strings"
	"testing"

	"saddlebook/diagram/lettering"
)

func TestTimeCourseRefuses(t *testing.T) {
	one := 1.0
	two := []float64{0, 1}
	line := TimeLine{Name: "A", T: two, Y: two}
	with := func(change func(*TimeCourse)) TimeCourse {
		c := TimeCourse{ID: "c", Lines: []TimeLine{line}}
		change(&c)
		return c
	}
	for _, tt := range []struct {
		course TimeCourse
		msg    string
	}{
		{TimeCourse{}, "without a line"},
		{TimeCourse{Lines: make([]TimeLine, 13)}, "13 lines"},
		{with(func(c *TimeCourse) { c.Width = 100 }), "100 wide"},
		{with(func(c *TimeCourse) { c.From = math.NaN() }), "from NaN s"},
		{with(func(c *TimeCourse) { c.From = 5 }), "from 5 s to 1 s"},
		{with(func(c *TimeCourse) { c.Lines = append(c.Lines, TimeLine{T: two, Y: two}) }), "line 2 of the time course has no name"},
		{with(func(c *TimeCourse) { c.Lines = append(c.Lines, line) }), `have the name "A"`},
		{with(func(c *TimeCourse) { c.Lines[0].Y = two[:1] }), `"A" has 2 times and 1 values`},
		{with(func(c *TimeCourse) { c.Lines[0].Low = two }), "band of 2 and 0"},
		{with(func(c *TimeCourse) { c.Lines[0].Low, c.Lines[0].High = two, []float64{1, 0} }), "band from 1 to 0"},
		{with(func(c *TimeCourse) { c.Lines[0].T = []float64{1, 0} }), "0 s behind 1 s"},
		{with(func(c *TimeCourse) { c.Lines[0].T = []float64{-1, 0} }), "time -1 s"},
		{with(func(c *TimeCourse) { c.Lines[0].Y = []float64{0, math.Inf(1)} }), "value +Inf"},
		{with(func(c *TimeCourse) { c.Lines[0].Y = []float64{math.NaN(), math.NaN()} }), "no value at any time"},
		{with(func(c *TimeCourse) { c.Lines[0].Y, c.LogY = []float64{0, -1}, true }), "none is above 0"},
		{with(func(c *TimeCourse) { c.Points = []TimePoint{{Line: "B", T: 1}} }), `point of "B"`},
		{with(func(c *TimeCourse) { c.Points = []TimePoint{{T: math.NaN()}} }), "at NaN s"},
		{with(func(c *TimeCourse) { c.Points = []TimePoint{{Low: &one}} }), "one end"},
		{with(func(c *TimeCourse) { z := 0.0; c.Points = []TimePoint{{Low: &one, High: &z}} }), "error bar from 1 to 0"},
		{with(func(c *TimeCourse) { c.Programme = []TimeNode{{T: 1}, {T: 0}} }), "time 0 s behind 1 s"},
		{with(func(c *TimeCourse) { c.Programme = []TimeNode{{Value: math.NaN()}} }), "programme has NaN"},
		{with(func(c *TimeCourse) { c.Events = []TimeMark{{T: -2, Text: "dose"}} }), `"dose" has the time -2 s`},
		{with(func(c *TimeCourse) { c.Events = []TimeMark{{T: 2}} }), "has no text"},
	} {
		_, err := tt.course.Scene()
		var e *Error
		if !errors.As(err, &e) || !strings.Contains(e.Msg, tt.msg) || e.Fix == "" {
			t.Errorf("error %v, want one with %q and a remedy", err, tt.msg)
		}
	}
}

// TestColumnWidth: at the width of a journal column (84 mm, common practice) no
// text is smaller than 7 pt, if the figure is laid out up to 400 wide.
func TestColumnWidth(t *testing.T) {
	for _, width := range []float64{240, 340, 400} {
		c := randomCourse(rand.New(rand.NewPCG(11, 3)))
		c.Width = width
		s, err := c.Scene()
		if err != nil {
			t.Fatal(err)
		}
		var look func([]Mark)
		look = func(marks []Mark) {
			for _, m := range marks {
				switch m := m.(type) {
				case Group:
					look(m.Marks)
				case Words:
					if pt := m.Size * 84 / 25.4 * 72 / s.Width; pt < 7 {
						t.Errorf("%q has %.1f pt in a figure %g wide", lettering.Text(m.Runs), pt, s.Width)
					}
				}
			}
		}
		look(s.Marks)
	}
}

// TestLogAxes: on logarithmic axes equal ratios are equal ways, and what lies
// below the values shown ends at the time axis.
func TestLogAxes(t *testing.T) {
	c := TimeCourse{ID: "c", Log: true, LogY: true, Lines: []TimeLine{{Name: "A", T: []float64{0, 1, 10, 100, 1000}, Y: []float64{0, 1, 0.1, 0.01, 0.1}}}}
	s, err := c.Scene()
	if err != nil {
		t.Fatal(err)
	}
	for _, m := range s.Marks {
		if m, ok := m.(Curve); ok {
			p := m.Path
			if len(p) != 3 { // the line is straight from 1 to 0.01
				t.Fatalf("points %v", p)
			}
			if w, h := (p[1].X-p[0].X)/2, (p[1].Y-p[0].Y)/2; math.Abs(p[2].X-p[1].X-w) > 1e-9 || math.Abs(p[1].Y-p[2].Y-h) > 1e-9 {
				t.Errorf("a decade is %g by %g, then %g by %g", w, h, p[2].X-p[1].X, p[1].Y-p[2].Y)
			}
		}
	}
	c.Lines[0].Y = []float64{0, 0, 1, 0, 1e-12}
	s, err = c.Scene()
	if err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(s.Desc, "Values below 1.00\u00a0×\u00a010⁻⁸ are not shown.") {
		t.Errorf("description %q does not say what is cut off", s.Desc)
	}
}

// TestThin: no point of a line moves by half a unit, ends, highest and lowest
// points stay, and a line that only falls or rises does so still.
func TestThin(t *testing.T) {
	before, after := 0, 0
	for seed := range 300 {
		r := rand.New(rand.NewPCG(uint64(seed), 5))
		line := make([]spot, 1+r.IntN(3000))
		falls := seed%3 == 0
		x, y := 0.0, 100*r.Float64()
		for i := range line {
			x += r.ExpFloat64() * 500 / float64(len(line))
			if r.IntN(20) == 0 {
				y += 40 * r.NormFloat64() // a jump
			}
			y += 0.5 * r.NormFloat64()
			line[i] = spot{x, y}
			if falls {
				line[i].y = 300 - 300*math.Exp(-x/80)
			}
		}
		got := thin(line)
		before, after = before+len(line), after+len(got)
		at, low, high := 0, line[0].y, line[0].y
		glow, ghigh := got[0].y, got[0].y
		for _, p := range got {
			glow, ghigh = math.Min(glow, p.y), math.Max(ghigh, p.y)
		}
		for _, p := range line {
			low, high = math.Min(low, p.y), math.Max(high, p.y)
			for at+1 < len(got)-1 && got[at+1].x < p.x-1 {
				at++
			}
			d := math.Inf(1)
			for k := at; k < len(got) && got[max(k-1, 0)].x <= p.x+1; k++ {
				d = math.Min(d, apart(p, got[max(k-1, 0)], got[k]))
			}
			if !(d < 0.5) {
				t.Fatalf("seed %d: %v is %g off the thinned line", seed, p, d)
			}
		}
		if glow != low || ghigh != high || got[0] != line[0] || got[len(got)-1] != line[len(line)-1] {
			t.Errorf("seed %d: lowest %g, highest %g, want %g and %g, and the ends", seed, glow, ghigh, low, high)
		}
		for i := 1; i < len(got); i++ {
			if falls && got[i].y < got[i-1].y || got[i].x < got[i-1].x {
				t.Errorf("seed %d: the thinned line turns", seed)
			}
		}
	}
	t.Logf("%d points thinned to %d", before, after)
}

// TestHighestPointIsDrawn: the peak of a line, however narrow, is in the scene at
// its place.
func TestHighestPointIsDrawn(t *testing.T) {
	l := TimeLine{Name: "I"}
	for i := range 20001 {
		y := 0.001
		if i == 7003 {
			y = 1
		}
		l.T, l.Y = append(l.T, float64(i)), append(l.Y, y)
	}
	s, err := TimeCourse{ID: "c", Lines: []TimeLine{l}}.Scene()
	if err != nil {
		t.Fatal(err)
	}
	var frame, peak Rect
	points := 0
	for _, m := range s.Marks {
		switch m := m.(type) {
		case Line:
			if m.Role == "axis" {
				frame = frame.join(m.Bounds())
				if m.X1 == m.X2 {
					frame = m.Bounds()
				}
			}
		case Curve:
			points += len(m.Path)
			for _, c := range m.Path {
				if peak.Y0 == 0 || c.Y < peak.Y0 {
					peak = Rect{c.X, c.Y, c.X, c.Y}
				}
			}
		}
	}
	want := frame.X0 + (frame.X1-frame.X0)*7003/20000
	if math.Abs(peak.X0-want) > 1e-6 || math.Abs(peak.Y0-frame.Y0) > 1e-6 {
		t.Errorf("the peak stands at %v, want %g, %g", peak, want, frame.Y0)
	}
	if points > 10 {
		t.Errorf("%d points for a line with one peak", points)
	}
}

// TestSpreadOut compares with all solutions on a grid: none within the bounds has
// a smaller sum of squares.
func TestSpreadOut(t *testing.T) {
	for seed := range 60 {
		r := rand.New(rand.NewPCG(uint64(seed), 6))
		n := 1 + r.IntN(3)
		wish, size := make([]float64, n), make([]float64, n)
		for i := range wish {
			wish[i], size[i] = float64(r.IntN(40)), float64(2+r.IntN(6))
		}
		sort.Float64s(wish)
		const gap, low, high = 2.0, 0.0, 40.0
		got := spreadOut(wish, size, gap, low, high)
		cost := func(y []float64) float64 {
			sum := 0.0
			for i := range y {
				sum += (y[i] - wish[i]) * (y[i] - wish[i])
				if y[i] < low-1e-9 || y[i]+size[i] > high+1e-9 || i > 0 && y[i] < y[i-1]+size[i-1]+gap-1e-9 {
					return math.Inf(1)
				}
			}
			return sum
		}
		best := math.Inf(1)
		var try func([]float64)
		try = func(y []float64) {
			if len(y) == n {
				best = math.Min(best, cost(y))
				return
			}
			for k := 0.0; k <= 40; k++ {
				try(append(y[:len(y):len(y)], k))
			}
		}
		try(nil)
		if c := cost(got); !(c <= best+1e-9) {
			t.Errorf("seed %d: wishes %v of %v at %v cost %g, a grid finds %g", seed, wish, size, got, c, best)
		}
	}
}

func TestTimeCourseWords(t *testing.T) {
	s, err := TimeCourse{ID: "c", Unit: "mol/L", Lines: []TimeLine{{Name: "A", T: []float64{0, 1800, 7200}, Y: []float64{0, 0.144, 0.02}}},
		Programme: []TimeNode{{T: 0, Value: -78}, {T: 7200, Value: -78}}, Events: []TimeMark{{T: 60, Text: "dose"}}}.Scene()
	if err != nil {
		t.Fatal(err)
	}
	plain := func(s string) string { return strings.ReplaceAll(s, "\u00a0", " ") }
	if got, want := plain(s.Title), "Concentration over 2.0 h"; got != want {
		t.Errorf("title %q, want %q", got, want)
	}
	want := "A: 0 mol/L at 0 s, 0.0200 mol/L at 2.0 h, highest 0.144 mol/L at 30 min. Temperature: −78 °C at 0 s, −78 °C at 2.0 h. Events: dose at 1.0 min."
	if got := plain(s.Desc); got != want {
		t.Errorf("description %q, want %q", got, want)
	}
}

func BenchmarkTimeCourse(b *testing.B) {
	var c TimeCourse
	c.ID = "c"
	for i := range 12 {
		l := TimeLine{Name: fmt.Sprint(i)}
		for k := range 2001 {
			t := float64(k) / 2000
			l.T, l.Y = append(l.T, 3600*t), append(l.Y, math.Exp(-float64(i)*t)*math.Cos(3*t*float64(i)))
		}
		c.Lines = append(c.Lines, l)
	}
	b.ReportAllocs()
	for b.Loop() {
		if _, err := c.Scene(); err != nil {
			b.Fatal(err)
		}
	}
}
