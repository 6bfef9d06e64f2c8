package skeleton

// largest ring whose inside counts as such.
const largest = 8

// rings gives the smallest rings through bond k, one for each pair of bonds that go on
// from its ends.
func (m *Molecule) rings(k int) [][]int {
	b := m.bonds[k]
	var out [][]int
	for _, i := range m.atoms[b.a].next {
		for _, j := range m.atoms[b.b].next {
			if i == k || j == k {
				continue
			}
			if way := m.way(m.bonds[i].other(b.a), m.bonds[j].other(b.b), b.a, b.b); way != nil {
				out = append(out, append(way, b.b, b.a))
			}
		}
	}
	return out
}

// way is the shortest path from one atom to another that avoids two, if it closes a ring.
func (m *Molecule) way(from, to, no, nor int) []int {
	if from == nor || to == no {
		return nil
	}
	before := map[int]int{from: -1}
	front := []int{from}
	for range largest - 2 {
		for _, i := range front {
			if i != to {
				continue
			}
			var path []int
			for i >= 0 {
				path = append(path, i)
				i = before[i]
			}
			for l, r := 0, len(path)-1; l < r; l, r = l+1, r-1 {
				path[l], path[r] = path[r], path[l]
			}
			return path
		}
		var next []int
		for _, i := range front {
			for _, k := range m.atoms[i].next {
				j := m.bonds[k].other(i)
				if _, seen := before[j]; !seen && j != no && j != nor && m.bonds[k].order < dative {
					before[j] = i
					next = append(next, j)
				}
			}
		}
		front = next
	}
	return nil
}

// inside tells on which side of bond k its ring lies: 1 on the side of perp, -1 on
// the other, 0 without a ring. Of several rings the one with most double bonds counts,
// then the smaller.
func (m *Molecule) inside(k int) int {
	b := m.bonds[k]
	p, q := m.at(b.a), m.at(b.b)
	n := perp(q.minus(p))
	side, best := 0, -1.0
	for _, ring := range m.rings(k) {
		doubles := 0
		var middle Point
		for x, i := range ring {
			j := ring[(x+1)%len(ring)]
			for _, e := range m.atoms[i].next {
				if c := m.bonds[e]; c.other(i) == j && (c.order == double || c.order == aromatic) {
					doubles++
				}
			}
			middle = middle.plus(m.at(i), 1/float64(len(ring)))
		}
		worth := float64(doubles) - float64(len(ring))/10
		if worth > best {
			if d := dot(middle.minus(p), n); d > 1e-6 {
				side, best = 1, worth
			} else if d < -1e-6 {
				side, best = -1, worth
			}
		}
	}
	return side
}

// perp is p turned to the right, seen on the page.
func perp(p Point) Point { return Point{-p.Y, p.X} }
