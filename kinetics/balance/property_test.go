package balance

import (
	"errors"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"saddlebook/kinetics/rate"
)

// Renaming the species, turning and reordering the reactions, or shifting the
// energies along a conservation law changes nothing; a second run changes no bit.
func TestInvariance(t *testing.T) {
	rng := rand.New(rand.NewPCG(8, 9))
	for c := range 300 {
		k := randomKnown(rng)
		n := len(k.p.G)
		base := solve(t, k.p)
		again := solve(t, k.p)
		if !slices.Equal(base.LnC, again.LnC) || base.Iterations != again.Iterations {
			t.Fatalf("case %d: a second run differs", c)
		}

		names := rng.Perm(n)
		moved := Problem{T: k.p.T, G: make([]float64, n), Start: make([]float64, n)}
		for i, j := range names {
			moved.G[j], moved.Start[j] = k.p.G[i], k.p.Start[i]
		}
		for _, r := range k.p.Reactions {
			moved.Reactions = append(moved.Reactions, Reaction{rename(r.To, names), rename(r.From, names)})
		}
		rng.Shuffle(len(moved.Reactions), func(i, j int) {
			moved.Reactions[i], moved.Reactions[j] = moved.Reactions[j], moved.Reactions[i]
		})
		got := solve(t, moved)
		for i, j := range names {
			if !(math.Abs(got.LnC[j]-base.LnC[i]) <= 1e-11) && got.LnC[j] != base.LnC[i] {
				t.Fatalf("case %d: renamed species %d: ln c %v, want %v", c, i, got.LnC[j], base.LnC[i])
			}
		}

		_, net, guess := k.p.running()
		species, _, _ := k.p.running()
		if len(species) == 0 {
			continue
		}
		l, err := newLaws(len(species), net, guess)
		if err != nil {
			t.Fatal(err)
		}
		shifted := k.p
		shifted.G = slices.Clone(k.p.G)
		for _, row := range l.row {
			x := 1e5 * rng.NormFloat64()
			for i, j := range species {
				shifted.G[j] += x * float64(row[i])
			}
		}
		got = solve(t, shifted)
		for i := range base.LnC {
			if !(math.Abs(got.LnC[i]-base.LnC[i]) <= 1e-10) && got.LnC[i] != base.LnC[i] {
				t.Fatalf("case %d: shifted along the laws, ln c of %d is %v, want %v", c, i, got.LnC[i], base.LnC[i])
			}
		}
	}
}

func rename(side []Term, names []int) []Term {
	out := make([]Term, len(side))
	for i, t := range side {
		out[i] = Term{names[t.Species], t.N}
	}
	return out
}

// Total electronic energies, -2.6e9 J/mol, leave the differences as exact as they
// were given.
func TestLargeEnergies(t *testing.T) {
	const zero = -1 << 31
	r := solve(t, Problem{298.15, []float64{zero, zero / 2, zero*3/2 - 32768}, adduct, []float64{1, 1, 0}})
	same := solve(t, Problem{298.15, []float64{0, 0, -32768}, adduct, []float64{1, 1, 0}})
	if !slices.Equal(r.LnC, same.LnC) {
		t.Errorf("ln c %v, want %v", r.LnC, same.LnC)
	}
}

// Every atom is found again: no law of the network is off by more than 1e-12.
func TestMass(t *testing.T) {
	rng := rand.New(rand.NewPCG(10, 11))
	for c := range 300 {
		k := randomKnown(rng)
		for i := range k.p.G {
			k.p.G[i] = RT * math.Pow(10, 2.5*rng.Float64()) * rng.NormFloat64() // not near any known answer
		}
		r := solve(t, k.p)
		species, net, guess := k.p.running()
		if len(species) == 0 {
			continue
		}
		l, err := newLaws(len(species), net, guess)
		if err != nil {
			t.Fatal(err)
		}
		for _, row := range l.row {
			off, size := 0.0, 0.0
			for i, j := range species {
				off += float64(row[i]) * (r.C[j] - k.p.Start[j])
				size += math.Abs(float64(row[i])) * (r.C[j] + k.p.Start[j])
			}
			if !(math.Abs(off) <= 1e-12*size) {
				t.Errorf("case %d: law %v is off by %g of %g", c, row, off, size)
			}
		}
		for i, row := range net {
			pull := 0.0
			for a, j := range species {
				pull += float64(row[a]) * (k.p.G[j]/(rate.R*k.p.T) + r.LnC[j])
			}
			if !(math.Abs(pull) <= 1e-10) {
				t.Errorf("case %d: reaction %d is %g RT from equilibrium", c, i, pull)
			}
		}
	}
}

// Energies up to 90 000 RT, far beyond sense: an answer is right or it is an error.
func TestNoConvergence(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	refused := 0
	for c := range 1500 {
		k := randomKnown(rng)
		for i := range k.p.G {
			k.p.G[i] = rate.R * k.p.T * 15000 * (2*rng.Float64() - 1)
		}
		r, err := Solve(k.p)
		var n *NoConvergence
		switch {
		case errors.As(err, &n):
			refused++
			if !errors.Is(err, ErrNoConvergence) || n.Iterations < 1 || n.Residual <= sound || r.C != nil {
				t.Errorf("case %d: result %v, error %v; want no result and the residual", c, r, err)
			}
			if !strings.Contains(err.Error(), "check the largest energies") {
				t.Errorf("error %q names no remedy", err)
			}
		case err != nil && !errors.Is(err, rate.ErrDomain):
			t.Errorf("case %d: untyped error %v", c, err)
		case err == nil && !(r.Residual <= sound):
			t.Errorf("case %d: residual %g passed", c, r.Residual)
		}
	}
	if refused == 0 {
		t.Error("no case was refused: the test tests nothing")
	}
	t.Logf("%d refused", refused)
}

// A search that runs out of steps says how far it got.
func TestOutOfSteps(t *testing.T) {
	l, err := newLaws(2, [][]int64{{-1, 1}}, []float64{1, 1})
	if err != nil {
		t.Fatal(err)
	}
	s := newSearch(l, []float64{1, 0}, []float64{0, -20000}, RT, []float64{0.5, 0.5})
	s.iterations = steps
	var n *NoConvergence
	if err := s.run(); !errors.As(err, &n) || n.Iterations != steps || n.Residual <= sound {
		t.Errorf("error %v, want no convergence after %d steps", err, steps)
	}
}

func FuzzSolve(f *testing.F) {
	f.Add([]byte{3, 0, 100, 200, 9, 9, 0, 0x01, 0x12, 0x20, 0x21})
	f.Add([]byte{2, 0, 255, 1, 0, 0x00, 0x11})
	f.Fuzz(func(t *testing.T, in []byte) {
		next := func() int {
			if len(in) == 0 {
				return 0
			}
			b := in[0]
			in = in[1:]
			return int(b)
		}
		n := 1 + next()%6
		p := Problem{T: 298.15, G: make([]float64, n), Start: make([]float64, n)}
		for i := range n {
			p.G[i] = 4000 * float64(next()-128)
		}
		for i := range n {
			if b := next(); b > 0 {
				p.Start[i] = math.Pow(2, float64(b-200)/4)
			}
		}
		for len(in) > 0 && len(p.Reactions) < 8 {
			var sides [2][]Term
			for range 4 {
				b := next()
				sides[b>>7] = append(sides[b>>7], Term{b % 16 % n, 1 + b>>4&3})
			}
			p.Reactions = append(p.Reactions, Reaction{sides[0], sides[1]})
		}
		r, err := Solve(p)
		if err != nil {
			if err.Error() == "" || !errors.Is(err, ErrNoConvergence) && !errors.Is(err, rate.ErrDomain) {
				t.Fatalf("untyped error %v", err)
			}
			return
		}
		if !(r.Residual <= 1e-12) {
			t.Fatalf("residual %g", r.Residual)
		}
		species, net, _ := p.running()
		for _, row := range net {
			pull, size := 0.0, 1.0
			for a, j := range species {
				pull += float64(row[a]) * (p.G[j]/RT + r.LnC[j])
				size += math.Abs(float64(row[a])) * math.Abs(p.G[j]/RT)
			}
			if !(math.Abs(pull) <= 1e-12*size) {
				t.Fatalf("a reaction is %g RT from equilibrium in %+v", pull, p)
			}
		}
	})
}
