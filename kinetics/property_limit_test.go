package kinetics_test

import (
	"fmt"
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"saddlebook/kinetics"
	"saddlebook/kinetics/firstorder"
)

// way is a first-order step between two carriers; its constant is exact.
type way struct {
	from, to int
	k        *big.Rat
}

// rationalShares solves the absorbing chain in rational numbers: the share of each
// product, and what ends elsewhere.
func rationalShares(carriers int, ways []way, start []float64, products []int) []*big.Rat {
	product := make([]bool, carriers)
	for _, p := range products {
		product[p] = true
	}
	arrives := append([]bool(nil), product...) // can still become a product
	for range carriers {
		for _, w := range ways {
			if !product[w.from] && arrives[w.to] {
				arrives[w.from] = true
			}
		}
	}
	// x[s] is the share of each product that s becomes: a·x = b, state by state.
	a := make([][]*big.Rat, carriers)
	for s := range a {
		a[s] = make([]*big.Rat, carriers+len(products))
		for j := range a[s] {
			a[s][j] = new(big.Rat)
		}
		if product[s] || !arrives[s] {
			a[s][s].SetInt64(1)
		}
	}
	for i, p := range products {
		a[p][carriers+i].SetInt64(1)
	}
	for _, w := range ways {
		if !product[w.from] && arrives[w.from] {
			a[w.from][w.from].Add(a[w.from][w.from], w.k)
			a[w.from][w.to].Sub(a[w.from][w.to], w.k)
		}
	}
	for col := range carriers {
		for row := col; row < carriers; row++ {
			if a[row][col].Sign() != 0 {
				a[row], a[col] = a[col], a[row]
				break
			}
		}
		for row := range carriers {
			if row == col || a[row][col].Sign() == 0 {
				continue
			}
			f := new(big.Rat).Quo(a[row][col], a[col][col])
			for j := range a[row] {
				a[row][j] = new(big.Rat).Sub(a[row][j], new(big.Rat).Mul(f, a[col][j]))
			}
		}
	}
	shares := make([]*big.Rat, len(products)+1)
	for i := range shares {
		shares[i] = new(big.Rat)
	}
	total := new(big.Rat)
	for s, c := range start {
		x := new(big.Rat).SetFloat64(c)
		total.Add(total, x)
		shares[len(products)].Add(shares[len(products)], x)
		for i := range products {
			y := new(big.Rat).Quo(a[s][carriers+i], a[s][s])
			y.Mul(y, x)
			shares[i].Add(shares[i], y)
			shares[len(products)].Sub(shares[len(products)], y)
		}
	}
	for _, s := range shares {
		s.Quo(s, total)
	}
	return shares
}

// chainOf makes up a mechanism of first order in its carriers C0, C1, ..., with
// partners X and Y at stated concentrations, from measured constants alone. ways
// has them as rational numbers, the concentrations multiplied in.
func chainOf(rng *rand.Rand) (m *kinetics.Mechanism, ways []way, held []float64) {
	const T = 298.15
	carriers := 3 + rng.IntN(5)
	m = &kinetics.Mechanism{ID: "chain", Temperature: T}
	for i := range carriers {
		m.Species = append(m.Species, kinetics.Species{Name: fmt.Sprintf("C%d", i), Unknown: true})
	}
	m.Species = append(m.Species, kinetics.Species{Name: "X", Unknown: true}, kinetics.Species{Name: "Y", Unknown: true})
	held = make([]float64, carriers+2)
	for i := range held {
		held[i] = math.NaN()
	}
	for i := range 2 {
		held[carriers+i] = math.Pow(10, -6+8*rng.Float64())
	}
	add := func(from, to int, returns bool) {
		s := kinetics.Step{Name: fmt.Sprintf("T%d", len(m.Steps)), Returns: returns,
			From: []kinetics.Term{{Species: from, N: 1}}, To: []kinetics.Term{{Species: to, N: 1}}}
		law := &kinetics.Law{Kind: kinetics.Measured}
		s.Law = law
		constant := func(side *[]kinetics.Term, from, to int) *kinetics.Constant {
			k := math.Pow(10, -15+30*rng.Float64())
			exact := new(big.Rat).SetFloat64(k)
			if p := rng.IntN(4); p < 2 {
				*side = append(*side, kinetics.Term{Species: carriers + p, N: 1})
				exact.Mul(exact, new(big.Rat).SetFloat64(held[carriers+p]))
			}
			ways = append(ways, way{from, to, exact})
			return &kinetics.Constant{K: k, At: T}
		}
		law.Forward = constant(&s.From, from, to)
		if returns {
			law.Back = constant(&s.To, to, from)
		}
		m.Steps = append(m.Steps, s)
	}
	for i := 1; i < carriers; i++ { // a tree with returns, which no constants can contradict
		add(rng.IntN(i), i, rng.IntN(5) > 0)
	}
	for range 1 + rng.IntN(4) { // loops, one way only
		if i, j := rng.IntN(carriers), rng.IntN(carriers); i != j {
			add(i, j, false)
		}
	}
	return m, ways, held
}

// The kinetic limit against rational numbers, with constants over 30 decades that
// are known exactly, partners, several carriers at the start, loops, and ends that
// are no listed product.
func TestPropertyLimitIsRational(t *testing.T) {
	rng := rand.New(rand.NewPCG(105, 1))
	checked, traces, elsewhere, worst := 0, 0, 0, 0.0
	for c := range 600 {
		m, ways, held := chainOf(rng)
		carriers := len(m.Species) - 2
		n := network(t, m, m.Temperature)
		start := make([]float64, len(m.Species))
		p := rng.Perm(carriers)
		start[p[0]] = 1
		if rng.IntN(2) == 0 {
			start[p[1]] = math.Pow(10, -9*rng.Float64())
		}
		products := p[2:min(4, carriers)]
		l, err := n.KineticLimit(kinetics.Limit{From: p[0], Products: products, Start: start, Held: held})
		if err != nil {
			continue // a product that nothing leads to
		}
		checked++
		want := rationalShares(carriers, ways, start[:carriers], products)
		for i, w := range want {
			x, _ := w.Float64()
			got := l.Elsewhere
			if i < len(products) {
				got = l.Shares[i]
			} else if x > 0 {
				elsewhere++
			}
			if x > 0 && x < 1e-12 {
				traces++
			}
			if !within(got, x, 1e-12) {
				t.Errorf("network %d: share %d is %.17g, in rational numbers %.17g", c, i, got, x)
			}
			if x > 0 {
				worst = math.Max(worst, math.Abs(got-x)/x)
			}
		}
	}
	if checked < 300 || traces < 50 || elsewhere < 50 {
		t.Errorf("%d networks, %d shares below 1e-12, %d that end elsewhere: the test tests too little", checked, traces, elsewhere)
	}
	t.Logf("%d networks, %d shares below 1e-12, %d that end elsewhere, worst relative error %.1e", checked, traces, elsewhere, worst)
}

// Two roads to the same ends: the exact time course of a first-order network, with
// the steps out of the products left out, ends at the kinetic limit; with them, at
// the equilibrium.
func TestPropertyCourseEnds(t *testing.T) {
	rng := rand.New(rand.NewPCG(106, 1))
	limits, rests := 0, 0
	for c := range 200 {
		m, T := isomers(rng)
		n := network(t, m, T)
		size := len(m.Species)
		start := make([]float64, size)
		start[0] = 0.3
		products := []int{size - 1, size - 2}
		course := func(stopped ...int) []float64 {
			var list []firstorder.Exchange
			for _, r := range n.Reactions {
				x := firstorder.Exchange{From: r.From[0].Species, To: r.To[0].Species, LnForward: r.LnForward, LnBack: r.LnBack}
				for _, p := range stopped {
					if x.From == p {
						x.LnForward = math.Inf(-1)
					}
					if x.To == p {
						x.LnBack = math.Inf(-1)
					}
				}
				list = append(list, x)
			}
			chain, err := firstorder.New(size, list)
			if err != nil {
				t.Fatal(err)
			}
			out := make([]float64, size)
			chain.Rest(start, out)
			return out
		}
		if l, err := n.KineticLimit(kinetics.Limit{From: 0, Products: products}); err == nil {
			limits++
			end := course(products...)
			for i, p := range products {
				if !within(end[p]/start[0], l.Shares[i], 1e-11) {
					t.Errorf("network %d: the course ends with a share of %g, the kinetic limit is %g", c, end[p]/start[0], l.Shares[i])
				}
			}
		}
		eq, err := n.Equilibrium(start)
		if err != nil {
			t.Fatal(err)
		}
		rests++
		for i, x := range course() {
			if !within(x, eq.C[i], 1e-10) {
				t.Errorf("network %d: the course ends with %g of %s, the equilibrium is %g", c, x, n.Names[i], eq.C[i])
			}
		}
	}
	if limits < 100 || rests < 100 {
		t.Errorf("%d limits and %d equilibria: the test tests too little", limits, rests)
	}
}
