package kinetics

import (
	"encoding/json"
	"fmt"
	"math"
	"math/rand/v2"
	"reflect"
	"strings"
	"testing"

	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/spread"
	"saddlebook/kinetics/thermo"
)

const (
	kcal = 4184.0 // J/mol
	cal  = 4.184  // J/mol/K
	cold = 195.15 // K, -78 °C
)

// build makes a mechanism from energies in kcal/mol: "R" 0, and steps as
// "TSa: R + X <=> A" 14. Energies are constant.
func build(t testing.TB, T float64, species []state, steps []state) *Mechanism {
	t.Helper()
	m := &Mechanism{ID: "test", Temperature: T}
	for _, s := range species {
		m.Species = append(m.Species, Species{Name: s.text, Energy: thermo.Constant(s.g * kcal)})
	}
	for _, s := range steps {
		name, reaction, ok := strings.Cut(s.text, ":")
		if !ok {
			t.Fatalf("step %q has no name", s.text)
		}
		from, to, returns, err := ParseReaction(reaction, m.States()[:len(m.Species)])
		if err != nil {
			t.Fatal(err)
		}
		m.Steps = append(m.Steps, Step{Name: name, From: from, To: to, Returns: returns, Energy: thermo.Constant(s.g * kcal), Degeneracy: 1, Transmission: 1})
	}
	return m
}

type state struct {
	text string
	g    float64 // kcal/mol
}

func at(t testing.TB, m *Mechanism, T float64) *Network {
	t.Helper()
	n, err := m.At(T)
	if err != nil {
		t.Fatal(err)
	}
	return n
}

// addition is the mechanism of the manual: a 1,2- and a 1,4-adduct, invented.
func addition() *Mechanism {
	follow := func(h, s float64) thermo.Energy { return thermo.Following(h*kcal, s*cal) }
	sd := 0.3 * kcal
	return &Mechanism{
		ID: "addition", Title: "Addition", Temperature: cold,
		Species: []Species{
			{Name: "R", Label: "enone 3", Energy: follow(0, 0)},
			{Name: "X", Label: "nucleophile", Energy: follow(0, 0)},
			{Name: "A", Label: "1,2-adduct", Energy: follow(-11.5, -33)},
			{Name: "B", Label: "1,4-adduct", Energy: follow(-17, -34)},
		},
		Steps: []Step{
			{Name: "TSa", From: []Term{{0, 1}, {1, 1}}, To: []Term{{2, 1}}, Returns: true, Energy: follow(9, -24.6), Degeneracy: 1, Transmission: 1},
			{Name: "TSb", From: []Term{{0, 1}, {1, 1}}, To: []Term{{3, 1}}, Returns: true, Energy: follow(9.9, -26.1), Degeneracy: 1, Transmission: 1, SD: &sd},
		},
	}
}

func near(t *testing.T, what string, got, want, rel float64) {
	t.Helper()
	if !(math.Abs(got-want) <= rel*math.Abs(want)) {
		t.Errorf("%s = %.15g, want %.15g (to %g)", what, got, want, rel)
	}
}

func TestMechanismRoundTrip(t *testing.T) {
	m := addition()
	m.Common = []Common{{States: []int{4, 5}, SD: 1234.5678901234567}}
	m.Species[2].Forms = 2
	m.Species[3].Energy = thermo.Energy{Conformers: []thermo.Energy{thermo.Following(-1e-7, 0.1), thermo.Following(1.0/3, 2)}}
	m.Species[0].Standard = rate.Standard{Pressure: 101325}
	text, err := json.Marshal(m)
	if err != nil {
		t.Fatal(err)
	}
	var back Mechanism
	if err := json.Unmarshal(text, &back); err != nil {
		t.Fatal(err)
	}
	if !reflect.DeepEqual(*m, back) {
		t.Errorf("round trip changed the mechanism:\n%+v\n%+v", *m, back)
	}
}

func TestShifted(t *testing.T) {
	m := addition()
	n := at(t, m, 273.15)
	d := []float64{100, 0, -200, 0, 500, 0}
	s := at(t, m.Shifted(d), 273.15)
	for i := range n.G {
		near(t, n.Names[i], s.G[i], n.G[i]+d[i], 1e-12)
	}
	near(t, "TSa", s.Reactions[0].TS, n.Reactions[0].TS+500, 1e-12)
	if again := at(t, m, 273.15); !reflect.DeepEqual(again, n) {
		t.Error("Shifted changed the mechanism it came from")
	}
}

// A sampled transition state that falls below a side is raised to it, and counted.
func TestShiftedRaises(t *testing.T) {
	m := build(t, 298.15, []state{{"A", 0}, {"B", 5}}, []state{{"TS: A <=> B", 6}})
	s := m.Shifted([]float64{0, 0, -2 * kcal})
	r := at(t, s, 298.15).Reactions[0]
	if !r.Raised || r.BarrierBack != 0 {
		t.Errorf("raised %v, barrier back %g; want raised to the product", r.Raised, r.BarrierBack)
	}
	near(t, "barrier", r.Barrier, 5*kcal, 1e-12)
	near(t, "K from rates", r.Forward/r.Back, r.K, 1e-12)
	if _, err := m.At(298.15); err != nil {
		t.Error(err)
	}
}

func TestPlans(t *testing.T) {
	sd := func(x float64) *float64 { return &x }
	m := build(t, 298.15, []state{{"R", 0}, {"A", -3}, {"B", -5}}, []state{{"TSa: R <=> A", 20}, {"TSb: R <=> B", 21}})
	if p := m.Plans(); p != nil || m.HasErrors() {
		t.Errorf("plans without errors: %v", p)
	}
	m.Steps[0].SD = sd(2000)
	if p := m.Plans(); len(p) != 1 || p[0].Case != spread.Stated {
		t.Errorf("one uncertain transition state: %+v", p)
	}
	m.Steps[1].SD = sd(1000)
	m.Species[1].SD = sd(500)
	p := m.Plans()
	if len(p) != 2 || p[0].Case != spread.Independent || p[1].Case != spread.Shared {
		t.Fatalf("two uncertain transition states: %+v", p)
	}
	for _, plan := range p {
		for i, want := range []float64{0, 500, 0, 2000, 1000} {
			if got := plan.SD(i); math.Abs(got-want) > 1e-9 {
				t.Errorf("%v: sd of state %d is %g, want %g", plan.Case, i, got, want)
			}
		}
	}
	near(t, "correlation", p[1].Covariance(3, 4)/(2000*1000), 0.9, 1e-12)
	if c := p[0].Covariance(3, 4); c != 0 {
		t.Errorf("covariance %g in the independent case", c)
	}
	if c := p[1].Covariance(1, 3); c != 0 {
		t.Errorf("a species shares with a transition state: %g", c)
	}
	m.SharingStated = true
	if p := m.Plans(); len(p) != 1 || p[0].Case != spread.Stated {
		t.Errorf("sharing stated: %+v", p)
	}
	if got := strings.Join(m.ExactStates(), " "); got != "B" { // R stands at zero
		t.Errorf("exact states: %q", got)
	}
}

// random returns a reversible mechanism of unimolecular and bimolecular steps
// with energies in the usual range, every transition state above its sides.
func random(r *rand.Rand) *Mechanism {
	m := &Mechanism{Temperature: 298.15}
	species := 3 + r.IntN(5)
	for i := range species {
		m.Species = append(m.Species, Species{Name: fmt.Sprintf("S%d", i), Energy: thermo.Following((20*r.Float64()-10)*kcal, 40*(r.Float64()-0.5)*cal), Forms: r.IntN(3)})
		if r.IntN(3) == 0 {
			m.Species[i].Standard = rate.Standard{Pressure: 100000}
		}
	}
	for i := 0; i < species+2; i++ {
		a, b := r.IntN(species), r.IntN(species)
		if a == b {
			continue
		}
		s := Step{Name: fmt.Sprintf("TS%d", i), From: []Term{{a, 1}}, To: []Term{{b, 1}}, Returns: true,
			Degeneracy: float64(1 + r.IntN(4)), Transmission: 0.2 + 2*r.Float64(), Energy: thermo.Following((70+10*r.Float64())*kcal, 20*(r.Float64()-0.5)*cal)}
		if c := r.IntN(species); c != a && c != b && r.IntN(2) == 0 {
			s.From = append(s.From, Term{c, 1})
		}
		m.Steps = append(m.Steps, s)
	}
	return m
}
