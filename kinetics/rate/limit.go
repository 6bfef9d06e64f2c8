package rate

import "math"

// Limited returns the rate constant of a step whose partners must first meet:
// 1/k = 1/k(TS) + 1/k(limit), both in the same unit. The other direction of the
// step is to be multiplied by the same LimitFactor, which leaves the equilibrium
// constant alone. ErrDomain if k is negative, or limit not positive and finite.
// Source: Collins and Kimball, J. Colloid Sci. 4, 425 (1949).
func Limited(k, limit float64) (float64, error) {
	if err := checkLimit(k, limit); err != nil {
		return 0, err
	}
	if k < limit { // neither quotient can overflow
		return k / (1 + k/limit), nil
	}
	return limit / (limit/k + 1), nil
}

// LimitFactor returns what Limited multiplies k by, within 0 and 1:
// 1/(1 + k/limit). Errors are those of Limited.
func LimitFactor(k, limit float64) (float64, error) {
	if err := checkLimit(k, limit); err != nil {
		return 0, err
	}
	return 1 / (1 + k/limit), nil
}

// LnLimitFactor is the logarithm of LimitFactor from ln k, also where k is beyond
// the range of numbers. A limit that is not positive, or NaN, gives NaN.
func LnLimitFactor(lnK, limit float64) float64 {
	if !(limit > 0) {
		return math.NaN()
	}
	x := lnK - math.Log(limit)
	if x > 0 {
		return -x - math.Log1p(math.Exp(-x))
	}
	return -math.Log1p(math.Exp(x))
}

func checkLimit(k, limit float64) error {
	if !(k >= 0) || math.IsInf(k, 0) {
		return &DomainError{"rate constant", k, "give a finite one, zero or more"}
	}
	return checkPositive("rate constant of the limit", limit)
}
