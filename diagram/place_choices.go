package diagram

import (
	"math"
	"sort"
)

// choicesOf lists the free places for l, cheapest first: those at its level, or
// the far ones with a leader.
func (b *board) choicesOf(l *label) []choice {
	var out []choice
	for i := range l.forms {
		out = b.places(out, l, i)
	}
	sort.SliceStable(out, func(i, k int) bool { return out[i].price < out[k].price })
	return out
}

// places adds the free places for one form of l.
func (b *board) places(out []choice, l *label, form int) []choice {
	w, h := l.forms[form].w, l.forms[form].h
	extra := 5 * float64(form)
	add := func(x, y, price float64, align Anchor, leader *Line) {
		box := Rect{x, y, x + w, y + h}
		c := choice{box, box, price + extra, align, leader, form}
		if !b.free(c.box) {
			return
		}
		for _, s := range b.soft {
			if c.box.grown(1).meets(s) {
				c.price += 2
			}
		}
		for _, s := range b.heading {
			if c.box.grown(12).meets(s) {
				c.price += 10
				break
			}
		}
		if leader != nil {
			if b.barred(*leader, l.bar) {
				return
			}
			c.price += 5 * float64(b.struck(*leader))
			c.reach = box.join(leader.Bounds())
		}
		out = append(out, c)
	}
	const gap = 6.0
	aside := 12 + l.overhang
	middle, cy := (l.bar.X0+l.bar.X1)/2, (l.bar.Y0+l.bar.Y1)/2
	x0 := middle - w/2
	top, bottom := l.bar.Y0-gap-h, l.bar.Y1+gap
	rank := [4]float64{}
	for i, s := range l.prefer {
		rank[s] = float64(3 * i)
	}
	if l.far {
		for _, d := range []float64{14, 22, 32, 44, 58, 74, 92, 112, 136, 164, 196, 232} {
			for _, dx := range []float64{0, 0.35, -0.35, 0.7, -0.7, 1.1, -1.1, 1.6, -1.6, 2.2, -2.2} {
				x := x0 + dx*w
				price := leaderPrice + d/6 + 5*math.Abs(dx)
				for _, s := range []side{above, below} {
					y := top - d
					if s == below {
						y = bottom + d
					}
					add(x, y, price+rank[s], Middle, b.leader(l, Rect{x, y, x + w, y + h}))
				}
			}
		}
		return out
	}
	for _, s := range l.prefer {
		switch s {
		case above, below:
			y := top
			if s == below {
				y = bottom
			}
			add(x0, y, rank[s], Middle, nil)
			for _, f := range []float64{0.12, 0.25, 0.4, 0.5} {
				add(x0+f*w, y, rank[s]+1+3*f, Middle, nil)
				add(x0-f*w, y, rank[s]+1+3*f, Middle, nil)
			}
			add(l.bar.X0, y, rank[s]+2, Start, nil)
			add(l.bar.X1-w, y, rank[s]+2, End, nil)
		case right, left:
			x, align := l.bar.X1+aside, Start
			if s == left {
				x, align = l.bar.X0-aside-w, End
			}
			for _, f := range []float64{0.5, 0.35, 0.65, 0.2, 0.8, 0, 1} {
				add(x, cy-f*h, rank[s]+4*math.Abs(f-0.5), align, nil)
			}
		}
	}
	for i, r := range l.spots {
		for _, off := range []float64{8, 12, 17} {
			price := 7 + 0.15*float64(i) + off/8
			add(r.X1+off, (r.Y0+r.Y1)/2-h/2, price, Start, nil)
			add(r.X0-off-w, (r.Y0+r.Y1)/2-h/2, price, End, nil)
		}
	}
	return out
}

// barred reports whether a leader from the level own runs over another level or
// over the title of the axis.
func (b *board) barred(line Line, own Rect) bool {
	for _, r := range b.solid {
		if crosses(line, r.grown(3)) {
			return true
		}
	}
	for _, r := range b.bars {
		if r != own && crosses(line, r.grown(2)) {
			return true
		}
	}
	return false
}

// leader is the line from the level of l to a box above or below it.
func (b *board) leader(l *label, box Rect) *Line {
	inset := math.Min(8, (box.X1-box.X0)/3)
	x := (l.bar.X0 + l.bar.X1) / 2
	line := Line{Role: "leader", X1: x, X2: math.Max(box.X0+inset, math.Min(box.X1-inset, x))}
	if box.Y0 > l.bar.Y1 {
		line.Y1, line.Y2 = l.bar.Y1+4, box.Y0-1
	} else {
		line.Y1, line.Y2 = l.bar.Y0-4, box.Y1+1
	}
	return &line
}

// struck counts the strokes that a leader crosses, a few at most twice.
func (b *board) struck(line Line) int {
	n := 0
	r := line.Bounds()
	for c := int(math.Floor(r.X0 / columnWidth)); c <= int(math.Floor(r.X1/columnWidth)); c++ {
		for _, s := range b.columns[c] {
			if s.X0 <= r.X1 && r.X0 <= s.X1 && s.Y0 <= r.Y1 && r.Y0 <= s.Y1 && crosses(line, s) {
				n++
			}
		}
	}
	return n
}

// crosses reports whether a line meets a rectangle (clipping it to each side in turn).
func crosses(l Line, r Rect) bool {
	if l.X1 < r.X0 && l.X2 < r.X0 || l.X1 > r.X1 && l.X2 > r.X1 || l.Y1 < r.Y0 && l.Y2 < r.Y0 || l.Y1 > r.Y1 && l.Y2 > r.Y1 {
		return false
	}
	t0, t1 := 0.0, 1.0
	for _, side := range [4][2]float64{
		{l.X1 - l.X2, l.X1 - r.X0}, {l.X2 - l.X1, r.X1 - l.X1},
		{l.Y1 - l.Y2, l.Y1 - r.Y0}, {l.Y2 - l.Y1, r.Y1 - l.Y1},
	} {
		d, q := side[0], side[1]
		switch {
		case d == 0 && q < 0:
			return false
		case d < 0:
			t0 = math.Max(t0, q/d)
		case d > 0:
			t1 = math.Min(t1, q/d)
		}
	}
	return t0 <= t1
}

// cross reports whether two lines meet.
func cross(a, b Line) bool {
	turn := func(ax, ay, bx, by, cx, cy float64) float64 { return (bx-ax)*(cy-ay) - (by-ay)*(cx-ax) }
	p, q := turn(a.X1, a.Y1, a.X2, a.Y2, b.X1, b.Y1), turn(a.X1, a.Y1, a.X2, a.Y2, b.X2, b.Y2)
	r, s := turn(b.X1, b.Y1, b.X2, b.Y2, a.X1, a.Y1), turn(b.X1, b.Y1, b.X2, b.Y2, a.X2, a.Y2)
	return p*q < 0 && r*s < 0
}
