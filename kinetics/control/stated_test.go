package control_test

import (
	"math"
	"testing"

	"saddlebook/kinetics"
	"saddlebook/kinetics/control"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/thermo"
)

// Degrees and factors do not depend on how the rates are given: by energies of
// transition states, by barriers, or by rate constants with K, with a return of
// their own, or with the energies of the species.
func TestDegreesWhateverGivesTheRates(t *testing.T) {
	const T = 298.15
	species := []level{{"S", 0}, {"P", -6}, {"cat", 0}, {"int", -3}, {"dim", -5}, {"off", -4}, {"L", 0}}
	steps := []way{{"join", "2 cat <=> dim", 9}, {"in", "cat + S <=> int", 14}, {"out", "int <=> cat + P", 13.5}, {"trap", "off <=> cat + L", 10}}
	held := map[string]float64{"S": 0.4, "P": 0.02, "L": 0.003}
	ask := func(m *kinetics.Mechanism) *control.Result {
		p := point(t, m, "P", held, map[string]float64{"cat": 1e-2})
		p.Catalyst = 2
		return analyse(t, m, T, p)
	}
	want := ask(mechanism(t, T, species, steps))
	n, err := mechanism(t, T, species, steps).At(T)
	if err != nil {
		t.Fatal(err)
	}
	constant := func(k float64) *kinetics.Constant { return &kinetics.Constant{K: k, At: T} }
	for _, c := range []struct {
		name    string
		unknown bool
		give    func(s *kinetics.Step, r *kinetics.Reaction)
	}{
		{"barriers", false, func(s *kinetics.Step, r *kinetics.Reaction) { s.Above, s.Energy = true, thermo.Constant(r.Barrier) }},
		{"k", false, func(s *kinetics.Step, r *kinetics.Reaction) {
			s.Law = &kinetics.Law{Kind: kinetics.Measured, Forward: constant(r.Forward)}
		}},
		{"k and k-back", false, func(s *kinetics.Step, r *kinetics.Reaction) {
			s.Law = &kinetics.Law{Kind: kinetics.Measured, Forward: constant(r.Forward), Back: constant(r.Back)}
		}},
		{"k and K, no energies", true, func(s *kinetics.Step, r *kinetics.Reaction) {
			s.Law, s.K = &kinetics.Law{Kind: kinetics.Measured, Forward: constant(r.Forward)}, &kinetics.StatedK{K: r.K, At: T}
		}},
	} {
		m := mechanism(t, T, species, steps)
		for i := range m.Steps {
			c.give(&m.Steps[i], &n.Reactions[i])
		}
		for i := range m.Species {
			// An intermediate without an energy beside species that have one.
			m.Species[i].Unknown = c.unknown || c.name == "k and k-back" && m.Species[i].Name == "int"
		}
		got := ask(m)
		near(t, c.name+": rate", got.Rate, want.Rate, 1e-9)
		for i, st := range want.States {
			close(t, c.name+": X of "+st.Name, got.States[i].X, st.X, 1e-7)
			near(t, c.name+": factor of "+st.Name, got.States[i].Factor, st.Factor, 1e-9)
		}
	}
	// The catalyst kept at the diffusion limit: its transition state stays too.
	m := mechanism(t, T, species, steps)
	limit := m.DiffusionLimit(T)
	m.Steps[3].Law = &kinetics.Law{Kind: kinetics.AtDiffusion}
	byEnergy := mechanism(t, T, species, append(append([]way{}, steps[:3]...), way{"trap", "off <=> cat + L", math.Log(k(0, T)/limit) * rate.R * T / kcal}))
	a, b := ask(m), ask(byEnergy)
	for i, st := range b.States {
		close(t, "at diffusion: X of "+st.Name, a.States[i].X, st.X, 1e-7)
		near(t, "at diffusion: factor of "+st.Name, a.States[i].Factor, st.Factor, 1e-9)
	}
}
