package control_test

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"saddlebook/kinetics"
	"saddlebook/kinetics/control"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/stiff"
)

// sample is a random catalytic network at a random point.
type sample struct {
	species      []level
	steps        []way
	held, totals map[string]float64
}

// draw makes a cycle of two to five states, with any of an inhibitor, a dimer,
// a ligand that comes off, a second way from one state to another, and a step
// without return.
func draw(rng *rand.Rand) sample {
	u := func(low, high float64) float64 { return low + (high-low)*rng.Float64() }
	s := sample{held: map[string]float64{"S": u(0.01, 1), "P": u(0.001, 0.5)}, totals: map[string]float64{"c0": math.Pow(10, u(-5, -1))}}
	G := map[string]float64{}
	put := func(name string, g float64) {
		G[name] = g
		s.species = append(s.species, level{name, g})
	}
	put("S", 0)
	put("P", u(-20, -6))
	n := 2 + rng.IntN(4)
	for i := range n {
		put(fmt.Sprint("c", i), u(-12, 3))
	}
	step := func(reaction string, parts ...string) {
		// parts: the species of the higher side cannot be told here, so stand above both.
		arrow, half := " <=> ", 0
		for i, p := range parts {
			if p == "|" {
				half = i
			}
		}
		left, right := 0.0, 0.0
		for i, p := range parts {
			if p == "|" {
				continue
			}
			if i < half {
				left += G[p]
			} else {
				right += G[p]
			}
		}
		if reaction == "->" {
			arrow = " -> "
		}
		text := func(side []string) string {
			out := side[0]
			for _, p := range side[1:] {
				out += " + " + p
			}
			return out
		}
		s.steps = append(s.steps, way{fmt.Sprint("TS", len(s.steps)), text(parts[:half]) + arrow + text(parts[half+1:]), math.Max(left, right) + u(3, 22)})
	}
	for i := range n {
		from, to := fmt.Sprint("c", i), fmt.Sprint("c", (i+1)%n)
		way := "<=>"
		if rng.IntN(6) == 0 {
			way = "->"
		}
		parts := []string{from, "|", to}
		if i == 0 {
			parts = []string{from, "S", "|", to}
		}
		if i == n-1 {
			parts = append(parts, "P")
		}
		if n == 1 {
			parts = []string{from, "S", "|", to, "P"}
		}
		step(way, parts...)
	}
	if rng.IntN(2) == 0 {
		put("I", 0)
		put("off", u(-14, 2))
		s.held["I"] = u(0.001, 0.3)
		step("<=>", fmt.Sprint("c", rng.IntN(n)), "I", "|", "off")
	}
	if rng.IntN(2) == 0 {
		put("dim", u(-20, 5))
		c := fmt.Sprint("c", rng.IntN(n))
		step("<=>", c, c, "|", "dim")
	}
	if rng.IntN(3) == 0 {
		put("L", 0)
		put("pre", u(-16, 0))
		s.totals["L"] = math.Pow(10, u(-5, -1))
		step("<=>", "c0", "L", "|", "pre")
	}
	if rng.IntN(3) == 0 && n > 2 {
		step("<=>", "c0", "S", "|", fmt.Sprint("c", n-1))
	}
	return s
}

func (s sample) problem(t testing.TB, T float64) (*kinetics.Mechanism, control.Problem) {
	m := mechanism(t, T, s.species, s.steps)
	p := point(t, m, "P", s.held, s.totals)
	p.Catalyst = index(t, m, "c0")
	return m, p
}

// integrated is the composition after a long time by integration alone.
func integrated(t *testing.T, n *kinetics.Network, p control.Problem) []float64 {
	t.Helper()
	var reactions []stiff.Reaction
	var rates stiff.Constant
	start := make([]float64, len(n.Names))
	for s := range start {
		if !math.IsNaN(p.Held[s]) {
			start[s] = p.Held[s]
		} else if !math.IsNaN(p.Total[s]) {
			start[s] = p.Total[s]
		}
	}
	for i := range n.Reactions {
		r := &n.Reactions[i]
		add := func(from, to []kinetics.Term, k float64) {
			q := stiff.Reaction{K: len(rates)}
			net := map[int]float64{}
			for _, x := range from {
				net[x.Species] -= float64(x.N)
				if math.IsNaN(p.Held[x.Species]) {
					for range x.N {
						q.In = append(q.In, x.Species)
					}
				} else {
					k *= math.Pow(p.Held[x.Species], float64(x.N))
				}
			}
			for _, x := range to {
				net[x.Species] += float64(x.N)
			}
			for s := range n.Names {
				if net[s] != 0 && math.IsNaN(p.Held[s]) {
					q.Net = append(q.Net, stiff.Term{Species: s, Coef: net[s]})
				}
			}
			reactions, rates = append(reactions, q), append(rates, k)
		}
		add(r.From, r.To, r.Forward)
		if r.Returns {
			add(r.To, r.From, r.Back)
		}
	}
	sys, err := stiff.NewSystem(len(n.Names), len(rates), reactions)
	if err != nil {
		t.Fatal(err)
	}
	c, err := stiff.Solve(context.Background(), sys, stiff.Options{RTol: 1e-9, ATol: 1e-25}, stiff.Problem{To: 1e25, Start: start, Rates: rates}, nil)
	if err != nil {
		t.Fatal(err)
	}
	return c.Final
}

// The steady state is where an integration of the whole comes to rest.
func TestSteadyStateAgainstIntegration(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 5))
	for i := range 60 {
		s := draw(rng)
		m, p := s.problem(t, 330)
		n, err := m.At(330)
		if err != nil {
			t.Fatal(err)
		}
		c, _, err := control.Steady(context.Background(), n, p)
		if err != nil {
			t.Errorf("%d: %v\n%+v", i, err, s)
			continue
		}
		want := integrated(t, n, p)
		for k := range c {
			if !(math.Abs(c[k]-want[k]) <= 1e-7*want[k]+1e-22) {
				t.Errorf("%d: %s = %.12g, integration %.12g\n%+v", i, n.Names[k], c[k], want[k], s)
			}
		}
	}
}

// Over transition states X sums to 1, since doubling every rate constant
// doubles the rate. Orders and the X of species sum to 0: doubling every
// concentration is another standard state.
func TestSums(t *testing.T) {
	rng := rand.New(rand.NewPCG(6, 6))
	for i := range 200 {
		s := draw(rng)
		m, p := s.problem(t, 330)
		r := analyse(t, m, 330, p)
		ts, species, orders, size := 0.0, 0.0, 0.0, 1.0
		for _, st := range r.States {
			if st.Step {
				ts += st.X
			} else {
				species += st.X
			}
			size += math.Abs(st.X)
		}
		for _, o := range r.Orders {
			orders += o.Order
			size += math.Abs(o.Order)
		}
		close(t, fmt.Sprint(i, ": sum of X over transition states"), ts, 1, 1e-9*size)
		close(t, fmt.Sprint(i, ": sum of orders and X of species"), orders+species, 0, 1e-9*size)
		if r.Cycle != nil && !r.Cycle.Backwards {
			ts, in := 0.0, 0.0
			sum := 0.0
			for _, l := range r.Cycle.Levels {
				if l.Step {
					ts += l.Control
				} else {
					in += l.Control
				}
			}
			close(t, "turnover control of transition states", ts, 1, 1e-12)
			close(t, "turnover control of intermediates", in, 1, 1e-12)
			// All spans together are the exact steady state.
			for _, l := range r.Cycle.Levels {
				sum += l.Control
				if l.Step && len(r.Cycle.Partners) == 0 {
					close(t, "X of "+l.Name, r.States[index(t, m, l.Name)].X, l.Control, 1e-9)
				}
			}
			if r.Cycle.Turns > r.Cycle.SpanTurns*(1+1e-9) {
				t.Errorf("%d: more turns than the span allows: %g > %g", i, r.Cycle.Turns, r.Cycle.SpanTurns)
			}
		}
	}
}

// Degrees and orders are the central differences of solutions of their own.
func TestDifferences(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 7))
	for i := range 25 {
		s := draw(rng)
		const T = 310
		m, p := s.problem(t, T)
		r := analyse(t, m, T, p)
		lnRate := func(m *kinetics.Mechanism, p control.Problem) float64 {
			n, err := m.At(T)
			if err != nil {
				t.Fatal(err)
			}
			_, v, err := control.Steady(context.Background(), n, p)
			if err != nil {
				t.Fatal(err)
			}
			return math.Log(v / r.Rate)
		}
		// Two central differences, the error of second order taken out.
		slope := func(f func(h float64) float64, h float64) float64 {
			one, two := (f(h)-f(-h))/(2*h), (f(2*h)-f(-2*h))/(4*h)
			return (4*one - two) / 3
		}
		for k, st := range r.States {
			got := slope(func(h float64) float64 {
				d := make([]float64, len(r.States))
				d[k] = -h * rate.R * T
				return lnRate(m.Shifted(d), p)
			}, 0.02)
			close(t, fmt.Sprint(i, ": X of ", st.Name), st.X, got, 1e-6)
			d := make([]float64, len(r.States))
			d[k] = kcal
			near(t, fmt.Sprint(i, ": factor of ", st.Name), st.Factor, math.Exp(lnRate(m.Shifted(d), p)), 1e-9)
		}
		for _, o := range r.Orders {
			got := slope(func(h float64) float64 {
				q := p
				q.Held, q.Total = append([]float64{}, p.Held...), append([]float64{}, p.Total...)
				q.Held[o.Species] *= math.Exp(h)
				q.Total[o.Species] *= math.Exp(h)
				return lnRate(m, q)
			}, 0.02)
			close(t, fmt.Sprint(i, ": order in ", m.Species[o.Species].Name), o.Order, got, 1e-6)
		}
	}
}

// Names, order and the zero of energy change nothing.
func TestInvariance(t *testing.T) {
	rng := rand.New(rand.NewPCG(8, 8))
	for i := range 40 {
		s := draw(rng)
		const T = 298.15
		m, p := s.problem(t, T)
		r := analyse(t, m, T, p)

		other := s
		other.species, other.steps = append([]level{}, s.species...), append([]way{}, s.steps...)
		rng.Shuffle(len(other.species), func(a, b int) { other.species[a], other.species[b] = other.species[b], other.species[a] })
		rng.Shuffle(len(other.steps), func(a, b int) { other.steps[a], other.steps[b] = other.steps[b], other.steps[a] })
		m2, p2 := other.problem(t, T)
		compare(t, fmt.Sprint(i, ", relabelled"), m, m2, r, analyse(t, m2, T, p2), 1e-9)

		// The catalyst has its own zero, as has S with P, L and I.
		d := make([]float64, len(r.States))
		carried := map[string]float64{}
		for k, sp := range m.Species {
			n := 1.0
			switch sp.Name {
			case "S", "P", "I", "L":
				n = 0
			case "dim":
				n = 2
			}
			carried[sp.Name] = n
			d[k] = n * 7.3 * kcal
		}
		for k, st := range m.Steps {
			for _, x := range st.From {
				d[len(m.Species)+k] += carried[m.Species[x.Species].Name] * float64(x.N) * 7.3 * kcal
			}
		}
		compare(t, fmt.Sprint(i, ", zero moved"), m, m, r, analyse(t, m.Shifted(d), T, p), 1e-9)
	}
}

func compare(t *testing.T, what string, m, m2 *kinetics.Mechanism, r, r2 *control.Result, tol float64) {
	t.Helper()
	near(t, what+": rate", r2.Rate, r.Rate, tol)
	near(t, what+": turnover", r2.Turnover, r.Turnover, tol)
	near(t, what+": resting share", r2.RestingShare, r.RestingShare, tol)
	for k, name := range m.States() {
		j := index(t, m2, name)
		close(t, what+": X of "+name, r2.States[j].X, r.States[k].X, tol)
		near(t, what+": factor of "+name, r2.States[j].Factor, r.States[k].Factor, tol)
		if k < len(m.Species) {
			near(t, what+": "+name, r2.C[j], r.C[k], tol)
		}
	}
	if (r.Cycle == nil) != (r2.Cycle == nil) {
		t.Errorf("%s: a cycle once, none the other time", what)
	} else if r.Cycle != nil && !r.Cycle.Backwards {
		near(t, what+": span", r2.Cycle.Span, r.Cycle.Span, tol)
	}
}

// Rates 60 orders of magnitude apart keep their digits: a fast equilibrium
// before a step so slow that its net rate is lost in the rounding of the fast
// one, with a dimer, so that no state reduction helps.
func TestFarApart(t *testing.T) {
	const T, S, total = 200.0, 0.3, 1e-3
	m := mechanism(t, T, []level{{"S", 0}, {"P", -4}, {"cat", 0}, {"int", 4}, {"dim", -9}},
		[]way{{"fast", "cat + S <=> int", 4.5}, {"slow", "int <=> cat + P", 60}, {"join", "2 cat <=> dim", 2}})
	p := point(t, m, "P", map[string]float64{"S": S, "P": 0.2}, map[string]float64{"cat": total})
	p.Catalyst = 2
	r := analyse(t, m, T, p)
	b := rate.R * T / kcal
	K := math.Exp(9 / b)
	a := 1 + S*math.Exp(-4/b)
	mono := 2 * total / (a + math.Sqrt(a*a+8*K*total))
	turn := -4 + b*math.Log(0.2/S)
	want := k(60, T) * mono * S * -math.Expm1(turn/b)
	near(t, "monomer", r.C[2], mono, 1e-12)
	near(t, "rate", r.Rate, want, 1e-11)
	near(t, "X of the slow step", r.States[6].X, 1, 1e-9)
	close(t, "X of the fast step", r.States[5].X, 0, 1e-12)
}

// Whatever is left out of a point, the answer is a result or a fault with a
// remedy.
func TestAnyPoint(t *testing.T) {
	rng := rand.New(rand.NewPCG(9, 9))
	faults := 0
	for range 300 {
		s := draw(rng)
		for _, part := range []map[string]float64{s.held, s.totals} {
			for _, name := range []string{"S", "P", "I", "L", "c0"} { // in order: maps have none
				if _, ok := part[name]; !ok {
					continue
				}
				switch rng.IntN(5) {
				case 0:
					delete(part, name)
				case 1:
					part[name] = 0
				}
			}
		}
		m, p := s.problem(t, 330)
		r, err := control.Analyse(context.Background(), m, 330, p)
		if err != nil {
			var pe *control.PointError
			if !errors.As(err, &pe) || pe.Msg == "" || pe.Fix == "" || pe.Of == nil {
				t.Errorf("%v\n%+v", err, s)
			}
			faults++
			continue
		}
		if math.IsNaN(r.Rate) || r.Rate == 0 {
			t.Errorf("rate %g\n%+v", r.Rate, s)
		}
	}
	if faults == 0 || faults == 300 {
		t.Errorf("%d faults: the points are all of one sort", faults)
	}
}
