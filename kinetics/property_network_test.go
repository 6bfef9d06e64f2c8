package kinetics_test

import (
	"fmt"
	"math"
	"math/big"
	"math/rand/v2"
	"slices"
	"testing"

	"saddlebook/kinetics"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/thermo"
)

const kcal = 1000 * rate.Calorie

// side makes up one side of a step: one to three molecules.
func side(rng *rand.Rand, species int) []kinetics.Term {
	switch rng.IntN(6) {
	case 0:
		return []kinetics.Term{{Species: rng.IntN(species), N: 2 + rng.IntN(2)}}
	case 1, 2:
		a, b := rng.IntN(species), rng.IntN(species)
		if a != b {
			return []kinetics.Term{{Species: a, N: 1 + rng.IntN(2)}, {Species: b, N: 1}}
		}
	}
	return []kinetics.Term{{Species: rng.IntN(species), N: 1}}
}

// joined is a side of two terms; one species makes one term, as in a reaction read.
func joined(a, b kinetics.Term) []kinetics.Term {
	if a.Species == b.Species {
		return []kinetics.Term{{Species: a.Species, N: a.N + b.N}}
	}
	return []kinetics.Term{a, b}
}

func netOf(from, to []kinetics.Term, species int) []int64 {
	net := make([]int64, species)
	for _, x := range from {
		net[x.Species] -= int64(x.N)
	}
	for _, x := range to {
		net[x.Species] += int64(x.N)
	}
	return net
}

// contents are what species are made of: two kinds of parts, which balanced steps
// keep.
var contents = [][2]int{{1, 0}, {1, 0}, {0, 1}, {1, 1}, {1, 1}, {2, 0}, {1, 2}}

func content(terms []kinetics.Term, of [][2]int) (sum [2]int) {
	for _, x := range terms {
		sum[0] += x.N * of[x.Species][0]
		sum[1] += x.N * of[x.Species][1]
	}
	return sum
}

func changes(net []int64) bool { return slices.ContainsFunc(net, func(x int64) bool { return x != 0 }) }

// energyAt is the free energy of a species at 1 mol/L, in J/mol.
func energyAt(s *kinetics.Species, T float64) float64 {
	g := s.Energy.At(T) + s.Standard.Shift(T)
	if s.Forms > 1 {
		g -= rate.R * T * math.Log(float64(s.Forms))
	}
	return g
}

// made makes up a mechanism with every form of energy and of step, closed loops
// among them, and a temperature at which it holds.
func made(rng *rand.Rand) (*kinetics.Mechanism, float64) {
	T := 180 + 250*rng.Float64()
	m := &kinetics.Mechanism{ID: "made up", Temperature: T}
	n := 3 + rng.IntN(6)
	balanced := rng.IntN(3) > 0
	of := make([][2]int, n)
	for i := range of {
		of[i] = contents[rng.IntN(len(contents))]
	}
	standard := func() rate.Standard {
		return rate.Standard{Pressure: []float64{0, 0, rate.Bar, rate.Atmosphere}[rng.IntN(4)]}
	}
	for i := range n {
		s := kinetics.Species{Name: fmt.Sprintf("S%d", i), Forms: rng.IntN(4), Standard: standard()}
		h, ds := 5e4*rng.NormFloat64(), 100*rng.NormFloat64()
		switch rng.IntN(4) {
		case 0:
			s.Energy = thermo.Constant(h)
		case 1:
			s.Energy = thermo.Following(h, ds)
		case 2:
			s.Energy = thermo.Energy{Heat: &thermo.Heat{H: h, S: ds, Cp: 80 * rng.Float64()}}
		default:
			s.Energy = thermo.Energy{Conformers: []thermo.Energy{thermo.Constant(h), {G: h + 3e3*rng.Float64(), Forms: 2}}}
		}
		m.Species = append(m.Species, s)
	}
	level := func(terms []kinetics.Term) float64 {
		g := 0.0
		for _, x := range terms {
			g += float64(x.N) * energyAt(&m.Species[x.Species], T)
		}
		return g
	}
	for tries, wanted := 0, n+rng.IntN(n); tries < 300 && len(m.Steps) < wanted; tries++ {
		s := kinetics.Step{Name: fmt.Sprintf("T%d", len(m.Steps)), From: side(rng, n), To: side(rng, n), Returns: rng.IntN(5) > 0, Standard: standard()}
		if rng.IntN(5) == 0 { // a catalyst
			c := kinetics.Term{Species: rng.IntN(n), N: 1}
			s.From, s.To = joined(s.From[0], c), joined(s.To[0], c)
		}
		if !changes(netOf(s.From, s.To, n)) || kinetics.Molecules(s.From) > 3 || kinetics.Molecules(s.To) > 3 || balanced && content(s.From, of) != content(s.To, of) {
			continue
		}
		two := kinetics.Molecules(s.From) == 2 || kinetics.Molecules(s.To) == 2 && s.Returns
		up := max(0, level(s.To)-level(s.From))
		switch barrier := up + 2e3 + 8e4*rng.Float64(); rng.IntN(6) {
		case 0:
			s.Above = true
			s.Energy = thermo.Constant(barrier - float64(1-kinetics.Molecules(s.From))*s.Standard.Shift(T))
		case 1:
			k := math.Exp(30 - 60*rng.Float64())
			s.Law = &kinetics.Law{Kind: kinetics.Measured, Forward: &kinetics.Constant{K: k, At: T}}
		case 2:
			ea := barrier
			s.Law = &kinetics.Law{Kind: kinetics.Measured, Forward: &kinetics.Constant{A: 1e11, Ea: &ea}}
		case 3:
			if two {
				s.Law = &kinetics.Law{Kind: kinetics.AtDiffusion}
				break
			}
			if s.Returns && kinetics.Molecules(s.From) < 3 && kinetics.Molecules(s.To) < 3 {
				s.Law = &kinetics.Law{Kind: kinetics.KeptFast}
				break
			}
			fallthrough
		default:
			s.Energy = thermo.Constant(level(s.From) + barrier - s.Standard.Shift(T))
		}
		if s.Law == nil || s.Law.Kind == kinetics.Measured {
			s.Degeneracy, s.Transmission = float64(rng.IntN(4)), []float64{0, 0.5, 1}[rng.IntN(3)]
			s.Limited = two && rng.IntN(3) == 0
			if rng.IntN(3) == 0 {
				s.Tunnelling = &rate.Tunnelling{By: rate.ByEckart, Imaginary: 1e5 * (0.2 + rng.Float64()), Forward: 4e4 + 4e4*rng.Float64(), Back: 4e4 + 4e4*rng.Float64()}
			}
		}
		m.Steps = append(m.Steps, s)
	}
	if rng.IntN(2) == 0 {
		addStated(rng, m, T)
	}
	return m, T
}

// addStated adds a loop through two species without an energy: constants both
// ways, a constant with K, and one whose return follows from these.
func addStated(rng *rand.Rand, m *kinetics.Mechanism, T float64) {
	k := func() *kinetics.Constant { return &kinetics.Constant{K: math.Exp(20 - 40*rng.Float64()), At: T} }
	u := len(m.Species)
	m.Species = append(m.Species, kinetics.Species{Name: "U", Unknown: true}, kinetics.Species{Name: "V", Unknown: true})
	one := func(i int) []kinetics.Term { return []kinetics.Term{{Species: i, N: 1}} }
	m.Steps = append(m.Steps,
		kinetics.Step{Name: "L1", From: one(0), To: one(u), Returns: true, Law: &kinetics.Law{Kind: kinetics.Measured, Forward: k(), Back: k()}},
		kinetics.Step{Name: "L2", From: []kinetics.Term{{Species: u, N: 2}}, To: one(u + 1), Returns: true,
			Law: &kinetics.Law{Kind: kinetics.Measured, Forward: k()}, K: &kinetics.StatedK{K: math.Exp(15 - 30*rng.Float64()), At: T}},
		kinetics.Step{Name: "L3", From: one(u + 1), To: []kinetics.Term{{Species: 0, N: 2}}, Returns: true, Law: &kinetics.Law{Kind: kinetics.Measured, Forward: k()}},
	)
}

func network(t testing.TB, m *kinetics.Mechanism, T float64) *kinetics.Network {
	t.Helper()
	n, err := m.At(T)
	if err != nil {
		t.Fatal(err)
	}
	return n
}

// cycles returns combinations of the rows that come to nothing, found in rational
// numbers: all others are made of these.
func cycles(rows [][]int64) [][]*big.Rat {
	if len(rows) == 0 {
		return nil
	}
	cols := len(rows[0])
	a := make([][]*big.Rat, len(rows)) // the row, then what it is made of
	for i, row := range rows {
		a[i] = make([]*big.Rat, cols+len(rows))
		for j := range a[i] {
			a[i][j] = new(big.Rat)
		}
		for j, x := range row {
			a[i][j].SetInt64(x)
		}
		a[i][cols+i].SetInt64(1)
	}
	done := 0
	for col := 0; col < cols && done < len(a); col++ {
		for i := done; i < len(a); i++ {
			if a[i][col].Sign() != 0 {
				a[i], a[done] = a[done], a[i]
				break
			}
		}
		if a[done][col].Sign() == 0 {
			continue
		}
		for i := done + 1; i < len(a); i++ {
			if a[i][col].Sign() == 0 {
				continue
			}
			f := new(big.Rat).Quo(a[i][col], a[done][col])
			for j := range a[i] {
				a[i][j] = new(big.Rat).Sub(a[i][j], new(big.Rat).Mul(f, a[done][j]))
			}
		}
		done++
	}
	var out [][]*big.Rat
	for _, row := range a[done:] {
		out = append(out, row[cols:])
	}
	return out
}

// Every network obeys detailed balance: the constants of a step stand to each other
// as exp(−ΔG/RT) of its species, and around every closed loop the product of the
// constants one way is that of the constants the other way, whatever gave them:
// energies, barriers, measured, diffusion, kept fast, tunnelling, limited.
func TestPropertyDetailedBalance(t *testing.T) {
	rng := rand.New(rand.NewPCG(101, 1))
	loops, laws := 0, map[kinetics.LawKind]int{}
	for c := range 600 {
		m, T := made(rng)
		n := network(t, m, T)
		var rows [][]int64
		var ln, size []float64
		for _, r := range n.Reactions {
			laws[r.Law]++
			if !r.Returns {
				if r.Back != 0 || !math.IsInf(r.LnBack, -1) {
					t.Errorf("network %d: %s has a rate back without a return", c, r.Name)
				}
				continue
			}
			net := netOf(r.From, r.To, len(n.Names))
			dG, scale := 0.0, 1.0
			for i, x := range net {
				dG += float64(x) * n.G[i]
				scale += math.Abs(float64(x) * n.G[i] / (rate.R * T))
			}
			lnK := r.LnForward - r.LnBack
			scale += math.Abs(r.LnForward) + math.Abs(r.LnBack)
			if !(math.Abs(lnK+dG/(rate.R*T)) <= 1e-13*scale) {
				t.Errorf("network %d: %s has ln k/k-back %v, −ΔG/RT %v", c, r.Name, lnK, -dG/(rate.R*T))
			}
			if !(math.Abs(lnK-math.Log(r.K)) <= 1e-13*scale) && r.K > 0 && !math.IsInf(r.K, 0) {
				t.Errorf("network %d: %s has ln k/k-back %v, ln K %v", c, r.Name, lnK, math.Log(r.K))
			}
			rows, ln, size = append(rows, net), append(ln, lnK), append(size, scale)
		}
		for _, loop := range cycles(rows) {
			loops++
			off, scale := 0.0, 0.0
			for i, x := range loop {
				f, _ := x.Float64()
				off += f * ln[i]
				scale += math.Abs(f) * size[i]
			}
			if !(math.Abs(off) <= 1e-13*scale) {
				t.Errorf("network %d: around the loop %v the constants miss by %g in ln", c, loop, off)
			}
		}
	}
	if loops < 300 || laws[kinetics.Measured] < 100 || laws[kinetics.AtDiffusion] < 30 || laws[kinetics.KeptFast] < 30 {
		t.Errorf("%d loops and laws %v: the test tests too little", loops, laws)
	}
	t.Logf("%d loops, laws %v", loops, laws)
}

// Constants that are stated all around a loop and do not agree are refused.
func TestPropertyBrokenLoops(t *testing.T) {
	rng := rand.New(rand.NewPCG(102, 1))
	for c := range 100 {
		m, T := made(rng)
		addStated(rng, m, T)
		n := network(t, m, T)
		last := &m.Steps[len(m.Steps)-1]
		agrees := n.Reactions[len(m.Steps)-1].Back
		state := func(off float64) error {
			last.Law.Back = &kinetics.Constant{K: agrees * off, At: T}
			_, err := m.At(T)
			return err
		}
		if err := state(1); err != nil {
			t.Errorf("network %d: the return that follows is refused when it is stated: %v", c, err)
		}
		if state(2) == nil || state(0.5) == nil {
			t.Errorf("network %d: a loop that is off by a factor of 2 passed", c)
		}
	}
}
