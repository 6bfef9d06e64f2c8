package skeleton

import (
	"math"

	"saddlebook/diagram/lettering"
)

// Drawing is a skeletal formula in a frame from (0, 0) to (Width, Height).
type Drawing struct {
	Width, Height float64
	Lines         []Line    // strokes with round ends
	Rungs         []Line    // strokes with flat ends, of hashed wedges
	Waves         [][]Point // a start, then two control points and an end for each arc
	Fills         [][]Point // areas: wedges and arrow heads
	Texts         []Text
	Size          float64 // of the type
}

// Line is a straight stroke.
type Line struct{ A, B Point }

// Text starts at X on the base line Y.
type Text struct {
	X, Y float64
	Runs []lettering.Run
}

// margin around the strokes, in em, for their width.
const margin = 0.1

// framed moves a layout so that all of it lies in its frame.
func (l layout) framed() layout {
	lo, hi := Point{math.Inf(1), math.Inf(1)}, Point{math.Inf(-1), math.Inf(-1)}
	see := func(x0, y0, x1, y1 float64) {
		lo = Point{math.Min(lo.X, x0), math.Min(lo.Y, y0)}
		hi = Point{math.Max(hi.X, x1), math.Max(hi.Y, y1)}
	}
	for _, s := range l.pieces {
		for _, p := range s.points {
			see(p.X-margin, p.Y-margin, p.X+margin, p.Y+margin)
		}
	}
	for i := range l.m.atoms {
		lab := l.label(i)
		if lab == nil {
			continue
		}
		p := l.at(i)
		for _, r := range lab.rows {
			x, y := p.X+r.x, p.Y+r.y
			see(x, y-lettering.Ascent, x+lettering.Width(r.runs, 1), y+lettering.Descent)
		}
	}
	if math.IsInf(lo.X, 1) { // nothing to see
		return l
	}
	l.origin, l.width, l.height = lo, hi.X-lo.X, hi.Y-lo.Y
	return l
}

// Draw gives the formula with type of a size. A bond is 1.7 times as long, and more where
// labels ask for it.
func (m *Molecule) Draw(size float64) Drawing {
	l := m.em
	d := Drawing{Width: l.width * size, Height: l.height * size, Size: size}
	put := func(p Point) Point { return Point{(p.X - l.origin.X) * size, (p.Y - l.origin.Y) * size} }
	for _, s := range l.pieces {
		points := make([]Point, len(s.points))
		for k, p := range s.points {
			points[k] = put(p)
		}
		switch s.kind {
		case stroke:
			d.Lines = append(d.Lines, Line{points[0], points[1]})
		case rungs:
			d.Rungs = append(d.Rungs, Line{points[0], points[1]})
		case wave:
			d.Waves = append(d.Waves, points)
		case area:
			d.Fills = append(d.Fills, points)
		}
	}
	for i := range m.atoms {
		lab := l.label(i)
		if lab == nil {
			continue
		}
		for _, r := range lab.rows {
			p := put(l.at(i).plus(Point{r.x, r.y}, 1))
			d.Texts = append(d.Texts, Text{p.X, p.Y, r.runs})
		}
	}
	return d
}
