package skeleton

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"saddlebook/diagram/lettering"
)

// sound holds a drawing to its frame and keeps strokes and letters apart, on the drawing alone: the
// letters' boxes are made anew here, from the heights of capitals and small letters.
func sound(t *testing.T, d Drawing) {
	t.Helper()
	if !(d.Width >= 0 && d.Height >= 0 && d.Width < 1e5 && d.Height < 1e5) {
		t.Fatalf("a frame of %g by %g", d.Width, d.Height)
	}
	in := func(p Point) {
		if !(p.X >= -1e-6 && p.Y >= -1e-6 && p.X <= d.Width+1e-6 && p.Y <= d.Height+1e-6) {
			t.Fatalf("%v is outside the frame of %g by %g", p, d.Width, d.Height)
		}
	}
	type ink struct {
		x0, y0, x1, y1 float64
		text           int
		round          bool // an oval: C, O, S
	}
	var letters []ink
	for k, w := range d.Texts {
		in(Point{w.X, w.Y - lettering.Ascent*d.Size})
		in(Point{w.X + lettering.Width(w.Runs, d.Size), w.Y + lettering.Descent*d.Size})
		x := w.X
		for _, r := range w.Runs {
			y, h := w.Y, 0.69*d.Size
			switch r.Shift {
			case lettering.Sub:
				y, h = y+lettering.Drop*d.Size, h*lettering.Small
			case lettering.Super:
				y, h = y-lettering.Rise*d.Size, 0.4*d.Size
			}
			for _, c := range r.Text {
				end := x + lettering.Width([]lettering.Run{{Text: string(c), Shift: r.Shift}}, d.Size)
				letters = append(letters, ink{x + 0.04*d.Size, y - h, end - 0.04*d.Size, y, k, strings.ContainsRune("COS", c)})
				x = end
			}
		}
	}
	for i, a := range letters {
		for _, b := range letters[:i] {
			if a.text != b.text && a.x0 < b.x1 && b.x0 < a.x1 && a.y0 < b.y1 && b.y0 < a.y1 {
				t.Fatalf("the texts %q and %q overlap", lettering.Text(d.Texts[a.text].Runs), lettering.Text(d.Texts[b.text].Runs))
			}
		}
	}
	clear := 0.05 * d.Size
	stroke := func(p, q Point) {
		in(p)
		in(q)
		for f := 0.0; f <= 1; f += 0.05 {
			x, y := p.X+f*(q.X-p.X), p.Y+f*(q.Y-p.Y)
			for _, a := range letters {
				u, v := math.Abs(2*x-a.x0-a.x1)/(a.x1-a.x0+2*clear), math.Abs(2*y-a.y0-a.y1)/(a.y1-a.y0+2*clear)
				if u < 1 && v < 1 && !(a.round && u*u+v*v > 1) {
					t.Fatalf("a stroke runs into %q at %g, %g", lettering.Text(d.Texts[a.text].Runs), x, y)
				}
			}
		}
	}
	for _, l := range append(d.Lines, d.Rungs...) {
		stroke(l.A, l.B)
	}
	for _, w := range append(d.Waves, d.Fills...) {
		for k := 1; k < len(w); k++ {
			stroke(w[k-1], w[k])
		}
	}
}

// turned gives the table with its coordinates turned by an angle and, if mirrored, x reversed.
func turned(text string, angle float64, mirrored bool) string {
	s, c := math.Sincos(angle)
	lines := strings.Split(text, "\n")
	for i, l := range lines {
		var x, y float64
		put := func(format string) string {
			if mirrored {
				x = -x
			}
			return fmt.Sprintf(format, c*x-s*y, s*x+c*y)
		}
		if f := strings.Fields(l); len(f) >= 7 && f[0] == "M" && f[1] == "V30" && strings.Contains(f[4], ".") {
			fmt.Sscan(f[4], &x)
			fmt.Sscan(f[5], &y)
			lines[i] = strings.Replace(l, f[4]+" "+f[5], put("%.6f %.6f"), 1)
		} else if len(l) > 33 && l[5] == '.' && l[15] == '.' {
			fmt.Sscan(l[:10], &x)
			fmt.Sscan(l[10:20], &y)
			lines[i] = put("%10.4f%10.4f") + l[20:]
		}
	}
	return strings.Join(lines, "\n")
}

// census counts what does not depend on how the page is turned: bonds by kind of stroke, and letters.
func census(m *Molecule) string {
	kinds := map[string]int{}
	dashes := map[int]bool{}
	for _, p := range m.em.pieces {
		b := m.bonds[p.bond]
		if b.order == aromatic || b.order == hydrogen || b.look == hash {
			dashes[p.bond] = true // their number follows the length left between labels
			continue
		}
		kinds[fmt.Sprint(b.order, b.look, p.kind)]++
	}
	letters := 0
	for _, t := range m.Draw(10).Texts {
		letters += len([]rune(lettering.Text(t.Runs)))
	}
	return fmt.Sprint(m.Formula, kinds, len(dashes), letters)
}

func TestTurnedAndMirrored(t *testing.T) {
	for name, text := range testFiles(t) {
		m, err := Read([]byte(text))
		if err != nil {
			t.Fatal(err)
		}
		want := census(m)
		refused := 0
		for k := range 24 {
			for _, mirrored := range []bool{false, true} {
				u, err := Read([]byte(turned(text, float64(k)*math.Pi/12, mirrored)))
				if err != nil {
					refused++ // long names need their own room in each direction
					continue
				}
				if got := census(u); got != want {
					t.Errorf("%s, turned by %d°, mirrored %t: %s, want %s", name, 15*k, mirrored, got, want)
				}
				sound(t, u.Draw(10))
			}
		}
		if refused > 12 {
			t.Errorf("%s: %d of 48 positions are refused", name, refused)
		}
	}
}

// TestSecondLineInside: the second line of a double bond in a ring lies nearer to the
// middle of the ring, however the ring is turned, numbered or mirrored.
func TestSecondLineInside(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for n := 3; n <= 8; n++ {
		for range 40 {
			turn, sense := 2*math.Pi*r.Float64(), float64(2*r.IntN(2)-1)
			atoms, bonds := make([]string, n), make([]string, n)
			for i := range n {
				s, c := math.Sincos(turn + sense*2*math.Pi*float64(i)/float64(n))
				atoms[i] = at(3*c, 3*s, []string{"C", "C", "N"}[r.IntN(3)])
				a, b := i+1, (i+1)%n+1
				if r.IntN(2) == 0 {
					a, b = b, a
				}
				bonds[i] = fmt.Sprintf("%3d%3d%3d  0", a, b, 1+(i+1)%2)
			}
			m, err := Read([]byte(v2(atoms, bonds)))
			if err != nil {
				t.Fatal(err)
			}
			var middle Point
			for i := range m.atoms {
				middle = middle.plus(m.em.at(i), 1/float64(n))
			}
			for k, b := range m.bonds {
				if b.order != double {
					continue
				}
				var far []float64
				for _, p := range m.em.pieces {
					if p.bond == k {
						far = append(far, p.points[0].plus(p.points[1], 1).plus(middle, -2).length()/2)
					}
				}
				if len(far) != 2 || !(far[1] < far[0]-0.8*pair) {
					t.Fatalf("ring of %d, bond %d: lines at %v from the middle", n, k+1, far)
				}
			}
		}
	}
}

// randomTable grows a tree on a triangular lattice, with some rings and some lone atoms.
func randomTable(r *rand.Rand) string {
	var atoms, bonds []string
	taken := map[[2]int]int{}
	var cells [][2]int
	symbols := []string{"C", "C", "C", "C", "C", "N", "O", "O", "S", "Cl", "Ph", "Boc", "OMe", "R1", "Pd", "P", "Si", "B", "H", "*"}
	put := func(c [2]int) int {
		taken[c] = len(cells) + 1
		cells = append(cells, c)
		s := symbols[r.IntN(len(symbols))]
		line := at(float64(c[0])+float64(c[1])/2, float64(c[1])*math.Sqrt(3)/2, s) + " 0  0"
		if r.IntN(8) == 0 {
			line = at(float64(c[0])+float64(c[1])/2, float64(c[1])*math.Sqrt(3)/2, s) + fmt.Sprintf(" 0  %d", r.IntN(8))
		}
		atoms = append(atoms, line)
		return len(cells)
	}
	put([2]int{0, 0})
	steps := [][2]int{{1, 0}, {0, 1}, {-1, 1}, {-1, 0}, {0, -1}, {1, -1}}
	for range r.IntN(24) {
		c := cells[r.IntN(len(cells))]
		s := steps[r.IntN(6)]
		to := [2]int{c[0] + s[0], c[1] + s[1]}
		if taken[to] > 0 {
			continue
		}
		kind := []int{1, 1, 1, 1, 2, 2, 3, 9, 10}[r.IntN(9)]
		stereo := 0
		if kind == 1 {
			stereo = []int{0, 0, 0, 1, 4, 6}[r.IntN(6)]
		} else if kind == 2 {
			stereo = 3 * r.IntN(2)
		}
		from := taken[c]
		bonds = append(bonds, fmt.Sprintf("%3d%3d%3d%3d", from, put(to), kind, stereo))
	}
	return turned(v2(atoms, bonds), 2*math.Pi*r.Float64(), r.IntN(2) == 0)
}

func TestRandomTables(t *testing.T) {
	r := rand.New(rand.NewPCG(4, 7))
	drawn := 0
	const n = 600
	for range n {
		text := randomTable(r)
		m, err := Read([]byte(text))
		if err != nil {
			if e := err.(*Error); e.Line == 0 || e.Fix == "" {
				t.Fatalf("%v\n%s", err, text)
			}
			continue
		}
		drawn++
		sound(t, m.Draw(10))
		if t.Failed() {
			t.Fatal(text)
		}
		again, _ := Read([]byte(text))
		if fmt.Sprint(again.Draw(7)) != fmt.Sprint(m.Draw(7)) {
			t.Fatalf("drawn twice, differs:\n%s", text)
		}
		small, large := m.Draw(8), m.Draw(16)
		if math.Abs(2*small.Width-large.Width) > 1e-9 || len(small.Lines) != len(large.Lines) {
			t.Fatal("the drawing does not follow its size")
		}
	}
	if drawn < n*3/4 {
		t.Errorf("%d of %d tables are drawn", drawn, n)
	}
	t.Logf("%d of %d drawn", drawn, n)
}

func TestZero(t *testing.T) {
	if d := new(Molecule).Draw(10); d.Width != 0 || len(d.Lines) > 0 {
		t.Errorf("%+v", d)
	}
}

func BenchmarkRead(b *testing.B) {
	for _, name := range []string{"tetracycle", "sugar"} {
		text := testFiles(b)[name]
		b.Run("molecule="+name, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if _, err := Read([]byte(text)); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
