package diagram

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"saddlebook/diagram/axis"
)

// steps is a path of n levels with transition states at rising positions.
func steps(n int) ProfilePath {
	points := []ProfilePoint{st("L0", 0)}
	for i := 1; i < n; i++ {
		x := float64(i)
		points = append(points, ts(fmt.Sprint("T", i), 20+3*math.Sin(x), x/float64(n)), st(fmt.Sprint("L", i), -2*x+4*math.Sin(2*x)))
	}
	return ProfilePath{Points: points}
}

// rises gives the height and the ends along x of every rise of a path, in order.
func rises(s Scene) (dy []float64, x [][2]float64) {
	for _, m := range s.Marks {
		c, ok := m.(Curve)
		if !ok || !strings.HasPrefix(string(c.Role), "path") {
			continue
		}
		var px, py float64
		for _, q := range c.Path {
			if q.Op == Cubic {
				dy, x = append(dy, py-q.Y), append(x, [2]float64{px, q.X})
			}
			px, py = q.X, q.Y
		}
	}
	return dy, x
}

// TestRowsHaveOneScale: 2 to 60 states in figures of any width keep that width,
// show every state, and rise by the same height for the same difference in
// whichever row.
func TestRowsHaveOneScale(t *testing.T) {
	for _, n := range []int{2, 3, 7, 8, 15, 30, 60} {
		for _, width := range []float64{318, 340, 480, 720, 1600} {
			p := Profile{ID: "x", Width: width, Paths: []ProfilePath{steps(n)}}
			s, k := laidOut(t, p)
			if s.Width != width {
				t.Errorf("%d levels: %g wide, want %g", n, s.Width, width)
			}
			all := strings.Join(k.texts, "\n") + "\n"
			for _, q := range p.Paths[0].Points {
				if !strings.Contains(all, q.Name+" ") {
					t.Errorf("%d levels, %g wide: no label of %s", n, width, q.Name)
				}
			}
			dy, _ := rises(s)
			points := p.Paths[0].Points
			if len(dy) != len(points)-1 {
				t.Fatalf("%d levels, %g wide: %d rises, want %d", n, width, len(dy), len(points)-1)
			}
			for i := range dy {
				d := points[i+1].Value - points[i].Value
				if got, want := dy[i]/d, dy[0]/(points[1].Value-points[0].Value); math.Abs(got/want-1) > 1e-9 {
					t.Errorf("%d levels, %g wide: rise %d has %g px to the unit, the first %g", n, width, i, got, want)
				}
			}
		}
	}
}

// TestPositionsInRows: the Marcus position keeps its order whichever row a
// transition state is in.
func TestPositionsInRows(t *testing.T) {
	s, _ := laidOut(t, Profile{ID: "x", Width: 400, Paths: []ProfilePath{steps(12)}})
	_, x := rises(s)
	last := -1.0
	for i := 0; i+1 < len(x); i += 2 {
		up, down := x[i], x[i+1]
		at := ((up[1]+down[0])/2 - up[0]) / (down[1] - up[0])
		if !(at > last && at > 0 && at < 1) {
			t.Errorf("transition state %d stands at %g of its gap, the one before, which is earlier, at %g", i/2+1, at, last)
		}
		last = at
	}
}

// TestCurvesGoOnOverCuts: a stretch that is parted leaves one row at the value at
// which it enters the next, and has its transition state once.
func TestCurvesGoOnOverCuts(t *testing.T) {
	long := steps(9).Points
	short := []ProfilePoint{long[0], ts("Tc", 31, 0.7), long[len(long)-1]}
	p := Profile{ID: "x", Width: 340, Title: "t", Axis: "G", Paths: []ProfilePath{{Name: "long", Points: long}, {Name: "short", Points: short}}}
	n, err := p.net()
	if err != nil {
		t.Fatal(err)
	}
	rows := n.fold([]int{0, 3, 5, 8}, 10)
	peaks := 0
	var left []float64
	for i, r := range rows {
		var in, out []float64
		for _, s := range r.states {
			switch {
			case s.pass && s.column == r.first:
				in = append(in, s.point.Value)
			case s.pass:
				out = append(out, s.point.Value)
			case s.point.Name == "Tc":
				peaks++
				if i != 2 { // 0.7 of eight columns is 5.6
					t.Errorf("Tc stands in row %d", i)
				}
			}
		}
		if fmt.Sprint(in) != fmt.Sprint(left) {
			t.Errorf("row %d begins with %v, the one before ended with %v", i, in, left)
		}
		left = out
	}
	if peaks != 1 || len(left) != 0 {
		t.Errorf("Tc stands %d times, and the last row goes on at %v", peaks, left)
	}
	if s, _ := laidOut(t, p); s.Width != 340 {
		t.Errorf("%g wide", s.Width)
	}
}

// TestSidesThatDoNotFit are drawn to the right.
func TestSidesThatDoNotFit(t *testing.T) {
	a, b := steps(5).Points, append([]ProfilePoint{}, steps(5).Points...)
	for i := 1; i < len(b); i++ {
		b[i].Name += "b"
	}
	p := Profile{ID: "x", Sides: true, Width: 340, Paths: []ProfilePath{{Name: "a", Points: a}, {Name: "b", Points: b}}}
	s, k := laidOut(t, p)
	if s.Width != 340 {
		t.Errorf("%g wide, want 340", s.Width)
	}
	first := k.levels[0]
	for _, l := range k.levels[1:4] {
		if l.X1 < first.X1 {
			t.Errorf("the level %v stands to the left of the first, %v", l, first)
		}
	}
}

// TestCrowdedRowsShowNumbers: where names find no place, a list has them.
func TestCrowdedRowsShowNumbers(t *testing.T) {
	p := Profile{ID: "x", Width: 318}
	for i := range 8 {
		p.Paths = append(p.Paths, ProfilePath{Name: fmt.Sprint("way ", i), Points: []ProfilePoint{
			st("common intermediate", 0), ts(fmt.Sprint("chair-like transition state ", i), 12+0.01*float64(i), 0.4), st(fmt.Sprint("diastereomer ", i), -6)}})
	}
	_, k := laidOut(t, p)
	texts := map[string]bool{}
	for _, text := range k.texts {
		texts[text] = true
	}
	for _, want := range []string{"1", "17", "1 common intermediate 0.0", "2 chair-like transition state 0 12.00", "17 diastereomer 7 −6.0"} {
		if !texts[want] {
			t.Errorf("no %q among %q", want, k.texts)
		}
	}
}

// TestDecimals: values get the decimals that tell them apart.
func TestDecimals(t *testing.T) {
	for _, tt := range []struct{ values, want string }{
		{"0 13.84 -5", "0.0 13.8 −5.0"},
		{"0 12.10 12.14", "0.0 12.10 12.14"},
		{"0 0.001 100000", "0.000 0.0010 100000"},
		{"0 450 -20", "0 450 −20"},
		{"7 7 7", "7.0 7.0 7.0"},
		{"0 0.0004 0.001", "0.00000 0.00040 0.00100"},
	} {
		var p Profile
		var path ProfilePath
		for _, f := range strings.Fields(tt.values) {
			var v float64
			fmt.Sscan(f, &v)
			path.Points = append(path.Points, st(f, v))
		}
		p.Paths = []ProfilePath{path}
		p.complete()
		var got []string
		for _, q := range p.Paths[0].Points {
			got = append(got, q.Text)
		}
		if g := strings.Join(got, " "); g != tt.want {
			t.Errorf("%s reads %s, want %s", tt.values, g, tt.want)
		}
	}
	if got := axis.Text(1e5, finer(1e5, []float64{1e5 + 1e-9}, 0)); got != "100000" {
		t.Errorf("rounding alone gives %s", got)
	}
}
