package diagram

import (
	"math"
	"math/rand/v2"
	"slices"
	"sort"
)

// netLayers is a graph in layers: nodes in even ones, steps in odd ones, and a
// bend in each layer that a leg passes. Edges join neighbouring layers.
type netLayers struct {
	g         *netGraph
	before    []bool // per leg: its node stands before its step
	layer     []int  // per vertex, bends behind those of the graph
	bend      []int  // the leg of each bend; -1 for others
	edges     []netEdge
	up, down  [][]int // per vertex: edges to the layer before and behind
	rows      [][]int // vertices by layer, in order
	at        []int   // place of a vertex in its row
	crossings int
}

type netEdge struct{ a, b, leg int } // from layer to the next

// layered puts vertices as far up as what leads to them allows, then those that
// have more behind them than before down to where they are needed.
func (g *netGraph) layered(before []bool) *netLayers {
	l := &netLayers{g: g, before: before, layer: make([]int, len(g.verts))}
	// ends gives the layers that v must stay behind and before.
	ends := func(v int) (low, high, in, out int) {
		low, high = -1, math.MaxInt
		for _, k := range g.of[v] {
			w := g.other(k, v)
			if before[k] == (g.legs[k].step == v) {
				low, in = max(low, l.layer[w]), in+1
			} else {
				high, out = min(high, l.layer[w]), out+1
			}
		}
		return low, high, in, out
	}
	for changed := true; changed; {
		changed = false
		for v := range g.verts {
			low, _, _, _ := ends(v)
			if g.verts[v].step >= 0 && low < 0 {
				low = 0
			}
			if low+1 > l.layer[v] {
				l.layer[v], changed = low+1, true
			}
		}
	}
	for pass, changed := 0, true; changed && pass < 100; pass++ {
		changed = false
		for k := range g.byRank {
			v := g.byRank[len(g.byRank)-1-k]
			low, high, in, out := ends(v)
			to := l.layer[v]
			switch {
			case high != math.MaxInt && out > in:
				to = high - 1
			case in > out:
				to = low + 1
			}
			if to != l.layer[v] {
				l.layer[v], changed = to, true
			}
		}
	}
	for _, v := range g.byRank { // what can move freely stands half way
		if low, high, in, out := ends(v); in == out && high != math.MaxInt {
			l.layer[v] = low + 1 + (high-low-2)/4*2
		}
	}
	least, last := slices.Min(l.layer), 0
	for v := range l.layer {
		l.layer[v] -= least - least%2
		last = max(last, l.layer[v])
	}
	l.bend = make([]int, len(g.verts))
	for i := range l.bend {
		l.bend[i] = -1
	}
	for k, leg := range g.legs {
		a, b := leg.vertex, leg.step
		if !before[k] {
			a, b = b, a
		}
		for l.layer[a]+1 < l.layer[b] {
			l.layer, l.bend = append(l.layer, l.layer[a]+1), append(l.bend, k)
			l.edges = append(l.edges, netEdge{a, len(l.layer) - 1, k})
			a = len(l.layer) - 1
		}
		l.edges = append(l.edges, netEdge{a, b, k})
	}
	l.up, l.down = make([][]int, len(l.layer)), make([][]int, len(l.layer))
	for i, e := range l.edges {
		l.down[e.a], l.up[e.b] = append(l.down[e.a], i), append(l.up[e.b], i)
	}
	l.rows, l.at = make([][]int, last+1), make([]int, len(l.layer))
	return l
}

// neighbours lists the places of the vertices that v is joined with in the next
// layer or the one before, in order, into what room has space for.
func (l *netLayers) neighbours(room []int, v int, down bool) []int {
	out := room[:0]
	edges := l.up[v]
	if down {
		edges = l.down[v]
	}
	for _, e := range edges {
		p := l.edges[e].a
		if down {
			p = l.edges[e].b
		}
		out = append(out, l.at[p])
		for k := len(out) - 1; k > 0 && out[k] < out[k-1]; k-- {
			out[k], out[k-1] = out[k-1], out[k]
		}
	}
	return out
}

// arrange orders the rows: barycentres layer by layer (Sugiyama, Tagawa and Toda,
// IEEE Trans. Syst. Man Cybern. 11, 109, 1981), then exchanges of neighbours,
// from several beginnings, and keeps the best.
func (l *netLayers) arrange() {
	tries := max(3, min(40, 3000/len(l.layer)))
	random := rand.New(rand.NewPCG(1, 2))
	var best [][]int
	l.crossings = math.MaxInt
	for try := 0; try < tries && l.crossings > 0; try++ {
		l.begin(try, random)
		since := 0
		for sweep := 0; sweep < 24 && since < 4; sweep++ {
			l.sweep(sweep%2 == 0, sweep%4 >= 2)
			l.exchange()
			since++
			if c := l.count(); c < l.crossings {
				l.crossings, since = c, 0
				best = best[:0]
				for _, row := range l.rows {
					best = append(best, slices.Clone(row))
				}
			}
		}
	}
	for i, row := range best {
		l.set(i, row)
	}
}

func (l *netLayers) set(i int, row []int) {
	l.rows[i] = row
	for k, v := range row {
		l.at[v] = k
	}
}

// begin fills the rows in the order in which a walk along all edges meets the
// vertices, from the try-th of them or, later, at random.
func (l *netLayers) begin(try int, random *rand.Rand) {
	for i := range l.rows {
		l.rows[i] = nil
	}
	seen := make([]bool, len(l.layer))
	var walk func(v int)
	walk = func(v int) {
		if seen[v] {
			return
		}
		seen[v] = true
		l.rows[l.layer[v]] = append(l.rows[l.layer[v]], v)
		var on []int
		for _, e := range l.down[v] {
			on = append(on, l.edges[e].b)
		}
		for _, e := range l.up[v] {
			on = append(on, l.edges[e].a)
		}
		sort.SliceStable(on, func(a, b int) bool { return l.key(on[a]) < l.key(on[b]) })
		if try >= 6 {
			random.Shuffle(len(on), func(a, b int) { on[a], on[b] = on[b], on[a] })
		}
		for _, w := range on {
			walk(w)
		}
	}
	n := len(l.g.byRank)
	for k := range n {
		i := (k + try*max(1, n/6)) % n
		if try%2 == 1 {
			i = n - 1 - i
		}
		walk(l.g.byRank[i])
	}
	for i := range l.rows {
		l.set(i, l.rows[i])
	}
}

// key orders vertices by rank, bends by the ranks of their leg's ends.
func (l *netLayers) key(v int) int {
	n := len(l.g.verts)
	if k := l.bend[v]; k >= 0 {
		leg := l.g.legs[k]
		key := n + 2*(l.g.rank[leg.step]*n+l.g.rank[leg.vertex])
		if leg.product {
			key++
		}
		return key
	}
	return l.g.rank[v]
}

// sweep orders each row by the mean place of its neighbours in the row before.
func (l *netLayers) sweep(down, flip bool) {
	mean := make([]float64, len(l.layer))
	var near, moving, places []int
	for i := range l.rows {
		row := slices.Clone(l.rows[i])
		if !down {
			i = len(l.rows) - 1 - i
			row = slices.Clone(l.rows[i])
		}
		if flip { // equals change places
			slices.Reverse(row)
		}
		for _, v := range row {
			near = l.neighbours(near, v, !down)
			mean[v] = -1
			if len(near) > 0 {
				sum := 0
				for _, p := range near {
					sum += p
				}
				mean[v] = float64(sum) / float64(len(near))
			}
		}
		// Those without neighbours there keep their places.
		moving, places = moving[:0], places[:0]
		for k, v := range row {
			if mean[v] >= 0 {
				moving, places = append(moving, v), append(places, k)
			}
		}
		sort.SliceStable(moving, func(a, b int) bool { return mean[moving[a]] < mean[moving[b]] })
		for k, v := range moving {
			row[places[k]] = v
		}
		l.set(i, row)
	}
}

// exchange swaps neighbours in a row while that takes crossings away.
func (l *netLayers) exchange() {
	var x, y []int
	for round, better := 0, true; better && round < 30; round++ {
		better = false
		for i, row := range l.rows {
			for k := 0; k+1 < len(row); k++ {
				a, b := row[k], row[k+1]
				now, then := 0, 0
				for _, down := range []bool{false, true} {
					x, y = l.neighbours(x, a, down), l.neighbours(y, b, down)
					now, then = now+inversions(x, y), then+inversions(y, x)
				}
				if then < now {
					row[k], row[k+1] = b, a
					better = true
				}
			}
			l.set(i, row)
		}
	}
}

// inversions counts the pairs of which the first is greater.
func inversions(x, y []int) int {
	n := 0
	for _, p := range x {
		for _, q := range y {
			if q >= p {
				break
			}
			n++
		}
	}
	return n
}

// count gives the crossings of all edges.
func (l *netLayers) count() int {
	n := 0
	var near, seen []int
	for _, row := range l.rows {
		seen = seen[:0] // sorted places in the next row
		for _, v := range row {
			near = l.neighbours(near, v, true)
			for _, q := range near {
				n += len(seen) - sort.SearchInts(seen, q+1)
			}
			for _, q := range near {
				i := sort.SearchInts(seen, q)
				seen = slices.Insert(seen, i, q)
			}
		}
	}
	return n
}

// mirror turns the rows round if that brings the nodes closer to the order in
// which they are listed.
func (l *netLayers) mirror() {
	order := 0
	for _, row := range l.rows {
		for k, v := range row {
			for _, w := range row[:k] {
				if v < len(l.g.verts) && w < len(l.g.verts) {
					if w < v {
						order++
					} else {
						order--
					}
				}
			}
		}
	}
	if order >= 0 {
		return
	}
	for i, row := range l.rows {
		slices.Reverse(row)
		l.set(i, row)
	}
}
