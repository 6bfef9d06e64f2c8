package rate

import (
	"fmt"
	"math"
)

// ZeroPointEffect returns k(light)/k(heavy) if a vibration, of light and heavy
// (1/m) in the two isotopologues, is lost at the transition state and nothing
// else differs: exp(h·c·(light − heavy)/(2·kB·T)). Tunnelling is apart.
//
// ErrDomain if a number is not positive and finite, or the ratio too large.
// Source: Westheimer, Chem. Rev. 61, 265 (1961), doi:10.1021/cr60211a004.
func ZeroPointEffect(light, heavy, T float64) (float64, error) {
	for _, err := range []error{checkTemperature(T), checkPositive("frequency of the light isotope (1/m)", light), checkPositive("frequency of the heavy isotope (1/m)", heavy)} {
		if err != nil {
			return 0, err
		}
	}
	return ratioOf(waveHeat * (light - heavy) / (2 * T))
}

// LnPartitionRatio returns the logarithm of the reduced partition function ratio
// (s₂/s₁)f of one state, from the real frequencies (1/m) of its light and heavy
// isotopologue, which must be as many:
//
//	Π u₂/u₁ · exp(−u₂/2)/(1 − exp(−u₂)) · (1 − exp(−u₁))/exp(−u₁/2),  u = h·c·ν/(kB·T)
//
// The rotations and masses are in it by the product rule of Teller and Redlich.
// The equilibrium constant of an exchange is a ratio of such numbers, symmetry
// numbers apart; see IsotopeEffect for rates.
//
// ErrDomain if the lists differ in length or a number is not positive and finite.
// Source: Bigeleisen and Mayer, J. Chem. Phys. 15, 261 (1947), doi:10.1063/1.1746492.
func LnPartitionRatio(light, heavy []float64, T float64) (float64, error) {
	if err := checkTemperature(T); err != nil {
		return 0, err
	}
	if len(light) != len(heavy) {
		return 0, fmt.Errorf("%w: %d frequencies of the light isotope stand against %d of the heavy one; give as many, without the imaginary one",
			ErrDomain, len(light), len(heavy))
	}
	sum := 0.0
	for i := range light {
		for _, nu := range []float64{light[i], heavy[i]} {
			if err := checkPositive(fmt.Sprintf("frequency %d (1/m)", i+1), nu); err != nil {
				return 0, err
			}
		}
		sum += lnMode(waveHeat*heavy[i]/T) - lnMode(waveHeat*light[i]/T)
	}
	return sum, checkFinite("partition function ratio", sum)
}

// lnMode is ln(u·exp(−u/2)/(1 − exp(−u))).
func lnMode(u float64) float64 { return math.Log(u) - u/2 - math.Log(-math.Expm1(-u)) }

// IsotopeEffect returns k(light)/k(heavy) of a step without tunnelling, from the
// imaginary frequencies of its transition state (1/m, magnitudes) and the
// LnPartitionRatio of the reactants and of the transition state. With tunnelling
// it is to be multiplied by κ(light)/κ(heavy).
//
// ErrDomain if a frequency is not positive and finite, or the ratio is too large.
// Source: as LnPartitionRatio.
func IsotopeEffect(imaginaryLight, imaginaryHeavy, reactants, transition float64) (float64, error) {
	for _, err := range []error{checkPositive("imaginary frequency of the light isotope (1/m)", imaginaryLight), checkPositive("imaginary frequency of the heavy isotope (1/m)", imaginaryHeavy)} {
		if err != nil {
			return 0, err
		}
	}
	return ratioOf(math.Log(imaginaryLight) - math.Log(imaginaryHeavy) + reactants - transition)
}

func ratioOf(ln float64) (float64, error) {
	ratio := math.Exp(ln)
	if math.IsInf(ratio, 0) || math.IsNaN(ratio) {
		return 0, &DomainError{"isotope effect", ratio, "give frequencies and a temperature of a real molecule"}
	}
	return ratio, nil
}
