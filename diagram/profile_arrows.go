package diagram

import "math"

// arrows draws what is measured: arrows with guides at the heights that they
// measure from and to. Their texts become labels. Curves and levels must be on
// the board.
func (l *layout) arrows() []Mark {
	var marks []Mark
	for _, m := range l.measures {
		a := l.arrow(m)
		for _, g := range a.guides {
			marks = append(marks, g)
			l.board.stroke(g.Bounds().grown(0.5))
		}
		line := Line{Role: "measure", X1: a.x, Y1: a.tail, X2: a.x, Y2: a.head}
		dir := 1.0 // from tail to head, downwards
		if a.head < a.tail {
			dir = -1
		}
		long := math.Abs(a.head - a.tail)
		if size := math.Min(6, 0.45*long); size > 0.5 {
			marks = append(marks, line, head(a.x, a.head, dir*size))
			if m.kind == span || m.kind == nextSpan {
				marks = append(marks, head(a.x, a.tail, -dir*size))
			}
		} else {
			marks = append(marks, line)
		}
		box := line.Bounds()
		box.X0, box.X1 = box.X0-3, box.X1+3
		l.board.stroke(box)
		t := measureLabel(m.text, box)
		if m.kind == barrier {
			t.prefer = []side{left, right, above, below}
		}
		l.board.labels = append(l.board.labels, t)
	}
	return marks
}

// head is an arrow head with its tip at x, y, that points down for a positive size.
func head(x, y, size float64) Curve {
	w := 0.5 * math.Abs(size)
	return Curve{Role: "tip", Path: []Command{{Op: Move, X: x, Y: y}, {Op: To, X: x - w, Y: y - size}, {Op: To, X: x + w, Y: y - size}, {Op: Close}}}
}

// arrow is a measure with its place.
type arrow struct {
	x, tail, head float64
	guides        []Line
}

func (l *layout) arrow(m measure) arrow {
	a := arrow{tail: l.scale.At(m.low), head: l.scale.At(m.high)}
	from, to := l.copyOf(m.from), l.copyOf(m.to)
	switch m.kind {
	case barrier, barrierBack:
		// Under the peak, on the side that the barrier is climbed from.
		side := math.Copysign(1, to.x-l.legEnd(to, m.kind))
		a.x = to.x - side*math.Min(6, 0.5*to.half+1)
		l.guide(&a, l.edge(from, side), a.x, a.tail, -side)
		// The tip stays clear of the bar.
		a.head += 2.5
		if a.tail < a.head {
			a.head = a.tail
		}
	case turn:
		a.x = to.x + 0.4*to.half
		a.guides = append(a.guides, Line{"guide", a.x - 9, a.tail, a.x + 9, a.tail})
		a.head += math.Copysign(math.Min(2.5, math.Abs(a.tail-a.head)), a.tail-a.head)
	case span:
		l.findSpan(&a, from, to, true)
	case nextSpan:
		l.findSpan(&a, from, nil, false)
	}
	return a
}

// legEnd is the place along x of the level on the side of peak p that a barrier
// is climbed from.
func (l *layout) legEnd(p *state, k measureKind) float64 {
	for _, t := range l.net.stretches {
		if t.peak == p {
			if k == barrier {
				return t.from.x
			}
			return t.to.x
		}
	}
	return p.x
}

// edge is the end of the bar of s on one side; for a state of another row, none.
func (l *layout) edge(s *state, side float64) float64 {
	if s == nil {
		return math.NaN()
	}
	return s.x + side*s.half
}

// guide is a line at height y from the end of a level to just beyond x, or a
// short one if the level is not in this row. dir leads from x to the level.
func (l *layout) guide(a *arrow, end, x, y, dir float64) {
	beyond := x - 4*dir
	if math.IsNaN(end) {
		end = x + 12*dir
	}
	a.guides = append(a.guides, Line{"guide", math.Min(end, beyond), y, math.Max(end, beyond), y})
}

// findSpan stands the arrow of a span where it and its guides cross least.
func (l *layout) findSpan(a *arrow, from, to *state, same bool) {
	low, high := l.left+12, l.board.right-14
	f, t := low-6, high
	if from != nil {
		f = from.x
	}
	if to != nil {
		t = to.x
	}
	if same {
		low, high = math.Min(f, t)-40, math.Max(f, t)+40
	} else {
		low = f
	}
	best := math.Inf(1)
	for x := math.Max(l.left+12, low); x <= math.Min(l.board.right-14, high); x += 4 {
		guides := []Line{span2(f, x, a.tail, from)}
		if same {
			guides = append(guides, span2(t, x, a.head, to))
		} else {
			guides = append(guides, Line{"guide", x - 9, a.head, x + 9, a.head})
		}
		shaft := Rect{x - 3, math.Min(a.tail, a.head) + 3, x + 3, math.Max(a.tail, a.head) - 3}
		cost := 5 * float64(l.board.strikes(shaft, 8))
		for _, g := range guides {
			// One stroke is the level itself or the curve that ends at it.
			cost += 1.5*math.Max(0, float64(l.board.struck(g))-2) + 0.02*(g.X2-g.X1)
		}
		if cost < best {
			best, a.x, a.guides = cost, x, guides
		}
	}
}

// span2 is a guide from the bar of s to a little beyond x.
func span2(at, x, y float64, s *state) Line {
	if s != nil {
		switch {
		case x > s.x+s.half:
			at = s.x + s.half
		case x < s.x-s.half:
			at = s.x - s.half
		default:
			return Line{"guide", x - 4, y, x + 4, y}
		}
	}
	return Line{"guide", math.Min(at, x-4), y, math.Max(at, x+4), y}
}
