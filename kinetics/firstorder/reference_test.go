package firstorder

import (
	"math"
	"math/rand/v2"
	"testing"
)

// Against numbers of 320 bits: every amount, traces included, with rates over 25
// decades, one-way steps among them, from the shortest times to 1e15 s.
func TestLongNumbers(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 1))
	worst, traces := 0.0, 0
	for c := range 600 {
		n := 2 + rng.IntN(6)
		list, _ := random(rng, n, []float64{0, 0.3, 1}[c%3])
		chain := newChain(t, n, list)
		start := make([]float64, n)
		start[rng.IntN(n)] = 1
		if c%4 == 0 {
			start[rng.IntN(n)] = math.Pow(10, -12*rng.Float64())
		}
		time := math.Pow(10, -15+30*rng.Float64())
		want := through(start, exponential(n, list, time))
		for j, x := range chain.at(start, time) {
			e := off(x, want[j], 1e-260)
			if !(e <= 2e-12) {
				t.Errorf("network %d, %g s: state %d has %g, want %g (%.1e)\n%+v", c, time, j, x, want[j], e, list)
			}
			worst = math.Max(worst, e)
			if want[j] > 1e-260 && want[j] < 1e-15 {
				traces++
			}
		}
	}
	if traces < 100 {
		t.Errorf("only %d traces: the test tests too little", traces)
	}
	t.Logf("worst relative error %.1e, %d amounts below 1e-15", worst, traces)
}

// A feed is a reservoir so large that it does not change: a state more, in numbers
// of 320 bits.
func TestLongNumbersFed(t *testing.T) {
	rng := rand.New(rand.NewPCG(2, 2))
	worst := 0.0
	for c := range 200 {
		n := 2 + rng.IntN(5)
		list, _ := random(rng, n, []float64{0, 0.3, 1}[c%3])
		chain := newChain(t, n, list)
		start, feed, want := make([]float64, n+1), make([]float64, n), make([]float64, n)
		start[rng.IntN(n)] = 1
		time := math.Pow(10, -15+30*rng.Float64())
		const much = 0x1p200
		start[n] = much
		more := list
		for range 1 + rng.IntN(2) {
			i := rng.IntN(n)
			f := math.Pow(10, -3+6*rng.Float64()) / time
			if feed[i] == 0 {
				feed[i] = f
				more = append(more, Exchange{n, i, math.Log(f / much), none})
			}
		}
		copy(want, through(start, exponential(n+1, more, time)))
		got := make([]float64, n)
		chain.Fed(start[:n], feed, time, got)
		for j, x := range got {
			e := off(x, want[j], 1e-260)
			if !(e <= 2e-12) { // the logarithm of the rate out of the reservoir is rounded
				t.Errorf("network %d, %g s: state %d has %g, want %g (%.1e)\n%+v", c, time, j, x, want[j], e, list)
			}
			worst = math.Max(worst, e)
		}
	}
	t.Logf("worst relative error %.1e", worst)
}

// What an eigenvalue sum would lose: the fifth product of a row at 1e-6 of the time
// it takes, t⁵/5! of the rates.
func TestShortTimes(t *testing.T) {
	var list []Exchange
	for i := range 6 {
		list = append(list, Exchange{i, i + 1, math.Log(float64(i + 1)), none})
	}
	c := newChain(t, 7, list)
	// With k = 1, 2, 3, ... the m-th product is (1 − exp(−t))^m exp(−t), as for a
	// binomial: Yule's pure birth process turned to loss (textbook closed form).
	for _, time := range []float64{1e-30, 1e-12, 1e-6, 1e-3, 1} {
		x := c.at([]float64{1, 0, 0, 0, 0, 0, 0}, time)
		for m := range 6 {
			want := math.Exp(-time) * math.Pow(-math.Expm1(-time), float64(m))
			if !(off(x[m], want, 0) <= 1e-13) {
				t.Errorf("%g s: product %d is %g, want %g", time, m, x[m], want)
			}
		}
	}
}
