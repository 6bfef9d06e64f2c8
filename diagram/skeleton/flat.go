package skeleton

import (
	"fmt"
	"math"
	"slices"
	"sort"
	"strings"
)

// flatten checks the coordinates and brings the median bond to 1, with y down.
// Without bonds the nearest two atoms stand 1.5 apart.
func (m *Molecule) flatten() *Error {
	first := m.atoms[0].at
	var lo, hi [3]float64
	for k := range lo {
		lo[k], hi[k] = math.Inf(1), math.Inf(-1)
	}
	for _, a := range m.atoms {
		for k, v := range []float64{a.x, a.y, a.z} {
			lo[k], hi[k] = math.Min(lo[k], v), math.Max(hi[k], v)
		}
	}
	wide := math.Max(hi[0]-lo[0], hi[1]-lo[1])
	deep := hi[2] - lo[2]
	switch {
	case len(m.atoms) > 1 && wide == 0 && deep == 0:
		return first.fault("lay the molecule out in the plane and write it anew", "all %d atoms stand in one point", len(m.atoms))
	case deep > 0.05*wide:
		return first.fault("lay the molecule out in the plane and write it anew", "the coordinates are in space (%.4g deep, %.4g wide): a skeletal formula needs flat ones", deep, wide)
	case deep > 0:
		m.note("depth of the coordinates")
	}
	unit := m.median()
	for i := range m.atoms {
		a := &m.atoms[i]
		for k := range i {
			d := math.Hypot(a.x-m.atoms[k].x, a.y-m.atoms[k].y)
			if d < 0.1*unit || d == 0 {
				return a.at.fault("move one of them", "atoms %d (%s) and %d (%s) stand in one place", k+1, m.atoms[k].symbol, i+1, a.symbol)
			}
		}
	}
	if len(m.atoms) > 1 && !(wide/unit <= maxSpan) {
		return first.fault("move its parts together", "the molecule is %.4g bond lengths wide, more than %d", wide/unit, maxSpan)
	}
	for i := range m.atoms {
		a := &m.atoms[i]
		a.x, a.y, a.z = (a.x-lo[0])/unit, (hi[1]-a.y)/unit, 0
	}
	return m.astride()
}

func (m *Molecule) median() float64 {
	var lengths []float64
	for _, b := range m.bonds {
		p, q := m.atoms[b.a], m.atoms[b.b]
		if d := math.Hypot(p.x-q.x, p.y-q.y); d > 0 {
			lengths = append(lengths, d)
		}
	}
	if len(lengths) > 0 {
		slices.Sort(lengths)
		return lengths[len(lengths)/2]
	}
	near := math.Inf(1)
	for i, p := range m.atoms {
		for _, q := range m.atoms[:i] {
			if d := math.Hypot(p.x-q.x, p.y-q.y); d > 0 {
				near = math.Min(near, d)
			}
		}
	}
	if math.IsInf(near, 1) {
		return 1
	}
	return near / 1.5
}

// astride refuses an atom that stands on a bond of others: the drawing would
// show bonds that are not there.
func (m *Molecule) astride() *Error {
	for _, b := range m.bonds {
		p, q := m.at(b.a), m.at(b.b)
		for i := range m.atoms {
			if i == b.a || i == b.b || m.atoms[i].bare || m.atoms[b.a].bare || m.atoms[b.b].bare {
				continue
			}
			if toSegment(m.at(i), p, q) < 0.08 {
				return m.atoms[i].at.fault("move one of them", "atom %d (%s) stands on the bond between atoms %d and %d", i+1, m.atoms[i].symbol, b.a+1, b.b+1)
			}
		}
	}
	return nil
}

func (m *Molecule) at(i int) Point { return Point{m.atoms[i].x, m.atoms[i].y} }

// formula gives the sum formula: C, H, then by the alphabet, and without C all by the alphabet.
func (m *Molecule) formula() string {
	n := map[string]int{}
	short := map[string]int{}
	charge := 0
	for _, a := range m.atoms {
		if a.bare {
			continue
		}
		charge += a.charge
		if !a.element() {
			short[a.name()]++
			continue
		}
		n[a.symbol]++
		n["H"] += a.implicit
	}
	var b strings.Builder
	for _, s := range hill(n) {
		b.WriteString(s)
		if n[s] > 1 {
			fmt.Fprint(&b, n[s])
		}
	}
	if charge != 0 {
		if c := max(charge, -charge); c > 1 {
			fmt.Fprintf(&b, " %d", c)
		}
		b.WriteString(map[bool]string{true: "+", false: "-"}[charge > 0])
	}
	for _, s := range hill(short) {
		if b.Len() > 0 {
			b.WriteString(", ")
		}
		if short[s] > 1 {
			fmt.Fprintf(&b, "%d ", short[s])
		}
		b.WriteString(s)
	}
	return b.String()
}

func hill(n map[string]int) []string {
	var names []string
	for s, k := range n {
		if k > 0 {
			names = append(names, s)
		}
	}
	first := func(s string) int {
		switch {
		case n["C"] == 0 || s != "C" && s != "H":
			return 2
		case s == "C":
			return 0
		}
		return 1
	}
	sort.Slice(names, func(i, k int) bool {
		if a, b := first(names[i]), first(names[k]); a != b {
			return a < b
		}
		return names[i] < names[k]
	})
	return names
}
