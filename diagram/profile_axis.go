package diagram

import (
	"math"
	"sort"
	"strings"

	"saddlebook/diagram/lettering"
)

// axis draws the value axis and its title.
func (l *layout) axis() []Mark {
	top, bottom := l.scale.To, l.scale.From
	marks := []Mark{Line{Role: "axis", X1: l.left, Y1: top, X2: l.left, Y2: bottom}}
	for i, v := range l.ticks {
		y := l.scale.At(v)
		marks = append(marks,
			Line{Role: "tick", X1: l.left - 4, Y1: y, X2: l.left, Y2: y},
			Words{Role: "tick-text", X: l.left - 8, Y: y + 0.35*tickSize, Size: tickSize, Anchor: End, Runs: lettering.Plain(l.text[i])})
	}
	if l.hasZero() {
		y := l.scale.At(0)
		l.board.soft = append(l.board.soft, Rect{l.left, y, l.board.right, y})
	}
	return marks
}

// heading is the title of the axis and what the values are relative to, above
// the axis, beside each other or in lines over each other. Labels rather keep
// clear of it.
func (l *layout) heading() Group {
	var head Group
	if !l.net.begins {
		return head
	}
	title := lettering.Quantity(l.p.Axis, l.p.Unit)
	aside := ""
	if l.p.Zero != "" {
		aside = "relative to " + l.p.Zero
	}
	if l.whole.deviates() {
		aside = strings.TrimPrefix(aside+"; bands ± 1 standard deviation", "; ")
	}
	y := l.scale.To - 18
	room := l.p.Width - 2*margin
	side := margin + lettering.Width(title, tickSize) + 10
	put := func(x, y float64, role Role, runs []lettering.Run) {
		m := Words{Role: role, X: x, Y: y, Size: tickSize, Runs: runs}
		head.Marks = append(head.Marks, m)
		l.board.heading = append(l.board.heading, m.Bounds())
	}
	lines, asides := lettering.WrapRuns(title, tickSize, room), lettering.Wrap(aside, tickSize, room)
	if len(lines) == 1 && len(asides) == 1 && side+lettering.Width(asides[0], tickSize) <= l.p.Width-margin {
		put(margin, y, "axis-text", lines[0])
		put(side, y, "aside", asides[0])
		return head
	}
	n := len(lines) + len(asides)
	for i, runs := range append(lines, asides...) {
		role := Role("axis-text")
		if i >= len(lines) {
			role = "aside"
		}
		put(margin, y-float64(n-1-i)*lettering.Leading*tickSize, role, runs)
	}
	return head
}

// lifted moves the heading above all labels if one of them had to come near it.
func (l *layout) lifted(heading Group) []Mark {
	if len(heading.Marks) == 0 {
		return nil
	}
	r, top, near := heading.Bounds().grown(labelGap), math.Inf(1), false
	for _, b := range l.board.labels {
		reach := b.choices[b.at].reach
		top = math.Min(top, reach.Y0)
		for _, m := range heading.Marks {
			near = near || m.Bounds().grown(10).meets(reach)
		}
	}
	if !near {
		return []Mark{heading}
	}
	return moved([]Mark{heading}, 0, math.Min(0, top-r.Y1))
}

// deviates reports whether any state has a deviation.
func (n *net) deviates() bool {
	for _, s := range n.states {
		if s.point.sd() > 0 {
			return true
		}
	}
	return false
}

func (l *layout) hasZero() bool { return l.scale.Low < 0 && l.scale.High > 0 }

// zero draws the line of reference, with gaps where labels stand on it.
func (l *layout) zero() []Mark {
	if !l.hasZero() {
		return nil
	}
	y := l.scale.At(0)
	var gaps []Rect
	for _, b := range l.board.labels {
		if r := b.choices[b.at].box.grown(3); r.Y0 < y && y < r.Y1 {
			gaps = append(gaps, r)
		}
	}
	sort.SliceStable(gaps, func(i, k int) bool { return gaps[i].X0 < gaps[k].X0 })
	var marks []Mark
	x := l.left
	for _, g := range append(gaps, Rect{X0: l.right, X1: l.right}) {
		if g.X0 > x+6 {
			marks = append(marks, Line{Role: "zero", X1: x, Y1: y, X2: g.X0, Y2: y})
		}
		x = math.Max(x, g.X1)
	}
	return marks
}
