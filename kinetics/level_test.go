package kinetics

import (
	"errors"
	"math"
	"strings"
	"testing"
)

func TestLevels(t *testing.T) {
	const T = 298.15
	m := build(t, T, []state{{"R", 1}, {"X", 2}, {"A", -4}, {"Y", 3}, {"B", -9}, {"W", 0.5}, {"A2", -12}},
		[]state{{"T1: R + X <=> A", 20}, {"T2: A + Y <=> B + W", 15}, {"T3: 2 A <=> A2", 10}})
	m.Species[0].Label = "enone 3"
	n := at(t, m, T)
	type level struct {
		g          float64 // kcal/mol
		spectators string
	}
	for _, tt := range []struct {
		name string
		path []string
		zero []Term
		want []level
	}{
		{"one step", []string{"R + X", "T1", "A"}, nil, []level{{0, ""}, {17, ""}, {-7, ""}}},
		{"partner not written", []string{"R", "T1", "A"}, nil, []level{{0, "X"}, {17, ""}, {-7, ""}}},
		{"partner of a later step", []string{"R + X", "T1", "A", "T2", "B + W"}, nil,
			[]level{{0, "Y"}, {17, "Y"}, {-7, "Y"}, {15 - 3 - 3, ""}, {-9 + 0.5 - 6, ""}}},
		{"leaving group not written", []string{"A", "T2", "B"}, nil, []level{{0, "Y"}, {16, ""}, {-9 + 0.5 + 1, "W"}}},
		{"backwards", []string{"A", "T1", "R"}, nil, []level{{0, ""}, {24, ""}, {7, "X"}}},
		{"two-sided", []string{"B", "T2", "A", "T1", "R + X"}, []Term{{0, 1}, {1, 1}},
			[]level{{-14.5, "W"}, {9, ""}, {-7, "Y"}, {17, "Y"}, {0, "Y"}}},
		{"zero elsewhere", []string{"A", "T2", "B + W"}, []Term{{0, 1}, {1, 1}}, []level{{-7, "Y"}, {9, ""}, {-14.5, ""}}},
		{"zero without the partner", []string{"A", "T2", "B + W"}, []Term{{0, 1}}, []level{{-7, "Y"}, {9, ""}, {-14.5, ""}}},
		{"zero with a spectator", []string{"R + X", "T1", "A + Y"}, []Term{{0, 1}, {1, 1}, {3, 1}}, []level{{0, "Y"}, {17, "Y"}, {-7, ""}}},
		{"dimer", []string{"2 R + 2 X", "T1", "A + R + X", "T1", "2 A", "T3", "A2"}, nil,
			[]level{{0, ""}, {17, "enone 3 + X"}, {-7, ""}, {10, "A"}, {-14, ""}, {4, ""}, {-18, ""}}},
	} {
		t.Run(tt.name, func(t *testing.T) {
			got, err := n.Levels(tt.path, tt.zero)
			if err != nil {
				t.Fatal(err)
			}
			for i, w := range tt.want {
				kind := LevelKind(i % 2)
				if math.Abs(got[i].G/kcal-w.g) > 1e-9 || got[i].Spectators != w.spectators || got[i].Kind != kind || got[i].Name != tt.path[i] {
					t.Errorf("level %d: %+v (%g kcal/mol), want %+v", i, got[i], got[i].G/kcal, w)
				}
			}
		})
	}
	l, err := n.Levels([]string{"R + X", "T1", "A"}, nil)
	if err != nil {
		t.Fatal(err)
	}
	if l[0].Label != "enone 3 + X" || l[1].Label != "T1" {
		t.Errorf("labels %q, %q", l[0].Label, l[1].Label)
	}
}

func TestLevelsRefuse(t *testing.T) {
	const T = 298.15
	n := at(t, build(t, T, []state{{"R", 0}, {"X", 0}, {"A", -4}, {"B", -6}, {"U", 0}, {"V", -1}},
		[]state{{"T1: R + X <=> A", 20}, {"T2: A <=> B", 15}, {"T3: U <=> V", 10}}), T)
	for _, tt := range []struct {
		name    string
		path    []string
		zero    []Term
		element int
		want    string
	}{
		{"empty", nil, nil, 0, "a path of 0 elements"},
		{"ends with a step", []string{"R", "T1"}, nil, 1, "does not alternate"},
		{"no such step", []string{"R", "T9", "A"}, nil, 1, `"T9" is not a step`},
		{"no such species", []string{"Q", "T1", "A"}, nil, 0, `"Q" in state "Q" is not a species`},
		{"a step for a state", []string{"T1", "T1", "A"}, nil, 0, "it is a step"},
		{"not joined", []string{"R + X", "T1", "B"}, nil, 1, `step T1 does not join "R + X" and "B": it joins R + X and A`},
		{"something from nothing", []string{"R + X", "T1", "A + V"}, nil, 2, `state "A + V" needs 1 V`},
		{"no common zero", []string{"U", "T3", "V"}, []Term{{0, 1}, {1, 1}}, -1, "no common state"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			_, err := n.Levels(tt.path, tt.zero)
			var e *PathError
			if !errors.As(err, &e) || e.Element != tt.element || !strings.Contains(e.Msg, tt.want) || e.Fix == "" {
				t.Errorf("error %v (%+v), want %q at %d", err, e, tt.want, tt.element)
			}
		})
	}
}
