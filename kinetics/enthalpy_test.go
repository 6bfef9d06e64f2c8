package kinetics

import (
	"math"
	"strings"
	"testing"

	"saddlebook/kinetics/thermo"
)

func TestEnthalpy(t *testing.T) {
	const T = 350
	m := measured(t, "A B C D E", "S1: A -> B", "S2: B <=> C", "S3: C -> D", "S4: D <=> E", "S5: 2 A -> B")
	energies := []thermo.Energy{
		{Heat: &thermo.Heat{H: 1e3, S: 50, Cp: 30, T0: 298.15}},
		thermo.Following(-20e3, 40),
		thermo.Constant(-30e3),
	}
	for i, e := range energies {
		m.Species[i].Unknown, m.Species[i].Energy = false, e
	}
	m.Steps[0].Law, m.Steps[4].Law = law(k(1), nil), law(k(1), nil)
	m.Steps[1].Energy = thermo.Constant(80e3)
	m.Steps[2].Law, m.Steps[2].Heat = law(k(1), nil), ptr(-85e3)
	m.Steps[3].Law = law(&Constant{K: 1, At: T, Ea: ptr(70e3)}, &Constant{K: 2, At: T, Ea: ptr(95e3)})
	h := m.SpeciesEnthalpy(T)
	near(t, "A", h[0], 1e3+30*(T-298.15), 1e-12)
	near(t, "B", h[1], -20e3, 1e-12)
	for i := 2; i < 5; i++ {
		if !math.IsNaN(h[i]) {
			t.Errorf("enthalpy of %s: %g", m.Species[i].Name, h[i])
		}
	}
	steps, missing := m.Enthalpy(T)
	near(t, "S1", steps[0], -20e3-h[0], 1e-12)
	near(t, "S3, stated", steps[2], -85e3, 1e-12)
	near(t, "S4, from both Ea", steps[3], -25e3, 1e-12)
	near(t, "S5, twice A", steps[4], -20e3-2*h[0], 1e-12)
	if strings.Join(missing, " ") != "S2" || !math.IsNaN(steps[1]) {
		t.Errorf("missing %q", missing)
	}
}

func TestDoubts(t *testing.T) {
	const T = 298.15
	atom := func(symmetry int) thermo.Energy {
		return thermo.Energy{Molecule: &thermo.Molecule{Mass: 0.028, Rotation: []float64{199}, Frequencies: []float64{233000}, Symmetry: symmetry}}
	}
	for _, tt := range []struct {
		name, state, key, want string
		m                      func() *Mechanism
	}{
		{"counted twice", "S", "degeneracy", "step S has a degeneracy of 2 beside symmetry numbers (A)", func() *Mechanism {
			m := measured(t, "A B", "S: A -> B")
			m.Species[0].Unknown, m.Species[0].Energy = false, thermo.Energy{Conformers: []thermo.Energy{atom(2)}}
			m.Steps[0].Energy, m.Steps[0].Above, m.Steps[0].Degeneracy = thermo.Constant(90e3), true, 2
			return m
		}},
		{"heat", "S", "heat", "the heat of step S is −9.6 kcal/mol (−40.0 kJ/mol), and the enthalpies of its species give −4.8 kcal/mol", func() *Mechanism {
			m := build(t, T, []state{{"A", 0}, {"B", 0}}, []state{{"S: A -> B", 0}})
			m.Species[0].Energy, m.Species[1].Energy = thermo.Following(0, 0), thermo.Following(-20e3, 0)
			m.Steps[0].Law, m.Steps[0].Heat = law(&Constant{K: 1, At: T, Ea: ptr(5e4)}, nil), ptr(-40e3)
			return m
		}},
		{"two scales", "S", "", "the energies of step S lie 47927.0 kcal/mol", func() *Mechanism {
			return build(t, T, []state{{"A", -47927 - 20}, {"B", -47950}}, []state{{"S: A <=> B", -20}})
		}},
		{"a fast constant", "S", "", "the rate constant of step S leaves a barrier of only", func() *Mechanism {
			m := measured(t, "A B", "S: A -> B")
			m.Steps[0].Law = law(k(1e12), nil)
			return m
		}},
	} {
		t.Run(tt.name, func(t *testing.T) {
			for _, c := range tt.m().Check() {
				if c.State == tt.state && c.Key == tt.key && !c.Fatal && strings.Contains(c.Msg, tt.want) && c.Fix != "" {
					return
				}
			}
			t.Errorf("complaints %+v; want %q", tt.m().Check(), tt.want)
		})
	}
	m := measured(t, "A B", "S: A <=> B")
	m.Steps[0].Law, m.Steps[0].K = &Law{Kind: KeptFast}, &StatedK{K: 2, At: T}
	if cs := m.Check(); len(cs) > 0 {
		t.Errorf("a step that is kept fast: %+v", cs)
	}
}
