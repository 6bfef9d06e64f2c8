package kinetics

import (
	"errors"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/thermo"
)

// square is a cycle A, B, C, D and back to A of measured constants whose last
// misses closure by the factor.
func square(t testing.TB, factor float64) *Mechanism {
	m := measured(t, "A B C D", "S1: A <=> B", "S2: B <=> C", "S3: C <=> D", "S4: D <=> A")
	for i, K := range []float64{2, 3, 5, factor / 30} {
		m.Steps[i].Law = law(k(K), k(1))
	}
	return m
}

func TestCycle(t *testing.T) {
	for _, tt := range []struct {
		name   string
		factor float64
		fatal  bool
		want   string // "": no complaint
	}{
		{"closed", 1, false, ""},
		{"rounded", 1.04, false, "k-back of step S4 misses what follows from the other steps of the cycle S1, S2, S3 and S4 by 4 % at 25 °C: it is taken from those"},
		{"broken", 1.06, true, "the constants around the cycle of S1, S2, S3 and S4 break detailed balance by 0.035 kcal/mol (0.1 kJ/mol) at 25 °C, a factor of 1.06 in K"},
		{"broken by ten", 0.1, true, "1.4 kcal/mol (5.7 kJ/mol) at 25 °C, a factor of 10 in K"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			m := square(t, tt.factor)
			cs := m.Check()
			if tt.want == "" {
				if len(cs) > 0 {
					t.Fatalf("complaints %+v", cs)
				}
				return
			}
			if len(cs) != 1 || cs[0].State != "S4" || cs[0].Key != "k-back" || cs[0].Fatal != tt.fatal || !strings.Contains(cs[0].Msg, tt.want) || cs[0].Fix == "" {
				t.Fatalf("complaints %+v; want %q", cs, tt.want)
			}
			if tt.fatal {
				return
			}
			n := at(t, m, 298.15)
			product := 1.0
			for _, r := range n.Reactions {
				near(t, "K of "+r.Name, r.K, r.Forward/r.Back, 1e-12)
				product *= r.K
			}
			near(t, "K around the cycle", product, 1, 1e-9)
			near(t, "k forward of the last", n.Reactions[3].Forward, tt.factor/30, 1e-12)
		})
	}
}

// Constants that contradict the energies of their species.
func TestConstantsAgainstEnergies(t *testing.T) {
	const T = 298.15
	m := build(t, T, []state{{"A", 0}, {"B", -2}, {"C", -3}}, []state{{"S: A <=> B", 0}, {"Q: B <=> C", 0}})
	K := math.Exp(2 * kcal / (rate.R * T))
	m.Steps[1].Law = law(k(1), nil)
	for _, tt := range []struct {
		name  string
		K     float64
		fatal bool
		want  string
	}{
		{"agree", K, false, ""},
		{"rounded", K * 1.01, false, "K of step S misses what follows from the free energies of A and B by 1 %"},
		{"contradict", K * 2, true, "the constants of step S contradict the free energies of A and B by 0.4 kcal/mol (1.7 kJ/mol) at 25 °C, a factor of 2 in K"},
	} {
		m.Steps[0].Law, m.Steps[0].K = law(k(1), nil), &StatedK{K: tt.K, At: T}
		cs := m.Check()
		switch {
		case tt.want == "" && len(cs) == 0:
		case len(cs) == 1 && cs[0].Fatal == tt.fatal && cs[0].Key == "K" && strings.Contains(cs[0].Msg, tt.want):
		default:
			t.Errorf("%s: complaints %+v; want %q", tt.name, cs, tt.want)
		}
	}
	// Two steps around a species without an energy.
	m.Species[1].Unknown = true
	m.Steps[0].K, m.Steps[1].K = &StatedK{K: 3, At: T}, &StatedK{K: 100, At: T}
	cs := m.Check()
	if len(cs) != 1 || !cs[0].Fatal || !strings.Contains(cs[0].Msg, "the constants of steps S and Q contradict the free energies of A and C") {
		t.Errorf("complaints %+v", cs)
	}
	m.Steps[1].K = nil
	n := at(t, m, T)
	near(t, "G of B", n.G[1], -rate.R*T*math.Log(3), 1e-12)
	if !n.Known[1] {
		t.Error("B follows from A and K, and is not known")
	}
	near(t, "K of Q", n.Reactions[1].K, math.Exp(3*kcal/(rate.R*T))/3, 1e-12)
}

// Species that no energy pins stand where the first named are 0; what is joined
// by a step without return has no common zero.
func TestFreeSpecies(t *testing.T) {
	const T = 298.15
	m := measured(t, "R X A B C", "S1: R + X <=> A", "S2: A -> B", "S3: B <=> C")
	m.Steps[0].Law = law(k(2), k(1e-3))
	m.Steps[1].Law = law(k(1e-4), nil)
	m.Steps[2].Law, m.Steps[2].K = law(k(1), nil), &StatedK{K: 4, At: T}
	n := at(t, m, T)
	for i, want := range []float64{0, 0, -rate.R * T * math.Log(2000), 0, -rate.R * T * math.Log(4)} {
		if math.Abs(n.G[i]-want) > 1e-8 || n.Known[i] {
			t.Errorf("G of %s = %g (known %v), want %g", n.Names[i], n.G[i], n.Known[i], want)
		}
	}
	levels, err := n.Levels([]string{"R + X", "S1", "A", "S2", "B"}, nil)
	var pe *PathError
	if !errors.As(err, &pe) || pe.Element != 4 || !strings.Contains(pe.Msg, "B and the zero R + X have no common zero: nothing gives the free energy of reaction of step S2") {
		t.Errorf("levels %v, error %v", levels, err)
	}
	levels, err = n.Levels([]string{"B", "S3", "C"}, nil)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "level of C", levels[2].G, -rate.R*T*math.Log(4), 1e-12)
	if _, err = n.Levels([]string{"B", "S3", "C"}, []Term{{0, 1}, {1, 1}}); !errors.As(err, &pe) || pe.Element != -1 {
		t.Errorf("a zero beyond the step without return: %v", err)
	}
	eq, err := n.Equilibrium([]float64{0, 0, 0, 1, 0})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "equilibrium C", eq.C[4], 0.8, 1e-9)
	shares, why, err := n.EquilibriumShares([]int{3, 4}, nil)
	if err != nil || why != "" {
		t.Fatal(why, err)
	}
	near(t, "share of C", shares[1], 0.8, 1e-12)
}

func TestLawRefusals(t *testing.T) {
	const T = 298.15
	known := func(m *Mechanism, names string) {
		for i := range m.Species {
			if strings.Contains(names, m.Species[i].Name) {
				m.Species[i].Unknown = false
			}
		}
	}
	for _, tt := range []struct {
		name, reaction, key, want string
		change                    func(m *Mechanism, s *Step)
	}{
		{"no return", "A <=> B", "", "step S is reversible, and nothing says how fast it returns: B has no energy", func(m *Mechanism, s *Step) {
			s.Law = law(k(1), nil)
			known(m, "A")
		}},
		{"energy between species without", "A -> B", "", "step S is given by the energy of its transition state, and A has no energy", func(m *Mechanism, s *Step) { s.Energy = thermo.Constant(90e3) }},
		{"K without return", "A -> B", "K", "step S has a K and no return", func(m *Mechanism, s *Step) { s.Law, s.K = law(k(1), nil), &StatedK{2, T} }},
		{"k-back without return", "A -> B", "k-back", "has a k-back and no return", func(m *Mechanism, s *Step) { s.Law = law(k(1), k(1)) }},
		{"K beside k-back", "A <=> B", "K", "both K and k-back", func(m *Mechanism, s *Step) { s.Law, s.K = law(k(1), k(1)), &StatedK{2, T} }},
		{"K beside an energy", "A <=> B", "K", "beside the energy of its transition state", func(m *Mechanism, s *Step) {
			known(m, "AB")
			s.Energy, s.K = thermo.Constant(90e3), &StatedK{2, T}
		}},
		{"K of zero", "A <=> B", "K", "an equilibrium constant of 0", func(m *Mechanism, s *Step) { s.Law, s.K = law(k(1), nil), &StatedK{0, T} }},
		{"K at no temperature", "A <=> B", "at-K", "at 0 K", func(m *Mechanism, s *Step) { s.Law, s.K = law(k(1), nil), &StatedK{2, 0} }},
		{"k of zero", "A -> B", "k", "a rate constant of 0", func(m *Mechanism, s *Step) { s.Law = law(k(0), nil) }},
		{"k-back below zero", "A <=> B", "k-back", "a rate constant of -1", func(m *Mechanism, s *Step) { s.Law = law(k(1), k(-1)) }},
		{"k at no temperature", "A -> B", "at", "a rate constant at 0 K", func(m *Mechanism, s *Step) { s.Law = law(&Constant{K: 1}, nil) }},
		{"A without Ea", "A -> B", "A", "A has no Ea", func(m *Mechanism, s *Step) { s.Law = law(&Constant{A: 1e13}, nil) }},
		{"A beside k", "A -> B", "A", "A stands beside k", func(m *Mechanism, s *Step) { s.Law = law(&Constant{A: 1e13, K: 1, Ea: ptr(1)}, nil) }},
		{"Ea not finite", "A -> B", "Ea", "an activation energy of NaN", func(m *Mechanism, s *Step) { s.Law = law(&Constant{A: 1e13, Ea: ptr(math.NaN())}, nil) }},
		{"no k", "A -> B", "k", "step S has no rate constant", func(m *Mechanism, s *Step) { s.Law = law(nil, nil) }},
		{"diffusion of one", "A <=> B", "diffusion", "no two molecules meet in step S", func(m *Mechanism, s *Step) { s.Law, s.K = &Law{Kind: AtDiffusion}, &StatedK{2, T} }},
		{"diffusion of one without return", "A -> B + C", "diffusion", "no two molecules meet", func(m *Mechanism, s *Step) { s.Law = &Law{Kind: AtDiffusion} }},
		{"diffusion beside k", "A + B -> C", "diffusion", "a rate constant beside diffusion", func(m *Mechanism, s *Step) { s.Law = &Law{Kind: AtDiffusion, Forward: k(1)} }},
		{"limit twice", "A + B -> C", "limit", "runs at the diffusion limit already", func(m *Mechanism, s *Step) { s.Law, s.Limited = &Law{Kind: AtDiffusion}, true }},
		{"limit of one", "A -> B", "limit", "cannot be limited by diffusion", func(m *Mechanism, s *Step) { s.Law, s.Limited = law(k(1), nil), true }},
		{"fast without return", "A -> B", "fast", "has no return, and fast = true keeps an equilibrium", func(m *Mechanism, s *Step) { s.Law = &Law{Kind: KeptFast} }},
		{"fast of three", "3 A <=> B", "fast", "three molecules do not meet", func(m *Mechanism, s *Step) { s.Law, s.K = &Law{Kind: KeptFast}, &StatedK{2, T} }},
		{"an unknown law", "A -> B", "", `the law "slow" of step S is not known`, func(m *Mechanism, s *Step) { s.Law = &Law{Kind: "slow"} }},
		{"heat not finite", "A -> B", "heat", "an enthalpy of reaction of +Inf", func(m *Mechanism, s *Step) { s.Law, s.Heat = law(k(1), nil), ptr(math.Inf(1)) }},
		{"viscosity", "A -> B", "viscosity", "viscosity -1 Pa s", func(m *Mechanism, s *Step) { s.Law, m.Viscosity = law(k(1), nil), -1 }},
		{"beyond a number", "A -> B", "", "too large for a number", func(m *Mechanism, s *Step) { s.Law = law(&Constant{A: 1e300, Ea: ptr(-9e5)}, nil) }},
	} {
		t.Run(tt.name, func(t *testing.T) {
			m := measured(t, "A B C", "S: "+tt.reaction)
			tt.change(m, &m.Steps[0])
			_, err := m.At(T)
			var cs Complaints
			if !errors.As(err, &cs) || len(cs) != 1 || !cs[0].Fatal || cs[0].Key != tt.key || !strings.Contains(cs[0].Msg, tt.want) || cs[0].Fix == "" {
				t.Errorf("error %v (%+v), want %q at %q", err, cs, tt.want, tt.key)
			}
		})
	}
}

// Within one step all follows temperature or nothing does, away from where it holds.
func TestMixedLaws(t *testing.T) {
	const T, away = 298.15, 333.15
	withEa := func(x float64) *Constant { return &Constant{K: x, At: T, Ea: ptr(50e3)} }
	for _, tt := range []struct {
		name string
		step Step
		want string // "": no complaint
		held string
	}{
		{"k and k-back, neither", Step{Law: law(k(2), k(1))}, "", "the ΔG‡ that k implies is held"},
		{"k and k-back, both", Step{Law: law(withEa(2), withEa(1))}, "", ""},
		{"k alone", Step{Law: law(withEa(2), k(1))}, "step S mixes what follows temperature (k) with what is constant (k-back), so it has no meaning at 60 °C", ""},
		{"k-back alone", Step{Law: law(k(2), withEa(1))}, "mixes what follows temperature (k-back) with what is constant (k)", ""},
		{"k and a constant K", Step{Law: law(withEa(2), nil), K: &StatedK{2, T}}, "mixes what follows temperature (k) with what is constant (K)", ""},
		{"k and a K with heat", Step{Law: law(withEa(2), nil), K: &StatedK{2, T}, Heat: ptr(-1e4)}, "", ""},
		{"a constant k and K with heat", Step{Law: law(k(2), nil), K: &StatedK{2, T}, Heat: ptr(-1e4)}, "", "the ΔG‡ that k implies is held"},
		{"a barrier and a constant K", Step{Energy: thermo.Constant(80e3), Above: true, K: &StatedK{2, T}}, "", "its barrier is held"},
		{"fast and a constant K", Step{Law: &Law{Kind: KeptFast}, K: &StatedK{2, T}}, "", "the ΔG that K implies is held"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			m := measured(t, "A B", "S: A <=> B")
			tt.step.Name, tt.step.From, tt.step.To, tt.step.Returns = "S", m.Steps[0].From, m.Steps[0].To, true
			m.Steps[0] = tt.step
			at(t, m, T)
			_, err := m.At(away)
			switch {
			case tt.want == "" && err != nil:
				t.Error(err)
			case tt.want != "" && (err == nil || !strings.Contains(err.Error(), tt.want)):
				t.Errorf("error %v, want %q", err, tt.want)
			case tt.want != "":
				if cs := m.Check(); len(cs) != 1 || cs[0].Fatal || !strings.Contains(cs[0].Msg, "so it can be used at 25 °C only") {
					t.Errorf("complaints %+v", cs)
				}
			}
			if h := m.HeldStep(0, away); tt.want == "" && (tt.held == "") != (h == "") || !strings.Contains(h, tt.held) {
				t.Errorf("held %q, want %q", h, tt.held)
			}
		})
	}
	// The return from species: constant with a k that has an Ea, or the other way round.
	m := build(t, T, []state{{"A", 0}, {"B", -2}}, []state{{"S: A <=> B", 0}})
	m.Steps[0].Law = law(withEa(1), nil)
	if _, err := m.At(away); err == nil || !strings.Contains(err.Error(), "mixes what follows temperature (k) with what is constant (A, B)") {
		t.Errorf("error %v", err)
	}
	m.Steps[0].Law = law(k(1), nil)
	if _, err := m.At(away); err != nil {
		t.Error(err)
	}
	if h := m.HeldStep(0, away); !strings.Contains(h, "k implies is held") || !strings.Contains(h, "the G of its species is held") {
		t.Errorf("held %q", h)
	}
}

// randomLaws returns a mechanism of all laws: hidden energies give every
// constant, and some species keep theirs.
func randomLaws(r *rand.Rand) (*Mechanism, float64) {
	m := random(r)
	T := m.Temperature
	m.Viscosity = 1e-3 * (0.3 + r.Float64())
	hidden, err := m.At(T)
	if err != nil {
		panic(err)
	}
	for i := range m.Species {
		m.Species[i].Unknown = r.IntN(3) > 0
	}
	for i := range m.Steps {
		s, was := &m.Steps[i], hidden.Reactions[i]
		var ea, heat *float64
		if r.IntN(2) == 0 {
			ea, heat = ptr(1e5*r.Float64()), ptr(1e5*(r.Float64()-0.5))
		}
		s.Limited = r.IntN(2) == 0 && (Molecules(s.From) == 2 || Molecules(s.To) == 2)
		if r.IntN(3) == 0 {
			s.Tunnelling = &rate.Tunnelling{By: rate.ByWigner, Imaginary: 1e5 * r.Float64()}
		}
		K := &StatedK{K: was.K, At: T}
		switch pick := r.IntN(5); {
		case pick == 0:
			s.Law = law(&Constant{K: was.Forward, At: T, Ea: ea}, &Constant{K: was.Back, At: T, Ea: ea})
		case pick == 1:
			s.Law, s.K, s.Heat = law(&Constant{K: was.Forward, At: T, Ea: ea}, nil), K, heat
		case pick == 2:
			s.Law, s.K = &Law{Kind: KeptFast}, K
			s.Limited = false
		case pick == 3 && (Molecules(s.From) == 2 || Molecules(s.To) == 2):
			s.Law, s.K = &Law{Kind: AtDiffusion}, K
			s.Limited = false
		default:
			s.Energy, s.Above, s.Standard, s.K = thermo.Constant(was.Barrier), true, rate.Standard{}, K
		}
	}
	return m, T
}

// Detailed balance for random mechanisms of every law: K is forward over back,
// and the free energies of the species give it.
func TestDetailedBalanceOfLaws(t *testing.T) {
	r := rand.New(rand.NewPCG(11, 12))
	for trial := 0; trial < 300; trial++ {
		m, T := randomLaws(r)
		shifted := make([]float64, len(m.Species)+len(m.Steps))
		for i := range shifted {
			shifted[i] = 2000 * r.NormFloat64()
		}
		for _, n := range []*Network{at(t, m, T), at(t, m.Slowed(10), T), at(t, m.Shifted(shifted), T)} {
			for _, x := range n.Reactions {
				near(t, "k/k-back", math.Exp(x.LnForward-x.LnBack), x.K, 1e-8)
				if math.Abs(n.sum(x.To)-n.sum(x.From)-x.DeltaG) > 1e-6 {
					t.Errorf("ΔG of %s is %g, and its species give %g", x.Name, x.DeltaG, n.sum(x.To)-n.sum(x.From))
				}
				if most := m.DiffusionLimit(T); m.Steps[x.Step].Limited && (Molecules(x.From) == 2 && x.Forward > most || Molecules(x.To) == 2 && x.Back > most) {
					t.Errorf("%s is faster than diffusion", x.Name)
				}
			}
		}
	}
}
