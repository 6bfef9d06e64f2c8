package kinetics

import (
	"fmt"
	"math"
	"slices"
)

// preEquilibrium fills in the shares for infinitely fast exchange among the
// states from which products form, and compares them with those of the chain.
func (c *chain) preEquilibrium(out *Limits) {
	states := c.states()
	for _, s := range states {
		if slices.ContainsFunc(c.moves, func(m move) bool { return m.from == s && slices.Contains(c.products, m.to) }) {
			out.Sources++
		}
	}
	if len(states) == 0 { // every unit has one way to go
		out.PreEquilibrium = slices.Clone(out.Shares)
		out.FastExchange = true
		return
	}
	pool, why := c.pool(states)
	if why != "" {
		out.NoExchange = why
		return
	}
	// The start counts where it already is a product or lost.
	pooled, total := 0.0, c.start[elsewhere]
	for s := range c.n.Names {
		total += c.start[s]
		if slices.Contains(states, s) {
			pooled += c.start[s]
		}
	}
	var lns []float64
	var ends []int
	var partners map[int]int
	for _, m := range c.moves {
		if slices.Contains(states, m.to) {
			continue
		}
		p := pool[m.from]
		with := p.with(m.partners, 1)
		if partners == nil {
			partners = with
		} else if s, differ := differs(partners, with); differ {
			out.NoExchange = fmt.Sprintf("with fast exchange the shares depend on how much %s there is", c.n.Names[s])
			return
		}
		lns = append(lns, p.ln+m.ln)
		ends = append(ends, m.to)
	}
	top := slices.Max(lns)
	flux := map[int]float64{}
	sum := 0.0
	for i, ln := range lns {
		f := math.Exp(ln - top)
		flux[ends[i]] += f
		sum += f
	}
	out.PreEquilibrium = make([]float64, len(c.products))
	for i, p := range c.products {
		out.PreEquilibrium[i] = flux[p]/sum*(pooled/total) + c.start[p]/total
	}
	out.FastExchange = agree(out.Shares, out.PreEquilibrium)
}

// agree tells whether all ratios of pairs agree within the tolerance.
func agree(a, b []float64) bool {
	for i := range a {
		for j := range i {
			x, y := a[i]*b[j], a[j]*b[i]
			if x == 0 && y == 0 {
				continue
			}
			if !(math.Max(x, y)/math.Min(x, y)-1 < exchangeTolerance) {
				return false
			}
		}
	}
	return true
}

// population is how much of a state there is when all exchange, relative to
// the first state: exp(ln) times concentrations not stated, by species.
type population struct {
	ln       float64
	partners map[int]int
}

// with returns the exponents of the partners after adding some.
func (p population) with(partners []Term, sign int) map[int]int {
	out := map[int]int{}
	for s, k := range p.partners {
		out[s] = k
	}
	for _, t := range partners {
		if out[t.Species] += sign * t.N; out[t.Species] == 0 {
			delete(out, t.Species)
		}
	}
	return out
}

// differs returns the first species in which two sets of exponents differ.
func differs(a, b map[int]int) (species int, differ bool) {
	var all []int
	for s := range a {
		all = append(all, s)
	}
	for s := range b {
		all = append(all, s)
	}
	slices.Sort(all)
	for _, s := range all {
		if a[s] != b[s] {
			return s, true
		}
	}
	return 0, false
}

// pool returns the populations of the states in exchange, or why they have none.
func (c *chain) pool(states []int) (map[int]population, string) {
	pool := map[int]population{states[0]: {}}
	const loop = 1e-6 // in ln of a population
	for more := true; more; {
		more = false
		for _, m := range c.moves {
			if !slices.Contains(states, m.to) {
				continue
			}
			k := slices.IndexFunc(c.moves, func(r move) bool { return r.reaction == m.reaction && r.from == m.to && r.to == m.from })
			if k < 0 {
				return nil, fmt.Sprintf("%s turns into %s without return, so they do not exchange", c.n.Names[m.from], c.n.Names[m.to])
			}
			r := c.moves[k]
			p, known := pool[m.from]
			if !known {
				continue
			}
			q := population{ln: p.ln + m.ln - r.ln, partners: p.with(m.partners, 1)}
			q.partners = q.with(r.partners, -1)
			old, known := pool[m.to]
			if !known {
				pool[m.to], more = q, true
				continue
			}
			if _, differ := differs(old.partners, q.partners); differ || math.Abs(old.ln-q.ln) > loop*(1+math.Abs(q.ln)) {
				return nil, fmt.Sprintf("a loop through %s and %s also turns over their partners, so exchange alone sets no equilibrium", c.n.Names[m.from], c.n.Names[m.to])
			}
		}
	}
	for _, s := range states {
		if _, known := pool[s]; !known {
			return nil, fmt.Sprintf("%s and %s do not exchange", c.n.Names[states[0]], c.n.Names[s])
		}
	}
	return pool, ""
}
