package diagram

// checkVariants holds that each variant is of another path that is no variant.
func (p Profile) checkVariants() error {
	for i, path := range p.Paths {
		if path.Variant == "" {
			continue
		}
		j := p.base(i)
		switch {
		case j < 0:
			return refuse("write the name of another path", "path %s is a variant of %q, and no path has that name", path.called(i), path.Variant)
		case j == i || p.Paths[j].Variant != "":
			return refuse("write the name of a path that is no variant itself", "path %s is a variant of %q", path.called(i), path.Variant)
		case path.Name == "":
			return refuse("give it a name, such as the solvent", "path %d is a variant of %q and has no name", i+1, path.Variant)
		case p.Sides:
			return refuse("leave the sides out", "a two-sided profile with a variant, %s", path.called(i))
		}
	}
	return nil
}

// base gives the path that path i is a variant of; -1: none.
func (p Profile) base(i int) int {
	for j, path := range p.Paths {
		if v := p.Paths[i].Variant; v != "" && path.Name == v {
			return j
		}
	}
	return -1
}

// inkBase is the one path that all variants are of, which is drawn in ink, so
// that it differs from them in tone; -1 if there is none.
func (p Profile) inkBase() int {
	base := -1
	for i := range p.Paths {
		j := p.base(i)
		if j < 0 {
			continue
		}
		if base >= 0 && base != j {
			return -1
		}
		base = j
	}
	return base
}

// title is what a state is called, by paths and on the figure.
type title struct{ key, shown string }

func titleOf(s *state) title { return title{s.point.key(), s.point.shown()} }

// twins finds the states of variants that stand for one of their base: they share
// its column and need no name.
func (p Profile) twins(n *net) {
	for i := range p.Paths {
		j := p.base(i)
		if j < 0 {
			continue
		}
		known, peaks := map[title]*state{}, map[title]*state{}
		for _, t := range n.routes[j] {
			known[titleOf(t.from)] = t.from
			known[titleOf(t.to)] = t.to
			if t.peak != nil {
				peaks[titleOf(t.peak)] = t.peak
			}
		}
		// Where a name comes twice, as at the end of a turn, the first stands before the last.
		first, last := n.routes[j][0].from, n.routes[j][len(n.routes[j])-1].to
		for k, t := range n.routes[i] {
			for _, s := range []*state{t.from, t.to} {
				key := titleOf(s)
				o := known[key]
				if k == 0 && s == t.from && titleOf(first) == key {
					o = first
				}
				if k == len(n.routes[i])-1 && s == t.to && titleOf(last) == key {
					o = last
				}
				if o != nil && o != s && s.twin == nil {
					s.twin = o
				}
			}
			if t.peak != nil {
				if o := peaks[titleOf(t.peak)]; o != nil && o != t.peak {
					t.peak.twin = o
				}
			}
		}
	}
}
