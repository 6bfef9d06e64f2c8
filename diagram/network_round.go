package diagram

import "math"

// try places everything on a ring of the size at hand and reports whether all
// found a place.
func (r *netRing) try() bool {
	g := r.g
	r.box, r.owner, r.lines = nil, nil, nil
	r.text, r.paths = make([]*netText, len(g.verts)), make([][]Command, len(g.legs))
	r.marks = netPlan{n: g.n, kind: "ring"}
	for i, v := range r.nodes {
		t := g.n.nodeText(g.n.Nodes[g.verts[v].node], 1, true, r.wrap)
		r.text[v] = t
		at := r.at(2 * math.Pi * float64(i) / float64(len(r.nodes)))
		b := around(at, t.w, t.h)
		if !r.free(b, 14) {
			return false
		}
		r.place(b, v)
		r.marks.text = append(r.marks.text, t.centred(at.x, at.y)...)
	}
	joints := make([]netJoint, len(r.steps))
	for i := range r.steps {
		if !r.arc(i, &joints[i]) {
			return false
		}
	}
	for i, step := range r.steps {
		if !r.name(step, joints[i], -1) {
			return false
		}
	}
	for i, step := range r.steps {
		if !r.counts(r.legs[i][:]) || !r.beside(step, joints[i], r.legs[i][:], 1) {
			return false
		}
	}
	for i, v := range r.nodes {
		for _, k := range g.of[v] {
			if k != r.legs[i][0] && k != r.legs[(i+len(r.nodes)-1)%len(r.nodes)][1] {
				if !r.hang(i, k) {
					return false
				}
			}
		}
	}
	var nodes, steps []int
	if len(g.n.Cycle) > 0 {
		nodes, steps = r.ringIndices()
	}
	r.marks.bands = g.cycleBands(r.pens, r.paths, nodes, steps)
	return true
}

func (r *netRing) ringIndices() (nodes, steps []int) {
	for i := range r.nodes {
		nodes, steps = append(nodes, r.g.verts[r.nodes[i]].node), append(steps, r.g.verts[r.steps[i]].step)
	}
	return nodes, steps
}

// netJoint is where the legs of a step meet: the place, the way along and, to
// its left, outwards.
type netJoint struct{ at, on, out spot }

// at is a place on the ring, clockwise from the top.
func (r *netRing) at(angle float64) spot {
	return spot{r.rx * math.Sin(angle), -r.ry * math.Cos(angle)}
}

func (r *netRing) way(angle float64) spot {
	x, y := unit2(r.rx*math.Cos(angle), r.ry*math.Sin(angle))
	return spot{x, y}
}

func around(c spot, w, h float64) Rect { return Rect{c.x - w/2, c.y - h/2, c.x + w/2, c.y + h/2} }

func (r Rect) holds(p spot) bool { return p.x > r.X0 && p.x < r.X1 && p.y > r.Y0 && p.y < r.Y1 }

// arc draws step i along the ring, from the frame of one node to the next.
func (r *netRing) arc(i int, j *netJoint) bool {
	n := float64(len(r.nodes))
	from, to := 2*math.Pi*float64(i)/n, 2*math.Pi*float64(i+1)/n
	pen := r.pens[r.g.verts[r.steps[i]].step]
	// back goes back from the end of an arc until its lines are out of the box.
	back := func(box Rect, angle, turn float64) float64 {
		for k := 0; k < 400; k++ {
			p, w, d := r.at(angle), r.way(angle), pen.half()
			if !box.holds(p) && !box.holds(spot{p.x - d*w.y, p.y + d*w.x}) && !box.holds(spot{p.x + d*w.y, p.y - d*w.x}) {
				break
			}
			angle += turn
		}
		return angle
	}
	const turn = math.Pi / 720
	a, b := r.box[i], r.box[(i+1)%len(r.nodes)]
	from, to = back(a.grown(1.5), from, turn), back(b.grown(1.5), to, -turn)
	middle := (from + to) / 2
	least := headLength(math.Max(pen.forward, pen.back)) + 10
	for side, k := range r.legs[i] {
		drawn := false
		for _, gap := range []float64{1.5, 3, 5, 8} { // more where it meets a frame aslant
			end := back(a.grown(gap), from, turn)
			if side == 1 {
				end = back(b.grown(gap), to, -turn)
			}
			r.paths[k] = r.along(middle, end)
			if (end-middle)*float64(2*side-1) <= 0 || length(r.paths[k]) < least {
				return false
			}
			if drawn = r.draw(k, pen); drawn {
				break
			}
		}
		if !drawn {
			return false
		}
	}
	on := r.way(middle)
	*j = netJoint{r.at(middle), on, spot{on.y, -on.x}}
	return true
}

// draw draws a leg along its path, unless its lines or heads would come too close
// to a box, such as that at which they end.
func (r *netRing) draw(leg int, pen netPen) bool {
	marks := pen.leg(r.paths[leg], r.g.legs[leg].product)
	for i, b := range r.box {
		gap := 2.2
		if v := r.owner[i]; v >= 0 && r.text[v].framed {
			gap = 0.8
		}
		b = b.grown(gap)
		for _, m := range marks {
			if !m.Bounds().meets(b) {
				continue
			}
			points := flat(m.(Curve).Path)
			for k := 1; k < len(points); k++ {
				if crosses(Line{X1: points[k-1].x, Y1: points[k-1].y, X2: points[k].x, Y2: points[k].y}, b) {
					return false
				}
			}
		}
	}
	r.marks.lines = append(r.marks.lines, marks...)
	r.lines = append(r.lines, netStroke{flat(r.paths[leg]), pen.reach(), r.g.legs[leg].step})
	return true
}

func length(path []Command) float64 {
	points, sum := flat(path), 0.0
	for i := 1; i < len(points); i++ {
		sum += math.Hypot(points[i].x-points[i-1].x, points[i].y-points[i-1].y)
	}
	return sum
}

// along is the path on the ring between two angles, in curves of 30° at most.
func (r *netRing) along(from, to float64) []Command {
	parts := int(math.Ceil(math.Abs(to-from) / (math.Pi / 6)))
	at := r.at(from)
	path := []Command{{Op: Move, X: at.x, Y: at.y}}
	step := (to - from) / float64(parts)
	k := 4.0 / 3 * math.Tan(step/4)
	for i := range parts {
		u, v := from+step*float64(i), from+step*float64(i+1)
		p, q := r.at(u), r.at(v)
		path = append(path, Command{Cubic, p.x + k*r.rx*math.Cos(u), p.y + k*r.ry*math.Sin(u), q.x - k*r.rx*math.Cos(v), q.y - k*r.ry*math.Sin(v), q.x, q.y})
	}
	return path
}

// support is how far a box of that size reaches from its middle in a direction.
func support(d spot, w, h float64) float64 { return math.Abs(d.x)*w/2 + math.Abs(d.y)*h/2 }

// name writes the label of a step beside its joint, on one side first (1: the
// left, -1: the right).
func (r *netRing) name(step int, j netJoint, first float64) bool {
	s := r.g.n.Steps[r.g.verts[step].step]
	t := r.g.n.stepText(s, r.wrap)
	pen := r.pens[r.g.verts[step].step]
	half := pen.half()
	if s.Note != "" {
		half += 3
		r.marks.lines = append(r.marks.lines, Dot{"point", j.at.x, j.at.y, half - 0.5})
	}
	for _, side := range []float64{first, -first} {
		for _, gap := range []float64{5, 8, 12, 18, 26} {
			for _, slide := range []float64{0, 6, -6, 14, -14, 24, -24} {
				d := side * (math.Max(half, pen.reach()) + gap + support(j.out, t.w, t.h))
				c := spot{j.at.x + d*j.out.x + slide*j.on.x, j.at.y + d*j.out.y + slide*j.on.y}
				if b := around(c, t.w, t.h); r.free(b, 4) {
					r.place(b, -1)
					r.marks.text = append(r.marks.text, t.label(b.X0, b.Y0, Middle))
					return true
				}
			}
		}
	}
	return false
}

// counts writes numbers beside the legs that end at framed nodes.
func (r *netRing) counts(legs []int) bool {
	for _, k := range legs {
		n := r.g.legs[k].n
		if n == 1 {
			continue
		}
		if !r.count(k, n) {
			return false
		}
	}
	return true
}

func (r *netRing) count(k, n int) bool {
	points := closer(flat(r.paths[k]), 3)
	w, h := numberWidth(n), numberHeight
	pen := r.pens[r.g.verts[r.g.legs[k].step].step]
	for i := len(points) - 1; i > 0; i-- {
		dx, dy := unit2(points[i].x-points[i-1].x, points[i].y-points[i-1].y)
		for _, side := range []float64{1, -1} {
			out := spot{side * dy, -side * dx}
			d := pen.reach() + 4 + support(out, w, h)
			c := spot{points[i].x + d*out.x, points[i].y + d*out.y}
			m := number(n, c.x-w/2, c.y)
			if r.free(m.Bounds(), 3) {
				r.place(m.Bounds(), -1)
				r.marks.text = append(r.marks.text, m)
				return true
			}
		}
	}
	return false
}

// closer adds points to a line until none is farther than that from the next.
func closer(line []spot, most float64) []spot {
	out := line[:1:1]
	for i := 1; i < len(line); i++ {
		n := math.Ceil(math.Hypot(line[i].x-line[i-1].x, line[i].y-line[i-1].y) / most)
		for k := 1.0; k <= n; k++ {
			out = append(out, between(line[i-1], line[i], k/n))
		}
	}
	return out
}

// beside places the nodes that a step takes up and gives off beside its joint:
// what it takes up joins the way from behind, what it gives off leaves it ahead.
func (r *netRing) beside(step int, j netJoint, not []int, side float64) bool {
	for _, k := range r.g.of[step] {
		if k == not[0] || k == not[1] {
			continue
		}
		if !r.single(k, j, side) {
			return false
		}
	}
	return true
}

func (r *netRing) single(k int, j netJoint, side float64) bool {
	leg := r.g.legs[k]
	v := leg.vertex
	t := r.g.n.nodeText(r.g.n.Nodes[r.g.verts[v].node], leg.n, false, r.wrap)
	pen := r.pens[r.g.verts[leg.step].step]
	way := -1.0
	if leg.product {
		way = 1
	}
	head := headLength(math.Max(pen.forward, pen.back))
	type offer struct{ d, s, side float64 }
	var offers []offer
	for _, d := range []float64{16, 24, 34, 46, 60, 76} {
		for _, s := range []float64{18, 28, 40, 54, 70, 90} {
			offers = append(offers, offer{d, s, side})
		}
	}
	for _, o := range cheapest(offers, func(o offer) float64 { return math.Abs(o.d-24) + 0.8*math.Abs(o.s-30) }) {
		up := o.side * (pen.reach() + o.d + support(j.out, t.w, t.h))
		on := way * (o.s + 0.5*support(j.on, t.w, t.h))
		c := spot{j.at.x + up*j.out.x + on*j.on.x, j.at.y + up*j.out.y + on*j.on.y}
		b := around(c, t.w, t.h)
		if !r.free(b, 6) {
			continue
		}
		// The line leaves the box towards where it turns into the way.
		turn := spot{j.at.x + way*0.9*o.s*j.on.x, j.at.y + way*0.9*o.s*j.on.y}
		r.text[v] = t
		r.place(b, v)
		for _, gap := range []float64{2.5, 4, 6, 9} { // more where a wide line comes aslant
			end := edge(b.grown(gap), c, turn)
			if math.Hypot(end.x-j.at.x, end.y-j.at.y) < head+10 {
				break
			}
			r.paths[k] = []Command{{Op: Move, X: j.at.x, Y: j.at.y},
				{Cubic, j.at.x + way*0.55*o.s*j.on.x, j.at.y + way*0.55*o.s*j.on.y, (turn.x + end.x) / 2, (turn.y + end.y) / 2, end.x, end.y}}
			s := netStroke{flat(r.paths[k]), pen.reach(), leg.step}
			if r.clear(s, j.at, 16+2*pen.reach(), v) && r.draw(k, pen) {
				r.marks.text = append(r.marks.text, t.centred(c.x, c.y)...)
				return true
			}
		}
		r.box, r.owner = r.box[:len(r.box)-1], r.owner[:len(r.owner)-1]
	}
	return false
}

// edge is where the way from the middle of a box to a place outside leaves it.
func edge(b Rect, c, to spot) spot {
	f := 1.0
	if dx := math.Abs(to.x - c.x); dx > 0 {
		f = math.Min(f, (b.X1-b.X0)/2/dx)
	}
	if dy := math.Abs(to.y - c.y); dy > 0 {
		f = math.Min(f, (b.Y1-b.Y0)/2/dy)
	}
	return between(c, to, f)
}

// hang draws a step off the ring at node i, straight outwards or nearly, with the
// first node of its other side at the end.
func (r *netRing) hang(i, root int) bool {
	g := r.g
	step := g.legs[root].step
	far := -1
	for _, k := range g.of[step] {
		if k != root && g.legs[k].product != g.legs[root].product {
			far = k
			break
		}
	}
	if far < 0 {
		return false
	}
	v := g.legs[far].vertex
	t := g.n.nodeText(g.n.Nodes[g.verts[v].node], 1, true, r.wrap)
	pen := r.pens[g.verts[step].step]
	own := r.box[i]
	c := spot{(own.X0 + own.X1) / 2, (own.Y0 + own.Y1) / 2}
	outX, outY := unit2(c.x, c.y)
	for _, long := range []float64{64, 80, 100, 124, 150} {
		for _, turn := range []float64{0, 20, -20, 40, -40, 60, -60} {
			sin, cos := math.Sincos(turn * math.Pi / 180)
			d := spot{outX*cos - outY*sin, outX*sin + outY*cos}
			gap := 1.5
			if math.Min(math.Abs(d.x), math.Abs(d.y)) > 0.1 {
				gap = 4 // more where a line meets a frame aslant
			}
			reach := long + support(d, own.X1-own.X0, own.Y1-own.Y0) + support(d, t.w, t.h)
			to := spot{c.x + reach*d.x, c.y + reach*d.y}
			b := around(to, t.w, t.h)
			p, q := edge(own.grown(gap), c, to), edge(b.grown(gap), to, c)
			if !r.free(b, 8) || math.Hypot(p.x-q.x, p.y-q.y) < 2*headLength(math.Max(pen.forward, pen.back))+16 {
				continue
			}
			m := between(p, q, 0.5)
			line := netStroke{[]spot{p, m, q}, pen.reach(), step}
			if !r.clear(line, m, 0, r.nodes[i], v) {
				continue
			}
			back := *r
			back.box, back.owner, back.lines = r.box[:len(r.box):len(r.box)], r.owner[:len(r.owner):len(r.owner)], r.lines[:len(r.lines):len(r.lines)]
			r.paths[root], r.paths[far] = []Command{{Op: Move, X: m.x, Y: m.y}, {Op: To, X: p.x, Y: p.y}}, []Command{{Op: Move, X: m.x, Y: m.y}, {Op: To, X: q.x, Y: q.y}}
			r.text[v] = t
			r.place(b, v)
			on := d
			if g.legs[root].product { // the step leads inwards
				on = spot{-d.x, -d.y}
			}
			j := netJoint{m, on, spot{on.y, -on.x}}
			r.marks.text = append(r.marks.text, t.centred(to.x, to.y)...)
			if r.draw(root, pen) && r.draw(far, pen) && r.name(step, j, 1) && r.counts([]int{root, far}) && (r.beside(step, j, []int{root, far}, 1) || r.beside(step, j, []int{root, far}, -1)) {
				return true
			}
			paths := r.paths
			*r = back
			r.paths = paths
		}
	}
	return false
}
