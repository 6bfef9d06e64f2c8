package control

import (
	"math"
	"slices"

	"saddlebook/kinetics"
	"saddlebook/kinetics/rate"
)

// unroll lays the levels of one turn out and finds the spans.
func (t *steady) unroll(p *Problem, turn, edges []edge, w []float64) *Cycle {
	c := &Cycle{Span: math.NaN(), SpanTurns: math.NaN()}
	formed := t.formed(p.RateOf)
	hops := make([]hop, len(turn))
	var left []kinetics.Term // reagents of the whole turn
	for i, e := range turn {
		hops[i] = t.hopOf(e)
		c.Steps = append(c.Steps, t.steps[e.k].r.Step)
		c.Turn += hops[i].on
		c.OneWay = c.OneWay || hops[i].oneWay
		c.PerTurn += e.sign() * formed[e.k]
		in, _ := t.partners(e)
		left = add(left, in, 1)
	}
	if math.IsInf(c.Turn, 1) {
		c.Turn = math.NaN()
	}
	for _, q := range t.free {
		if at := t.place[q]; w[at] == 0 && t.beside(edges, at) {
			c.Partners = append(c.Partners, q)
		}
	}
	onRing := map[int]bool{}
	for _, e := range turn {
		onRing[e.from] = true
	}
	// position of a level: the hop that leaves it, or that it is the top of.
	var position []int
	below := []float64{} // of an intermediate, its level against that of its position
	G := 0.0
	put := func(l Level, at int, rel float64) {
		c.Levels = append(c.Levels, l)
		position = append(position, at)
		below = append(below, rel)
	}
	var released []kinetics.Term
	for i, e := range turn {
		with := add(add(nil, left, 1), released, 1)
		put(t.state(e.from, G, w, with), i, 0)
		for _, o := range t.offCycle(e.from, edges, onRing) {
			l := t.state(o.at, G+o.G, w, add(with, o.with, 1))
			l.Off = true
			put(l, i, o.G)
		}
		in, out := t.partners(e)
		left = add(left, in, -1)
		st := t.steps[e.k].r
		put(Level{Name: st.Name, State: st.Step, Step: true, G: G + hops[i].up, Control: math.NaN(), With: add(add(nil, left, 1), released, 1)}, i, 0)
		released = add(released, out, 1)
		G += hops[i].on
	}
	for i := range c.Levels {
		if math.IsInf(c.Levels[i].G, 0) {
			c.Levels[i].G = math.NaN()
		}
	}
	c.Backwards = !c.OneWay && !(c.Turn < 0)
	if !c.Backwards {
		c.spans(t.n.T, hops, position, below)
	}
	return c
}

// spans finds the span of every pair, going forward from the intermediate to
// the transition state and through no step without return.
func (c *Cycle) spans(T float64, hops []hop, position []int, below []float64) {
	RT := rate.R * T
	var pairs []Pair
	for i := range c.Levels {
		if c.Levels[i].Step {
			continue
		}
		climb := -below[i]
		for k := range hops {
			at := (position[i] + k) % len(hops)
			top := slices.IndexFunc(c.Levels, func(l Level) bool { return l.Step && l.State == c.Steps[at] })
			pairs = append(pairs, Pair{TS: top, I: i, Span: climb + hops[at].up, Wraps: at < position[i]})
			if hops[at].oneWay {
				break
			}
			climb += hops[at].on
		}
	}
	slices.SortStableFunc(pairs, func(a, b Pair) int { return descending(a.Span, b.Span) })
	c.Span = pairs[0].Span
	c.SpanTurns = math.Exp(lnFrequency(T) - c.Span/RT)
	all := 0.0
	for i := range c.Levels {
		c.Levels[i].Control = 0
	}
	for _, p := range pairs {
		x := math.Exp((p.Span - c.Span) / RT)
		all += x
		c.Levels[p.TS].Control += x
		c.Levels[p.I].Control += x
		if p.Span > c.Span-Kcal {
			c.Pairs = append(c.Pairs, p)
		}
	}
	for i := range c.Levels {
		c.Levels[i].Control /= all
	}
}

// state is the level of a state of the catalyst.
func (t *steady) state(at int, G float64, w []float64, with []kinetics.Term) Level {
	s := t.free[at]
	total := 0.0
	for i := range w {
		total += w[i] * math.Exp(t.x[i])
	}
	return Level{Name: t.n.Names[s], State: s, G: G, Share: w[at] * math.Exp(t.x[at]) / total, Control: math.NaN(), With: with}
}

// off is a state off the cycle, G above the one it branches from.
type off struct {
	at   int
	G    float64
	with []kinetics.Term // relative to what stands beside that one
}

// offCycle returns the states that branch from one of the cycle, nearest first.
func (t *steady) offCycle(from int, edges []edge, onRing map[int]bool) []off {
	found := []off{{at: from}}
	seen := map[int]bool{from: true}
	for i := 0; i < len(found); i++ {
		for _, e := range edges {
			if e.to == found[i].at {
				e = e.turned()
			}
			if e.from != found[i].at || seen[e.to] || onRing[e.to] {
				continue
			}
			seen[e.to] = true
			in, out := t.partners(e)
			found = append(found, off{at: e.to, G: found[i].G + t.hopOf(e).on, with: add(add(found[i].with, in, -1), out, 1)})
		}
	}
	return found[1:]
}

// partners returns what an edge takes up and what it releases besides the catalyst.
func (t *steady) partners(e edge) (in, out []kinetics.Term) {
	st := t.steps[e.k].r
	pick := func(side []kinetics.Term) (terms []kinetics.Term) {
		for _, q := range side {
			if at := t.place[q.Species]; at < 0 || at != e.from && at != e.to {
				terms = append(terms, q)
			}
		}
		return terms
	}
	in, out = pick(st.From), pick(st.To)
	if e.back {
		in, out = out, in
	}
	return in, out
}

// beside tells whether a free species is a partner of the catalyst.
func (t *steady) beside(edges []edge, at int) bool {
	for _, e := range edges {
		for _, side := range [2][]place{t.steps[e.k].from, t.steps[e.k].to} {
			for _, q := range side {
				if q.at == at {
					return true
				}
			}
		}
	}
	return false
}

// add returns a sum of terms with others added, sign times. A sum may hold
// fewer than none of a species: an off-cycle state that took one up.
func add(sum, terms []kinetics.Term, sign int) []kinetics.Term {
	out := slices.Clone(sum)
	for _, q := range terms {
		i := slices.IndexFunc(out, func(t kinetics.Term) bool { return t.Species == q.Species })
		if i < 0 {
			out = append(out, kinetics.Term{Species: q.Species})
			i = len(out) - 1
		}
		if out[i].N += sign * q.N; out[i].N == 0 {
			out = slices.Delete(out, i, i+1)
		}
	}
	return out
}
