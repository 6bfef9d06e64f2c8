package control_test

import (
	"context"
	"errors"
	"fmt"
	"math"
	"testing"

	"saddlebook/kinetics"
	"saddlebook/kinetics/control"
	"saddlebook/kinetics/rate"
)

// Turnover of linear cycles. The relations are those of Kozuch and Shaik, Acc.
// Chem. Res. 44, 101 (2011) and Kozuch, WIREs Comput. Mol. Sci. 2, 795 (2012),
// from memory; the profiles are invented, and the numbers were evaluated from the
// relations and checked there against the linear steady state. kcal/mol.
var cycles = []struct {
	T                         float64
	I, TS                     []float64 // transition state i follows intermediate i
	turn, span                float64
	tdts, tdi                 int // from 1
	exact, bySpan             float64
	degreeTS, degreeI, shares []float64
}{
	{298.15, []float64{0, -5, -3}, []float64{12, 10, 15}, -10, 20, 3, 2, 0.0131333281249666, 0.0135881500478748,
		[]float64{1.3221201041573e-6, 0.000209065782709786, 0.999789612097186}, []float64{0.000210387606847482, 0.966737112836507, 0.0330524995566454},
		[]float64{0.000210387606847482, 0.966737112836507, 0.0330524995566454}},
	{298.15, []float64{0, -8, -2, -12}, []float64{14, 9, 11, 6}, -18, 19, 3, 2, 0.0602489534172709, 0.0734793694100636,
		[]float64{0.000177327479642466, 0.028039773894432, 0.819977712883823, 0.151805185742102}, []float64{0.000178480325372793, 0.848160856499962, 3.27980086996491e-5, 0.151627865165965},
		[]float64{0.000178480325372793, 0.848160856499962, 3.27980086996491e-5, 0.151627865165965}},
	{298.15, []float64{0}, []float64{20}, -5, 20, 1, 1, 0.0135852114855873, 0.0135881500478748, []float64{1}, []float64{1}, []float64{1}},
	{373.15, []float64{0, -5, -3}, []float64{12, 10, 15}, -10, 20, 3, 2, 14.0563074330871, 15.0371544043746,
		[]float64{1.93123223213108e-5, 0.00110365115471389, 0.998877036522965}, []float64{0.00112293909485796, 0.935875443447866, 0.0630016174572764},
		[]float64{0.00112293909485796, 0.935875443447866, 0.0630016174572764}},
	{298.15, []float64{0, 3, -6}, []float64{18, 16, 9}, -4, 20, 1, 3, 0.012686872478583, 0.0135881500478748,
		[]float64{0.966731480579679, 0.0330663597756388, 0.000202159644682236}, []float64{0.033059454855911, 7.1494602189738e-6, 0.96693339568387},
		[]float64{0.033059454855911, 7.1494602189738e-6, 0.96693339568387}},
}

// linear makes the cycle S + I0 → … → I0 + P with everything at 1 mol/L.
func linear(t testing.TB, T float64, I, TS []float64, turn float64) *kinetics.Mechanism {
	species := []level{{"S", 0}, {"P", turn}}
	var steps []way
	for i, g := range I {
		species = append(species, level{fmt.Sprint("I", i+1), g})
		from, to := fmt.Sprint("I", i+1), fmt.Sprint("I", (i+1)%len(I)+1)
		if i == 0 {
			from += " + S"
		}
		if i == len(I)-1 {
			to += " + P"
		}
		steps = append(steps, way{fmt.Sprint("TS", i+1), from + " <=> " + to, TS[i]})
	}
	return mechanism(t, T, species, steps)
}

func TestCycles(t *testing.T) {
	for n, c := range cycles {
		t.Run(fmt.Sprint(n+1), func(t *testing.T) {
			m := linear(t, c.T, c.I, c.TS, c.turn)
			p := point(t, m, "P", map[string]float64{"S": 1, "P": 1}, map[string]float64{"I1": 1})
			p.Catalyst = index(t, m, "I1")
			r := analyse(t, m, c.T, p)
			near(t, "exact turnover", r.Turnover, c.exact, 1e-12)
			if r.Cycle == nil {
				t.Fatalf("no cycle: %s", r.NoCycle)
			}
			cy := r.Cycle
			near(t, "turns", cy.Turns, c.exact, 1e-12)
			near(t, "span", cy.Span, c.span*kcal, 1e-12)
			near(t, "span turnover", cy.SpanTurns, c.bySpan, 1e-12)
			near(t, "ΔG′", cy.Turn, c.turn*kcal, 1e-12)
			best := cy.Pairs[0]
			if got, want := cy.Levels[best.TS].Name+" "+cy.Levels[best.I].Name, fmt.Sprintf("TS%d I%d", c.tdts, c.tdi); got != want {
				t.Errorf("determining states %s, want %s", got, want)
			}
			if best.Wraps != (c.tdts < c.tdi) {
				t.Errorf("the pair wraps: %v", best.Wraps)
			}
			for _, l := range cy.Levels {
				var i int
				if l.Step {
					fmt.Sscanf(l.Name, "TS%d", &i)
					near(t, "turnover control of "+l.Name, l.Control, c.degreeTS[i-1], 1e-11)
					near(t, "X of "+l.Name, r.States[index(t, m, l.Name)].X, c.degreeTS[i-1], 1e-9)
				} else {
					fmt.Sscanf(l.Name, "I%d", &i)
					near(t, "turnover control of "+l.Name, l.Control, c.degreeI[i-1], 1e-11)
					near(t, "share of "+l.Name, l.Share, c.shares[i-1], 1e-11)
					// Raising an intermediate empties it.
					near(t, "X of "+l.Name, -r.States[index(t, m, l.Name)].X, c.degreeI[i-1], 1e-9)
				}
			}
		})
	}
}

// The relation TOF = (kB T/h) exp(−span/RT) at 298.15 K, evaluated.
func TestSpanTurnover(t *testing.T) {
	for _, c := range []struct{ span, perSecond, perHour float64 }{
		{15, 62.832706495194, 226197.743382699},
		{20, 0.0135881500478748, 48.9173401723491},
		{24, 1.58905887182105e-5, 0.0572061193855578},
		{25, 2.93856228742401e-6, 0.0105788242347264},
		{30, 6.35491092359641e-10, 2.28776793249471e-6},
	} {
		m := linear(t, 298.15, []float64{0}, []float64{c.span}, -30)
		p := point(t, m, "P", map[string]float64{"S": 1, "P": 1}, map[string]float64{"I1": 1})
		p.Catalyst = index(t, m, "I1")
		cy := analyse(t, m, 298.15, p).Cycle
		near(t, "per second", cy.SpanTurns, c.perSecond, 1e-12)
		near(t, "per hour", 3600*cy.SpanTurns, c.perHour, 1e-12)
	}
}

// Concentrations move levels by RT ln c: with S at 0.2 and P at 0.03 mol/L the
// exact sum over pairs is that of a profile shifted by hand.
func TestCycleAtConcentrations(t *testing.T) {
	const T, s, p, total = 320.0, 0.2, 0.03, 0.002
	RT := rate.R * T / kcal
	m := linear(t, T, []float64{0, -5, -3}, []float64{12, 10, 15}, -10)
	pr := point(t, m, "P", map[string]float64{"S": s, "P": p}, map[string]float64{"I1": total})
	pr.Catalyst = index(t, m, "I1")
	r := analyse(t, m, T, pr)
	// Level 1 has S beside it, TS1 and all that follow do not: shift those down to it.
	up := RT * math.Log(s)
	I := []float64{0, -5 - up, -3 - up}
	TS := []float64{12 - up, 10 - up, 15 - up}
	turn := -10 + RT*math.Log(p/s)
	sum, span := 0.0, math.Inf(-1)
	for i := range TS {
		for j := range I {
			d := TS[i] - I[j]
			if i < j {
				d += turn
			}
			sum += math.Exp(d / RT)
			span = math.Max(span, d)
		}
	}
	tof := rate.Boltzmann / rate.Planck * T * -math.Expm1(turn/RT) / sum
	near(t, "turnover", r.Turnover, tof, 1e-11)
	near(t, "rate", r.Rate, tof*total, 1e-11)
	near(t, "span", r.Cycle.Span, span*kcal, 1e-11)
	near(t, "ΔG′", r.Cycle.Turn, turn*kcal, 1e-11)
	for i, l := range r.Cycle.Levels {
		want := I[i/2]
		if l.Step {
			want = TS[i/2]
		}
		close(t, "level "+l.Name, l.G/kcal, want, 1e-11)
	}
}

// An off-cycle state takes the position of the one it branches from.
func TestOffCycleLevel(t *testing.T) {
	const T = 298.15
	m := mechanism(t, T, []level{{"S", 0}, {"P", -10}, {"L", 0}, {"cat", 0}, {"int", -2}, {"rest", -6}},
		[]way{{"TS1", "cat + S <=> int", 12}, {"TS2", "int <=> cat + P", 15}, {"TSo", "int + L <=> rest", 5}})
	p := point(t, m, "P", map[string]float64{"S": 0.5, "P": 0.1, "L": 0.04}, map[string]float64{"cat": 0.01})
	p.Catalyst = index(t, m, "cat")
	r := analyse(t, m, T, p)
	cy := r.Cycle
	if cy == nil {
		t.Fatal(r.NoCycle)
	}
	best := cy.Pairs[0]
	if got := cy.Levels[best.TS].Name + " " + cy.Levels[best.I].Name; got != "TS2 rest" {
		t.Errorf("determining states %s", got)
	}
	RT := rate.R * T / kcal
	near(t, "span", cy.Span/kcal, 15-(-6-RT*math.Log(0.04)), 1e-12)
	sumI, sumTS := 0.0, 0.0
	for _, l := range cy.Levels {
		if l.Step {
			sumTS += l.Control
			near(t, "X of "+l.Name, r.States[index(t, m, l.Name)].X, l.Control, 1e-9)
		} else {
			sumI += l.Control
			near(t, "X of "+l.Name, -r.States[index(t, m, l.Name)].X, l.Control, 1e-9)
			near(t, "share of "+l.Name, l.Share, l.Control, 1e-9)
		}
	}
	near(t, "sum over intermediates", sumI, 1, 1e-12)
	near(t, "sum over transition states", sumTS, 1, 1e-12)
	if r.Resting != index(t, m, "rest") {
		t.Errorf("resting state %d", r.Resting)
	}
	close(t, "order in L", order(t, m, r, "L"), -r.RestingShare, 1e-10)
	close(t, "order in the catalyst", order(t, m, r, "cat"), 1, 1e-12)
}

// A cycle whose turn goes uphill at these concentrations runs backwards.
func TestBackwards(t *testing.T) {
	m := linear(t, 298.15, []float64{0, -2}, []float64{12, 13}, -1)
	p := point(t, m, "P", map[string]float64{"S": 0.01, "P": 1}, map[string]float64{"I1": 0.01})
	p.Catalyst = index(t, m, "I1")
	r := analyse(t, m, 298.15, p)
	if r.Rate >= 0 || !r.Cycle.Backwards || !math.IsNaN(r.Cycle.Span) || len(r.Cycle.Pairs) > 0 || r.Cycle.Turn <= 0 {
		t.Errorf("rate %g, cycle %+v", r.Rate, r.Cycle)
	}
}

// Steps written against the turn, a first step that is not the catalyst's, and
// a step without return.
func TestTurnoverOrder(t *testing.T) {
	const T = 298.15
	species := []level{{"S", 0}, {"P", -10}, {"cat", 0}, {"a", -5}, {"b", -3}}
	m := mechanism(t, T, species, []way{{"TS2", "b <=> a", 10}, {"TS3", "b <=> cat + P", 15}, {"TS1", "a <=> cat + S", 12}})
	p := point(t, m, "P", map[string]float64{"S": 1, "P": 1}, map[string]float64{"cat": 1})
	p.Catalyst = index(t, m, "cat")
	r := analyse(t, m, T, p)
	near(t, "turnover", r.Turnover, cycles[0].exact, 1e-12)
	near(t, "span", r.Cycle.Span, 20*kcal, 1e-12)
	if got := fmt.Sprint(r.Cycle.Steps); got != "[2 0 1]" {
		t.Errorf("steps of the turn %s", got)
	}
	p.Turnover = []int{0, 1, 2}
	r = analyse(t, m, T, p)
	if got := r.Cycle.Levels[0].Name; got != "a" {
		t.Errorf("the first level is %s", got)
	}
	near(t, "span", r.Cycle.Span, 20*kcal, 1e-12)
	p.Turnover = []int{1, 0, 2}
	_, err := control.Analyse(context.Background(), m, T, p)
	if !errors.Is(err, control.ErrCycle) {
		t.Errorf("a turn in the wrong order: %v", err)
	}

	p.Turnover = nil
	m.Steps[1].Returns = false
	r = analyse(t, m, T, p)
	// No return from b: only what lies before TS3 slows it.
	RT := rate.R * T / kcal
	sum := 0.0
	for _, d := range []float64{12 - 0, 10 - 0, 15 - 0, 10 + 5, 15 + 5, 15 + 3} {
		sum += math.Exp(d / RT)
	}
	near(t, "turnover", r.Turnover, rate.Boltzmann/rate.Planck*T/sum, 1e-12)
	if !r.Cycle.OneWay {
		t.Error("a turn over a step without return counts as one that returns")
	}
	all := 0.0
	for _, l := range r.Cycle.Levels {
		all += l.Control
		near(t, "X of "+l.Name, math.Abs(r.States[index(t, m, l.Name)].X), l.Control, 1e-9)
	}
	near(t, "sum", all, 2, 1e-12)
}
