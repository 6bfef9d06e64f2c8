package diagram

import (
	"math"

	"saddlebook/diagram/axis"
	"saddlebook/diagram/lettering"
)

// block is text set in lines, one under the other.
type block struct {
	lines []textLine
	w, h  float64
	above *Picture // over the lines
}

type textLine struct {
	role Role
	runs []lettering.Run
	size float64
	w, y float64 // width; base line below the top of the block
}

func (b *block) add(role Role, runs []lettering.Run, size float64) {
	w := lettering.Width(runs, size)
	y := lettering.Ascent * size
	if n := len(b.lines); n > 0 {
		y = b.lines[n-1].y + lettering.Leading*size
	}
	b.lines = append(b.lines, textLine{role, runs, size, w, y})
	b.w = math.Max(b.w, w)
	b.h = y + lettering.Descent*size
}

// at sets the block with its top left corner at x, y.
func (b *block) at(x, y float64, align Anchor) []Mark {
	var marks []Mark
	if b.above != nil {
		marks = append(marks, b.above.At(x+(b.w-b.above.Width)*float64(align)/2, y))
		y += b.above.Height + pictureGap
	}
	for _, t := range b.lines {
		marks = append(marks, Words{
			Role: t.role, X: x + b.w*float64(align)/2, Y: y + t.y,
			Size: t.size, Anchor: align, Runs: t.runs,
		})
	}
	return marks
}

const (
	widestName = 160.0
	pictureGap = 3.0 // between a picture and the name under it
)

// block is the name of a state over its value. A word is parted only where it is
// wider than any name may be.
func (l *layout) block(s *state) *block {
	if s.block != nil {
		return s.block
	}
	var b block
	if n := l.numbers[s]; n > 0 {
		b.add("name", lettering.Plain(axis.Text(float64(n), 0)), nameSize)
		s.block = &b
		return &b
	}
	name := s.point.shown()
	if s.twin != nil {
		name = "" // it stands at the state that this one varies
	}
	for _, line := range lettering.Wrap(name, nameSize, math.Max(l.wrap, math.Min(widestName, lettering.Widest(name, nameSize)))) {
		b.add("name", line, nameSize)
	}
	for _, line := range lettering.Wrap(s.point.Text, valueSize, math.Max(l.wrap, 96)) {
		b.add("value", line, valueSize)
	}
	if p := s.point.Picture; p != nil && s.twin == nil {
		b.above = p
		b.w, b.h = math.Max(b.w, p.Width), b.h+p.Height+pictureGap
	}
	s.block = &b
	return &b
}

// inOneLine sets a short name and its value side by side, for narrow places.
func (b *block) inOneLine() (form, bool) {
	if len(b.lines) != 2 || b.above != nil || b.lines[0].w+b.lines[1].w > widestName {
		return form{}, false
	}
	const gap = 7
	name, value := b.lines[0], b.lines[1]
	return form{
		w: name.w + gap + value.w, h: (lettering.Ascent + lettering.Descent) * name.size,
		make: func(x, y float64, _ Anchor) []Mark {
			return []Mark{
				Words{Role: name.role, X: x, Y: y + name.y, Size: name.size, Runs: name.runs},
				Words{Role: value.role, X: x + name.w + gap, Y: y + name.y, Size: value.size, Runs: value.runs},
			}
		},
	}, true
}

// named reports whether the name of path i is shown: not when it is the only one
// and not when its last state says the same.
func (l *layout) named(i int) bool {
	path, route := l.p.Paths[i], l.net.routes[i]
	if len(route) == 0 {
		return false
	}
	if !l.net.ends && len(l.p.Paths) > 1 && path.Name != "" {
		// A row that goes on names what is told apart in it.
		for _, t := range route {
			if len(t.paths) == 1 {
				return true
			}
		}
		return false
	}
	return len(l.p.Paths) > 1 && path.Name != "" && path.Name != path.Points[len(path.Points)-1].shown()
}

const keyWidth = 26.0 // the piece of line before the name of a path, with its gap

// pathName is the name of a path behind a piece of its line.
func (l *layout) pathName(i int) *block {
	var b block
	for _, line := range lettering.Wrap(l.p.Paths[i].Name, nameSize, 110) {
		b.add("path-name", line, nameSize)
	}
	b.w += keyWidth
	return &b
}

// labels enters the names of all states and paths on the board.
func (l *layout) labels() {
	for _, s := range l.net.states {
		b := l.block(s)
		if len(b.lines) == 0 {
			continue
		}
		thick := 1.5
		if s.point.Peak {
			thick = 1.125
		}
		prefer := []side{below, above, right, left}
		if s.point.Peak || s.down && !s.up {
			prefer = []side{above, below, right, left}
		}
		forms := []form{{b.w, b.h, b.at}}
		if one, ok := b.inOneLine(); ok {
			forms = append(forms, one)
		}
		l.board.labels = append(l.board.labels, &label{forms: forms, bar: s.rect(thick), prefer: prefer})
	}
	for i, route := range l.net.routes {
		if !l.named(i) {
			continue
		}
		l.board.labels = append(l.board.labels, l.pathLabel(i, route))
	}
}

// pathLabel names a path at the last place that is its own.
func (l *layout) pathLabel(i int, route []*stretch) *label {
	b := l.pathName(i)
	last := route[len(route)-1]
	own, prefer := last.to, []side{right, below, above, left}
	if last.dir < 0 {
		prefer = []side{left, below, above, right}
	}
	for k := len(route) - 1; k >= 0 && len(own.paths) > 1; k-- {
		t := route[k]
		switch {
		case t.peak != nil && len(t.paths) == 1:
			own = t.peak
		case len(t.from.paths) == 1:
			own = t.from
		case len(t.paths) == 1:
			// Only the curve itself is its own: name its middle.
			m := (t.from.x + t.to.x) / 2
			own = &state{x: m, y: (t.from.y + t.to.y) / 2, half: 1, paths: t.paths}
		default:
			continue
		}
		prefer = []side{above, below, right, left}
	}
	role := l.style("path", []int{i})
	return &label{bar: own.rect(1.5), overhang: l.overhang(own), prefer: prefer, name: true, spots: l.spots(i, route), forms: []form{{b.w, b.h, func(x, y float64, _ Anchor) []Mark {
		ky := y + b.lines[0].y - 0.32*nameSize
		marks := []Mark{Line{Role: role, X1: x, Y1: ky, X2: x + keyWidth - 6, Y2: ky}}
		for _, t := range b.lines {
			marks = append(marks, Words{Role: t.role, X: x + keyWidth, Y: y + t.y, Size: t.size, Runs: t.runs})
		}
		return marks
	}}}}
}

// overhang is how far the name of a level stands out beyond its bar.
func (l *layout) overhang(s *state) float64 {
	if s.point.key() == "" {
		return 0
	}
	return math.Max(0, l.block(s).w/2-s.half)
}

// spots lists places on the curves that path i has to itself, from its end.
func (l *layout) spots(i int, route []*stretch) []Rect {
	var out []Rect
	for k := len(route) - 1; k >= 0; k-- {
		if t := route[k]; len(t.paths) == 1 {
			for m := len(t.trace) - 3; m > 2; m -= 3 {
				out = append(out, t.trace[m])
			}
		}
	}
	return out
}

// pictureFault says why the picture of a point cannot be shown in a figure of
// some width.
func pictureFault(q ProfilePoint, width float64) error {
	p := q.Picture
	if p == nil {
		return nil
	}
	most := width - 100 // the axis and some air
	if !(p.Width > 0 && p.Height > 0 && p.Width <= most && p.Height <= 1000) {
		return refuse("make it smaller or the figure wider", "the picture at %q is %g by %g, and a figure %g wide has room for one of up to %g by 1000", q.key(), p.Width, p.Height, width, most)
	}
	for _, m := range p.Marks {
		if b := m.Bounds(); !(b.X0 >= -0.01 && b.Y0 >= -0.01 && b.X1 <= p.Width+0.01 && b.Y1 <= p.Height+0.01) {
			return refuse("keep its marks inside its frame", "the picture at %q has a mark outside its frame of %g by %g", q.key(), p.Width, p.Height)
		}
	}
	return nil
}
