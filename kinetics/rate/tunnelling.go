package rate

import (
	"fmt"
	"math"
)

// waveHeat turns a wavenumber (1/m) into a temperature (K): h·c/kB.
const waveHeat = Planck * 299792458.0 / Boltzmann

// Correction names a way to count tunnelling through a barrier.
type Correction string

// The corrections that Tunnelling knows.
const (
	ByWigner        Correction = "Wigner"
	ByBell          Correction = "Bell"
	ByEckart        Correction = "Eckart"
	BySkodjeTruhlar Correction = "Skodje-Truhlar"
)

// Tunnelling is a correction with what it needs of the barrier. Its factor
// multiplies the constants of both directions and leaves the equilibrium
// constant alone.
type Tunnelling struct {
	By        Correction
	Imaginary float64 // 1/m, magnitude of the imaginary frequency
	Forward   float64 `json:",omitempty"` // J/mol, height above the reactants with zero point, never a free energy; Eckart and Skodje-Truhlar
	Back      float64 `json:",omitempty"` // J/mol, height above the products
}

// Factor returns κ at T (K). Errors are those of Wigner, Bell, Eckart and
// SkodjeTruhlar, and ErrDomain for another correction or a height that By does
// not use.
func (t Tunnelling) Factor(T float64) (float64, error) {
	switch t.By {
	case ByEckart:
		return Eckart(t.Imaginary, t.Forward, t.Back, T)
	case BySkodjeTruhlar:
		return SkodjeTruhlar(t.Imaginary, t.Forward, t.Back, T)
	case ByWigner, ByBell:
	default:
		return 0, fmt.Errorf("%w: the tunnelling correction %q is not known; give %q, %q, %q or %q", ErrDomain, string(t.By), ByWigner, ByBell, ByEckart, BySkodjeTruhlar)
	}
	for _, v := range []float64{t.Forward, t.Back} {
		if v != 0 {
			return 0, &DomainError{"barrier height (J/mol)", v, fmt.Sprintf("leave it out: the correction of %s takes none", t.By)}
		}
	}
	if t.By == ByBell {
		return Bell(t.Imaginary, T)
	}
	return Wigner(t.Imaginary, T)
}

// Wigner returns the tunnelling factor 1 + u²/24, u = h·c·ν/(kB·T), of an
// imaginary frequency of magnitude ν (1/m) at T (K). It is the first term for
// small u, and too small where tunnelling matters.
//
// ErrDomain if ν or T is not positive and finite.
// Source: Wigner, Z. Phys. Chem. B 19, 203 (1932).
func Wigner(imaginary, T float64) (float64, error) {
	u, err := reduced(imaginary, T)
	if err != nil {
		return 0, err
	}
	return factor(1+u*u/24, T)
}

// Bell returns the tunnelling factor (u/2)/sin(u/2) of an endless parabola, its
// leading term, with u as for Wigner. It has no value at u ≥ 2π, which is at and
// below the temperature Crossover.
//
// ErrDomain also there. Source: Bell, Trans. Faraday Soc. 55, 1 (1959),
// doi:10.1039/TF9595500001.
func Bell(imaginary, T float64) (float64, error) {
	u, err := reduced(imaginary, T)
	if err != nil {
		return 0, err
	}
	if u >= 2*math.Pi {
		return 0, &DomainError{"u = hν/(kB·T) in the correction of Bell", math.Round(1e4*u) / 1e4,
			fmt.Sprintf("it must stay below 2π: take the correction of Eckart, or a temperature above %.4g K", Crossover(imaginary))}
	}
	return u / 2 / math.Sin(u/2), nil
}

// Crossover returns the temperature, in K, at which u = h·c·ν/(kB·T) is 2π for an
// imaginary frequency of magnitude ν (1/m). Below it most of the reaction goes
// through the barrier and not over it. A ν that is not positive gives NaN.
func Crossover(imaginary float64) float64 {
	if !(imaginary > 0) {
		return math.NaN()
	}
	return waveHeat * imaginary / (2 * math.Pi)
}

// SkodjeTruhlar returns the tunnelling factor of a parabola that ends at the
// higher side of the barrier, from the imaginary frequency (1/m), the heights
// forward and back (J/mol, energies with zero point) and T (K). It is the same
// both ways. ErrDomain as for Eckart.
// Source: Skodje and Truhlar, J. Phys. Chem. 85, 624 (1981).
func SkodjeTruhlar(imaginary, forward, back, T float64) (float64, error) {
	u, err := reduced(imaginary, T)
	if err != nil {
		return 0, err
	}
	if err := checkHeights(forward, back); err != nil {
		return 0, err
	}
	height := min(forward, back) / (R * T) // above the higher side, in kB·T
	r := u / (2 * math.Pi)                 // β/α
	d := 1 - r
	if r == 1 {
		return factor(height, T)
	}
	over := r / d * -math.Expm1(-d/r*height)
	if r > 1 {
		return factor(over, T)
	}
	x := math.Pi * d
	bend := x/math.Sin(x) - 1
	if x < 0.01 { // its series, where the difference would lose digits
		bend = x * x / 6 * (1 + 7*x*x/60)
	}
	return factor(r/d*bend+over, T)
}

func reduced(imaginary, T float64) (float64, error) {
	if err := checkTemperature(T); err != nil {
		return 0, err
	}
	if !(imaginary > 0) || math.IsInf(imaginary, 0) {
		return 0, &DomainError{"imaginary frequency (1/m)", imaginary, "give its magnitude, finite and above zero"}
	}
	u := waveHeat * imaginary / T
	if u == 0 || math.IsInf(u, 0) {
		return 0, &DomainError{"u = hν/(kB·T)", u, "give a frequency and a temperature of a real barrier"}
	}
	return u, nil
}

func checkHeights(forward, back float64) error {
	for _, h := range []struct {
		what  string
		value float64
	}{{"barrier height forward (J/mol)", forward}, {"barrier height back (J/mol)", back}} {
		if !(h.value > 0) || math.IsInf(h.value, 0) {
			return &DomainError{h.what, h.value, "give a finite one above zero: an energy with zero point"}
		}
	}
	return nil
}

func factor(kappa, T float64) (float64, error) {
	if math.IsInf(kappa, 0) || math.IsNaN(kappa) {
		return 0, &DomainError{"tunnelling factor", kappa, fmt.Sprintf("give a temperature above %g K", T)}
	}
	return kappa, nil
}
