package skeleton

// alternate tells which atoms have a double bond when aromatic bonds (type 4) are
// written as single and double ones in turn. A ring in which no such writing exists, as
// of a pyrrole without its hydrogen, is refused: its hydrogens would be a guess.
func (m *Molecule) alternate() ([]bool, *Error) {
	wants := make([]bool, len(m.atoms))
	next := make([][]int, len(m.atoms))
	for i := range m.atoms {
		a := &m.atoms[i]
		n, sum := 0, 0
		for _, k := range a.next {
			b := m.bonds[k]
			sum += b.valence()
			if b.order == aromatic {
				n++
			}
		}
		low, _, ok := a.lowest()
		if n == 0 || !ok || a.symbol == "C" && a.charge != 0 {
			continue // the empty orbital or the pair of a charged carbon is its part in the ring
		}
		wants[i] = low-a.radical-sum >= 1
	}
	for _, b := range m.bonds {
		if b.order == aromatic && wants[b.a] && wants[b.b] {
			next[b.a] = append(next[b.a], b.b)
			next[b.b] = append(next[b.b], b.a)
		}
	}
	mate := match(next)
	for i := range m.atoms {
		if wants[i] && mate[i] < 0 {
			a := &m.atoms[i]
			return nil, a.at.fault("write its rings with alternating single and double bonds, or the hydrogen on its nitrogen as an atom",
				"the aromatic bonds around atom %d (%s) cannot be written as single and double bonds in turn", i+1, a.symbol)
		}
	}
	return wants, nil
}

// match pairs as many vertices as can be along edges, each in one pair at most: augmenting
// paths with contracted blossoms (Edmonds, Can. J. Math. 17, 449 (1965)).
func match(next [][]int) []int {
	n := len(next)
	mate, parent, base := make([]int, n), make([]int, n), make([]int, n)
	for i := range mate {
		mate[i] = -1
	}
	for root := range n {
		if mate[root] >= 0 || len(next[root]) == 0 {
			continue
		}
		for i := range n {
			parent[i], base[i] = -1, i
		}
		used := make([]bool, n)
		used[root] = true
		queue := []int{root}
		end := -1
		for len(queue) > 0 && end < 0 {
			v := queue[0]
			queue = queue[1:]
			for _, w := range next[v] {
				if base[v] == base[w] || mate[v] == w {
					continue
				}
				if w == root || mate[w] >= 0 && parent[mate[w]] >= 0 {
					stem := common(v, w, root, mate, parent, base)
					inside := make([]bool, n)
					contract(v, stem, w, mate, parent, base, inside)
					contract(w, stem, v, mate, parent, base, inside)
					for i := range n {
						if inside[base[i]] {
							base[i] = stem
							if !used[i] {
								used[i] = true
								queue = append(queue, i)
							}
						}
					}
				} else if parent[w] < 0 {
					parent[w] = v
					if mate[w] < 0 {
						end = w
						break
					}
					used[mate[w]] = true
					queue = append(queue, mate[w])
				}
			}
		}
		for w := end; w >= 0; {
			v := parent[w]
			rest := mate[v]
			mate[w], mate[v] = v, w
			w = rest
		}
	}
	return mate
}

// common finds where the ways from a and b to the root meet.
func common(a, b, root int, mate, parent, base []int) int {
	seen := make([]bool, len(base))
	for {
		a = base[a]
		seen[a] = true
		if a == root || mate[a] < 0 {
			break
		}
		a = parent[mate[a]]
	}
	for {
		b = base[b]
		if seen[b] {
			return b
		}
		b = parent[mate[b]]
	}
}

// contract marks the way from v to the stem and turns its parents to child.
func contract(v, stem, child int, mate, parent, base []int, inside []bool) {
	for base[v] != stem {
		inside[base[v]], inside[base[mate[v]]] = true, true
		parent[v] = child
		child = mate[v]
		v = parent[mate[v]]
	}
}
