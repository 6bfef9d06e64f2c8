package diagram

import (
	"math"
	"sort"

	"saddlebook/diagram/axis"
	"saddlebook/diagram/lettering"
)

// shownNodes is the part of the programme within the time shown, cut at both ends.
func (l *courseLayout) shownNodes() []TimeNode {
	var out []TimeNode
	all := l.c.Programme
	cut := func(a, b TimeNode, t float64) TimeNode {
		n := TimeNode{T: t, Value: a.Value + (b.Value-a.Value)*(t-a.T)/(b.T-a.T)}
		if a.Value == b.Value {
			n.Text = a.Text
		}
		return n
	}
	for i, n := range all {
		if i > 0 {
			for _, t := range []float64{l.from, l.to} {
				if all[i-1].T < t && t < n.T {
					out = append(out, cut(all[i-1], n, t))
				}
			}
		}
		if n.T >= l.from && n.T <= l.to {
			out = append(out, n)
		}
	}
	return out
}

// extremeNodes gives the lowest and the highest node shown.
func (l *courseLayout) extremeNodes() (low, high TimeNode, ok bool) {
	for i, n := range l.shownNodes() {
		if i == 0 || n.Value < low.Value {
			low = n
		}
		if i == 0 || n.Value > high.Value {
			high = n
		}
		ok = true
	}
	return low, high, ok
}

// strip draws the programme from y down and gives where it ends. The lowest and
// the highest value stand at its own small axis; holds and the ends of ramps carry
// theirs where there is room.
func (l *courseLayout) strip(y float64) ([]Mark, float64) {
	low, high, ok := l.extremeNodes()
	if !ok {
		return nil, y
	}
	nodes := l.shownNodes()
	marks := l.titled(&y, lettering.Quantity("T", l.c.ProgrammeUnit), "axis-text")
	solid := append([]Rect{}, l.titles...)
	top, bottom := y+8, y+8+stripHeight
	scale := axis.Scale{Low: low.Value, High: high.Value, From: bottom, To: top}
	marks = append(marks, Line{Role: "axis", X1: l.left, Y1: top, X2: l.left, Y2: bottom})
	small := []TimeNode{low, high}
	if low.plain() == high.plain() {
		small = small[:1]
	}
	for _, n := range small {
		at := scale.At(n.Value)
		marks = append(marks,
			Line{Role: "tick", X1: l.left - courseTick, Y1: at, X2: l.left, Y2: at},
			Words{Role: "tick-text", X: l.left - 8, Y: at + 0.35*tickSize, Size: tickSize, Anchor: End, Runs: lettering.Plain(n.plain())})
	}
	line := l.programme(nodes, scale)
	marks = append(marks, Curve{"path programme", strokes(thin(line))})
	var b board
	for i := 1; i < len(line); i++ {
		tracePiece(&b, line[i-1], line[i])
	}
	for _, e := range l.c.Events {
		if e.T >= l.from && len(l.c.Events) <= mostLines {
			x := l.x(e.T)
			solid = append(solid, Rect{x, top - rowHeight, x, bottom}) // its line
		}
	}
	frame := Rect{l.left + 4, y - rowHeight, l.c.Width - margin, bottom + 4}
	marks = append(marks, nodeTexts(l.holds(nodes, scale), &b, solid, frame)...)
	l.strips = Rect{l.left, top, l.right, bottom}
	return marks, bottom + 10
}

// tracePiece enters a straight piece of a line on the board, in boxes of a few
// units.
func tracePiece(b *board, p, q spot) {
	n := math.Max(1, math.Ceil(math.Max(math.Abs(q.x-p.x), math.Abs(q.y-p.y))/4))
	for i := 0.0; i < n; i++ {
		at := func(f float64) spot { return spot{p.x + (q.x-p.x)*f, p.y + (q.y-p.y)*f} }
		u, v := at(i/n), at((i+1)/n)
		b.stroke(Line{X1: u.x, Y1: u.y, X2: v.x, Y2: v.y}.Bounds().grown(0.75))
	}
}

// programme is the line of the programme. Ramps are bent on a logarithmic axis.
func (l *courseLayout) programme(nodes []TimeNode, scale axis.Scale) []spot {
	var line []spot
	for i, n := range nodes {
		if i > 0 && l.c.Log && n.Value != nodes[i-1].Value && n.T > nodes[i-1].T {
			a := nodes[i-1]
			from, to := math.Log(math.Max(a.T, l.from)), math.Log(math.Max(n.T, l.from))
			pieces := math.Ceil((l.x(n.T) - l.x(a.T)) / 2)
			for k := 1.0; k < pieces; k++ {
				t := math.Exp(from + (to-from)*k/pieces)
				line = append(line, spot{l.x(t), scale.At(a.Value + (n.Value-a.Value)*(t-a.T)/(n.T-a.T))})
			}
		}
		line = append(line, spot{l.x(n.T), scale.At(n.Value)})
	}
	return line
}

// nodeText is the value of a hold or of a corner, before it has a place.
type nodeText struct {
	text        string
	from, to    float64 // x
	y           float64
	first, last bool
}

// holds lists what could be written, the most telling first: the first and the
// last, then holds by their length, then corners.
func (l *courseLayout) holds(nodes []TimeNode, scale axis.Scale) []nodeText {
	var out []nodeText
	for i := 0; i < len(nodes); {
		k := i
		for k+1 < len(nodes) && nodes[k+1].printed() == nodes[i].printed() && nodes[k+1].Value == nodes[i].Value {
			k++
		}
		out = append(out, nodeText{
			text: nodes[i].printed(), from: l.x(nodes[i].T), to: l.x(nodes[k].T), y: scale.At(nodes[i].Value),
			first: i == 0, last: k == len(nodes)-1,
		})
		i = k + 1
	}
	rank := func(n nodeText) float64 {
		if n.first || n.last {
			return math.Inf(1)
		}
		return n.to - n.from
	}
	sort.SliceStable(out, func(i, k int) bool { return rank(out[i]) > rank(out[k]) })
	return out
}

// nodeTexts finds places over, under and beside holds and corners, and leaves out
// what has none.
func nodeTexts(list []nodeText, b *board, solid []Rect, frame Rect) []Mark {
	const h = (lettering.Ascent + lettering.Descent) * tickSize
	var marks []Mark
	for _, n := range list {
		runs := lettering.Runs(n.text)
		w := lettering.Width(runs, tickSize)
		best, price := Rect{}, math.Inf(1)
		try := func(x, y, p float64) {
			box := Rect{x, y, x + w, y + h}
			if box.X0 < frame.X0 || box.X1 > frame.X1 || box.Y0 < frame.Y0 || box.Y1 > frame.Y1 || b.strikes(box.grown(0.5), 1) > 0 {
				return
			}
			for _, s := range solid {
				if box.grown(3).meets(s) {
					return
				}
			}
			if p < price {
				best, price = box, p
			}
		}
		for _, side := range []struct{ y, price float64 }{{n.y - h - 2, 0}, {n.y + 2, 2}} {
			for _, f := range []float64{0.5, 0.35, 0.65, 0.2, 0.8, 0, 1} {
				try(n.from+(n.to-n.from)*f-w/2, side.y, side.price+4*math.Abs(f-0.5))
			}
			try(n.from, side.y, side.price+3)
			try(n.to-w, side.y, side.price+3)
		}
		corner := n.to-n.from < 1
		for _, dy := range []float64{0.5, 0.75, 0.25} {
			if corner || n.last {
				try(n.to+5, n.y-h*dy, 5)
			}
			if corner {
				try(n.from-5-w, n.y-h*dy, 6)
			}
		}
		if math.IsInf(price, 1) {
			continue
		}
		solid = append(solid, best)
		marks = append(marks, Words{Role: "value", X: best.X0, Y: best.Y0 + lettering.Ascent*tickSize, Size: tickSize, Runs: runs})
	}
	return marks
}
