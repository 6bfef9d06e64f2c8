package branch

import (
	"errors"
	"math"
	"math/big"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"
)

func near(got, want, tol float64) bool { return math.Abs(got-want) <= tol*math.Abs(want) }

func TestClosedForms(t *testing.T) {
	for _, a := range []struct {
		name                 string
		transient, absorbing int
		rates                []Rate
		start, want          []float64
		source               string
	}{
		{"equal barriers give 50:50", 1, 2, []Rate{{0, 1, 3}, {0, 2, 3}}, []float64{1}, []float64{0.5, 0.5},
			"kinetic control, common practice"},
		{"competing steps", 1, 2, []Rate{{0, 1, 3}, {0, 2, 1}}, []float64{2}, []float64{0.75, 0.25},
			"parallel first-order steps, B/C = k1/k2, common practice"},
		{"one way out of a string", 3, 1, []Rate{{0, 1, 1}, {1, 0, 1e9}, {1, 2, 1e-9}, {2, 1, 1}, {2, 3, 1e-12}}, []float64{1, 0, 0}, []float64{1},
			"all of it ends somewhere"},
		{"partition of an intermediate", 2, 2, []Rate{{0, 1, 1}, {1, 0, 5}, {1, 2, 2}, {1, 3, 8}}, []float64{1, 0}, []float64{0.2, 0.8},
			"steady state, common practice"},
		{"fast exchange", 2, 2, []Rate{{0, 1, 1e12}, {1, 0, 5e12}, {0, 2, 1e-6}, {1, 3, 27e-6}}, []float64{1, 0}, []float64{1 / 6.4, 5.4 / 6.4},
			"Curtin-Hammett: Y/X = K·kB/kA, common practice; off by 1e-18 here"},
		{"start in two states and in an end", 2, 2, []Rate{{0, 2, 1}, {1, 3, 1}}, []float64{1, 2, 0, 1}, []float64{0.25, 0.75}, "by hand"},
		{"rates add up", 1, 2, []Rate{{0, 1, 1}, {0, 1, 1}, {0, 2, 2}, {0, 0, 7}}, []float64{1}, []float64{0.5, 0.5}, "by hand"},
		{"an end nothing reaches", 1, 2, []Rate{{0, 1, 1}, {0, 2, 0}}, []float64{1}, []float64{1, 0}, "by hand"},
		{"a trap nothing reaches", 2, 1, []Rate{{0, 2, 1}, {1, 0, 0}}, []float64{1, 0}, []float64{1}, "by hand"},
	} {
		t.Run(a.name, func(t *testing.T) {
			got, err := Absorb(a.transient, a.absorbing, a.rates, a.start)
			if err != nil {
				t.Fatal(err)
			}
			for i := range a.want {
				if !near(got[i], a.want[i], 1e-15) {
					t.Errorf("share %d = %v, want %v\nsource: %s", i, got[i], a.want[i], a.source)
				}
			}
		})
	}
}

// exact solves for the shares in fractions: x_i = Σ_j p_ij x_j + p_ie for each end e.
func exact(transient, absorbing int, rates []Rate, start []float64) []*big.Rat {
	all := transient + absorbing
	a := make([][]*big.Rat, transient) // unknowns: visits-weighted shares, one right side an end
	for i := range a {
		a[i] = make([]*big.Rat, all)
		for j := range a[i] {
			a[i][j] = new(big.Rat)
		}
	}
	// out_i x_i − Σ_j k_ij x_j = k_ie
	for _, r := range rates {
		if r.From == r.To {
			continue
		}
		k := new(big.Rat).SetFloat64(r.K)
		a[r.From][r.From].Add(a[r.From][r.From], k)
		if r.To < transient {
			a[r.From][r.To].Sub(a[r.From][r.To], k)
		} else {
			a[r.From][r.To].Add(a[r.From][r.To], k)
		}
	}
	for k := range transient {
		p := k
		for a[p][k].Sign() == 0 {
			p++
		}
		a[k], a[p] = a[p], a[k]
		for i := range transient {
			if i == k || a[i][k].Sign() == 0 {
				continue
			}
			f := new(big.Rat).Quo(a[i][k], a[k][k])
			for j := range a[i] {
				a[i][j].Sub(a[i][j], new(big.Rat).Mul(f, a[k][j]))
			}
		}
	}
	sum := new(big.Rat)
	shares := make([]*big.Rat, absorbing)
	for e := range shares {
		shares[e] = new(big.Rat)
	}
	for i, c := range start {
		s := new(big.Rat).SetFloat64(c)
		sum.Add(sum, s)
		for e := range shares {
			x := new(big.Rat).Quo(a[i][transient+e], a[i][i])
			shares[e].Add(shares[e], x.Mul(x, s))
		}
	}
	for e := range shares {
		shares[e].Quo(shares[e], sum)
	}
	return shares
}

// Every share keeps nearly all its digits with rates 40 orders apart, against
// exact fractions.
func TestAgainstFractions(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	worst, least := 0.0, 1.0
	for c := range 400 {
		transient, absorbing := 1+rng.IntN(6), 1+rng.IntN(3)
		var rates []Rate
		for i := range transient {
			for j := range transient + absorbing {
				// The first end can always be reached.
				if j == transient || rng.IntN(2) == 0 {
					rates = append(rates, Rate{i, j, math.Pow(10, 40*rng.Float64()-30)})
				}
			}
		}
		start := make([]float64, transient)
		start[0] = 1
		for i := range start {
			start[i] += float64(rng.IntN(2)) * rng.Float64()
		}
		got, err := Absorb(transient, absorbing, rates, start)
		if err != nil {
			t.Fatalf("case %d: %v", c, err)
		}
		sum := 0.0
		for e, want := range exact(transient, absorbing, rates, start) {
			w, _ := want.Float64()
			sum += got[e]
			if !near(got[e], w, 1e-14) {
				t.Errorf("case %d: share %d = %v, want %v", c, e, got[e], w)
			}
			if w > 0 {
				worst, least = max(worst, math.Abs(got[e]-w)/w), min(least, w)
			}
		}
		if math.Abs(sum-1) > 1e-15 {
			t.Errorf("case %d: shares sum to %v", c, sum)
		}
	}
	t.Logf("largest relative error %.1e; smallest share %.1e", worst, least)
}

// Traps within traps: products of small rates leave the range of float64 on the
// way, though the shares do not.
func TestNestedTraps(t *testing.T) {
	const n = 8 // 0 goes deeper with 1e-120 a level; only the last level has ways out
	var rates []Rate
	for i := range n - 1 {
		rates = append(rates, Rate{i, i + 1, 1e-120}, Rate{i + 1, i, 1e12})
	}
	rates = append(rates, Rate{n - 1, n, 3e-120}, Rate{n - 1, n + 1, 1e-120})
	got, err := Absorb(n, 2, rates, append([]float64{1}, make([]float64, n-1)...))
	if err != nil || !near(got[0], 0.75, 1e-14) || !near(got[1], 0.25, 1e-14) {
		t.Errorf("shares %v, %v; want 0.75 and 0.25", got, err)
	}
}

func TestInvariance(t *testing.T) {
	rates := []Rate{{0, 1, 2}, {1, 0, 3e8}, {1, 2, 5e-4}, {2, 1, 7}, {0, 3, 1e-9}, {2, 3, 1e-3}, {1, 4, 2e-6}, {2, 4, 8}}
	want, err := Absorb(3, 2, rates, []float64{1, 0.5, 0})
	if err != nil {
		t.Fatal(err)
	}
	again, err := Absorb(3, 2, rates, []float64{1, 0.5, 0})
	if err != nil || !slices.Equal(again, want) {
		t.Errorf("a second run gives %v, %v; first %v", again, err, want)
	}
	names := []int{2, 0, 1, 4, 3} // old state to new
	var renamed []Rate
	for _, r := range rates {
		renamed = append(renamed, Rate{names[r.From], names[r.To], r.K * 1e5}) // and another unit of time
	}
	got, err := Absorb(3, 2, renamed, []float64{0.5, 0, 1})
	if err != nil || !near(got[0], want[1], 1e-14) || !near(got[1], want[0], 1e-14) {
		t.Errorf("renamed: %v, %v; want %v the other way round", got, err, want)
	}
}

func TestRefusals(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	ok := []Rate{{0, 1, 1}}
	for _, a := range []struct {
		name                 string
		transient, absorbing int
		rates                []Rate
		start                []float64
		is                   error
		says                 string
	}{
		{"negative rate", 1, 1, []Rate{{0, 1, -1}}, []float64{1}, ErrDomain, "rate -1 from state 0 to 1; give a finite one"},
		{"NaN rate", 1, 1, []Rate{{0, 1, nan}}, []float64{1}, ErrDomain, "rate NaN"},
		{"infinite rate", 1, 1, []Rate{{0, 1, inf}}, []float64{1}, ErrDomain, "rate +Inf"},
		{"no such state", 1, 1, []Rate{{0, 2, 1}}, []float64{1}, ErrDomain, "states run from 0 to 1"},
		{"out of an end", 1, 1, []Rate{{0, 1, 1}, {1, 0, 1}}, []float64{1}, ErrDomain, "state 1, which is an end"},
		{"negative count", -1, 1, nil, nil, ErrDomain, "-1 transient"},
		{"wrong start", 1, 1, ok, []float64{1, 0, 0}, ErrDomain, "3 starting amounts; give 1"},
		{"negative start", 1, 1, ok, []float64{-1}, ErrDomain, "starting amount -1 of state 0"},
		{"NaN start", 1, 1, ok, []float64{nan}, ErrDomain, "starting amount NaN"},
		{"nothing at the start", 1, 1, ok, []float64{0}, ErrDomain, "nothing at the start"},
		{"no way out", 3, 1, []Rate{{0, 3, 1}, {0, 1, 1}, {1, 2, 1}, {2, 1, 1}}, []float64{1, 0, 0}, ErrNoExit, "state 1 has no way to any end"},
		{"no ends", 1, 0, nil, []float64{1}, ErrNoExit, "state 0"},
		{"a way of rate zero", 1, 1, []Rate{{0, 1, 0}}, []float64{1}, ErrNoExit, "state 0"},
	} {
		_, err := Absorb(a.transient, a.absorbing, a.rates, a.start)
		if !errors.Is(err, a.is) || !strings.Contains(err.Error(), a.says) {
			t.Errorf("%s: error %v, want one that says %q", a.name, err, a.says)
		}
	}
	_, err := Absorb(3, 1, []Rate{{0, 3, 1}, {0, 2, 1}}, []float64{1, 0, 0})
	var none *NoExit
	if !errors.As(err, &none) || none.State != 2 {
		t.Errorf("error %v, want state 2 named", err)
	}
}

func FuzzAbsorb(f *testing.F) {
	f.Add([]byte{2, 2, 0, 1, 10, 1, 2, 200, 1, 3, 7})
	f.Add([]byte{1, 1, 0, 1, 0})
	f.Fuzz(func(t *testing.T, in []byte) {
		if len(in) < 2 {
			return
		}
		transient, absorbing := 1+int(in[0]%5), int(in[1]%4)
		var rates []Rate
		for in = in[2:]; len(in) >= 3; in = in[3:] {
			k := math.Pow(2, 8*(float64(in[2])-128)) // 2^-1024 to 2^1016
			rates = append(rates, Rate{int(in[0] % 9), int(in[1] % 9), k})
		}
		start := make([]float64, transient)
		start[0] = 1
		got, err := Absorb(transient, absorbing, rates, start)
		if err != nil {
			if err.Error() == "" || !errors.Is(err, ErrDomain) && !errors.Is(err, ErrNoExit) {
				t.Fatalf("untyped error %v", err)
			}
			return
		}
		sum := 0.0
		for _, s := range got {
			if !(s >= 0) {
				t.Fatalf("share %v", s)
			}
			sum += s
		}
		if !(math.Abs(sum-1) < 1e-14) {
			t.Fatalf("shares %v sum to %v", got, sum)
		}
	})
}
