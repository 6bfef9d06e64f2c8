package skeleton

import "math"

// Distances in em.
const (
	unit    = 1.7  // the median bond
	own     = 0.17 // from the end of a bond to the label of its atom
	gap     = 0.22 // between labels, and from a label to bonds of others
	visible = 0.30 // the least length of a bond between labels
)

// growth are the scales that are tried, on top of unit.
var growth = []float64{1, 1.12, 1.25, 1.4, 1.6, 1.8, 2.1, 2.5, 3}

// arrange chooses the scale and the side of every label, and refuses a molecule in
// which labels and bonds cannot be kept apart.
func (m *Molecule) arrange() *Error {
	var err *Error
	options, reach := make([][]label, len(m.atoms)), make([]float64, len(m.atoms))
	for i := range m.atoms {
		options[i] = m.choices(i)
		for _, o := range options[i] {
			for _, b := range o.boxes {
				reach[i] = math.Max(reach[i], math.Hypot(math.Max(-b.x0, b.x1), math.Max(-b.y0, b.y1)))
			}
		}
	}
	for _, g := range growth {
		l := layout{m: m, scale: unit * g, options: options, reach: reach}
		l.choose()
		l.draw()
		if err = l.verify(); err == nil {
			m.em = l.framed()
			return nil
		}
	}
	return err
}

// layout is a molecule at one scale.
type layout struct {
	m             *Molecule
	scale         float64
	options       [][]label
	reach         []float64 // how far any label of an atom goes from it
	choice        []int
	pieces        []piece
	origin        Point
	width, height float64
}

func (l *layout) at(i int) Point { return Point{l.m.atoms[i].x * l.scale, l.m.atoms[i].y * l.scale} }

// label gives the label of atom i, nil for a bare corner.
func (l *layout) label(i int) *label {
	if len(l.options[i]) == 0 {
		return nil
	}
	return &l.options[i][l.choice[i]]
}

// boxes of atom i where they stand.
func (l *layout) boxes(i int) []box {
	lab := l.label(i)
	if lab == nil {
		return nil
	}
	out := make([]box, len(lab.boxes))
	for k, b := range lab.boxes {
		out[k] = b.at(l.at(i))
	}
	return out
}

// choose picks the label of least cost, atom by atom, until nothing changes.
func (l *layout) choose() {
	l.choice = make([]int, len(l.options))
	for range 8 {
		changed := false
		for i, o := range l.options {
			if len(o) < 2 {
				continue
			}
			best, least := 0, math.Inf(1)
			for c := range o {
				if cost := l.cost(i, &o[c]); cost < least-1e-9 {
					best, least = c, cost
				}
			}
			changed = changed || best != l.choice[i]
			l.choice[i] = best
		}
		if !changed {
			return
		}
	}
}

// cost of a label: the room it takes from its own bonds, and much for what it
// comes too near to.
func (l *layout) cost(i int, lab *label) float64 {
	cost := lab.penalty
	p := l.at(i)
	boxes := make([]box, len(lab.boxes))
	for k, b := range lab.boxes {
		boxes[k] = b.at(p)
	}
	for _, k := range l.m.atoms[i].next {
		q := l.at(l.m.bonds[k].other(i))
		u := q.minus(p)
		u = u.plus(u, 1/u.length()-1)
		cost += lab.weight * math.Max(0, dot(u, lab.toward))
		cost += 3 * (leave(p, q, boxes, own) - leave(p, q, boxes[:1], own))
	}
	for j := range l.m.atoms {
		if j == i || l.reach[j] == 0 || l.at(j).minus(p).length() > l.reach[i]+l.reach[j]+gap {
			continue
		}
		for _, b := range l.boxes(j) {
			for _, c := range boxes {
				cost += near(b.apart(c))
			}
		}
	}
	for _, b := range l.m.bonds {
		if b.a == i || b.b == i || toSegment(p, l.at(b.a), l.at(b.b)) > l.reach[i]+gap+pair {
			continue
		}
		half := b.half()
		for _, c := range boxes {
			if c.far(l.at(b.a), l.at(b.b), gap+half) {
				continue
			}
			cost += near(c.line(l.at(b.a), l.at(b.b)) - half)
		}
	}
	return cost
}

func near(distance float64) float64 {
	if distance >= gap {
		return 0
	}
	return 20 + 100*(gap-distance)
}

// half is how far the strokes of a bond stand off its middle.
func (b bond) half() float64 {
	switch {
	case b.order == double || b.order == aromatic:
		return pair
	case b.order == triple:
		return triplet
	case b.look != plain:
		return thick
	}
	return 0
}

// leave gives the distance from p toward q at which a stroke has left the boxes by
// a gap: the last such point, looked for in steps of 0.01 em.
func leave(p, q Point, boxes []box, gap float64) float64 {
	d := q.minus(p)
	length := d.length()
	reach := 0.0
	for _, b := range boxes {
		reach = math.Max(reach, math.Hypot(math.Max(p.X-b.x0, b.x1-p.X), math.Max(p.Y-b.y0, b.y1-p.Y)))
	}
	if reach > 0 {
		reach += gap
	}
	for t := math.Min(length, reach); t > 0; t -= 0.01 {
		o := p.plus(d, t/length)
		for _, b := range boxes {
			if b.to(o) < gap {
				return math.Min(length, t+0.01)
			}
		}
	}
	return 0
}

// verify looks for labels and bonds that come too near to each other.
func (l *layout) verify() *Error {
	const slack = 1e-6
	m := l.m
	const fix = "give them more room in the drawing, or write a short name for a group"
	for i := range m.atoms {
		p := l.at(i)
		boxes := l.boxes(i)
		for j := range i {
			if len(boxes) == 0 {
				break
			}
			if l.at(j).minus(p).length() > l.reach[i]+l.reach[j]+gap {
				continue
			}
			for _, b := range l.boxes(j) {
				for _, c := range boxes {
					if b.apart(c) < gap-slack {
						return m.atoms[i].at.fault(fix, "the labels of atoms %d (%s) and %d (%s) meet", j+1, m.atoms[j].name(), i+1, m.atoms[i].name())
					}
				}
			}
		}
		for _, c := range boxes {
			for _, s := range l.pieces {
				b := m.bonds[s.bond]
				free := gap
				if b.a == i || b.b == i {
					free = own - 0.09 // the broad end of a wedge may come nearer
				}
				for k := 1; k < len(s.points); k++ {
					if !c.far(s.points[k-1], s.points[k], gap) && c.line(s.points[k-1], s.points[k]) < free-slack {
						return m.atoms[i].at.fault(fix, "the label of atom %d (%s) meets the bond between atoms %d and %d", i+1, m.atoms[i].name(), b.a+1, b.b+1)
					}
				}
			}
		}
	}
	for k, b := range m.bonds {
		if from, to := l.ends(k); to-from < visible-slack {
			return b.at.fault(fix, "nothing is left of the bond between atoms %d (%s) and %d (%s) beside their labels", b.a+1, m.atoms[b.a].name(), b.b+1, m.atoms[b.b].name())
		}
	}
	return nil
}

// ends gives where the middle stroke of bond k begins and ends, from its first atom.
func (l *layout) ends(k int) (from, to float64) {
	b := l.m.bonds[k]
	p, q := l.at(b.a), l.at(b.b)
	return leave(p, q, l.boxes(b.a), own), q.minus(p).length() - leave(q, p, l.boxes(b.b), own)
}
