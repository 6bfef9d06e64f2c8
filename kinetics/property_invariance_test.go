package kinetics_test

import (
	"errors"
	"math"
	"math/big"
	"math/rand/v2"
	"slices"
	"testing"

	"saddlebook/kinetics"
)

func within(got, want, tol float64) bool {
	return math.Abs(got-want) <= tol*math.Max(math.Abs(got), math.Abs(want)) || got == want
}

// charge makes up what is charged: of some species nothing, of some a trace.
func charge(rng *rand.Rand, n int) []float64 {
	c := make([]float64, n)
	for i := range c {
		if rng.IntN(3) > 0 {
			c[i] = math.Pow(10, -4*rng.Float64())
		}
	}
	c[rng.IntN(n)] = 1
	return c
}

// limits asks for a kinetic limit, and tells whether there is one.
func limits(n *kinetics.Network, from int, products []int, held []float64) (*kinetics.Limits, bool) {
	l, err := n.KineticLimit(kinetics.Limit{From: from, Products: products, Held: held})
	return l, err == nil
}

// Other names, another order of species, of steps and of the terms of a side change
// nothing.
func TestPropertyRelabelling(t *testing.T) {
	rng := rand.New(rand.NewPCG(103, 1))
	compared := 0
	for c := range 300 {
		m, T := made(rng)
		n := network(t, m, T)
		size := len(m.Species)
		name := rng.Perm(size)
		order := rng.Perm(len(m.Steps))
		moved := *m
		moved.Species = make([]kinetics.Species, size)
		for i, j := range name {
			moved.Species[j] = m.Species[i]
			moved.Species[j].Name += "x"
		}
		rename := func(terms []kinetics.Term) []kinetics.Term {
			var out []kinetics.Term
			for _, x := range terms {
				out = append(out, kinetics.Term{Species: name[x.Species], N: x.N})
			}
			slices.Reverse(out)
			return out
		}
		moved.Steps = nil
		for _, i := range order {
			s := m.Steps[i]
			s.From, s.To = rename(s.From), rename(s.To)
			moved.Steps = append(moved.Steps, s)
		}
		other := network(t, &moved, T)
		for i, j := range name {
			if n.Known[i] && !within(other.G[j], n.G[i], 1e-11) {
				t.Errorf("mechanism %d: G of %s is %v, renamed %v", c, n.Names[i], n.G[i], other.G[j])
			}
		}
		for j, i := range order {
			a, b := n.Reactions[i], other.Reactions[j]
			if !within(a.LnForward, b.LnForward, 1e-11) || !within(a.LnBack, b.LnBack, 1e-11) {
				t.Errorf("mechanism %d: %s has ln k %v and %v, renamed %v and %v", c, a.Name, a.LnForward, a.LnBack, b.LnForward, b.LnBack)
			}
		}
		in := charge(rng, size)
		into, held, heldx := make([]float64, size), make([]float64, size), make([]float64, size)
		for i, j := range name {
			held[i] = 0.1 + rng.Float64()
			into[j], heldx[j] = in[i], held[i]
		}
		before, err1 := n.Equilibrium(in)
		after, err2 := other.Equilibrium(into)
		if (err1 == nil) != (err2 == nil) {
			t.Fatalf("mechanism %d: %v; renamed %v", c, err1, err2)
		}
		for i, j := range name {
			if err1 == nil && !(math.Abs(before.LnC[i]-after.LnC[j]) <= 1e-10) && before.LnC[i] != after.LnC[j] {
				t.Errorf("mechanism %d: ln c of %s is %v, renamed %v", c, n.Names[i], before.LnC[i], after.LnC[j])
			}
		}
		for range 24 {
			p := rng.Perm(size)[:3]
			a, ok1 := limits(n, p[0], p[1:], held)
			b, ok2 := limits(other, name[p[0]], []int{name[p[1]], name[p[2]]}, heldx)
			if ok1 != ok2 {
				t.Errorf("mechanism %d: a kinetic limit of %v is %v, renamed %v", c, p, ok1, ok2)
				continue
			}
			for k := range p[1:] {
				if ok1 && !within(a.Shares[k], b.Shares[k], 1e-10) {
					t.Errorf("mechanism %d: share %d of %v is %v, renamed %v", c, k, p, a.Shares[k], b.Shares[k])
				}
			}
			if ok1 {
				compared++
			}
		}
	}
	t.Logf("%d kinetic limits compared", compared)
	if compared < 100 {
		t.Errorf("only %d kinetic limits were compared", compared)
	}
}

// laws returns a basis of the conservation laws: weights of the species whose sum
// no step changes.
func laws(m *kinetics.Mechanism) [][]float64 {
	rows := make([][]int64, len(m.Species)) // by species, what each step changes
	for i := range rows {
		rows[i] = make([]int64, len(m.Steps))
	}
	for k, s := range m.Steps {
		for i, x := range netOf(s.From, s.To, len(m.Species)) {
			rows[i][k] = x
		}
	}
	var out [][]float64
	for _, w := range cycles(rows) {
		out = append(out, floats(w))
	}
	return out
}

func floats(row []*big.Rat) []float64 {
	out := make([]float64, len(row))
	for i, x := range row {
		out[i], _ = x.Float64()
	}
	return out
}

// The zero of energy is free: as many constants as there are conserved amounts may
// be added, each to all that holds the amount, transition states included.
func TestPropertyZeroOfEnergy(t *testing.T) {
	rng := rand.New(rand.NewPCG(104, 1))
	shifts := 0
	for c := range 300 {
		m, T := made(rng)
		n := network(t, m, T)
		for _, w := range laws(m) {
			shifts++
			x := 3e4 * rng.NormFloat64()
			moved := *m
			moved.Species, moved.Steps = slices.Clone(m.Species), slices.Clone(m.Steps)
			for i := range moved.Species {
				if moved.Species[i].Unknown {
					continue // its energy follows
				}
				moved.Species[i].Energy = moved.Species[i].Energy.Plus(x * w[i])
			}
			for i := range moved.Steps {
				s := &moved.Steps[i]
				if s.Law != nil || s.Above {
					continue // a difference
				}
				by := 0.0
				for _, term := range s.From {
					by += float64(term.N) * w[term.Species] * x
				}
				s.Energy = s.Energy.Plus(by)
			}
			other := network(t, &moved, T)
			for i, a := range n.Reactions {
				b := other.Reactions[i]
				tol := 1e-9
				if !(math.Abs(a.LnForward-b.LnForward) <= tol) || a.Returns && !(math.Abs(a.LnBack-b.LnBack) <= tol) {
					t.Errorf("mechanism %d: %s has ln k %v and %v, shifted %v and %v", c, a.Name, a.LnForward, a.LnBack, b.LnForward, b.LnBack)
				}
			}
			in := charge(rng, len(m.Species))
			before, err1 := n.Equilibrium(in)
			after, err2 := other.Equilibrium(in)
			if err := errors.Join(err1, err2); err != nil {
				t.Fatal(err)
			}
			for i := range before.LnC {
				if !(math.Abs(before.LnC[i]-after.LnC[i]) <= 1e-9) && before.LnC[i] != after.LnC[i] {
					t.Errorf("mechanism %d: ln c of %s is %v, shifted %v", c, n.Names[i], before.LnC[i], after.LnC[i])
				}
			}
		}
	}
	if shifts < 200 {
		t.Errorf("only %d shifts: the test tests too little", shifts)
	}
}
