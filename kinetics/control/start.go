package control

import (
	"context"
	"errors"
	"fmt"
	"math"

	"saddlebook/kinetics/stiff"
)

// reduce returns ln c at steady state by state reduction (Grassmann, Taksar and
// Heyman), where every step moves one free molecule at most; else ok is false.
// The held species together are one more state, at weight 1.
func (s *system) reduce() (x []float64, ok bool) {
	n := len(s.free)
	const outside = 0
	q := make([][]float64, n+1) // ln of the rate from state to state
	for i := range q {
		q[i] = make([]float64, n+1)
		for j := range q[i] {
			q[i][j] = math.Inf(-1)
		}
	}
	group := identity(n + 1)
	root := func(i int) int {
		for group[i] != i {
			i = group[i]
		}
		return i
	}
	open := make([]bool, n+1)
	one := func(side []place) (state int, ok bool) {
		switch {
		case len(side) == 0:
			return outside, true
		case len(side) == 1 && side[0].n == 1:
			return side[0].at + 1, true
		}
		return 0, false
	}
	for _, st := range s.steps {
		from, ok1 := one(st.from)
		to, ok2 := one(st.to)
		if !ok1 || !ok2 {
			return nil, false
		}
		if from == to {
			continue
		}
		q[from][to] = logAdd(q[from][to], st.lnF)
		q[to][from] = logAdd(q[to][from], st.lnB)
		switch outside {
		case from:
			open[to] = true
		case to:
			open[from] = true
		default:
			group[root(from)] = root(to)
		}
	}
	x = make([]float64, n)
	for g := 1; g <= n; g++ {
		if root(g) != g {
			continue
		}
		var states []int
		total, isOpen := 0.0, false
		for i := 1; i <= n; i++ {
			if root(i) == g {
				states = append(states, i)
				total += s.total[s.free[i-1]]
				isOpen = isOpen || open[i]
			}
		}
		if isOpen {
			states = append([]int{outside}, states...)
		}
		ln, ok := weights(q, states)
		if !ok {
			return nil, false
		}
		shift := 0.0
		if !isOpen {
			sum := math.Inf(-1)
			for _, l := range ln {
				sum = logAdd(sum, l)
			}
			shift = math.Log(total) - sum
		}
		for i, state := range states {
			if state != outside {
				x[state-1] = ln[i] + shift
			}
		}
	}
	return x, true
}

// weights returns ln of the stationary weight of each state, relative to the
// first. ok is false if some state cannot be reached or left.
func weights(q [][]float64, states []int) (ln []float64, ok bool) {
	n := len(states)
	m := make([][]float64, n)
	for i := range m {
		m[i] = make([]float64, n)
		for j := range m[i] {
			m[i][j] = q[states[i]][states[j]]
		}
	}
	for k := n - 1; k > 0; k-- {
		out := math.Inf(-1)
		for j := range k {
			out = logAdd(out, m[k][j])
		}
		if math.IsInf(out, -1) {
			return nil, false
		}
		for i := range k {
			m[i][k] -= out
			for j := range k {
				if i != j {
					m[i][j] = logAdd(m[i][j], m[i][k]+m[k][j])
				}
			}
		}
	}
	ln = make([]float64, n)
	for k := 1; k < n; k++ {
		ln[k] = math.Inf(-1)
		for i := range k {
			ln[k] = logAdd(ln[k], ln[i]+m[i][k])
		}
		if math.IsInf(ln[k], -1) {
			return nil, false
		}
	}
	return ln, true
}

// settle integrates from the totals as charged, a power of ten in time after
// another, until Newton's method finds a steady state right beside.
func (s *system) settle(ctx context.Context) (*steady, error) {
	c, scale := make([]float64, len(s.free)), 0.0
	for i, sp := range s.free {
		c[i] = s.total[sp]
		scale = math.Max(scale, c[i])
	}
	for _, h := range s.held {
		if h > 0 && len(s.free) > 0 && scale == 0 {
			scale = math.Max(scale, h)
		}
	}
	if len(s.free) == 0 {
		return s.polish(nil)
	}
	solver, rates, err := s.integrator(scale)
	if err != nil {
		return nil, err
	}
	why := ""
	for t := 1e-6; t < 1e40; t *= 10 {
		p := stiff.Problem{To: t, Start: c, Rates: rates}
		if err := solver.Run(ctx, &p, nil); err != nil {
			if !errors.Is(err, stiff.ErrStuck) {
				return nil, err
			}
			why = ": " + err.Error()
			break
		}
		solver.Y(c)
		for i := range c {
			c[i] = math.Max(0, c[i])
		}
		x := s.lift(c, scale)
		if found, err := s.polish(x); err == nil && beside(found.x, c) {
			return found, nil
		}
	}
	return nil, &PointError{Of: ErrNoSteadyState, Species: s.free, Step: -1,
		Msg: fmt.Sprintf("no steady state of %s was reached from the stated totals%s", names(s.n, s.free), why),
		Fix: "check that what is used up is held or has a total, and the energies"}
}

// beside tells whether a steady state is where the integration stands, for all
// that is not a trace.
func beside(x, c []float64) bool {
	most := 0.0
	for _, c := range c {
		most = math.Max(most, c)
	}
	for i := range x {
		at := math.Exp(x[i])
		if math.Max(at, c[i]) > 1e-6*most && !(math.Abs(at-c[i]) <= 0.02*math.Max(at, c[i])) {
			return false
		}
	}
	return true
}

// integrator sets up the free species, the held ones in the rate constants.
func (s *system) integrator(scale float64) (*stiff.Solver, stiff.Constant, error) {
	var reactions []stiff.Reaction
	var rates stiff.Constant
	for k := range s.steps {
		st := &s.steps[k]
		add := func(in []place, ln, sign float64) {
			if math.IsInf(ln, -1) {
				return
			}
			r := stiff.Reaction{K: len(rates)}
			for _, p := range in {
				for range p.n {
					r.In = append(r.In, p.at)
				}
			}
			for i := range s.free {
				if x := s.net[i][k]; x != 0 {
					r.Net = append(r.Net, stiff.Term{Species: i, Coef: sign * x})
				}
			}
			reactions = append(reactions, r)
			rates = append(rates, math.Exp(ln))
		}
		add(st.from, st.lnF, 1)
		add(st.to, st.lnB, -1)
	}
	sys, err := stiff.NewSystem(len(s.free), len(rates), reactions)
	if err != nil {
		return nil, nil, err
	}
	solver, err := stiff.NewSolver(sys, stiff.Options{RTol: 1e-6, ATol: 1e-13 * scale})
	return solver, rates, err
}

// lift returns ln c, traces set where what forms them and what uses them up are
// equal: below the tolerance of the integration they have no digits.
func (s *system) lift(c []float64, scale float64) []float64 {
	x := make([]float64, len(c))
	trace := make([]bool, len(c))
	for i := range c {
		trace[i] = c[i] < 1e-9*scale
		x[i] = math.Log(math.Max(c[i], 1e-30*scale))
	}
	for range 50 {
		for i := range x {
			if !trace[i] {
				continue
			}
			made, used := math.Inf(-1), math.Inf(-1)
			for k := range s.steps {
				if s.net[i][k] == 0 {
					continue
				}
				a, b := s.gross(k, x)
				if s.net[i][k] < 0 {
					a, b = b, a
				}
				made, used = logAdd(made, a), logAdd(used, b)
			}
			if !math.IsInf(made, -1) && !math.IsInf(used, -1) {
				x[i] += made - used
			}
		}
	}
	return x
}
