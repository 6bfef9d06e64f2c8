package kinetics

import (
	"encoding/json"
	"reflect"
	"strings"
	"testing"
)

func TestFormulasBalance(t *testing.T) {
	energies := func(names string) []state {
		var list []state
		for _, n := range strings.Fields(names) {
			list = append(list, state{n, 0})
		}
		return list
	}
	for _, tt := range []struct {
		name     string
		species  string
		formulas map[string]string
		steps    []state
		want     []Complaint // Msg and Fix: a part of it
	}{
		{"balanced", "R X A", map[string]string{"R": "C6H10O", "X": "CH3OH", "A": "C7H14O2"}, []state{{"TS: R + X <=> A", 20}}, nil},
		{"no formulas", "R A", nil, []state{{"TS: R <=> A", 20}}, nil},
		{"electron", "Fe3 el Fe2", map[string]string{"Fe3": "Fe^3+", "el": "e-", "Fe2": "Fe^2+"}, []state{{"TS: Fe3 + el <=> Fe2", 20}}, nil},
		{"electron lost", "Fe3 Fe2", map[string]string{"Fe3": "Fe^3+", "Fe2": "Fe^2+"}, []state{{"TS: Fe3 <=> Fe2", 20}},
			[]Complaint{{"TS", "reaction", true, "step TS gains charge −1: left Fe³⁺, right Fe²⁺", "missing on the left side (e⁻)"}}},
		{"electron gained", "Fe3 Fe2", map[string]string{"Fe3": "Fe^3+", "Fe2": "Fe^2+"}, []state{{"TS: Fe2 <=> Fe3", 20}},
			[]Complaint{{"TS", "reaction", true, "step TS gains charge +1: left Fe²⁺, right Fe³⁺", "missing on the right side (e⁻)"}}},
		{"hydride", "R A", map[string]string{"R": "C6H10O", "A": "C6H9O+"}, []state{{"TS1: R <=> A", 20}},
			[]Complaint{{"TS1", "reaction", true, "step TS1 loses 1 H and gains charge +1: left C6H10O, right C6H9O⁺", "name what is missing on the right side (H⁻), or correct the formula of R or A"}}},
		{"hydrogen", "R A", map[string]string{"R": "C6H10O", "A": "C6H8O"}, []state{{"TS1: R <=> A", 20}},
			[]Complaint{{"TS1", "reaction", true, "step TS1 loses 2 H: left C6H10O, right C6H8O", "(H2)"}}},
		{"water", "R A", map[string]string{"R": "C6H10O", "A": "C6H12O2"}, []state{{"TS1: R <=> A", 20}},
			[]Complaint{{"TS1", "reaction", true, "step TS1 gains 2 H and 1 O", "missing on the left side (H2O)"}}},
		{"both ways", "R A", map[string]string{"R": "C6H10OS", "A": "C6H12O2"}, []state{{"TS1: R <=> A", 20}},
			[]Complaint{{"TS1", "reaction", true, "step TS1 loses 1 S and gains 2 H and 1 O", "correct the reaction, or the formula of R or A"}}},
		{"stoichiometry", "A A2", map[string]string{"A": "NO2", "A2": "N2O4"}, []state{{"TS: 2 A <=> A2", 20}, {"TT: A <=> A2", 20}},
			[]Complaint{{"TT", "reaction", true, "step TT gains 1 N and 2 O: left NO2, right N2O4", "(NO2)"}}},
		{"label", "R A", map[string]string{"R": "CH3OD", "A": "CH4O"}, []state{{"TS: R <=> A", 20}},
			[]Complaint{{"TS", "reaction", true, "step TS loses 1 D and gains 1 H", "R or A"}}},
		{"partial", "R X A B", map[string]string{"R": "C6H10O", "B": "C6H8O"}, []state{{"T1: R + X <=> A", 20}, {"T2: R + X <=> B", 20}, {"T3: A -> X", 20}},
			[]Complaint{{"X", "", false, "X and A have no formula and others in the same step do, so the atoms of steps T1 and T2 are not checked", "give them a formula"}}},
		{"partial, one", "R A", map[string]string{"R": "C6H10O"}, []state{{"T1: R <=> A", 20}},
			[]Complaint{{"A", "", false, "A has no formula and others in the same step do, so the atoms of step T1 are not checked", "give it a formula"}}},
		{"unreadable", "R A", map[string]string{"R": "C6H10O", "A": "Cu2+"}, []state{{"T1: R <=> A", 20}},
			[]Complaint{{"A", "formula", true, "can be read two ways", "Cu^2+"}}},
		{"catalyst", "R C A", map[string]string{"R": "C6H10O", "C": "Pd", "A": "C6H10O"}, []state{{"TS: R + C <=> A + C", 20}}, nil},
	} {
		t.Run(tt.name, func(t *testing.T) {
			m := build(t, 298.15, energies(tt.species), tt.steps)
			for i := range m.Species {
				m.Species[i].Formula = tt.formulas[m.Species[i].Name]
			}
			got := m.Check()
			if len(got) != len(tt.want) {
				t.Fatalf("complaints %+v; want %d", got, len(tt.want))
			}
			for i, w := range tt.want {
				g := got[i]
				if g.State != w.State || g.Key != w.Key || g.Fatal != w.Fatal || !strings.Contains(g.Msg, w.Msg) || !strings.Contains(g.Fix, w.Fix) {
					t.Errorf("got  %+v\nwant %+v", g, w)
				}
			}
		})
	}
}

func TestFormulaIsKept(t *testing.T) {
	m := addition()
	m.Species[0].Formula = "C6H10O"
	data, err := json.Marshal(m)
	if err != nil {
		t.Fatal(err)
	}
	var again Mechanism
	if err := json.Unmarshal(data, &again); err != nil || !reflect.DeepEqual(*m, again) {
		t.Errorf("%v: differs after encoding", err)
	}
	d := make([]float64, len(m.States()))
	if m.Shifted(d).Species[0].Formula != "C6H10O" {
		t.Error("a shift loses the formula")
	}
}
