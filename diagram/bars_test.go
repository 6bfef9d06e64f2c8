package diagram

import (
	"errors"
	"fmt"
	"math/rand/v2"
	"strings"
	"testing"
)

func TestBarsRefuse(t *testing.T) {
	half, more := 0.5, 0.7
	for _, tt := range []struct {
		bars []Bar
		msg  string
	}{
		{nil, "without a bar"},
		{[]Bar{{Name: "A", Share: 1.2}}, `"A" has the share 1.2`},
		{[]Bar{{Name: "A", Share: -0.1}}, "share -0.1"},
		{[]Bar{{Name: "A", Low: &half}}, "one end"},
		{[]Bar{{Name: "A", Low: &more, High: &half}}, "interval 0.7 to 0.5"},
	} {
		_, err := Bars{Groups: []BarGroup{{Bars: tt.bars}}}.Scene()
		var e *Error
		if !errors.As(err, &e) || !strings.Contains(e.Msg, tt.msg) || e.Fix == "" {
			t.Errorf("error %v, want one with %q and a remedy", err, tt.msg)
		}
	}
}

// TestRandomBars: bars are as long as their shares, no text covers another, a
// bar or a whisker, and none leaves the frame.
func TestRandomBars(t *testing.T) {
	for seed := range 200 {
		r := rand.New(rand.NewPCG(uint64(seed), 2))
		b := Bars{ID: "b", Axis: "share", Width: float64(300 + 60*r.IntN(10))}
		var shares []float64
		for g := range 1 + r.IntN(4) {
			group := BarGroup{}
			if r.IntN(3) > 0 {
				group.Name = fmt.Sprint(g*25, " °C")
			}
			for range 1 + r.IntN(5) {
				bar := Bar{Name: someNames[r.IntN(len(someNames))], Share: []float64{0, 1, r.Float64()}[r.IntN(3)]}
				if r.IntN(2) == 0 {
					low, high := bar.Share*r.Float64(), bar.Share+(1-bar.Share)*r.Float64()
					bar.Low, bar.High = &low, &high
				}
				group.Bars = append(group.Bars, bar)
				shares = append(shares, bar.Share)
			}
			b.Groups = append(b.Groups, group)
		}
		s, err := b.Scene()
		if err != nil {
			t.Fatal(err)
		}
		if err := s.Check(); err != nil {
			t.Errorf("seed %d: %v", seed, err)
		}
		var texts, solid []Rect
		var full float64
		n := 0
		for _, m := range s.Marks {
			switch m := m.(type) {
			case Words, Group:
				texts = append(texts, m.Bounds())
			case Line:
				if m.Role == "axis" && m.Y1 == m.Y2 {
					full = m.X2 - m.X1
				}
				if m.Role == "whisker" {
					solid = append(solid, m.Bounds())
				}
			case Box:
				solid = append(solid, m.Bounds())
			}
		}
		for _, m := range s.Marks {
			if box, ok := m.(Box); ok {
				if d := box.W/full - shares[n]; d > 1e-6 || d < -1e-6 {
					t.Errorf("seed %d: bar %d is %g of the scale long, want %g", seed, n, box.W/full, shares[n])
				}
				n++
			}
		}
		for i, a := range texts {
			for _, q := range texts[:i] {
				if a.meets(q) {
					t.Errorf("seed %d: texts %v and %v overlap", seed, a, q)
				}
			}
			for _, q := range solid {
				if a.meets(q) {
					t.Errorf("seed %d: the text %v covers %v", seed, a, q)
				}
			}
		}
	}
}
