package course

import (
	"context"
	"math"
	"slices"
	"sort"

	"saddlebook/kinetics"
	"saddlebook/kinetics/stiff"
)

// A stretch is a part of the run in which nothing jumps or begins or ends.
type stretch struct {
	from, to float64
	leg      *leg
	rates    *constants
	net      *kinetics.Network // nil: the temperature changes
	feed     []float64         // mol/L/s, by species
	fed      bool
	taken    bool // something is removed by first order
}

// A walk is one pass through a run.
type walk struct {
	ctx  context.Context
	p    *Plan
	m    *kinetics.Mechanism
	list []stretch
	c    *Course

	at      *stretch
	y, look []float64 // the state; one between
	slope   []float64 // of y
	between []float64 // of look
	piece   piece
	in      []float64 // put in up to since, by species
	since   float64
	gone    []float64 // taken out at instants, by species
	sides   []int     // by Until
	watch   []watch   // by pair
	high    []summit  // by product
	climbed *stretch  // in which high was last seen

	report, trace         []float64
	nextReport, nextTrace int

	restAt   float64 // time of rest; NaN: none
	rest     *kinetics.Composition
	restFail bool
	ln       []float64
	exact    int // stretches solved exactly
	stepped  int // stretches integrated
	steps    int // of these
	multi    int // of steps, those of the multistep formulas
}

func newWalk(ctx context.Context, p *Plan, m *kinetics.Mechanism) *walk {
	w := &walk{ctx: ctx, p: p, m: m, ln: make([]float64, 2*p.steps+len(p.members))}
	w.reset()
	return w
}

func (w *walk) reset() {
	p := w.p
	size := p.width
	if p.twin {
		size *= 2
	}
	w.y, w.look, w.slope = make([]float64, size), make([]float64, size), make([]float64, size)
	w.between, w.piece = make([]float64, size), piece{}
	for j := range w.piece.five {
		w.piece.five[j] = make([]float64, size)
	}
	w.in, w.gone = slices.Clone(p.run.Charge), make([]float64, p.n)
	copy(w.y, p.run.Charge)
	if p.twin {
		copy(w.y[p.width:], p.run.Charge)
	}
	w.since = 0
	w.sides = make([]int, len(p.run.Until))
	w.watch = make([]watch, len(p.pairs))
	w.high, w.climbed = make([]summit, len(p.run.Products)), nil
	w.report, w.nextReport, w.nextTrace = p.run.Report, 0, 0
	w.restAt, w.rest = math.NaN(), nil
	w.exact, w.stepped, w.steps, w.multi = 0, 0, 0, 0
	w.c = &Course{Ended: -1, Floor: p.atol, net: p.net, whole: p.whole, start: p.start}
	for i, q := range p.pairs {
		w.c.Pairs = append(w.c.Pairs, Pair{A: q[0], B: q[1], Coincide: true, Unreachable: p.unreachable[i], Drain: p.drains[i],
			Changeover: math.NaN(), Even: math.NaN(), ChangeoverKelvin: math.NaN(), EvenKelvin: math.NaN()})
	}
}

// stretches cuts the programme where anything begins, ends or jumps, and gives
// each part its rate constants.
func (w *walk) stretches() error {
	p := w.p
	var cut []float64
	put := func(t float64) {
		if t > 0 && t < p.end {
			cut = append(cut, t)
		}
	}
	for _, d := range p.run.Doses {
		put(d.From)
		put(d.From + d.Lasts)
	}
	for _, v := range p.run.Removals {
		put(v.From)
		if v.K > 0 {
			put(v.To)
		}
	}
	nets := map[float64]*kinetics.Network{}
	ramps := map[[2]float64][]reach{} // cycles of temperature come back to the same
	for i := range p.legs {
		l := &p.legs[i]
		parts := []reach{{from: l.start, to: l.finish}}
		var net *kinetics.Network
		if l.slope == 0 {
			if net = nets[l.start]; net == nil {
				var err error
				if net, err = w.m.At(l.start); err != nil {
					return err
				}
				nets[l.start] = net
			}
		} else {
			ends := [2]float64{l.start, l.finish}
			if ramps[ends] == nil {
				var err error
				if ramps[ends], err = laws(w.m, p.members, l.start, l.finish, 0); err != nil {
					return err
				}
			}
			parts = ramps[ends]
		}
		if err := w.countable(net, parts); err != nil {
			return err
		}
		from := l.from
		for j, r := range parts {
			to := l.to
			if j+1 < len(parts) {
				to = l.from + (r.to-l.start)/l.slope
				if !(to > from) || !(to < l.to) {
					continue
				}
			}
			times := []float64{from, to}
			for _, t := range cut {
				if t > from && t < to {
					times = append(times, t)
				}
			}
			sort.Float64s(times)
			times = slices.Compact(times)
			for k := 0; k+1 < len(times); k++ {
				w.list = append(w.list, w.stretch(times[k], times[k+1], l, net, r.law))
			}
			from = to
		}
	}
	return nil
}

// countable refuses rate constants that are no numbers, at a held temperature or
// at the ends of a ramp.
func (w *walk) countable(net *kinetics.Network, parts []reach) error {
	check := func(ln []float64, kelvin float64) error {
		for i := range 2 * w.p.steps {
			if k := math.Exp(ln[i]); math.IsInf(k, 0) || math.IsNaN(k) {
				return bad("step %s has a rate constant of e^%.4g at %.2f K, more than can be computed with; check its energies", w.p.net.Reactions[i/2].Name, ln[i], kelvin)
			}
		}
		return nil
	}
	if net != nil {
		columns(net, w.p.members, w.ln)
		return check(w.ln, net.T)
	}
	for _, r := range parts {
		for _, kelvin := range [2]float64{r.from, r.to} {
			r.law.at(kelvin, w.ln, nil)
			if err := check(w.ln, kelvin); err != nil {
				return err
			}
		}
	}
	return nil
}

func (w *walk) stretch(from, to float64, l *leg, net *kinetics.Network, law law) stretch {
	p := w.p
	s := stretch{from: from, to: to, leg: l, net: net, feed: make([]float64, p.n)}
	mid := from + (to-from)/2
	for _, d := range p.run.Doses {
		if d.Lasts > 0 && d.From <= mid && mid < d.From+d.Lasts {
			s.feed[d.Species] += d.Amount / d.Lasts
			s.fed = s.fed || d.Amount > 0
		}
	}
	c := &constants{law: law, leg: l, steps: 2 * p.steps, share: make([]float64, 2*p.steps), sinks: make([]float64, len(p.sinks))}
	for i, v := range p.sinks {
		if r := p.run.Removals[v]; r.From <= mid && mid < r.To {
			c.sinks[i] = r.K
			s.taken = true
		}
	}
	if net != nil {
		c.held = make([]float64, 2*p.steps+len(p.sinks))
		for i := range net.Reactions {
			c.held[2*i], c.held[2*i+1] = net.Reactions[i].Forward, net.Reactions[i].Back
		}
		copy(c.held[2*p.steps:], c.sinks)
	} else {
		c.ln = make([]float64, 2*p.steps+len(p.members))
		c.slope = make([]float64, len(c.ln))
	}
	s.rates = c
	return s
}

// spread lays out the times for drawing: half of them even over the run, half
// dense after the start of every stretch.
func (w *walk) spread(end float64) {
	w.trace = nil
	n := w.p.run.Trace
	if n == 0 {
		return
	}
	even := (n + 1) / 2
	for i := 1; i <= even; i++ {
		w.trace = append(w.trace, end*float64(i)/float64(even+1))
	}
	inside := 0
	for i := range w.list {
		if w.list[i].from < end {
			inside++
		}
	}
	each := (n - even) / max(1, inside)
	for i := range inside {
		s := &w.list[i]
		span := min(s.to, end) - s.from
		for j := 1; j <= each; j++ {
			w.trace = append(w.trace, s.from+span*math.Pow(10, -5*float64(j)/float64(each)))
		}
	}
	sort.Float64s(w.trace)
	w.trace = slices.Compact(w.trace)
}

func (w *walk) run() error {
	w.at = &w.list[0]
	w.jump(0)
	w.met(0)
	still{w, w.at}.Slope(0, w.slope)
	w.note(0)
	w.arrive(0)
	for i := range w.list {
		w.at = &w.list[i]
		w.rest, w.restAt = nil, math.NaN()
		w.warming()
		ended, t, err := w.cross(w.at)
		if err != nil {
			return err
		}
		w.pay(t)
		w.note(t)
		if ended < 0 {
			ended = w.met(t)
		}
		if ended < 0 && w.jump(t) {
			ended = w.met(t)
			after := still{w, &w.list[min(i+1, len(w.list)-1)]}
			after.Slope(t, w.slope)
			copy(w.look, w.y)
			w.see(after, t, t)
			w.note(t)
		}
		w.arrive(t)
		if w.c.Ended = ended; ended >= 0 || i+1 == len(w.list) {
			w.finish(t)
			break
		}
	}
	return nil
}

// fix takes the fixed species of the state into the constants of a stretch.
func (w *walk) fix(s *stretch) {
	for i, list := range w.p.beside {
		s.rates.share[i] = 1
		for _, x := range list {
			s.rates.share[i] *= w.y[x]
		}
	}
}

// warming notes the state where a ramp to a higher temperature starts.
func (w *walk) warming() {
	s := w.at
	if s.from != s.leg.from || !(s.leg.finish > s.leg.start) {
		return
	}
	h := Warming{T: s.from, From: s.leg.start, To: s.leg.finish, C: slices.Clone(w.y[:w.p.n]), Unreacted: math.NaN(), Left: make([]float64, w.p.n)}
	for i, in := range w.in {
		h.Left[i] = math.NaN()
		if in > 0 {
			h.Left[i] = w.y[i] / in
		}
	}
	if b := w.p.run.Basis; b >= 0 {
		h.Unreacted = h.Left[b]
	}
	w.c.Warmings = append(w.c.Warmings, h)
}

// pay counts what was fed up to t.
func (w *walk) pay(t float64) {
	for s, f := range w.at.feed {
		w.in[s] += f * (t - w.since)
	}
	w.since = t
}

// cross passes through a stretch: exactly where that is possible, else by
// integration.
func (w *walk) cross(s *stretch) (ended int, t float64, err error) {
	for i, c := range w.y { // see the package doc: at most the floor
		w.y[i] = max(c, 0)
	}
	w.fix(s)
	if x, fastest := w.exactly(s); x != nil {
		return w.solve(s, x, fastest)
	}
	w.stepped++
	p := w.p
	prob := &stiff.Problem{From: s.from, To: s.to, Start: w.y, Rates: s.rates}
	for i, f := range s.feed {
		if f > 0 {
			prob.Feeds = append(prob.Feeds, stiff.Feed{From: s.from, To: s.to, Species: i, Rate: f})
			if p.twin {
				prob.Feeds = append(prob.Feeds, stiff.Feed{From: s.from, To: s.to, Species: p.width + i, Rate: f})
			}
		}
	}
	for i := range p.run.Until {
		prob.Events = append(prob.Events, stiff.Event{Stop: true, G: func(t float64, y []float64) float64 { return w.until(i, t, y) }})
	}
	err = p.once.Run(w.ctx, prob, func(st *stiff.Step) error {
		w.piece.take(st)
		w.pass(&w.piece, st.T0, st.T1)
		if st.T1 >= s.to || len(prob.Events) > 0 {
			w.piece.Slope(st.T1, w.slope)
		}
		return nil
	})
	did := p.once.Stats()
	w.steps, w.multi = w.steps+did.Steps, w.multi+did.Multistep
	w.c.Lowest = math.Min(w.c.Lowest, did.Lowest)
	if err != nil {
		return 0, 0, w.stuck(err)
	}
	p.once.Y(w.y)
	ended = -1
	if h := p.once.Hits(); len(h) > 0 {
		ended = h[len(h)-1].Event
	}
	return ended, p.once.T(), nil
}
