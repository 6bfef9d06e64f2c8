package skeleton

import "math"

// Proportions of bonds in em.
const (
	pair    = 0.28 // between the lines of a double bond
	triplet = 0.24 // between those of a triple bond
	thick   = 0.18 // half the broad end of a wedge
	rung    = 0.25 // between the lines of a hash
	arc     = 0.24 // one arc of a wavy bond
	head    = 0.36 // arrow head of a dative bond
	dash    = 0.30
	blank   = 0.24
)

type kind int8

const (
	stroke kind = iota // a stroke with round ends
	rungs              // a stroke with flat ends
	wave               // a start, then two control points and an end for each arc
	area               // an area
)

// piece is a part of a bond.
type piece struct {
	bond   int
	kind   kind
	points []Point
}

// draw sets the pieces of all bonds.
func (l *layout) draw() {
	l.pieces = nil
	for k := range l.m.bonds {
		l.bond(k)
	}
}

func (l *layout) put(k int, what kind, points ...Point) {
	l.pieces = append(l.pieces, piece{k, what, points})
}

func (l *layout) bond(k int) {
	b := l.m.bonds[k]
	p, q := l.at(b.a), l.at(b.b)
	length := q.minus(p).length()
	u := Point{(q.X - p.X) / length, (q.Y - p.Y) / length}
	n := perp(u)
	from, to := l.ends(k)
	if to-from < visible/2 { // verify will refuse it
		return
	}
	start, end := p.plus(u, from), p.plus(u, to)
	switch {
	case b.look == wavy && b.order == double:
		a := pair / 2
		l.put(k, stroke, start.plus(n, a), end.plus(n, -a))
		l.put(k, stroke, start.plus(n, -a), end.plus(n, a))
	case b.look == wavy:
		l.wave(k, start, end, n)
	case b.look == wedge:
		l.wedge(k, start, end, u, n)
	case b.look == hash:
		count := max(3, int(math.Round((to-from)/rung))+1)
		for i := range count {
			f := (float64(i) + 0.3) / (float64(count) - 0.7)
			o := start.plus(end.minus(start), f)
			w := 0.02 + (thick-0.02)*f
			l.put(k, rungs, o.plus(n, -w), o.plus(n, w))
		}
	case b.order == dative && !l.m.atoms[b.a].bare && !l.m.atoms[b.b].bare:
		l.put(k, stroke, start, end.plus(u, -head*0.8))
		l.put(k, area, end, end.plus(u, -head).plus(n, 0.15), end.plus(u, -head*0.8), end.plus(u, -head).plus(n, -0.15))
	case b.order == hydrogen:
		l.dashed(k, start, end)
	case b.order == triple:
		l.put(k, stroke, start, end)
		for _, side := range []float64{-triplet, triplet} {
			l.put(k, stroke, start.plus(n, side), end.plus(n, side))
		}
	case b.order == double || b.order == aromatic:
		l.double(k, u, n, start, end)
	default:
		l.put(k, stroke, start, end)
	}
}

// double draws a double bond or an aromatic one: its second line inside a ring, on
// the fuller side of a chain, or both lines about the middle.
func (l *layout) double(k int, u, n, start, end Point) {
	b := l.m.bonds[k]
	side := l.m.inside(k)
	if side == 0 {
		side = l.m.fuller(k)
	}
	if b.order == aromatic && side == 0 {
		side = 1
	}
	if side == 0 {
		for _, s := range []float64{-1, 1} {
			o := n
			o.X, o.Y = s*n.X, s*n.Y
			from, to := start, end
			if l.label(b.a) == nil {
				from = from.plus(u, l.meet(b.a, k, u, o))
			}
			if l.label(b.b) == nil {
				to = to.plus(u, -l.meet(b.b, k, Point{-u.X, -u.Y}, o))
			}
			l.put(k, stroke, from.plus(o, pair/2), to.plus(o, pair/2))
		}
		return
	}
	l.put(k, stroke, start, end)
	o := Point{float64(side) * n.X, float64(side) * n.Y}
	p, q := l.at(b.a).plus(o, pair), l.at(b.b).plus(o, pair)
	length := q.minus(p).length()
	from := math.Max(leave(p, q, l.boxes(b.a), own), l.corner(b.a, k, u, o, length))
	to := length - math.Max(leave(q, p, l.boxes(b.b), own), l.corner(b.b, k, Point{-u.X, -u.Y}, o, length))
	if to-from < visible/2 {
		from, to = dot(start.minus(l.at(b.a)), u), dot(end.minus(l.at(b.a)), u)
	}
	if b.order == aromatic {
		l.dashed(k, p.plus(u, from), p.plus(u, to))
	} else {
		l.put(k, stroke, p.plus(u, from), p.plus(u, to))
	}
}

// corner tells how much shorter a second line on the side o is at atom i, so that it ends on the
// line that halves the angle to the next bond on that side.
func (l *layout) corner(i, k int, u, o Point, length float64) float64 {
	cut := 0.0
	for _, e := range l.m.atoms[i].next {
		if e == k {
			continue
		}
		v := l.m.direction(i, l.m.bonds[e])
		if dot(v, o) < 0.05 {
			continue
		}
		angle := math.Acos(math.Max(-1, math.Min(1, dot(u, v))))
		cut = math.Max(cut, pair/math.Tan(angle/2))
	}
	return math.Min(cut, 0.3*length)
}

// meet tells how far along u from atom i a line on the side o of a centred double
// bond begins, to join the next bond on that side. Behind the atom it is below 0.
func (l *layout) meet(i, k int, u, o Point) float64 {
	for _, e := range l.m.atoms[i].next {
		if e == k {
			continue
		}
		v := l.m.direction(i, l.m.bonds[e])
		if across, along := dot(v, o), dot(v, u); across > 0.45 {
			return pair / 2 * along / across
		}
	}
	return 0
}

// fuller tells on which side of a double bond outside rings its second line lies: 0 for both lines
// about the middle, as at the end of a chain that branches there, or between letters.
func (m *Molecule) fuller(k int) int {
	b := m.bonds[k]
	n := perp(m.at(b.b).minus(m.at(b.a)))
	var sides [2]int
	for _, i := range []int{b.a, b.b} {
		var here [2]int
		for _, e := range m.atoms[i].next {
			if e == k {
				continue
			}
			v := m.direction(i, m.bonds[e])
			switch d := dot(v, n) / n.length(); {
			case d > 0.05:
				here[1]++
			case d < -0.05:
				here[0]++
			}
			if m.bonds[e].order == double && len(m.atoms[i].next) == 2 {
				return 0 // cumulated
			}
		}
		if here[0] > 0 && here[1] > 0 && len(m.atoms[b.other(i)].next) == 1 {
			return 0
		}
		sides[0], sides[1] = sides[0]+here[0], sides[1]+here[1]
	}
	for _, i := range []int{b.a, b.b} {
		if len(m.atoms[i].next) == 1 && !m.hidden(i) {
			return 0
		}
	}
	switch {
	case sides[0] == 0 && sides[1] == 0:
		return 0
	case sides[1] > sides[0]:
		return 1
	case sides[0] > sides[1]:
		return -1
	}
	var middle Point
	for i := range m.atoms {
		middle = middle.plus(m.at(i), 1/float64(len(m.atoms)))
	}
	if dot(middle.minus(m.at(b.a)), n) < -1e-9 {
		return -1
	}
	return 1
}

// wedge is narrow at start. At a bare corner its broad end joins the bonds that go on.
func (l *layout) wedge(k int, start, end, u, n Point) {
	b := l.m.bonds[k]
	right, left := end.plus(n, thick), end.plus(n, -thick)
	if l.label(b.b) == nil {
		right, left = right.plus(u, l.slant(b.b, k, u, n)), left.plus(u, l.slant(b.b, k, u, Point{-n.X, -n.Y}))
	}
	l.put(k, area, start.plus(n, 0.03), right, end, left, start.plus(n, -0.03))
}

// slant is how far the corner of a wedge on the side o goes on along u to lie on the next bond there,
// or on the line of the only other bond.
func (l *layout) slant(i, k int, u, o Point) float64 {
	on, only := 0.0, len(l.m.atoms[i].next) == 2
	for _, e := range l.m.atoms[i].next {
		if e == k {
			continue
		}
		v := l.m.direction(i, l.m.bonds[e])
		if across := dot(v, o); across > 0.5 || only && across < -0.5 {
			on = thick * dot(v, u) / across
		}
	}
	return math.Max(-thick, math.Min(thick, on))
}

func (l *layout) wave(k int, start, end, n Point) {
	d := end.minus(start)
	count := max(2, int(math.Round(d.length()/arc)))
	points := []Point{start}
	for i := range count {
		a, b := start.plus(d, float64(i)/float64(count)), start.plus(d, float64(i+1)/float64(count))
		h := 0.17
		if i%2 == 1 {
			h = -h
		}
		points = append(points, a.plus(n, h), b.plus(n, h), b)
	}
	l.put(k, wave, points...)
}

// dashed sets dashes with a dash at either end.
func (l *layout) dashed(k int, from, to Point) {
	d := to.minus(from)
	count := max(2, int(math.Round((d.length()+blank)/(dash+blank))))
	f := dash / (float64(count)*(dash+blank) - blank)
	step := (1 - f) / float64(count-1)
	for i := range count {
		a := float64(i) * step
		l.put(k, stroke, from.plus(d, a), from.plus(d, a+f))
	}
}
