package ink

import (
	"fmt"
	"io"
	"math"
	"testing"
	"time"

	"saddlebook/diagram"
)

func init() { figures = append(figures, profiles...) }

// turnOf is an invented cross-coupling, one turn.
func turnOf(width float64) diagram.Profile {
	return diagram.Profile{ID: fmt.Sprint("turn-", width), Title: "One turn of a cross-coupling", Unit: "kcal/mol", Zero: "PdL2 + ArBr + Nu-", Width: width,
		Paths: []diagram.ProfilePath{{Points: []diagram.ProfilePoint{
			level("PdL2", 0), peak("TS1", 14.2, 0.44), level("trans-PdBr(Ar)L2", -9.6), peak("TS2", 4.3, 0.57), level("PdNu(Ar)L2", -12.1), peak("TS3‡", 9.4, 0.48),
			{Value: -24.8, Again: true},
		}}},
		Barriers: []diagram.ProfileBarrier{{Peak: "TS1"}, {Peak: "TS2"}, {Peak: "TS2", Back: true}},
		Span:     &diagram.ProfileSpan{From: "PdNu(Ar)L2", To: "TS3‡", Text: "δE 21.5"},
	}
}

// longRow is a path of n levels with transition states between them.
func longRow(n int, width float64) diagram.Profile {
	p := diagram.Profile{ID: fmt.Sprintf("row-%d-%g", n, width), Title: "A long row of steps", Unit: "kcal/mol", Width: width}
	points := []diagram.ProfilePoint{level("R", 0)}
	for i := 1; i < n; i++ {
		x := float64(i)
		v := -1.1*x + 5*math.Sin(1.7*x)
		points = append(points, peak(fmt.Sprint("TS", i), math.Max(v, points[len(points)-1].Value)+8+4*math.Sin(2.3*x), 0.5+0.2*math.Sin(x)), level(fmt.Sprint("I", i), v))
	}
	p.Paths = []diagram.ProfilePath{{Points: points}}
	return p
}

var profiles = []golden{
	{"profile_turn", turnOf(0)},
	{"profile_turn_column", turnOf(340)},
	{"profile_next_turn", diagram.Profile{ID: "next-turn", Title: "A span into the next turn", Unit: "kcal/mol",
		Paths: []diagram.ProfilePath{{Points: []diagram.ProfilePoint{
			level("cat", 0), peak("TS1", 16.5, 0.5), level("I1", 5.2), peak("TS2", 11.1, 0.5), level("I2", -6.9), peak("TS3", 3.3, 0.5), {Value: -11.2, Again: true},
		}}},
		Span: &diagram.ProfileSpan{From: "I2", To: "TS1"},
	}},
	{"profile_variants", diagram.Profile{ID: "variants", Title: "One path in three solvents", Unit: "kcal/mol", Paths: []diagram.ProfilePath{
		{Name: "in THF", Points: []diagram.ProfilePoint{level("R", 0), peak("TS1", 14.4, 0.45), level("I", 5.1), peak("TS2", 17.9, 0.55), level("P", -8.3)}},
		{Name: "in toluene", Variant: "in THF", Points: []diagram.ProfilePoint{level("R", 0), peak("TS1", 18.2, 0.45), level("I", 9.4), peak("TS2", 20.6, 0.55), level("P", -6.9)}},
		{Name: "in DMSO", Variant: "in THF", Points: []diagram.ProfilePoint{level("R", 0), peak("TS1", 11.5, 0.45), level("I", 1.2), peak("TS2", 15.2, 0.55), level("P", -10.8)}},
	}}},
	{"profile_rejoin", diagram.Profile{ID: "rejoin", Title: "Ways that part and meet again", Unit: "kJ/mol", Paths: []diagram.ProfilePath{
		{Name: "by the ylide", Points: []diagram.ProfilePoint{level("R", 0), peak("TS1", 71, 0.5), level("I1", 30), peak("TS2", 66, 0.4), level("ylide", 12), peak("TS3", 58, 0.6), level("I4", -20), peak("TS4", 15, 0.5), level("P", -64)}},
		{Name: "concerted", Points: []diagram.ProfilePoint{level("R", 0), peak("TS1", 71, 0.5), level("I1", 30), peak("TSc", 84, 0.5), level("I4", -20), peak("TS4", 15, 0.5), level("P", -64)}},
	}}},
	{"profile_rejoin_column", diagram.Profile{ID: "rejoin-column", Title: "Ways that part and meet again", Unit: "kJ/mol", Width: 340, Paths: []diagram.ProfilePath{
		{Name: "by the ylide", Points: []diagram.ProfilePoint{level("R", 0), peak("TS1", 71, 0.5), level("I1", 30), peak("TS2", 66, 0.4), level("ylide", 12), peak("TS3", 58, 0.6), level("I3", 4), peak("TS5", 40, 0.6), level("I5", -9), peak("TS6", 33, 0.6), level("I4", -20), peak("TS4", 15, 0.5), level("P", -64)}},
		{Name: "concerted", Points: []diagram.ProfilePoint{level("R", 0), peak("TS1", 71, 0.5), level("I1", 30), peak("TSc", 84, 0.5), level("I4", -20), peak("TS4", 15, 0.5), level("P", -64)}},
	}}},
	{"profile_sixty", longRow(30, 0)}, // 30 levels and 29 transition states
	{"profile_twenty_column", longRow(10, 340)},
	{"profile_levels_only", func() scener {
		p := longRow(60, 720)
		var kept []diagram.ProfilePoint
		for _, q := range p.Paths[0].Points {
			if !q.Peak {
				kept = append(kept, q)
			}
		}
		p.ID, p.Paths[0].Points = "levels-only", kept
		return p
	}()},
	{"profile_extreme", diagram.Profile{ID: "extreme", Title: "From 0.001 to 100000", Unit: "cm-1", Paths: []diagram.ProfilePath{{
		Points: []diagram.ProfilePoint{level("A", 0), level("B", 0.001), peak("TS", 1e5, 0.7), level("C", 0.0012), level("D", -350)},
	}}}},
	{"profile_crowded", func() scener {
		p := diagram.Profile{ID: "crowded", Title: "Eight near-equal ways in one column", Unit: "kcal/mol", Width: 340}
		for i := range 8 {
			x := float64(i)
			p.Paths = append(p.Paths, diagram.ProfilePath{Name: fmt.Sprint("way ", i+1), Points: []diagram.ProfilePoint{
				level("common intermediate", 0), peak(fmt.Sprint("TS-", i+1, " chair"), 12+0.01*x, 0.4), level(fmt.Sprint("diastereomer ", i+1), -6+0.02*x),
			}})
		}
		return p
	}()},
	{"profile_deviations_column", diagram.Profile{ID: "deviations-column", Title: "Energies with deviations", Unit: "kcal/mol", Zero: "A", Width: 340, Paths: []diagram.ProfilePath{{
		Points: []diagram.ProfilePoint{level("A", 0), {Name: "TS1", Value: 18.4, Peak: true, Position: math.NaN(), SD: ref(0.9)}, {Name: "B", Value: 3.2, SD: ref(0.5)}, {Name: "TS2", Value: 15.1, Peak: true, Position: 0.3, SD: ref(1.4)}, {Name: "C", Value: -9.5, SD: ref(0.7)}},
	}}}},
	{"profile_pictures", diagram.Profile{ID: "pictures", Title: "Pictures at two levels", Unit: "kcal/mol", Paths: []diagram.ProfilePath{{
		Points: []diagram.ProfilePoint{{Name: "ring", Value: 0, Picture: ring(3)}, peak("TS‡", 21.4, 0.4), level("diradical", 17.2), peak("TS2‡", 19.9, 0.5), {Name: "chain", Value: -7.9, Picture: ring(6)}},
	}}}},
	{"profile_wild", diagram.Profile{ID: `p" onload="x`, Title: wild, Desc: wild, Axis: wild, Unit: wild, Zero: wild, Width: 480,
		Paths:    []diagram.ProfilePath{{Name: wild, Points: []diagram.ProfilePoint{{Name: wild, Text: wild}, {Name: wild + "2", Value: 3, Peak: true}, {Name: wild + "3", Value: -1}, {Again: true, Value: -2}}}},
		Barriers: []diagram.ProfileBarrier{{Peak: wild + "2", Text: wild}}, Span: &diagram.ProfileSpan{From: wild, To: wild + "3", Text: wild}}},
}

// ring is a picture for tests: a polygon.
func ring(n int) *diagram.Picture {
	p := &diagram.Picture{Width: 60, Height: 52, Alt: fmt.Sprint("a ring of ", n)}
	for i := range n {
		at := func(i int) (x, y float64) {
			a := 2 * math.Pi * float64(i) / float64(n)
			return 30 + 25*math.Sin(a), 26 - 25*math.Cos(a)
		}
		x, y := at(i)
		u, v := at(i + 1)
		p.Marks = append(p.Marks, diagram.Line{Role: "axis", X1: x, Y1: y, X2: u, Y2: v})
	}
	return p
}

// counted keeps the number of bytes written to it.
type counted int

func (c *counted) Write(b []byte) (int, error) { *c += counted(len(b)); return len(b), nil }

// BenchmarkSixtyStates lays a profile of 60 states out and writes it, and writes
// the scene that is laid out already: the metric is the ratio of the two.
func BenchmarkSixtyStates(b *testing.B) {
	for _, width := range []float64{720, 340} {
		p := longRow(60, width)
		s, err := p.Scene()
		if err != nil {
			b.Fatal(err)
		}
		var size counted
		if err := Inline(&size, s); err != nil {
			b.Fatal(err)
		}
		b.Run(fmt.Sprintf("width=%g", width), func(b *testing.B) {
			b.SetBytes(int64(size))
			var all, write time.Duration
			for b.Loop() {
				start := time.Now()
				s, _ := p.Scene()
				Inline(io.Discard, s)
				between := time.Now()
				Inline(io.Discard, s)
				all, write = all+between.Sub(start), write+time.Since(between)
			}
			b.ReportMetric(float64(all)/float64(write), "of-writing")
		})
	}
}
