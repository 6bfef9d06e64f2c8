package balance

import (
	"errors"
	"math"
	"math/big"
	"slices"
	"strings"
	"testing"

	"saddlebook/kinetics/rate"
)

const RT = rate.R * 298.15

func near(got, want, tol float64) bool { return math.Abs(got-want) <= tol*math.Abs(want) }

// terms reads pairs of species and count.
func terms(pairs ...int) []Term {
	var out []Term
	for i := 0; i < len(pairs); i += 2 {
		out = append(out, Term{pairs[i], pairs[i+1]})
	}
	return out
}

var (
	isomers = []Reaction{{terms(0, 1), terms(1, 1)}}              // A ⇌ B
	dimers  = []Reaction{{terms(0, 2), terms(1, 1)}}              // 2 A ⇌ A2
	adduct  = []Reaction{{terms(0, 1, 1, 1), terms(2, 1)}}        // A + B ⇌ C
	splits  = []Reaction{{terms(0, 1), terms(1, 1, 2, 1)}}        // A ⇌ B + C
	powers  = []float64{-300, -30, -12, -3, 0, 1, 5, 12, 30, 300} // log10 K
	sizes   = []float64{1e-9, 1e-3, 0.2, 1, 17}                   // mol/L
)

// solve fails the test on an error and checks what holds of every answer.
func solve(t *testing.T, p Problem) Result {
	t.Helper()
	r, err := Solve(p)
	if err != nil {
		t.Fatalf("%v\n%+v", err, p)
	}
	if !(r.Residual <= 1e-12) {
		t.Errorf("residual %g", r.Residual)
	}
	return r
}

// want compares ln c, so that traces count in full.
func want(t *testing.T, what string, r Result, tol float64, lnC ...float64) {
	t.Helper()
	for i, w := range lnC {
		if !(math.Abs(r.LnC[i]-w) <= tol) && r.LnC[i] != w {
			t.Errorf("%s: ln c of species %d = %v, want %v", what, i, r.LnC[i], w)
		}
	}
}

// Closed forms, written so that no term cancels.
func TestClosedForms(t *testing.T) {
	log1pexp := func(x float64) float64 { return math.Max(x, 0) + math.Log1p(math.Exp(-math.Abs(x))) }
	for _, power := range powers {
		lnK := power * math.Ln10
		for _, c := range sizes {
			tol := 1e-12 + 1e-15*math.Abs(lnK)
			r := solve(t, Problem{298.15, []float64{0, -RT * lnK}, isomers, []float64{c, 0}})
			want(t, "A ⇌ B", r, tol, math.Log(c)-log1pexp(lnK), math.Log(c)-log1pexp(-lnK))

			// 2K a² + a = c: a = 2c/(1 + √(1 + 8Kc))
			s := 0.5 * log1pexp(math.Log(8*c)+lnK)
			a := math.Log(2*c) - log1pexp(s)
			r = solve(t, Problem{298.15, []float64{0, -RT * lnK}, dimers, []float64{c, 0}})
			want(t, "2 A ⇌ A2", r, tol, a, 2*a+lnK)

			// Equal amounts: K a² + a = c: a = 2c/(1 + √(1 + 4Kc))
			s = 0.5 * log1pexp(math.Log(4*c)+lnK)
			a = math.Log(2*c) - log1pexp(s)
			r = solve(t, Problem{298.15, []float64{0, 0, -RT * lnK}, adduct, []float64{c, c, 0}})
			want(t, "A + B ⇌ C", r, tol, a, a, 2*a+lnK)
			r = solve(t, Problem{298.15, []float64{0, 0, -RT * lnK}, adduct, []float64{0, 0, c}})
			want(t, "C ⇌ A + B", r, tol, a, a, 2*a+lnK)

			// b²/a = K, a + b = c: b = 2c/(1 + √(1 + 4c/K))
			s = 0.5 * log1pexp(math.Log(4*c)-lnK)
			b := math.Log(2*c) - log1pexp(s)
			r = solve(t, Problem{298.15, []float64{0, -RT * lnK, 0}, splits, []float64{c, 0, 0}})
			want(t, "A ⇌ B + C", r, tol, 2*b-lnK, b, b)
		}
	}
}

func TestUnequalAmounts(t *testing.T) {
	const source = "c = (s − √(s² − 4·a0·b0))/2, s = a0 + b0 + 1/K; evaluated with 30 digits"
	for _, a := range []struct{ a0, b0, K, c float64 }{{1, 1, 10, 0.7298437881283576}, {1, 2, 100, 0.9901942113767562}} {
		r := solve(t, Problem{298.15, []float64{0, 0, -RT * math.Log(a.K)}, adduct, []float64{a.a0, a.b0, 0}})
		if !near(r.C[2], a.c, 1e-13) {
			t.Errorf("C = %v, want %v\nsource: %s", r.C[2], a.c, source)
		}
	}
}

// A string of equilibria: shares as Boltzmann weights, over 60 powers of ten.
func TestString(t *testing.T) {
	const n = 25
	p := Problem{T: 298.15, G: make([]float64, n), Start: make([]float64, n)}
	p.Start[7] = 0.3
	sum := new(big.Float).SetPrec(300)
	lnK := make([]float64, n)
	for i := range n {
		lnK[i] = 70 * math.Sin(float64(3*i))
		p.G[i] = -RT * lnK[i]
		if i > 0 {
			p.Reactions = append(p.Reactions, Reaction{terms(i-1, 1), terms(i, 1)})
		}
		sum.Add(sum, big.NewFloat(math.Exp(lnK[i])))
	}
	whole, _ := sum.Float64()
	r := solve(t, p)
	mass := 0.0
	for i := range n {
		want(t, "string", Result{LnC: r.LnC[i:]}, 1e-12, math.Log(0.3)+lnK[i]-math.Log(whole))
		mass += r.C[i]
	}
	if !near(mass, 0.3, 1e-14) {
		t.Errorf("mass %v, want 0.3", mass)
	}
}

// bisect returns the x between lo and hi at which the rising f passes zero.
func bisect(lo, hi float64, f func(x *big.Float) *big.Float) *big.Float {
	a, b := big.NewFloat(lo).SetPrec(400), big.NewFloat(hi).SetPrec(400)
	half := big.NewFloat(0.5)
	for range 390 {
		x := new(big.Float).Add(a, b)
		x.Mul(x, half)
		if f(x).Sign() > 0 {
			b = x
		} else {
			a = x
		}
	}
	return a
}

func num(x float64) *big.Float       { return big.NewFloat(x).SetPrec(400) }
func add(a ...*big.Float) *big.Float { return fold((*big.Float).Add, a) }
func mul(a ...*big.Float) *big.Float { return fold((*big.Float).Mul, a) }
func sub(a, b *big.Float) *big.Float { return new(big.Float).Sub(a, b) }
func pow2(n int) *big.Float          { return new(big.Float).SetMantExp(num(1), n) }
func fold(op func(z, x, y *big.Float) *big.Float, a []*big.Float) *big.Float {
	z := new(big.Float).Copy(a[0])
	for _, x := range a[1:] {
		op(z, z, x)
	}
	return z
}

// Networks with more than one reaction against bisection with 400 bits, which
// shares nothing with the program.
func TestAgainstBisection(t *testing.T) {
	G := func(bits int) float64 { return -RT * math.Ln2 * float64(bits) }
	for _, k := range [][2]int{{0, 0}, {40, -40}, {-90, 90}, {100, 60}, {-60, -100}, {3, 120}} {
		// 2 A ⇌ D (K1), A + B ⇌ C (K2); a0 = 1, b0 = 0.25.
		// d = K1 a², b = b0/(1 + K2 a), c = K2 a b; a + 2d + c rises with a.
		K1, K2 := pow2(k[0]), pow2(k[1])
		rest := func(a *big.Float) (b, c, d *big.Float) {
			b = new(big.Float).Quo(num(0.25), add(num(1), mul(K2, a)))
			return b, mul(K2, a, b), mul(K1, a, a)
		}
		a := bisect(0, 1, func(a *big.Float) *big.Float {
			_, c, d := rest(a)
			return sub(add(a, d, d, c), num(1))
		})
		b, c, d := rest(a)
		r := solve(t, Problem{298.15, []float64{0, 0, G(k[1]), G(k[0])},
			[]Reaction{{terms(0, 2), terms(3, 1)}, {terms(0, 1, 1, 1), terms(2, 1)}}, []float64{1, 0.25, 0, 0}})
		compare(t, r, a, b, c, d)

		// A ⇌ B (K1), A + 2 B ⇌ 3 C (K2), only A: b = K1 a, c³ = K2 a b². c as the variable
		// would need a root; take K2·K1² = 8ⁿ so that c = 2ⁿ a.
		n := k[1] / 3
		K2bits := 3*n - 2*k[0]
		a = bisect(0, 1, func(a *big.Float) *big.Float {
			return sub(add(a, mul(K1, a), mul(pow2(n), a)), num(1))
		})
		// c³ at G: ΔG of A + 2 B ⇌ 3 C is 3 G(C) − 2 G(B).
		r = solve(t, Problem{298.15, []float64{0, G(k[0]), (G(K2bits) + 2*G(k[0])) / 3},
			[]Reaction{{terms(0, 1), terms(1, 1)}, {terms(0, 1, 1, 2), terms(2, 3)}}, []float64{1, 0, 0}})
		compare(t, r, a, mul(K1, a), mul(pow2(n), a))
	}
}

func compare(t *testing.T, r Result, c ...*big.Float) {
	t.Helper()
	for i, x := range c {
		exact, _ := x.Rat(nil)
		if w := lnRat(exact); !(math.Abs(r.LnC[i]-w) <= 1e-12) {
			t.Errorf("ln c of species %d = %v, want %v", i, r.LnC[i], w)
		}
	}
}

// What can and cannot be there.
func TestPresence(t *testing.T) {
	A, B, X, AX := 0, 1, 2, 3
	cycle := []Reaction{{terms(A, 1, X, 1), terms(AX, 1)}, {terms(AX, 1), terms(B, 1, X, 1)}}
	G := []float64{0, -RT * math.Log(3), 0, 0}
	for _, a := range []struct {
		name      string
		reactions []Reaction
		start     []float64
		want      []float64 // NaN: any amount above zero
	}{
		{"no reaction", nil, []float64{1, 0, 2, 0}, []float64{1, 0, 2, 0}},
		{"nothing charged", cycle, []float64{0, 0, 0, 0}, []float64{0, 0, 0, 0}},
		{"a cycle without its catalyst", cycle, []float64{1, 0, 0, 0}, []float64{1, 0, 0, 0}},
		{"a trace of catalyst", cycle, []float64{1, 0, 1e-9, 0}, []float64{0.25, 0.75, math.NaN(), math.NaN()}},
		{"the catalyst alone", cycle, []float64{0, 0, 0.1, 0}, []float64{0, 0, 0.1, 0}},
		{"a catalyst in the step", []Reaction{{terms(A, 1, X, 1), terms(B, 1, X, 1)}}, []float64{1, 0, 0.125, 0}, []float64{0.25, 0.75, 0.125, 0}},
		{"and without it", []Reaction{{terms(A, 1, X, 1), terms(B, 1, X, 1)}}, []float64{1, 0, 0, 0}, []float64{1, 0, 0, 0}},
		{"its own catalyst, no seed", []Reaction{{terms(A, 1, B, 1), terms(B, 2)}}, []float64{1, 0, 0, 0}, []float64{1, 0, 0, 0}},
		{"its own catalyst, a seed", []Reaction{{terms(A, 1, B, 1), terms(B, 2)}}, []float64{0.5, 0.5, 0, 0}, []float64{0.25, 0.75, 0, 0}},
		{"no change", []Reaction{{terms(A, 1, X, 1), terms(X, 1, A, 1)}}, []float64{1, 0, 1, 0}, []float64{1, 0, 1, 0}},
		{"a spectator keeps its amount", isomers, []float64{1, 0, 0.3, 0}, []float64{0.25, 0.75, 0.3, 0}},
		{"two parts apart", []Reaction{{terms(A, 1), terms(B, 1)}, {terms(X, 1), terms(AX, 1)}}, []float64{4, 0, 0, 1e-12}, []float64{1, 3, 5e-13, 5e-13}},
		{"said twice", slices.Concat(isomers, isomers, []Reaction{{terms(B, 2), terms(A, 2)}}), []float64{4, 0, 0, 0}, []float64{1, 3, 0, 0}},
		{"one side of a pair missing", adduct, []float64{1, 0, 0, 0}, []float64{1, 0, 0, 0}},
		{"from nothing", []Reaction{{nil, terms(B, 1)}}, []float64{0, 0, 0, 0}, []float64{0, 3, 0, 0}},
	} {
		t.Run(a.name, func(t *testing.T) {
			r := solve(t, Problem{298.15, G, a.reactions, a.start})
			for i, w := range a.want {
				switch {
				case math.IsNaN(w) && !(r.C[i] > 0):
					t.Errorf("species %d is %g, want some", i, r.C[i])
				case w == 0 && (r.C[i] != 0 || !math.IsInf(r.LnC[i], -1)):
					t.Errorf("species %d is %g (ln %g), want exactly none", i, r.C[i], r.LnC[i])
				case w != 0 && !math.IsNaN(w) && !near(r.C[i], w, 2e-9): // a bound trace of catalyst takes 1e-9 of A
					t.Errorf("species %d is %v, want %v", i, r.C[i], w)
				}
			}
		})
	}
}

// A product of 1e-15 of the total keeps its digits, beside a competing main one.
func TestTrace(t *testing.T) {
	lnK := math.Log(1e-15)
	r := solve(t, Problem{298.15, []float64{0, -RT * 20, -RT * (20 + lnK)},
		[]Reaction{{terms(0, 1), terms(1, 1)}, {terms(0, 1), terms(2, 1)}}, []float64{1, 0, 0}})
	if got := r.C[2] / r.C[1]; !near(got, 1e-15, 1e-12) {
		t.Errorf("trace over main product = %v, want 1e-15", got)
	}
	// 2 B ⇌ B2 with almost all of B bound elsewhere: the dimer is the square of a trace.
	r = solve(t, Problem{298.15, []float64{0, 0, -RT * 60, 0},
		[]Reaction{adduct[0], {terms(1, 2), terms(3, 1)}}, []float64{1, 1, 0, 0}})
	if !near(r.C[3], r.C[1]*r.C[1], 1e-13) || !near(r.C[2]/(r.C[0]*r.C[1]), math.Exp(60), 1e-12) {
		t.Errorf("mass action fails in %v", r.C)
	}
	if !near(r.C[0], r.C[1]+2*r.C[3], 1e-13) {
		t.Errorf("free A %v against free B %v: equal amounts were charged", r.C[0], r.C[1]+2*r.C[3])
	}
}

func TestRefusals(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	g, c := []float64{0, 0}, []float64{1, 0}
	for _, a := range []struct {
		name string
		p    Problem
		is   error
		says string
	}{
		{"T", Problem{0, g, isomers, c}, rate.ErrDomain, "temperature (K) of 0 is not possible"},
		{"T NaN", Problem{nan, g, isomers, c}, rate.ErrDomain, "temperature (K) of NaN"},
		{"lengths", Problem{300, g, isomers, c[:1]}, rate.ErrDomain, "2 energies and 1 starting amounts"},
		{"energy", Problem{300, []float64{0, inf}, isomers, c}, rate.ErrDomain, "free energy (J/mol) of species 1 of +Inf"},
		{"negative amount", Problem{300, g, isomers, []float64{-1, 0}}, rate.ErrDomain, "starting amount (mol/L) of species 0 of -1"},
		{"NaN amount", Problem{300, g, isomers, []float64{nan, 0}}, rate.ErrDomain, "starting amount"},
		{"no such species", Problem{300, g, []Reaction{{terms(0, 1), terms(2, 1)}}, c}, rate.ErrDomain, "species run from 0 to 1"},
		{"no molecule", Problem{300, g, []Reaction{{terms(0, 0), terms(1, 1)}}, c}, rate.ErrDomain, "the count of species 0 in reaction 0 of 0"},
		{"energies without a common zero", Problem{298.15, []float64{0, 0, -3e9}, adduct, []float64{1, 1, 0}}, rate.ErrDomain, "a reaction energy (J/mol) of -3e+09"},
		{"too large numbers", Problem{300, make([]float64, 4), []Reaction{
			{terms(0, 1000003), terms(1, 1000033)}, {terms(1, 1000037), terms(2, 1000039)}, {terms(2, 1000081), terms(3, 1000099)},
		}, []float64{1, 1, 1, 1}}, rate.ErrDomain, "conservation laws"},
	} {
		_, err := Solve(a.p)
		if !errors.Is(err, a.is) || !strings.Contains(err.Error(), a.says) {
			t.Errorf("%s: error %v, want one that says %q", a.name, err, a.says)
		}
	}
}

func BenchmarkSolve(b *testing.B) {
	p := Problem{298.15, []float64{0, 0, -8 * kcal, -12 * kcal},
		[]Reaction{adduct[0], {terms(0, 1, 1, 1), terms(3, 1)}}, []float64{0.2, 0.22, 0, 0}}
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Solve(p); err != nil {
			b.Fatal(err)
		}
	}
}
