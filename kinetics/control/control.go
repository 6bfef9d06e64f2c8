package control

import (
	"context"
	"fmt"
	"math"

	"saddlebook/kinetics"
	"saddlebook/kinetics/rate"
)

// A Result is what decides at one point.
type Result struct {
	T    float64   // K
	C    []float64 // mol/L, by species
	Free []bool    // by species: at its steady state

	Rate  float64 // of formation, mol/L/s; below 0: the product is used up
	Ratio float64 // of the two rates of Pair; NaN without one

	States []State // species, then steps
	Orders []Order // of every concentration and total stated, in order of the species

	ActivationEnergy   float64 // J/mol; NaN: NoActivationEnergy says why
	NoActivationEnergy string

	Resting      int     // the free species that holds most of the total of the catalyst, or else of the first total; -1: there is no total
	RestingShare float64 // of that total, counted as the total is
	// Counted is the species whose total that is, and Shares how that total is
	// spread over all species; NaN for one that it does not count. −1 and nil
	// without such a total.
	Counted int
	Shares  []float64

	Turnover float64 // 1/s: Rate over the total of the catalyst; NaN without one
	Cycle    *Cycle  // nil: NoCycle says why, or no catalyst is named
	NoCycle  string
}

// A State is how one species or transition state decides.
type State struct {
	Name string
	Step bool
	// X is the degree of rate control, ∂ ln r/∂(−G/RT) with all other states where
	// they stand; of a step this is ∂ ln r/∂ ln k of both directions, at fixed K.
	X float64
	// Factor is the rate with this state 1 kcal/mol higher over the rate as it
	// is; NaN: WhyNot says why there is none.
	Factor      float64
	RatioX      float64  // ∂ ln ratio/∂(−G/RT); NaN without a pair
	RatioFactor float64  // likewise of Pair
	Raises      []string // transition states that the shift lifts with it, which lie level with their higher side
	WhyNot      string
}

// An Order is a reaction order, ∂ ln r/∂ ln c.
type Order struct {
	Species int
	Total   bool    // of a total
	C       float64 // as stated, mol/L
	Order   float64 // NaN at a concentration of 0
}

// Kcal is the shift of Factor, J/mol.
const Kcal = 1000 * rate.Calorie

// Analyse finds what decides. The error is a *PointError, that of
// Mechanism.At, or that of the context.
func Analyse(ctx context.Context, m *kinetics.Mechanism, T float64, p Problem) (*Result, error) {
	n, err := m.At(T)
	if err != nil {
		return nil, err
	}
	t, err := steadyState(ctx, n, &p)
	if err != nil {
		return nil, err
	}
	out := &Result{T: T, Rate: t.rate(p.RateOf), Ratio: math.NaN(), Turnover: math.NaN(), ActivationEnergy: math.NaN(), Resting: -1, RestingShare: math.NaN(), Counted: -1}
	out.composition(t)
	of, ok := t.answers(p.RateOf)
	if !ok {
		return nil, noRate(n, p.RateOf)
	}
	var top, bottom answer
	pair := len(p.Pair[0]) > 0 && len(p.Pair[1]) > 0
	if pair {
		var ok1, ok2 bool
		top, ok1 = t.answers(p.Pair[0])
		bottom, ok2 = t.answers(p.Pair[1])
		if !ok1 || !ok2 {
			return nil, noRate(n, append(append([]kinetics.Term{}, p.Pair[0]...), p.Pair[1]...))
		}
		out.Ratio = top.rate / bottom.rate
	}
	for i, name := range m.States() {
		if p.Brief {
			break
		}
		st := State{Name: name, Step: i >= len(m.Species), RatioX: math.NaN(), RatioFactor: math.NaN()}
		forward, back, err := byEnergy(m, n, i)
		if err != nil {
			return nil, err
		}
		st.X = of.along(forward, back)
		if pair {
			st.RatioX = top.along(forward, back) - bottom.along(forward, back)
		}
		if err := st.factors(ctx, m, i, t, &p, out); err != nil {
			return nil, err
		}
		out.States = append(out.States, st)
	}
	for s := range n.Names {
		switch {
		case !math.IsNaN(p.Held[s]):
			out.Orders = append(out.Orders, Order{Species: s, C: p.Held[s], Order: of.order[s]})
		case !math.IsNaN(p.total(s)):
			out.Orders = append(out.Orders, Order{Species: s, Total: true, C: p.total(s), Order: of.order[s]})
		}
	}
	out.ActivationEnergy, out.NoActivationEnergy = activation(m, n, &of)
	w := out.rest(t, &p)
	if p.Catalyst >= 0 && t.total[p.Catalyst] > 0 {
		out.Turnover = out.Rate / t.total[p.Catalyst]
		if out.Cycle, out.NoCycle, err = t.cycle(&p, w); err != nil {
			return nil, err
		}
	}
	return out, nil
}

// Steady returns the concentrations (mol/L, by species) at a point, and the
// rate of formation asked for.
func Steady(ctx context.Context, n *kinetics.Network, p Problem) (c []float64, rate float64, err error) {
	t, err := steadyState(ctx, n, &p)
	if err != nil {
		return nil, 0, err
	}
	var r Result
	r.composition(t)
	return r.C, t.rate(p.RateOf), nil
}

func steadyState(ctx context.Context, n *kinetics.Network, p *Problem) (*steady, error) {
	if err := p.check(n); err != nil {
		return nil, err
	}
	s, err := newSystem(n, p)
	if err != nil {
		return nil, err
	}
	if err := s.totalsKept(p); err != nil {
		return nil, err
	}
	for _, sum := range [][]kinetics.Term{p.RateOf, p.Pair[0], p.Pair[1]} {
		if len(sum) > 0 {
			if err := s.possible(p, sum); err != nil {
				return nil, err
			}
		}
	}
	return s.solve(ctx, nil)
}

func (r *Result) composition(t *steady) {
	r.C, r.Free = make([]float64, len(t.place)), make([]bool, len(t.place))
	for i := range t.place {
		r.Free[i] = math.IsNaN(t.held[i])
		switch at := t.place[i]; {
		case at >= 0:
			r.C[i] = math.Exp(t.x[at])
		case !r.Free[i]:
			r.C[i] = t.held[i]
		}
	}
}

func noRate(n *kinetics.Network, sum []kinetics.Term) error {
	var of []int
	for _, t := range sum {
		of = append(of, t.Species)
	}
	return &PointError{Of: ErrNoRate, Species: of, Step: -1, Msg: fmt.Sprintf("the rate of formation of %s is 0 at this composition", names(n, of)), Fix: "state a composition that is not at equilibrium"}
}

// factors solves the point again with one state 1 kcal/mol higher.
func (st *State) factors(ctx context.Context, m *kinetics.Mechanism, i int, t *steady, p *Problem, base *Result) error {
	n, err := m.Moved(t.n, i, Kcal).At(t.n.T)
	if err != nil {
		return err
	}
	st.Factor = math.NaN()
	next, err := t.again(n).solve(ctx, t)
	if err != nil {
		if ctx.Err() != nil {
			return ctx.Err()
		}
		st.WhyNot = fmt.Sprintf("with %s 1 kcal/mol higher: %v", st.Name, err)
		return nil
	}
	st.Raises = raised(t.n, n)
	st.Factor = next.rate(p.RateOf) / base.Rate
	if !math.IsNaN(base.Ratio) {
		st.RatioFactor = next.rate(p.Pair[0]) / next.rate(p.Pair[1]) / base.Ratio
	}
	return nil
}

// matters is from where on the rate counts as answering to a rate constant.
const matters = 1e-6

// decides is from which degree of rate control on a step is named as deciding.
const decides = 0.01

// activation is R T² d ln r/dT, or why there is none: an energy that is held
// constant has no enthalpy to give.
func activation(m *kinetics.Mechanism, n *kinetics.Network, of *answer) (Ea float64, whyNot string) {
	// Steps that are held: those that decide, and those in equilibrium of which K does.
	var deciding, balanced []string
	for k := range n.Reactions {
		size := math.Max(math.Abs(of.forward[k]), math.Abs(of.back[k]))
		if size < matters {
			continue
		}
		step := n.Reactions[k].Step
		// At the temperature at which a constant holds, nothing is held: look beside it.
		if m.HeldStep(step, 1.01*n.T) == "" && m.HeldStep(step, 0.99*n.T) == "" {
			continue
		}
		if math.Abs(of.forward[k]+of.back[k]) >= decides {
			deciding = append(deciding, n.Reactions[k].Label)
		} else {
			balanced = append(balanced, n.Reactions[k].Label)
		}
	}
	if len(deciding) > 0 {
		return math.NaN(), held("the barrier", deciding) + "; give H and S, or an Ea"
	}
	if len(balanced) > 0 {
		return math.NaN(), held("the ΔG", balanced) + "; give H and S"
	}
	forward, back, err := byTemperature(m, n)
	if err != nil {
		return math.NaN(), "the energies do not go together at other temperatures: " + err.Error()
	}
	return rate.R * n.T * n.T * of.along(forward, back), ""
}

func held(what string, steps []string) string {
	return what + " of " + words(steps) + " is held constant over temperature"
}

// rest finds the resting state, and returns the law of the catalyst: how many
// of it are in each free species; nil if there is none.
func (r *Result) rest(t *steady, p *Problem) []float64 {
	of := p.Catalyst
	for _, s := range t.free {
		if (of < 0 || t.total[of] == 0) && t.total[s] > 0 {
			of = s // the first
		}
	}
	if of < 0 || t.place[of] < 0 || t.total[of] == 0 {
		return nil
	}
	w := t.counted(of)
	if w == nil {
		return nil
	}
	r.Counted, r.Shares = of, make([]float64, len(t.place))
	for s := range r.Shares {
		r.Shares[s] = math.NaN()
	}
	for i, s := range t.free {
		if w[i] > 0 {
			r.Shares[s] = w[i] * math.Exp(t.x[i]) / t.total[of]
		}
		if share := w[i] * math.Exp(t.x[i]) / t.total[of]; !(share <= r.RestingShare) && w[i] > 0 {
			r.Resting, r.RestingShare = s, share
		}
	}
	return w
}

// counted returns the law that counts one charged species: 1 for itself, 0 for
// every other species with a total, and nowhere below 0. nil: there is none.
func (t *steady) counted(of int) []float64 {
	// Take the other charged species out of the laws one by one.
	var rows [][]float64
	for _, l := range t.laws {
		rows = append(rows, append([]float64{}, l.w...))
	}
	clear := func(at int) (pivot []float64) {
		best := -1
		for i := range rows {
			if math.Abs(rows[i][at]) > small && (best < 0 || math.Abs(rows[i][at]) > math.Abs(rows[best][at])) {
				best = i
			}
		}
		if best < 0 {
			return nil
		}
		pivot = rows[best]
		rows = append(rows[:best:best], rows[best+1:]...)
		for _, row := range rows {
			f := row[at] / pivot[at]
			for k := range row {
				if row[k] -= f * pivot[k]; math.Abs(row[k]) < small {
					row[k] = 0
				}
			}
		}
		return pivot
	}
	for i, s := range t.free {
		if s != of && t.total[s] > 0 {
			clear(i)
		}
	}
	w := clear(t.place[of])
	if w == nil {
		return nil
	}
	for i := range w {
		if i != t.place[of] {
			w[i] /= w[t.place[of]]
		}
	}
	w[t.place[of]] = 1
	for _, x := range w {
		if x < 0 {
			return nil
		}
	}
	return w
}
