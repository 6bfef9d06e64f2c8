package diagram

import (
	"fmt"
	"math"

	"saddlebook/diagram/axis"
)

// Sizes of text and space, in SVG user units.
const (
	nameSize  = 13.0
	valueSize = 12.0
	tickSize  = 12.0
	margin    = 8.0 // around the figure
	leastStep = 92.0
	rowGap    = 24.0
)

// ruling is the value scale that all rows of a profile share.
type ruling struct {
	ticks []float64
	text  []string // of the ticks
	tall  float64  // height of a unit of value
	low   float64
	high  float64 // ends of the scale
	left  float64 // of the value axis
}

// layout turns a net, or a row of one, into marks.
type layout struct {
	ruling
	p        Profile
	net      *net
	whole    *net // of which net is a row, or net itself
	scale    axis.Scale
	ease     float64 // how much more room than usual it gets
	least    float64 // least step
	step     float64 // from column to column
	tight    int     // what the outer columns give up for want of room
	start    float64 // of the first column
	after    float64 // room behind the last column
	right    float64 // end of the figure
	wrap     float64 // widest line of a name
	measures []measure
	numbers  map[*state]int // instead of names; nil: none
	board    board
}

// drawn lays the net out in one row, or in several if it does not fit. Where
// labels find no places without overlap, it is tried again with more room.
func (p Profile) drawn(n *net) (Scene, error) {
	all, err := p.measures(n)
	if err != nil {
		return Scene{}, err
	}
	if p.Desc == "" {
		p.Desc = p.words(all)
	}
	var best []Mark
	least := math.MaxInt
	for _, try := range []struct {
		ease     float64
		numbered bool
	}{{1, false}, {1.25, false}, {1.6, false}, {1.25, true}, {1.6, true}, {2, true}, {2.5, true}} {
		whole := layout{p: p, net: n, whole: n, measures: all, ease: try.ease}
		whole.rule(1)
		cuts := whole.cuts()
		if p.Sides && !whole.fits() {
			q := p
			q.Sides = false
			if m, err := q.net(); err == nil { // else both sides are the same
				return q.drawn(m)
			}
		}
		marks, clashes := whole.rows(cuts, try.numbered)
		if clashes < least {
			best, least = marks, clashes
		}
		if clashes == 0 {
			break
		}
	}
	return frame(p.ID, p.Title, p.Desc, p.Width, best), nil
}

// rows draws the rows between cuts, one under the other, and counts the labels
// that found no place without overlap. numbers: rows with such labels show
// numbers instead of names.
func (l *layout) rows(cuts []int, numbers bool) (marks []Mark, clashes int) {
	rows := []*net{l.net}
	if len(cuts) > 2 {
		l.rule(0.75)
		rows = l.net.fold(cuts, l.tall)
	}
	var lines []*layout
	step := math.Inf(1)
	for _, row := range rows {
		r := &layout{ruling: l.ruling, p: l.p, net: row, whole: l.net, ease: l.ease}
		r.mine(l.measures)
		r.crop()
		step = math.Min(step, r.measureStep())
		lines = append(lines, r)
	}
	bottom := 0.0
	for i, r := range lines {
		again := *r
		r.stand(step)
		row := r.row()
		if numbers && r.board.overlaps() > 0 {
			r = &again
			r.numbered()
			r.stand(step)
			row = r.row()
			row = append(row, r.key(bounds(row).Y1+12)...)
		}
		clashes += r.board.overlaps()
		if i > 0 {
			row = moved(row, 0, bottom+rowGap-bounds(row).Y0)
		}
		bottom = bounds(row).Y1
		marks = append(marks, row...)
	}
	return marks, clashes
}

// row draws one row.
func (l *layout) row() []Mark {
	l.peaks()
	for _, t := range l.net.stretches {
		t.trace = nil
		l.slopes(t)
	}
	curves := l.curves()
	bars := l.bars()
	seams := l.seams()
	axisMarks := l.axis()
	heading := l.heading()
	arrows := l.arrows()
	l.labels()
	l.board.place()

	marks := append(l.zero(), axisMarks...)
	marks = append(marks, l.lifted(heading)...)
	marks = append(marks, seams...)
	marks = append(marks, arrows...)
	marks = append(marks, curves...)
	marks = append(marks, bars...)
	for _, b := range l.board.labels {
		c := b.choices[b.at]
		if c.leader != nil {
			marks = append(marks, *c.leader)
		}
		marks = append(marks, Group{Role: "label", Marks: b.forms[c.form].make(c.box.X0, c.box.Y0, c.align)})
	}
	return marks
}

// frame moves marks so that they stand inside a frame, and makes it at least as
// wide as wished.
func frame(id, title, desc string, width float64, marks []Mark) Scene {
	all := bounds(marks)
	dx := 0.0
	if all.X0 < margin {
		dx = margin - all.X0
	}
	dy := margin - all.Y0
	return Scene{
		ID: id, Title: title, Desc: desc,
		Width:  math.Ceil(math.Max(width, all.X1+dx+margin) - 1e-6), // less rounding
		Height: math.Ceil(all.Y1 + dy + margin),
		Marks:  moved(marks, dx, dy),
	}
}

// rule chooses the value scale of the whole profile. share is how much of the
// usual height it gets.
func (l *layout) rule(share float64) {
	low, high := l.p.extent()
	for _, m := range l.measures {
		low, high = math.Min(low, math.Min(m.low, m.high)), math.Max(high, math.Max(m.low, m.high))
	}
	if low > 0 && low < 0.3*(high-low) {
		low = 0
	}
	if high < 0 && -high < 0.3*(high-low) {
		high = 0
	}
	height := math.Min(330, math.Max(200, 0.42*l.p.Width))
	crowd := map[int]int{}
	for _, s := range l.net.states {
		if !s.point.Peak {
			crowd[s.column]++
			if n := crowd[s.column]; n > 2 {
				height += 14
			}
		}
	}
	height *= share * l.ease
	var decimals int
	l.ticks, decimals = axis.Ticks(low, high, 6)
	l.text = nil
	for _, v := range l.ticks {
		l.text = append(l.text, axis.Text(v, decimals))
	}
	l.left = margin + widestTick(l.text) + 9
	l.tall = height / (l.ticks[len(l.ticks)-1] - l.ticks[0])
	l.end(low, high)
	l.heights()
}

// crop keeps the part of the scale that a row needs.
func (l *layout) crop() {
	if l.net != l.whole {
		low, high := math.Inf(1), math.Inf(-1)
		for _, s := range l.net.states {
			low, high = math.Min(low, s.point.Value-s.point.sd()), math.Max(high, s.point.Value+s.point.sd())
		}
		for _, m := range l.measures {
			low, high = math.Min(low, math.Min(m.low, m.high)), math.Max(high, math.Max(m.low, m.high))
		}
		l.end(low, high)
	}
	l.heights()
}

// end keeps the part of the scale from low to high. It ends at a tick, or just
// beyond the last value where that leaves less room unused.
func (l *layout) end(low, high float64) {
	first, last := 0, len(l.ticks)-1
	for first+1 < last && l.ticks[first+1] <= low {
		first++
	}
	for last-1 > first && l.ticks[last-1] >= high {
		last--
	}
	l.low, l.high = l.ticks[first], l.ticks[last]
	step := l.ticks[1] - l.ticks[0]
	const most, beyond = 0.5, 0.1 // of a step
	if last-first > 1 && low-l.low > most*step {
		first, l.low = first+1, low-beyond*step
	}
	if last-first > 1 && l.high-high > most*step {
		last, l.high = last-1, high+beyond*step
	}
	l.ticks, l.text = l.ticks[first:last+1], l.text[first:last+1]
}

// heights stands all states on the scale.
func (l *layout) heights() {
	l.scale = axis.Scale{Low: l.low, High: l.high, From: (l.high - l.low) * l.tall, To: 0}
	for _, s := range l.net.states {
		s.y = l.scale.At(s.point.Value)
		s.band = math.Abs(l.scale.At(s.point.sd()) - l.scale.At(0))
	}
}

// slopes notes on which sides of its levels a stretch runs.
func (l *layout) slopes(t *stretch) {
	chain := []*state{t.from, t.to}
	if t.peak != nil {
		chain = []*state{t.from, t.peak, t.to}
	}
	for i := 1; i < len(chain); i++ {
		a, b := chain[i-1], chain[i]
		if a.y < b.y {
			a, b = b, a
		}
		if a.y > b.y { // a is the lower one
			a.up, b.down = true, true
		}
	}
}

// style is the role of what these paths share.
func (l *layout) style(base string, paths []int) Role {
	if b := l.p.inkBase(); len(paths) > 1 || paths[0] == b {
		return Role(base)
	}
	return Role(fmt.Sprintf("%s path-%d", base, paths[0]+1))
}

// curves draws every stretch once. Stretches of one look that follow each other
// are one curve, so that dashes run on.
func (l *layout) curves() []Mark {
	drawn := map[*stretch]bool{}
	var marks []Mark
	for _, route := range l.net.routes {
		var c Curve
		flush := func() {
			if len(c.Path) > 0 {
				marks = append(marks, c)
			}
			c = Curve{}
		}
		for _, t := range route {
			role := l.style("path", t.paths)
			if drawn[t] || role != c.Role {
				flush()
			}
			if drawn[t] {
				continue
			}
			drawn[t] = true
			x, y := t.from.x+t.dir*t.from.half, t.from.y
			if len(c.Path) == 0 {
				c.Role = role
				c.Path = append(c.Path, Command{Op: Move, X: x, Y: y})
			} else {
				c.Path = append(c.Path, Command{Op: To, X: x, Y: y})
			}
			if p := t.peak; p != nil {
				c.Path = append(c.Path, l.rise(t, x, y, p.x-t.dir*p.half, p.y), Command{Op: To, X: p.x + t.dir*p.half, Y: p.y})
				x, y = p.x+t.dir*p.half, p.y
			}
			c.Path = append(c.Path, l.rise(t, x, y, t.to.x-t.dir*t.to.half, t.to.y))
		}
		flush()
	}
	return marks
}

// rise is the curve between two heights: level at both ends and monotone between,
// since the ordinates of its control points are those of its ends and their
// abscissas stand in order. It is entered on the board.
func (l *layout) rise(t *stretch, x0, y0, x1, y1 float64) Command {
	const pull = 0.42
	c0, c1 := x0+pull*(x1-x0), x1-pull*(x1-x0)
	const parts = 28
	px, py := x0, y0
	for i := 1; i <= parts; i++ {
		v := float64(i) / parts
		u := 1 - v
		x := u*u*u*x0 + 3*u*u*v*c0 + 3*u*v*v*c1 + v*v*v*x1
		y := y0 + (y1-y0)*v*v*(3-2*v)
		r := Rect{math.Min(px, x), math.Min(py, y), math.Max(px, x), math.Max(py, y)}
		l.board.stroke(r)
		t.trace = append(t.trace, r)
		px, py = x, y
	}
	return Command{Op: Cubic, X1: c0, Y1: y0, X2: c1, Y2: y1, X: x1, Y: y1}
}

// bars draws the levels and peaks, over their bands.
func (l *layout) bars() []Mark {
	var bands, marks []Mark
	for _, s := range l.net.states {
		if s.pass {
			continue
		}
		base, thick := "level", 1.5
		if s.point.Peak {
			base, thick = "peak", 1.125
		}
		if s.band > 0 {
			bands = append(bands, Box{Role: "spread", X: s.x - s.half, Y: s.y - s.band, W: 2 * s.half, H: 2 * s.band})
			cap := math.Min(5, 0.6*s.half)
			marks = append(marks,
				Line{Role: "whisker", X1: s.x, Y1: s.y - s.band, X2: s.x, Y2: s.y + s.band},
				Line{Role: "whisker", X1: s.x - cap, Y1: s.y - s.band, X2: s.x + cap, Y2: s.y - s.band},
				Line{Role: "whisker", X1: s.x - cap, Y1: s.y + s.band, X2: s.x + cap, Y2: s.y + s.band})
		}
		marks = append(marks, Line{Role: l.style(base, s.paths), X1: s.x - s.half, Y1: s.y, X2: s.x + s.half, Y2: s.y})
		l.board.stroke(s.rect(thick))
		l.board.bars = append(l.board.bars, s.rect(thick))
	}
	return append(bands, marks...)
}

// rect is the bar of s with its band.
func (s *state) rect(thick float64) Rect {
	h := math.Max(thick, s.band)
	return Rect{s.x - s.half, s.y - h, s.x + s.half, s.y + h}
}
