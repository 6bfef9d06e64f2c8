package rate

import "math"

// Position returns where a transition state lies between the reactants (0) and
// the products (1) of its step, from the barriers forward and back (both J/mol,
// 0 or more):
//
//	χ = √f / (√f + √r)
//
// This is the top of Marcus' pair of equal parabolas, written with the two
// barriers, so it always lies within 0 and 1. It is above 0.5 exactly when the
// step is uphill: the transition state is nearer the side of higher energy,
// which is Hammond's principle made a number. It is also the slope dΔG‡/dΔG.
// f = 0 gives 0. Both zero, or a negative, infinite or NaN barrier, gives NaN:
// there is no position. Where the number of molecules changes, the barriers and
// so χ depend on the standard state.
// Source: Marcus 1968; Hammond 1955 (see the package doc).
func Position(forward, back float64) float64 {
	if !(forward >= 0 && back >= 0) || math.IsInf(forward, 0) || math.IsInf(back, 0) {
		return math.NaN()
	}
	f, r := math.Sqrt(forward), math.Sqrt(back)
	return f / (f + r) // 0/0 is NaN, as it should be; roots of finite numbers cannot overflow
}

// PositionWord names a position: "early" below 0.45, "late" above 0.55, else
// "central"; "none" for NaN.
func PositionWord(chi float64) string {
	switch {
	case math.IsNaN(chi):
		return "none"
	case chi < 0.45:
		return "early"
	case chi > 0.55:
		return "late"
	}
	return "central"
}
