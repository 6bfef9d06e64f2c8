package kind

import (
	"errors"
	"math"
	"testing"

	"saddlebook/content/schema"
	"saddlebook/kinetics"
)

func TestCompositionAt(t *testing.T) {
	v := runValue{End: 7200, At: []runPoint{
		{Condition: "30 min", Reached: true, T: 1800, Kelvin: 300, C: []float64{1}},
		{Condition: "3 h"},
		{Condition: "end", Reached: true, T: 7200, Kelvin: 310, C: []float64{2}},
	}}
	for _, tt := range []struct {
		at, want float64
		fix      string
	}{
		{1800, 1, ""}, {7200, 2, ""}, {math.Inf(1), 2, ""},
		{3600, 0, `add "1 h" to its report-at`},
		{10800, 0, `take an earlier time, or "end"`},
	} {
		c, _, err := v.CompositionAt(tt.at)
		var te *TimeError
		switch {
		case tt.fix == "" && (err != nil || c[0] != tt.want):
			t.Errorf("at %g s: %v, %v", tt.at, c, err)
		case tt.fix != "" && (!errors.As(err, &te) || te.Fix != tt.fix):
			t.Errorf("at %g s: error %v", tt.at, err)
		}
	}
}

// A block with faults is computed too: whatever is missing does no harm.
func TestRunOfNothing(t *testing.T) {
	for _, m := range []*kinetics.Mechanism{{}, {Species: []kinetics.Species{{Name: "R"}}}} {
		for _, s := range []runSource{
			{},
			{Programme: []string{"2 h"}, Basis: "R"},
			{Programme: []string{"2 h at 20 °C"}, Basis: "R", Enantiomers: []string{}, ReportAt: []string{""}, Doses: []doseSource{{}}, Removal: []removalSource{{}}, Until: []untilSource{{}, {Yield: "A", Reaches: &schema.Bound{}}}},
			{Programme: []string{"2 h at 20 °C"}, Products: []schema.Group{{}, {Name: "A", Members: []string{"A"}}}, BasisUnits: []schema.NamedAmount{{Name: "A"}}},
		} {
			if _, err := s.ready(m, fine); err == nil {
				t.Errorf("%+v was made ready", s)
			}
			s.check()
		}
	}
}
