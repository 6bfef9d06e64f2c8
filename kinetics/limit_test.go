package kinetics

import (
	"errors"
	"fmt"
	"math"
	"math/big"
	"math/rand/v2"
	"strings"
	"testing"

	"saddlebook/kinetics/rate"
)

func limit(t testing.TB, m *Mechanism, T float64, from string, products ...string) *Limits {
	t.Helper()
	l, err := limitOf(m, T, from, nil, products...)
	if err != nil {
		t.Fatal(err)
	}
	return l
}

func limitOf(m *Mechanism, T float64, from string, held map[string]float64, products ...string) (*Limits, error) {
	n, err := m.At(T)
	if err != nil {
		return nil, err
	}
	l := Limit{From: m.Index(from)}
	for _, p := range products {
		l.Products = append(l.Products, m.Index(p))
	}
	if held != nil {
		l.Held = make([]float64, len(m.Species))
		for i, s := range m.Species {
			l.Held[i] = math.NaN()
			if c, ok := held[s.Name]; ok {
				l.Held[i] = c
			}
		}
	}
	return n.KineticLimit(l)
}

// exact solves the absorbing chain of unimolecular steps in rational numbers,
// by elimination on the rates as computed.
func exact(n *Network, from int, products []int) []float64 {
	absorbing := map[int]int{}
	for i, p := range products {
		absorbing[p] = i
	}
	k := len(n.Names)
	// x[s][p] = Σ_j P(s→j) x[j][p]: a linear system over the passing states.
	a := make([][]*big.Rat, k)
	for s := range a {
		a[s] = make([]*big.Rat, k+len(products))
		for j := range a[s] {
			a[s][j] = new(big.Rat)
		}
	}
	add := func(s, to int, rate float64) {
		if _, end := absorbing[s]; end || rate == 0 {
			return
		}
		r := new(big.Rat).SetFloat64(rate)
		a[s][s].Add(a[s][s], r)
		if p, end := absorbing[to]; end {
			a[s][k+p].Add(a[s][k+p], r)
		} else {
			a[s][to].Sub(a[s][to], r)
		}
	}
	for _, r := range n.Reactions {
		add(r.From[0].Species, r.To[0].Species, r.Forward)
		add(r.To[0].Species, r.From[0].Species, r.Back)
	}
	for _, p := range products {
		a[p][p].SetInt64(1)
	}
	for col := range k {
		pivot := a[col][col]
		if pivot.Sign() == 0 {
			for row := col + 1; row < k; row++ {
				if a[row][col].Sign() != 0 {
					a[col], a[row] = a[row], a[col]
					pivot = a[col][col]
					break
				}
			}
			if pivot.Sign() == 0 {
				continue // a state that nothing leaves
			}
		}
		for row := range k {
			if row == col || a[row][col].Sign() == 0 {
				continue
			}
			f := new(big.Rat).Quo(a[row][col], pivot)
			for j := range a[row] {
				a[row][j].Sub(a[row][j], new(big.Rat).Mul(f, a[col][j]))
			}
		}
	}
	out := make([]float64, len(products))
	for p := range products {
		if a[from][from].Sign() != 0 {
			out[p], _ = new(big.Rat).Quo(a[from][k+p], a[from][from]).Float64()
		}
	}
	return out
}

func TestKineticLimitAgainstRational(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	checked := 0
	for trial := 0; trial < 200; trial++ {
		k := 4 + r.IntN(4)
		var species, steps []state
		for i := range k {
			species = append(species, state{fmt.Sprintf("S%d", i), 30*r.Float64() - 20})
		}
		for i := 1; i < k; i++ { // a tree, so that all is reached, and some loops
			steps = append(steps, state{fmt.Sprintf("T%d: S%d <=> S%d", i, r.IntN(i), i), 12 + 25*r.Float64()})
		}
		for i := range 3 {
			a, b := r.IntN(k), r.IntN(k)
			if a != b {
				steps = append(steps, state{fmt.Sprintf("L%d: S%d <=> S%d", i, a, b), 12 + 25*r.Float64()})
			}
		}
		m := build(t, 298.15, species, steps)
		n := at(t, m, 298.15)
		products := []int{k - 1, k - 2}
		l, err := n.KineticLimit(Limit{From: 0, Products: products})
		if err != nil {
			continue // a product behind another one
		}
		checked++
		want := exact(n, 0, products)
		for i := range want {
			if !(math.Abs(l.Shares[i]-want[i]) <= 1e-10*want[i]+1e-300) {
				t.Fatalf("trial %d: share %d is %.15g, want %.15g", trial, i, l.Shares[i], want[i])
			}
		}
		near(t, "sum", l.Shares[0]+l.Shares[1]+l.Elsewhere, 1, 1e-14)
	}
	if checked < 150 {
		t.Errorf("only %d networks were checked", checked)
	}
}

// Two conformers, each with a product of its own. Curtin and Hammett: where
// they exchange fast the ratio is that of the transition states alone; where
// they hardly exchange it is that of the populations.
func TestCurtinHammett(t *testing.T) {
	const T = 298.15
	conformers := func(exchange float64) *Mechanism {
		return build(t, T, []state{{"C1", 0}, {"C2", 1}, {"P1", -10}, {"P2", -10}},
			[]state{{"X: C1 <=> C2", exchange}, {"T1: C1 -> P1", 21}, {"T2: C2 -> P2", 20}})
	}
	RT := rate.R * T
	fast := limit(t, conformers(8), T, "C1", "P1", "P2")
	near(t, "fast exchange P2:P1", fast.Shares[1]/fast.Shares[0], math.Exp(1*kcal/RT), 1e-6)
	near(t, "pre-equilibrium P2:P1", fast.PreEquilibrium[1]/fast.PreEquilibrium[0], math.Exp(1*kcal/RT), 1e-12)
	if !fast.FastExchange || fast.Sources != 2 || fast.NoExchange != "" {
		t.Errorf("fast exchange not seen: %+v", fast)
	}

	slow := conformers(40)
	n := at(t, slow, T)
	w := math.Exp(-1 * kcal / RT) // population of C2 over C1
	l, err := n.KineticLimit(Limit{From: 0, Products: []int{2, 3}, Start: []float64{1, w, 0, 0}})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "slow exchange P2:P1", l.Shares[1]/l.Shares[0], w, 1e-9)
	if l.FastExchange {
		t.Error("fast exchange claimed where there is none")
	}
	near(t, "pre-equilibrium stays", l.PreEquilibrium[1]/l.PreEquilibrium[0], math.Exp(1*kcal/RT), 1e-12)
}

// Exchange as fast as the fastest way on: the two ratios differ, and neither
// name fits. By hand: k(C1→C2) = k12, k(C2→C1) = k21, exits k1 and k2.
func TestBetweenTheLimits(t *testing.T) {
	const T = 298.15
	m := build(t, T, []state{{"C1", 0}, {"C2", 1}, {"P1", -10}, {"P2", -10}},
		[]state{{"X: C1 <=> C2", 20}, {"T1: C1 -> P1", 20.5}, {"T2: C2 -> P2", 20}})
	n := at(t, m, T)
	k12, k21, k1, k2 := n.Reactions[0].Forward, n.Reactions[0].Back, n.Reactions[1].Forward, n.Reactions[2].Forward
	l := limit(t, m, T, "C1", "P1", "P2")
	near(t, "P2:P1", l.Shares[1]/l.Shares[0], k12*k2/(k1*(k21+k2)), 1e-12)
	if l.FastExchange {
		t.Error("fast exchange claimed")
	}
}

// Two wells 40 kcal/mol deep hold nothing back in the end, and cost no digits.
func TestLimitKeepsDigits(t *testing.T) {
	const T = 195.15
	m := build(t, T, []state{{"R", 0}, {"D", -60}, {"I", -40}, {"A", -50}, {"B", -50}},
		[]state{{"Td: R <=> D", 5}, {"Ti: R <=> I", 4}, {"Ta: I <=> A", 18}, {"Tb: I <=> B", 20}})
	l := limit(t, m, T, "R", "A", "B")
	near(t, "A:B", l.Shares[0]/l.Shares[1], math.Exp(2*kcal/(rate.R*T)), 1e-12)
	near(t, "sum", l.Shares[0]+l.Shares[1], 1, 1e-15)
	if l.Elsewhere != 0 {
		t.Errorf("%g went elsewhere", l.Elsewhere)
	}
}

func TestPartners(t *testing.T) {
	const T = 298.15
	RT := rate.R * T
	competing := build(t, T, []state{{"R", 0}, {"X", 0}, {"A", -10}, {"B", -10}}, []state{{"Ta: R + X <=> A", 18}, {"Tb: R <=> B", 19}})
	through := build(t, T, []state{{"R", 0}, {"X", 0}, {"I", 2}, {"L", -3}, {"A", -10}, {"B", -10}},
		[]state{{"Ti: R + X <=> I", 15}, {"Ta: I <=> A + L", 18}, {"Tb: I <=> B + L", 19}})

	t.Run("cancels", func(t *testing.T) {
		l := limit(t, through, T, "R", "A", "B")
		near(t, "A:B", l.Shares[0]/l.Shares[1], math.Exp(1*kcal/RT), 1e-12)
	})
	t.Run("depends", func(t *testing.T) {
		_, err := limitOf(competing, T, "R", nil, "A", "B")
		var e *LimitError
		if !errors.As(err, &e) || e.Species != 1 || !strings.Contains(e.Fix, "state a charge for X") {
			t.Errorf("error %v", err)
		}
	})
	t.Run("stated", func(t *testing.T) {
		l, err := limitOf(competing, T, "R", map[string]float64{"X": 0.2}, "A", "B")
		if err != nil {
			t.Fatal(err)
		}
		near(t, "A:B", l.Shares[0]/l.Shares[1], 0.2*math.Exp(1*kcal/RT), 1e-12)
		if len(l.Assumes) != 1 || l.Assumes[0] != "X is held at 0.2 mol/L" {
			t.Errorf("assumes %q", l.Assumes)
		}
	})
	t.Run("absent", func(t *testing.T) {
		l, err := limitOf(competing, T, "R", map[string]float64{"X": 0}, "B")
		if err != nil {
			t.Fatal(err)
		}
		near(t, "B", l.Shares[0], 1, 1e-15)
	})
	t.Run("fragments", func(t *testing.T) {
		// R falls apart, and only one of the fragments leads to the product.
		m := build(t, T, []state{{"R", 0}, {"L", 0}, {"I", 2}, {"X", 0}, {"P", -10}, {"Q", -12}},
			[]state{{"T1: R <=> L + I", 15}, {"T2: I + X <=> P", 18}, {"T3: I + X <=> Q", 19}})
		l := limit(t, m, T, "R", "P", "Q")
		near(t, "P:Q", l.Shares[0]/l.Shares[1], math.Exp(1*kcal/RT), 1e-12)
	})
	t.Run("dimer of the product", func(t *testing.T) {
		m := build(t, T, []state{{"R", 0}, {"A", -10}, {"B", -10}, {"B2", -25}},
			[]state{{"Ta: R <=> A", 18}, {"Tb: R <=> B", 19}, {"Td: 2 B <=> B2", -5}})
		l := limit(t, m, T, "R", "A", "B")
		near(t, "A:B", l.Shares[0]/l.Shares[1], math.Exp(1*kcal/RT), 1e-12)
	})
	t.Run("catalyst", func(t *testing.T) {
		m := build(t, T, []state{{"R", 0}, {"K", 0}, {"RK", -3}, {"A", -10}, {"B", -10}},
			[]state{{"T1: R + K <=> RK", 8}, {"Ta: RK <=> A + K", 15}, {"Tb: RK -> B + K", 17}})
		l := limit(t, m, T, "R", "A", "B")
		near(t, "A:B", l.Shares[0]/l.Shares[1], math.Exp(2*kcal/RT), 1e-12)
		if l.Sources != 1 || !l.FastExchange {
			t.Errorf("one source: %+v", l)
		}
	})
}

func TestLimitRefuses(t *testing.T) {
	const T = 298.15
	second := build(t, T, []state{{"R", 0}, {"A", -5}, {"B", -5}}, []state{{"T1: 2 R <=> A", 15}, {"T2: R <=> B", 15}})
	dimer := build(t, T, []state{{"R", 0}, {"I", -1}, {"I2", -9}, {"A", -5}}, []state{{"T1: R <=> I", 15}, {"T2: 2 I <=> I2", 10}, {"T3: I -> A", 20}})
	apart := build(t, T, []state{{"R", 0}, {"A", -5}, {"S", 0}, {"B", -5}}, []state{{"T1: R <=> A", 15}, {"T2: S <=> B", 15}})
	behind := build(t, T, []state{{"R", 0}, {"A", -5}, {"B", -15}}, []state{{"T1: R <=> A", 15}, {"T2: A <=> B", 15}})
	for _, tt := range []struct {
		name     string
		m        *Mechanism
		products []string
		want     string
	}{
		{"second order", second, []string{"A", "B"}, "not first order in R (step T1, 2 R to A)"},
		{"dimer on the way", dimer, []string{"A"}, "not first order in R (step T2, 2 I to I2)"},
		{"apart", apart, []string{"A", "B"}, "no steps lead from R to B"},
		{"twice", second, []string{"B", "B"}, "B is listed twice"},
		{"itself", second, []string{"R"}, "R is the species followed"},
		{"none", second, nil, "no products are listed"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			_, err := limitOf(tt.m, T, "R", nil, tt.products...)
			var e *LimitError
			if !errors.As(err, &e) || !strings.Contains(e.Msg, tt.want) || e.Fix == "" {
				t.Errorf("error %v, want %q", err, tt.want)
			}
		})
	}
	l := limit(t, behind, T, "R", "A", "B")
	if l.Shares[0] != 1 || l.Shares[1] != 0 || len(l.Assumes) != 1 {
		t.Errorf("a product behind another: %+v", l)
	}
}

func TestElsewhere(t *testing.T) {
	const T = 298.15
	m := build(t, T, []state{{"R", 0}, {"A", -5}, {"W", -30}, {"V", -30}, {"D", -4}},
		[]state{{"Ta: R <=> A", 18}, {"Tw: R -> W", 18}, {"Tv: W <=> V", 0}, {"Td: R <=> D", 10}})
	l := limit(t, m, T, "R", "A")
	near(t, "A", l.Shares[0], 0.5, 1e-14)
	near(t, "elsewhere", l.Elsewhere, 0.5, 1e-14)
	if len(l.Assumes) != 1 || !strings.Contains(l.Assumes[0], "W") {
		t.Errorf("assumes %q", l.Assumes)
	}
	// Degeneracy counts as a path of its own, in both sets of shares.
	m.Steps[1].Degeneracy = 3
	l = limit(t, m, T, "R", "A")
	near(t, "A", l.Shares[0], 0.25, 1e-14)
	near(t, "A, fast exchange", l.PreEquilibrium[0], 0.25, 1e-14)
}

// Numbering species and steps anew changes no share.
func TestLimitRelabelled(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 8))
	species := []state{{"R", 0}, {"X", 0}, {"I", 1}, {"J", 2}, {"A", -8}, {"B", -9}}
	steps := []state{{"T1: R + X <=> I", 14}, {"T2: I <=> J", 16}, {"T3: I <=> A", 16.5}, {"T4: J <=> B", 16.2}, {"T5: R + X <=> J", 17}}
	want := limit(t, build(t, 250, species, steps), 250, "R", "A", "B")
	for trial := 0; trial < 30; trial++ {
		r.Shuffle(len(species), func(i, j int) { species[i], species[j] = species[j], species[i] })
		r.Shuffle(len(steps), func(i, j int) { steps[i], steps[j] = steps[j], steps[i] })
		got := limit(t, build(t, 250, species, steps), 250, "R", "A", "B")
		for i := range want.Shares {
			near(t, "share", got.Shares[i], want.Shares[i], 1e-12)
			near(t, "pre-equilibrium", got.PreEquilibrium[i], want.PreEquilibrium[i], 1e-12)
		}
	}
}

func TestNoExchange(t *testing.T) {
	const T = 298.15
	oneWay := build(t, T, []state{{"R", 0}, {"I", 0}, {"A", -5}, {"B", -5}}, []state{{"T1: R -> I", 15}, {"T2: R -> A", 15}, {"T3: I <=> A", 15}, {"T4: I <=> B", 15}})
	if l := limit(t, oneWay, T, "R", "A", "B"); l.PreEquilibrium != nil || !strings.Contains(l.NoExchange, "without return") || l.FastExchange {
		t.Errorf("%+v", l)
	}
	// Activation first, then exchange: what leads one way only is passed.
	first := build(t, T, []state{{"R", 0}, {"C1", -2}, {"C2", -1}, {"A", -9}, {"B", -9}},
		[]state{{"T0: R -> C1", 20}, {"X: C1 <=> C2", 5}, {"Ta: C1 <=> A", 16}, {"Tb: C2 <=> B", 15}})
	l := limit(t, first, T, "R", "A", "B")
	near(t, "B:A", l.PreEquilibrium[1]/l.PreEquilibrium[0], math.Exp(1*kcal/(rate.R*T)), 1e-12)
	if !l.FastExchange {
		t.Errorf("%+v", l)
	}
}

func BenchmarkKineticLimit(b *testing.B) {
	m := addition()
	for b.Loop() {
		n, err := m.At(cold)
		if err != nil {
			b.Fatal(err)
		}
		if _, err := n.KineticLimit(Limit{From: 0, Products: []int{2, 3}}); err != nil {
			b.Fatal(err)
		}
	}
}

// With a partner in the exchange the pre-equilibrium needs its concentration
// only where the powers of it differ.
func TestExchangeWithPartners(t *testing.T) {
	const T = 298.15
	RT := rate.R * T
	// C1 + X <=> C2, then C1 + X -> A and C2 -> B: X stands in both.
	m := build(t, T, []state{{"C1", 0}, {"X", 0}, {"C2", 1}, {"A", -9}, {"B", -9}},
		[]state{{"X1: C1 + X <=> C2", 8}, {"Ta: C1 + X -> A", 20}, {"Tb: C2 -> B", 19}})
	l := limit(t, m, T, "C1", "A", "B")
	near(t, "B:A", l.PreEquilibrium[1]/l.PreEquilibrium[0], math.Exp(1*kcal/RT), 1e-12)
	near(t, "limit B:A", l.Shares[1]/l.Shares[0], math.Exp(1*kcal/RT), 1e-6)

	// A loop C1 + X <=> C2 + Y, C2 <=> C1 turns X into Y.
	loop := build(t, T, []state{{"C1", 0}, {"X", 0}, {"C2", 1}, {"Y", -4}, {"A", -9}, {"B", -9}},
		[]state{{"X1: C1 + X <=> C2 + Y", 12}, {"X2: C2 <=> C1", 13}, {"Ta: C1 -> A", 20}, {"Tb: C2 -> B", 19}})
	got, err := limitOf(loop, T, "C1", map[string]float64{"X": 0.1, "Y": 0.1}, "A", "B")
	if err != nil {
		t.Fatal(err)
	}
	if got.PreEquilibrium != nil || !strings.Contains(got.NoExchange, "loop") {
		t.Errorf("%+v", got)
	}
	near(t, "sum", got.Shares[0]+got.Shares[1], 1, 1e-14)
	if len(got.Assumes) != 2 {
		t.Errorf("assumes %q", got.Assumes)
	}
}

func TestStart(t *testing.T) {
	const T = 298.15
	m := build(t, T, []state{{"R", 0}, {"S", 0}, {"A", -9}, {"B", -9}, {"W", -20}},
		[]state{{"Ta: R -> A", 20}, {"Tb: S -> B", 20}, {"Tw: S -> W", 20}, {"Tv: R -> B", 60}})
	n := at(t, m, T)
	l, err := n.KineticLimit(Limit{From: 0, Products: []int{2, 3}, Start: []float64{2, 1, 1, 0, 0}})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "A", l.Shares[0], 0.75, 1e-12)
	near(t, "B", l.Shares[1], 0.125, 1e-12)
	near(t, "elsewhere", l.Elsewhere, 0.125, 1e-12)
	for _, bad := range [][]float64{{0, 0, 0, 0, 0}, {-1, 0, 0, 0, 0}, {math.NaN(), 0, 0, 0, 0}} {
		var e *LimitError
		if _, err := n.KineticLimit(Limit{From: 0, Products: []int{2}, Start: bad}); !errors.As(err, &e) {
			t.Errorf("start %v: error %v", bad, err)
		}
	}
}
