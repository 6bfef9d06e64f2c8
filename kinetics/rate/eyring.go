package rate

import "math"

// Eyring returns the rate constant of a step with free energy of activation dG
// (J/mol, 0 or more) at temperature T (K, above 0):
//
//	k = (kB·T/h) · exp(−dG/(R·T))
//
// with a transmission coefficient and a path degeneracy of 1. The unit is 1/s
// for one molecule and L^(n-1)/mol^(n-1)/s for n, with dG at 1 mol/L.
//
// Eyring returns ErrDomain if T is not positive and finite, if dG is negative,
// infinite or NaN, or if k is too large for a number. Constants below 1e-308
// lose digits and then round to 0: LnConstant keeps them.
// Source: Eyring 1935; Evans and Polanyi 1935 (see the package doc).
func Eyring(dG, T float64) (float64, error) { return Constant(dG, T, 1, 1) }

// Constant is Eyring with the number of equivalent paths, degeneracy (above 0),
// and the transmission coefficient (above 0), which both multiply k. They act on
// both directions of a step and leave its equilibrium constant alone. Errors and
// units are those of Eyring; ErrDomain also if either factor is not positive and
// finite.
func Constant(dG, T, degeneracy, transmission float64) (float64, error) {
	if err := check(dG, T, degeneracy, transmission); err != nil {
		return 0, err
	}
	// In two halves: exp(-x) alone would lose digits below 1e-308 where k does not.
	half := math.Exp(-dG / (R * T) / 2)
	k := Boltzmann / Planck * T * degeneracy * transmission * half * half
	if math.IsInf(k, 0) || math.IsNaN(k) {
		return 0, &DomainError{"rate constant", k, "give a lower temperature or smaller factors"}
	}
	return k, nil
}

// LnConstant returns ln k for the k of Constant, also where k itself would
// underflow. The errors are those of Constant.
func LnConstant(dG, T, degeneracy, transmission float64) (float64, error) {
	if err := check(dG, T, degeneracy, transmission); err != nil {
		return 0, err
	}
	return math.Log(Boltzmann/Planck) + math.Log(T) + math.Log(degeneracy) + math.Log(transmission) - dG/(R*T), nil
}

// Barrier returns the free energy of activation, in J/mol at 1 mol/L, that gives
// the rate constant k (1/s, or L^(n-1)/mol^(n-1)/s) at T (K); it is the inverse
// of Eyring. A k above kB·T/h gives a negative number: no barrier is that low.
//
// Barrier returns ErrDomain if k or T is not positive and finite.
// Source: Eyring 1935.
func Barrier(k, T float64) (float64, error) {
	if err := checkTemperature(T); err != nil {
		return 0, err
	}
	if err := checkPositive("rate constant", k); err != nil {
		return 0, err
	}
	return R * T * (math.Log(Boltzmann/Planck) + math.Log(T) - math.Log(k)), nil
}

func check(dG, T, degeneracy, transmission float64) error {
	if err := checkTemperature(T); err != nil {
		return err
	}
	if !(dG >= 0) || math.IsInf(dG, 0) {
		return &DomainError{"free energy of activation (J/mol)", dG, "give a finite one, zero or more"}
	}
	if err := checkPositive("path degeneracy", degeneracy); err != nil {
		return err
	}
	return checkPositive("transmission coefficient", transmission)
}

func checkTemperature(T float64) error { return checkPositive("temperature (K)", T) }

func checkPositive(what string, x float64) error {
	if !(x > 0) || math.IsInf(x, 0) {
		return &DomainError{what, x, "give a finite one above zero"}
	}
	return nil
}
