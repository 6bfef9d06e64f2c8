package rate

import "math"

// HalfLife returns the time, in s, in which a first-order step with constant k
// (1/s) halves its reactant: ln 2/k. k = 0 gives +Inf; a negative or NaN k, NaN.
func HalfLife(k float64) float64 { return HalfLifePseudo(k, 1) }

// HalfLifeEqual returns the half-life, in s, of a second-order step A + B with
// constant k (L/mol/s) and both reactants at c (mol/L) at the start: 1/(k·c).
// For 2 A, where each event takes two A, it is half of that: give 2k.
// k·c = 0 gives +Inf; a negative or NaN number, NaN.
func HalfLifeEqual(k, c float64) float64 { return over(1, k, c) }

// HalfLifePseudo returns the half-life, in s, of the scarce reactant of a
// second-order step with constant k (L/mol/s) whose other reactant stays at c
// (mol/L): ln 2/(k·c). k·c = 0 gives +Inf; a negative or NaN number, NaN.
func HalfLifePseudo(k, c float64) float64 { return over(math.Ln2, k, c) }

func over(number, k, c float64) float64 {
	if !(k >= 0 && c >= 0) {
		return math.NaN()
	}
	return number / (k * c)
}
