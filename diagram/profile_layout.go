package diagram

import (
	"fmt"
	"math"
	"sort"

	"saddlebook/diagram/axis"
	"saddlebook/diagram/lettering"
)

// Sizes of text and space, in SVG user units.
const (
	nameSize  = 13.0
	valueSize = 12.0
	tickSize  = 12.0
	margin    = 8.0 // around the figure
	leastStep = 92.0
)

// layout turns a net into a scene.
type layout struct {
	p     Profile
	net   *net
	scale axis.Scale
	ticks []float64
	text  []string // of the ticks
	step  float64  // from column to column
	left  float64  // of the value axis
	right float64  // end of the figure
	wrap  float64  // widest line of a name
	board board
}

func (l *layout) scene() Scene {
	l.rule()
	l.columns()
	l.peaks()
	for _, s := range l.net.stretches {
		l.slopes(s)
	}
	curves := l.curves()
	bars := l.bars()
	axisMarks := l.axis()
	l.labels()
	l.board.place()

	marks := append(l.zero(), axisMarks...)
	marks = append(marks, curves...)
	marks = append(marks, bars...)
	for _, b := range l.board.labels {
		c := b.choices[b.at]
		if c.leader != nil {
			marks = append(marks, *c.leader)
		}
		marks = append(marks, Group{Role: "label", Marks: b.forms[c.form].make(c.box.X0, c.box.Y0, c.align)})
	}
	return frame(l.p.ID, l.p.Title, l.p.Desc, l.p.Width, marks)
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
		Width:  math.Ceil(math.Max(width, all.X1+dx+margin)),
		Height: math.Ceil(all.Y1 + dy + margin),
		Marks:  shift(marks, dx, dy),
	}
}

// rule chooses the value scale.
func (l *layout) rule() {
	low, high := l.p.extent()
	if low > 0 && low < 0.3*(high-low) {
		low = 0
	}
	if high < 0 && -high < 0.3*(high-low) {
		high = 0
	}
	height := math.Min(330, math.Max(200, 0.42*l.p.Width))
	if wide := leastStep*float64(l.net.last-l.net.first) - l.p.Width; wide > 0 {
		height += math.Min(150, 0.15*wide)
	}
	crowd := map[int]int{}
	for _, s := range l.net.states {
		if !s.point.Peak {
			crowd[s.column]++
			if n := crowd[s.column]; n > 2 {
				height += 14
			}
		}
	}
	var decimals int
	l.ticks, decimals = axis.Ticks(low, high, 6)
	for _, v := range l.ticks {
		l.text = append(l.text, axis.Text(v, decimals))
	}
	l.scale = axis.Scale{Low: l.ticks[0], High: l.ticks[len(l.ticks)-1], From: height, To: 0}
	for _, s := range l.net.states {
		s.y = l.scale.At(s.point.Value)
		if s.point.SD != nil {
			s.band = math.Abs(l.scale.At(*s.point.SD) - l.scale.At(0))
		}
	}
}

// columns chooses the places of columns along x. A gap that several peaks share
// is wider than others.
func (l *layout) columns() {
	tick := 0.0
	for _, t := range l.text {
		tick = math.Max(tick, lettering.Width(lettering.Plain(t), tickSize))
	}
	l.left = margin + tick + 9
	at := l.offsets()
	total := at[len(at)-1]
	l.clumps()
	l.step = math.Max(leastStep, (l.p.Width-l.left-140)/total)
	l.wrap = math.Min(150, math.Max(74, l.step*0.86))
	var first, after float64
	for range 4 { // bars, and so the room they need, depend on the step
		first, after = l.left+12+l.reach(l.net.first), l.reach(l.net.last)
		l.step = math.Max(leastStep, (l.p.Width-margin-after-first)/total)
	}
	l.right = first + total*l.step + after
	for _, s := range l.net.states {
		s.half = l.half(s)
		s.x = first + at[s.column-l.net.first]*l.step + l.aside(s)
	}
	l.board.left, l.board.right = l.left+6, math.Max(l.right, l.p.Width-margin)
}

// offsets gives the place of each column in steps from the first.
func (l *layout) offsets() []float64 {
	peaks := make([]float64, l.net.last-l.net.first+1) // over the gap before each column
	for _, t := range l.net.stretches {
		from, to := min(t.from.column, t.to.column), max(t.from.column, t.to.column)
		for c := from + 1; c <= to && t.peak != nil; c++ {
			peaks[c-l.net.first]++
		}
	}
	at := make([]float64, len(peaks))
	for i := 1; i < len(at); i++ {
		at[i] = at[i-1] + 1 + 0.3*math.Min(4, math.Max(0, peaks[i]-1))
	}
	return at
}

// reach is how far the levels of an outer column, their names and the names of
// the paths that end there stand out from the middle of the column.
func (l *layout) reach(column int) float64 {
	out := 0.0
	for _, s := range l.net.states {
		if s.point.Peak || s.column != column {
			continue
		}
		r := math.Max(l.block(s).w/2+4, l.half(s)+4)
		for i, route := range l.net.routes {
			if route[len(route)-1].to == s && l.named(i) {
				r = math.Max(r, math.Max(l.half(s), l.block(s).w/2)+l.pathName(i).w+13)
			}
		}
		out = math.Max(out, math.Abs(l.aside(s))+r)
	}
	return out
}

// clumps finds the levels of one column that would cover each other: they stand
// side by side.
func (l *layout) clumps() {
	columns := map[int][]*state{}
	for _, s := range l.net.states {
		if !s.point.Peak {
			columns[s.column] = append(columns[s.column], s)
		}
	}
	for _, group := range columns {
		sort.SliceStable(group, func(i, k int) bool { return group[i].y < group[k].y })
		for i := 0; i < len(group); {
			k := i + 1
			for k < len(group) && group[k].y-group[k-1].y < 8 {
				k++
			}
			clump := append([]*state{}, group[i:k]...)
			sort.SliceStable(clump, func(a, b int) bool { return clump[a].paths[0] < clump[b].paths[0] })
			for m, s := range clump {
				s.clump, s.slot = float64(k-i), float64(m)-float64(k-i-1)/2
			}
			i = k
		}
	}
}

// half is half the width of a level.
func (l *layout) half(s *state) float64 {
	h := math.Min(27, math.Max(13, 0.17*l.step))
	if s.clump > 1 {
		h = math.Min(h, math.Max(5, (0.6*l.step/s.clump-6)/2))
	}
	return h
}

// aside is how far a level of a clump stands from the middle of its column.
func (l *layout) aside(s *state) float64 { return s.slot * (2*l.half(s) + 6) }

// peaks stands each at its position between its levels. Peaks that would cover
// each other are made narrow and set side by side.
func (l *layout) peaks() {
	var peaks []*state
	for _, t := range l.net.stretches {
		p := t.peak
		if p == nil {
			continue
		}
		start, end := t.from.x+t.dir*t.from.half, t.to.x-t.dir*t.to.half
		gap := math.Abs(end - start)
		p.half = math.Min(13, math.Max(5, gap*0.09))
		flank := math.Max(0.14*gap, 8) + p.half
		room := math.Max(0, gap-2*flank)
		p.x = start + t.dir*((gap-room)/2+p.position()*room)
		p.low, p.high = math.Min(start, end)+7, math.Max(start, end)-7
		peaks = append(peaks, p)
	}
	used := map[*state]bool{}
	for i, p := range peaks {
		clump, sum := []*state{p}, p.x
		for _, q := range peaks[i+1:] {
			if !used[p] && !used[q] && math.Abs(q.y-p.y) < 5 && math.Abs(q.x-p.x) < p.half+q.half+3 {
				clump, sum = append(clump, q), sum+q.x
				used[q] = true
			}
		}
		if len(clump) == 1 {
			continue
		}
		sort.SliceStable(clump, func(a, b int) bool { return clump[a].x < clump[b].x })
		n, low, high := float64(len(clump)), p.low, p.high
		half := math.Max(2.5, math.Min(8, (high-low)/n/2-2))
		for k, q := range clump {
			q.half = half
			x := sum/n + (float64(k)-(n-1)/2)*(2*half+4)
			q.x = math.Max(q.low+half, math.Min(q.high-half, x))
		}
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
	if len(paths) > 1 {
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
		base, thick := "level", 1.5
		if s.point.Peak {
			base, thick = "peak", 1.125
		}
		if s.band > 0 {
			bands = append(bands, Box{Role: "spread", X: s.x - s.half, Y: s.y - s.band, W: 2 * s.half, H: 2 * s.band})
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
