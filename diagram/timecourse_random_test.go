package diagram

import (
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"reflect"
	"sort"
	"strings"
	"testing"

	"saddlebook/diagram/lettering"
)

// randomCourse gives a time course that is legal, and hard to letter.
func randomCourse(r *rand.Rand) TimeCourse {
	end := math.Pow(10, 14*r.Float64()-4)
	c := TimeCourse{ID: "c", Log: r.IntN(3) == 0, Share: r.IntN(3) == 0, Width: float64(240 + 60*r.IntN(14))}
	if !c.Share {
		c.Unit = []string{"mol/L", "", "mmol/L/h"}[r.IntN(3)]
		c.LogY = r.IntN(3) == 0
	}
	size := 1.0
	if !c.Share {
		size = []float64{1, 0.2, 1e-9, 1e7}[r.IntN(4)]
	}
	n := 2 + r.IntN(400)
	shared := make([]float64, n)
	for i := range shared {
		shared[i] = end * r.Float64()
		if c.Log {
			shared[i] = end * math.Pow(1e-6, r.Float64())
		}
	}
	shared[0], shared[n-1] = 0, end
	if r.IntN(3) == 0 && n > 4 {
		shared[1] = shared[2] // a jump
	}
	sort.Float64s(shared)
	lines := 1 + r.IntN(12)
	for i := range lines {
		l := TimeLine{Name: fmt.Sprint(someNames[r.IntN(len(someNames))], " ", i), T: shared, Emphasis: r.IntN(6) == 0}
		if r.IntN(2) == 0 {
			l.Text = fmt.Sprintf("%.3g", r.Float64())
		}
		if r.IntN(8) == 0 { // ends early
			l.T = shared[:1+r.IntN(n)]
		}
		shape, a, b := r.IntN(5), r.Float64(), 10*r.Float64()
		for _, t := range l.T {
			y := 0.0
			switch x := t / end; shape {
			case 0:
				y = a * math.Exp(-b*x)
			case 1:
				y = a * (1 - math.Exp(-b*x))
			case 2:
				y = a * 10 * x * math.Exp(-b*x*3) // a highest value within
			case 3:
				y = math.Floor(4*x) / 4
			case 4:
				y = 0 // many ends in one place
				if c.LogY {
					y = 1e-3
				}
			}
			y *= size
			if r.IntN(60) == 0 && len(l.Y) > 0 {
				y = math.NaN()
			}
			l.Y = append(l.Y, y)
		}
		if r.IntN(4) == 0 {
			for _, y := range l.Y {
				l.Low, l.High = append(l.Low, 0.9*y), append(l.High, 1.1*y)
			}
		}
		c.Lines = append(c.Lines, l)
	}
	c.Lines[0].T, c.Lines[0].Y = []float64{end / 3, end}, []float64{0.3 * size, 0.1 * size} // some value above 0
	c.Lines[0].Low, c.Lines[0].High = nil, nil
	if r.IntN(4) > 0 {
		at, value := 0.0, float64(r.IntN(40)-20)
		for range 1 + r.IntN(8) {
			c.Programme = append(c.Programme, TimeNode{T: at, Value: value})
			at += end * r.Float64() * 0.5
			if r.IntN(2) == 0 {
				value = float64(r.IntN(300) - 100)
			}
			if r.IntN(5) == 0 {
				c.Programme = append(c.Programme, TimeNode{T: at, Value: value}) // a jump
				value = 25.5
			}
		}
		sort.SliceStable(c.Programme, func(i, k int) bool { return c.Programme[i].T < c.Programme[k].T })
	}
	for range r.IntN(4) * r.IntN(8) {
		at := []float64{0, end, end * r.Float64(), end * r.Float64()}[r.IntN(4)]
		c.Events = append(c.Events, TimeMark{T: at, Text: someNames[r.IntN(len(someNames))]})
	}
	for range r.IntN(2) * r.IntN(20) {
		y := size * r.Float64()
		p := TimePoint{Line: c.Lines[r.IntN(lines)].Name, T: end * r.Float64(), Y: y}
		if r.IntN(2) == 0 {
			low, high := 0.9*y, 1.05*y
			p.Low, p.High = &low, &high
		}
		c.Points = append(c.Points, p)
	}
	return c
}

// texts lists the boxes of all text, a label with its marker as one.
func texts(marks []Mark) (boxes []Rect, words []string) {
	for _, m := range marks {
		switch m := m.(type) {
		case Words:
			boxes, words = append(boxes, m.Bounds()), append(words, lettering.Text(m.Runs))
		case Group:
			text := ""
			for _, k := range m.Marks {
				if w, ok := k.(Words); ok {
					text += lettering.Text(w.Runs) + " "
				}
			}
			boxes, words = append(boxes, m.Bounds()), append(words, text)
		}
	}
	return boxes, words
}

// TestRandomTimeCourses holds what the figure promises: no text covers another
// text, a line, a highest or lowest point or the line of an event, and none leaves
// the frame; the width is the one that was wished.
func TestRandomTimeCourses(t *testing.T) {
	n := 600
	if testing.Short() {
		n = 100
	}
	labels, events, numbered := 0, 0, 0
	for seed := range n {
		c := randomCourse(rand.New(rand.NewPCG(uint64(seed), 3)))
		s, err := c.Scene()
		if err != nil {
			t.Fatalf("seed %d: %v", seed, err)
		}
		if err := s.Check(); err != nil {
			t.Errorf("seed %d: %v", seed, err)
		}
		again, _ := c.Scene()
		if !reflect.DeepEqual(s, again) {
			t.Errorf("seed %d: two layouts differ", seed)
		}
		if s.Width != c.Width {
			t.Errorf("seed %d: %g wide, want %g", seed, s.Width, c.Width)
		}
		boxes, words := texts(s.Marks)
		labels += len(boxes)
		for i, a := range boxes {
			bad := func(format string, args ...any) {
				t.Errorf("seed %d: text %q %.5g "+format, append([]any{seed, words[i], a}, args...)...)
			}
			if a.X0 < margin-0.01 || a.Y0 < margin-0.01 || a.X1 > s.Width-margin+0.01 || a.Y1 > s.Height-margin+0.01 {
				bad("leaves the frame %g by %g", s.Width, s.Height)
			}
			for k, b := range boxes[:i] {
				if a.grown(2).meets(b) {
					bad("is less than 2 from %q %.5g", words[k], b)
				}
			}
			for _, m := range s.Marks {
				switch m := m.(type) {
				case Line:
					if m.Role == "event" || m.Role == "leader" || m.Role == "whisker" {
						if crosses(m, a.grown(1)) {
							bad("is crossed by the %s %v", m.Role, m.Bounds())
						}
					}
				case Curve:
					if !strings.HasPrefix(string(m.Role), "path") {
						continue
					}
					for k := 1; k < len(m.Path); k++ {
						if crosses(Line{X1: m.Path[k-1].X, Y1: m.Path[k-1].Y, X2: m.Path[k].X, Y2: m.Path[k].Y}, a) {
							bad("covers the line %s at %.5g", m.Role, m.Path[k])
							break
						}
					}
				}
			}
		}
		events += len(c.Events)
		if strings.Contains(strings.Join(words, "|"), "|1: ") {
			numbered++
		}
	}
	t.Logf("%d texts, %d events, %d figures with numbered events", labels, events, numbered)
	if numbered == 0 || numbered > n/2 {
		t.Errorf("events are numbered in %d figures of %d: the test sees one kind only", numbered, n)
	}
}

// FuzzTimeCourse: whatever the numbers and texts, a figure is sound or refused
// with a remedy.
func FuzzTimeCourse(f *testing.F) {
	f.Add(uint64(1), 720.0, 0.0, 1.0, 1.0, "1,2-adduct")
	f.Add(uint64(2), 240.0, 1e-3, 1e-9, -1.0, "</text>")
	f.Add(uint64(3), 4000.0, 10.0, 1e200, 1e-300, "")
	f.Add(uint64(29), 240.0, 1e-3, 2e-9, -1.0, "0") // a line that ends before the time shown
	f.Add(uint64(4), 300.0, 0.0, 1e-300, 5e-324, " ")
	f.Fuzz(func(t *testing.T, seed uint64, width, from, time, value float64, text string) {
		c := randomCourse(rand.New(rand.NewPCG(seed, 9)))
		c.Width, c.From = width, from
		for i := range c.Lines {
			l := &c.Lines[i]
			l.Label = text
			times := make([]float64, len(l.T)) // lines share theirs
			for k := range l.T {
				times[k] = l.T[k] * time
				l.Y[k] *= value
				if l.Low != nil {
					l.Low[k], l.High[k] = l.Low[k]*value, l.High[k]*value
				}
			}
			l.T = times
		}
		for i := range c.Programme {
			c.Programme[i].T *= time
			c.Programme[i].Text = text
		}
		for i := range c.Events {
			c.Events[i].T *= time
			c.Events[i].Text = text
		}
		s, err := c.Scene()
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
