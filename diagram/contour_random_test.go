package diagram

import (
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"reflect"
	"strings"
	"testing"

	"saddlebook/diagram/lettering"
)

// randomMap gives a map that is legal, and hard to letter.
func randomMap(r *rand.Rand) ContourMap {
	nt, nk := 2+r.IntN(40), 2+r.IntN(40)
	m := ContourMap{ID: "m", Log: r.IntN(2) == 0, Width: float64(280 + 60*r.IntN(12)), Axis: someNames[r.IntN(len(someNames))]}
	end := math.Pow(10, 9*r.Float64()-1)
	for k := range nk {
		t := end * float64(k) / float64(nk-1)
		if m.Log {
			t = end * math.Pow(1e-4, 1-float64(k)/float64(nk-1))
		}
		m.Times = append(m.Times, t)
	}
	low := float64(r.IntN(200) - 100)
	span := []float64{0.5, 30, 100, 250}[r.IntN(4)]
	for i := range nt {
		m.Temps = append(m.Temps, low+span*float64(i)/float64(nt-1))
	}
	switch r.IntN(4) {
	case 0:
		m.Share = true
	case 1:
		m.Ratio, m.LogValues = true, true
	case 2:
		m.LogValues = true
	}
	a, b, c, rough := 3*r.NormFloat64(), 3*r.NormFloat64(), 6*r.NormFloat64(), []float64{0, 0, 0.05, 1}[r.IntN(4)]
	shape := func(i, k int) float64 {
		x, y := float64(k)/float64(nk-1), float64(i)/float64(nt-1)
		return a*x + b*y + math.Sin(c*x*y*2) + rough*r.NormFloat64()
	}
	values := func(f func(v float64) float64) [][]float64 {
		out := make([][]float64, nt)
		for i := range out {
			for k := range nk {
				out[i] = append(out[i], f(shape(i, k)))
			}
		}
		return out
	}
	m.Values = values(func(v float64) float64 {
		switch {
		case m.Share:
			return 1 / (1 + math.Exp(-v))
		case m.LogValues:
			return math.Pow(10, v)
		}
		return 1e3 * v
	})
	if r.IntN(3) == 0 {
		for i := range nt / 2 {
			for k := range nk / 2 {
				if r.IntN(3) > 0 && (i > 0 || k > 0) {
					m.Values[i][k] = []float64{math.NaN(), math.NaN(), 0}[r.IntN(3)]
				}
			}
		}
	}
	for n := range r.IntN(8) {
		v := m.Values[nt-1][r.IntN(nk)] * (1 + 0.01*float64(n))
		if n == 3 {
			v *= 1e3 // hardly on the map
		}
		if v > 0 && !math.IsInf(v, 0) || !m.LogValues && v != 0 {
			m.Levels = append(m.Levels, MapLevel{Value: v})
		}
	}
	for range r.IntN(3) * r.IntN(9) {
		m.Runs = append(m.Runs, MapPoint{someNames[r.IntN(len(someNames))], end * 1.1 * r.Float64(), low + span*(1.1*r.Float64()-0.05)})
	}
	for range r.IntN(4) {
		at := r.NormFloat64()
		m.Regions = append(m.Regions, MapRegion{Name: someNames[r.IntN(len(someNames))], Border: r.IntN(2) == 0, Measure: values(func(v float64) float64 { return v - at })})
	}
	if r.IntN(3) == 0 {
		m.Feasible = &MapRegion{Name: someNames[r.IntN(len(someNames))], Measure: values(func(v float64) float64 { return math.Copysign(1, v) })}
		m.Best = &MapPoint{Name: "most room", T: end * r.Float64(), Temp: low + span*r.Float64()}
	}
	return m
}

// covers reports whether any stroke of a path meets a box.
func covers(path []Command, box Rect) bool {
	for k := 1; k < len(path); k++ {
		if path[k].Op == To && crosses(Line{X1: path[k-1].X, Y1: path[k-1].Y, X2: path[k].X, Y2: path[k].Y}, box) {
			return true
		}
	}
	return false
}

// spacious checks that texts leave neither the frame nor the room of each other.
func spacious(t *testing.T, name string, s Scene) ([]Rect, []string) {
	t.Helper()
	boxes, words := texts(s.Marks)
	for i, a := range boxes {
		if a.X0 < margin-3 || a.Y0 < margin-1 || a.X1 > s.Width-margin+3 || a.Y1 > s.Height-margin+1 {
			t.Errorf("%s: %q %.5g leaves the frame %g by %g", name, words[i], a, s.Width, s.Height)
		}
		for k, b := range boxes[:i] {
			if a.grown(2).meets(b) {
				t.Errorf("%s: %q %.5g is less than 2 from %q %.5g", name, words[i], a, words[k], b)
			}
		}
	}
	return boxes, words
}

// TestRandomMaps: no text is within 2 of another or of a line, hatch or marker,
// none leaves the frame, every level and every name stands somewhere, and the same
// map gives the same scene.
func TestRandomMaps(t *testing.T) {
	n := 100
	if testing.Short() {
		n = 30
	}
	levels, labels := 0, 0
	for seed := range n {
		m := randomMap(rand.New(rand.NewPCG(uint64(seed), 21)))
		name := fmt.Sprint("seed ", seed)
		s, err := m.Scene()
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		if err := s.Check(); err != nil {
			t.Errorf("%s: %v", name, err)
		}
		if again, _ := m.Scene(); seed%10 == 0 && !reflect.DeepEqual(s, again) {
			t.Errorf("%s: two layouts differ", name)
		}
		boxes, words := spacious(t, name, s)
		for i, a := range boxes {
			for _, k := range s.Marks {
				switch k := k.(type) {
				case Curve:
					role := strings.Fields(string(k.Role))[0]
					if role != "contour" && role != "hatch" && role != "outline" && role != "border" && role != "hatch-blank" {
						continue
					}
					if covers(k.Path, a.grown(1.9)) {
						t.Errorf("%s: %q %.5g is less than 2 from a %s", name, words[i], a, role)
					}
				case Line:
					if k.Role == "map-leader" && crosses(k, a.grown(-0.5)) {
						t.Errorf("%s: %q %.5g is crossed by a leader", name, words[i], a)
					}
				case Dot:
					if k.Bounds().grown(1).meets(a) {
						t.Errorf("%s: %q %.5g covers a marker", name, words[i], a)
					}
				}
			}
		}
		all := strings.Join(words, " ")
		for _, v := range m.Levels {
			levels++
			text := lettering.Text(lettering.Runs(m.levelText(v)))
			if strings.Contains(all, text) {
				labels++
			} else {
				t.Errorf("%s: the level %q stands nowhere", name, text)
			}
		}
		squeezed := strings.NewReplacer(" ", "", "\u00a0", "").Replace(all)
		for _, r := range m.Runs {
			if !strings.Contains(squeezed, strings.NewReplacer(" ", "", "\u00a0", "").Replace(lettering.Text(lettering.Runs(r.Name)))) {
				t.Errorf("%s: the run %q stands nowhere in %q", name, r.Name, words)
			}
		}
	}
	t.Logf("%d levels, %d labels", levels, labels)
}

// TestContours: each line lies where the interpolated function is level, lines of
// two levels do not meet, all ends lie at the border, and closed ones go around
// what they should.
func TestContours(t *testing.T) {
	for seed := range 200 {
		r := rand.New(rand.NewPCG(uint64(seed), 22))
		f := field{}
		for k := range 2 + r.IntN(12) {
			f.xs = append(f.xs, float64(10*k)+5*r.Float64())
		}
		for i := range 2 + r.IntN(12) {
			f.ys = append(f.ys, 200-float64(10*i)-5*r.Float64())
			var row []float64
			for range f.xs {
				row = append(row, math.Round(6*r.NormFloat64())/2) // many equal to a level
			}
			f.at = append(f.at, row)
		}
		x0, x1, y0, y1 := f.xs[0], f.xs[len(f.xs)-1], f.ys[len(f.ys)-1], f.ys[0]
		border := func(p spot) bool { return p.x == x0 || p.x == x1 || p.y == y0 || p.y == y1 }
		var before [][]spot
		for _, level := range []float64{-0.75, 0, 0.75} {
			lines := f.contours(level)
			for _, line := range lines {
				first, last := line[0], line[len(line)-1]
				if first != last && !(border(first) && border(last)) {
					t.Fatalf("seed %d: a line ends at %v and %v", seed, first, last)
				}
				for _, p := range line {
					if d := f.off(p, level); d > 1e-9 {
						t.Fatalf("seed %d: at %v the function is %g off %g", seed, p, d, level)
					}
				}
				for _, other := range before {
					for i := 1; i < len(line); i++ {
						for k := 1; k < len(other); k++ {
							if cross(Line{"", line[i-1].x, line[i-1].y, line[i].x, line[i].y}, Line{"", other[k-1].x, other[k-1].y, other[k].x, other[k].y}) {
								t.Fatalf("seed %d: lines of two levels meet at %v", seed, line[i])
							}
						}
					}
				}
			}
			before = append(before, lines...)
		}
		// The area inside closed lines of a steady function is what it should be.
		for _, line := range f.padded(-100).contours(0.75) {
			if line[0] != line[len(line)-1] {
				t.Fatalf("seed %d: a line of a padded function is open", seed)
			}
		}
	}
}

// off is how far f, straight along the sides of the grid, is from level at a place
// on a side.
func (f field) off(p spot, level float64) float64 {
	best := math.Inf(1)
	for i := range f.ys {
		for k := range f.xs {
			if k+1 < len(f.xs) && p.y == f.ys[i] && p.x >= f.xs[k] && p.x <= f.xs[k+1] {
				t := (p.x - f.xs[k]) / (f.xs[k+1] - f.xs[k])
				best = math.Min(best, math.Abs(f.at[i][k]+t*(f.at[i][k+1]-f.at[i][k])-level))
			}
			if i+1 < len(f.ys) && p.x == f.xs[k] && p.y <= f.ys[i] && p.y >= f.ys[i+1] {
				t := (p.y - f.ys[i]) / (f.ys[i+1] - f.ys[i])
				best = math.Min(best, math.Abs(f.at[i][k]+t*(f.at[i+1][k]-f.at[i][k])-level))
			}
		}
	}
	return best
}

// TestHatch: strokes a step apart cover an area as long as the area over the step,
// and the middle of each lies inside, holes left out.
func TestHatch(t *testing.T) {
	square := func(x, y, size float64, back bool) []spot {
		line := []spot{{x, y}, {x + size, y}, {x + size, y + size}, {x, y + size}, {x, y}}
		if back {
			line[1], line[3] = line[3], line[1]
		}
		return line
	}
	lines := [][]spot{square(0, 0, 200, false), square(60, 60, 80, true), square(200, 0, 100, false)} // a hole; a neighbour that touches
	for _, down := range []bool{false, true} {
		sum := 0.0
		for _, s := range hatch(lines, 2, down) {
			sum += math.Hypot(s[1].x-s[0].x, s[1].y-s[0].y)
			if x, y := (s[0].x+s[1].x)/2, (s[0].y+s[1].y)/2; x > 60.1 && x < 139.9 && y > 60.1 && y < 139.9 {
				t.Errorf("a stroke at %g, %g in the hole", x, y)
			}
		}
		area := 200.0*200 - 80*80 + 100*100
		if got := sum * 2 / math.Sqrt2; math.Abs(got-area) > 0.01*area {
			t.Errorf("strokes over an area of %g, want %g", got, area)
		}
	}
}

// TestOutside: what is left of a line is what lies outside the boxes.
func TestOutside(t *testing.T) {
	line := []spot{{0, 0}, {100, 0}, {100, 50}}
	got := outside(line, []Rect{{20, -5, 30, 5}, {25, -5, 40, 5}, {90, -5, 110, 20}}, 2)
	want := [][]spot{{{0, 0}, {18, 0}}, {{42, 0}, {88, 0}}, {{100, 22}, {100, 50}}}
	if !reflect.DeepEqual(got, want) {
		t.Errorf("left %v, want %v", got, want)
	}
	if got := outside(line, nil, 2); !reflect.DeepEqual(got, [][]spot{line}) {
		t.Errorf("without boxes %v is left", got)
	}
	if got := outside(line, []Rect{{-1, -1, 101, 51}}, 0); got != nil {
		t.Errorf("%v is left of a covered line", got)
	}
}

// FuzzContourMap: whatever the numbers and texts, a map is sound or refused with a
// remedy.
func FuzzContourMap(f *testing.F) {
	f.Add(uint64(1), 720.0, 1.0, 0.5, "kinetic control")
	f.Add(uint64(2), 280.0, 1e-300, -1.0, "</text>")
	f.Add(uint64(3), 4000.0, 1e9, math.Inf(1), "")
	f.Add(uint64(4), 300.0, 0.0, math.NaN(), " ")
	f.Fuzz(func(t *testing.T, seed uint64, width, size, value float64, text string) {
		m := randomMap(rand.New(rand.NewPCG(seed, 9)))
		m.Width = width
		if width > 1200 {
			m.Width = 1200 // larger ones take long
		}
		m.Axis, m.Nothing = text, text
		for i := range m.Values {
			for k := range m.Values[i] {
				m.Values[i][k] *= size
			}
		}
		m.Values[0][0] = value
		m.Levels = append(m.Levels, MapLevel{value, text})
		m.Runs = append(m.Runs, MapPoint{text, m.Times[0], m.Temps[0]})
		m.Regions = append(m.Regions, MapRegion{text, m.Values, true})
		s, err := m.Scene()
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
