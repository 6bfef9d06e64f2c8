package firstorder

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"
)

const prec = 320 // bits: a squaring doubles an error, and there are some hundred

func newChain(t testing.TB, n int, x []Exchange) *Chain {
	t.Helper()
	c, err := New(n, x)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

func (c *Chain) at(start []float64, t float64) []float64 {
	out := make([]float64, c.n)
	c.At(start, t, out)
	return out
}

// off is the relative error of got; amounts below the least that counts are 0.
func off(got, want, least float64) float64 {
	if math.Abs(got) <= least && math.Abs(want) <= least {
		return 0
	}
	return math.Abs(got-want) / math.Abs(want)
}

func sum(v []float64) float64 {
	s := 0.0
	for _, x := range v {
		s += x
	}
	return s
}

// exponential returns exp(Q·t) for the rate constants as float64 holds them, by
// the Taylor series and squaring with numbers so long that nothing is lost.
func exponential(n int, exchanges []Exchange, t float64) [][]*big.Float {
	num := func(x float64) *big.Float { return new(big.Float).SetPrec(prec).SetFloat64(x) }
	q := make([][]*big.Float, n)
	for i := range q {
		q[i] = make([]*big.Float, n)
		for j := range q[i] {
			q[i][j] = num(0)
		}
	}
	put := func(i, j int, ln float64) {
		if i != j {
			k := num(math.Exp(ln))
			q[i][j].Add(q[i][j], k)
			q[i][i].Sub(q[i][i], k)
		}
	}
	most := 0.0
	for _, x := range exchanges {
		put(x.From, x.To, x.LnForward)
		put(x.To, x.From, x.LnBack)
	}
	for i := range q {
		f, _ := q[i][i].Float64()
		most = math.Max(most, -f)
	}
	_, e := math.Frexp(most * t)
	halvings := max(0, e+8)
	h := new(big.Float).SetMantExp(num(t), -halvings)
	product := func(a, b [][]*big.Float) [][]*big.Float {
		c := make([][]*big.Float, n)
		x := num(0)
		for i := range c {
			c[i] = make([]*big.Float, n)
			for j := range c[i] {
				c[i][j] = num(0)
				for k := range n {
					if a[i][k].Sign() != 0 && b[k][j].Sign() != 0 {
						c[i][j].Add(c[i][j], x.Mul(a[i][k], b[k][j]))
					}
				}
			}
		}
		return c
	}
	p := make([][]*big.Float, n)
	term := make([][]*big.Float, n)
	for i := range p {
		p[i], term[i] = make([]*big.Float, n), make([]*big.Float, n)
		for j := range p[i] {
			p[i][j], term[i][j] = num(0), num(0)
		}
		p[i][i], term[i][i] = num(1), num(1)
	}
	for m := 1; m <= 42; m++ { // 2^-8 to the power 42 is below 2^-320
		term = product(term, q)
		f := new(big.Float).Quo(h, num(float64(m)))
		for i := range term {
			for j := range term[i] {
				term[i][j].Mul(term[i][j], f)
				p[i][j].Add(p[i][j], term[i][j])
			}
		}
	}
	for range halvings {
		p = product(p, p)
		for i := range p {
			for _, x := range p[i] {
				if x.MantExp(nil) < -3000 { // far below any float64
					x.SetInt64(0)
				}
			}
		}
	}
	return p
}

// through returns start·p.
func through(start []float64, p [][]*big.Float) []float64 {
	out := make([]float64, len(start))
	for j := range out {
		s := new(big.Float).SetPrec(prec)
		for i, x := range start {
			s.Add(s, new(big.Float).SetPrec(prec).Mul(new(big.Float).SetFloat64(x), p[i][j]))
		}
		out[j], _ = s.Float64()
	}
	return out
}

// random returns a connected network with rates over 25 decades, from energies, so
// that it obeys detailed balance, and those energies over RT. Each step after that
// may lose its return.
func random(rng *rand.Rand, n int, oneWay float64) ([]Exchange, []float64) {
	g := make([]float64, n)
	for i := range g {
		g[i] = 35 * rng.Float64()
	}
	var list []Exchange
	add := func(i, j int) {
		const top = 29.9 // ln 1e13
		ts := math.Max(g[i], g[j]) + (57.5-35)*rng.Float64()
		x := Exchange{i, j, top - (ts - g[i]), top - (ts - g[j])}
		if rng.Float64() < oneWay {
			x.LnBack = math.Inf(-1)
		}
		list = append(list, x)
	}
	for i := 1; i < n; i++ {
		add(rng.IntN(i), i)
	}
	for range rng.IntN(n) {
		if i, j := rng.IntN(n), rng.IntN(n); i != j {
			add(i, j)
		}
	}
	return list, g
}
