package diagram

import (
	"math"
	"sort"
)

// netSheet is a layered graph with sizes and places. Layers follow each other
// along one axis; within its layer everything stands in a band of its own, in
// which lines run straight along, and bends lie between the bands.
type netSheet struct {
	*netLayers
	right         bool // layers from left to right, otherwise from top to bottom
	pens          []netPen
	text          []*netText // per vertex; nil for bends
	before, after []float64  // per vertex: how far it reaches across, from its line
	length        []float64  // per vertex: along
	stub          []float64  // per vertex: length of its lines within the band, on each side
	pa, pb        []float64  // per edge: where it leaves a and meets b, across, from their lines
	x             []float64  // per vertex: across
	from, to      []float64  // per layer: its band along
	low, high     float64    // of everything across
}

const (
	netGap     = 12.0 // between two things in a layer
	netLineGap = 9.0  // if one is a bend
	netStub    = 20.0 // least length of a line at a node, for its head and its number
)

func (l *netLayers) sheet(right bool, wrap float64, pens []netPen) *netSheet {
	n := len(l.layer)
	s := &netSheet{netLayers: l, right: right, pens: pens,
		text: make([]*netText, n), before: make([]float64, n), after: make([]float64, n), length: make([]float64, n), stub: make([]float64, n),
		pa: make([]float64, len(l.edges)), pb: make([]float64, len(l.edges))}
	for v := range n {
		switch {
		case l.bend[v] >= 0:
			half := s.pen(l.bend[v]).half() + 2
			s.before[v], s.after[v] = half, half
		case l.g.verts[v].step >= 0:
			s.sizeStep(v, wrap)
		default:
			s.sizeNode(v, wrap)
		}
	}
	s.settle()
	s.bands()
	return s
}

func (s *netSheet) pen(leg int) netPen { return s.pens[s.g.verts[s.g.legs[leg].step].step] }

func (s *netSheet) sizeStep(v int, wrap float64) {
	step := s.g.n.Steps[s.g.verts[v].step]
	t := s.g.n.stepText(step, wrap)
	s.text[v] = t
	half := s.dot(v)
	s.before[v], s.after[v] = half+2, half+2
	if s.right {
		s.before[v] = half + 3 + t.h
		s.length[v] = math.Max(t.w, 12) + 8
	} else {
		s.after[v] = half + 5 + t.w
		s.length[v] = math.Max(t.h+8, 20)
	}
}

// dot is half the width of what a step shows on its line.
func (s *netSheet) dot(v int) float64 {
	half := s.pens[s.g.verts[v].step].half()
	if s.g.n.Steps[s.g.verts[v].step].Note != "" || s.mixed(v) != 0 {
		return half + 3
	}
	return half
}

// mixed tells whether nodes that the step takes up and gives off stand on the
// same side of it: -1 before it, 1 behind it, 0 on neither.
func (s *netSheet) mixed(v int) int {
	for side, edges := range [][]int{s.up[v], s.down[v]} {
		product := map[bool]bool{}
		for _, e := range edges {
			product[s.g.legs[s.edges[e].leg].product] = true
		}
		if len(product) == 2 || len(edges) == 0 {
			if len(edges) == 0 {
				return 1 - 2*side // all on the other side
			}
			return 2*side - 1
		}
	}
	return 0
}

func (s *netSheet) sizeNode(v int, wrap float64) {
	vertex := s.g.verts[v]
	count := 1
	if vertex.anew {
		count = s.g.legs[s.g.of[v][0]].n
	}
	t := s.g.n.nodeText(s.g.n.Nodes[vertex.node], count, !vertex.anew, wrap)
	s.text[v] = t
	across, along := &t.w, &t.h
	if s.right {
		across, along = along, across
	}
	reach := 0.0
	for side, edges := range [][]int{s.up[v], s.down[v]} {
		lines, all := s.ports(v, edges, side == 0)
		if t.framed {
			*across = math.Max(*across, 2*lines+4)
		}
		reach = math.Max(reach, all)
		for _, e := range edges {
			p := s.pen(s.edges[e].leg)
			s.stub[v] = math.Max(s.stub[v], math.Max(netStub, headLength(math.Max(p.forward, p.back))+4))
			if n := s.count(s.edges[e].leg); n > 1 {
				s.stub[v] = math.Max(s.stub[v], numberWidth(n)+8)
			}
		}
	}
	reach = math.Max(reach, *across/2)
	s.before[v], s.after[v] = reach, reach
	s.length[v] = *along + 2*s.stub[v]
}

// count is the number that stands beside a leg.
func (s *netSheet) count(leg int) int {
	if s.g.verts[s.g.legs[leg].vertex].anew {
		return 1
	}
	return s.g.legs[leg].n
}

// ports spreads the edges on one side of a node and tells how far their lines
// reach from its middle, and how far all does with heads and numbers.
func (s *netSheet) ports(v int, edges []int, up bool) (lines, all float64) {
	edges = append([]int{}, edges...)
	end := func(e int) int {
		if up {
			return s.at[s.edges[e].a]
		}
		return s.at[s.edges[e].b]
	}
	sort.SliceStable(edges, func(i, k int) bool { return end(edges[i]) < end(edges[k]) })
	place := make([]float64, len(edges))
	befores, afters := make([]float64, len(edges)), make([]float64, len(edges))
	for i, e := range edges {
		reach := s.pen(s.edges[e].leg).reach()
		befores[i], afters[i] = reach, reach
		if n := s.count(s.edges[e].leg); n > 1 {
			if s.right {
				befores[i] += numberHeight + 4
			} else {
				afters[i] += numberWidth(n) + 4
			}
		}
		if i > 0 {
			place[i] = place[i-1] + afters[i-1] + befores[i] + 3
		}
	}
	if len(edges) == 0 {
		return 0, 0
	}
	middle := place[len(place)-1] / 2
	for i, e := range edges {
		p := place[i] - middle
		if up {
			s.pb[e] = p
		} else {
			s.pa[e] = p
		}
		lines = math.Max(lines, math.Abs(p)+s.pen(s.edges[e].leg).half())
		all = math.Max(all, math.Max(befores[i]-p, p+afters[i]))
	}
	return lines, all
}

// apart is the least distance between the lines of two neighbours in a row.
func (s *netSheet) apart(v, w int) float64 {
	gap := netGap
	if s.bend[v] >= 0 || s.bend[w] >= 0 {
		gap = netLineGap
	}
	return s.after[v] + gap + s.before[w]
}

// settle finds the places across: row by row each vertex goes to the weighted
// mean of its neighbours, as near as the order and the gaps allow (isotonic
// regression by pooling, Ayer et al., Ann. Math. Stat. 26, 641, 1955). Weights
// fall with the distance, so that in the end most lines are straight and few are
// not, and long ones are held straightest.
func (s *netSheet) settle() {
	s.x = make([]float64, len(s.layer))
	for _, row := range s.rows {
		for k := 1; k < len(row); k++ {
			s.x[row[k]] = s.x[row[k-1]] + s.apart(row[k-1], row[k])
		}
		if len(row) > 0 {
			middle := s.x[row[len(row)-1]] / 2
			for _, v := range row {
				s.x[v] -= middle
			}
		}
	}
	blur := 200.0
	for round := range 160 {
		for i := range s.rows {
			if round%2 == 1 {
				i = len(s.rows) - 1 - i
			}
			s.pool(s.rows[i], blur)
		}
		blur = math.Max(1, blur*0.95)
	}
	s.snap()
	s.low, s.high = math.Inf(1), math.Inf(-1)
	for v, x := range s.x {
		s.low, s.high = math.Min(s.low, x-s.before[v]), math.Max(s.high, x+s.after[v])
	}
}

// wish gives where v would stand for the sake of its neighbours.
func (s *netSheet) wish(v int, blur float64) (place, weight float64) {
	see := func(e, w int, off float64) {
		base := 1.0
		if s.bend[v] >= 0 {
			base *= 3
		}
		if s.bend[w] >= 0 {
			base *= 3
		}
		to := s.x[w] + off
		base /= math.Abs(to-s.x[v]) + blur
		place, weight = place+base*to, weight+base
	}
	for _, e := range s.up[v] {
		see(e, s.edges[e].a, s.pa[e]-s.pb[e])
	}
	for _, e := range s.down[v] {
		see(e, s.edges[e].b, s.pb[e]-s.pa[e])
	}
	if weight == 0 {
		return s.x[v], 1e-6
	}
	return place / weight, weight
}

func (s *netSheet) pool(row []int, blur float64) {
	type group struct {
		place, weight float64
		n             int
	}
	var groups []group
	off := make([]float64, len(row))
	for k, v := range row {
		if k > 0 {
			off[k] = off[k-1] + s.apart(row[k-1], v)
		}
		place, weight := s.wish(v, blur)
		g := group{place - off[k], weight, 1}
		for len(groups) > 0 && groups[len(groups)-1].place > g.place {
			p := groups[len(groups)-1]
			groups = groups[:len(groups)-1]
			w := p.weight + g.weight
			g = group{(p.place*p.weight + g.place*g.weight) / w, w, p.n + g.n}
		}
		groups = append(groups, g)
	}
	k := 0
	for _, g := range groups {
		for range g.n {
			s.x[row[k]] = g.place + off[k]
			k++
		}
	}
}

// snap makes lines straight that can be: what joins one line to one moves to the
// nearer of its two neighbours, and everything to one that it nearly faces.
func (s *netSheet) snap() {
	for round := range 8 {
		for i := range s.rows {
			if round%2 == 1 {
				i = len(s.rows) - 1 - i
			}
			row := s.rows[i]
			for k, v := range row {
				low, high := math.Inf(-1), math.Inf(1)
				if k > 0 {
					low = s.x[row[k-1]] + s.apart(row[k-1], v)
				}
				if k+1 < len(row) {
					high = s.x[row[k+1]] - s.apart(v, row[k+1])
				}
				near, far := s.faces(v)
				if math.IsNaN(near) {
					continue
				}
				for _, to := range []float64{near, far} {
					if to >= low && to <= high {
						s.x[v] = to
						break
					}
				}
			}
		}
	}
}

// faces gives the places at which the lines of v would be straight, the nearer
// first; NaN where it should stay.
func (s *netSheet) faces(v int) (near, far float64) {
	near, far = math.NaN(), math.NaN()
	var to []float64
	for _, e := range s.up[v] {
		to = append(to, s.x[s.edges[e].a]+s.pa[e]-s.pb[e])
	}
	for _, e := range s.down[v] {
		to = append(to, s.x[s.edges[e].b]+s.pb[e]-s.pa[e])
	}
	if len(s.up[v]) == 1 && len(s.down[v]) == 1 {
		near, far = to[0], to[1]
		if math.Abs(far-s.x[v]) < math.Abs(near-s.x[v])-0.5 {
			near, far = far, near
		}
		return near, far
	}
	for _, t := range to {
		if math.Abs(t-s.x[v]) < 3 && !(math.Abs(near-s.x[v]) <= math.Abs(t-s.x[v])) {
			near = t
		}
	}
	return near, far
}

// bands gives each layer its place along, with more room between two where lines
// have farther to go across.
func (s *netSheet) bands() {
	s.from, s.to = make([]float64, len(s.rows)), make([]float64, len(s.rows))
	y := 0.0
	for i, row := range s.rows {
		s.from[i] = y
		length, far := 0.0, 0.0
		for _, v := range row {
			length = math.Max(length, s.length[v])
			for _, e := range s.down[v] {
				far = math.Max(far, math.Abs(s.x[s.edges[e].b]+s.pb[e]-s.x[v]-s.pa[e]))
			}
		}
		s.to[i] = y + length
		y = s.to[i] + 4
		if far > 0.01 {
			y += math.Min(66, math.Max(12, 0.45*far))
		}
	}
}

// width and height of the figure.
func (s *netSheet) size() (w, h float64) {
	along := s.to[len(s.to)-1]
	if s.right {
		return along, s.high - s.low
	}
	return s.high - s.low, along
}
