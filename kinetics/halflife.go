package kinetics

import (
	"math"

	"saddlebook/kinetics/rate"
)

// HalfLife returns the half-life, in s, of the first reactant that the step
// uses up, taken in one direction alone, while every other species stays at c
// (mol/L). A reactant of which several molecules react goes from c to c/2. It
// is 0 where nothing is used up or there is no return, and +Inf where the rate
// is too small for any time.
//
// With n molecules in the rate and a net loss of m per step, dc/dt = -m k' cⁿ,
// so that t = ln 2/(m k') for n = 1 and (2ⁿ⁻¹ - 1)/((n - 1) m k' cⁿ⁻¹) else.
// Source: Atkins and de Paula, Physical Chemistry, integrated rate laws; common
// practice.
func (r *Reaction) HalfLife(back bool, c float64) float64 {
	k, from, to := r.Forward, r.From, r.To
	if back {
		k, from, to = r.Back, r.To, r.From
	}
	for _, t := range from {
		loss := t.N - countOf(to, t.Species)
		if loss <= 0 {
			continue
		}
		k *= math.Pow(c, float64(Molecules(from)-t.N)) * float64(loss)
		life := rate.HalfLife(k)
		if n := float64(t.N); t.N > 1 {
			life = (math.Pow(2, n-1) - 1) / ((n - 1) * k * math.Pow(c, n-1))
		}
		if back && !r.Returns {
			return 0
		}
		return life
	}
	return 0
}
