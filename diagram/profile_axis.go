package diagram

import (
	"math"
	"sort"

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
	title := Words{Role: "axis-text", X: margin, Y: top - 18, Size: tickSize, Runs: lettering.Quantity(l.p.Axis, l.p.Unit)}
	marks = append(marks, title)
	l.board.solid = append(l.board.solid, title.Bounds())
	if l.p.Zero != "" {
		aside := Words{Role: "aside", X: title.Bounds().X1 + 10, Y: title.Y, Size: tickSize, Runs: lettering.Runs("relative to " + l.p.Zero)}
		marks = append(marks, aside)
		l.board.solid = append(l.board.solid, aside.Bounds())
	}
	if l.hasZero() {
		y := l.scale.At(0)
		l.board.soft = append(l.board.soft, Rect{l.left, y, l.board.right, y})
	}
	return marks
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
