package control

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"saddlebook/kinetics"
	"saddlebook/kinetics/rate"
)

// A Cycle is one turn of a catalyst, unrolled.
type Cycle struct {
	Levels []Level // in order; those off the cycle after the one they branch from
	Steps  []int   // of one turn, in order, by number
	// Turn is ΔG′, the free energy of one turn at these concentrations, J/mol; −Inf
	// where a product is held at 0, NaN where a step without return leaves it unknown.
	Turn    float64
	OneWay  bool    // a step does not return at these concentrations
	PerTurn float64 // how much product one turn makes
	// Turns is the exact number of turns of one catalyst, 1/s.
	Turns float64

	Backwards bool    // ΔG′ ≥ 0: no span
	Pairs     []Pair  // within 1 kcal/mol of the span, from the largest down; the first determines
	Span      float64 // J/mol; NaN if Backwards
	SpanTurns float64 // (kB T/h) exp(−Span/RT), 1/s; NaN if Backwards
	// Partners are free species that the catalyst takes up or releases. Levels have
	// them at their steady concentration, so that turnover control leaves out that
	// they answer to the catalyst; State.X does not.
	Partners []int
}

// A Level is one state of the catalyst or transition state of the cycle.
type Level struct {
	Name    string
	State   int // species, or number of the step
	Step    bool
	Off     bool            // off the cycle, at the position of the level before
	G       float64         // J/mol above the first level at these concentrations; NaN: unknown, behind a step without return
	Control float64         // turnover control: over intermediates, and over transition states, they sum to 1; NaN if Backwards
	Share   float64         // of the catalyst at steady state; of an intermediate
	With    []kinetics.Term // what stands beside it: reagents left, products released
}

// A Pair is a transition state and an intermediate that span the turnover.
type Pair struct {
	TS, I int     // levels
	Span  float64 // J/mol
	Wraps bool    // the transition state precedes the intermediate: ΔG′ is in it
}

// edge is a step that turns one state of the catalyst into another.
type edge struct {
	k        int  // in steps
	from, to int  // in free
	back     bool // walked against the way the step is written
}

func (e edge) turned() edge { return edge{e.k, e.to, e.from, !e.back} }

// sign is 1 if an edge is walked as its step is written, −1 if the other way.
func (e edge) sign() float64 {
	if e.back {
		return -1
	}
	return 1
}

// cycle unrolls the cycle of the catalyst. w counts the catalyst in each free
// species; the text says why there is no cycle to unroll.
func (t *steady) cycle(p *Problem, w []float64) (*Cycle, string, error) {
	if w == nil {
		return nil, "no law counts the catalyst alone", nil
	}
	var edges []edge
	for k, st := range t.steps {
		e := edge{k: k, from: -1, to: -1}
		for side, places := range [2][]place{st.from, st.to} {
			for _, q := range places {
				switch {
				case w[q.at] == 0:
					continue
				case w[q.at] != 1 || q.n != 1 || side == 0 && e.from >= 0 || side == 1 && e.to >= 0:
					return nil, t.several(&st, w), nil
				case side == 0:
					e.from = q.at
				default:
					e.to = q.at
				}
			}
		}
		if e.from >= 0 {
			edges = append(edges, e)
		}
	}
	ring, why := single(edges)
	if why != "" {
		return nil, why, nil
	}
	turn, err := t.turnOf(p, ring)
	if err != nil || turn == nil {
		return nil, fmt.Sprintf("a turn of the cycle makes no %s", sumText(t.n, p.RateOf)), err
	}
	c := t.unroll(p, turn, edges, w)
	c.Turns = turn[0].sign() * t.flux(turn[0].k, t.xi) / t.total[p.Catalyst]
	return c, "", nil
}

// several says how a step takes part that has more than one of the catalyst on
// a side, or a state that holds several of it.
func (t *steady) several(st *step, w []float64) string {
	for _, places := range [2][]place{st.from, st.to} {
		met := 0
		for _, q := range places {
			if w[q.at] > 0 {
				met += q.n
			}
		}
		switch {
		case met == 2:
			return "two catalyst molecules meet in " + st.r.Label
		case met > 2:
			return "several catalyst molecules meet in " + st.r.Label
		}
	}
	return "a state that holds several catalyst molecules reacts in " + st.r.Label
}

func sumText(n *kinetics.Network, sum []kinetics.Term) string {
	var of []int
	for _, t := range sum {
		of = append(of, t.Species)
	}
	return names(n, of)
}

const branched = "the cycle is branched"

// single returns the edges of the one cycle, found by taking dead ends away.
func single(edges []edge) (ring []edge, why string) {
	var left, alone []edge // alone: the catalyst comes back in one step
	for _, e := range edges {
		if e.from == e.to {
			alone = append(alone, e)
		} else {
			left = append(left, e)
		}
	}
	count := map[int]int{}
	for more := true; more; {
		clear(count)
		for _, e := range left {
			count[e.from]++
			count[e.to]++
		}
		kept := slices.DeleteFunc(slices.Clone(left), func(e edge) bool { return count[e.from] < 2 || count[e.to] < 2 })
		more = len(kept) < len(left)
		left = kept
	}
	switch {
	case len(left) == 0 && len(alone) == 0:
		return nil, "the states of the catalyst form no cycle"
	case len(left) == 0 && len(alone) == 1:
		return alone, ""
	case len(alone) > 0:
		return nil, branched
	}
	for _, n := range count {
		if n > 2 {
			return nil, branched
		}
	}
	// Every state has two edges: one ring, unless there are several.
	if ring = walk(left); len(ring) < len(left) {
		return nil, "there is more than one cycle"
	}
	return ring, ""
}

// walk goes round a ring from its first edge, turning edges to the way they are
// walked.
func walk(ring []edge) []edge {
	var out []edge
	used := map[int]bool{}
	e := ring[0]
	for {
		out = append(out, e)
		used[e.k] = true
		if e.to == ring[0].from {
			return out
		}
		at := e.to
		for _, next := range ring {
			if used[next.k] || next.from != at && next.to != at {
				continue
			}
			if e = next; e.from != at {
				e = e.turned()
			}
			break
		}
	}
}

// turnOf puts a ring in the direction that makes the product and the order that
// the turnover is stated in, or that begins at the catalyst. nil: it makes none.
func (t *steady) turnOf(p *Problem, ring []edge) ([]edge, error) {
	formed := t.formed(p.RateOf)
	made := 0.0
	for _, e := range ring {
		made += e.sign() * formed[e.k]
	}
	if math.Abs(made) < small {
		return nil, nil
	}
	if made < 0 {
		slices.Reverse(ring)
		for i, e := range ring {
			ring[i] = e.turned()
		}
	}
	first := 0
	for i, e := range ring {
		if t.free[e.from] == p.Catalyst {
			first = i
		}
	}
	if p.Turnover != nil {
		first = slices.IndexFunc(ring, func(e edge) bool { return t.steps[e.k].r.Step == p.Turnover[0] })
	}
	if first > 0 {
		ring = append(slices.Clone(ring[first:]), ring[:first]...)
	}
	if p.Turnover == nil {
		return ring, nil
	}
	var order, found []string
	same := len(p.Turnover) == len(ring) && first >= 0
	for i, e := range ring {
		found = append(found, t.steps[e.k].r.Name)
		same = same && p.Turnover[i] == t.steps[e.k].r.Step
	}
	for _, s := range p.Turnover {
		order = append(order, t.stepName(s))
	}
	if !same {
		return nil, &PointError{Of: ErrCycle, Step: p.Turnover[0], Msg: fmt.Sprintf("the steps %s are not the turn of the catalyst that makes %s", strings.Join(order, ", "), sumText(t.n, p.RateOf)),
			Fix: fmt.Sprintf("write %s, or leave the turnover out", strings.Join(found, ", "))}
	}
	return ring, nil
}

func (t *steady) stepName(step int) string {
	for i := range t.n.Reactions {
		if t.n.Reactions[i].Step == step {
			return t.n.Reactions[i].Name
		}
	}
	return fmt.Sprint(step)
}

// hop is one edge walked: how high the transition state and the next state lie
// above the state before, and whether there is no way back.
type hop struct {
	up, on float64
	oneWay bool
}

// hopOf reads levels off the rate constants, partners at their concentrations,
// so that they are those of the steady state whatever law gives a rate.
func (t *steady) hopOf(e edge) hop {
	st := &t.steps[e.k]
	lnF, lnB := st.lnF, st.lnB
	other := func(side []place, ln *float64) {
		for _, q := range side {
			if q.at != e.from && q.at != e.to {
				*ln += float64(q.n) * t.x[q.at]
			}
		}
	}
	other(st.from, &lnF)
	other(st.to, &lnB)
	dG := st.r.DeltaG
	change := func(side []kinetics.Term, sign float64) {
		for _, q := range side {
			if at := t.place[q.Species]; at == e.from || at == e.to {
				continue
			} else if at >= 0 {
				dG += sign * float64(q.N) * rate.R * t.n.T * t.x[at]
			} else {
				dG += sign * float64(q.N) * rate.R * t.n.T * math.Log(t.held[q.Species])
			}
		}
	}
	change(st.r.To, 1)
	change(st.r.From, -1)
	if e.back {
		lnF, lnB, dG = lnB, lnF, -dG
	}
	RT := rate.R * t.n.T
	h := hop{up: RT * (lnFrequency(t.n.T) - lnF), on: dG, oneWay: math.IsInf(lnB, -1)}
	if math.IsNaN(h.on) && !h.oneWay && !math.IsInf(lnF, -1) {
		h.on = RT * (lnB - lnF) // nothing but the rate constants tells
	}
	return h
}

// lnFrequency is ln(kB T/h).
func lnFrequency(T float64) float64 { return math.Log(rate.Boltzmann / rate.Planck * T) }
