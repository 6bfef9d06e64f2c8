package diagram

import (
	"math"
	"strings"
	"testing"
)

// arrowsOf gives the shafts of a figure and the height of a unit of value.
func arrowsOf(t *testing.T, p Profile) (k inked, shafts []Line, tall float64) {
	t.Helper()
	s, k := laidOut(t, p)
	for _, l := range k.others {
		if l.Role == "measure" {
			shafts = append(shafts, l)
		}
	}
	dy, _ := rises(s)
	q := p.Paths[0].Points
	return k, shafts, dy[0] / (q[1].Value - q[0].Value)
}

func shows(t *testing.T, k inked, want ...string) {
	t.Helper()
	all := "\n" + strings.Join(k.texts, "\n") + "\n"
	for _, w := range want {
		if strings.Count(all, "\n"+w+"\n") != 1 {
			t.Errorf("%q does not stand once among %q", w, k.texts)
		}
	}
}

// TestBarriers: an arrow is as long as its barrier, but for the tip that keeps
// clear of the bar, and starts at the height of its level.
func TestBarriers(t *testing.T) {
	p := Profile{ID: "x", Paths: []ProfilePath{path("", st("R", 0), ts("T", 14, 0.4), st("P", -7))},
		Barriers: []ProfileBarrier{{Peak: "T"}, {Peak: "T", Back: true, Text: "21.0"}}}
	k, shafts, tall := arrowsOf(t, p)
	shows(t, k, "14.0", "21.0")
	if len(shafts) != 2 {
		t.Fatalf("%d arrows, want 2", len(shafts))
	}
	top := k.levels[2]
	for i, want := range []float64{14, 21} {
		a := shafts[i]
		if got := (a.Y1 - a.Y2 + 2.5) / tall; math.Abs(got-want) > 1e-9 {
			t.Errorf("arrow %d measures %g, want %g", i, got, want)
		}
		if !(a.X1 > top.X1-2 && a.X1 < top.X2+2) {
			t.Errorf("arrow %d stands at %g, not under %v", i, a.X1, top)
		}
	}
	if math.Abs(shafts[0].Y1-k.levels[0].Y1) > 1e-9 || math.Abs(shafts[1].Y1-k.levels[1].Y1) > 1e-9 || shafts[0].X1 >= shafts[1].X1 {
		t.Errorf("the arrows %v do not start at their levels %v", shafts, k.levels)
	}
}

func cycle() Profile {
	return Profile{ID: "x", Unit: "kcal/mol", Paths: []ProfilePath{path("", st("cat", 0), ts("T1", 16, 0.5), st("I1", 5), ts("T2", 11, 0.5), st("I2", -7), ts("T3", 3, 0.5), ProfilePoint{Value: -11, Again: true})}}
}

// TestTurn: the first state stands again at the end, lower by the turn, and an
// arrow measures it.
func TestTurn(t *testing.T) {
	for _, width := range []float64{320, 720} {
		p := cycle()
		p.Width = width
		k, shafts, tall := arrowsOf(t, p)
		shows(t, k, "cat 0.0", "cat −11.0")
		if len(shafts) != 1 {
			t.Fatalf("%d arrows, want 1", len(shafts))
		}
		if got := (shafts[0].Y2 - shafts[0].Y1 + 2.5) / tall; math.Abs(got-11) > 1e-9 {
			t.Errorf("the arrow measures %g, want 11", got)
		}
	}
	p := cycle()
	s, _ := laidOut(t, p)
	if want := "One turn −11.0 kcal/mol."; !strings.Contains(s.Desc, want) || !strings.Contains(s.Desc, "back to cat (−11.0)") {
		t.Errorf("description %q lacks %q", s.Desc, want)
	}
}

// TestSpan: T − I where the transition state follows, T − I + ΔG where it
// precedes (Kozuch and Shaik, Acc. Chem. Res. 2011, 44, 101).
func TestSpan(t *testing.T) {
	for _, tt := range []struct {
		from, to string
		want     float64
		text     string
	}{
		{"I2", "T3", 10, "span 10.0"},
		{"I1", "T3", -2, "span −2.0"},
		{"I2", "T1", 12, "span 12.0 to T1 in the next turn"},
		{"T2", "I1", -17, "span −17.0 to I1 in the next turn"},
	} {
		p := cycle()
		p.Span = &ProfileSpan{From: tt.from, To: tt.to}
		k, shafts, tall := arrowsOf(t, p)
		shows(t, k, tt.text)
		if got := (shafts[1].Y1 - shafts[1].Y2) / tall; math.Abs(got-tt.want) > 1e-9 {
			t.Errorf("from %s to %s the arrow measures %g, want %g", tt.from, tt.to, got, tt.want)
		}
	}
	// In a folded figure too, where its ends stand in two rows.
	p := Profile{ID: "x", Width: 340, Paths: []ProfilePath{steps(12)}, Span: &ProfileSpan{From: "L2", To: "T10", Text: "far"}}
	k, shafts, tall := arrowsOf(t, p)
	shows(t, k, "far")
	d := p.Paths[0].Points[19].Value - p.Paths[0].Points[4].Value
	if got := (shafts[0].Y1 - shafts[0].Y2) / tall; math.Abs(got-d) > 1e-9 {
		t.Errorf("across rows the arrow measures %g, want %g", got, d)
	}
}

// TestVariants: states of one name share a column and are named once.
func TestVariants(t *testing.T) {
	_, k := laidOut(t, Profile{ID: "x", Paths: []ProfilePath{
		path("dry", st("R", 0), ts("T", 14, 0.4), st("I", 5), st("P", -7)),
		{Name: "wet", Variant: "dry", Points: []ProfilePoint{st("R", 0), ts("T", 18, 0.4), st("P", -12)}}, // misses I
	}})
	shows(t, k, "R 0.0", "T 14.0", "P −7.0", "18.0", "−12.0", "dry", "wet")
	x := map[Role][]float64{}
	for _, l := range k.levels {
		x[l.Role] = append(x[l.Role], (l.X1+l.X2)/2)
	}
	if p, v := x["level"], x["level path-2"]; len(p) != 3 || len(v) != 1 || p[2] != v[0] {
		t.Errorf("levels at %v and, of the variant, at %v", p, v)
	}
}

// TestWhiskers reach to one standard deviation on either side, as the band does.
func TestWhiskers(t *testing.T) {
	sd := 1.5
	s, k := laidOut(t, Profile{ID: "x", Paths: []ProfilePath{path("", st("R", 0), ProfilePoint{Name: "T", Value: 14, Peak: true, Position: 0.5, SD: &sd}, st("P", -7))}})
	dy, _ := rises(s)
	n := 0
	for _, m := range s.Marks {
		if l, ok := m.(Line); ok && l.Role == "whisker" && l.X1 == l.X2 {
			n++
			if got := math.Abs(l.Y2-l.Y1) * 14 / dy[0]; math.Abs(got-3) > 1e-9 {
				t.Errorf("the whisker is %g long, want 3", got)
			}
		}
	}
	if n != 1 || len(k.bands) != 1 {
		t.Errorf("%d whiskers and %d bands, want one each", n, len(k.bands))
	}
}

// TestPictureAtALevel stands inside its label, over the name.
func TestPictureAtALevel(t *testing.T) {
	pic := &Picture{Width: 60, Height: 40, Alt: "a box", Marks: []Mark{Box{Role: "bar", W: 60, H: 40}}}
	s, _ := laidOut(t, Profile{ID: "x", Paths: []ProfilePath{path("", ProfilePoint{Name: "R", Picture: pic}, ts("T", 14, 0.4), st("P", -7))}})
	found := false
	for _, m := range s.Marks {
		g, ok := m.(Group)
		if !ok || g.Role != "label" || len(g.Marks) != 3 {
			continue
		}
		inner, ok := g.Marks[0].(Group)
		if !ok {
			continue
		}
		found = true
		p, name := inner.Bounds(), g.Marks[1].Bounds()
		if p.X1-p.X0 != 60 || p.Y1-p.Y0 != 40 || p.Y1 > name.Y0 || math.Abs((p.X0+p.X1)-(name.X0+name.X1)) > 1e-6 {
			t.Errorf("the picture at %v, its name at %v", p, name)
		}
	}
	if !found || !strings.Contains(s.Desc, "R (0.0), shown as a box") {
		t.Errorf("no picture, or not in %q", s.Desc)
	}
}
