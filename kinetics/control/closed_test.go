package control_test

import (
	"context"
	"errors"
	"math"
	"testing"

	"saddlebook/kinetics"
	"saddlebook/kinetics/control"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/thermo"
)

// A <=> I -> P with A held: k = k1 k2/(km1 + k2) in the steady state (any
// textbook of kinetics); X(TS1) = k2/(km1 + k2), X(TS2) = km1/(km1 + k2).
func TestPlainSequence(t *testing.T) {
	const T = 298.15
	for _, c := range []struct{ i, ts1, ts2 float64 }{{5, 18, 17.5}, {8, 20, 12}, {2, 10, 25}, {9.9, 10, 40}} {
		m := mechanism(t, T, []level{{"A", 0}, {"I", c.i}, {"P", -5}}, []way{{"TS1", "A <=> I", c.ts1}, {"TS2", "I -> P", c.ts2}})
		p := point(t, m, "P", map[string]float64{"A": 0.3, "P": 0}, nil)
		r := analyse(t, m, T, p)
		k1, km1, k2 := k(c.ts1, T), k(c.ts1-c.i, T), k(c.ts2-c.i, T)
		near(t, "rate", r.Rate, 0.3*k1*k2/(km1+k2), 1e-11)
		near(t, "I", r.C[1], 0.3*k1/(km1+k2), 1e-11)
		close(t, "X of TS1", r.States[3].X, k2/(km1+k2), 1e-12)
		close(t, "X of TS2", r.States[4].X, km1/(km1+k2), 1e-12)
		close(t, "X of I", r.States[1].X, 0, 1e-9)
		close(t, "X of A", r.States[0].X, -1, 1e-9)
		close(t, "order in A", order(t, m, r, "A"), 1, 1e-12)
		if o := order(t, m, r, "P"); !math.IsNaN(o) {
			t.Errorf("an order of %g in what is held at 0", o)
		}
		// One kcal/mol more on TS2, in closed form.
		f := math.Exp(-kcal / (rate.R * T))
		near(t, "factor of TS2", r.States[4].Factor, (km1+k2)*f/(km1+k2*f), 1e-11)
		near(t, "factor of TS1", r.States[3].Factor, f*(km1+k2)/(f*km1+k2), 1e-11)
		if r.Resting != -1 || !math.IsNaN(r.Turnover) || r.Cycle != nil {
			t.Error("a sequence without a total has a resting state or a turnover")
		}
	}
}

// Michaelis and Menten with a return: r = kcat E S/(KM + S), KM = (km1 + kcat)/k1
// (Briggs and Haldane 1925, from memory).
func TestMichaelisMenten(t *testing.T) {
	const T, S, E = 310.15, 2e-3, 1e-6
	m := mechanism(t, T, []level{{"S", 0}, {"P", -8}, {"E", 0}, {"ES", -4}}, []way{{"bind", "E + S <=> ES", 9}, {"turn", "ES -> E + P", 11}})
	p := point(t, m, "P", map[string]float64{"S": S, "P": 0}, map[string]float64{"E": E})
	p.Catalyst = 2
	r := analyse(t, m, T, p)
	k1, km1, kcat := k(9, T), k(13, T), k(15, T)
	KM := (km1 + kcat) / k1
	near(t, "rate", r.Rate, kcat*E*S/(KM+S), 1e-11)
	near(t, "turnover", r.Turnover, kcat*S/(KM+S), 1e-11)
	close(t, "order in S", order(t, m, r, "S"), KM/(KM+S), 1e-11)
	close(t, "order in E", order(t, m, r, "E"), 1, 1e-11)
	name, share := 2, KM/(KM+S)
	if share < 0.5 {
		name, share = 3, 1-share
	}
	if r.Resting != name {
		t.Errorf("resting state %d", r.Resting)
	}
	near(t, "its share", r.RestingShare, share, 1e-11)
}

// A catalyst that rests as an inactive dimer: c = (√(1 + 8 K t) − 1)/(4 K) of the
// monomer, order (1 + 1/√(1 + 8 K t))/2, one half where the dimer dominates.
func TestDimerHalfOrder(t *testing.T) {
	const T, S = 298.15, 0.4
	for _, c := range []struct{ dimer, total float64 }{{-12, 1e-2}, {-5, 1e-3}, {-3, 1e-2}, {4, 1e-3}, {-25, 1e-1}} {
		m := mechanism(t, T, []level{{"S", 0}, {"P", -10}, {"cat", 0}, {"dim", c.dimer}},
			[]way{{"join", "2 cat <=> dim", math.Max(c.dimer, 0) + 8}, {"turn", "cat + S -> cat + P", 18}})
		p := point(t, m, "P", map[string]float64{"S": S, "P": 0}, map[string]float64{"cat": c.total})
		p.Catalyst = 2
		r := analyse(t, m, T, p)
		K := math.Exp(-c.dimer * kcal / (rate.R * T))
		root := math.Sqrt(1 + 8*K*c.total)
		mono := 2 * c.total / (1 + root)
		near(t, "monomer", r.C[2], mono, 1e-11)
		near(t, "dimer", r.C[3], K*mono*mono, 1e-11)
		near(t, "rate", r.Rate, k(18, T)*mono*S, 1e-11)
		near(t, "order in the catalyst", order(t, m, r, "cat"), (1+1/root)/2, 1e-11)
		near(t, "X of the dimer", r.States[3].X, -(1-1/root)/2, 1e-8)
		f := math.Exp(-kcal / (rate.R * T))
		up := math.Sqrt(1 + 8*K*f*c.total)
		near(t, "factor of the dimer", r.States[3].Factor, (1+root)/(1+up), 1e-11)
		if r.Cycle != nil || r.NoCycle != "two catalyst molecules meet in join" {
			t.Errorf("a cycle of a dimer, or %q", r.NoCycle)
		}
		if c.dimer == -12 && (r.Resting != 3 || r.RestingShare < 0.99) {
			t.Errorf("resting state %d, %g", r.Resting, r.RestingShare)
		}
	}
}

// Inhibition by an off-cycle state: of order −K I/(1 + K I) in the inhibitor;
// one equivalent more binds where it is a dimer of inhibitor: −2 K I²/(1 + K I²).
func TestInhibitionOrders(t *testing.T) {
	const T, I = 298.15, 0.05
	for _, c := range []struct {
		reaction string
		n, g     float64
	}{{"cat + I <=> off", 1, -2}, {"cat + 2 I <=> off", 2, -4}, {"cat + I <=> off", 1, -9}} {
		m := mechanism(t, T, []level{{"S", 0}, {"P", -10}, {"I", 0}, {"cat", 0}, {"off", c.g}},
			[]way{{"trap", c.reaction, 8}, {"turn", "cat + S <=> cat + P", 18}})
		p := point(t, m, "P", map[string]float64{"S": 1, "P": 0.2, "I": I}, map[string]float64{"cat": 1e-3})
		p.Catalyst = 3
		r := analyse(t, m, T, p)
		x := math.Exp(-c.g*kcal/(rate.R*T)) * math.Pow(I, c.n)
		near(t, "order in I", order(t, m, r, "I"), -c.n*x/(1+x), 1e-11)
		Q := 0.2 * math.Exp(-10*kcal/(rate.R*T))
		near(t, "order in S", order(t, m, r, "S"), 1/(1-Q), 1e-11)
		near(t, "order in P", order(t, m, r, "P"), -Q/(1-Q), 1e-9)
		if r.Cycle == nil {
			t.Fatal(r.NoCycle)
		}
		near(t, "turns", r.Cycle.Turns, k(18, T)*(1-Q)/(1+x), 1e-11)
	}
}

// A composition as it stands: nothing is free, and only what makes P counts.
func TestAsItStands(t *testing.T) {
	const T = 298.15
	m := mechanism(t, T, []level{{"A", 0}, {"I", 5}, {"P", -5}}, []way{{"TS1", "A <=> I", 18}, {"TS2", "I <=> P", 17}})
	p := point(t, m, "P", map[string]float64{"A": 0.3, "I": 1e-5, "P": 0.1}, nil)
	r := analyse(t, m, T, p)
	f, b := 1e-5*k(12, T), 0.1*k(22, T)
	near(t, "rate", r.Rate, f-b, 1e-11)
	close(t, "X of TS1", r.States[3].X, 0, 1e-9)
	close(t, "X of TS2", r.States[4].X, 1, 1e-9)
	near(t, "order in I", order(t, m, r, "I"), f/(f-b), 1e-11)
	near(t, "order in P", order(t, m, r, "P"), -b/(f-b), 1e-9)
	near(t, "X of I", r.States[1].X, -f/(f-b), 1e-9)
}

// The ratio of two products answers to the difference of their transition
// states only: exp(−1 kcal/RT) for each kcal/mol.
func TestPair(t *testing.T) {
	const T = 273.15
	m := mechanism(t, T, []level{{"S", 0}, {"A", -9}, {"B", -8}, {"cat", 0}, {"c1", -3}},
		[]way{{"in", "cat + S <=> c1", 12}, {"TSa", "c1 -> cat + A", 14}, {"TSb", "c1 -> cat + B", 15}})
	p := point(t, m, "A", map[string]float64{"S": 0.4, "A": 0, "B": 0}, map[string]float64{"cat": 0.01})
	p.Catalyst = 3
	p.RateOf = []kinetics.Term{{Species: 1, N: 1}, {Species: 2, N: 1}}
	p.Pair = [2][]kinetics.Term{{{Species: 1, N: 1}}, {{Species: 2, N: 1}}}
	r := analyse(t, m, T, p)
	f := math.Exp(-kcal / (rate.R * T))
	near(t, "ratio", r.Ratio, 1/f, 1e-11)
	a, b, in := r.States[6], r.States[7], r.States[5]
	near(t, "ratio X of TSa", a.RatioX, 1, 1e-9)
	near(t, "ratio X of TSb", b.RatioX, -1, 1e-9)
	close(t, "ratio X of in", in.RatioX, 0, 1e-9)
	near(t, "ratio factor of TSa", a.RatioFactor, f, 1e-11)
	near(t, "ratio factor of TSb", b.RatioFactor, 1/f, 1e-11)
	near(t, "ratio factor of in", in.RatioFactor, 1, 1e-11)
	near(t, "sum of X", a.X+b.X+in.X, 1, 1e-9)
	if r.Cycle != nil || r.NoCycle != "the cycle is branched" {
		t.Errorf("%+v %q", r.Cycle, r.NoCycle)
	}
}

// Apparent activation energies from H and S: ΔH‡ + RT of one step; of a
// pre-equilibrium, that of the second step above the reactants (textbook).
func TestActivationEnergy(t *testing.T) {
	const T = 320.0
	state := func(h, s float64) thermo.Energy { return thermo.Following(h*kcal, s*rate.Calorie) }
	m := mechanism(t, 298.15, []level{{"A", 0}, {"I", 0}, {"P", 0}}, []way{{"TS1", "A <=> I", 0}, {"TS2", "I -> P", 0}})
	m.Species[0].Energy = state(0, 0)
	m.Species[1].Energy = state(3, 5)
	m.Species[2].Energy = state(-10, 0)
	m.Steps[0].Energy = state(9, -5)
	m.Steps[1].Energy = state(18, -2)
	p := point(t, m, "P", map[string]float64{"A": 0.1, "P": 0}, nil)
	r := analyse(t, m, T, p)
	// X(TS1) = km1/... : the weights of the two transition states.
	want := 0.0
	for i, h := range []float64{9, 18} {
		want += r.States[3+i].X * (h*kcal + rate.R*T)
	}
	near(t, "Ea", r.ActivationEnergy, want, 1e-9)
	near(t, "Ea of a pre-equilibrium", r.ActivationEnergy, 18*kcal+rate.R*T, 1e-4)

	// A constant G has no enthalpy to give, but only where it decides.
	held := *m
	held.Species = append([]kinetics.Species{}, m.Species...)
	held.Steps = append([]kinetics.Step{}, m.Steps...)
	for i := range held.Species {
		held.Species[i].Energy = thermo.Constant(m.Species[i].Energy.At(298.15))
	}
	for i := range held.Steps {
		held.Steps[i].Energy = thermo.Constant(m.Steps[i].Energy.At(298.15))
	}
	r = analyse(t, &held, 298.15, p)
	if !math.IsNaN(r.ActivationEnergy) || r.NoActivationEnergy != "the barrier of TS2 is held constant over temperature; give H and S, or an Ea" {
		t.Errorf("Ea %g, %q", r.ActivationEnergy, r.NoActivationEnergy)
	}
}

func TestRefusals(t *testing.T) {
	const T = 298.15
	species := []level{{"S", 0}, {"P", -10}, {"W", 0}, {"cat", 0}, {"int", -2}, {"dead", -20}}
	steps := []way{{"TS1", "cat + S <=> int", 12}, {"TS2", "int <=> cat + P + W", 15}}
	kill := append(append([]way{}, steps...), way{"die", "int -> dead", 20})
	for _, c := range []struct {
		name         string
		steps        []way
		held, totals map[string]float64
		of           error
		says         string
	}{
		{"no total", steps, map[string]float64{"S": 1, "P": 0, "W": 0, "dead": 0}, nil, control.ErrNotStated,
			"cat cannot form from what is stated; state the concentration, or the total where it is a catalyst; 0 M if there is none"},
		{"product not held", steps, map[string]float64{"S": 1, "W": 0, "dead": 0}, map[string]float64{"cat": 1}, control.ErrNotStated,
			"P is to be formed, so it cannot be at its own steady state; state its concentration, 0 M for an initial rate"},
		{"reagent not held", steps, map[string]float64{"P": 0.1, "W": 0.1, "dead": 0}, map[string]float64{"cat": 1}, control.ErrNotStated,
			"P comes to a standstill: nothing replaces, or nothing takes away, S; state the concentration of S"},
		{"by-product not held", steps, map[string]float64{"S": 1, "P": 0.1, "dead": 0}, map[string]float64{"cat": 1}, control.ErrNotStated,
			"P comes to a standstill: nothing replaces, or nothing takes away, W; state the concentration of W"},
		{"drain", kill, map[string]float64{"S": 1, "P": 0, "W": 0}, map[string]float64{"cat": 1}, control.ErrNoSteadyState,
			"there is no steady state: die has no return and nothing brings back what it uses up (int and dead); state the concentrations of its products, leave the step out, or take the composition of a run"},
		{"standstill", steps, map[string]float64{"S": 0, "P": 0, "W": 0, "dead": 0}, map[string]float64{"cat": 1, "int": 0}, control.ErrNoRate,
			"no step that runs at this composition makes P; check the concentrations, or ask for another product"},
		{"negative", steps, map[string]float64{"S": -1, "P": 0, "W": 0, "dead": 0}, map[string]float64{"cat": 1}, control.ErrNotStated,
			"-1 mol/L of S makes no sense; state 0 or more"},
		{"twice", steps, map[string]float64{"S": 1, "P": 0, "W": 0, "dead": 0, "cat": 1}, map[string]float64{"cat": 1}, control.ErrNotStated,
			"cat has a concentration that is held and a total; state one of the two"},
		{"total that is not kept", steps, map[string]float64{"S": 1, "P": 0, "W": 0, "dead": 0, "int": 1e-3}, map[string]float64{"cat": 1}, control.ErrNotStated,
			"the total of cat is not kept: it exchanges with int, which is held; leave out the concentration of int, which then is at steady state"},
		{"total that drains away", kill, map[string]float64{"S": 1, "P": 0, "W": 0, "dead": 0}, map[string]float64{"cat": 1}, control.ErrNotStated,
			"the total of cat is not kept: it exchanges with dead, which is held; leave out the concentration of dead, which then is at steady state"},
		{"no catalyst at all", steps, map[string]float64{"S": 1, "P": 0, "W": 0, "dead": 0}, map[string]float64{"cat": 0}, control.ErrNotStated,
			"the total of cat is 0, and turnover is counted by it; state a total above 0"},
	} {
		t.Run(c.name, func(t *testing.T) {
			m := mechanism(t, T, species, c.steps)
			p := point(t, m, "P", c.held, c.totals)
			p.Catalyst = 3
			_, err := control.Analyse(context.Background(), m, T, p)
			if !errors.Is(err, c.of) || err.Error() != c.says {
				t.Errorf("error %v", err)
			}
		})
	}
	m := mechanism(t, T, species, steps)
	p := point(t, m, "P", map[string]float64{"S": 1, "P": 0, "W": 0, "dead": 0}, map[string]float64{"cat": 1})
	p.RateOf = nil
	if _, err := control.Analyse(context.Background(), m, T, p); !errors.Is(err, control.ErrNoRate) {
		t.Errorf("no product: %v", err)
	}
	ctx, stop := context.WithCancel(context.Background())
	stop()
	m = mechanism(t, T, []level{{"S", 0}, {"P", -10}, {"cat", 0}, {"dim", -3}}, []way{{"join", "2 cat <=> dim", 8}, {"turn", "cat + S -> cat + P", 18}})
	p = point(t, m, "P", map[string]float64{"S": 1, "P": 0}, map[string]float64{"cat": 1})
	if _, err := control.Analyse(ctx, m, T, p); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: %v", err)
	}
}

// A catalyst and a ligand in equal totals that bind so tightly that what is
// left free is 1e-10 of them: M = L = √(t/K), for which the laws are solved for
// the complex and not as a difference.
func TestTightBinding(t *testing.T) {
	const T, total = 298.15, 1e-3
	for _, g := range []float64{-10, -20, -33} {
		m := mechanism(t, T, []level{{"S", 0}, {"P", -10}, {"M", 0}, {"L", 0}, {"ML", g}},
			[]way{{"bind", "M + L <=> ML", 3}, {"turn", "M + S -> M + P", 16}})
		p := point(t, m, "P", map[string]float64{"S": 1, "P": 0}, map[string]float64{"M": total, "L": total})
		p.Catalyst = 2
		r := analyse(t, m, T, p)
		K := math.Exp(-g * kcal / (rate.R * T))
		M := 2 * total / (1 + math.Sqrt(1+4*K*total))
		near(t, "M", r.C[2], M, 1e-11)
		near(t, "L", r.C[3], M, 1e-11)
		// dM/dt = 1/(1 + K L − K M · K L/(1 + K M)), by hand.
		near(t, "order in M", order(t, m, r, "M"), total/M*(1+K*M)/(1+2*K*M), 1e-9)
		near(t, "order in L", order(t, m, r, "L"), -total/M*K*M/(1+2*K*M), 1e-9)
		if r.Cycle == nil || len(r.Cycle.Partners) != 1 || r.Cycle.Partners[0] != 3 {
			t.Errorf("cycle %+v %q", r.Cycle, r.NoCycle)
		}
	}
}

// Rates that are stated and have no energies: the degree of rate control of a
// step is that of its rate constants.
func TestStatedRates(t *testing.T) {
	const T = 298.15
	m := mechanism(t, T, []level{{"A", 0}, {"I", 0}, {"P", 0}}, []way{{"in", "A <=> I", 0}, {"out", "I -> P", 0}})
	for i := range m.Species {
		m.Species[i].Unknown = true
	}
	const k1, km1, k2 = 1, 100, 10 // k_ss = 1/11
	m.Steps[0].Law = &kinetics.Law{Kind: kinetics.Measured, Forward: &kinetics.Constant{K: k1, At: T}, Back: &kinetics.Constant{K: km1, At: T}}
	m.Steps[1].Law = &kinetics.Law{Kind: kinetics.Measured, Forward: &kinetics.Constant{K: k2, At: T}}
	p := point(t, m, "P", map[string]float64{"A": 1, "P": 0}, nil)
	r := analyse(t, m, T, p)
	near(t, "k of the steady state", r.Rate, 0.09090909090909091, 1e-12)
	near(t, "X of in", r.States[3].X, 1/11., 1e-10)
	near(t, "X of out", r.States[4].X, 10/11., 1e-10)
}

// The totals of a composition: that of the catalyst counts all its states.
func TestTotals(t *testing.T) {
	m := mechanism(t, 298.15, []level{{"S", 0}, {"P", -10}, {"cat", 0}, {"int", -2}, {"dim", -5}, {"L", 0}, {"pre", -3}},
		[]way{{"a", "cat + S <=> int", 12}, {"b", "int <=> cat + P", 15}, {"c", "2 cat <=> dim", 8}, {"d", "cat + L <=> pre", 9}})
	n, err := m.At(298.15)
	if err != nil {
		t.Fatal(err)
	}
	free := math.NaN()
	c := []float64{1, 1, 1e-3, 2e-3, 5e-4, 7e-3, 4e-4}
	got, err := control.Totals(n, []float64{1, 1, free, free, free, free, free}, c, 2)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "catalyst", got[2], 1e-3+2e-3+2*5e-4+4e-4, 1e-14)
	sum := 0.0
	for i, x := range got {
		if i != 2 && !math.IsNaN(x) {
			sum += x
		}
	}
	near(t, "ligand", sum, 7e-3+4e-4, 1e-14)
	if _, err = control.Totals(n, []float64{1, 1, free, 2e-3, free, free, free}, c, 2); !errors.Is(err, control.ErrNotStated) {
		t.Errorf("a state of the catalyst is held: %v", err)
	}
}
