package course

import (
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"saddlebook/kinetics"
	"saddlebook/kinetics/rate"
)

// The numbers of the worked example come from an independent solution quoted in
// the design of the project; they are not published.
func TestWorkedExample(t *testing.T) {
	c := simulate(t, addition(), coldRun())
	at := c.Report[1]
	if x := at.Conversion; math.Abs(x-0.72) > 0.005 {
		t.Errorf("conversion at 2 h is %.4f, want 0.72", x)
	}
	if r := at.C[2] / at.C[3]; math.Abs(r-21.7) > 0.05 {
		t.Errorf("A:B at 2 h is %.3f, want 21.7", r)
	}
	if k := c.Pairs[0].EvenKelvin - zero; math.Abs(k+2) > 0.5 {
		t.Errorf("A:B passes 1 at %.2f °C, want near -2", k)
	}
	end := last(c)
	if r := end.C[3] / end.C[2]; r < 1000 || r > 10000 {
		t.Errorf("B:A at the end is %.1f, want thousands", r)
	}
	if h := c.Pairs[0].Changeover; !(h > 7200 && h < 18000) {
		t.Errorf("changeover at %g s, want one in the ramp", h)
	}
	if !(at.Control[0] < 0.01) || !(end.Control[0] > 0.999) {
		t.Errorf("control is %g at 2 h and %g at the end, want 0 and 1", at.Control[0], end.Control[0])
	}
	for _, want := range []float64{7200, 18000, c.Pairs[0].Changeover, c.Pairs[0].Even} {
		if !slices.ContainsFunc(c.Trace, func(p Point) bool { return p.T == want }) {
			t.Errorf("the points for drawing lack %g s", want)
		}
	}
	if c.Balance > 1e-12 || c.Lowest < -1e-16 {
		t.Errorf("balance %g, lowest %g", c.Balance, c.Lowest)
	}
}

// The tolerance is kept: against a hundred thousand times tighter integration.
func TestTolerance(t *testing.T) {
	r := coldRun()
	c := simulate(t, addition(), r)
	r.RTol = 1e-13
	fine := simulate(t, addition(), r)
	for i := range c.Report {
		for s := range c.Report[i].C {
			near(t, "concentration", c.Report[i].C[s], fine.Report[i].C[s], 1e-9)
		}
	}
	near(t, "changeover", c.Pairs[0].Changeover, fine.Pairs[0].Changeover, 1e-10)
	near(t, "even", c.Pairs[0].Even, fine.Pairs[0].Even, 1e-10)
}

// At the crossings, the measured state is what they say.
func TestCrossings(t *testing.T) {
	r := coldRun()
	c := simulate(t, addition(), r)
	r.Report = []float64{c.Pairs[0].Changeover, c.Pairs[0].Even}
	slices.Sort(r.Report)
	c = simulate(t, addition(), r)
	for _, p := range c.Report[:2] {
		if p.T == c.Pairs[0].Even {
			near(t, "A:B", p.C[2]/p.C[3], 1, 1e-10)
		} else {
			near(t, "control", p.Control[0], 0.5, 1e-9)
		}
	}
}

// The shape of what a run says does not depend on how species and steps are
// numbered, nor on the zero of energy.
func TestRelabelled(t *testing.T) {
	m, r := addition(), coldRun()
	c := simulate(t, m, r)
	order := []int{3, 1, 0, 2} // new to old
	place := []int{2, 1, 3, 0}
	n := *m
	n.Species, n.Steps = nil, nil
	for _, old := range order {
		s := m.Species[old]
		// R and A, B gain as much as X loses in enthalpy: another zero.
		e := *s.Energy.Heat
		switch s.Name {
		case "R":
			e.H += 50e3
		case "X":
			e.H -= 20e3
		default:
			e.H += 30e3
		}
		s.Energy.Heat = &e
		n.Species = append(n.Species, s)
	}
	for _, i := range []int{1, 0} {
		s := m.Steps[i]
		h := *s.Energy.Heat
		h.H += 30e3
		s.Energy.Heat = &h
		from, to := slices.Clone(s.From), slices.Clone(s.To)
		for _, side := range [][]kinetics.Term{from, to} {
			for k := range side {
				side[k].Species = place[side[k].Species]
			}
		}
		s.From, s.To = from, to
		n.Steps = append(n.Steps, s)
	}
	q := r
	q.Charge = []float64{0, 0.22, 0.2, 0}
	q.Basis = 2
	q.Products = []Product{{"A", []int{3}}, {"B", []int{0}}}
	d := simulate(t, &n, q)
	for i := range c.Report {
		for s := range 4 {
			near(t, "concentration of "+m.Species[s].Name, d.Report[i].C[place[s]], c.Report[i].C[s], 1e-9)
		}
		near(t, "conversion", d.Report[i].Conversion, c.Report[i].Conversion, 1e-9)
	}
	near(t, "changeover", d.Pairs[0].Changeover, c.Pairs[0].Changeover, 1e-9)
	near(t, "even", d.Pairs[0].Even, c.Pairs[0].Even, 1e-9)
}

// Time courses tend to the equilibrium that Network.Equilibrium finds, and keep
// mass on the way.
func TestTendsToEquilibrium(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 1))
	for trial := range 30 {
		n := 3 + r.IntN(4)
		m := random(r, n, n+r.IntN(3), 0)
		run := Run{Charge: make([]float64, n), Programme: []Leg{{To: room, Lasts: 1e14}}, Basis: -1, Products: []Product{{"C", []int{2}}, {"AB", []int{0, 1}}}}
		for i := range n {
			run.Charge[i] = r.Float64()
		}
		c := simulate(t, m, run)
		net, err := m.At(room)
		if err != nil {
			t.Fatal(err)
		}
		want, err := net.Equilibrium(run.Charge)
		if err != nil {
			t.Fatal(err)
		}
		for s := range n {
			if got := last(c).C[s]; math.Abs(got-want.C[s]) > 1e-8*want.C[s] {
				t.Errorf("trial %d: %s ends at %.12g, equilibrium %.12g (%s)", trial, m.Species[s].Name, got, want.C[s], c.Method)
			}
		}
		if c.Balance > 1e-12 {
			t.Errorf("trial %d: balance %.1e", trial, c.Balance)
		}
	}
}

// At short times the course is that of the kinetic limit, and at long times its
// shares are those of the absorbing chain (Network.KineticLimit).
func TestKineticLimit(t *testing.T) {
	w := newNetwork(5) // A is R; B and C exchange; D and E are the products
	w.exchange(1, 0.1, side(0), side(1))
	w.exchange(0.5, 0.2, side(1), side(2))
	w.exchange(0.02, 1e-6, side(1), side(3))
	w.exchange(0.3, 1e-4, side(2), side(4))
	run := Run{Charge: []float64{1, 0, 0, 0, 0}, Programme: hold(1e5), Products: []Product{{"D", []int{3}}, {"E", []int{4}}}, Report: []float64{1e-3, 1e4}}
	net, err := w.m.At(room)
	if err != nil {
		t.Fatal(err)
	}
	want, err := net.KineticLimit(kinetics.Limit{From: 0, Products: []int{3, 4}})
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []*Course{simulate(t, w.m, run), integrate(t, w.m, run)} {
		early := c.Report[0]
		near(t, "short times: x", early.Shares[0], early.Kinetic[0], 1e-6)
		if !(math.Abs(early.Control[0]) < 1e-6) {
			t.Errorf("control at short times is %g, want 0", early.Control[0])
		}
		near(t, "kinetic limit after all has reacted", last(c).Kinetic[0], want.Shares[0], 1e-9)
		ratio, _ := net.EquilibriumRatio(3, 4)
		near(t, "equilibrium", last(c).Rest[0], ratio/(1+ratio), 1e-12)
	}
}

// Exact and integrated courses agree, crossings and ends included.
func TestExactAgainstIntegrated(t *testing.T) {
	w := newNetwork(4)
	w.exchange(1e3, 1e2, side(0), side(1))
	w.exchange(0.03, 1e-3, side(1), side(2))
	w.exchange(0.002, 1e-8, side(1), side(3))
	run := Run{Charge: []float64{1, 0, 0, 0}, Programme: hold(1e6), Products: []Product{{"C", []int{2}}, {"D", []int{3}}}, Report: []float64{1e-3, 10, 1e3, 1e4},
		Doses:    []Dose{{Species: 0, Amount: 0.3, From: 500}, {Species: 1, Amount: 0.5, From: 600, Lasts: 300}},
		Removals: []Removal{{Species: 2, From: 100, To: 4000, K: 1e-5}, {Species: 3, From: 5000, Leaves: 0.5}},
		Until:    []Until{{Of: Amount, Index: 3, Value: 1.1}}}
	a, b := simulate(t, w.m, run), integrate(t, w.m, run)
	if a.Method == b.Method {
		t.Errorf("both were computed one way: %s", a.Method)
	}
	if a.Ended != 0 || b.Ended != 0 {
		t.Fatalf("ended by %d and %d, want 0", a.Ended, b.Ended)
	}
	near(t, "end", b.End, a.End, 1e-9)
	near(t, "amount at the end", last(a).C[3], 1.1, 1e-13)
	near(t, "changeover", b.Pairs[0].Changeover, a.Pairs[0].Changeover, 1e-9)
	near(t, "even", b.Pairs[0].Even, a.Pairs[0].Even, 1e-9)
	for i := range a.Report {
		for s := range 4 {
			near(t, "concentration", b.Report[i].C[s], a.Report[i].C[s], 1e-8)
			if d := math.Abs(b.Report[i].Making[s] - a.Report[i].Making[s]); d > 1e-6*(math.Abs(a.Report[i].Making[s])+math.Abs(a.Report[i].Making[2])) {
				t.Errorf("at %g s, %s is made at %g and %g mol/L/s", a.Report[i].T, w.m.Species[s].Name, a.Report[i].Making[s], b.Report[i].Making[s])
			}
		}
	}
	if a.Balance > 1e-12 || b.Balance > 1e-12 {
		t.Errorf("balance %g and %g", a.Balance, b.Balance)
	}
}

// A ramp against quadrature: A → B without return, dT/dt = β, so that
// ln(A/A0) = −∫ k dT/β. The integral is by Simpson's rule on 20000 parts.
func TestRampAgainstQuadrature(t *testing.T) {
	m := addition()
	m.Species = m.Species[:3]
	m.Steps = []kinetics.Step{{Name: "TS", From: side(0), To: side(2), Energy: m.Steps[0].Energy}}
	m.Steps[0].Energy.Heat.H = 21 * kcal
	m.Steps[0].Energy.Heat.S = -5 * cal
	const from, to, lasts = 250.0, 310.0, 36000.0
	r := Run{Charge: []float64{0.5, 0, 0}, Basis: 0, Programme: []Leg{{To: from, Lasts: 1e-3}, {Ramp: true, To: to, Lasts: lasts}}}
	k := func(T float64) float64 {
		v, err := rate.Eyring(21*kcal+5*cal*T, T)
		if err != nil {
			t.Fatal(err)
		}
		return v
	}
	const parts = 20000
	h := (to - from) / parts
	sum := k(from) + k(to)
	for i := 1; i < parts; i++ {
		sum += float64(2+2*(i%2)) * k(from+h*float64(i))
	}
	want := 0.5 * math.Exp(-sum*h/3*lasts/(to-from)-k(from)*1e-3)
	near(t, "what is left after the ramp", last(simulate(t, m, r)).C[0], want, 1e-9)
}

// A plan used again for other energies gives what a new run gives.
func TestPlanAgain(t *testing.T) {
	r := coldRun()
	r.RTol = 1e-6
	p, err := Prepare(addition(), r)
	if err != nil {
		t.Fatal(err)
	}
	rnd := rand.New(rand.NewPCG(1, 2))
	for range 5 {
		d := make([]float64, 6)
		for i := range d {
			d[i] = 2000 * rnd.NormFloat64()
		}
		m := addition().Shifted(d)
		got, err := p.Simulate(context.Background(), m)
		if err != nil {
			t.Fatal(err)
		}
		want := simulate(t, m, r)
		if !slices.Equal(last(got).C, last(want).C) || got.Pairs[0].Even != want.Pairs[0].Even && !math.IsNaN(want.Pairs[0].Even) {
			t.Errorf("a plan used again gives %v, a new one %v", last(got).C, last(want).C)
		}
	}
}

func TestContext(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := Simulate(ctx, addition(), coldRun()); !errors.Is(err, context.Canceled) {
		t.Errorf("error %v, want that of the context", err)
	}
}
