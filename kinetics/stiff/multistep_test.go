package stiff

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"
)

// forced gives a solver that uses the multistep formulas whatever the size of
// the system and the tolerance.
func forced(t testing.TB, sys *System, opt Options) *Solver {
	t.Helper()
	s, err := NewSolver(sys, opt)
	if err != nil {
		t.Fatal(err)
	}
	s.multi = newMultistep(&s.e)
	return s
}

// TestMultistepTestSet has the multistep formulas meet the published values.
func TestMultistepTestSet(t *testing.T) {
	for _, p := range testProblems() {
		for _, rtol := range []float64{1e-4, 1e-6, 1e-8} {
			t.Run(fmt.Sprintf("%s/rtol=%g", p.name, rtol), func(t *testing.T) {
				sys, k := build(t, p.n, p.steps)
				s := forced(t, sys, Options{RTol: rtol, ATol: rtol * p.atol})
				if err := s.Run(context.Background(), &Problem{To: p.t, Start: p.start, Rates: k}, nil); err != nil {
					t.Fatal(err)
				}
				if s.Stats().Multistep == 0 {
					t.Error("no step of the multistep formulas")
				}
				y := make([]float64, p.n)
				s.Y(y)
				for i, w := range p.want {
					near(t, fmt.Sprintf("y[%d]", i), y[i], w, 10*rtol, p.source)
				}
				t.Logf("%+v", s.Stats())
			})
		}
	}
}

// TestMultistepCourse compares runs with a ramp, a feed, a removal and doses,
// read within the steps, with those of the Rosenbrock method at a hundredth of
// the tolerance.
func TestMultistepCourse(t *testing.T) {
	steps := []step{{1, []int{0, 1}, []int{2}}, {1, []int{2}, []int{0, 1}}, {1, []int{2}, []int{3}}, {1, []int{3, 3}, []int{4}}, {1, []int{4}, []int{3, 3}}, {1, []int{3, 4}, []int{5, 0}}}
	lnk := []float64{5, 3, -3, 4, -1, -4}
	sys, _ := build(t, 6, steps)
	rates, err := NewProgramme([]Node{{5, 290}, {40, 330}, {60, 330}, {60, 300}}, func(T float64, k, dk []float64) {
		for i, x := range lnk {
			e := 4000 + 700*float64(i)
			k[i] = math.Exp(x + e*(1/300.0-1/T))
			if dk != nil {
				dk[i] = k[i] * e / (T * T)
			}
		}
	})
	if err != nil {
		t.Fatal(err)
	}
	p := Problem{To: 100, Start: []float64{1, 0.7, 0, 0, 0, 0}, Rates: rates,
		Feeds: []Feed{{10, 50, 1, 0.01}}, Removals: []Removal{{30, 80, 5, 0.05}},
		Jumps: []Jump{{T: 20, Add: []float64{0.2, 0, 0, 0, 0, 0}}, {T: 70, Scale: []float64{1, 1, 0.5, 1, 1, 1}}}}
	var at []float64
	for i := range 200 {
		at = append(at, 0.5*float64(i))
	}
	want, err := Solve(context.Background(), sys, Options{RTol: 1e-10, ATol: 1e-16}, p, at)
	if err != nil {
		t.Fatal(err)
	}
	const rtol = 1e-7
	s := forced(t, sys, Options{RTol: rtol, ATol: 1e-13})
	got, err := s.course(context.Background(), p, at)
	if err != nil {
		t.Fatal(err)
	}
	if got.Stats.Multistep != got.Stats.Steps {
		t.Errorf("%d of %d steps by the multistep formulas, want all", got.Stats.Multistep, got.Stats.Steps)
	}
	for i, x := range at {
		for j, w := range want.Y[i] {
			if g := got.Y[i][j]; !(math.Abs(g-w) <= 30*rtol*w+1e-11) {
				t.Errorf("y[%d](%g s) = %.12g, want %.12g", j, x, g, w)
			}
		}
	}
}

// TestMultistepConserved: networks 25 decades wide, some of which need the
// careful system, keep their sums and end where the Rosenbrock method does.
func TestMultistepConserved(t *testing.T) {
	r := rand.New(rand.NewPCG(21, 22))
	rebuilds := 0
	for i := range 40 {
		n := 3 + r.IntN(9)
		sys, k := build(t, n, detailed(r, n, r.IntN(8)))
		start := make([]float64, n)
		start[0], start[n-1] = 1, 0.3
		p := &Problem{To: math.Pow(10, -6+14*r.Float64()), Start: start, Rates: k}
		s := forced(t, sys, Options{RTol: 1e-6, ATol: 1e-18})
		if err := s.Run(context.Background(), p, nil); err != nil {
			t.Fatalf("network %d: %v", i, err)
		}
		if m := s.Stats().Multistep; m != s.Stats().Steps {
			t.Errorf("network %d: %d of %d steps by the multistep formulas, want all", i, m, s.Stats().Steps)
		}
		rebuilds += s.Stats().Rebuilds
		want, _ := end(t, sys, Options{RTol: 1e-9, ATol: 1e-21}, p)
		got := make([]float64, n)
		s.Y(got)
		sum := 0.0
		for j, y := range got {
			sum += y
			if e := math.Abs(y-want[j]) / (want[j] + 1e-14); !(e <= 3e-5) {
				t.Errorf("network %d, t = %g: y[%d] = %g, want %g", i, p.To, j, y, want[j])
			}
		}
		near(t, fmt.Sprintf("network %d: sum", i), sum, 1.3, 1e-12, "conservation")
	}
	if rebuilds == 0 {
		t.Error("no network needed the careful system")
	}
}

// TestMultistepLarge: networks of the size the formulas are for, 25 decades
// wide, end where the Rosenbrock method does at a tenth of the tolerance.
func TestMultistepLarge(t *testing.T) {
	r := rand.New(rand.NewPCG(25, 26))
	used := 0
	for i := range 4 {
		n := 60 + 20*i
		sys, k := build(t, n, detailed(r, n, n))
		start := make([]float64, n)
		start[0], start[n-1] = 1, 0.3
		p := &Problem{To: math.Pow(10, 2*float64(i)-4), Start: start, Rates: k}
		got, s := end(t, sys, Options{RTol: 1e-5, ATol: 1e-17}, p)
		used += s.Stats().Multistep
		s, err := NewSolver(sys, Options{RTol: 1e-6, ATol: 1e-18})
		if err != nil {
			t.Fatal(err)
		}
		s.multi = nil
		if err := s.Run(context.Background(), p, nil); err != nil {
			t.Fatal(err)
		}
		want, sum := make([]float64, n), 0.0
		s.Y(want)
		for j, y := range got {
			sum += y
			if e := math.Abs(y-want[j]) / (want[j] + 1e-13); !(e <= 1e-4) {
				t.Errorf("%d species, t = %g: y[%d] = %g, want %g", n, p.To, j, y, want[j])
			}
		}
		near(t, fmt.Sprintf("%d species: sum", n), sum, 1.3, 1e-12, "conservation")
	}
	if used == 0 {
		t.Error("no step of the multistep formulas")
	}
}

// TestMultistepRule: the formulas serve large systems at fine tolerances, and
// neither events nor slopes.
func TestMultistepRule(t *testing.T) {
	r := rand.New(rand.NewPCG(23, 24))
	const n = 150
	sys, k := build(t, n, randomNetwork(r, n, 2*n, 4))
	start := make([]float64, n)
	for i := range start {
		start[i] = r.Float64()
	}
	level := Event{G: func(_ float64, y []float64) float64 { return y[0] - 1e3 }}
	for _, tt := range []struct {
		name string
		rtol float64
		p    Problem
		used bool
	}{
		{"fine", 1e-6, Problem{}, true},
		{"loose", 1e-3, Problem{}, false},
		{"event", 1e-6, Problem{Events: []Event{level}}, false},
		{"slope", 1e-6, Problem{Params: []Param{{Weights: []Weight{{0, 1}}}}}, false},
	} {
		tt.p.To, tt.p.Start, tt.p.Rates = 0.1, start, k
		c, err := Solve(context.Background(), sys, Options{RTol: tt.rtol}, tt.p, nil)
		if err != nil {
			t.Fatal(err)
		}
		if used := c.Stats.Multistep > 0; used != tt.used {
			t.Errorf("%s: multistep formulas used: %v, want %v", tt.name, used, tt.used)
		}
	}
	small, k := build(t, 3, chain(1, 0.5))
	c, err := Solve(context.Background(), small, Options{RTol: 1e-8}, Problem{To: 1, Start: []float64{1, 0, 0}, Rates: k}, nil)
	if err != nil {
		t.Fatal(err)
	}
	if c.Stats.Multistep > 0 {
		t.Error("three species: multistep formulas used, want the Rosenbrock method")
	}
}

func TestMultistepNoAllocation(t *testing.T) {
	p := testProblems()[2]
	sys, k := build(t, p.n, p.steps)
	s := forced(t, sys, Options{RTol: 1e-6, ATol: 1e-10})
	run := &Problem{To: p.t, Start: p.start, Rates: k}
	allocs := testing.AllocsPerRun(5, func() {
		if err := s.Run(context.Background(), run, nil); err != nil {
			t.Fatal(err)
		}
	})
	if m := s.Stats().Multistep; m < 100 || allocs > 0 {
		t.Errorf("%g allocations in a run of %d steps, want none", allocs, m)
	}
}

func TestMultistepStops(t *testing.T) {
	sys, k := build(t, 1, []step{{1, []int{0, 0}, []int{0, 0, 0}}})
	s := forced(t, sys, Options{})
	run := Problem{To: 2, Start: []float64{1}, Rates: k}
	err := s.Run(context.Background(), &run, nil)
	if !errors.Is(err, ErrStuck) || !(s.T() > 0.999 && s.T() < 1.0001) {
		t.Errorf("y' = y^2: error %v at %g s, want ErrStuck at the pole, 1 s", err, s.T())
	}
	s = forced(t, sys, Options{MaxSteps: 30})
	if err := s.Run(context.Background(), &run, nil); !errors.Is(err, ErrStuck) || s.Stats().Steps+s.Stats().Rejected != 30 {
		t.Errorf("limit of 30 steps: error %v after %+v", err, s.Stats())
	}
	s = forced(t, sys, Options{MaxStep: 0.01})
	run.To = 0.5
	longest := 0.0
	if err := s.Run(context.Background(), &run, func(st *Step) error { longest = max(longest, st.T1-st.T0); return nil }); err != nil {
		t.Fatal(err)
	}
	if !(longest > 0.009 && longest <= 0.01+1e-15) {
		t.Errorf("longest step %g s, want up to the limit of 0.01 s", longest)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if err := s.Run(ctx, &run, nil); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: %v", err)
	}
	enough := errors.New("enough")
	if err := s.Run(context.Background(), &run, func(*Step) error { return enough }); !errors.Is(err, enough) {
		t.Errorf("error %v, want that of the visitor", err)
	}
}

// TestMultistepOrder: halving the step at a fixed order divides the error of a
// smooth solution by two to the order.
func TestMultistepOrder(t *testing.T) {
	sys, _ := build(t, 2, []step{{1, []int{0, 0}, []int{1}}})
	exact := func(t float64) float64 { return 1 / (1 + 2*(t+(1-math.Cos(3*t))/6)) } // rate 1 + sin(3t)/2
	for order := 1; order <= topOrder; order++ {
		errAt := func(n int) float64 {
			s := forced(t, sys, Options{RTol: 1e-9})
			e, m := &s.e, s.multi
			a := e.order.place[0]
			e.rates, e.moving = wave{}, true
			h := 1.0 / float64(n)
			e.y[a], e.y[1-a] = 1, 0
			e.prepare(0)
			m.start(h)
			// The past, from the closed solution.
			var past [topOrder + 1]float64
			for j := range past {
				past[j] = exact(1 - float64(j)*h)
			}
			for j := range past {
				m.d[j][a], m.d[j][1-a] = past[0], 0.5*(-past[0])
				if j == 0 {
					m.d[j][1-a] = 0.5 * (1 - past[0])
				}
				for i := range len(past) - 1 - j {
					past[i] -= past[i+1]
				}
			}
			m.order = order
			copy(e.y, m.d[0])
			for i := range n {
				tau := 1 + float64(i)*h
				e.ratesAt(tau, false)
				e.prepare(tau)
				m.predict()
				m.at, m.rate = h/formulas[order].alpha, 0
				if !e.factor(m.at) {
					t.Fatal("no factorisation")
				}
				e.ratesAt(tau+h, false)
				if !m.solve() {
					t.Fatal("Newton's method failed")
				}
				m.update()
				e.y, e.next = e.next, e.y
			}
			return math.Abs(e.y[a] - exact(2))
		}
		x, y := errAt(40), errAt(80)
		if p := math.Log2(x / y); !(p > float64(order)-0.3) {
			t.Errorf("order %.2f, want %d (errors %.2e, %.2e)", p, order, x, y)
		}
	}
}

// TestMultistepAngles: for y' = z y/h the formulas damp every z within an angle
// of the negative axis. It follows from where a root of size 1 puts z:
// z = sum of (1 - 1/r)^j/j - kappa gamma (1 - 1/r)^(k+1).
func TestMultistepAngles(t *testing.T) {
	const source = "Shampine and Reichelt 1997, table 1, quoted from memory"
	for i, want := range []float64{90, 90, 80, 66, 51} { // degrees
		k := i + 1
		f := formulas[k]
		kappa := 1 - f.alpha/f.gamma
		angle := 90.0
		const parts = 100000
		for j := 1; j < parts; j++ {
			d := 1 - cmplx.Exp(complex(0, -math.Pi*float64(j)/parts))
			z := -complex(kappa*f.gamma, 0) * cmplx.Pow(d, complex(float64(k+1), 0))
			p := complex(1, 0)
			for m := 1; m <= k; m++ {
				p *= d
				z += p / complex(float64(m), 0)
			}
			if cmplx.Abs(z) > 1e-3 {
				angle = min(angle, 180-math.Abs(cmplx.Phase(z))*180/math.Pi)
			}
		}
		if math.Abs(angle-want) > 1 {
			t.Errorf("order %d: stable to %.1f degrees, want %g\nsource: %s", k, angle, want, source)
		}
		t.Logf("order %d: stable to %.2f degrees", k, angle)
	}
}
