package kinetics

import (
	"encoding/json"
	"errors"
	"math"
	"reflect"
	"strings"
	"testing"

	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/thermo"
)

func ptr(x float64) *float64 { return &x }

// measured makes a mechanism of species without energies and steps without
// rates: "S1: R + X <=> A".
func measured(t testing.TB, species string, steps ...string) *Mechanism {
	t.Helper()
	m := &Mechanism{ID: "test", Temperature: 298.15, Viscosity: 0.89e-3}
	for _, s := range strings.Fields(species) {
		m.Species = append(m.Species, Species{Name: s, Unknown: true})
	}
	for _, s := range steps {
		name, reaction, _ := strings.Cut(s, ":")
		from, to, returns, err := ParseReaction(reaction, m.States()[:len(m.Species)])
		if err != nil {
			t.Fatal(err)
		}
		m.Steps = append(m.Steps, Step{Name: name, From: from, To: to, Returns: returns})
	}
	return m
}

// k is a rate constant at 25 °C.
func k(x float64) *Constant { return &Constant{K: x, At: 298.15} }

func law(forward, back *Constant) *Law { return &Law{Kind: Measured, Forward: forward, Back: back} }

// A rate constant is what it is stated to be at its temperature, and follows Ea.
// The decomposition of dithionate ion by acid: Lente, Fábián and Poë, New J. Chem.
// 29 (2005) 759, supplementary table, with Ea from its ends at 50 and 90 °C.
func TestStatedRate(t *testing.T) {
	m := measured(t, "A H B", "S: A + H -> B")
	const t50, k50, t90, k90 = 323.15, 9.54e-7, 363.15, 1.47e-4
	ea := rate.R * math.Log(k90/k50) / (1/t50 - 1/t90)
	m.Steps[0].Law = law(&Constant{K: k50, At: t50, Ea: &ea}, nil)
	near(t, "k at its temperature", at(t, m, t50).Reactions[0].Forward, k50, 1e-12)
	near(t, "k at 90 °C", at(t, m, t90).Reactions[0].Forward, k90, 1e-12)
	near(t, "k at 70 °C, of the table", at(t, m, 343.15).Reactions[0].Forward, 1.38e-5, 0.02)
	r := at(t, m, 298.15).Reactions[0]
	if !math.IsNaN(r.DeltaG) || !math.IsNaN(r.K) || !math.IsNaN(r.BarrierBack) || !math.IsNaN(r.Position) || r.Back != 0 {
		t.Errorf("a step without return between species without energies: %+v", r)
	}
	if h := m.HeldStep(0, 298.15); h != "" {
		t.Errorf("held with an Ea: %q", h)
	}
	m.Steps[0].Law.Forward = &Constant{A: k50 * math.Exp(ea/(rate.R*t50)), Ea: &ea}
	near(t, "Arrhenius at 90 °C", at(t, m, t90).Reactions[0].Forward, k90, 1e-9)
}

// Without Ea the ΔG‡ that k implies is held: k(T) = kB·T/h·exp(−ΔG‡/RT).
func TestStatedRateHeld(t *testing.T) {
	m := measured(t, "A B", "S: A -> B")
	const T, home = 373.15, 313.15
	m.Steps[0].Law = law(&Constant{K: 2e-4, At: home}, nil)
	dG, err := rate.Barrier(2e-4, home)
	if err != nil {
		t.Fatal(err)
	}
	want, err := rate.Eyring(dG, T)
	if err != nil {
		t.Fatal(err)
	}
	r := at(t, m, T).Reactions[0]
	near(t, "k", r.Forward, want, 1e-12)
	near(t, "barrier", r.Barrier, dG, 1e-12)
	if h := m.HeldStep(0, T); !strings.Contains(h, "S: the ΔG‡ that k implies is held constant from 40 °C to 100 °C") || !strings.Contains(h, "over 60 K") || !strings.Contains(h, "1.8 kcal/mol") {
		t.Errorf("held: %q", h)
	}
	if h := m.HeldStep(0, home); h != "" {
		t.Errorf("held at its own temperature: %q", h)
	}
	m.Steps[0].Returns, m.Steps[0].K = true, &StatedK{K: 50, At: home}
	r = at(t, m, T).Reactions[0]
	near(t, "ΔG held", r.DeltaG, -rate.R*home*math.Log(50), 1e-12)
	near(t, "K", r.Forward/r.Back, math.Pow(50, home/T), 1e-12)
	if h := m.HeldStep(0, T); !strings.Contains(h, "the ΔG that K implies is held") {
		t.Errorf("held: %q", h)
	}
	m.Steps[0].Heat = ptr(-40e3)
	near(t, "van 't Hoff", at(t, m, T).Reactions[0].K, 50*math.Exp(40e3/rate.R*(1/T-1/home)), 1e-12)
}

func TestLaws(t *testing.T) {
	const T = 298.15
	// 8RT/3η at 25 °C and 0.890 mPa s: recomputed from exact constants; trade value 7.4e9.
	const limit = 7427586605.55023
	for _, tt := range []struct {
		name, reaction string
		step           Step
		forward, back  float64
	}{
		{"k and k-back", "A <=> B", Step{Law: law(k(3e-3), k(2e-5))}, 3e-3, 2e-5},
		{"k and K", "A + B <=> C", Step{Law: law(k(0.5), nil), K: &StatedK{K: 1e4, At: T}}, 0.5, 0.5e-4},
		{"diffusion, association", "A + B <=> C", Step{Law: &Law{Kind: AtDiffusion}, K: &StatedK{K: 1e5, At: T}}, limit, limit / 1e5},
		{"diffusion, association uphill", "A + B <=> C", Step{Law: &Law{Kind: AtDiffusion}, K: &StatedK{K: 1e-2, At: T}}, limit, limit / 1e-2},
		{"diffusion, dissociation", "C <=> A + B", Step{Law: &Law{Kind: AtDiffusion}, K: &StatedK{K: 1e-5, At: T}}, limit * 1e-5, limit},
		{"diffusion, downhill of two", "A + B <=> C + D", Step{Law: &Law{Kind: AtDiffusion}, K: &StatedK{K: 0.1, At: T}}, limit / 10, limit},
		{"diffusion without return", "A + B -> C", Step{Law: &Law{Kind: AtDiffusion}}, limit, 0},
		{"fast, unimolecular", "A <=> B", Step{Law: &Law{Kind: KeptFast}, K: &StatedK{K: 20, At: T}}, 1e9, 5e7},
		{"fast, uphill", "A <=> B", Step{Law: &Law{Kind: KeptFast}, K: &StatedK{K: 0.05, At: T}}, 5e7, 1e9},
		{"fast, association", "A + B <=> C", Step{Law: &Law{Kind: KeptFast}, K: &StatedK{K: 100, At: T}}, limit, limit / 100},
		{"fast, dissociation downhill", "A + B <=> C", Step{Law: &Law{Kind: KeptFast}, K: &StatedK{K: 0.1, At: T}}, 1e8, 1e9},
		{"fast, with three on a side", "A + B <=> C + 2 D", Step{Law: &Law{Kind: KeptFast}, K: &StatedK{K: 10, At: T}}, limit, limit / 10},
		{"k, limited", "A + B -> C", Step{Law: law(k(limit), nil), Limited: true}, limit / 2, 0},
		{"k, limited both ways", "A + B <=> C", Step{Law: law(k(limit), k(4)), Limited: true}, limit / 2, 2},
		{"k, degenerate and transmitted", "A <=> B", Step{Law: law(k(3), k(2)), Degeneracy: 2, Transmission: 0.5}, 3, 2},
		{"barrier with K", "A <=> B", Step{Energy: thermo.Constant(80e3), Above: true, K: &StatedK{K: 7, At: T}},
			rate.Boltzmann / rate.Planck * T * math.Exp(-80e3/(rate.R*T)), rate.Boltzmann / rate.Planck * T * math.Exp(-80e3/(rate.R*T)) / 7},
		// Wigner at 1000 cm-1 and 25 °C: 1.97029999756167, recomputed from exact constants.
		{"k and Wigner", "A <=> B", Step{Law: law(k(1), k(0.5)), Tunnelling: &rate.Tunnelling{By: rate.ByWigner, Imaginary: 1e5}}, 1.97029999756167, 0.5 * 1.97029999756167},
	} {
		t.Run(tt.name, func(t *testing.T) {
			m := measured(t, "A B C D", "S: "+tt.reaction)
			tt.step.Name, tt.step.From, tt.step.To, tt.step.Returns = "S", m.Steps[0].From, m.Steps[0].To, m.Steps[0].Returns
			m.Steps[0] = tt.step
			n := at(t, m, T)
			r := n.Reactions[0]
			near(t, "forward", r.Forward, tt.forward, 1e-12)
			near(t, "back", r.Back, tt.back, 1e-12)
			if r.Returns {
				near(t, "K", r.K, r.Forward/r.Back, 1e-12)
				near(t, "ΔG", n.sum(r.To)-n.sum(r.From), r.DeltaG, 1e-9)
				near(t, "barriers", r.Barrier-r.BarrierBack, r.DeltaG, 1e-9)
			}
			text, err := json.Marshal(m)
			var again Mechanism
			if err != nil || json.Unmarshal(text, &again) != nil || !reflect.DeepEqual(*m, again) {
				t.Errorf("%v: the round trip through JSON changed the mechanism: %s", err, text)
			}
		})
	}
}

// The tunnelling factor of Eckart's barrier, 1000 cm-1 and 10 kcal/mol both ways
// at 25 °C: 3.06503009898 by an independent quadrature with 30 digits.
func TestTunnellingLeavesK(t *testing.T) {
	m := build(t, 298.15, []state{{"A", 0}, {"B", -2}}, []state{{"TS: A <=> B", 12}})
	plain := at(t, m, 298.15).Reactions[0]
	m.Steps[0].Tunnelling = &rate.Tunnelling{By: rate.ByEckart, Imaginary: 1e5, Forward: 10 * kcal, Back: 10 * kcal}
	r := at(t, m, 298.15).Reactions[0]
	near(t, "factor", r.Tunnelling, 3.06503009898, 1e-8)
	near(t, "forward", r.Forward, plain.Forward*r.Tunnelling, 1e-12)
	near(t, "back", r.Back, plain.Back*r.Tunnelling, 1e-12)
	if r.K != plain.K || r.Barrier != plain.Barrier {
		t.Error("tunnelling changed K or the barrier")
	}
	m.Steps[0].Tunnelling = &rate.Tunnelling{By: rate.ByBell, Imaginary: 2e5}
	var cs Complaints
	if _, err := m.At(298.15); !errors.As(err, &cs) || cs[0].Key != "tunnelling" || !strings.Contains(cs[0].Msg, "Bell") {
		t.Errorf("Bell at u above 2π: %v", err)
	}
}

// Stated constants hold at 1 mol/L: between species given at 1 atm the return
// follows from the free energies at 1 mol/L.
func TestStatedRateAtOneMolar(t *testing.T) {
	const T, shift = 298.15, 1.89432844549415 // kcal/mol, 1 atm to 1 mol/L, recomputed from exact constants
	m := build(t, T, []state{{"R", 0}, {"X", 0}, {"A", -5}}, []state{{"S: R + X <=> A", 0}})
	for i := range m.Species {
		m.Species[i].Standard = rate.Standard{Pressure: rate.Atmosphere}
	}
	m.Steps[0].Law = law(k(0.3), nil)
	r := at(t, m, T).Reactions[0]
	near(t, "k", r.Forward, 0.3, 1e-12)
	near(t, "K", r.Forward/r.Back, math.Exp((5+shift)*kcal/(rate.R*T)), 1e-9)
}

func TestSlowed(t *testing.T) {
	m := measured(t, "A B C", "F: A <=> B", "S: B -> C")
	m.Steps[0].Law, m.Steps[0].K = &Law{Kind: KeptFast}, &StatedK{K: 2, At: 298.15}
	m.Steps[1].Law = law(k(1), nil)
	if got := m.FastSteps(); len(got) != 1 || got[0] != "F" {
		t.Errorf("fast steps %q", got)
	}
	s := at(t, m.Slowed(10), 298.15)
	near(t, "forward", s.Reactions[0].Forward, 1e8, 1e-12)
	near(t, "back", s.Reactions[0].Back, 5e7, 1e-12)
	near(t, "the other", s.Reactions[1].Forward, 1, 1e-12)
	near(t, "slowed twice", at(t, m.Slowed(10).Slowed(10), 298.15).Reactions[0].Forward, 1e7, 1e-12)
	near(t, "the original", at(t, m, 298.15).Reactions[0].Forward, 1e9, 1e-12)
}

// A shift of d multiplies both rate constants by exp(−d/RT); one of K divides K.
func TestShiftedLaws(t *testing.T) {
	const T = 298.15
	m := measured(t, "A B C", "S: A <=> B", "Q: B <=> C")
	m.Steps[0].Law = law(k(3e-3), k(2e-5))
	m.Steps[0].SD, m.Steps[0].SDReturn = ptr(500), ptr(300)
	m.Steps[1].Law, m.Steps[1].K, m.Steps[1].SDReturn = law(k(1), nil), &StatedK{K: 5, At: T}, ptr(200)
	n := at(t, m, T)
	factor := math.Exp(-1000 / (rate.R * T))
	s := at(t, m.Shifted([]float64{0, 0, 0, 1000, 0}), T)
	near(t, "forward", s.Reactions[0].Forward, 3e-3*factor, 1e-12)
	near(t, "back", s.Reactions[0].Back, 2e-5*factor, 1e-12)
	s = at(t, m.Shifted([]float64{0, 0, 0, 0, 0, 0, 1000}), T)
	near(t, "forward as K shifts", s.Reactions[1].Forward, 1, 1e-12)
	near(t, "K", s.Reactions[1].K, 5*factor, 1e-12)
	// A species moves with the constants that give it: both steps of B.
	s = at(t, m.Shifted([]float64{0, 1000, 0, 0, 0}), T)
	near(t, "K into B", s.Reactions[0].K, n.Reactions[0].K*factor, 1e-12)
	near(t, "K out of B", s.Reactions[1].K, n.Reactions[1].K/factor, 1e-12)

	plans := m.Plans()
	if len(plans) != 1 {
		t.Fatalf("%d plans; measured constants are independent", len(plans))
	}
	p := plans[0]
	if len(p.Own) != 5+2 {
		t.Fatalf("own errors of %d", len(p.Own))
	}
	near(t, "sd of k", p.SD(3), 500, 1e-12)
	near(t, "sd of K from k and k-back", p.SD(5), math.Hypot(500, 300), 1e-12)
	near(t, "sd of k-back", math.Sqrt(p.SD(3)*p.SD(3)+p.SD(5)*p.SD(5)-2*p.Covariance(3, 5)), 300, 1e-12)
	near(t, "sd of K", p.SD(6), 200, 1e-12)
	if got := m.ExactStates(); len(got) != 0 {
		t.Errorf("exact: %q", got)
	}
}

// Steps that share a rate share its errors: one draw moves them all alike.
func TestShareErrors(t *testing.T) {
	m := measured(t, "A B C D", "S.1: A <=> B", "S.2: C <=> D")
	for i := range m.Steps {
		m.Steps[i].Law, m.Steps[i].SD, m.Steps[i].SDReturn = law(k(2), k(1)), ptr(400), ptr(300)
	}
	m.ShareErrors([][]int{{4, 5}})
	p := m.Plans()[0]
	near(t, "sd", p.SD(4), 400, 1e-12)
	near(t, "covariance", p.Covariance(4, 5), 400*400, 1e-12)
	near(t, "sd of K", p.SD(6), 500, 1e-12)
	near(t, "covariance of K", p.Covariance(6, 7), 500*500, 1e-12)
	shift := make([]float64, len(p.Own))
	z := make([]float64, p.Dim())
	for i := range z {
		z[i] = 0.3 + float64(i)
	}
	p.Shift(shift, z)
	n := at(t, m.Shifted(shift), 298.15)
	near(t, "forward alike", n.Reactions[0].Forward, n.Reactions[1].Forward, 1e-12)
	near(t, "back alike", n.Reactions[0].Back, n.Reactions[1].Back, 1e-12)
}
