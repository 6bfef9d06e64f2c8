package diagram

import (
	"math"
	"sort"
)

// netRing is a network whose steps form one cycle, of which everything else
// hangs off.
type netRing struct {
	g     *netGraph
	nodes []int    // vertices round the ring, clockwise
	steps []int    // step i leads from node i to the next
	legs  [][2]int // of each step: from its node, and to the next
	pens  []netPen
	wrap  float64

	rx, ry float64
	text   []*netText  // per vertex
	box    []Rect      // of what is placed
	owner  []int       // per box: the vertex; -1: a step's label or a number
	paths  [][]Command // per leg, from the step to the node
	lines  []netStroke // of what is placed
	marks  netPlan
}

// netStroke is a line on the figure with half its width.
type netStroke struct {
	points []spot
	half   float64
	step   int // vertex
}

const maxRing = 12 // nodes round a ring

// ring finds the cycle; see Network for the rule. nodes and cycle are those that
// are to be marked, if any.
func (n Network) ring(nodes, cycle []int) (*netRing, bool) {
	made, used := map[string]bool{}, map[string]bool{}
	for _, s := range n.Steps {
		for side, terms := range [][]NetworkTerm{s.From, s.To} {
			for _, t := range terms {
				if side == 0 {
					used[t.Node] = true
				} else {
					made[t.Node] = true
				}
			}
		}
	}
	times := map[string]int{} // how many steps of the cycle a node takes part in
	for _, i := range cycle {
		for _, t := range append(append([]NetworkTerm{}, n.Steps[i].From...), n.Steps[i].To...) {
			times[t.Node]++
		}
	}
	for _, i := range nodes {
		times[n.Nodes[i].key()] = 0
	}
	g := n.graph(func(i int) bool {
		d := n.Nodes[i]
		return d.Beside || !made[d.key()] || !used[d.key()] || times[d.key()] > 1
	})
	// What has one neighbour left is taken off, until the cycle stands alone.
	degree := make([]int, len(g.verts))
	for v := range degree {
		degree[v] = len(g.of[v])
	}
	for changed := true; changed; {
		changed = false
		for v := range degree {
			if degree[v] == 1 {
				degree[v], changed = 0, true
				for _, k := range g.of[v] {
					if w := g.other(k, v); degree[w] > 0 {
						degree[w]--
					}
				}
			}
		}
	}
	r := &netRing{g: g}
	first, size := -1, 0
	for v, d := range degree {
		if d > 2 {
			return nil, false
		}
		if d == 2 {
			size++
			if first < 0 && g.verts[v].step < 0 {
				first = v
			}
		}
	}
	if first < 0 || size/2 > maxRing || size < 4 {
		return nil, false
	}
	for v := first; len(r.nodes) == 0 || v != first; {
		from, to := -1, -1
		for _, k := range g.of[v] {
			if degree[g.legs[k].step] == 2 && !g.legs[k].product {
				from = k
			}
		}
		if from < 0 {
			return nil, false
		}
		step := g.legs[from].step
		for _, k := range g.of[step] {
			if degree[g.legs[k].vertex] == 2 && g.legs[k].product {
				to = k
			}
		}
		if to < 0 || len(r.nodes) > maxRing {
			return nil, false
		}
		r.nodes, r.steps, r.legs = append(r.nodes, v), append(r.steps, step), append(r.legs, [2]int{from, to})
		v = g.legs[to].vertex
	}
	return r, 2*len(r.nodes) == size && r.hangs(cycle)
}

// hangs reports whether what is not on the ring hangs off it directly: single
// nodes at its steps, and steps with single nodes at its nodes.
func (r *netRing) hangs(cycle []int) bool {
	on := make([]bool, len(r.g.verts))
	for i := range r.nodes {
		on[r.nodes[i]], on[r.steps[i]] = true, true
	}
	for v, vertex := range r.g.verts {
		switch {
		case on[v]:
		case vertex.step < 0:
			if len(r.g.of[v]) > 1 {
				return false
			}
		default:
			roots := 0
			for _, k := range r.g.of[v] {
				if on[r.g.legs[k].vertex] {
					roots++
				}
			}
			if roots != 1 {
				return false
			}
		}
	}
	for _, i := range cycle { // a cycle to be marked is this one
		if !on[r.stepVertex(i)] {
			return false
		}
	}
	return len(cycle) == 0 || len(cycle) == len(r.steps)
}

func (r *netRing) stepVertex(step int) int {
	for v, vertex := range r.g.verts {
		if vertex.step == step {
			return v
		}
	}
	return -1
}

// plan looks for the smallest ring on which everything finds a place within the
// room; nil if there is none.
func (r *netRing) plan(pens []netPen, room float64) *netPlan {
	r.pens = pens
	least := 56 + 14*float64(len(r.nodes))
	for _, r.wrap = range []float64{120, 84} {
		for _, f := range []float64{1, 0.85, 0.7, 0.55} { // rather round than tall
			for ry := least; ry < 3*least; ry *= 1.09 {
				r.rx, r.ry = ry*f, ry
				if r.try() {
					all := bounds(append(append([]Mark{}, r.marks.lines...), r.marks.text...))
					if all.X1-all.X0 <= room {
						p := r.marks
						return &p
					}
				}
			}
		}
	}
	return nil
}

// place adds a box that nothing else may touch.
func (r *netRing) place(b Rect, v int) { r.box, r.owner = append(r.box, b), append(r.owner, v) }

// free reports whether a box of text keeps clear of everything placed.
func (r *netRing) free(b Rect, gap float64) bool {
	for _, q := range r.box {
		if b.grown(gap).meets(q) {
			return false
		}
	}
	for _, s := range r.lines {
		near := b.grown(s.half + 3)
		for i := 1; i < len(s.points); i++ {
			if crosses(Line{X1: s.points[i-1].x, Y1: s.points[i-1].y, X2: s.points[i].x, Y2: s.points[i].y}, near) {
				return false
			}
		}
	}
	return true
}

// clear reports whether a line keeps off boxes, but for those of its ends, and
// crosses no line of another step, nor one of its own farther off than near from
// where they meet.
func (r *netRing) clear(s netStroke, joint spot, near float64, ends ...int) bool {
	for i := 1; i < len(s.points); i++ {
		a, b := s.points[i-1], s.points[i]
		line := Line{X1: a.x, Y1: a.y, X2: b.x, Y2: b.y}
		for k, q := range r.box {
			own := false
			for _, e := range ends {
				own = own || r.owner[k] == e
			}
			if !own && crosses(line, q.grown(s.half+3)) {
				return false
			}
		}
		if math.Hypot(b.x-joint.x, b.y-joint.y) < near {
			continue
		}
		for _, o := range r.lines {
			for k := 1; k < len(o.points); k++ {
				p, q := o.points[k-1], o.points[k]
				if o.step == s.step && math.Hypot(p.x-joint.x, p.y-joint.y) < near {
					continue
				}
				if o.step != s.step && apart(b, p, q) < s.half+o.half+3 || cross(line, Line{X1: p.x, Y1: p.y, X2: q.x, Y2: q.y}) {
					return false
				}
			}
		}
	}
	return true
}

// cheapest sorts offers by price, those made first before equals.
func cheapest[T any](offers []T, price func(T) float64) []T {
	sort.SliceStable(offers, func(i, k int) bool { return price(offers[i]) < price(offers[k]) })
	return offers
}
