package kinetics

// Connected reports whether two species belong to one part of the mechanism, so
// that their energies have a common zero.
func (m *Mechanism) Connected(a, b int) bool {
	root := m.joined()
	return root(a) == root(b)
}

// joined returns the root of each species in the union of all steps.
func (m *Mechanism) joined() func(int) int {
	u := newUnion(len(m.Species))
	for _, s := range m.Steps {
		u.step(s.From, s.To)
	}
	return u.root
}

// parts returns the names of the species that steps join, part by part.
func (m *Mechanism) parts() [][]string {
	root := m.joined()
	used := make([]bool, len(m.Species))
	for _, s := range m.Steps {
		for _, side := range [][]Term{s.From, s.To} {
			for _, t := range side {
				used[t.Species] = true
			}
		}
	}
	number := map[int]int{}
	var parts [][]string
	for i, s := range m.Species {
		if !used[i] {
			continue
		}
		k, ok := number[root(i)]
		if !ok {
			k = len(parts)
			number[root(i)] = k
			parts = append(parts, nil)
		}
		parts[k] = append(parts[k], s.Name)
	}
	return parts
}

// union joins species into sets.
type union []int

func newUnion(n int) union {
	u := make(union, n)
	for i := range u {
		u[i] = i
	}
	return u
}

func (u union) root(i int) int {
	for u[i] != i {
		u[i] = u[u[i]]
		i = u[i]
	}
	return i
}

func (u union) join(a, b int) {
	a, b = u.root(a), u.root(b)
	u[max(a, b)] = min(a, b)
}

// step joins all species of a step.
func (u union) step(sides ...[]Term) {
	first := -1
	for _, side := range sides {
		for _, t := range side {
			if first < 0 {
				first = t.Species
			}
			u.join(first, t.Species)
		}
	}
}
