package course

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"saddlebook/kinetics"
)

// HeatData is what a heat balance needs besides the run.
type HeatData struct {
	// Species are enthalpies by species, J/mol on one scale; NaN: not known. nil:
	// none is.
	Species []float64
	// Steps are enthalpies of reaction by step, J for one mole of turns as
	// written; NaN: as Species say. nil: all as Species say.
	Steps []float64
	// PerKelvin is density times heat capacity, J/L/K; 0: not known.
	PerKelvin float64
}

// Heat is the heat of a run, per litre and counted as positive where it is
// released. It is from enthalpies, never from free energies, taken as constant
// over temperature.
type Heat struct {
	// Missing names the steps whose enthalpy is not known. With any, nothing
	// else is: a partial sum would be taken for the whole.
	Missing []string
	Steps   []float64 // J/mol, enthalpy of reaction by step
	Report  []HeatPoint
	Trace   []HeatPoint
	// Whole is the most heat, J/L, that the listed steps can release from the
	// charge and all doses.
	Whole float64
	// Rise is the adiabatic rise of that, K; NaN without PerKelvin. What is
	// endothermic throughout has none.
	Rise float64
	// Way is how often each step turns on the way to Whole, mol/L, below zero
	// backwards. Where several ways release as much, it is one of them.
	Way []float64
	// Dosed is by how much less, J/L, the steps can release from what is there at
	// the start: what the doses bring.
	Dosed float64
	// Run is what was released by the end of the run, J/L, and RunRise the
	// adiabatic rise of that, K, NaN without PerKelvin.
	Run, RunRise float64
	// Peak is the highest rate of release, W/L, and PeakAt when, s. NaN without
	// Course.Pace, or where nothing is released at any time. What comes within a
	// millionth of the programme after its start, or after anything begins, ends
	// or jumps, does not count.
	Peak, PeakAt float64
	// Warmings are the heat left, J/L, where each of Course.Warmings starts.
	Warmings []float64
}

// HeatPoint is the heat at a point of the course.
type HeatPoint struct {
	T        float64 // s
	Released float64 // J/L so far; below zero: taken up
	Rate     float64 // W/L
	Left     float64 // J/L, the most that the steps can still release from what is there; later doses do not count
	Rise     float64 // K, adiabatic, if all that is left came at once; NaN without PerKelvin
}

// ErrHeat marks enthalpies that make no sense.
var ErrHeat = errors.New("heat")

// hess is by how much, J/mol, enthalpies around a cycle may miss zero: below
// any digit they are written with.
const hess = 1.0

// Heat computes the heat of the run. The error matches ErrHeat where enthalpies
// contradict each other around a cycle of steps or against those of the species,
// where a number is not finite, and where the steps as written could release
// heat without end.
func (c *Course) Heat(d HeatData) (*Heat, error) {
	net := c.net
	if net == nil {
		panic("course: Heat of a course that Simulate did not return")
	}
	n := len(net.Names)
	if d.Species != nil && len(d.Species) != n || d.Steps != nil && len(d.Steps) != len(net.Reactions) {
		panic("course: Heat: one enthalpy for each species, and for each step, is needed")
	}
	if math.IsNaN(d.PerKelvin) || math.IsInf(d.PerKelvin, 0) || d.PerKelvin < 0 {
		return nil, fmt.Errorf("%w: %g J/L/K as density times heat capacity; give a finite number above zero", ErrHeat, d.PerKelvin)
	}
	for i, x := range slices.Concat(d.Species, d.Steps) {
		if math.IsInf(x, 0) {
			return nil, fmt.Errorf("%w: enthalpy %d is %g J/mol; give a finite number", ErrHeat, i+1, x)
		}
	}
	nan := math.NaN()
	h := &Heat{Whole: nan, Rise: nan, Dosed: nan, Run: nan, RunRise: nan, Peak: nan, PeakAt: nan}
	nets := stepNets(net)
	for i := range net.Reactions {
		r := &net.Reactions[i]
		sum := 0.0
		for s, v := range nets[i] {
			switch {
			case v == 0:
			case d.Species == nil:
				sum = math.NaN()
			default:
				sum += v * d.Species[s]
			}
		}
		if d.Steps != nil && !math.IsNaN(d.Steps[i]) {
			if miss := d.Steps[i] - sum; math.Abs(miss) > hess {
				return nil, fmt.Errorf("%w: the enthalpy of step %s, %.6g J/mol, misses that of its species by %.4g J/mol; correct one or leave one out", ErrHeat, r.Name, d.Steps[i], miss)
			}
			sum = d.Steps[i]
		}
		if math.IsNaN(sum) {
			h.Missing = append(h.Missing, r.Name)
		}
		h.Steps = append(h.Steps, sum)
	}
	if h.Missing != nil {
		h.Steps = nil
		return h, nil
	}
	scale, err := enthalpies(net, nets, h.Steps)
	if err != nil {
		return nil, err
	}
	best := newRelease(net, nets, h.Steps)
	rise := func(q float64) float64 {
		if d.PerKelvin == 0 {
			return math.NaN()
		}
		return q / d.PerKelvin
	}
	left := func(c []float64) float64 {
		q, _, ok := best.most(c)
		if !ok && err == nil {
			err = fmt.Errorf("%w: the steps as written release heat without end, making more of everything they need; check that their reactions balance", ErrHeat)
		}
		return q
	}
	points := func(ps []Point) []HeatPoint {
		var out []HeatPoint
		for i := range ps {
			p := &ps[i]
			q := HeatPoint{T: p.T, Released: -dot(scale, p.Made), Rate: -dot(scale, p.Making), Left: left(p.C)}
			q.Rise = rise(q.Left)
			out = append(out, q)
		}
		return out
	}
	h.Report, h.Trace = points(c.Report), points(c.Trace)
	for _, w := range c.Warmings {
		h.Warmings = append(h.Warmings, left(w.C))
	}
	h.Whole = left(c.whole)
	h.Rise = rise(h.Whole)
	if _, extents, ok := best.most(c.whole); ok {
		h.Way = best.steps(extents, len(net.Reactions))
	}
	h.Dosed = math.Max(0, h.Whole-left(c.start))
	h.Run = h.Report[len(h.Report)-1].Released
	h.RunRise = rise(h.Run)
	for _, p := range c.Pace {
		if q := -dot(scale, p.Making); q > 0 && !(q <= h.Peak) {
			h.Peak, h.PeakAt = q, p.T
		}
	}
	if err != nil {
		return nil, err
	}
	return h, nil
}

func dot(a, b []float64) float64 {
	sum := 0.0
	for i, x := range a {
		sum += x * b[i]
	}
	return sum
}

func stepNets(net *kinetics.Network) [][]float64 {
	rows := make([][]float64, len(net.Reactions))
	for i := range rows {
		row := make([]float64, len(net.Names))
		for _, t := range net.Reactions[i].From {
			row[t.Species] -= float64(t.N)
		}
		for _, t := range net.Reactions[i].To {
			row[t.Species] += float64(t.N)
		}
		rows[i] = row
	}
	return rows
}

// enthalpies returns enthalpies by species, J/mol, that give those of the steps:
// what is made is then enough to know the heat, whatever steps made it. Several
// scales may do; they differ in what no step changes.
func enthalpies(net *kinetics.Network, nets [][]float64, steps []float64) ([]float64, error) {
	const zero = 1e-9
	n := len(net.Names)
	var rows [][]float64
	var pivots []int
	for i, v := range nets {
		row := append(slices.Clone(v), steps[i])
		for k, p := range pivots {
			if f := row[p]; f != 0 {
				for x := range row {
					row[x] -= f * rows[k][x]
				}
				row[p] = 0
			}
		}
		best := 0
		for s := range n {
			if math.Abs(row[s]) > math.Abs(row[best]) {
				best = s
			}
		}
		if math.Abs(row[best]) < zero {
			if math.Abs(row[n]) > hess {
				return nil, fmt.Errorf("%w: the enthalpy of step %s, %.6g J/mol, misses what the other steps of its cycle add up to by %.4g J/mol; correct one of them", ErrHeat, net.Reactions[i].Name, steps[i], row[n])
			}
			continue
		}
		f := row[best]
		for x := range row {
			row[x] /= f
		}
		for k := range rows {
			if f := rows[k][best]; f != 0 {
				for x := range row {
					rows[k][x] -= f * row[x]
				}
				rows[k][best] = 0
			}
		}
		rows, pivots = append(rows, row), append(pivots, best)
	}
	h := make([]float64, n)
	for k, p := range pivots {
		h[p] = rows[k][n]
	}
	return h, nil
}
