package diagram

import (
	"errors"
	"math"
	"math/rand/v2"
	"strings"
	"testing"
)

func TestSignedBarsRefuse(t *testing.T) {
	one, two := 1.0, 2.0
	for _, tt := range []struct {
		bars []SignedBar
		msg  string
	}{
		{nil, "without a bar"},
		{[]SignedBar{{Name: "TS1", Value: math.NaN()}}, `"TS1" has the value NaN`},
		{[]SignedBar{{Name: "TS1", Value: math.Inf(-1)}}, "value -Inf"},
		{[]SignedBar{{Name: "TS1", High: &one}}, "one end"},
		{[]SignedBar{{Name: "TS1", Low: &two, High: &one}}, "interval 2 to 1"},
	} {
		_, err := SignedBars{Groups: []SignedGroup{{Bars: tt.bars}}}.Scene()
		var e *Error
		if !errors.As(err, &e) || !strings.Contains(e.Msg, tt.msg) || e.Fix == "" {
			t.Errorf("error %v, want one with %q and a remedy", err, tt.msg)
		}
	}
}

// TestRandomSignedBars: bars go from the middle to their side in one scale, no
// text is within 2 of another or covers a bar or a whisker, none leaves the frame.
func TestRandomSignedBars(t *testing.T) {
	for seed := range 300 {
		r := rand.New(rand.NewPCG(uint64(seed), 8))
		size := []float64{0.3, 1, 2.5, 40}[r.IntN(4)]
		b := SignedBars{ID: "b", Width: float64(240 + 60*r.IntN(10))}
		var values []float64
		for range 1 + r.IntN(3) {
			g := SignedGroup{}
			if r.IntN(2) == 0 {
				g.Name = someNames[r.IntN(len(someNames))]
			}
			for range r.IntN(6) {
				bar := SignedBar{Name: someNames[r.IntN(len(someNames))], Value: size * []float64{0, 1, -1, 2*r.Float64() - 1}[r.IntN(4)]}
				if r.IntN(2) == 0 {
					low, high := bar.Value-r.Float64()*size, bar.Value+r.Float64()*size
					bar.Low, bar.High = &low, &high
				}
				g.Bars = append(g.Bars, bar)
				values = append(values, bar.Value)
			}
			b.Groups = append(b.Groups, g)
		}
		s, err := b.Scene()
		if len(values) == 0 {
			if err == nil {
				t.Error("no bar, and no error")
			}
			continue
		}
		if err != nil {
			t.Fatalf("seed %d: %v", seed, err)
		}
		if err := s.Check(); err != nil {
			t.Errorf("seed %d: %v", seed, err)
		}
		var boxes []Box
		var solid []Rect
		var zero, scale float64
		for _, m := range s.Marks {
			switch m := m.(type) {
			case Box:
				boxes, solid = append(boxes, m), append(solid, m.Bounds())
			case Line:
				if m.Role == "whisker" {
					solid = append(solid, m.Bounds())
				}
				if m.Role == "axis" && m.Y1 == m.Y2 {
					zero = (m.X1 + m.X2) / 2
				}
			}
		}
		for i, v := range values {
			if v != 0 && scale == 0 {
				scale = boxes[i].W / math.Abs(v)
			}
			want := Rect{X0: zero + math.Min(0, v)*scale, X1: zero + math.Max(0, v)*scale}
			if got := boxes[i].Bounds(); math.Abs(got.X0-want.X0) > 1e-6 || math.Abs(got.X1-want.X1) > 1e-6 {
				t.Errorf("seed %d: the bar of %g goes from %g to %g, want %g to %g", seed, v, got.X0, got.X1, want.X0, want.X1)
			}
		}
		rects, words := texts(s.Marks)
		for i, a := range rects {
			for k, q := range rects[:i] {
				if a.grown(1).meets(q) {
					t.Errorf("seed %d: %q %v and %q %v are too near", seed, words[i], a, words[k], q)
				}
			}
			for _, q := range solid {
				if a.meets(q) {
					t.Errorf("seed %d: the text %q %v covers %v", seed, words[i], a, q)
				}
			}
		}
	}
}
