package spread

import (
	"fmt"
	"math"
	"slices"
)

// Draw calls f once for each of n samples of the plan, in order, with the shift
// of every state (J/mol; the slice is used again, copy it to keep it). The first
// error of f ends the sampling and is returned as it is.
func (p Plan) Draw(n int, f func(shift []float64) error) error {
	if err := p.Check(); err != nil {
		return err
	}
	if n < 1 {
		return fmt.Errorf("%w: %d samples make no sense; ask for 1 or more", ErrPlan, n)
	}
	points := Normals(p.Dim(), n, Seed)
	shift := make([]float64, len(p.Own))
	for i := range n {
		p.Shift(shift, points.At(i))
		if err := f(shift); err != nil {
			return err
		}
	}
	return nil
}

// Sample draws n samples of the plan and returns what f makes of each shift, by
// result and then by sample. Every call of f must return the same number of
// results. Errors are those of Draw.
func Sample(plan Plan, n int, f func(shift []float64) ([]float64, error)) ([][]float64, error) {
	var columns [][]float64
	err := plan.Draw(n, func(shift []float64) error {
		values, err := f(shift)
		if err != nil {
			return err
		}
		if columns == nil {
			columns = make([][]float64, len(values))
		}
		if len(values) != len(columns) {
			panic("spread: Sample: the number of results changed between samples")
		}
		for j, v := range values {
			columns[j] = append(columns[j], v)
		}
		return nil
	})
	if err != nil {
		return nil, err
	}
	return columns, nil
}

// Interval is what a sampling says of one result: its 5, 50 and 95 % points.
type Interval struct {
	Case              Case
	Low, Median, High float64
}

// IntervalOf returns the interval of samples of one result.
func IntervalOf(c Case, values []float64) Interval {
	q := Quantiles(values, 0.05, 0.5, 0.95)
	return Interval{Case: c, Low: q[0], Median: q[1], High: q[2]}
}

// Quantiles returns the quantiles of values at each p (0 to 1), by linear
// interpolation between order statistics (type 7 of Hyndman and Fan). Infinite
// values count as the largest or smallest. If values is empty, holds a NaN, or
// p lies outside 0 to 1, the quantiles are NaN. values is not changed.
func Quantiles(values []float64, p ...float64) []float64 {
	out := make([]float64, len(p))
	sorted := slices.Clone(values)
	slices.Sort(sorted) // NaN comes first
	known := len(sorted) > 0 && !math.IsNaN(sorted[0])
	for i, q := range p {
		if !known || !(q >= 0 && q <= 1) {
			out[i] = math.NaN()
			continue
		}
		h := q * float64(len(sorted)-1)
		k := int(h)
		lo, hi := sorted[k], sorted[min(k+1, len(sorted)-1)]
		if w := h - float64(k); w > 0 && lo != hi {
			lo += w * (hi - lo)
		}
		out[i] = lo
	}
	return out
}

// LnRatioSD returns the standard deviation of ln(kA/kB) for two barriers with
// standard deviations sdA and sdB (J/mol, 0 or more) and the given correlation
// (-1 to 1) at temperature T (K, > 0):
//
//	√(sdA² + sdB² − 2 ρ sdA sdB) / RT
//
// Arguments out of range give NaN. Linear propagation, exact for normal errors.
func LnRatioSD(sdA, sdB, correlation, T float64) float64 {
	if !(sdA >= 0 && sdB >= 0 && T > 0 && correlation >= -1 && correlation <= 1) {
		return math.NaN()
	}
	// (sdA − sdB)² + 2 (1 − ρ) sdA sdB does not cancel when ρ is near 1.
	d := sdA - sdB
	return math.Sqrt(d*d+2*(1-correlation)*sdA*sdB) / (gasConstant * T)
}

// gasConstant is R in J/mol/K: k_B N_A of the SI of 2019, exact.
const gasConstant = 1.380649e-23 * 6.02214076e23
