package diagram

import (
	"math"
	"strings"
)

// line draws the band and the line: whole over the points it rests on, broken
// beyond them.
func (l *straightLayout) line() []Mark {
	var marks []Mark
	if n := len(l.p.Band); n > 0 {
		above, below := make([]spot, n), make([]spot, n)
		for i, b := range l.p.Band {
			x := l.xs.At(inverse(b.T))
			above[i], below[i] = spot{x, l.ys.At(b.High)}, spot{x, l.ys.At(b.Low)}
		}
		above, below = thin(above), thin(below)
		l.room.lines.line(above)
		l.room.lines.line(below)
		path := strokes(above)
		for i := len(below) - 1; i >= 0; i-- {
			path = append(path, Command{Op: To, X: below[i].x, Y: below[i].y})
		}
		marks = append(marks, Curve{"band fill-1", append(path, Command{Op: Close})})
	}
	from, to := math.Inf(1), math.Inf(-1)
	for _, q := range l.p.Points {
		if !q.Excluded {
			from, to = math.Min(from, inverse(q.T)), math.Max(to, inverse(q.T))
		}
	}
	stroke := func(role Role, a, b float64) {
		if !(b > a) {
			return
		}
		line := []spot{{l.xs.At(a), l.ys.At(l.p.Intercept + l.p.Slope*a)}, {l.xs.At(b), l.ys.At(l.p.Intercept + l.p.Slope*b)}}
		l.room.solid.line(line)
		marks = append(marks, Curve{role, strokes(line)})
	}
	if !(to > from) {
		stroke("path path-1 beyond", l.xs.Low, l.xs.High)
		return marks
	}
	stroke("path path-1 beyond", l.xs.Low, from)
	stroke("path path-1", from, to)
	stroke("path path-1 beyond", to, l.xs.High)
	return marks
}

// points draws the points in the plot and on the strip: used ones filled, excluded
// ones open, outliers ringed. On the strip a triangle at the edge stands for a
// point beyond it.
func (l *straightLayout) points() []Mark {
	var bars, dots []Mark
	for _, q := range l.p.Points {
		x, fit := l.xs.At(inverse(q.T)), l.p.line(q.T)
		bar := func(low, high float64) {
			bars = append(bars,
				Line{Role: "whisker", X1: x, Y1: low, X2: x, Y2: high},
				Line{Role: "whisker", X1: x - 3, Y1: low, X2: x + 3, Y2: low},
				Line{Role: "whisker", X1: x - 3, Y1: high, X2: x + 3, Y2: high})
		}
		role := Role("marker fill-1")
		if q.Excluded {
			role = "open"
		}
		at := spot{x, l.ys.At(q.Y)}
		dots = append(dots, Dot{Role: role, X: at.x, Y: at.y, R: markerSize})
		l.room.solid.box(Rect{at.x, at.y, at.x, at.y}.grown(markerSize + 2))
		if q.Outlier && !q.Excluded {
			dots = append(dots, Dot{Role: "meet", X: at.x, Y: at.y, R: markerSize + 2.6})
		}
		end := l.rs.High
		if q.Low != nil {
			low, high := l.ys.At(*q.Low), l.ys.At(*q.High)
			bar(low, high)
			l.room.solid.box(Rect{x - 3, high, x + 3, low}.grown(1))
			low, high = math.Max(-end, *q.Low-fit), math.Min(end, *q.High-fit)
			if low < high {
				bar(l.rs.At(low), l.rs.At(high))
			}
		}
		switch r := q.Y - fit; {
		case math.Abs(r) <= end:
			y := l.rs.At(r)
			dots = append(dots, Dot{Role: role, X: x, Y: y, R: markerSize})
			if q.Outlier && !q.Excluded {
				dots = append(dots, Dot{Role: "meet", X: x, Y: y, R: markerSize + 2.6})
			}
		default:
			y, way := l.rs.To+overEdge, -1.0
			if r < 0 {
				y, way = l.rs.From-overEdge, 1
			}
			dots = append(dots, Curve{role, []Command{{Op: Move, X: x, Y: y + way*overEdge}, {Op: To, X: x + 4, Y: y - way*2.5}, {Op: To, X: x - 4, Y: y - way*2.5}, {Op: Close}}})
		}
	}
	return append(bars, dots...)
}

// names writes the names of outliers and excluded points.
func (l *straightLayout) names() {
	for _, q := range l.p.Points {
		if (q.Outlier || q.Excluded) && strings.TrimSpace(q.Name) != "" {
			l.room.name(q.Name, spot{l.xs.At(inverse(q.T)), l.ys.At(q.Y)}, true)
		}
	}
}

// facts writes what follows from the line where the plot has most room, and gives
// what stands below: the facts, if there is none, and names behind numbers.
func (l *straightLayout) facts() (below []string) {
	facts := append([]string{}, l.p.Facts...)
	if len(l.p.Band) > 0 && l.p.BandText != "" {
		facts = append(facts, "band: "+l.p.BandText)
	}
	p := plate{align: Start}
	for _, f := range facts {
		for _, line := range newPlate("name", f, math.Max(120, 0.6*(l.right-l.left))).text.lines {
			p.text.add("name", line.runs, tickSize)
		}
	}
	p.w, p.h = p.text.w+2*plateGap, p.text.h+1
	placed := len(p.text.lines) == 0
	nowhere := newRaster(l.room.solid.frame)
	for _, grow := range []float64{2, 1.7, 1.5, 1.35, 1.2, 1.1, 1} {
		if placed {
			break
		}
		if box, ok := l.room.inside(p, grow, nowhere, false); ok {
			l.room.put(p, box)
			placed = true
		}
	}
	if !placed {
		below = append(below, strings.Join(facts, "; "))
	}
	return append(below, l.room.below()...)
}
