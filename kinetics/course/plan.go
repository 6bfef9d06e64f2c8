package course

import (
	"context"
	"fmt"
	"slices"
	"sort"

	"saddlebook/kinetics"
	"saddlebook/kinetics/stiff"
)

// A Plan is a run made ready for one mechanism and for others that differ from
// it only in their energies, such as those of a sampling. It owns scratch space:
// one goroutine at a time may use it.
type Plan struct {
	run   Run
	rtol  float64
	atol  float64
	names []string
	net   *kinetics.Network // at the start
	steps int               // reactions
	legs  []leg
	whole []float64 // charge and all doses, by species
	start []float64 // charge and what is dosed at once at the start
	end   float64   // s, of the programme

	n     int   // species
	sinks []int // removals over time, each with a species of its own for what is taken
	width int   // species and sinks
	// fixed species, such as a catalyst written on both sides, are changed by
	// nothing within a stretch: they are taken into the constants.
	fixed          []bool
	beside         [][]int // fixed species by direction, as often as they react
	happens, limit []bool  // by direction: in the network, in that of the kinetic limit
	twin           bool    // the kinetic limit follows in the second half of the state
	sys            *stiff.System
	once           *stiff.Solver

	pairs       [][2]int
	members     []int   // species of products, in order
	places      [][]int // by product: into members
	closed      []bool  // by pair: the ratio at equilibrium does not depend on the charge
	unreachable []string
	drains      []Drain // by pair
	oneWay      bool    // some step has no return
	laws        []conserved
	notFirst    string // why the network is not first order throughout; "" if it is
}

// A leg is a stretch of the programme with its times.
type leg struct {
	from, to      float64 // s
	start, finish float64 // K
	slope         float64 // K/s
}

func (l *leg) kelvin(t float64) float64 {
	switch {
	case l.slope == 0 || t <= l.from:
		return l.start
	case t >= l.to:
		return l.finish
	}
	return l.start + l.slope*(t-l.from)
}

// Prepare makes a run ready. Its errors are those of Simulate that do not
// depend on energies.
func Prepare(m *kinetics.Mechanism, r Run) (*Plan, error) {
	if err := r.check(m); err != nil {
		return nil, err
	}
	p := &Plan{run: r, n: len(m.Species), pairs: r.pairs(), rtol: r.RTol}
	if p.rtol == 0 {
		p.rtol = 1e-9
	}
	for i := range m.Species {
		p.names = append(p.names, m.Species[i].Name)
	}
	t, kelvin := 0.0, r.Programme[0].To
	for _, l := range r.Programme {
		g := leg{from: t, to: t + l.Lasts, start: l.To, finish: l.To}
		if l.Ramp && kelvin != l.To {
			g.start = kelvin
			g.slope = (l.To - kelvin) / (g.to - g.from)
		}
		p.legs = append(p.legs, g)
		t, kelvin = g.to, l.To
	}
	p.end = t
	net, err := m.At(p.legs[0].start)
	if err != nil {
		return nil, err
	}
	p.net = net
	for i, v := range r.Removals {
		if v.K > 0 {
			p.sinks = append(p.sinks, i)
		}
	}
	p.width = p.n + len(p.sinks)
	p.whole, p.start = slices.Clone(r.Charge), slices.Clone(r.Charge)
	for _, d := range r.Doses {
		p.whole[d.Species] += d.Amount
		if d.From == 0 && d.Lasts == 0 {
			p.start[d.Species] += d.Amount
		}
	}
	p.fix(net)
	p.products(net)
	if err := p.compile(net); err != nil {
		return nil, err
	}
	p.laws = conservation(p.width, p.nets(net))
	most := slices.Max(p.whole)
	if most == 0 {
		most = 1
	}
	p.atol = max(1e-12*p.rtol*most, 1e-280)
	p.once, err = stiff.NewSolver(p.sys, stiff.Options{RTol: p.rtol, ATol: p.atol})
	if err != nil {
		return nil, fmt.Errorf("course: %w", err)
	}
	return p, nil
}

// products finds what the pairs need.
func (p *Plan) products(net *kinetics.Network) {
	for _, g := range p.run.Products {
		for _, s := range g.Members {
			if !slices.Contains(p.members, s) {
				p.members = append(p.members, s)
			}
		}
	}
	sort.Ints(p.members)
	for _, g := range p.run.Products {
		at := make([]int, len(g.Members))
		for i, s := range g.Members {
			at[i], _ = slices.BinarySearch(p.members, s)
		}
		p.places = append(p.places, at)
	}
	for _, q := range p.pairs {
		from := Drain{Step: -1}
		all := slices.Concat(p.run.Products[q[0]].Members, p.run.Products[q[1]].Members)
		closed, why := true, ""
		for _, s := range all {
			if _, ok := net.EquilibriumRatio(all[0], s); !ok {
				closed = false
			}
			if why == "" && net.Drained(s) {
				from = drain(net, s)
				why = from.Words(net.Reactions[from.Step].Name, p.names)
			}
		}
		p.closed = append(p.closed, closed)
		p.unreachable, p.drains = append(p.unreachable, why), append(p.drains, from)
	}
}

// drain finds the step that drains a species, itself or by way of what reversible
// steps turn it into.
func drain(net *kinetics.Network, species int) Drain {
	near := make([]bool, len(net.Names))
	near[species] = true
	for more := true; more; {
		more = false
		for i := range net.Reactions {
			r := &net.Reactions[i]
			both := slices.Concat(r.From, r.To)
			if !r.Returns || !slices.ContainsFunc(both, func(t kinetics.Term) bool { return near[t.Species] }) {
				continue
			}
			for _, t := range both {
				more = more || !near[t.Species]
				near[t.Species] = true
			}
		}
	}
	found := Drain{Step: -1}
	for i := range net.Reactions {
		r := &net.Reactions[i]
		if r.Returns {
			continue
		}
		for _, t := range r.From {
			made := 0
			for _, u := range r.To {
				if u.Species == t.Species {
					made += u.N
				}
			}
			switch {
			case !near[t.Species] || made >= t.N:
			case t.Species == species:
				return Drain{i, species, species}
			case found.Step < 0:
				found = Drain{i, t.Species, species}
			}
		}
	}
	return found
}

// Words says it with the names of steps and species given.
func (d Drain) Words(step string, species []string) string {
	if d.Takes == d.From {
		return fmt.Sprintf("equilibrium is not reachable, as step %s, without return, uses up %s", step, species[d.From])
	}
	return fmt.Sprintf("equilibrium is not reachable, as step %s, without return, takes %s away from %s", step, species[d.Takes], species[d.From])
}

// Simulate computes a run.
//
// The error matches ErrRun if the run makes no sense as stated, is Complaints if
// the mechanism has no rate constants at a temperature of the programme, matches
// stiff.ErrStuck if the integration could not go on, or is that of the context.
func Simulate(ctx context.Context, m *kinetics.Mechanism, r Run) (*Course, error) {
	p, err := Prepare(m, r)
	if err != nil {
		return nil, err
	}
	return p.Simulate(ctx, m)
}

// Simulate computes the run for a mechanism that differs from the one prepared
// in its energies alone. Its errors are those of the function Simulate.
func (p *Plan) Simulate(ctx context.Context, m *kinetics.Mechanism) (*Course, error) {
	if len(m.Species) != p.n || len(m.Steps) != p.steps {
		panic("course: the plan was prepared for another mechanism")
	}
	w := newWalk(ctx, p, m)
	if err := w.stretches(); err != nil {
		return nil, err
	}
	w.spread(p.end)
	if err := w.run(); err != nil {
		return nil, err
	}
	if p.run.Trace > 0 && w.c.Ended >= 0 && w.c.End < p.end {
		// The points for drawing were spread over a longer run: again, the same
		// way, with the points where the run was.
		end := w.c.End
		w.reset()
		w.spread(end)
		if err := w.run(); err != nil {
			return nil, err
		}
	}
	return w.c, nil
}
