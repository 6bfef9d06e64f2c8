package kinetics_test

import (
	"fmt"
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"saddlebook/kinetics"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/thermo"
)

// isomers makes up a mechanism of reversible steps of one molecule, with loops.
func isomers(rng *rand.Rand) (*kinetics.Mechanism, float64) {
	const T = 298.15
	m := &kinetics.Mechanism{ID: "isomers", Temperature: T}
	n := 3 + rng.IntN(6)
	for i := range n {
		m.Species = append(m.Species, kinetics.Species{Name: fmt.Sprintf("S%d", i), Energy: thermo.Constant(7e4 * rng.Float64())})
	}
	add := func(i, j int) {
		ts := math.Max(m.Species[i].Energy.G, m.Species[j].Energy.G) + 1e4 + 6e4*rng.Float64()
		m.Steps = append(m.Steps, kinetics.Step{Name: fmt.Sprintf("T%d", len(m.Steps)), Returns: true, Energy: thermo.Constant(ts),
			From: []kinetics.Term{{Species: i, N: 1}}, To: []kinetics.Term{{Species: j, N: 1}}})
	}
	for i := 1; i < n; i++ {
		add(rng.IntN(i), i)
	}
	for range rng.IntN(n) {
		if i, j := rng.IntN(n), rng.IntN(n); i != j {
			add(i, j)
		}
	}
	return m, T
}

const wide = 300 // bits

func num(x float64) *big.Float { return new(big.Float).SetPrec(wide).SetFloat64(x) }

func op(f func(z, x, y *big.Float) *big.Float, x, y *big.Float) *big.Float {
	return f(new(big.Float).SetPrec(wide), x, y)
}

func plus(x, y *big.Float) *big.Float  { return op((*big.Float).Add, x, y) }
func less(x, y *big.Float) *big.Float  { return op((*big.Float).Sub, x, y) }
func times(x, y *big.Float) *big.Float { return op((*big.Float).Mul, x, y) }
func over(x, y *big.Float) *big.Float  { return op((*big.Float).Quo, x, y) }

// root returns the positive root of a·x² + b·x − c, all above 0.
func root(a, b, c *big.Float) *big.Float {
	d := plus(times(b, b), times(num(4), times(a, c)))
	d.Sqrt(d)
	return over(less(d, b), times(num(2), a))
}

// reversible builds a mechanism of reversible steps from energies (J/mol), every
// transition state 80 kJ/mol above its higher side.
func reversible(t *testing.T, T float64, names []string, g []float64, reactions ...string) *kinetics.Network {
	t.Helper()
	m := &kinetics.Mechanism{ID: "reversible", Temperature: T}
	for i, s := range names {
		m.Species = append(m.Species, kinetics.Species{Name: s, Energy: thermo.Constant(g[i])})
	}
	for i, text := range reactions {
		from, to, returns, err := kinetics.ParseReaction(text, names)
		if err != nil {
			t.Fatal(err)
		}
		level := func(side []kinetics.Term) float64 {
			sum := 0.0
			for _, x := range side {
				sum += float64(x.N) * g[x.Species]
			}
			return sum
		}
		m.Steps = append(m.Steps, kinetics.Step{Name: fmt.Sprintf("T%d", i), From: from, To: to, Returns: returns, Energy: thermo.Constant(max(level(from), level(to)) + 80e3)})
	}
	return network(t, m, T)
}

// Equilibria with a closed solution, in numbers of 300 bits: dimers, catalysts,
// ladders of oligomers, and products down to 1e-15 of the total and far below.
func TestPropertyEquilibriumClosed(t *testing.T) {
	const T = 298.15
	rng := rand.New(rand.NewPCG(107, 1))
	g := func(lnK float64) float64 { return -rate.R * T * lnK }
	K := func(g float64) *big.Float { return num(math.Exp(-g / (rate.R * T))) }
	check := func(what string, n *kinetics.Network, in []float64, want ...*big.Float) {
		t.Helper()
		eq, err := n.Equilibrium(in)
		if err != nil {
			t.Errorf("%s: %v", what, err)
			return
		}
		for i, w := range want {
			x, _ := w.Float64()
			if !within(eq.C[i], x, 1e-12) {
				t.Errorf("%s, charged %v: %s is %.17g mol/L, want %.17g", what, in, n.Names[i], eq.C[i], x)
			}
		}
	}
	for range 200 {
		c0 := math.Pow(10, -6+6*rng.Float64())
		k1, k2 := 90*rng.Float64()-45, 90*rng.Float64()-45 // ln K: 1e-19 to 1e19
		total := num(c0)

		// 2 A ⇌ A2.
		n := reversible(t, T, []string{"A", "A2"}, []float64{0, g(k1)}, "2 A <=> A2")
		a := root(times(num(2), K(n.G[1])), num(1), total)
		check("dimer", n, []float64{c0, 0}, a, times(K(n.G[1]), times(a, a)))

		// R ⇌ P as a trace, with a dimer of R beside it.
		n = reversible(t, T, []string{"R", "P", "D"}, []float64{0, g(-34.5), g(k1)}, "R <=> P", "2 R <=> D")
		r := root(times(num(2), K(n.G[2])), plus(num(1), K(n.G[1])), total)
		check("trace beside a dimer", n, []float64{0, c0, 0}, r, times(K(n.G[1]), r), times(K(n.G[2]), times(r, r)))

		// A + B ⇌ C.
		extra := math.Pow(10, -9+9*rng.Float64())
		n = reversible(t, T, []string{"A", "B", "C"}, []float64{0, 0, g(k1)}, "A + B <=> C")
		k := K(n.G[2])
		// a·(1 + k·b) = c0 with b = extra + a, exactly: the charge of B is c0 + extra.
		b0 := new(big.Float).SetPrec(wide).SetFloat64(c0 + extra)
		d := less(b0, total)
		a = root(k, plus(num(1), times(k, d)), total)
		check("adduct", n, []float64{c0, c0 + extra, 0}, a, plus(d, a), times(k, times(a, plus(d, a))))

		// R + C ⇌ RC ⇌ P + C: the catalyst holds some back and leaves P:R alone.
		cat := math.Pow(10, -8+7*rng.Float64())
		n = reversible(t, T, []string{"R", "C", "P", "RC"}, []float64{0, 0, g(k2), g(k1)}, "R + C <=> RC", "RC <=> P + C")
		kp, kc := K(n.G[2]), K(n.G[3])
		// With x free catalyst: R·(1 + kp + kc·x) = c0 and x·(1 + kc·R) = cat, so that
		// kc·x² + (1 + kp + kc·(c0 − cat))·x − cat·(1 + kp) = 0.
		b := plus(plus(num(1), kp), times(kc, less(total, num(cat))))
		x := root(kc, b, times(num(cat), plus(num(1), kp)))
		r = over(total, plus(plus(num(1), kp), times(kc, x)))
		check("catalyst", n, []float64{c0, cat, 0, 0}, r, x, times(kp, r), times(kc, times(r, x)))

		// A catalyst on both sides changes nothing but that it must be there.
		n = reversible(t, T, []string{"R", "P", "C"}, []float64{0, g(k1), 0}, "R + C <=> P + C")
		r = over(total, plus(num(1), K(n.G[1])))
		check("catalyst on both sides", n, []float64{c0, 0, cat}, r, times(K(n.G[1]), r), num(cat))
		check("no catalyst", n, []float64{c0, 0, 0}, total, num(0), num(0))

		// 3 A ⇌ A3 and a ladder, by Newton from above in long numbers.
		n = reversible(t, T, []string{"A", "A2", "A3", "A4"}, []float64{0, g(k1 / 2), g(k2 / 2), g((k1 + k2) / 2)}, "2 A <=> A2", "A + A2 <=> A3", "A3 + A <=> A4", "2 A2 <=> A4")
		a = num(c0)
		for range 600 {
			f, slope, power := less(num(0), total), num(0), num(1)
			for i := range 4 {
				m := num(float64(i + 1))
				slope = plus(slope, times(times(m, m), times(K(n.G[i]), power)))
				power = times(power, a)
				f = plus(f, times(m, times(K(n.G[i]), power)))
			}
			a = less(a, over(f, slope))
		}
		want := []*big.Float{a}
		for i := 1; i < 4; i++ {
			w := K(n.G[i])
			for range i + 1 {
				w = times(w, a)
			}
			want = append(want, w)
		}
		check("ladder", n, []float64{c0, 0, 0, 0}, want...)
	}
}

// Whatever the network, the composition found is the equilibrium: one step of
// Newton's method in long numbers, from where it stands, moves no concentration by
// more than 1e-10 of itself.
func TestPropertyEquilibriumAnyNetwork(t *testing.T) {
	rng := rand.New(rand.NewPCG(108, 1))
	worst, traces, networks := 0.0, 0, 0
	for c := range 400 {
		m, T := made(rng)
		n := network(t, m, T)
		in := charge(rng, len(n.Names))
		for i := range in { // all there, so that all can form
			in[i] = math.Max(in[i], 1e-7)
		}
		eq, err := n.Equilibrium(in)
		if err != nil {
			t.Errorf("network %d: %v", c, err)
			continue
		}
		networks++
		move := newton(n, eq, in)
		total := 0.0
		for _, x := range eq.C {
			total += x
		}
		for i, d := range move {
			worst = math.Max(worst, math.Abs(d))
			if eq.C[i] < 1e-15*total {
				traces++
			}
			if !(math.Abs(d) <= 1e-10) {
				t.Errorf("network %d: %s, %g mol/L, is off by %.1e of itself", c, n.Names[i], eq.C[i], d)
			}
		}
	}
	if networks < 390 || traces < 50 {
		t.Errorf("%d networks with %d traces: the test tests too little", networks, traces)
	}
	t.Logf("%d networks, %d concentrations below 1e-15 of the total, largest error %.1e", networks, traces, worst)
}

// newton returns by which share of itself each concentration would move.
func newton(n *kinetics.Network, eq *kinetics.Composition, in []float64) []float64 {
	size := len(n.Names)
	var reactions [][]int64
	for _, r := range n.Reactions {
		if r.Returns {
			reactions = append(reactions, netOf(r.From, r.To, size))
		}
	}
	// Independent reactions, at equilibrium in the logarithms ...
	var rows [][]*big.Float
	var independent [][]int64
	for _, net := range reactions {
		if len(cycles(append(independent, net))) > 0 {
			continue
		}
		independent = append(independent, net)
		row, off := make([]*big.Float, size+1), num(0)
		for i, x := range net {
			row[i] = num(float64(x))
			level := plus(num(eq.LnC[i]), over(num(n.G[i]), num(rate.R*n.T)))
			off = less(off, times(row[i], level))
		}
		row[size] = off
		rows = append(rows, row)
	}
	// ... and conserved sums, kept exactly.
	byspecies := make([][]int64, size)
	for i := range byspecies {
		for _, net := range independent {
			byspecies[i] = append(byspecies[i], net[i])
		}
	}
	kept := cycles(byspecies)
	if len(independent) == 0 {
		return make([]float64, size)
	}
	for _, w := range kept {
		row, off := make([]*big.Float, size+1), num(0)
		for i, x := range w {
			f := new(big.Float).SetPrec(wide).SetRat(x)
			row[i] = times(f, num(eq.C[i]))
			off = plus(off, times(f, less(num(in[i]), num(eq.C[i]))))
		}
		row[size] = off
		rows = append(rows, row)
	}
	return solve(rows)
}

// solve solves a square system, the right side in the last column.
func solve(a [][]*big.Float) []float64 {
	n := len(a)
	for col := range n {
		best := col
		for row := col; row < n; row++ {
			if new(big.Float).Abs(a[row][col]).Cmp(new(big.Float).Abs(a[best][col])) > 0 {
				best = row
			}
		}
		a[col], a[best] = a[best], a[col]
		for row := range n {
			if row == col || a[row][col].Sign() == 0 {
				continue
			}
			f := over(a[row][col], a[col][col])
			for j := col; j <= n; j++ {
				a[row][j] = less(a[row][j], times(f, a[col][j]))
			}
		}
	}
	x := make([]float64, n)
	for i := range x {
		x[i], _ = over(a[i][n], a[i][i]).Float64()
	}
	return x
}
