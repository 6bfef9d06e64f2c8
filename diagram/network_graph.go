package diagram

import (
	"slices"
	"sort"
)

// netGraph is a network as the layouts see it: vertices for nodes and for steps,
// a leg for each node in each step. A node drawn anew at each step has a vertex
// for each.
type netGraph struct {
	n      Network
	verts  []netVertex
	legs   []netLeg
	of     [][]int // the legs of each vertex
	rank   []int   // of each vertex; see ranks
	byRank []int
}

type netVertex struct {
	node, step int  // -1: none
	anew       bool // one of several of its node, or drawn like one
}

type netLeg struct {
	vertex, step int // vertices
	product      bool
	into         bool // the net flux runs from the node to the step
	n            int
}

// graph builds the vertices; anew tells which nodes are drawn at each step.
func (n Network) graph(anew func(node int) bool) *netGraph {
	g := &netGraph{n: n}
	at := map[string]int{}
	vertex := make([]int, len(n.Nodes))
	for i, d := range n.Nodes {
		at[d.key()] = i
		if vertex[i] = -1; !anew(i) {
			vertex[i] = len(g.verts)
			g.verts = append(g.verts, netVertex{node: i, step: -1})
		}
	}
	for i, s := range n.Steps {
		step := len(g.verts)
		g.verts = append(g.verts, netVertex{node: -1, step: i})
		back := s.Flux != nil && *s.Flux < 0
		for side, terms := range [][]NetworkTerm{s.From, s.To} {
			for _, t := range terms {
				node := at[t.Node]
				v := vertex[node]
				if v < 0 {
					v = len(g.verts)
					g.verts = append(g.verts, netVertex{node: node, step: -1, anew: true})
				}
				product := side == 1
				g.legs = append(g.legs, netLeg{vertex: v, step: step, product: product, into: product == back, n: t.count()})
			}
		}
	}
	g.of = make([][]int, len(g.verts))
	for i, l := range g.legs {
		g.of[l.vertex] = append(g.of[l.vertex], i)
		g.of[l.step] = append(g.of[l.step], i)
	}
	g.ranks()
	return g
}

func (g *netGraph) other(leg, v int) int {
	if l := g.legs[leg]; l.vertex == v {
		return l.step
	}
	return g.legs[leg].vertex
}

// ranks orders the vertices by how they are joined and not by how they are
// named or listed, so that the same network in another order has the same
// crossings: colours are refined by the colours around them (Weisfeiler and
// Leman, 1968), and where vertices stay alike the one listed first goes first.
func (g *netGraph) ranks() {
	colour := make([]int, len(g.verts))
	for i, v := range g.verts {
		switch {
		case v.step >= 0 && g.n.Steps[v.step].Returns:
			colour[i] = 2
		case v.step >= 0:
			colour[i] = 1
		}
	}
	classes := g.refine(colour, 0)
	for classes < len(colour) {
		members := make([]int, len(colour))
		for _, c := range colour {
			members[c]++
		}
		tied := slices.IndexFunc(members, func(m int) bool { return m > 1 })
		first := slices.Index(colour, tied)
		for i, c := range colour {
			if c > tied || c == tied && i != first {
				colour[i]++
			}
		}
		classes = g.refine(colour, classes)
	}
	g.rank, g.byRank = colour, make([]int, len(colour))
	for i, c := range colour {
		g.byRank[c] = i
	}
}

// refine splits classes until their members look alike and returns how many
// there are, which is more than were known.
func (g *netGraph) refine(colour []int, known int) int {
	look := make([][]int, len(colour))
	order := make([]int, len(colour))
	for {
		for i := range colour {
			look[i] = append(look[i][:0], colour[i])
			from := len(look[i])
			for _, k := range g.of[i] {
				l := g.legs[k]
				kind := 4 * l.n
				if l.product {
					kind++
				}
				if l.into {
					kind += 2
				}
				look[i] = append(look[i], kind*1000+colour[g.other(k, i)])
			}
			sort.Ints(look[i][from:])
			order[i] = i
		}
		sort.SliceStable(order, func(a, b int) bool { return slices.Compare(look[order[a]], look[order[b]]) < 0 })
		classes := 0
		for k, i := range order {
			if k > 0 && slices.Compare(look[order[k-1]], look[i]) != 0 {
				classes++
			}
			colour[i] = classes
		}
		classes++
		if classes == known || classes == len(colour) {
			return classes
		}
		known = classes
	}
}

// direct decides for each leg whether its node stands before the step in the
// layers, so that there is no cycle: steps are taken in the order in which they
// are met from a root, and one that would close a cycle is turned round, if turn
// is set. What is left of cycles, as where a step makes more of what it takes up,
// is broken leg by leg.
func (g *netGraph) direct(root int, turn bool) (before []bool) {
	before = make([]bool, len(g.legs))
	next := make([][]int, len(g.verts)) // the graph so far
	reaches := func(from, to []int) bool {
		seen := make([]bool, len(g.verts))
		goal := make([]bool, len(g.verts))
		for _, v := range to {
			goal[v] = true
		}
		stack := slices.Clone(from)
		for len(stack) > 0 {
			v := stack[len(stack)-1]
			stack = stack[:len(stack)-1]
			if goal[v] {
				return true
			}
			if !seen[v] {
				seen[v] = true
				stack = append(stack, next[v]...)
			}
		}
		return false
	}
	for _, step := range g.met(root) {
		var up, down []int
		for _, k := range g.of[step] {
			if g.legs[k].into {
				up = append(up, g.legs[k].vertex)
			} else {
				down = append(down, g.legs[k].vertex)
			}
		}
		if turn && reaches(down, up) && !reaches(up, down) {
			up, down = down, up
		}
		for moved := true; moved; {
			moved = false
			for i := 0; i < len(down); i++ {
				if reaches(down[i:i+1], up) {
					up, down = append(up, down[i]), slices.Delete(down, i, i+1)
					moved = true
					i--
				}
			}
		}
		for _, k := range g.of[step] {
			before[k] = slices.Contains(up, g.legs[k].vertex)
		}
		for _, v := range up {
			next[v] = append(next[v], step)
		}
		next[step] = append(next[step], down...)
	}
	return before
}

// met lists the step vertices in the order in which they are met from a root,
// going along the flux as deep as it leads; then from what is left.
func (g *netGraph) met(root int) []int {
	var out []int
	seen := make([]bool, len(g.verts))
	var visit func(v int)
	visit = func(v int) {
		if seen[v] {
			return
		}
		seen[v] = true
		step := g.verts[v].step >= 0
		if step {
			out = append(out, v)
		}
		var on []int
		for _, k := range g.of[v] {
			if g.legs[k].into != step {
				on = append(on, g.other(k, v))
			}
		}
		sort.Slice(on, func(a, b int) bool { return g.rank[on[a]] < g.rank[on[b]] })
		for _, w := range on {
			visit(w)
		}
	}
	visit(root)
	for pass := range 2 { // sources, then the rest
		for _, v := range g.byRank {
			if pass == 1 || g.source(v) {
				visit(v)
			}
		}
	}
	return out
}

// source reports whether no step leads to v.
func (g *netGraph) source(v int) bool {
	for _, k := range g.of[v] {
		if g.verts[v].step >= 0 || !g.legs[k].into {
			return false
		}
	}
	return true
}

// roots lists vertices to start from: sources first, at most some.
func (g *netGraph) roots() []int {
	var out []int
	for pass := range 2 {
		for _, v := range g.byRank {
			if g.verts[v].step < 0 && !g.verts[v].anew && g.source(v) == (pass == 0) {
				out = append(out, v)
			}
		}
	}
	if len(out) == 0 {
		out = []int{g.byRank[0]}
	}
	most := 12
	if len(g.verts) > 40 {
		most = 4
	}
	return out[:min(most, len(out))]
}
