package kinetics

import (
	"math"
	"strings"
	"testing"

	"saddlebook/kinetics/thermo"
)

func TestCheck(t *testing.T) {
	const T = 298.15
	good := func() *Mechanism {
		return build(t, T, []state{{"R", 0}, {"A", -3}}, []state{{"TS: R <=> A", 20}})
	}
	for _, tt := range []struct {
		name   string
		change func(*Mechanism) *Mechanism
		state  string
		fatal  bool
		want   string // "": nothing to complain about
	}{
		{"good", func(m *Mechanism) *Mechanism { return m }, "", false, ""},
		{"addition", func(m *Mechanism) *Mechanism { return addition() }, "", false, ""},
		{"unreached", func(m *Mechanism) *Mechanism {
			m.Species = append(m.Species, Species{Name: "Z"})
			return m
		}, "Z", false, "no step reaches Z"},
		{"parts", func(*Mechanism) *Mechanism {
			return build(t, T, []state{{"R", 0}, {"A", -3}, {"U", 0}, {"V", -1}}, []state{{"T1: R <=> A", 20}, {"T2: U <=> V", 20}})
		}, "", false, "no common state: R, A; U, V"},
		{"shallow", func(*Mechanism) *Mechanism {
			return build(t, T, []state{{"R", 0}, {"A", -3}}, []state{{"TS: R <=> A", 2}})
		}, "TS", false, "step TS has a barrier of only 2.0 kcal/mol (8.4 kJ/mol) from R at 25 °C"},
		{"shallow back", func(*Mechanism) *Mechanism {
			return build(t, T, []state{{"R", 0}, {"I", 9}}, []state{{"TS: R <=> I", 11}})
		}, "TS", false, "2.0 kcal/mol (8.4 kJ/mol) from I"},
		{"low", func(*Mechanism) *Mechanism {
			return build(t, T, []state{{"R", 0}, {"A", 3}}, []state{{"TS: R <=> A", 2}})
		}, "TS", true, "below its products A"},
		{"entropy in kJ", func(*Mechanism) *Mechanism {
			m := addition()
			m.Species[2].Energy = thermo.Following(-11.5*kcal, -0.138)
			return m
		}, "A", false, "the entropy of A is -0.138 J/mol/K"},
		{"mixed", func(*Mechanism) *Mechanism {
			m := addition()
			m.Species[0].Energy = thermo.Constant(0)
			return m
		}, "TSa", false, "with a constant G (R), so it can be used at −78 °C only"},
		{"twice", func(m *Mechanism) *Mechanism {
			m.Steps[0].Name = "R"
			return m
		}, "R", true, `two states are named "R"`},
		{"name", func(m *Mechanism) *Mechanism {
			m.Species[0].Name = "R+"
			return m
		}, "R+", true, `"R+" cannot be a name`},
		{"sd", func(m *Mechanism) *Mechanism {
			x := math.Inf(1)
			m.Steps[0].SD = &x
			return m
		}, "TS", true, "makes no sense"},
		{"shared", func(m *Mechanism) *Mechanism {
			m.Common = []Common{{States: []int{2, 2}, SD: 1}}
			return m
		}, "", true, "twice"},
		{"temperature", func(m *Mechanism) *Mechanism {
			m.Temperature = 0
			return m
		}, "", true, "temperature 0 K"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			cs := tt.change(good()).Check()
			if tt.want == "" {
				if len(cs) > 0 {
					t.Errorf("complaints %+v", cs)
				}
				return
			}
			for _, c := range cs {
				if c.State == tt.state && c.Fatal == tt.fatal && strings.Contains(c.Msg, tt.want) && c.Fix != "" {
					return
				}
			}
			t.Errorf("complaints %+v; want %s, %q", cs, tt.state, tt.want)
		})
	}
}

func TestConnected(t *testing.T) {
	m := build(t, 298.15, []state{{"R", 0}, {"X", 0}, {"A", -3}, {"U", 0}, {"V", -1}}, []state{{"T1: R + X <=> A", 20}, {"T2: U <=> V", 20}})
	if !m.Connected(0, 1) || !m.Connected(1, 2) || m.Connected(0, 3) || !m.Connected(3, 4) {
		t.Error("wrong parts")
	}
}
