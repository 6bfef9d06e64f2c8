package diagram

import (
	"errors"
	"math"
	"strings"
	"testing"

	"saddlebook/diagram/lettering"
)

func st(name string, v float64) ProfilePoint { return ProfilePoint{Name: name, Value: v} }

func ts(name string, v, at float64) ProfilePoint {
	return ProfilePoint{Name: name, Value: v, Peak: true, Position: at}
}

func path(name string, points ...ProfilePoint) ProfilePath {
	return ProfilePath{Name: name, Points: points}
}

func laidOut(t *testing.T, p Profile) (Scene, inked) {
	t.Helper()
	s, err := p.Scene()
	if err != nil {
		t.Fatal(err)
	}
	return s, takeApart(t, s.Marks)
}

func TestProfileRefuses(t *testing.T) {
	nan, sd := math.NaN(), -1.0
	two := path("a", st("R", 0), st("P", 1))
	over := path("o", st("R", 0), ts("T", 5, 0.5), st("P", 1))
	for _, tt := range []struct {
		p   Profile
		msg string
	}{
		{Profile{}, "without a path"},
		{Profile{Paths: []ProfilePath{path("a", st("R", 0))}}, `path "a" has 1 points`},
		{Profile{Paths: []ProfilePath{path("", st("R", 0), st("", 1))}}, "point 2 of path 1 has no name"},
		{Profile{Paths: []ProfilePath{path("a", st("R", nan), st("P", 1))}}, `"R" of path "a" has the value NaN`},
		{Profile{Paths: []ProfilePath{path("a", st("R", 0), st("P", math.Inf(-1)))}}, "-Inf"},
		{Profile{Paths: []ProfilePath{path("a", st("R", 0), ProfilePoint{Name: "P", SD: &sd})}}, "standard deviation -1"},
		{Profile{Paths: []ProfilePath{path("a", st("R", 0), ts("T", 5, 1.2), st("P", 1))}}, "position 1.2"},
		{Profile{Paths: []ProfilePath{path("a", ts("T", 5, 0.5), st("P", 1))}}, `"T" of path "a" does not stand between`},
		{Profile{Paths: []ProfilePath{path("a", st("R", 0), ts("T", 5, 0.5))}}, "does not stand between"},
		{Profile{Paths: []ProfilePath{path("a", st("R", 0), ts("T", 5, 0.5), ts("U", 5, 0.5), st("P", 1))}}, `"U" of path "a" does not stand between`},
		{Profile{Sides: true, Paths: []ProfilePath{two}}, "two-sided profile with 1 paths"},
		{Profile{Sides: true, Paths: []ProfilePath{two, path("b", st("Q", 0), st("S", 2))}}, `start from "R" and "Q"`},
		{Profile{Paths: []ProfilePath{two, two}}, `paths "a" and "a" run through the same states`},
		{Profile{Paths: []ProfilePath{two, path("", st("R", 0), st("I", 4), st("P", 1))}}, `path 2 ends in the state "P" of another path`},
		{Profile{Paths: make([]ProfilePath, 9)}, "9 paths"},
		{Profile{Paths: []ProfilePath{path("a", st("R", 0), ProfilePoint{Name: "R", Again: true})}}, `"R" of path "a" is marked as the first state again`},
		{Profile{Paths: []ProfilePath{two, {Name: "v", Variant: "x", Points: two.Points}}}, `path "v" is a variant of "x"`},
		{Profile{Paths: []ProfilePath{{Name: "a", Variant: "a", Points: two.Points}}}, `path "a" is a variant of "a"`},
		{Profile{Paths: []ProfilePath{two, {Variant: "a", Points: two.Points}}}, `path 2 is a variant of "a" and has no name`},
		{Profile{Sides: true, Paths: []ProfilePath{two, {Name: "b", Variant: "a", Points: two.Points}}}, `two-sided profile with a variant`},
		{Profile{Paths: []ProfilePath{over}, Barriers: []ProfileBarrier{{Peak: "U"}}}, `no transition state "U"`},
		{Profile{Paths: []ProfilePath{over}, Barriers: []ProfileBarrier{{Path: "x", Peak: "T"}}}, `no path "x"`},
		{Profile{Paths: []ProfilePath{over}, Barriers: []ProfileBarrier{{Peak: "T"}, {Peak: "T"}}}, `the barrier of "T" is to be measured twice`},
		{Profile{Paths: []ProfilePath{over}, Span: &ProfileSpan{From: "R", To: "Q"}}, `no path runs through "R" and "Q"`},
		{Profile{Paths: []ProfilePath{over}, Span: &ProfileSpan{From: "T", To: "R"}}, `"R" stands before "T", and path "o" is no cycle`},
		{Profile{Paths: []ProfilePath{path("a", st("R", 0), ProfilePoint{Name: "P", Picture: &Picture{Width: 700, Height: 10}})}}, `the picture at "P" is 700 by 10`},
		{Profile{Paths: []ProfilePath{path("a", st("R", 0), ProfilePoint{Name: "P", Picture: &Picture{Width: 70, Height: nan}})}}, `the picture at "P" is 70 by NaN`},
		{Profile{Paths: []ProfilePath{path("a", st("R", 0), ProfilePoint{Name: "P", Picture: &Picture{Width: 70, Height: 10, Marks: []Mark{Line{Role: "axis", X2: 71}}}})}}, `has a mark outside its frame`},
		{Profile{Width: 10, Paths: []ProfilePath{two}}, "cannot be 10 wide"},
	} {
		_, err := tt.p.Scene()
		var e *Error
		if !errors.As(err, &e) || !strings.Contains(e.Msg, tt.msg) || e.Fix == "" {
			t.Errorf("error %v, want one with %q and a remedy", err, tt.msg)
		}
	}
}

// TestPositions: a later transition state stands farther along, symmetric ones
// half way, and each between its levels.
func TestPositions(t *testing.T) {
	at := func(pos float64) float64 {
		_, k := laidOut(t, Profile{ID: "x", Paths: []ProfilePath{path("", st("R", 0), ts("T", 10, pos), st("P", -5))}})
		r, p, top := k.levels[0], k.levels[1], k.levels[2]
		return ((top.X1+top.X2)/2 - r.X2) / (p.X1 - r.X2)
	}
	last := 0.0
	for _, pos := range []float64{0, 0.2, 0.45, 0.5, 0.55, 0.9, 1} {
		x := at(pos)
		if !(x > last && x < 1) {
			t.Errorf("position %g stands at %g of the gap, behind %g", pos, x, last)
		}
		last = x
	}
	for _, pos := range []float64{0.5, math.NaN()} {
		if x := at(pos); math.Abs(x-0.5) > 1e-6 {
			t.Errorf("position %g stands at %g of the gap, want half way", pos, x)
		}
	}
	if a, b := at(0.3), at(0.7); math.Abs(a+b-1) > 1e-6 {
		t.Errorf("positions 0.3 and 0.7 stand at %g and %g, not mirror images", a, b)
	}
}

// TestCurvesAreLevelAndMonotone looks at the shape itself: horizontal at every
// level and peak, and never turning between two.
func TestCurvesAreLevelAndMonotone(t *testing.T) {
	s, _ := laidOut(t, Profile{ID: "x", Paths: []ProfilePath{path("", st("R", 0), ts("T", 10, 0.3), st("I", 4), st("J", 3.99), ts("U", 12, 1), st("P", -5))}})
	n := 0
	for _, m := range s.Marks {
		c, ok := m.(Curve)
		if !ok {
			continue
		}
		var x, y float64
		for _, q := range c.Path {
			if q.Op == Cubic {
				n++
				if q.Y1 != y || q.Y2 != q.Y {
					t.Errorf("the curve from %g, %g to %g, %g is not level at its ends", x, y, q.X, q.Y)
				}
				if !(x <= q.X1 && q.X1 <= q.X2 && q.X2 <= q.X) {
					t.Errorf("the curve from %g to %g runs back along x", x, q.X)
				}
			}
			x, y = q.X, q.Y
		}
	}
	if n != 5 {
		t.Errorf("%d curves, want 5", n)
	}
}

func TestSharedStatesAreDrawnOnce(t *testing.T) {
	s, k := laidOut(t, Profile{ID: "x", Paths: []ProfilePath{
		path("a", st("R", 0), ts("T", 9, 0.5), st("I", 3), ts("Ta", 8, 0.5), st("A", -2), st("Z", -9)),
		path("b", st("R", 0), ts("T", 9, 0.5), st("I", 3), ts("Tb", 10, 0.5), st("Z", -9)),
	}})
	if len(k.levels) != 7 { // R, I, A, Z; T, Ta, Tb
		t.Errorf("%d levels, want 7", len(k.levels))
	}
	roles := map[Role]int{}
	for _, m := range s.Marks {
		if c, ok := m.(Curve); ok {
			roles[c.Role]++
		}
	}
	if len(roles) != 3 || roles["path"] != 1 || roles["path path-1"] != 1 || roles["path path-2"] != 1 {
		t.Errorf("curves %v, want one shared and one of each path", roles)
	}
	seen := map[string]int{}
	for _, text := range k.texts {
		seen[text]++
	}
	for _, text := range []string{"R 0.0", "T 9.0", "I 3.0", "Z −9.0", "a", "b"} {
		if seen[text] != 1 {
			t.Errorf("%q stands %d times, want once", text, seen[text])
		}
	}
}

func TestStatesOfOneNameAndTwoValuesAreTwo(t *testing.T) {
	_, k := laidOut(t, Profile{ID: "x", Paths: []ProfilePath{path("gas", st("R", 0), st("P", -4)), path("water", st("R", 0), st("P", -7))}})
	if len(k.levels) != 3 {
		t.Errorf("%d levels, want 3", len(k.levels))
	}
}

// TestCirclesAreDrawn: a path that meets a name again, and two paths in opposite
// order, have no common order of states; they are still drawn.
func TestCirclesAreDrawn(t *testing.T) {
	for _, paths := range [][]ProfilePath{
		{path("", st("cat", 0), ts("T", 9, 0.5), st("I", 3), ts("U", 8, 0.5), st("cat", 0))},
		{path("there", st("A", 0), st("B", 3), st("C", 1)), path("back", st("C", 1), st("B", 3), st("A", 0))},
	} {
		s, _ := laidOut(t, Profile{ID: "x", Paths: paths})
		if err := s.Check(); err != nil {
			t.Error(err)
		}
	}
}

func TestSides(t *testing.T) {
	s, k := laidOut(t, Profile{ID: "x", Sides: true, Paths: []ProfilePath{
		path("A", st("R", 0), ts("Ta", 9, 0.2), st("A", -4)), path("B", st("R", 0), ts("Tb", 10, 0.2), st("B", -7)),
	}})
	if err := s.Check(); err != nil {
		t.Fatal(err)
	}
	x := map[Role][]float64{}
	for _, l := range k.levels {
		x[l.Role] = append(x[l.Role], (l.X1+l.X2)/2)
	}
	r, a, b := x["level"][0], x["level path-1"][0], x["level path-2"][0]
	ta, tb := x["peak path-1"][0], x["peak path-2"][0]
	if !(a < ta && ta < r && r < tb && tb < b) {
		t.Errorf("from left to right A %g, Ta %g, R %g, Tb %g, B %g", a, ta, r, tb, b)
	}
	if math.Abs((r-ta)-(tb-r)) > 1e-6 || r-ta > (r-a)/2 {
		t.Errorf("early transition states stand %g and %g from R, products %g", r-ta, tb-r, r-a)
	}
}

// TestShiftOfZero: moving every energy moves no mark against another along x, but
// for the room that the numbers of the axis take.
func TestShiftOfZero(t *testing.T) {
	xs := func(zero float64) (out []float64) {
		_, k := laidOut(t, Profile{ID: "x", Paths: []ProfilePath{path("", st("R", zero), ts("T", zero+10, 0.3), st("P", zero-5))}})
		for _, l := range k.levels {
			out = append(out, (l.X1-k.levels[0].X1)/(k.levels[1].X1-k.levels[0].X1))
		}
		return out
	}
	a, b := xs(0), xs(50)
	for i := range a {
		if math.Abs(a[i]-b[i]) > 1e-3 {
			t.Errorf("level %d stands at %g and at %g", i, a[i], b[i])
		}
	}
}

func TestDefaultsInWords(t *testing.T) {
	s, k := laidOut(t, Profile{ID: "x", Unit: "kcal/mol", Zero: "R + X", Paths: []ProfilePath{path("cold", st("R", 0), ts("T", 13.84, 0.5), st("P", -5))}})
	if want := "Highest transition state T at 13.8 kcal/mol, lowest point P at −5.0 kcal/mol. cold: from R (0.0) over T (13.8) to P (−5.0)."; s.Title != "Energy profile" || s.Desc != want {
		t.Errorf("title %q, description %q, want %q", s.Title, s.Desc, want)
	}
	for _, want := range []string{"ΔG / kcal mol−1 relative to R + X", "T 13.8"} {
		found := false
		for _, text := range k.texts {
			found = found || text == want
		}
		if !found {
			t.Errorf("%q is not among %q", want, k.texts)
		}
	}
}

func TestCheck(t *testing.T) {
	ok := Scene{ID: "a", Width: 100, Height: 50, Title: "t"}
	with := func(m ...Mark) Scene { s := ok; s.Marks = m; return s }
	if err := with(Line{Role: "axis", X2: 100, Y2: 50}).Check(); err != nil {
		t.Error(err)
	}
	nan := math.NaN()
	for name, s := range map[string]Scene{
		"no id":        {Width: 1, Height: 1, Title: "t"},
		"no title":     {ID: "a", Width: 1, Height: 1},
		"no frame":     {ID: "a", Title: "t"},
		"NaN frame":    {ID: "a", Title: "t", Width: nan, Height: 1},
		"NaN line":     with(Line{Role: "axis", X1: nan}),
		"infinite dot": with(Dot{Role: "axis", X: math.Inf(1), R: 1}),
		"negative dot": with(Dot{Role: "axis", X: 5, Y: 5, R: -1}),
		"NaN curve":    with(Curve{Role: "path", Path: []Command{{Op: Move}, {Op: Cubic, X1: nan}}}),
		"empty curve":  with(Curve{Role: "path"}),
		"box outside":  with(Box{Role: "bar", W: 101, H: 1}),
		"negative box": with(Box{Role: "bar", X: 5, W: -1, H: 1}),
		"text outside": with(Words{Role: "name", X: 90, Y: 20, Size: 12, Runs: lettering.Plain("too long")}),
		"text size":    with(Words{Role: "name", X: 9, Y: 20, Runs: lettering.Plain("a")}),
		"no role":      with(Line{}),
		"odd role":     with(Line{Role: `a"b`}),
		"odd group":    with(Group{Role: "A"}),
		"in a group":   with(Group{Marks: []Mark{Group{Marks: []Mark{Line{Role: "axis", Y2: -1}}}}}),
	} {
		if err := s.Check(); err == nil {
			t.Errorf("%s: no error", name)
		}
	}
}

func BenchmarkProfile(b *testing.B) {
	long := []ProfilePoint{st("s0", 0)}
	for i := range 19 {
		long = append(long, ts("TS", 20+float64(i%3), 0.4), st("intermediate", float64(i%5)))
	}
	for name, p := range map[string]Profile{
		"states=2":  {ID: "x", Paths: []ProfilePath{path("", st("R", 0), ts("T", 10, 0.3), st("P", -5))}},
		"states=20": {ID: "x", Paths: []ProfilePath{{Points: long}}},
	} {
		b.Run(name, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if _, err := p.Scene(); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
