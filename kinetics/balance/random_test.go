package balance

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"saddlebook/kinetics/rate"
)

// lnRat returns ln of a positive fraction, also far outside the range of float64.
func lnRat(x *big.Rat) float64 {
	f := new(big.Float).SetPrec(200).SetRat(x)
	exp := f.MantExp(f)
	m, _ := f.Float64()
	if m < 0.75 { // keep ln of numbers near 1 exact
		m, exp = m*2, exp-1
	}
	return math.Log(m) + float64(exp)*math.Ln2
}

// known is a problem with its answer: reactions are run by exact extents, and the
// energies are those at which the outcome is the equilibrium.
type known struct {
	p    Problem
	lnC  []float64
	runs []bool // species that can be there
	size float64
}

func randomKnown(rng *rand.Rand) known {
	n := 2 + rng.IntN(7)
	side := func() []Term {
		var out []Term
		for range 1 + rng.IntN(2) {
			out = append(out, Term{rng.IntN(n), 1 + rng.IntN(2)})
		}
		return out
	}
	p := Problem{T: 195.15 + 200*rng.Float64(), G: make([]float64, n), Start: make([]float64, n)}
	for range 1 + rng.IntN(n+1) {
		p.Reactions = append(p.Reactions, Reaction{side(), side()})
	}
	c := make([]*big.Rat, n)
	for i := range n {
		if rng.IntN(3) > 0 {
			p.Start[i] = math.Pow(10, -6*rng.Float64())
		}
		c[i] = new(big.Rat).SetFloat64(p.Start[i])
	}
	// First every reaction that can start does, so that no species is missed; then
	// some run almost to the end of a reactant.
	for range len(p.Reactions) {
		for _, r := range p.Reactions {
			run(c, r.From, r.To, 0)
			run(c, r.To, r.From, 0)
		}
	}
	bits := 1 + rng.IntN(120)
	for range rng.IntN(2 * len(p.Reactions)) {
		r := p.Reactions[rng.IntN(len(p.Reactions))]
		from, to := r.From, r.To
		if rng.IntN(2) == 0 {
			from, to = to, from
		}
		run(c, from, to, rng.IntN(bits))
	}
	k := known{p: p, lnC: make([]float64, n), runs: make([]bool, n)}
	for i := range n {
		k.p.G[i] = 1e4 * rng.NormFloat64()
		k.lnC[i] = math.Inf(-1)
		if c[i].Sign() > 0 {
			k.runs[i] = true
			k.lnC[i] = lnRat(c[i])
			k.p.G[i] = -rate.R * p.T * k.lnC[i]
		}
		k.size = max(k.size, math.Abs(k.p.G[i])/(rate.R*p.T))
	}
	return k
}

// run moves a reaction on by (1 − 2^−bits)/2 or so of what its scarcest reactant allows.
func run(c []*big.Rat, from, to []Term, bits int) {
	need := map[int]int64{}
	for _, t := range from {
		if c[t.Species].Sign() == 0 {
			return
		}
		need[t.Species] += int64(t.N)
	}
	var extent *big.Rat
	for i, n := range need {
		e := new(big.Rat).Quo(c[i], big.NewRat(n, 1))
		if extent == nil || e.Cmp(extent) < 0 {
			extent = e
		}
	}
	left := new(big.Rat).SetFrac(big.NewInt(1), new(big.Int).Lsh(big.NewInt(2), uint(bits)))
	extent.Mul(extent, left.Sub(big.NewRat(1, 1), left))
	// Keep the fractions short; the end stays clear of the exact exhaustion.
	f := new(big.Float).SetPrec(uint(bits + 20)).SetMode(big.ToZero).SetRat(extent)
	f.Rat(extent)
	for _, t := range from {
		c[t.Species] = new(big.Rat).Sub(c[t.Species], new(big.Rat).Mul(extent, big.NewRat(int64(t.N), 1)))
	}
	for _, t := range to {
		c[t.Species] = new(big.Rat).Add(c[t.Species], new(big.Rat).Mul(extent, big.NewRat(int64(t.N), 1)))
	}
}

func TestKnownEquilibria(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	worst, most, sum, widest := 0.0, 0, 0, 0.0
	const cases = 1000
	for i := range cases {
		k := randomKnown(rng)
		got, err := Solve(k.p)
		if err != nil {
			t.Fatalf("case %d: %v\n%+v", i, err, k.p)
		}
		for j := range k.lnC {
			if !k.runs[j] {
				if got.C[j] != 0 {
					t.Errorf("case %d: species %d is %g, want none", i, j, got.C[j])
				}
				continue
			}
			if e := math.Abs(got.LnC[j] - k.lnC[j]); !(e <= 1e-10) {
				t.Fatalf("case %d: ln c of species %d = %v, want %v (%g)\n%+v", i, j, got.LnC[j], k.lnC[j], e, k.p)
			} else {
				worst = max(worst, e)
			}
		}
		most, sum, widest = max(most, got.Iterations), sum+got.Iterations, max(widest, k.size)
	}
	t.Logf("worst error %.1e, Newton steps %.1f on average and %d at most, energies to %.0f RT", worst, float64(sum)/cases, most, widest)
}
