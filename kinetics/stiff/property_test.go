package stiff

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
)

// detailed draws a network that obeys detailed balance: species with energies
// (in RT), steps between them through barriers, some with a common partner, so
// that the equilibrium is known up to the conserved sums. Rate constants lie
// between 1e-12 and 1e13.
func detailed(r *rand.Rand, n, m int) []step {
	g := make([]float64, n)
	for i := range g {
		g[i] = 12 * r.Float64()
	}
	var out []step
	put := func(lhs, rhs []int) {
		a, b := 0.0, 0.0
		for _, s := range lhs {
			a += g[s]
		}
		for _, s := range rhs {
			b += g[s]
		}
		top := max(a, b) + 55*r.Float64()
		k := func(from float64) float64 { return math.Max(1e13*math.Exp(from-top), 1e-12) }
		kf, kb := k(a), k(b)
		// keep the balance exact where the floor cut in
		if kf == 1e-12 || kb == 1e-12 {
			kf = 1e-6
			kb = kf * math.Exp(b-a)
		}
		out = append(out, step{kf, lhs, rhs}, step{kb, rhs, lhs})
	}
	for i := 1; i < n; i++ { // all connected
		put([]int{r.IntN(i)}, []int{i})
	}
	for range m {
		a, b, c, d := r.IntN(n), r.IntN(n), r.IntN(n), r.IntN(n)
		put([]int{a, b}, []int{c, d})
	}
	return out
}

// TestTolerance: the answer at a loose tolerance differs from that at a tight
// one by little more than the loose tolerance, on networks 25 decades wide.
func TestTolerance(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 8))
	for i := range 30 {
		n := 3 + r.IntN(8)
		sys, k := build(t, n, detailed(r, n, r.IntN(8)))
		start := make([]float64, n)
		start[0], start[n-1] = 1, 0.3
		at := math.Pow(10, -6+12*r.Float64())
		p := &Problem{To: at, Start: start, Rates: k}
		loose, s := end(t, sys, Options{RTol: 1e-5, ATol: 1e-17}, p)
		tight, _ := end(t, sys, Options{RTol: 1e-9, ATol: 1e-21}, p)
		for j := range loose {
			if e := math.Abs(loose[j]-tight[j]) / (tight[j] + 1e-14); !(e <= 3e-4) {
				t.Errorf("network %d (%d species), t = %g: y[%d] = %g and %g at the two tolerances\n%+v", i, n, at, j, loose[j], tight[j], s.Stats())
			}
		}
	}
}

// TestEquilibrium: at long times detailed balance holds in every step.
func TestEquilibrium(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 10))
	for i := range 30 {
		n := 3 + r.IntN(7)
		steps := detailed(r, n, r.IntN(6))
		sys, k := build(t, n, steps)
		start := make([]float64, n)
		start[0] = 1
		y, _ := end(t, sys, Options{RTol: 1e-8, ATol: 1e-20}, &Problem{To: 1e20, Start: start, Rates: k})
		for j := 0; j < len(steps); j += 2 {
			v := func(s step) float64 {
				p := s.k
				for _, a := range s.lhs {
					p *= y[a]
				}
				return p
			}
			near(t, fmt.Sprintf("network %d, step %d: forward over back", i, j/2), v(steps[j])/v(steps[j+1]), 1, 1e-6, "detailed balance")
		}
	}
}

// TestLarge: 120 species over 25 decades, by either method. At the finer
// tolerance both need the careful system, sparse.
func TestLarge(t *testing.T) {
	r := rand.New(rand.NewPCG(11, 12))
	const n = 120
	sys, k := build(t, n, detailed(r, n, 130))
	start := make([]float64, n)
	start[0] = 1
	p := &Problem{To: 1e5, Start: start, Rates: k}
	runs := map[string][]float64{}
	for _, multi := range []bool{true, false} {
		for _, rtol := range []float64{1e-4, 1e-8} {
			s, err := NewSolver(sys, Options{RTol: rtol, ATol: 1e-10 * rtol})
			if err != nil {
				t.Fatal(err)
			}
			if !multi {
				s.multi = nil
			}
			if err := s.Run(context.Background(), p, nil); err != nil {
				t.Fatal(err)
			}
			y, sum := make([]float64, n), 0.0
			s.Y(y)
			for _, v := range y {
				sum += v
			}
			near(t, fmt.Sprintf("multistep %v, rtol %g: sum", multi, rtol), sum, 1, 1e-13, "conservation")
			st := s.Stats()
			if st.Multistep > 0 != multi || (st.Rebuilds > 0) != (rtol < 1e-7) {
				t.Errorf("multistep %v, rtol %g: %+v", multi, rtol, st)
			}
			t.Logf("%+v", st)
			runs[fmt.Sprint(multi, rtol)] = y
		}
	}
	for _, pair := range []struct {
		a, b string
		rel  float64
	}{{"true 0.0001", "false 1e-08", 1e-3}, {"false 0.0001", "true 1e-08", 1e-3}, {"true 1e-08", "false 1e-08", 1e-7}} {
		for j, y := range runs[pair.a] {
			if w := runs[pair.b][j]; !(math.Abs(y-w) <= pair.rel*(w+1e-12)) {
				t.Errorf("y[%d] = %g by %s, %g by %s", j, y, pair.a, w, pair.b)
			}
		}
	}
}

// TestNegativeNever: a fast second-order removal that runs a component down to
// nothing, with steps that would overshoot.
func TestNegativeNever(t *testing.T) {
	sys, k := build(t, 3, []step{{1e8, []int{0, 1}, []int{2}}, {1e-3, []int{2}, []int{1}}})
	for _, a := range []float64{0.5, 1, 1.5} {
		lowest := 0.0
		s, err := NewSolver(sys, Options{RTol: 1e-3, ATol: 1e-9})
		if err != nil {
			t.Fatal(err)
		}
		y := make([]float64, 3)
		err = s.Run(context.Background(), &Problem{To: 1e4, Start: []float64{a, 1, 0}, Rates: k}, func(st *Step) error {
			st.At(st.T1, y)
			for _, v := range y {
				lowest = min(lowest, v)
			}
			near(t, "B + C", y[1]+y[2], 1, 1e-14, "conservation at every step")
			return nil
		})
		if err != nil {
			t.Fatal(err)
		}
		if lowest < -1e-9 || s.Stats().Lowest != lowest {
			t.Errorf("lowest concentration %g, reported as %g; tolerance 1e-9", lowest, s.Stats().Lowest)
		}
	}
}

// TestSameBytes: a solver gives the same numbers on its second run, whatever
// it did in between.
func TestSameBytes(t *testing.T) {
	p := testProblems()[3]
	sys, k := build(t, p.n, p.steps)
	s, err := NewSolver(sys, Options{RTol: 1e-9, ATol: 1e-24})
	if err != nil {
		t.Fatal(err)
	}
	var got [3][]float64
	for i := range got {
		run := &Problem{To: p.t, Start: p.start, Rates: k}
		if i == 1 {
			run.Removals = []Removal{{0, 30, 2, 1}}
		}
		if err := s.Run(context.Background(), run, nil); err != nil {
			t.Fatal(err)
		}
		got[i] = make([]float64, p.n)
		s.Y(got[i])
	}
	for j := range got[0] {
		if got[0][j] != got[2][j] {
			t.Errorf("y[%d] = %g, then %g", j, got[0][j], got[2][j])
		}
	}
}

// TestRowExchange: when diagonal pivots fail the factorisation exchanges rows
// and the answer stays right.
func TestRowExchange(t *testing.T) {
	o := newOrdering(3, []int{1, 3, 5, 7}, nil)
	jac := make([]float64, len(o.cols))
	set := func(i, j int32, v float64) { jac[o.find(o.place[i], o.place[j])] = v }
	// shift - J with a pivot that vanishes: J = [[1 2 0] [3 1 1] [0 5 4]], shift 1.
	set(0, 0, 1)
	set(0, 1, 2)
	set(1, 0, 3)
	set(1, 1, 1)
	set(1, 2, 1)
	set(2, 1, 5)
	set(2, 2, 4)
	s := newSparseLU(o, 100)
	s.load(jac)
	s.shift(1)
	if s.factor() {
		t.Fatal("a vanishing pivot passed")
	}
	sys, k := build(t, 3, chain(1, 1))
	sol, err := NewSolver(sys, Options{})
	if err != nil {
		t.Fatal(err)
	}
	_ = k
	e := &sol.e
	e.sparse, e.order, e.jac = s, o, jac
	e.method = &tableau{gamma: 1}
	if !e.factor(1) || !e.byRows {
		t.Fatal("no row exchange")
	}
	// (1 - J) x = b with x = (1, 2, 3): row 0: -2*2; row 1: -3 - 3; row 2: -10 - 9
	b := make([]float64, 3)
	for i, v := range []float64{-4, -6, -19} {
		b[o.place[i]] = v
	}
	e.solve(b)
	for i, w := range []float64{1, 2, 3} {
		near(t, fmt.Sprintf("x[%d]", i), b[o.place[i]], w, 1e-14, "by construction")
	}
}

// TestSparse solves random sparse systems, with a list of operations and
// without, as a full matrix does.
func TestSparse(t *testing.T) {
	r := rand.New(rand.NewPCG(11, 12))
	for i := range 40 {
		n := 1 + r.IntN(60)
		seen := map[int]bool{}
		var positions []int
		for range n * (1 + r.IntN(5)) {
			row, col := r.IntN(n), r.IntN(n)
			for _, p := range []int{row*n + col, col*n + row}[:1+r.IntN(2)] {
				if row != col && !seen[p] {
					seen[p] = true
					positions = append(positions, p)
				}
			}
		}
		var first []int
		if i%3 == 0 {
			first = r.Perm(n)[:n/4]
		}
		o := newOrdering(n, positions, first)
		s, full := newSparseLU(o, 1e9), newDenseLU(n)
		jac := make([]float64, len(o.cols))
		set := func(row, col int32, x float64) {
			jac[o.find(row, col)] = -x
			full.val[int(row)*n+int(col)] = x
		}
		for _, p := range positions {
			set(o.place[p/n], o.place[p%n], r.NormFloat64())
		}
		for i := range int32(n) {
			set(i, i, 10+10*r.Float64())
		}
		s.load(jac)
		if i%2 == 0 {
			s.to = nil
		}
		if !s.factor() || !full.factor() {
			t.Fatalf("matrix %d: no factors", i)
		}
		b, want := make([]float64, n), make([]float64, n)
		for i := range b {
			b[i] = r.NormFloat64()
			want[i] = b[i]
		}
		s.solve(b)
		full.solve(want)
		for j := range b {
			if !(math.Abs(b[j]-want[j]) < 1e-10) {
				t.Errorf("matrix %d: x[%d] = %g, want %g as by the full matrix", i, j, b[j], want[j])
			}
		}
	}
}

// TestSlopesStiff: slopes by ln k of random networks 25 decades wide, in which
// fast exchange needs the careful system, equal central differences.
func TestSlopesStiff(t *testing.T) {
	r := rand.New(rand.NewPCG(13, 14))
	rebuilt := 0
	for i := range 12 {
		n := 3 + r.IntN(5)
		steps := detailed(r, n, 1+r.IntN(5))
		sys, k := build(t, n, steps)
		start := make([]float64, n)
		start[0], start[n-1] = 1, 0.3
		// One barrier moves: both ways of a step, so that detailed balance stays.
		which := 2 * r.IntN(len(steps)/2)
		opt := Options{RTol: 1e-10, ATol: 1e-22}
		p := Problem{To: math.Pow(10, -4+8*r.Float64()), Start: start, Rates: k,
			Params: []Param{{Weights: []Weight{{which, 1}, {which + 1, 1}}}}}
		at := []float64{p.To}
		c, err := Solve(context.Background(), sys, opt, p, at)
		if err != nil {
			t.Fatal(err)
		}
		rebuilt += c.Stats.Rebuilds
		const d = 1e-3
		var side [2][]float64
		for x, sgn := range []float64{-1, 1} {
			moved := append(Constant(nil), k...)
			moved[which] *= math.Exp(sgn * d)
			moved[which+1] *= math.Exp(sgn * d)
			q, err := Solve(context.Background(), sys, opt, Problem{To: p.To, Start: start, Rates: moved}, nil)
			if err != nil {
				t.Fatal(err)
			}
			side[x] = q.Final
		}
		for sp := range start {
			diff := (side[1][sp] - side[0][sp]) / (2 * d)
			if got := c.Slopes[0][0][sp]; !(math.Abs(got-diff) <= 1e-5*math.Abs(diff)+1e-6*c.Final[sp]+1e-20) {
				t.Errorf("network %d, t = %g, species %d at %g: slope %.9g, central difference %.9g", i, p.To, sp, c.Final[sp], got, diff)
			}
		}
	}
	if rebuilt == 0 {
		t.Error("no network needed the careful system")
	}
}

// TestRelabelledRandom: other numbers for species and reactions change nothing.
func TestRelabelledRandom(t *testing.T) {
	r := rand.New(rand.NewPCG(15, 16))
	for i := range 20 {
		n := 3 + r.IntN(8)
		steps := detailed(r, n, 1+r.IntN(8))
		start := make([]float64, n)
		start[0], start[n-1] = 1, 0.3
		at := math.Pow(10, -4+8*r.Float64())
		opt := Options{RTol: 1e-8, ATol: 1e-20}
		sys, k := build(t, n, steps)
		want, _ := end(t, sys, opt, &Problem{To: at, Start: start, Rates: k})
		name := r.Perm(n)
		rename := func(in []int) (out []int) {
			for _, a := range in {
				out = append(out, name[a])
			}
			return out
		}
		var other []step
		for _, j := range r.Perm(len(steps)) {
			other = append(other, step{steps[j].k, rename(steps[j].lhs), rename(steps[j].rhs)})
		}
		first := make([]float64, n)
		for j, y := range start {
			first[name[j]] = y
		}
		sys, k = build(t, n, other)
		got, _ := end(t, sys, opt, &Problem{To: at, Start: first, Rates: k})
		for j, w := range want {
			if g := got[name[j]]; !(math.Abs(g-w) <= 1e-6*w+1e-18) {
				t.Errorf("network %d, t = %g: y[%d] = %.12g, want %.12g as under the first numbers", i, at, j, g, w)
			}
		}
	}
}

func TestVisitorEnds(t *testing.T) {
	sys, k := build(t, 2, chain(1))
	s, err := NewSolver(sys, Options{})
	if err != nil {
		t.Fatal(err)
	}
	enough := errors.New("enough")
	if err := s.Run(context.Background(), &Problem{To: 1, Start: []float64{1, 0}, Rates: k}, func(*Step) error { return enough }); !errors.Is(err, enough) {
		t.Errorf("error %v, want that of the visitor", err)
	}
}
