package diagram

import (
	"fmt"
	"slices"
)

// layers searches the layering and order with the fewest crossings and, between
// equals, the shortest legs.
func (g *netGraph) layers() *netLayers {
	var best *netLayers
	from := -1
	tried := map[string]bool{}
	for _, turn := range []bool{true, false} {
		if best != nil && best.crossings == 0 {
			break
		}
		for _, root := range g.roots() {
			before := g.direct(root, turn)
			if name := fmt.Sprint(before); tried[name] {
				continue
			} else {
				tried[name] = true
			}
			l := g.layered(before)
			l.arrange()
			if l.beats(best) || !best.beats(l) && l.crossings == 0 && root < from {
				best, from = l, root
			}
		}
	}
	for best.crossings > 0 {
		better := best.eased()
		if better == nil {
			break
		}
		best = better
	}
	best.mirror()
	return best
}

// beats reports whether l is better than o. Between equals the order in which the
// network is listed decides, but only where nothing is left to mend, since it
// must not change how many crossings are left.
func (l *netLayers) beats(o *netLayers) bool {
	return o == nil || l.crossings < o.crossings || l.crossings == o.crossings && len(l.edges) < len(o.edges)
}

// eased tries to take crossings away by putting a node that several steps take
// up behind them, or one that several give off before them: it then stands
// between what the steps lead to, or come from.
func (l *netLayers) eased() *netLayers {
	g := l.g
	var best *netLayers
	tries, last := 0, -1
	for _, v := range g.byRank {
		if g.verts[v].step >= 0 || len(g.of[v]) < 2 {
			continue
		}
		before := slices.Clone(l.before)
		fit := true
		for _, k := range g.of[v] {
			first := g.of[v][0]
			before[k] = !before[k]
			fit = fit && l.before[k] == l.before[first] && g.legs[k].into == g.legs[first].into && l.between(g.legs[k].step, k)
		}
		if !fit {
			continue
		}
		if tries++; tries > 24 || tries > 6 && len(g.verts) > 40 {
			break
		}
		t := g.layered(before)
		t.arrange()
		if t.crossings < l.crossings && (t.beats(best) || !best.beats(t) && t.crossings == 0 && v > last) {
			best, last = t, v
		}
	}
	return best
}

// between reports whether a step has nodes on both sides even without one leg.
func (l *netLayers) between(step, without int) bool {
	var side [2]bool
	for _, k := range l.g.of[step] {
		if k != without {
			if l.before[k] {
				side[0] = true
			} else {
				side[1] = true
			}
		}
	}
	return side[0] && side[1]
}
