package diagram

import (
	"errors"
	"fmt"
	"math/rand/v2"
	"reflect"
	"strings"
	"testing"

	"saddlebook/diagram/lettering"
)

// randomNetwork gives a network of a number of nodes that is legal, and hard to
// letter: a tree or a cycle, with further steps.
func randomNetwork(r *rand.Rand, size int) Network {
	n := Network{ID: "n", Width: float64(320 + 80*r.IntN(8)), FluxUnit: []string{"", "mol/L/s"}[r.IntN(2)]}
	for i := range size {
		label := someNames[r.IntN(len(someNames))]
		d := NetworkNode{Name: fmt.Sprint(label, " ", i), Label: label}
		if r.IntN(3) == 0 {
			d.Text = fmt.Sprintf("%.3g mol/L", r.Float64())
		}
		if r.IntN(4) == 0 {
			share := r.Float64()
			d.Share = &share
		}
		if r.IntN(9) == 0 {
			d.Note = "resting state"
		}
		d.Beside = i > 1 && r.IntN(12) == 0
		n.Nodes = append(n.Nodes, d)
	}
	flux := r.IntN(3) > 0
	alone := r.IntN(3) > 0 && size < 20 // a cycle on its own
	add := func(from, to int) {
		label := fmt.Sprint("TS", len(n.Steps)+1)
		if r.IntN(6) == 0 {
			label = someNames[r.IntN(len(someNames))]
		}
		s := NetworkStep{Name: fmt.Sprint(len(n.Steps)), Label: label, Returns: r.IntN(2) == 0}
		s.From, s.To = []NetworkTerm{{Node: n.Nodes[from].Name}}, []NetworkTerm{{Node: n.Nodes[to].Name}}
		for _, side := range []*[]NetworkTerm{&s.From, &s.To} {
			for !alone && r.IntN(4) == 0 && len(*side) < 4 {
				extra := n.Nodes[r.IntN(size)].Name
				if !strings.Contains(fmt.Sprint(*side), extra) {
					*side = append(*side, NetworkTerm{Node: extra})
				}
			}
			for i := range *side {
				(*side)[i].N = []int{0, 0, 1, 1, 2, 12}[r.IntN(6)]
			}
		}
		if flux {
			f := []float64{r.Float64(), 1e-5 * r.Float64(), 0}[r.IntN(3)]
			if s.Returns && r.IntN(2) == 0 {
				f = -f
			}
			s.Flux = &f
		}
		if r.IntN(7) == 0 {
			s.Text = "k = 3.2 × 10^-4 s^-1"
		}
		if r.IntN(9) == 0 {
			s.Note = "limiting step"
		}
		n.Steps = append(n.Steps, s)
	}
	if (alone || r.IntN(3) == 0) && size > 3 { // a cycle, and singles
		ring := 2 + r.IntN(min(6, size-2))
		for i := range ring {
			add(i, (i+1)%ring)
			n.Cycle = append(n.Cycle, n.Steps[i].Name)
			n.Nodes[i].Beside = false
		}
		for i := ring; i < size; i++ {
			k := r.IntN(ring)
			if s := &n.Steps[k]; r.IntN(2) == 0 && len(s.From) < maxNetworkTerms && len(s.To) < maxNetworkTerms {
				term := NetworkTerm{Node: n.Nodes[i].Name, N: 1 + r.IntN(2)}
				if r.IntN(2) == 0 {
					s.From = appendTerm(s.From, term)
				} else {
					s.To = appendTerm(s.To, term)
				}
			} else {
				add(k, i)
			}
		}
	} else {
		for i := 1; i < size; i++ {
			add(max(0, i-1-r.IntN(3)), i)
		}
		for range r.IntN(size/2 + 1) {
			if a, b := r.IntN(size), r.IntN(size); a != b {
				add(a, b)
			}
		}
	}
	n.Steps = n.Steps[:min(len(n.Steps), maxNetworkSteps)]
	return n
}

func appendTerm(terms []NetworkTerm, t NetworkTerm) []NetworkTerm {
	for _, k := range terms {
		if k.Node == t.Node {
			return terms
		}
	}
	return append(terms, t)
}

// TestRandomNetworks holds what the figure promises: no text covers another text,
// a line or the frame of a node, no line runs through a node, no two nodes
// overlap, and nothing leaves the frame.
func TestRandomNetworks(t *testing.T) {
	n := 120
	if testing.Short() {
		n = 40
	}
	kinds := map[string]int{}
	wider := 0
	for seed := range n {
		r := rand.New(rand.NewPCG(uint64(seed), 17))
		size := 2 + r.IntN(16)
		if seed%10 == 0 {
			size = maxNetworkNodes
		}
		f := randomNetwork(r, size)
		s, err := f.Scene()
		if err != nil {
			t.Fatalf("seed %d: %v", seed, err)
		}
		if err := s.Check(); err != nil {
			t.Errorf("seed %d: %v", seed, err)
		}
		if seed%5 == 0 {
			if again, _ := f.Scene(); !reflect.DeepEqual(s, again) {
				t.Errorf("seed %d: two layouts differ", seed)
			}
		}
		p, _ := f.plan()
		kinds[p.kind]++
		if s.Width > f.Width {
			wider++
		}
		soundNetwork(t, fmt.Sprint("seed ", seed, " ", p.kind), s)
	}
	t.Logf("%v, %d wider than wished", kinds, wider)
	for _, k := range []string{"ring", "right", "down"} {
		if kinds[k] < n/40 {
			t.Errorf("%d figures of %d are laid out %q: the test sees too few", kinds[k], n, k)
		}
	}
}

func soundNetwork(t *testing.T, name string, s Scene) {
	var boxes, frames []Rect
	var words []string
	for _, m := range s.Marks {
		switch m := m.(type) {
		case Words:
			boxes, words = append(boxes, m.Bounds()), append(words, lettering.Text(m.Runs))
		case Group:
			text := ""
			for _, k := range m.Marks {
				text += lettering.Text(k.(Words).Runs) + " "
			}
			if text != "" {
				boxes, words = append(boxes, m.Bounds()), append(words, text)
			}
		case Box:
			if strings.HasPrefix(string(m.Role), "node") {
				frames = append(frames, m.Bounds())
			}
		}
	}
	for i, a := range boxes {
		bad := func(format string, args ...any) {
			t.Errorf("%s: text %q %.5g "+format, append([]any{name, words[i], a}, args...)...)
		}
		if a.X0 < margin-0.01 || a.Y0 < margin-0.01 || a.X1 > s.Width-margin+0.01 || a.Y1 > s.Height-margin+0.01 {
			bad("leaves the frame %g by %g", s.Width, s.Height)
		}
		for k, b := range boxes[:i] {
			if a.grown(2).meets(b) {
				bad("is less than 2 from %q %.5g", words[k], b)
			}
		}
		for _, f := range frames {
			inside := a.X0 >= f.X0+2 && a.X1 <= f.X1-2 && a.Y0 >= f.Y0+2 && a.Y1 <= f.Y1-2
			if !inside && a.grown(2).meets(f) {
				bad("is less than 2 from the frame %.5g", f)
			}
		}
	}
	for i, f := range frames {
		for _, g := range frames[:i] {
			if f.grown(2).meets(g) {
				t.Errorf("%s: the nodes %.5g and %.5g overlap", name, f, g)
			}
		}
	}
	for _, m := range s.Marks {
		var points []spot
		gap := 2.0
		switch m := m.(type) {
		case Curve:
			if strings.HasPrefix(string(m.Role), "band") {
				continue // soft
			}
			points = flat(m.Path)
		case Dot:
			points = []spot{{m.X - m.R, m.Y}, {m.X, m.Y - m.R}, {m.X + m.R, m.Y}, {m.X, m.Y + m.R}, {m.X - m.R, m.Y}}
		default:
			continue
		}
		for k := 1; k < len(points); k++ {
			line := Line{X1: points[k-1].x, Y1: points[k-1].y, X2: points[k].x, Y2: points[k].y}
			for i, a := range boxes {
				if crosses(line, a.grown(gap)) {
					t.Errorf("%s: text %q %.5g is less than %g from a line at %.5g", name, words[i], a, gap, points[k])
				}
			}
			for _, f := range frames {
				if crosses(line, f.grown(0.4)) {
					t.Errorf("%s: a line at %.5g runs into the node %.5g", name, points[k], f)
				}
			}
		}
	}
}

// TestNetworkColumn: at the width of a journal column (84 mm, common practice)
// no text is smaller than 7 pt where the network fits 400.
func TestNetworkColumn(t *testing.T) {
	fit := 0
	for seed := range 40 {
		r := rand.New(rand.NewPCG(uint64(seed), 19))
		n := randomNetwork(r, 2+r.IntN(6))
		n.Width = 340 + 20*float64(r.IntN(4))
		s, err := n.Scene()
		if err != nil {
			t.Fatal(err)
		}
		if s.Width > 400 {
			continue
		}
		fit++
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
	if fit < 20 {
		t.Errorf("%d networks fit the column: the test sees too few", fit)
	}
}

// FuzzNetwork: whatever the numbers and texts, a figure is sound or refused with
// a remedy.
func FuzzNetwork(f *testing.F) {
	f.Add(uint64(1), 720.0, 1.0, 1, "1,2-adduct")
	f.Add(uint64(2), 240.0, 1e300, -1, "</text>")
	f.Add(uint64(3), 4000.0, 1e-320, 99, "")
	f.Add(uint64(6), 300.0, 0.0, 100, " ")
	f.Fuzz(func(t *testing.T, seed uint64, width, flux float64, count int, text string) {
		r := rand.New(rand.NewPCG(seed, 9))
		n := randomNetwork(r, 2+r.IntN(10))
		n.Width, n.FluxUnit, n.CycleName = width, text, text
		for i := range n.Nodes {
			n.Nodes[i].Text, n.Nodes[i].Note = text, text
		}
		for i := range n.Steps {
			s := &n.Steps[i]
			if s.Flux != nil {
				v := *s.Flux * flux
				s.Flux = &v
			}
			s.From[0].N, s.Text = count, text
		}
		s, err := n.Scene()
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
