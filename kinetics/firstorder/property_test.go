package firstorder

import (
	"errors"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"
)

func randomStart(rng *rand.Rand, n int) []float64 {
	start := make([]float64, n)
	for i := range start {
		if rng.IntN(3) == 0 {
			start[i] = math.Pow(10, -15*rng.Float64())
		}
	}
	start[rng.IntN(n)] = 1
	return start
}

// Nothing is negative and nothing is lost, at any time, in any network.
func TestMass(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 3))
	for c := range 150 {
		n := 2 + rng.IntN(20)
		list, _ := random(rng, n, 0.2*float64(c%4))
		chain := newChain(t, n, list)
		start, feed := randomStart(rng, n), randomStart(rng, n)
		out := make([]float64, n)
		for _, time := range []float64{0, 5e-324, 1e-20, 1e-13, 1e-6, 1, 3600, 1e9, 1e15, 1e300, math.Inf(1)} {
			chain.At(start, time, out)
			check := func(want float64) {
				if !(slices.Min(out) >= 0) || !(off(sum(out), want, 0) <= 1e-14) {
					t.Errorf("network %d, %g s: least %g, sum %.17g, want %.17g", c, time, slices.Min(out), sum(out), want)
				}
			}
			check(sum(start))
			if time < 1e299 {
				chain.Fed(start, feed, time, out)
				check(sum(start) + time*sum(feed))
			}
		}
	}
}

// At(s + t) is At(s), then At(t); the same fed.
func TestSemigroup(t *testing.T) {
	rng := rand.New(rand.NewPCG(4, 4))
	for c := range 150 {
		n := 2 + rng.IntN(12)
		list, _ := random(rng, n, 0.2*float64(c%4))
		chain := newChain(t, n, list)
		start, feed := randomStart(rng, n), randomStart(rng, n)
		s := math.Pow(10, -15+30*rng.Float64())
		r := s * math.Pow(10, -3+6*rng.Float64())
		long, short := chain.at(start, s+r), chain.at(chain.at(start, s), r)
		for i := range long {
			if !(off(short[i], long[i], 1e-250) <= 1e-11) {
				t.Errorf("network %d: state %d at %g and %g s: %g, at once %g", c, i, s, r, short[i], long[i])
			}
		}
		chain.Fed(start, feed, s, short)
		chain.Fed(slices.Clone(short), feed, r, short)
		chain.Fed(start, feed, s+r, long)
		for i := range long {
			if !(off(short[i], long[i], 1e-250) <= 1e-11) {
				t.Errorf("network %d, fed: state %d at %g and %g s: %g, at once %g", c, i, s, r, short[i], long[i])
			}
		}
	}
}

// A network that obeys detailed balance ends at exp(−G/RT), from anywhere; and at
// every time what has come from i to j stands to what has come from j to i as the
// populations at rest.
func TestDetailedBalance(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 5))
	for c := range 100 {
		n := 2 + rng.IntN(12)
		list, g := random(rng, n, 0)
		chain := newChain(t, n, list)
		all := 0.0
		for _, x := range g {
			all += math.Exp(-x)
		}
		start := randomStart(rng, n)
		for _, time := range []float64{1e25, math.Inf(1)} {
			for i, x := range chain.at(start, time) {
				if want := sum(start) * math.Exp(-g[i]) / all; !(off(x, want, 0) <= 2e-12) {
					t.Errorf("network %d, %g s: state %d has %g, want %g", c, time, i, x, want)
				}
			}
		}
		i, j := rng.IntN(n), rng.IntN(n)
		one := func(i int) []float64 {
			v := make([]float64, n)
			v[i] = 1
			return v
		}
		for _, time := range []float64{1e-14, 1e-7, 1, 1e7, 1e15} {
			there, back := chain.at(one(i), time)[j], chain.at(one(j), time)[i]
			if !(off(there*math.Exp(g[j]-g[i]), back, 1e-250) <= 2e-12) {
				t.Errorf("network %d, %g s: %g from %d to %d, %g back, energies %g and %g", c, time, there, i, j, back, g[i], g[j])
			}
		}
	}
}

// The rest is where long times lead, found another way.
func TestRest(t *testing.T) {
	rng := rand.New(rand.NewPCG(6, 6))
	for c := range 150 {
		n := 2 + rng.IntN(15)
		list, _ := random(rng, n, 0.25*float64(c%5))
		chain := newChain(t, n, list)
		start := randomStart(rng, n)
		late, rest := chain.at(start, 1e100), make([]float64, n)
		chain.Rest(start, rest)
		for i := range late {
			if !(off(late[i], rest[i], 1e-250) <= 2e-12) {
				t.Errorf("network %d: state %d has %g late and %g at rest", c, i, late[i], rest[i])
			}
		}
	}
}

// A rate too small for a number counts at rest, and never before.
func TestTooSlow(t *testing.T) {
	c := newChain(t, 4, []Exchange{{0, 1, 0, 0}, {1, 2, -3000, none}, {1, 3, -3000 - math.Ln2, none}})
	if x := c.at([]float64{1, 0, 0, 0}, 1e300); x[2] != 0 || x[3] != 0 || !(math.Abs(x[0]-0.5) <= 1e-13) {
		t.Errorf("late %v, want half and half of the first two", x)
	}
	x := c.at([]float64{1, 0, 0, 0}, math.Inf(1))
	if x[0] != 0 || x[1] != 0 || !(math.Abs(x[2]-2.0/3) <= 1e-12) {
		t.Errorf("at rest %v, want 2:1 of the last two", x)
	}
	c = newChain(t, 2, []Exchange{{0, 1, -3000, -3000}})
	if x = c.at([]float64{1, 0}, 1e300); x[0] != 1 {
		t.Errorf("late %v, want the start", x)
	}
	if c.Fed([]float64{1, 0}, []float64{1, 2}, 10, x); x[0] != 11 || x[1] != 20 {
		t.Errorf("fed %v, want 11 and 20", x)
	}
	if c.Rest([]float64{1, 0}, x); !(math.Abs(x[0]-0.5) <= 1e-15) {
		t.Errorf("at rest %v, want half", x)
	}
}

// Other numbers for the states and another order of the steps change nothing; a
// second chain changes no bit.
func TestRelabelling(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 7))
	for c := range 100 {
		n := 2 + rng.IntN(10)
		list, _ := random(rng, n, 0.3)
		start := randomStart(rng, n)
		time := math.Pow(10, -15+30*rng.Float64())
		base := newChain(t, n, list).at(start, time)
		if again := newChain(t, n, list).at(start, time); !slices.Equal(base, again) {
			t.Fatalf("network %d: a second chain differs", c)
		}
		name := rng.Perm(n)
		var moved []Exchange
		for _, x := range list {
			moved = append(moved, Exchange{name[x.To], name[x.From], x.LnBack, x.LnForward})
		}
		rng.Shuffle(len(moved), func(i, j int) { moved[i], moved[j] = moved[j], moved[i] })
		from := make([]float64, n)
		for i, j := range name {
			from[j] = start[i]
		}
		got := newChain(t, n, moved).at(from, time)
		for i, j := range name {
			if !(off(got[j], base[i], 1e-250) <= 1e-11) {
				t.Errorf("network %d: state %d has %g, renamed %g", c, i, base[i], got[j])
			}
		}
	}
}

// Parts that nothing connects do not see one another; a step from a state to itself
// and one without a rate are none; parallel steps add up.
func TestParts(t *testing.T) {
	const k = 0.7
	c := newChain(t, 6, []Exchange{
		{5, 0, math.Log(k / 2), none}, {5, 0, math.Log(k / 2), none}, {0, 0, 3, 4},
		{1, 2, none, none}, {3, 4, 20, none},
	})
	x := c.at([]float64{0, 1, 2, 3, 0, 4}, 2)
	want := []float64{-4 * math.Expm1(-2*k), 1, 2, 0, 3, 4 * math.Exp(-2*k)}
	for i := range x {
		if !(math.Abs(x[i]-want[i]) <= 1e-14) {
			t.Errorf("state %d has %v, want %v", i, x[i], want[i])
		}
	}
	if c.States() != 6 || !strings.Contains(c.Method(), "exact") {
		t.Errorf("%d states by %q", c.States(), c.Method())
	}
}

func TestAllocations(t *testing.T) {
	rng := rand.New(rand.NewPCG(8, 8))
	list, _ := random(rng, 12, 0.2)
	c := newChain(t, 12, list)
	start, out := randomStart(rng, 12), make([]float64, 12)
	if n := testing.AllocsPerRun(20, func() {
		c.At(start, 12.3, out)
		c.Fed(start, start, 12.3, out)
	}); n != 0 {
		t.Errorf("%v allocations, want none", n)
	}
	d := c.Copy()
	c.At(start, 5, out)
	if !slices.Equal(d.at(start, 5), out) {
		t.Error("a copy differs")
	}
	c.At(out, 7, out) // in place
	if want := c.at(c.at(start, 5), 7); !slices.Equal(out, want) {
		t.Errorf("in place %v, want %v", out, want)
	}
}

func TestRefused(t *testing.T) {
	big := make([]Exchange, MaxStates)
	for i := range big {
		big[i] = Exchange{i, i + 1, 0, 0}
	}
	for _, a := range []struct {
		n    int
		list []Exchange
		says string
	}{
		{-1, nil, "-1 states"},
		{2, []Exchange{{0, 2, 0, 0}}, "from state 0 to 2; states run from 0 to 1"},
		{2, []Exchange{{0, 1, math.NaN(), 0}}, "ln k of NaN between states 0 and 1"},
		{2, []Exchange{{0, 1, 0, math.Inf(1)}}, "ln k of +Inf"},
		{MaxStates + 1, big, "use an integrator"},
	} {
		if _, err := New(a.n, a.list); !errors.Is(err, ErrDomain) || !strings.Contains(err.Error(), a.says) {
			t.Errorf("%d states: error %v, want one that says %q", a.n, err, a.says)
		}
	}
	if c, err := New(0, nil); err != nil {
		t.Error(err)
	} else {
		c.At(nil, 1, nil)
	}
	c := newChain(t, 2, []Exchange{{0, 1, 0, 0}})
	for name, f := range map[string]func(){
		"length": func() { c.At([]float64{1}, 1, make([]float64, 2)) },
		"time":   func() { c.at([]float64{1, 0}, -1) },
		"NaN":    func() { c.at([]float64{1, 0}, math.NaN()) },
		"feed":   func() { c.Fed([]float64{1, 0}, nil, 1, make([]float64, 2)) },
		"rest":   func() { c.Fed([]float64{1, 0}, []float64{1, 0}, math.Inf(1), make([]float64, 2)) },
	} {
		t.Run(name, func(t *testing.T) {
			defer func() {
				if recover() == nil {
					t.Error("no panic")
				}
			}()
			f()
		})
	}
}

func FuzzChain(f *testing.F) {
	f.Add([]byte{4, 0x01, 140, 120, 0x12, 100, 0, 0x23, 200, 200}, 3.0)
	f.Add([]byte{7, 0x01, 255, 1, 0x10, 1, 255, 0x56, 0, 0}, 1e15)
	f.Fuzz(func(t *testing.T, in []byte, time float64) {
		if len(in) == 0 || !(time >= 0) {
			return
		}
		n := 1 + int(in[0]%8)
		var list []Exchange
		for in = in[1:]; len(in) >= 3 && len(list) < 12; in = in[3:] {
			ln := func(b byte) float64 {
				if b == 0 {
					return none
				}
				return 8 * (float64(b) - 170)
			}
			list = append(list, Exchange{int(in[0]>>4) % n, int(in[0]&15) % n, ln(in[1]), ln(in[2])})
		}
		c, err := New(n, list)
		if err != nil {
			if !errors.Is(err, ErrDomain) {
				t.Fatalf("untyped error %v", err)
			}
			return
		}
		start := make([]float64, n)
		start[0], start[n-1] = 1, 0.25
		out := c.at(start, time)
		if !(slices.Min(out) >= 0) || !(off(sum(out), sum(start), 0) <= 1e-13) {
			t.Fatalf("%g s: %v from %v of %+v", time, out, start, list)
		}
		if time < 1e290 {
			c.Fed(start, start, time, out)
			if want := sum(start) * (1 + time); !(slices.Min(out) >= 0) || !(off(sum(out), want, 0) <= 1e-13) {
				t.Fatalf("fed, %g s: %v of %+v", time, out, list)
			}
		}
	})
}
