package diagram

import (
	"fmt"
	"math"
	"math/rand/v2"
	"reflect"
	"strings"
	"testing"

	"saddlebook/diagram/lettering"
)

var someNames = []string{
	"R", "I", "A", "P1", "TS2", "TSa‡", "enone 3", "1,2-adduct", "1,4-adduct", "H2O + CO2", "Pd(PPh3)4",
	"trans-PdBr(Ar)(PPh3)2", "NH4+", "solvent-separated ion pair of the lithium enolate", "tetrahedral intermediate",
	"2-(1-hydroxy-2,2,6,6-tetramethylpiperidin-4-yl)acetonitrile", "遷移状態", "x", "resting state", "[Cu(I)–alkyne]",
	"averyveryverylongnamewithoutanyplacetobreakitanywhereatall", "</text><script>", "é\u0301\u0302", "π-complex",
}

// randomProfile gives a profile that is legal, and hard to letter.
func randomProfile(r *rand.Rand) Profile {
	span := []float64{1e-3, 0.5, 5, 30, 30, 30, 400, 1e9}[r.IntN(8)]
	value := func() float64 {
		switch r.IntN(6) {
		case 0:
			return 0
		case 1:
			return span * (0.5 + 1e-3*r.Float64()) // near-equal
		default:
			return span * (1.6*r.Float64() - 0.8)
		}
	}
	serial := 0
	point := func(peak bool) ProfilePoint {
		serial++
		label := someNames[r.IntN(len(someNames))]
		q := ProfilePoint{Name: fmt.Sprint(label, " ", serial), Value: value(), Peak: peak, Position: math.NaN()}
		if r.IntN(3) > 0 {
			q.Label = label
		}
		if peak {
			q.Value = span * (0.7 + 0.3*r.Float64()*float64(r.IntN(2)))
			if r.IntN(4) > 0 {
				q.Position = float64(r.IntN(11)) / 10
			}
		}
		if r.IntN(8) == 0 {
			sd := span * 0.1 * r.Float64()
			q.SD = &sd
		}
		return q
	}
	p := Profile{ID: "p", Unit: []string{"kcal/mol", "kJ/mol", ""}[r.IntN(3)], Width: []float64{318, 340, 408, 480, 600, 720, 720, 1000}[r.IntN(8)], Sides: r.IntN(5) == 0}
	if r.IntN(3) == 0 {
		p.Zero = "R + X"
	}
	paths := 1 + r.IntN(4)
	if p.Sides {
		paths = 2
	}
	states := 2 + r.IntN(9)/paths*2
	if r.IntN(6) == 0 {
		states = 4 + r.IntN(28/paths)
	}
	var trunk []ProfilePoint
	for i := 0; i < paths; i++ {
		var points []ProfilePoint
		if i == 0 || len(trunk) == 0 {
			points = append(points, point(false))
		} else {
			// Leave the first path at one of its states.
			k := r.IntN(len(trunk))
			for k > 0 && trunk[k].Peak || p.Sides && k > 0 {
				k--
			}
			points = append(points, trunk[:k+1]...)
		}
		for n := 0; n < states; n++ {
			if r.IntN(5) > 0 {
				points = append(points, point(true))
			}
			points = append(points, point(false))
		}
		if i == 0 {
			trunk = points[:max(1, len(points)-1)]
			for len(trunk) > 0 && trunk[len(trunk)-1].Peak {
				trunk = trunk[:len(trunk)-1]
			}
		}
		p.Paths = append(p.Paths, ProfilePath{Name: fmt.Sprint(someNames[r.IntN(14)], " ", i), Points: points})
	}
	measureSome(r, &p, span)
	return p
}

// measureSome adds what is optional: a turn, barriers, a span, pictures, a variant.
func measureSome(r *rand.Rand, p *Profile, span float64) {
	first := &p.Paths[0]
	again := len(first.Points) > 2 && r.IntN(4) == 0
	if again {
		last := &first.Points[len(first.Points)-1]
		last.Again, last.Name, last.Label = true, "", ""
	}
	if r.IntN(3) == 0 {
		for _, q := range first.Points {
			if q.Peak && r.IntN(2) == 0 {
				p.Barriers = append(p.Barriers, ProfileBarrier{Peak: q.key()})
			}
			if q.Peak && r.IntN(3) == 0 {
				p.Barriers = append(p.Barriers, ProfileBarrier{Peak: q.key(), Back: true})
			}
		}
	}
	if n := len(first.Points) - 1; n > 2 && r.IntN(3) == 0 {
		i := r.IntN(n)
		k := (i + 1 + r.IntN(n-1)) % n
		if again || i < k {
			p.Span = &ProfileSpan{Path: first.Name, From: first.Points[i].key(), To: first.Points[k].key()}
		}
	}
	if r.IntN(6) == 0 {
		q := &first.Points[1+r.IntN(len(first.Points)-1)]
		w, h := 20+80*r.Float64(), 20+50*r.Float64()
		q.Picture = &Picture{Width: w, Height: h, Marks: []Mark{Box{Role: "bar", W: w, H: h}}}
	}
	if !p.Sides && r.IntN(5) == 0 {
		v := ProfilePath{Name: "variant of it", Variant: first.Name}
		for _, q := range first.Points {
			q.Value += span * 0.2 * (r.Float64() - 0.5)
			q.Picture = nil
			v.Points = append(v.Points, q)
		}
		p.Paths = append(p.Paths, v)
	}
}

// inked is what a scene shows, taken apart for the tests below.
type inked struct {
	labels  []Rect // of any text
	texts   []string
	levels  []Line
	bands   []Rect
	leaders []Line
	zeros   []Line
	others  []Line // measures, guides, seams
	curve   []Rect // boxes along curves
	sizes   []float64
}

func takeApart(t *testing.T, marks []Mark) inked {
	var k inked
	text := func(marks []Mark) string {
		var parts []string
		for _, m := range marks {
			if w, ok := m.(Words); ok {
				parts = append(parts, lettering.Text(w.Runs))
			}
		}
		return strings.Join(parts, " ")
	}
	for _, m := range marks {
		switch m := m.(type) {
		case Group:
			for _, m := range m.Marks {
				if w, ok := m.(Words); ok {
					k.sizes = append(k.sizes, w.Size)
				}
			}
			k.labels, k.texts = append(k.labels, m.Bounds()), append(k.texts, text(m.Marks))
		case Words:
			k.sizes = append(k.sizes, m.Size)
			k.labels, k.texts = append(k.labels, m.Bounds()), append(k.texts, text([]Mark{m}))
		case Box:
			k.bands = append(k.bands, m.Bounds())
		case Line:
			switch base, _, _ := strings.Cut(string(m.Role), " "); base {
			case "level", "peak":
				k.levels = append(k.levels, m)
			case "leader":
				k.leaders = append(k.leaders, m)
			case "zero":
				k.zeros = append(k.zeros, m)
			case "measure", "guide", "seam":
				k.others = append(k.others, m)
			case "axis", "tick", "whisker":
			default:
				t.Errorf("a line with the role %q", m.Role)
			}
		case Curve:
			var x, y float64
			for _, c := range m.Path {
				qx, qy := x, y
				for i := 1; i <= 60; i++ {
					v := float64(i) / 60
					px, py := x+(c.X-x)*v, y+(c.Y-y)*v
					if c.Op == Cubic {
						u := 1 - v
						px = u*u*u*x + 3*u*u*v*c.X1 + 3*u*v*v*c.X2 + v*v*v*c.X
						py = u*u*u*y + 3*u*u*v*c.Y1 + 3*u*v*v*c.Y2 + v*v*v*c.Y
					}
					if c.Op == To || c.Op == Cubic {
						k.curve = append(k.curve, Line{X1: qx, Y1: qy, X2: px, Y2: py}.Bounds())
					}
					qx, qy = px, py
				}
				x, y = c.X, c.Y
			}
		default:
			t.Errorf("a mark of type %T", m)
		}
	}
	return k
}

// TestRandomProfiles holds what a figure promises: no label covers another, a
// level, a curve or a leader; none leaves the frame; no level covers another.
func TestRandomProfiles(t *testing.T) {
	n := 300
	if testing.Short() {
		n = 60
	}
	leaders, labels := 0, 0
	for seed := range n {
		p := randomProfile(rand.New(rand.NewPCG(uint64(seed), 1)))
		s, err := p.Scene()
		if err != nil {
			t.Fatalf("seed %d: %v", seed, err)
		}
		if err := s.Check(); err != nil {
			t.Errorf("seed %d: %v", seed, err)
		}
		if seed%8 == 0 {
			if again, _ := p.Scene(); !reflect.DeepEqual(s, again) {
				t.Errorf("seed %d: two layouts differ", seed)
			}
		}
		k := takeApart(t, s.Marks)
		if s.Width != p.Width {
			t.Errorf("seed %d: %g wide, want %g", seed, s.Width, p.Width)
		}
		for _, size := range k.sizes {
			if p.Width <= 408 && size*84/25.4*72/s.Width < 7 {
				t.Errorf("seed %d: text of size %g in a figure %g wide is below 7 pt at 84 mm", seed, size, s.Width)
			}
		}
		leaders, labels = leaders+len(k.leaders), labels+len(k.labels)
		for i, a := range k.labels {
			bad := func(format string, args ...any) {
				t.Errorf("seed %d: label %q %v "+format, append([]any{seed, k.texts[i], a}, args...)...)
			}
			if a.X0 < 0 || a.Y0 < 0 || a.X1 > s.Width || a.Y1 > s.Height {
				bad("leaves the frame %g by %g", s.Width, s.Height)
			}
			for j, b := range k.labels[:i] {
				if a.grown(2).meets(b) {
					bad("is less than 2 from %q %v", k.texts[j], b)
				}
			}
			for _, c := range k.curve {
				if a.grown(2).meets(c) {
					bad("covers a curve at %v", c)
					break
				}
			}
			for _, l := range k.others {
				if a.grown(2).meets(l.Bounds().grown(1e-6)) {
					bad("covers the line %v", l)
				}
			}
			for _, l := range k.levels {
				if a.grown(2).meets(l.Bounds()) {
					bad("covers the level %v", l)
				}
			}
			for _, b := range k.bands {
				if a.meets(b) {
					bad("covers the band %v", b)
				}
			}
			for _, l := range k.leaders {
				if crosses(l, a) {
					bad("is crossed by the leader %v", l)
				}
			}
			for _, l := range k.zeros {
				if crosses(l, a.grown(-0.5)) {
					bad("stands on the line of reference %v", l)
				}
			}
		}
		for i, a := range k.levels {
			for _, b := range k.levels[:i] {
				level := strings.HasPrefix(string(a.Role), "level") && strings.HasPrefix(string(b.Role), "level")
				if level && math.Abs(a.Y1-b.Y1) < 3 && a.X1 < b.X2 && b.X1 < a.X2 {
					t.Errorf("seed %d: the levels %v and %v cover each other", seed, a, b)
				}
			}
		}
	}
	t.Logf("%d labels, %d leaders", labels, leaders)
}
