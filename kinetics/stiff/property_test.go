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

// TestLarge: 120 species over 25 decades, sparse and careful.
func TestLarge(t *testing.T) {
	r := rand.New(rand.NewPCG(11, 12))
	const n = 120
	sys, k := build(t, n, detailed(r, n, 130))
	start := make([]float64, n)
	start[0] = 1
	p := &Problem{To: 1e5, Start: start, Rates: k}
	loose, s := end(t, sys, Options{RTol: 1e-4, ATol: 1e-14}, p)
	tight, _ := end(t, sys, Options{RTol: 1e-7, ATol: 1e-17}, p)
	sum := 0.0
	for j := range loose {
		sum += loose[j]
		if e := math.Abs(loose[j]-tight[j]) / (tight[j] + 1e-12); !(e <= 1e-3) {
			t.Errorf("y[%d] = %g and %g at the two tolerances", j, loose[j], tight[j])
		}
	}
	near(t, "sum", sum, 1, 1e-13, "conservation")
	t.Logf("%+v", s.Stats())
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

// TestUnlisted: a factorisation without its list of operations is the same.
func TestUnlisted(t *testing.T) {
	p := testProblems()[3]
	sys, k := build(t, p.n, p.steps)
	run := &Problem{To: p.t, Start: p.start, Rates: k}
	want, _ := end(t, sys, Options{}, run)
	s, err := NewSolver(sys, Options{})
	if err != nil {
		t.Fatal(err)
	}
	s.e.sparse.to = nil
	if err := s.Run(context.Background(), run, nil); err != nil {
		t.Fatal(err)
	}
	got := make([]float64, p.n)
	s.Y(got)
	for i := range want {
		if got[i] != want[i] {
			t.Errorf("y[%d] = %.17g, want %.17g", i, got[i], want[i])
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
