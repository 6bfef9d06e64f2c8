package firstorder

import (
	"math"
	"testing"
)

var none = math.Inf(-1)

const handbook = "closed forms of elementary rate laws (Atkins and de Paula, Physical Chemistry, integrated rate laws; Bateman, Proc. Camb. Philos. Soc. 15, 423 (1910)), evaluated with 30 digits"

func TestConsecutive(t *testing.T) {
	for _, a := range []struct {
		k1, k2, tMax, bMax, t float64
		want                  []float64
	}{
		{1, 0.5, 1.386294361119891, 0.5, 2, []float64{0.1353352832366127, 0.4650883158696593, 0.399576400893728}},
		{0.1, 0.01, 25.58427881104495, 0.7742636826811271, 20, []float64{0.1353352832366127, 0.7593282998237435, 0.1053364169396438}},
		{0.02, 0.2, 12.79213940552248, 0.07742636826811271, 100, []float64{0.1353352832366127, 0.0150372534639399, 0.8496274632994474}},
		{1, 1, 1, 0.3678794411714423, 2, []float64{0.1353352832366127, 0.2706705664732254, 0.5939941502901619}},
		{1, 1.000001, 0.9999995000003333, 0.367879257231829, 2, []float64{0.1353352832366127, 0.2706702958028394, 0.593994420960548}},
		{0.001, 1000, 0.01381552437348865, 9.999861845710604e-7, 2000, []float64{0.1353352832366127, 1.353354185720313e-7, 0.8646645814279687}},
	} {
		c := newChain(t, 3, []Exchange{{0, 1, math.Log(a.k1), none}, {1, 2, math.Log(a.k2), none}})
		for i, x := range c.at([]float64{1, 0, 0}, a.t) {
			if !(off(x, a.want[i], 0) <= 2e-14) {
				t.Errorf("k %g and %g: state %d at %g s has %v, want %v\nsource: %s", a.k1, a.k2, i, a.t, x, a.want[i], handbook)
			}
		}
		if x := c.at([]float64{1, 0, 0}, a.tMax)[1]; !(off(x, a.bMax, 0) <= 2e-14) {
			t.Errorf("k %g and %g: the most of B is %v, want %v\nsource: %s", a.k1, a.k2, x, a.bMax, handbook)
		}
	}
}

func TestBateman(t *testing.T) {
	c := newChain(t, 4, []Exchange{{0, 1, 0, none}, {1, 2, math.Log(0.5), none}, {2, 3, math.Log(0.2), none}})
	for _, a := range []struct {
		t    float64
		want []float64
	}{
		{1, []float64{0.3678794411714423, 0.4773024370823822, 0.143769504667987, 0.01104861707818845}},
		{5, []float64{0.006737946999085467, 0.1506941032496267, 0.501221274109699, 0.3413466756415889}},
		{20, []float64{2.061153622438558e-9, 9.079573721772483e-5, 0.03800625049542995, 0.9619029517061987}},
	} {
		for i, x := range c.at([]float64{1, 0, 0, 0}, a.t) {
			if !(off(x, a.want[i], 0) <= 2e-14) {
				t.Errorf("state %d at %g s has %v, want %v\nsource: %s", i, a.t, x, a.want[i], handbook)
			}
		}
	}
}

func TestOpposing(t *testing.T) {
	for _, a := range []struct{ k1, km1, t, a, rest, half float64 }{
		{1, 0.5, 0.6666666666666667, 0.5785862941142949, 0.3333333333333333, 0.4620981203732969},
		{0.003, 0.001, 250, 0.5259095808785817, 0.25, 173.2867951399863},
	} {
		c := newChain(t, 2, []Exchange{{0, 1, math.Log(a.k1), math.Log(a.km1)}})
		for _, p := range []struct{ t, want float64 }{
			{a.t, a.a}, {math.Inf(1), a.rest}, {1e15, a.rest}, {a.half, (1 + a.rest) / 2},
		} {
			if x := c.at([]float64{1, 0}, p.t)[0]; !(off(x, p.want, 0) <= 2e-14) {
				t.Errorf("k %g and %g: A at %g s is %v, want %v\nsource: %s", a.k1, a.km1, p.t, x, p.want, handbook)
			}
		}
	}
}

// A to B and to C in the ratio of the constants at all times.
func TestParallel(t *testing.T) {
	const k1, k2 = 3e-9, 7e3
	c := newChain(t, 3, []Exchange{{0, 1, math.Log(k1), none}, {0, 2, math.Log(k2), none}})
	for _, time := range []float64{1e-15, 1e-4, 1e-2, 1, 1e15, math.Inf(1)} {
		x := c.at([]float64{2, 0, 0}, time)
		if want := 2 * math.Exp(-(k1+k2)*time); !(off(x[0], want, 1e-260) <= 1e-12) || !(off(x[1]/x[2], k1/k2, 0) <= 1e-13) {
			t.Errorf("%g s: A %v, want %v; B:C %v, want %v\nsource: %s", time, x[0], want, x[1]/x[2], k1/k2, handbook)
		}
	}
}

// A into a state that decays to P: the slow eigenvalue while A is used up, the rate
// constant of the steady state while A is fed as fast as it goes.
func TestSteadyState(t *testing.T) {
	for _, a := range []struct{ k1, km1, k2, steady, slow, fast float64 }{
		{1, 100, 10, 0.09090909090909091, 0.09016332815986363, 110.9098366718401},
		{0.001, 1, 1000, 9.99000999000999e-4, 9.99000998003992e-4, 1001.000000999002},
	} {
		c := newChain(t, 3, []Exchange{{0, 1, math.Log(a.k1), math.Log(a.km1)}, {1, 2, math.Log(a.k2), none}})
		time := 5 / a.slow
		x, y := c.at([]float64{1, 0, 0}, time), c.at([]float64{1, 0, 0}, 2*time)
		if got := math.Log(x[0]/y[0]) / time; !(off(got, a.slow, 0) <= 1e-13) {
			t.Errorf("slow eigenvalue %v, want %v\nsource: %s", got, a.slow, handbook)
		}
		// What is not yet P, in closed form.
		want := (a.fast*math.Exp(-a.slow*time) - a.slow*math.Exp(-a.fast*time)) / (a.fast - a.slow)
		if got := x[0] + x[1]; !(off(got, want, 0) <= 1e-12) {
			t.Errorf("not yet P: %v, want %v\nsource: %s", got, want, handbook)
		}
		const feed = 0.02
		c.Fed([]float64{0, 0, 0}, []float64{feed, 0, 0}, 60/a.slow, x)
		if got := feed / x[0]; !(off(got, a.steady, 0) <= 1e-13) {
			t.Errorf("rate constant of the steady state %v, want %v\nsource: %s", got, a.steady, handbook)
		}
	}
}

// The isomers of one carrier in fast exchange (Curtin and Hammett): the ratio of the
// products is that of the transition states.
func TestFastExchange(t *testing.T) {
	const (
		source = "Y/X = exp(−(G(TSB) − G(TSA))/RT) at 298.15 K with A 0, B 1, TSA 20 and TSB 19 kcal/mol, recomputed with 30 digits; Seeman, Chem. Rev. 83, 83 (1983)"
		rt     = 8.31446261815324 * 298.15 / 4184 // kcal/mol
		top    = 29.45                            // ln(kB·T/h), which cancels
	)
	c := newChain(t, 4, []Exchange{
		{0, 1, top - 6/rt, top - 5/rt},
		{0, 2, top - 20/rt, none},
		{1, 3, top - 18/rt, none},
	})
	x := c.at([]float64{1, 0, 0, 0}, math.Inf(1))
	if !(off(x[3]/x[2], 5.407606565365828, 0) <= 1e-8) { // off by how fast the exchange is
		t.Errorf("Y/X = %v, want 5.407606565365828\nsource: %s", x[3]/x[2], source)
	}
	if x = c.at([]float64{1, 0, 0, 0}, 1e-3); !(off(x[1]/x[0], 0.1849246959652564, 0) <= 1e-8) {
		t.Errorf("B/A = %v, want 0.1849246959652564\nsource: %s", x[1]/x[0], source)
	}
}

// Fed at a constant rate, with a loss: f/k·(1 − exp(−kt)), which is f·t at first;
// nothing but f·t where nothing leaves.
func TestFedClosed(t *testing.T) {
	const f, k = 0.3, 2e-5
	c := newChain(t, 3, []Exchange{{0, 1, math.Log(k), none}})
	out := make([]float64, 3)
	for _, time := range []float64{0, 1e-12, 1, 1e3, 5e4, 1e6, 1e15} {
		c.Fed([]float64{0, 0, 1}, []float64{f, 0, 2}, time, out)
		want := []float64{-f / k * math.Expm1(-k*time), f * (time + math.Expm1(-k*time)/k), 1 + 2*time}
		for i, x := range out {
			if i == 1 && k*time < 1e-2 { // cancels in the closed form
				y := k * time
				want[1] = f / k * y * y / 2 * (1 - y/3*(1-y/4*(1-y/5*(1-y/6))))
			}
			if !(off(x, want[i], 0) <= 1e-12) {
				t.Errorf("%g s: state %d has %v, want %v\nsource: %s", time, i, x, want[i], handbook)
			}
		}
	}
}
