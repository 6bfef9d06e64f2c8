package kind

import (
	"math"
	"slices"
	"strings"
	"testing"

	"saddlebook/content/schema"
	"saddlebook/diagram"
	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

func spaced(text string) string { return strings.ReplaceAll(text, "\u00a0", " ") }

func TestTimeWords(t *testing.T) {
	for seconds, want := range map[float64]string{
		0: "0 s", 7200: "2 h", 7 * 3600: "7 h", 84000: "23 h 20 min", 13080: "3 h 38 min", 15602.9: "4.3 h",
		90: "1.5 min", 100: "1.7 min", 864000: "10 d", 0.0612: "61 ms", 4.5 * 3600: "4.5 h",
	} {
		if got := spaced(timeWords(seconds)); got != want {
			t.Errorf("%g s reads %q, want %q", seconds, got, want)
		}
	}
}

// Times that differ read differently, as far as six digits go.
func TestDistinctTimes(t *testing.T) {
	got := distinctTimes([]float64{15602.9, 15560, 15560, 7200, math.NaN()})
	if want := "4.33 h, 4.32 h, 4.32 h, 2 h, none"; spaced(strings.Join(got, ", ")) != want {
		t.Errorf("got %q, want %q", got, want)
	}
}

func TestFirstWords(t *testing.T) {
	for text, want := range map[string]string{"1 h": "the first hour", "1 min": "the first minute", "2 h": "the first 2 h", "90 min": "the first 90 min"} {
		q, err := unit.Parse(text, unit.Unit{}, unit.Time)
		if err != nil {
			t.Fatal(err)
		}
		if got := spaced(firstWords(q)); got != want {
			t.Errorf("%q reads %q, want %q", text, got, want)
		}
	}
}

// The programme is worded in the units of its author.
func TestProgrammeWords(t *testing.T) {
	p, ps := readProgramme([]string{"10 d at 25 °C", "ramp to 60 °C at 0.5 K/min", "ramp to 300 K over 90 min", "0.5 h at \u22125 °C"})
	if len(ps) > 0 {
		t.Fatal(ps)
	}
	want := "10 d at 25 °C; ramp to 60 °C at 0.5 K/min (1 h 10 min); ramp to 300 K over 90 min; 0.5 h at \u22125 °C"
	if got := spaced(strings.Join(p.words, "; ")); got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}

// An interval whose ends print as the value, or a last digit from it, is left out.
func TestTelling(t *testing.T) {
	for _, tt := range []struct {
		value, interval string
		want            bool
	}{
		{"1.00", "1.00 to 1.00", false}, {"1.00", "1.00 to 1.01", false}, {"1.00", "0.99 to 1.01", true}, {"1.00", "1.00 to 1.02", true},
		{"<1:99", "<1:99 to <1:99", false}, {"96:4", "79:21 to >99:1", true}, {"96:4", "96:4 to 97:3", true},
		{"1\u00a0%", "1\u00a0% to 2\u00a0%", true}, {"99.9\u00a0%", "99.9\u00a0% to 100.0\u00a0%", false},
		{"4.3\u00a0h", "4.3\u00a0h to 4.4\u00a0h", true}, {"59\u00a0min", "59\u00a0min to 1.0\u00a0h", true},
		{"2.0 × 10", "2.0\u00a0×\u00a010⁻³ to 2.0\u00a0×\u00a010⁻²", true}, {"1.00", "", false},
	} {
		if got := telling(tt.value, tt.interval); got != tt.want {
			t.Errorf("%q beside %q: %v, want %v", tt.interval, tt.value, got, tt.want)
		}
	}
}

// Rows stand at every moment, after a jump there, and otherwise where lines change.
func TestRowsAt(t *testing.T) {
	l := diagram.TimeLine{}
	for k := 0; k <= 100; k++ {
		x := float64(k)
		l.T, l.Y = append(l.T, x), append(l.Y, math.Min(1, x/10))
		if k == 50 {
			l.T, l.Y = append(l.T, x), append(l.Y, 0.5)
		}
		if k >= 50 {
			l.Y[len(l.Y)-1] = 0.5
		}
	}
	rows := rowsAt([]diagram.TimeLine{l}, []float64{0, 33, 50, 100})
	early := 0
	for _, k := range rows {
		if l.T[k] <= 10 {
			early++
		}
	}
	for _, want := range []int{0, 33, 51, 101} {
		if !slices.Contains(rows, want) {
			t.Errorf("no row at point %d: %v", want, rows)
		}
	}
	if slices.Contains(rows, 50) || early < len(rows)/2 || len(rows) > 30 {
		t.Errorf("rows at %v", rows)
	}
}

// What runs out before the basis is drawn, whatever its amount; a catalyst and
// what holds some of the basis are not.
func TestScarce(t *testing.T) {
	v := runValue{Basis: 0, BasisCharged: 1, Charged: []float64{1, 0.5, 1.05, 0.02, 3, 0.5}, Holds: []orNone{1, 0, 0, 0, 0, 1},
		Trace: []runPoint{{C: []float64{0.1, 0, 0.01, 0, 2, 0}}}}
	if got := v.scarce(); !slices.Equal(got, []int{1, 2}) {
		t.Errorf("run out: %v, want 1 and 2", got)
	}
	v.Trace[0].C = []float64{0, 0, 0.05, 0, 2, 0} // the basis is gone too
	if got := v.scarce(); len(got) > 0 {
		t.Errorf("run out: %v, want none", got)
	}
}

// Shares of the basis leave out what holds none of it, and count what holds two
// of it twice.
func TestShareLines(t *testing.T) {
	s := &runSource{Products: []schema.Group{{Name: "P", Members: []string{"P"}}}}
	v := runValue{Basis: 0, BasisCharged: 1, Names: []string{"R", "P", "Q", "D"}, Labels: []string{"R", "P", "Q", "D"}, Products: []string{"P"},
		Members: [][]int{{1}}, Units: []float64{1}, Charged: []float64{1, 0, 0, 0}, Holds: []orNone{1, 1, 0, 2},
		Trace: []runPoint{{C: []float64{1, 0, 0, 0}}, {T: 1, C: []float64{0.2, 0.4, 0.9, 0.2}}}}
	lines, ok := s.shareLines(v, paper.New(paper.Block{}, func(string) (paper.Value, bool) { return paper.Value{}, true }))
	if !ok || len(lines) != 3 {
		t.Fatalf("%v, %d lines", ok, len(lines))
	}
	sum := 0.0
	for _, l := range lines {
		if l.Label == "Q" {
			t.Error("Q holds no R and has a share of it")
		}
		sum += l.Y[1]
	}
	if math.Abs(sum-1) > 1e-12 {
		t.Errorf("shares sum to %g", sum)
	}
}
