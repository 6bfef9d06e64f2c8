package rate

import "math"

// Arrhenius returns A·exp(−Ea/(R·T)) of a pre-exponential factor a (above 0, the
// unit of the rate constant), an activation energy ea (J/mol, any sign) and T (K).
//
// ErrDomain if a or T is not positive and finite, if ea is not finite, or if the
// constant is too large for a number. Source: Arrhenius, Z. Phys. Chem. 4, 226
// (1889), doi:10.1515/zpch-1889-0416.
func Arrhenius(a, ea, T float64) (float64, error) {
	if err := checkTemperature(T); err != nil {
		return 0, err
	}
	if err := checkPositive("pre-exponential factor", a); err != nil {
		return 0, err
	}
	if err := checkFinite("activation energy (J/mol)", ea); err != nil {
		return 0, err
	}
	// In two halves, as in Constant.
	half := math.Exp(-ea / (R * T) / 2)
	k := a * half * half
	if math.IsInf(k, 0) || math.IsNaN(k) {
		return 0, &DomainError{"rate constant", k, "give a higher activation energy or a smaller factor"}
	}
	return k, nil
}

// Carried returns at T (K) the rate constant that is k at the temperature at (K)
// and has the activation energy ea (J/mol): k·exp(−Ea/R·(1/T − 1/at)).
// Errors are those of Arrhenius, with k in the place of a.
func Carried(k, at, ea, T float64) (float64, error) {
	for _, err := range []error{checkTemperature(T), checkTemperature(at), checkPositive("rate constant", k), checkFinite("activation energy (J/mol)", ea)} {
		if err != nil {
			return 0, err
		}
	}
	half := math.Exp(-ea / R * (1/T - 1/at) / 2)
	out := k * half * half
	if math.IsInf(out, 0) || math.IsNaN(out) {
		return 0, &DomainError{"rate constant", out, "give a temperature nearer to that of the constant"}
	}
	return out, nil
}

// Activation returns the enthalpy (J/mol) and the entropy (J/mol/K, at 1 mol/L)
// of activation of the Eyring equation that has the value and the slope of an
// Arrhenius law at T (K):
//
//	ΔH‡ = Ea − R·T,   ΔS‡ = R·(ln(A·h/(kB·T)) − 1)
//
// This holds for any number of molecules, because every constant here is one of
// concentrations. Errors are those of Arrhenius.
// Source: Evans and Polanyi 1935 (see the package doc).
func Activation(a, ea, T float64) (dH, dS float64, err error) {
	for _, err := range []error{checkTemperature(T), checkPositive("pre-exponential factor", a), checkFinite("activation energy (J/mol)", ea)} {
		if err != nil {
			return 0, 0, err
		}
	}
	return ea - R*T, R * (math.Log(a) - math.Log(Boltzmann/Planck) - math.Log(T) - 1), nil
}

// ArrheniusOf is the inverse of Activation: ln A and Ea (J/mol) of the Arrhenius
// law that touches at T (K) the Eyring equation of dH (J/mol) and dS (J/mol/K, at
// 1 mol/L). It returns ln A because A itself may not be a number.
//
// ErrDomain if T is not positive and finite, or dH or dS is not finite.
func ArrheniusOf(dH, dS, T float64) (lnA, ea float64, err error) {
	for _, err := range []error{checkTemperature(T), checkFinite("enthalpy of activation (J/mol)", dH), checkFinite("entropy of activation (J/mol/K)", dS)} {
		if err != nil {
			return 0, 0, err
		}
	}
	return 1 + math.Log(Boltzmann/Planck) + math.Log(T) + dS/R, dH + R*T, nil
}

// LnEquilibrium returns ln K at T (K) of an equilibrium with ln K = lnK, enthalpy
// dH (J/mol) and heat capacity dCp (J/mol/K, constant) of reaction at the
// temperature at (K):
//
//	ln K(T) = lnK − ΔH/R·(1/T − 1/at) + ΔCp/R·(ln(T/at) + at/T − 1)
//
// dH and dCp are those of concentrations at 1 mol/L; of ideal gases ΔU and ΔCv.
// ErrDomain if a temperature is not positive and finite, or another number not
// finite. Source: van 't Hoff's equation with Kirchhoff's law, common practice.
func LnEquilibrium(lnK, at, dH, dCp, T float64) (float64, error) {
	for _, err := range []error{checkTemperature(T), checkTemperature(at), checkFinite("ln K", lnK),
		checkFinite("enthalpy of reaction (J/mol)", dH), checkFinite("heat capacity of reaction (J/mol/K)", dCp)} {
		if err != nil {
			return 0, err
		}
	}
	x := T / at
	return lnK - dH/R*(1/T-1/at) + dCp/R*(math.Log(x)+1/x-1), nil
}

func checkFinite(what string, x float64) error {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return &DomainError{what, x, "give a finite one"}
	}
	return nil
}
