package course

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"

	"saddlebook/kinetics"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/thermo"
)

const (
	kcal = 4184.0
	cal  = 4.184
	zero = 273.15
	room = 298.15
)

// addition is the worked example of the project's design: species R, X, A, B.
func addition() *kinetics.Mechanism {
	hs := func(h, s float64) thermo.Energy { return thermo.Following(h*kcal, s*cal) }
	return &kinetics.Mechanism{
		ID: "addition", Temperature: zero - 78,
		Species: []kinetics.Species{
			{Name: "R", Energy: hs(0, 0)}, {Name: "X", Energy: hs(0, 0)},
			{Name: "A", Energy: hs(-11.5, -33)}, {Name: "B", Energy: hs(-17, -34)},
		},
		Steps: []kinetics.Step{
			{Name: "TSa", From: side(0, 1), To: side(2), Returns: true, Energy: hs(9, -24.6)},
			{Name: "TSb", From: side(0, 1), To: side(3), Returns: true, Energy: hs(9.9, -26.1)},
		},
	}
}

func coldRun() Run {
	return Run{
		Charge: []float64{0.2, 0.22, 0, 0},
		Programme: []Leg{
			{To: zero - 78, Lasts: 7200}, {Ramp: true, To: zero + 20, Lasts: 3 * 3600}, {To: zero + 20, Lasts: 12 * 3600},
		},
		Products: []Product{{"A", []int{2}}, {"B", []int{3}}},
		Report:   []float64{1800, 7200}, Trace: 200,
	}
}

// side is one molecule of each, those named twice counted together.
func side(species ...int) []kinetics.Term {
	var out []kinetics.Term
next:
	for _, s := range species {
		for i := range out {
			if out[i].Species == s {
				out[i].N++
				continue next
			}
		}
		out = append(out, kinetics.Term{Species: s, N: 1})
	}
	return out
}

// network makes a mechanism of n species from rate constants at 298.15 K, held
// as barriers; energies of the species carry the equilibrium constants.
type network struct {
	m *kinetics.Mechanism
}

func newNetwork(n int) network {
	m := &kinetics.Mechanism{ID: "test", Temperature: room}
	for i := range n {
		m.Species = append(m.Species, kinetics.Species{Name: string(rune('A' + i))})
	}
	return network{m}
}

// step adds a step without return.
func (w network) step(k float64, from, to []kinetics.Term) {
	g, err := rate.Barrier(k, room)
	if err != nil {
		panic(err)
	}
	w.m.Steps = append(w.m.Steps, kinetics.Step{Name: "TS" + string(rune('a'+len(w.m.Steps))), From: from, To: to, Above: true, Energy: thermo.Constant(g)})
}

// exchange adds a reversible step; the energy of the last species of to is set.
func (w network) exchange(k, back float64, from, to []kinetics.Term) {
	w.step(k, from, to)
	w.m.Steps[len(w.m.Steps)-1].Returns = true
	g := -rate.R * room * math.Log(k/back)
	for _, t := range from {
		g += float64(t.N) * w.m.Species[t.Species].Energy.At(room)
	}
	last := to[len(to)-1]
	for _, t := range to[:len(to)-1] {
		g -= float64(t.N) * w.m.Species[t.Species].Energy.At(room)
	}
	w.m.Species[last.Species].Energy = thermo.Constant(g / float64(last.N))
}

func hold(seconds float64) []Leg { return []Leg{{To: room, Lasts: seconds}} }

func simulate(t testing.TB, m *kinetics.Mechanism, r Run) *Course {
	t.Helper()
	c, err := Simulate(context.Background(), m, r)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// integrate is simulate without the exact solution of first-order networks.
func integrate(t testing.TB, m *kinetics.Mechanism, r Run) *Course {
	t.Helper()
	p, err := Prepare(m, r)
	if err != nil {
		t.Fatal(err)
	}
	p.notFirst = "this is a test"
	c, err := p.Simulate(context.Background(), m)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

func last(c *Course) Point { return c.Report[len(c.Report)-1] }

// near reports a relative error above tol.
func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol*math.Abs(want)) {
		t.Errorf("%s = %.15g, want %.15g (relative error %.1e, at most %.0e)", what, got, want, math.Abs(got/want-1), tol)
	}
}

// random makes a mechanism whose steps balance: species are made of one to three
// units, and a step keeps their number.
func random(r *rand.Rand, n, steps int, oneWay float64) *kinetics.Mechanism {
	m := &kinetics.Mechanism{ID: "random", Temperature: room}
	size := make([]int, n)
	for i := range n {
		size[i] = 1 + r.IntN(2)
		if i < 2 {
			size[i] = 1
		}
		m.Species = append(m.Species, kinetics.Species{Name: string(rune('A' + i)), Energy: thermo.Constant(-20e3 * r.Float64() * float64(size[i]))})
	}
	pick := func(units int) []int {
		var s []int
		for units > 0 {
			if x := r.IntN(n); size[x] <= units {
				s = append(s, x)
				units -= size[x]
			}
		}
		return s
	}
	for len(m.Steps) < steps {
		units := 1 + r.IntN(2)
		from, to := side(pick(units)...), side(pick(units)...)
		net := make([]int, n)
		top, high := 0.0, 0.0
		for _, t := range from {
			net[t.Species] -= t.N
			top += float64(t.N) * m.Species[t.Species].Energy.At(room)
		}
		for _, t := range to {
			net[t.Species] += t.N
			high += float64(t.N) * m.Species[t.Species].Energy.At(room)
		}
		change := false
		for _, v := range net {
			change = change || v != 0
		}
		if !change {
			continue
		}
		m.Steps = append(m.Steps, kinetics.Step{Name: "TS" + string(rune('a'+len(m.Steps))), From: from, To: to,
			Returns: r.Float64() >= oneWay, Energy: thermo.Constant(math.Max(top, high) + 20e3 + 70e3*r.Float64())})
	}
	return m
}
