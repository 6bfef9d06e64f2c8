package diagram

import (
	"math"
	"slices"
)

// netPlan is a figure laid out: first bands, then lines, then text.
type netPlan struct {
	n                  Network
	bands, lines, text []Mark
	full               float64
	kind               string // how it is laid out
	crossings          int
}

// plan chooses the layout; see Network.
func (n Network) plan() (*netPlan, error) {
	nodes, steps, err := n.ringOf()
	if err != nil {
		return nil, err
	}
	pens, full := n.pens()
	room := n.Width - 2*margin
	if r, ok := n.ring(nodes, steps); ok {
		if p := r.plan(pens, room); p != nil {
			p.full = full
			return p, nil
		}
	}
	g := n.graph(func(i int) bool { return n.Nodes[i].Beside })
	layers := g.layers()
	var best *netSheet
	least := math.Inf(1)
	for _, try := range []struct {
		right bool
		wrap  float64
	}{{true, 130}, {true, 96}, {false, 130}, {false, 96}, {false, 70}, {true, 70}} {
		s := layers.sheet(try.right, try.wrap, pens)
		w, _ := s.size()
		if w < least-1e-9 {
			best, least = s, w
		}
		if w <= room {
			break
		}
	}
	p := best.plan(nodes, steps)
	p.full = full
	return p, nil
}

// draw gives the marks and the width that they need.
func (p *netPlan) draw() ([]Mark, float64) {
	marks := slices.Concat(p.bands, p.lines, p.text)
	all := bounds(marks)
	room := math.Max(all.X1-all.X0, p.n.Width-2*margin)
	key := p.n.key(p.full, room, all.Y1+16)
	if len(key) > 0 {
		k := bounds(key)
		middle := (all.X0 + all.X1 - k.X0 - k.X1) / 2
		marks = append(marks, moved(key, middle, 0)...)
	}
	all = bounds(marks)
	return marks, all.X1 - all.X0 + 2*margin
}

// place turns along and across into a place on the figure.
func (s *netSheet) place(along, across float64) spot {
	if s.right {
		return spot{along, across}
	}
	return spot{across, along}
}

func (s *netSheet) middle(v int) float64 { return (s.from[s.layer[v]] + s.to[s.layer[v]]) / 2 }

// plan draws the sheet; the cycle is given by its nodes and steps.
func (s *netSheet) plan(cycleNodes, cycleSteps []int) *netPlan {
	p := &netPlan{n: s.g.n, kind: "down", crossings: s.crossings}
	if s.right {
		p.kind = "right"
	}
	chains := make([][]int, len(s.g.legs)) // edges of each leg, along
	for _, e := range s.inOrder() {
		chains[s.edges[e].leg] = append(chains[s.edges[e].leg], e)
	}
	paths := make([][]Command, len(s.g.legs))
	for k, leg := range s.g.legs {
		paths[k] = s.path(k, chains[k])
		p.lines = append(p.lines, s.pen(k).leg(paths[k], leg.product)...)
		if n := s.count(k); n > 1 {
			p.text = append(p.text, s.number(k, n, paths[k]))
		}
	}
	p.bands = s.g.cycleBands(s.pens, paths, cycleNodes, cycleSteps)
	for v, t := range s.text {
		if t == nil {
			continue
		}
		at := s.place(s.middle(v), s.x[v])
		if s.g.verts[v].step < 0 {
			p.text = append(p.text, t.centred(at.x, at.y)...)
			continue
		}
		half := s.dot(v)
		if half > s.pens[s.g.verts[v].step].half() {
			along := s.joint(v)
			j := s.place(along, s.x[v])
			p.lines = append(p.lines, Dot{"point", j.x, j.y, half - 0.5})
		}
		if s.right {
			p.text = append(p.text, t.label(at.x-t.w/2, at.y-half-3-t.h, Middle))
		} else {
			p.text = append(p.text, t.label(at.x+half+5, at.y-t.h/2, Start))
		}
	}
	return p
}

// inOrder lists the edges by layer.
func (s *netSheet) inOrder() []int {
	order := make([]int, len(s.edges))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int { return s.layer[s.edges[a].a] - s.layer[s.edges[b].a] })
	return order
}

// joint is where the legs of a step meet.
func (s *netSheet) joint(v int) float64 {
	i := s.layer[v]
	switch s.mixed(v) {
	case -1:
		return s.from[i] + s.dot(v)
	case 1:
		return s.to[i] - s.dot(v)
	}
	return s.middle(v)
}

// path runs from the joint of a step to the edge of the node.
func (s *netSheet) path(k int, chain []int) []Command {
	leg := s.g.legs[k]
	type stop struct{ along, across float64 }
	var stops []stop
	first, last := s.edges[chain[0]].a, s.edges[chain[len(chain)-1]].b
	begin, end := s.reachOf(first, true), s.reachOf(last, false)
	stops = append(stops, stop{begin, s.x[first] + s.pa[chain[0]]})
	for _, e := range chain {
		a, b := s.edges[e].a, s.edges[e].b
		stops = append(stops, stop{s.to[s.layer[a]], s.x[a] + s.pa[e]}, stop{s.from[s.layer[b]], s.x[b] + s.pb[e]})
	}
	stops = append(stops, stop{end, stops[len(stops)-1].across})
	var path []Command
	var was stop
	for i, at := range stops {
		q := s.place(at.along, at.across)
		switch {
		case i == 0:
			path = append(path, Command{Op: Move, X: q.x, Y: q.y})
		case math.Abs(at.along-was.along) < 0.01 && math.Abs(at.across-was.across) < 0.01:
			continue
		case math.Abs(at.across-was.across) < 0.01:
			if n := len(path); n > 1 && path[n-1].Op == To {
				path[n-1].X, path[n-1].Y = q.x, q.y
			} else {
				path = append(path, Command{Op: To, X: q.x, Y: q.y})
			}
		default:
			half := (at.along + was.along) / 2
			c1, c2 := s.place(half, was.across), s.place(half, at.across)
			path = append(path, Command{Cubic, c1.x, c1.y, c2.x, c2.y, q.x, q.y})
		}
		was = at
	}
	if leg.vertex == first {
		path = turned(path)
	}
	return path
}

// reachOf is where a line that leaves v begins, or where one that comes ends.
func (s *netSheet) reachOf(v int, leaves bool) float64 {
	if s.g.verts[v].step >= 0 {
		// Half a unit beyond, so that nothing shows between two legs.
		if s.mixed(v) != 0 {
			return s.joint(v)
		}
		if leaves {
			return s.joint(v) - 0.5
		}
		return s.joint(v) + 0.5
	}
	t := s.text[v]
	half := t.h / 2
	if s.right {
		half = t.w / 2
	}
	if leaves {
		return s.middle(v) + half + 1.5
	}
	return s.middle(v) - half - 1.5
}

// number sets a count beside the end of a path.
func (s *netSheet) number(k, n int, path []Command) Mark {
	end, dx, dy := heading(path)
	beside := s.pen(k).reach() + 3
	const back = 4.0
	if s.right {
		x := end.x - back*dx
		if dx > 0 {
			x -= numberWidth(n)
		}
		return number(n, x, end.y-beside-numberHeight/2)
	}
	return number(n, end.x+beside, end.y-dy*(back+valueSize/2))
}

// cycleBands draws the soft band under a cycle.
func (g *netGraph) cycleBands(pens []netPen, paths [][]Command, nodes, steps []int) []Mark {
	var marks []Mark
	for i, step := range steps {
		var legs [2]int
		for side, node := range []int{nodes[i], nodes[(i+1)%len(nodes)]} {
			legs[side] = -1
			for k, l := range g.legs {
				// A node on both sides of a step is meant once on each.
				if g.verts[l.step].step == step && g.verts[l.vertex].node == node && (side == 0 || k != legs[0]) {
					legs[side] = k
				}
			}
		}
		if legs[0] < 0 || legs[1] < 0 {
			continue
		}
		whole := turned(paths[legs[0]])
		on := paths[legs[1]][1:]
		marks = append(marks, Curve{"band fill-1", ribbon(append(whole, on...), pens[step].reach()+2, -pens[step].reach()-2)})
	}
	return marks
}
