package stiff

import (
	"context"
	"math"
)

// Options set the accuracy and the bounds of a run. The zero value of each
// means its default.
type Options struct {
	RTol      float64   // relative tolerance per component; default 1e-6
	ATol      float64   // absolute tolerance, as a concentration; default 1e-12
	ATols     []float64 // absolute tolerance by species, instead of ATol
	MaxSteps  int       // default 1 000 000 tried steps
	FirstStep float64   // s, of every piece; default chosen from the rates
	MaxStep   float64   // s; default none
}

// Stats count the work of a run.
type Stats struct {
	Steps, Rejected int
	Multistep       int // of Steps, those of the multistep formulas
	Negative        int // of Rejected, those for a negative concentration
	Leaks           int // of Rejected, those that broke a conservation law by more than the tolerance
	Factorisations  int
	Exchanges       int // factorisations that needed row exchange
	Rebuilds        int // of the careful linear system
	Evaluations     int // of the right side
	Jacobians       int
	Restarts        int     // pieces begun
	Lowest          float64 // most negative concentration accepted; 0 if none was
	LowestSpecies   int
}

// A Hit is an event that happened, refined so that the state is that of a full
// step to T.
type Hit struct {
	Event int
	T     float64
	Y     []float64
}

// A Solver integrates problems of one System at one set of tolerances. It owns
// all scratch space and may be used again and again, by one goroutine at a
// time; steps allocate nothing.
type Solver struct {
	sys   *System
	opt   Options
	e     engine
	stats Stats
	t     float64
	cut   []float64
	outY  []float64
	sides []int8
	hits  []Hit
	step  Step
	multi *multistep // nil where it would be no gain
}

// NewSolver chooses the order of elimination for the system and sets up scratch
// space. It refuses tolerances that are not finite, not above zero (RTol) or
// below zero (ATol), with ErrInput.
func NewSolver(sys *System, opt Options) (*Solver, error) {
	if opt.RTol == 0 {
		opt.RTol = 1e-6
	}
	if opt.ATol == 0 {
		opt.ATol = 1e-12
	}
	if opt.MaxSteps == 0 {
		opt.MaxSteps = 1000000
	}
	if !(opt.RTol >= 1e-14) || !(opt.RTol < 1) {
		return nil, bad("relative tolerance %g; give one from 1e-14 to below 1", opt.RTol)
	}
	if opt.ATols != nil && len(opt.ATols) != sys.species {
		return nil, bad("%d absolute tolerances for %d species; give none or one each", len(opt.ATols), sys.species)
	}
	if opt.MaxSteps < 0 || opt.FirstStep < 0 || opt.MaxStep < 0 || math.IsNaN(opt.FirstStep) || math.IsNaN(opt.MaxStep) {
		return nil, bad("step limit %d, first step %g s, longest step %g s; give numbers not below zero", opt.MaxSteps, opt.FirstStep, opt.MaxStep)
	}
	s := &Solver{sys: sys, opt: opt}
	s.build()
	for i := range sys.species {
		a := opt.ATol
		if opt.ATols != nil {
			a = opt.ATols[i]
		}
		if !(a >= 0) || math.IsInf(a, 0) {
			return nil, bad("absolute tolerance %g of species %d; give a finite number, not below zero", a, i)
		}
		s.e.atol[s.e.order.place[i]] = max(a, 1e-290)
	}
	return s, nil
}

func (s *Solver) build() {
	n := s.sys.species
	e := &s.e
	e.stats = &s.stats
	e.method = &rodas5p
	e.n = n
	e.rtol = s.opt.RTol
	e.order = newOrdering(n, s.sys.positions, nil)
	e.sparse = newSparseLU(e.order, bound(e.rtol))
	e.net = newNetwork(s.sys, e.order.place, e.order.find)
	size := len(e.order.cols)
	e.plain = e.net
	e.laws = lawsOf(s.sys, e.order.place)
	nc := e.net.nc
	m := len(e.laws)
	slab := make([]float64, 3*(n+1)+(8+maxStages)*n+2*nc+e.net.partials()+size+2*s.sys.rates+len(e.net.kb)+m*m+m+n)
	take := func(m int) []float64 {
		x := slab[:m:m]
		slab = slab[m:]
		return x
	}
	for _, v := range []*[]float64{&e.y, &e.next, &e.arg} {
		*v = take(n + 1)
		(*v)[n] = 1
	}
	for _, v := range []*[]float64{&e.f0, &e.ft, &e.b, &e.acc, &e.atol, &e.feed, &e.out, &s.outY, &e.lawWork} {
		*v = take(n)
	}
	e.u, e.v, e.g, e.jac = take(maxStages*n), take(nc), take(e.net.partials()), take(size)
	e.k, e.dk, e.dkf, e.dkb = take(s.sys.rates), take(s.sys.rates), take(nc), take(len(e.net.kb))
	e.lawM, e.lawB = take(m*m), take(m)
	if float64(e.order.flops) >= dear*float64(size) && e.rtol <= fine {
		s.multi = newMultistep(e)
	}
}

// Stats returns the counts of the last run.
func (s *Solver) Stats() Stats { return s.stats }

// T returns the time reached, in s.
func (s *Solver) T() float64 { return s.t }

// Y writes the concentrations reached to out.
func (s *Solver) Y(out []float64) {
	for i, p := range s.e.order.place {
		out[i] = s.e.y[p]
	}
}

// Slope writes dy/dp of a parameter, at the time reached, to out.
func (s *Solver) Slope(param int, out []float64) {
	for i, p := range s.e.order.place {
		out[i] = s.e.sens.list[param].s[p]
	}
}

// Hits returns the events of the last run, in order of time. They are the
// caller's to keep.
func (s *Solver) Hits() []Hit { return s.hits }

// Run integrates a problem and calls visit, when not nil, after every accepted
// step; an error of visit ends the run and is returned. The Step is good only
// during the call.
//
// Errors are ErrInput, ErrStuck (as StuckError), and that of the context. After
// ErrStuck the solver holds the last state within tolerance.
func (s *Solver) Run(ctx context.Context, p *Problem, visit func(*Step) error) error {
	if err := p.check(s.sys); err != nil {
		return err
	}
	e := &s.e
	s.stats = Stats{}
	s.hits = nil
	s.t = p.From
	e.kept, e.careful = nil, nil // so that a run does not depend on the one before
	for i, y := range p.Start {
		e.y[e.order.place[i]] = y
	}
	e.rates = p.Rates
	if len(p.Params) == 0 {
		e.sens = nil
	} else {
		if e.sens == nil || len(e.sens.list) != len(p.Params) {
			e.sens = newSensitivity(e, len(p.Params))
		}
		e.sens.start(e, p.Params, e.order.place)
	}
	if cap(s.sides) < len(p.Events) {
		s.sides = make([]int8, len(p.Events))
	}
	s.sides = s.sides[:len(p.Events)]
	clear(s.sides)
	s.cut = p.cuts(s.cut)
	for i := 0; i <= len(s.cut); i++ {
		to := p.To
		if i < len(s.cut) {
			to = s.cut[i]
		}
		if err := s.jump(p, s.t); err != nil {
			return err
		}
		if to == s.t {
			break
		}
		stop, err := s.run(ctx, p, to, visit)
		if err != nil || stop {
			return err
		}
	}
	if p.To > p.From {
		return s.jump(p, p.To)
	}
	return nil
}

const tooShort = "the step has become too short for the clock"

func (s *Solver) run(ctx context.Context, p *Problem, to float64, visit func(*Step) error) (stop bool, err error) {
	e := &s.e
	if err := s.piece(p, to); err != nil {
		return false, err
	}
	span := to - s.t
	tau := 0.0
	e.prepare(0)
	h := s.firstStep(span)
	if s.multi != nil && len(p.Events) == 0 && e.sens == nil {
		var done bool
		if tau, h, done, err = s.runMulti(ctx, tau, span, to, h, visit); done || err != nil {
			return false, err
		}
		if e.moving {
			e.ratesAt(tau, false)
		}
		e.prepare(tau)
	}
	lnOld := 0.0 // logarithm of the error of the step before
	order := float64(e.method.estimate)
	rejected := false
	for {
		if s.stats.Steps+s.stats.Rejected >= s.opt.MaxSteps {
			return false, s.stuck(h, "step limit reached")
		}
		if s.stats.Steps&63 == 0 {
			if err := ctx.Err(); err != nil {
				return false, err
			}
		}
		if s.opt.MaxStep > 0 && h > s.opt.MaxStep {
			h = s.opt.MaxStep
		}
		final := false
		if left := span - tau; h >= left*(1-1e-10) {
			h, final = left, true
		} else if h > left/2 {
			h = left / 2
		}
		if tau+h == tau || h < 1e-300 {
			return false, s.stuck(h, tooShort)
		}
		size := math.Inf(1)
		if e.factorise(s.sys, tau, e.method.gamma*h) {
			size = e.step(tau, h)
		}
		if size <= 1 && !e.conserve(tau+h) {
			s.stats.Leaks++
			size = 32
		}
		if size <= 1 && s.negative() {
			s.stats.Negative++
			size = 32
		}
		if !(size <= 1) {
			s.stats.Rejected++
			rejected = true
			if e.moving {
				e.ratesAt(tau, false)
			}
			h *= max(shortest, safety*math.Pow(size, -1/order))
			continue
		}
		next := tau + h
		if final {
			next = span
		}
		st := &s.step
		st.set(e, tau, next, to, final)
		hit, whole := -1, h
		if len(p.Events) > 0 {
			hit, h, err = s.events(p, st, tau, h)
			if err != nil {
				return false, err
			}
			if hit >= 0 {
				final = false
				next = tau + h
				if next >= span {
					next, final = span, true
				}
				st.set(e, tau, next, to, final)
			}
		}
		s.stats.Steps++
		if visit != nil {
			if err := visit(st); err != nil {
				return false, err
			}
		}
		e.y, e.next = e.next, e.y
		if e.sens != nil {
			e.sens.accept()
		}
		tau = next
		s.t = st.T1
		if hit >= 0 {
			y := make([]float64, e.n)
			s.Y(y)
			s.hits = append(s.hits, Hit{hit, s.t, y})
			if p.Events[hit].Stop {
				return true, nil
			}
		}
		if final {
			return false, nil
		}
		// Predictive control: the change of the error over the last two steps
		// foretells the next.
		size = max(size, 1e-10)
		ln := math.Log(size)
		fac := safety * math.Exp((0.3*lnOld-0.7*ln)/order)
		if size < smooth {
			fac = safety * math.Exp(-ln/order)
		}
		fac = min(longest, max(shortest, fac))
		if rejected {
			fac = min(fac, 1)
		}
		rejected = false
		lnOld = ln
		h = whole * fac
		e.prepare(tau)
	}
}
