package stiff

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"
)

// ramped gives A -> B with ln k = 20 - 8000/T along a programme.
func ramped(t testing.TB, nodes ...Node) *Programme {
	t.Helper()
	p, err := NewProgramme(nodes, func(T float64, k, dk []float64) {
		k[0] = arrhenius(T)
		if dk != nil {
			dk[0] = k[0] * 8000 / (T * T)
		}
	})
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func arrhenius(T float64) float64 { return math.Exp(20 - 8000/T) }

// simpson integrates f over an interval in n panels.
func simpson(f func(float64) float64, a, b float64, n int) float64 {
	h := (b - a) / float64(2*n)
	sum := f(a) + f(b)
	for i := 1; i < 2*n; i++ {
		w := 4.0
		if i%2 == 0 {
			w = 2
		}
		sum += w * f(a+float64(i)*h)
	}
	return sum * h / 3
}

func TestRamp(t *testing.T) {
	sys, _ := build(t, 2, []step{{1, []int{0}, []int{1}}})
	const source = "exp(-integral of k(T(t)) dt), the integral by Simpson's rule in 20000 panels"
	t.Run("hold, ramp, hold", func(t *testing.T) {
		p := ramped(t, Node{100, 250}, Node{1100, 300}, Node{2000, 300})
		y, s := end(t, sys, Options{RTol: 1e-9, ATol: 1e-14}, &Problem{To: 3000, Start: []float64{1, 0}, Rates: p})
		in := 100*arrhenius(250) + simpson(func(x float64) float64 { return arrhenius(250 + (x-100)/20) }, 100, 1100, 20000) + 1900*arrhenius(300)
		near(t, "A", y[0], math.Exp(-in), 1e-7, source)
		near(t, "A + B", y[0]+y[1], 1, 1e-14, "conservation")
		if s.Stats().Restarts != 4 {
			t.Errorf("%d pieces, want 4: a restart at each corner", s.Stats().Restarts)
		}
	})
	t.Run("jump of temperature", func(t *testing.T) {
		p := ramped(t, Node{0, 300}, Node{50, 300}, Node{50, 340}, Node{80, 340})
		y, _ := end(t, sys, Options{RTol: 1e-9, ATol: 1e-14}, &Problem{To: 80, Start: []float64{1, 0}, Rates: p})
		near(t, "A", y[0], math.Exp(-50*arrhenius(300)-30*arrhenius(340)), 1e-8, "closed form")
	})
	t.Run("steps of held temperature approach the ramp", func(t *testing.T) {
		// Second order in the length of the steps; the ramp is their limit.
		stairs := func(n int) float64 {
			var nodes []Node
			for i := range n {
				T := 300 + 40*(float64(i)+0.5)/float64(n)
				nodes = append(nodes, Node{200 * float64(i) / float64(n), T}, Node{200 * float64(i+1) / float64(n), T})
			}
			y, _ := end(t, sys, Options{RTol: 1e-11, ATol: 1e-16}, &Problem{To: 200, Start: []float64{1, 0}, Rates: ramped(t, nodes...)})
			return y[0]
		}
		y, _ := end(t, sys, Options{RTol: 1e-10, ATol: 1e-16}, &Problem{To: 200, Start: []float64{1, 0}, Rates: ramped(t, Node{0, 300}, Node{200, 340})})
		a, b := stairs(100), stairs(200)
		near(t, "A", y[0], (4*b-a)/3, 1e-7, "piecewise constant temperature, extrapolated")
	})
}

func TestFeedRemovalJump(t *testing.T) {
	// A -> B at 0.1, A fed at 0.02 from 5 s to 20 s, B removed at 0.05 from
	// 10 s on; A doubled and 0.3 B added at 15 s.
	sys, k := build(t, 2, []step{{0.1, []int{0}, []int{1}}})
	p := Problem{To: 40, Start: []float64{1, 0}, Rates: k,
		Feeds:    []Feed{{5, 20, 0, 0.02}},
		Removals: []Removal{{10, 100, 1, 0.05}},
		Jumps:    []Jump{{T: 15, Scale: []float64{2, 1}}, {T: 15, Add: []float64{0, 0.3}}, {T: 40, Add: []float64{1, 0}}}}
	c, err := Solve(context.Background(), sys, Options{RTol: 1e-10, ATol: 1e-14}, p, []float64{0, 5, 15, 20, 40})
	if err != nil {
		t.Fatal(err)
	}
	a := func(a0, f, t float64) float64 { return f/0.1 + (a0-f/0.1)*math.Exp(-0.1*t) }
	a5 := a(1, 0, 5)
	a15 := 2 * a(a5, 0.02, 10)
	a20 := a(a15, 0.02, 5)
	a40 := a(a20, 0, 20) + 1
	for i, w := range []float64{1, a5, a15, a20, a40} {
		near(t, fmt.Sprintf("A(%g)", c.T[i]), c.Y[i][0], w, 1e-8, "closed form of A' = f - k A")
	}
	// B by quadrature of B' = 0.1 A - 0.05 B piece by piece.
	b10 := 1 + 0.02*5 - a(a5, 0.02, 5)
	part := func(b0, a0, f, t float64) float64 {
		return b0*math.Exp(-0.05*t) + simpson(func(x float64) float64 { return 0.1 * a(a0, f, x) * math.Exp(-0.05*(t-x)) }, 0, t, 5000)
	}
	b15 := part(b10, a(a5, 0.02, 5), 0.02, 5) + 0.3
	b20 := part(b15, a15, 0.02, 5)
	b40 := part(b20, a20, 0, 20)
	near(t, "B(15)", c.Y[2][1], b15, 1e-8, "quadrature")
	near(t, "B(40)", c.Final[1], b40, 1e-8, "quadrature")
	p.Jumps = []Jump{{T: 15, Add: []float64{-5, 0}}}
	if _, err := Solve(context.Background(), sys, Options{}, p, nil); !errors.Is(err, ErrInput) {
		t.Errorf("taking away more than there is: %v, want ErrInput", err)
	}
}

func TestEvents(t *testing.T) {
	sys, k := build(t, 3, chain(1, 0.5))
	below := func(level float64) func(float64, []float64) float64 {
		return func(_ float64, y []float64) float64 { return y[0] - level }
	}
	p := Problem{To: 50, Start: []float64{1, 0, 0}, Rates: k, Events: []Event{
		{G: below(0.5)},
		{G: func(_ float64, y []float64) float64 { return y[0] - 0.5*y[1] }}, // maximum of B
		{G: below(0.05), Side: 1}, // never rises
		{G: func(t float64, _ []float64) float64 { return t - 7 }},
		{G: below(1e-8), Side: -1, Stop: true},
	}}
	for _, rtol := range []float64{1e-6, 1e-10} {
		c, err := Solve(context.Background(), sys, Options{RTol: rtol, ATol: 1e-18}, p, nil)
		if err != nil {
			t.Fatal(err)
		}
		want := []struct {
			event int
			t     float64
		}{{0, math.Ln2}, {1, 1.386294361119891}, {3, 7}, {4, 8 * math.Ln10}}
		if len(c.Hits) != len(want) {
			t.Fatalf("%d events, want %d: %v", len(c.Hits), len(want), c.Hits)
		}
		for i, w := range want {
			h := c.Hits[i]
			if h.Event != w.event {
				t.Errorf("event %d is number %d, want %d", i, h.Event, w.event)
			}
			near(t, fmt.Sprintf("time of event %d", h.Event), h.T, w.t, 10*rtol, "closed form; the maximum of B at ln(k1/k2)/(k1-k2)")
			// At the reported state the event function is zero to rounding.
			if g := p.Events[h.Event].G(h.T, h.Y); math.Abs(g) > 1e-14 {
				t.Errorf("event %d: G = %g at the state reported, want 0 within 1e-14", h.Event, g)
			}
		}
		if c.End != c.Hits[3].T {
			t.Errorf("run ends at %g, want at the stopping event, %g", c.End, c.Hits[3].T)
		}
	}
}

func TestSlopes(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	steps := []step{{2, []int{0, 1}, []int{2}}, {0.3, []int{2}, []int{0, 1}}, {1, []int{2, 2}, []int{3}}, {40, []int{3}, []int{2, 2}},
		{0.5, []int{2}, []int{4}}, {0.7, []int{4, 4, 0}, []int{1, 1, 1}}, {1e6, []int{4}, []int{5}}, {3e6, []int{5}, []int{4}}}
	sys, k := build(t, 6, steps)
	start := []float64{1, 0.8, 0, 0.1, 0, 0}
	for _, ramp := range []bool{false, true} {
		t.Run(fmt.Sprintf("ramp=%v", ramp), func(t *testing.T) {
			var params []Param
			for range 3 {
				var p Param
				for i := range k {
					p.Weights = append(p.Weights, Weight{i, 2*r.Float64() - 1})
				}
				params = append(params, p)
			}
			// Energies: ln k = ln k0 + E w (1/300 - 1/T), p adds w p 300/T.
			rates := func(shift [3]float64) (Rates, func(int, float64) (float64, float64)) {
				law := func(T float64, kk, dk []float64) {
					for i := range kk {
						x := math.Log(k[i]) + 3000*(1/300.0-1/T)
						d := 3000 / (T * T)
						for j, p := range params {
							x += shift[j] * p.Weights[i].W * 300 / T
							d -= shift[j] * p.Weights[i].W * 300 / (T * T)
						}
						kk[i] = math.Exp(x)
						if dk != nil {
							dk[i] = kk[i] * d
						}
					}
				}
				nodes := []Node{{0, 300}}
				if ramp {
					nodes = []Node{{1, 300}, {4, 330}}
				}
				p, err := NewProgramme(nodes, law)
				if err != nil {
					t.Fatal(err)
				}
				return p, func(piece int, t float64) (float64, float64) {
					a, b := p.Inverse(piece, t)
					return 300 * a, 300 * b
				}
			}
			opt := Options{RTol: 1e-11, ATol: 1e-15}
			base, scale := rates([3]float64{})
			for i := range params {
				params[i].Scale = scale
			}
			p := Problem{To: 5, Start: start, Rates: base, Params: params, Removals: []Removal{{2, 3, 3, 0.2}}, Feeds: []Feed{{0, 2, 1, 0.1}},
				Jumps: []Jump{{T: 2.5, Scale: []float64{0.5, 1, 1, 1, 1, 1}}}}
			p.Params = append(slices.Clone(params), Param{Start: []float64{1, 0, 0, 0, 0, 0}})
			at := []float64{0.5, 2.5, 3.3, 5}
			c, err := Solve(context.Background(), sys, opt, p, at)
			if err != nil {
				t.Fatal(err)
			}
			for j := range p.Params {
				const d = 1e-4
				var side [2]*Course
				for x, sgn := range []float64{-1, 1} {
					q := p
					q.Params = nil
					if j < 3 {
						var shift [3]float64
						shift[j] = sgn * d
						q.Rates, _ = rates(shift)
					} else {
						q.Start = slices.Clone(start)
						q.Start[0] += sgn * d
					}
					if side[x], err = Solve(context.Background(), sys, opt, q, at); err != nil {
						t.Fatal(err)
					}
				}
				for i := range at {
					for sp := range start {
						diff := (side[1].Y[i][sp] - side[0].Y[i][sp]) / (2 * d)
						if got := c.Slopes[i][j][sp]; !(math.Abs(got-diff) <= 1e-6*math.Abs(diff)+1e-7*c.Y[i][sp]) {
							t.Errorf("t = %g, parameter %d, species %d: slope %.9g, central difference %.9g", at[i], j, sp, got, diff)
						}
					}
				}
			}
		})
	}
}

func TestConserved(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for i := range 60 {
		n := 2 + r.IntN(9)
		steps := randomNetwork(r, n, 1+r.IntN(12), 12)
		sys, k := build(t, n, steps)
		start := make([]float64, n)
		sum := 0.0
		for j := range start {
			start[j] = r.Float64()
			sum += start[j]
		}
		y, s := end(t, sys, Options{RTol: 1e-6, ATol: 1e-14}, &Problem{To: math.Pow(10, 6*r.Float64()-2), Start: start, Rates: k})
		got := 0.0
		for j, v := range y {
			got += v
			if v < -1e-14 {
				t.Errorf("network %d: species %d at %g, below zero by more than the tolerance", i, j, v)
			}
		}
		near(t, fmt.Sprintf("network %d: sum", i), got, sum, 1e-12, "conservation")
		if s.Stats().Lowest < -1e-14 {
			t.Errorf("network %d: lowest concentration %g", i, s.Stats().Lowest)
		}
	}
}

func TestRelabelled(t *testing.T) {
	p := testProblems()[3]
	const rtol = 1e-7
	sys, k := build(t, p.n, p.steps)
	want, _ := end(t, sys, Options{RTol: rtol, ATol: rtol * p.atol}, &Problem{To: p.t, Start: p.start, Rates: k})
	r := rand.New(rand.NewPCG(3, 4))
	for range 3 {
		name := r.Perm(p.n)
		var steps []step
		for _, i := range r.Perm(len(p.steps)) {
			s := p.steps[i]
			q := step{k: s.k}
			for _, a := range s.lhs {
				q.lhs = append(q.lhs, name[a])
			}
			for _, a := range s.rhs {
				q.rhs = append(q.rhs, name[a])
			}
			steps = append(steps, q)
		}
		start := make([]float64, p.n)
		for i, v := range p.start {
			start[name[i]] = v
		}
		sys, k := build(t, p.n, steps)
		got, _ := end(t, sys, Options{RTol: rtol, ATol: rtol * p.atol}, &Problem{To: p.t, Start: start, Rates: k})
		for i, w := range want {
			near(t, fmt.Sprintf("y[%d]", i), got[name[i]], w, 0.1*rtol, "the same network under other numbers")
		}
	}
}

func TestNoAllocation(t *testing.T) {
	p := testProblems()[2]
	sys, k := build(t, p.n, p.steps)
	for _, params := range [][]Param{nil, {{Weights: []Weight{{1, 1}}}}} {
		s, err := NewSolver(sys, Options{RTol: 1e-6, ATol: 1e-10})
		if err != nil {
			t.Fatal(err)
		}
		run := &Problem{To: p.t, Start: p.start, Rates: k, Params: params}
		allocs := testing.AllocsPerRun(5, func() {
			if err := s.Run(context.Background(), run, nil); err != nil {
				t.Fatal(err)
			}
		})
		if steps := s.Stats().Steps; steps < 100 || allocs > 0 {
			t.Errorf("%g allocations in a run of %d steps, want none", allocs, steps)
		}
	}
}

func TestStuck(t *testing.T) {
	p := testProblems()[0]
	sys, k := build(t, p.n, p.steps)
	s, err := NewSolver(sys, Options{MaxSteps: 20})
	if err != nil {
		t.Fatal(err)
	}
	err = s.Run(context.Background(), &Problem{To: p.t, Start: p.start, Rates: k}, nil)
	var stuck *StuckError
	if !errors.Is(err, ErrStuck) || !errors.As(err, &stuck) {
		t.Fatalf("error %v, want ErrStuck", err)
	}
	if !(stuck.T > 0) || stuck.T != s.T() || stuck.Steps == 0 || !(stuck.Fastest > 1) || stuck.Reaction < 0 {
		t.Errorf("parts of the error: %+v", stuck)
	}
	for _, part := range []string{"step limit reached at t =", "fastest: reaction", "raise the step limit"} {
		if !strings.Contains(err.Error(), part) {
			t.Errorf("error %q lacks %q", err, part)
		}
	}
	// Autocatalysis that runs away in finite time.
	sys, k = build(t, 1, []step{{1, []int{0, 0}, []int{0, 0, 0}}})
	_, err = Solve(context.Background(), sys, Options{}, Problem{To: 2, Start: []float64{1}, Rates: k}, nil)
	if !errors.Is(err, ErrStuck) {
		t.Errorf("y' = y^2 to beyond its pole: %v, want ErrStuck", err)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := Solve(ctx, sys, Options{}, Problem{To: 0.5, Start: []float64{1}, Rates: k}, nil); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: %v", err)
	}
}

// TestBackToRowExchange needs pivots off the diagonal: autocatalysis faster
// than the step.
func TestAutocatalysis(t *testing.T) {
	sys, k := build(t, 3, []step{{5, []int{0, 1}, []int{1, 1}}, {1e-3, []int{0}, []int{1}}, {0.1, []int{1}, []int{2}}})
	y, _ := end(t, sys, Options{RTol: 1e-9, ATol: 1e-15}, &Problem{To: 5, Start: []float64{1, 0, 0}, Rates: k})
	z, _ := end(t, sys, Options{RTol: 1e-12, ATol: 1e-18}, &Problem{To: 5, Start: []float64{1, 0, 0}, Rates: k})
	for i := range y {
		near(t, fmt.Sprintf("y[%d]", i), y[i], z[i], 1e-7, "a run at a thousandth of the tolerance")
	}
}
