package control

import (
	"math"
	"slices"

	"saddlebook/kinetics"
	"saddlebook/kinetics/rate"
)

// answer says how the logarithm of a rate answers to every rate constant, to
// every concentration and to every total.
type answer struct {
	rate          float64   // mol/L/s
	forward, back []float64 // by number of the reaction: ∂ ln r/∂ ln k
	order         []float64 // by species; NaN: it is not stated, or 0
}

// rate returns the rate of formation of a sum.
func (t *steady) rate(sum []kinetics.Term) float64 {
	f := t.formed(sum)
	r := 0.0
	for i, null := range t.null {
		r += dot(f, null) * t.xi[i]
	}
	return r
}

// answers differentiates the steady state: one solution of the transposed equations.
func (t *steady) answers(sum []kinetics.Term) (answer, bool) {
	species := len(t.n.Names)
	a := answer{rate: t.rate(sum), forward: make([]float64, len(t.n.Reactions)), back: make([]float64, len(t.n.Reactions)), order: make([]float64, species)}
	_, parts := t.residual(t.x, t.xi)
	m, scale := t.jacobian(t.x, parts)
	size := len(m)
	turned := make([][]float64, size)
	for i := range turned {
		turned[i] = make([]float64, size)
		for j := range turned[i] {
			turned[i][j] = m[j][i]
		}
	}
	f, ok := factorise(turned)
	if !ok || a.rate == 0 {
		return a, false
	}
	lambda := make([]float64, size)
	formed := t.formed(sum)
	for i, null := range t.null {
		lambda[len(t.free)+i] = dot(formed, null) * scale[i] / a.rate
	}
	f.solve(lambda)
	for k, st := range t.steps {
		ef, eb := -lambda[k]*parts[k].da, -lambda[k]*parts[k].db
		a.forward[st.number], a.back[st.number] = ef, eb
		for _, q := range st.r.From {
			if t.place[q.Species] < 0 {
				a.order[q.Species] += ef * float64(q.N)
			}
		}
		for _, q := range st.r.To {
			if t.place[q.Species] < 0 {
				a.order[q.Species] += eb * float64(q.N)
			}
		}
	}
	for i, l := range t.laws {
		_, size := l.sums(t.x)
		for j, s := range t.free {
			a.order[s] += lambda[len(t.steps)+i] * l.w[j] * t.total[s] / size
		}
	}
	for s := range a.order {
		if !(t.held[s] > 0 || t.total[s] > 0) {
			a.order[s] = math.NaN()
		}
	}
	return a, !math.IsNaN(largest(lambda))
}

// along contracts the answers with changes of ln k.
func (a *answer) along(forward, back []float64) float64 {
	sum := 0.0
	for k := range a.forward {
		if a.forward[k] != 0 {
			sum += a.forward[k] * forward[k]
		}
		if a.back[k] != 0 {
			sum += a.back[k] * back[k]
		}
	}
	return sum
}

// The five-point formulas for a first derivative, exact for polynomials of
// degree 4, with points below and above, above only, and below only.
var stencils = [3]struct{ at, weight [5]float64 }{
	{[5]float64{-2, -1, 0, 1, 2}, [5]float64{1. / 12, -8. / 12, 0, 8. / 12, -1. / 12}},
	{[5]float64{0, 1, 2, 3, 4}, [5]float64{-25. / 12, 4, -3, 4. / 3, -1. / 4}},
	{[5]float64{0, -1, -2, -3, -4}, [5]float64{25. / 12, -4, 3, -4. / 3, 1. / 4}},
}

// slopes differentiates ln k of every reaction by a quantity, of which network
// gives the network at a number of steps away from the point.
func slopes(here *kinetics.Network, step float64, network func(by float64) (*kinetics.Network, error)) (forward, back []float64, err error) {
	n := len(here.Reactions)
	seen := map[float64]*kinetics.Network{0: here}
	at := func(x float64) (*kinetics.Network, error) {
		if seen[x] == nil {
			var err error
			if seen[x], err = network(x * step); err != nil {
				return nil, err
			}
		}
		return seen[x], nil
	}
	// A transition state level with a side gives way to one direction of a shift
	// only: the derivative is taken on the other.
	chosen := 0
	for i, s := range stencils {
		clear := true
		for _, x := range s.at {
			other, err := at(x)
			if err != nil {
				return nil, nil, err
			}
			for k := range here.Reactions {
				clear = clear && other.Reactions[k].Raised == here.Reactions[k].Raised
			}
		}
		if clear {
			chosen = i
			break
		}
	}
	forward, back = make([]float64, n), make([]float64, n)
	for i, x := range stencils[chosen].at {
		w := stencils[chosen].weight[i]
		if w == 0 {
			continue
		}
		for k := range here.Reactions {
			// Differences from the point: what is common does not round.
			forward[k] += w / step * difference(seen[x].Reactions[k].LnForward, here.Reactions[k].LnForward)
			back[k] += w / step * difference(seen[x].Reactions[k].LnBack, here.Reactions[k].LnBack)
		}
	}
	return forward, back, nil
}

func difference(a, b float64) float64 {
	if math.IsInf(b, -1) {
		return 0
	}
	return a - b
}

// shift is by how much energies are moved to find how rate constants answer, in RT.
const shift = 0.01

// byEnergy differentiates ln k by −G/RT of a state, all others where they stand.
func byEnergy(m *kinetics.Mechanism, here *kinetics.Network, state int) (forward, back []float64, err error) {
	RT := rate.R * here.T
	forward, back, err = slopes(here, shift*RT, func(by float64) (*kinetics.Network, error) { return m.Moved(here, state, by).At(here.T) })
	for k := range forward {
		forward[k] *= -RT
		back[k] *= -RT
	}
	return forward, back, err
}

// byTemperature differentiates ln k by T.
func byTemperature(m *kinetics.Mechanism, here *kinetics.Network) (forward, back []float64, err error) {
	return slopes(here, 1e-3*here.T, func(by float64) (*kinetics.Network, error) { return m.At(here.T + by) })
}

// raised lists the steps whose transition states a shift has moved up with a side.
func raised(before, after *kinetics.Network) []string {
	var out []string
	for k := range after.Reactions {
		if after.Reactions[k].Raised && !before.Reactions[k].Raised && !slices.Contains(out, after.Reactions[k].Name) {
			out = append(out, after.Reactions[k].Name)
		}
	}
	return out
}
