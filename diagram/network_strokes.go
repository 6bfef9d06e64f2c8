package diagram

import "math"

// netPen is how the lines of a step are drawn.
type netPen struct {
	forward, back float64 // widths; back is 0 where the step does not return
	plain         bool    // no flux is stated
	idle          bool    // next to no flux: dashed
}

const (
	netThin = 1.25 // width of a line that says nothing by its width
	netMost = 5.5  // width of the largest flux shown
	netPair = 2.2  // between the two lines of a step that returns
	netRest = 1e-3 // of the largest flux: dashed below
)

// pens gives the pen of each step and the flux that is netMost wide.
func (n Network) pens() (pens []netPen, full float64) {
	for _, s := range n.Steps {
		if s.Flux != nil {
			full = math.Max(full, math.Abs(*s.Flux))
		}
	}
	for _, s := range n.Steps {
		p := netPen{forward: netThin, plain: s.Flux == nil}
		if s.Returns {
			p.back = netThin
		}
		if s.Flux != nil {
			size := math.Abs(*s.Flux)
			p.idle = !(size > netRest*full)
			switch {
			case p.idle:
			case *s.Flux < 0:
				p.back, p.forward = math.Max(netThin/2, netMost*size/full), netThin/2
			default:
				p.forward = math.Max(netThin/2, netMost*size/full)
				p.back = math.Min(p.back, netThin/2)
			}
		}
		pens = append(pens, p)
	}
	return pens, full
}

func headLength(w float64) float64 { return 7 + 0.9*w }
func headBeyond(w float64) float64 { return 2.8 + 0.3*w } // on each side of its line

// half is how far the lines reach from their middle, reach how far the heads do.
func (p netPen) half() float64 {
	if p.back == 0 {
		return p.forward / 2
	}
	return netPair/2 + math.Max(p.forward, p.back)
}

func (p netPen) reach() float64 { return p.half() + headBeyond(math.Max(p.forward, p.back)) }

// leg draws the lines of one node of a step along a path from the step to the
// node.
func (p netPen) leg(path []Command, product bool) []Mark {
	if p.back == 0 {
		return p.line(path, p.forward/2, -p.forward/2, product, true)
	}
	// Each line stands on the left of its own travel.
	way := 1.0
	if !product {
		way = -1
	}
	marks := p.line(path, way*(netPair/2+p.forward), way*netPair/2, product, false)
	return append(marks, p.line(path, -way*netPair/2, -way*(netPair/2+p.back), !product, false)...)
}

// line draws one line, between two distances to the left of the path, with a head
// or a half head, whose barb is on its outer side.
func (p netPen) line(path []Command, left, right float64, head, whole bool) []Mark {
	w := left - right
	length := headLength(w)
	var marks []Mark
	body := path
	if head {
		body = cutEnd(path, length-0.3)
	}
	switch middle := (left + right) / 2; {
	case p.idle:
		marks = append(marks, Curve{"reaction idle", offset(body, middle)})
	case p.plain:
		marks = append(marks, Curve{"reaction", offset(body, middle)})
	default:
		marks = append(marks, Curve{"flow", ribbon(body, left, right)})
	}
	if !head {
		return marks
	}
	tip, dx, dy := heading(path)
	at := func(back, side float64) Command {
		return Command{Op: To, X: tip.x - back*dx + side*dy, Y: tip.y - back*dy - side*dx}
	}
	barb := headBeyond(w)
	corners := []Command{at(0, (left+right)/2), at(length, left+barb), at(length, right-barb), {Op: Close}}
	if !whole {
		inner, outer := right, left+barb
		if left < 0 || right < 0 {
			inner, outer = left, right-barb
		}
		corners = []Command{at(0, inner), at(length, outer), at(length, inner), {Op: Close}}
	}
	corners[0].Op = Move
	return append(marks, Curve{"flow", corners})
}

// heading gives the end of a path and its direction there.
func heading(path []Command) (end spot, dx, dy float64) {
	last, before := path[len(path)-1], path[len(path)-2]
	from := spot{before.X, before.Y}
	if last.Op == Cubic && (last.X2 != last.X || last.Y2 != last.Y) {
		from = spot{last.X2, last.Y2}
	}
	dx, dy = unit2(last.X-from.x, last.Y-from.y)
	return spot{last.X, last.Y}, dx, dy
}

func unit2(x, y float64) (float64, float64) {
	if d := math.Hypot(x, y); d > 1e-9 {
		return x / d, y / d
	}
	return 0, 0
}

// offset moves a path by d to the left of its travel. Curves are moved by their
// control polygon (Tiller and Hanson, IEEE Comput. Graph. Appl. 4 (9), 61, 1984).
func offset(path []Command, d float64) []Command {
	out := make([]Command, 0, len(path))
	var from spot
	for i, c := range path {
		to := spot{c.X, c.Y}
		if i == 0 {
			from = to
			continue
		}
		if c.Op == Cubic && d == 0 {
			out = begun(out, from)
			out, from = append(out, c), to
			continue
		}
		if c.Op == Cubic { // in halves, which keep closer to the distance
			p := [4]spot{from, {c.X1, c.Y1}, {c.X2, c.Y2}, to}
			for _, half := range [][4]spot{front(p, 0.5), backwards(front(backwards(p), 0.5))} {
				q := aside(half, d)
				out = append(begun(out, q[0]), Command{Cubic, q[1].x, q[1].y, q[2].x, q[2].y, q[3].x, q[3].y})
			}
		} else {
			nx, ny := unit2(to.x-from.x, to.y-from.y)
			out = begun(out, spot{from.x + d*ny, from.y - d*nx})
			out = append(out, Command{Op: c.Op, X: to.x + d*ny, Y: to.y - d*nx})
		}
		from = to
	}
	return out
}

func begun(path []Command, at spot) []Command {
	if len(path) == 0 {
		path = append(path, Command{Op: Move, X: at.x, Y: at.y})
	}
	return path
}

func backwards(p [4]spot) [4]spot { return [4]spot{p[3], p[2], p[1], p[0]} }

func aside(p [4]spot, d float64) [4]spot {
	var n [3]spot // to the left of each side of the polygon
	for i := range n {
		x, y := unit2(p[i+1].x-p[i].x, p[i+1].y-p[i].y)
		n[i] = spot{y, -x}
	}
	for i, m := range n { // a side without length goes with its neighbour
		if m == (spot{}) {
			n[i] = n[(i+1)%3]
		}
	}
	corner := func(q, a, b spot) spot {
		k := d / math.Max(0.35, 1+a.x*b.x+a.y*b.y)
		return spot{q.x + k*(a.x+b.x), q.y + k*(a.y+b.y)}
	}
	return [4]spot{{p[0].x + d*n[0].x, p[0].y + d*n[0].y}, corner(p[1], n[0], n[1]), corner(p[2], n[1], n[2]), {p[3].x + d*n[2].x, p[3].y + d*n[2].y}}
}

// ribbon is the outline of what lies between two distances to the left of a path.
func ribbon(path []Command, left, right float64) []Command {
	out := offset(path, left)
	back := turned(offset(path, right))
	back[0].Op = To
	return append(append(out, back...), Command{Op: Close})
}

// turned runs a path the other way.
func turned(path []Command) []Command {
	out := []Command{{Op: Move, X: path[len(path)-1].X, Y: path[len(path)-1].Y}}
	for i := len(path) - 1; i > 0; i-- {
		c := path[i]
		c.X1, c.Y1, c.X2, c.Y2 = c.X2, c.Y2, c.X1, c.Y1
		c.X, c.Y = path[i-1].X, path[i-1].Y
		out = append(out, c)
	}
	return out
}

// cutEnd takes a length off the end of a path, of its last part at most.
func cutEnd(path []Command, length float64) []Command {
	out := append([]Command{}, path...)
	last := &out[len(out)-1]
	from := spot{out[len(out)-2].X, out[len(out)-2].Y}
	if last.Op != Cubic {
		dx, dy := last.X-from.x, last.Y-from.y
		f := math.Max(0.02, 1-length/math.Max(1e-9, math.Hypot(dx, dy)))
		last.X, last.Y = from.x+f*dx, from.y+f*dy
		return out
	}
	p := [4]spot{from, {last.X1, last.Y1}, {last.X2, last.Y2}, {last.X, last.Y}}
	low, high := 0.02, 1.0
	for range 30 {
		t := (low + high) / 2
		if q := bezier(p, t); math.Hypot(q.x-p[3].x, q.y-p[3].y) > length {
			low = t
		} else {
			high = t
		}
	}
	q := front(p, low)
	*last = Command{Cubic, q[1].x, q[1].y, q[2].x, q[2].y, q[3].x, q[3].y}
	return out
}

func between(a, b spot, t float64) spot { return spot{a.x + t*(b.x-a.x), a.y + t*(b.y-a.y)} }

// front is the part of a curve up to t (de Casteljau).
func front(p [4]spot, t float64) [4]spot {
	a, b, c := between(p[0], p[1], t), between(p[1], p[2], t), between(p[2], p[3], t)
	d, e := between(a, b, t), between(b, c, t)
	return [4]spot{p[0], a, d, between(d, e, t)}
}

func bezier(p [4]spot, t float64) spot { return front(p, t)[3] }

// flat gives points along a path.
func flat(path []Command) []spot {
	var out []spot
	for _, c := range path {
		switch c.Op {
		case Cubic:
			p := [4]spot{out[len(out)-1], {c.X1, c.Y1}, {c.X2, c.Y2}, {c.X, c.Y}}
			for k := 1; k <= 12; k++ {
				out = append(out, bezier(p, float64(k)/12))
			}
		case Close:
		default:
			out = append(out, spot{c.X, c.Y})
		}
	}
	return out
}
