package kind

import (
	"bytes"
	"encoding/json"
	"fmt"
	"math"
	"slices"

	"saddlebook/content/fault"
	"saddlebook/kinetics"
	"saddlebook/kinetics/course"
	"saddlebook/kinetics/unit"
)

// orNone is a number that may be none: NaN, which is null in JSON.
type orNone float64

func (x orNone) MarshalJSON() ([]byte, error) {
	if f := float64(x); !math.IsNaN(f) && !math.IsInf(f, 0) {
		return json.Marshal(f)
	}
	return []byte("null"), nil
}

func (x *orNone) UnmarshalJSON(data []byte) error {
	if bytes.Equal(data, []byte("null")) {
		*x = orNone(math.NaN())
		return nil
	}
	return json.Unmarshal(data, (*float64)(x))
}

// none tells that there is no number.
func (x orNone) none() bool { return math.IsNaN(float64(x)) }

func orNones(list []float64) []orNone {
	out := make([]orNone, len(list))
	for i, x := range list {
		out[i] = orNone(x)
	}
	return out
}

// runValue is what a run did.
type runValue struct {
	Method       string
	Names        []string  // species
	Labels       []string  // species, for tables and figures
	Products     []string  // labels of the products
	Members      [][]int   // species of each product
	Units        []float64 // by product: molecules of the basis in one of it; nil without a basis
	Stated       []bool    // by product: the block states its units
	Holds        []orNone  // by species: molecules of the basis in one of it; nil without a basis, none where it cannot be told
	Charged      []float64 // mol/L by species, doses included
	Basis        int       // species; -1: none
	BasisCharged orNone    // mol/L, doses included
	Legs         []course.Leg
	End          float64 // s
	Ended        int     // the until that ended it; -1: the programme
	At           []runPoint
	Warmings     []warming
	Trace        []runPoint
	Pairs        []runPair
	Peaks        []peak  // by product; nil without a basis
	Lowest       float64 // the most negative concentration met, mol/L; 0: none
	Floor        float64 // mol/L, below which amounts have no digits to rely on
	Balance      float64 // the largest relative deviation of a conservation law
	Held         []string
	Warnings     []string
	Heat         runHeat
}

// runPoint is the state at a time at which results are wanted, or of the trace.
type runPoint struct {
	Condition              string // as keys have it; "" in the trace
	Reached                bool   // false: the run had ended before
	T, Kelvin              float64
	C                      []float64 // mol/L
	Conversion             orNone
	Balance                orNone // basis left and in listed products over that charged so far
	Yields, Shares         []orNone
	Control, Kinetic, Rest []orNone
	HeatRate               orNone // W/L
	HeatLeft               orNone // J/L
	HeatRise               orNone // K, adiabatic, of the heat left
}

// warming is a time at which the programme starts to warm.
type warming struct {
	Condition string
	Reached   bool
	T         float64
	Unreacted orNone // share of the basis charged by then
	HeatLeft  orNone // J/L
	HeatRise  orNone // K, adiabatic, of that
}

// peak is where the yield of a product is highest.
type peak struct {
	Yield orNone // of all the basis charged
	T     orNone // s; none: it is highest at the end
}

// runPair is two products that compete.
type runPair struct {
	A, B                         int
	Coincide                     bool
	Unreachable                  string
	Changeover, Even             orNone // s
	ChangeoverKelvin, EvenKelvin orNone
}

// value turns a course into what the block keeps.
func (s *runSource) value(m *kinetics.Mechanism, p runPlan, c *course.Course) (runValue, error) {
	v := runValue{Method: c.Method, Units: p.run.PerBasis, Stated: p.named, Holds: orNones(p.holds), Charged: slices.Clone(p.run.Charge), Basis: p.run.Basis, BasisCharged: orNone(p.base),
		Legs: p.prog.legs, End: c.End, Ended: c.Ended, Lowest: c.Lowest, Floor: c.Floor, Balance: c.Balance, Warnings: c.Warnings}
	for _, d := range p.run.Doses {
		v.Charged[d.Species] += d.Amount
	}
	for _, sp := range m.Species {
		v.Names = append(v.Names, sp.Name)
		v.Labels = append(v.Labels, or(sp.Label, sp.Name))
	}
	for g, product := range p.run.Products {
		v.Products = append(v.Products, groupLabel(m, s.Products[g]))
		v.Members = append(v.Members, product.Members)
	}
	for _, T := range p.prog.extremes() {
		for _, held := range m.Held(T) {
			if !slices.Contains(v.Held, held) {
				v.Held = append(v.Held, held)
			}
		}
	}
	net, err := m.At(m.Temperature)
	if err != nil {
		return v, err
	}
	for _, pair := range c.Pairs {
		if d := pair.Drain; pair.Unreachable != "" && d.Step >= 0 {
			pair.Unreachable = d.Words(net.Reactions[d.Step].Name, v.Labels)
		} else if pair.Unreachable == "" {
			pair.Unreachable = formsForGood(net, v.Labels, slices.Concat(v.Members[pair.A], v.Members[pair.B]))
		}
		v.Pairs = append(v.Pairs, runPair{A: pair.A, B: pair.B, Coincide: pair.Coincide, Unreachable: pair.Unreachable,
			Changeover: orNone(pair.Changeover), Even: orNone(pair.Even), ChangeoverKelvin: orNone(pair.ChangeoverKelvin), EvenKelvin: orNone(pair.EvenKelvin)})
	}
	if len(c.Report) == 0 {
		return v, fmt.Errorf("the run gave no end")
	}
	last := len(c.Report) - 1
	var heat *course.Heat
	if v.Heat, heat, err = s.heat(m, c); err != nil {
		return v, err
	}
	point := func(q course.Point, h *course.HeatPoint) runPoint {
		out := runPoint{Reached: true, T: q.T, Kelvin: q.Kelvin, C: v.aboveFloor(q.C), Conversion: orNone(q.Conversion), Yields: orNones(q.Yields), Shares: orNones(q.Shares),
			Control: orNones(q.Control), Kinetic: orNones(q.Kinetic), Rest: orNones(q.Rest)}
		for g := range out.Yields {
			if v.amount(g, out.C) == 0 && !out.Yields[g].none() {
				out.Yields[g] = 0
			}
		}
		for i := range out.Control {
			out.Control[i] = orNone(inSteps(q.Control[i], controlSteps))
			if v.Pairs[i].Unreachable != "" {
				out.Control[i], out.Rest[i] = orNone(math.NaN()), orNone(math.NaN())
			}
		}
		out.Balance = orNone(v.balance(p, q))
		out.HeatRate, out.HeatLeft, out.HeatRise = orNone(math.NaN()), orNone(math.NaN()), orNone(math.NaN())
		if h != nil {
			out.HeatRate, out.HeatLeft, out.HeatRise = orNone(h.Rate), orNone(h.Left), orNone(h.Rise)
			if math.Abs(h.Rate)*c.End < heatShare*heat.Whole {
				out.HeatRate = 0
			}
			if h.Left < heatShare*heat.Whole {
				out.HeatLeft = 0
				if !out.HeatRise.none() {
					out.HeatRise = 0
				}
			}
		}
		return out
	}
	at := func(t float64) int {
		if math.IsInf(t, 1) {
			return last
		}
		if i, found := slices.BinarySearch(p.run.Report, t); found && i < last {
			return i
		}
		return -1
	}
	for _, t := range p.times {
		var out runPoint
		if i := at(t.At); i >= 0 {
			var h *course.HeatPoint
			if heat != nil {
				h = &heat.Report[i]
			}
			out = point(c.Report[i], h)
		}
		out.Condition = t.Text
		v.At = append(v.At, out)
	}
	for _, t := range p.prog.warmings() {
		none := orNone(math.NaN())
		w := warming{T: t, Condition: spanText(t), Unreacted: none, HeatLeft: none, HeatRise: none}
		if i := at(t); i >= 0 {
			w.Reached, w.Unreacted = true, orNone(1-c.Report[i].Conversion)
			if heat != nil {
				w.HeatLeft, w.HeatRise = orNone(heat.Report[i].Left), orNone(heat.Report[i].Rise)
			}
		}
		v.Warmings = append(v.Warmings, w)
	}
	v.Peaks = v.peaks(c)
	for i, q := range c.Trace {
		var h *course.HeatPoint
		if heat != nil {
			h = &heat.Trace[i]
		}
		v.Trace = append(v.Trace, point(q, h))
	}
	return v, nil
}

// peakAbove is by how much, as a share of the basis, a yield must once have been
// above that at the end to have a peak: half of the last digit printed.
const peakAbove = 0.0005

// peaks finds where the yields are highest.
func (v *runValue) peaks(c *course.Course) []peak {
	if v.Basis < 0 {
		return nil
	}
	var out []peak
	end := c.Report[len(c.Report)-1].C
	for g, p := range c.Peaks {
		share := func(mol float64) float64 { return v.Units[g] * mol / float64(v.BasisCharged) }
		last := v.amount(g, v.aboveFloor(end))
		best := peak{T: orNone(math.NaN()), Yield: orNone(share(math.Max(p.Amount, last)))}
		switch {
		case p.Amount <= v.Floor && last == 0:
			best.Yield = 0
		case share(p.Amount) > share(last)+peakAbove:
			best.T = orNone(p.T)
		}
		out = append(out, best)
	}
	return out
}

// controlSteps are the parts of 1 to which a degree of control is kept: it is a
// difference of shares that are right to 1e-9.
const controlSteps = 1e8

// balanceSteps are those to which a mass balance and an ee are kept: sums and
// differences of amounts that are right to 1e-9.
const balanceSteps = 1e9

// inSteps rounds to so many parts of 1.
func inSteps(x, steps float64) float64 {
	if r := math.Round(x*steps) / steps; r != 0 {
		return r
	}
	return 0 // and not −0
}

// heatShare is the part of all heat below which a rate counts as none, if it
// went on over the whole run, and the heat left: what rounding leaves where two
// directions cancel.
const heatShare = 1e-9

// formsForGood says why products have no equilibrium where reversible steps do
// not join them and one of them forms by a step without return; "" if none does.
func formsForGood(n *kinetics.Network, labels []string, products []int) string {
	joined := true
	for _, p := range products {
		_, ok := n.EquilibriumRatio(p, products[0])
		joined = joined && ok
	}
	if joined {
		return ""
	}
	for _, r := range n.Reactions {
		for _, t := range r.To {
			if !r.Returns && slices.Contains(products, t.Species) {
				return fmt.Sprintf("equilibrium is not reachable, as step %s, without return, forms %s", r.Name, labels[t.Species])
			}
		}
	}
	return ""
}

// balance is the basis left and that in the listed products, over what is
// charged by then.
func (v *runValue) balance(p runPlan, q course.Point) float64 {
	if v.Basis < 0 || len(v.Members) == 0 {
		return math.NaN()
	}
	charged := p.run.Charge[v.Basis]
	for _, d := range p.run.Doses {
		switch {
		case d.Species != v.Basis || q.T < d.From:
		case q.T >= d.From+d.Lasts:
			charged += d.Amount
		default:
			charged += d.Amount * (q.T - d.From) / d.Lasts
		}
	}
	found, counted := 0.0, false
	for g, members := range v.Members {
		for _, i := range members {
			found += v.Units[g] * q.C[i]
			counted = counted || i == v.Basis
		}
	}
	if !counted {
		found += q.C[v.Basis]
	}
	return inSteps(found/charged, balanceSteps)
}

// aboveFloor returns concentrations without what the integration cannot tell from
// nothing.
func (v *runValue) aboveFloor(c []float64) []float64 {
	out := slices.Clone(c)
	for i := range out {
		if math.Abs(out[i]) <= v.Floor {
			out[i] = 0
		}
	}
	return out
}

// amount is how much there is of a product, mol/L.
func (v *runValue) amount(product int, c []float64) float64 {
	sum := 0.0
	for _, i := range v.Members[product] {
		sum += math.Max(0, c[i])
	}
	return sum
}

// doubts are the warnings of the core, for the author.
func (v *runValue) doubts() fault.Problems {
	var ps fault.Problems
	for _, w := range v.Warnings {
		ps = append(ps, &fault.Problem{Severity: fault.Warning, Msg: w, Fix: "see whether the run is meant so"})
	}
	return ps
}

// A TimeError says that a run does not keep its composition at a time.
type TimeError struct{ Msg, Fix string }

func (e *TimeError) Error() string { return e.Msg }

// Remedy says what to write instead.
func (e *TimeError) Remedy() string { return e.Fix }

// CompositionAt returns the concentrations (mol/L, by species of the mechanism)
// and the temperature (K) at a time (s; +Inf: the end) at which the block
// reports. Other times are refused with a *TimeError.
func (v runValue) CompositionAt(seconds float64) ([]float64, float64, error) {
	for _, q := range v.At {
		here := math.Abs(q.T-seconds) <= 1e-9*math.Max(1, q.T)
		if math.IsInf(seconds, 1) {
			here = q.Condition == "end"
		}
		if q.Reached && here {
			return q.C, q.Kelvin, nil
		}
	}
	if seconds > v.End {
		return nil, 0, &TimeError{fmt.Sprintf("the run is over after %s", unit.Span(v.End)), "take an earlier time, or \"end\""}
	}
	return nil, 0, &TimeError{fmt.Sprintf("the run does not report at %s", spanText(seconds)), fmt.Sprintf("add %q to its report-at", spanText(seconds))}
}
