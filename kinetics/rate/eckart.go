package rate

import "math"

// Eckart returns the tunnelling factor of Eckart's barrier: the flux through and
// over it, averaged at T (K), over the classical flux. imaginary is the magnitude
// of the imaginary frequency (1/m), forward and back are the heights above the
// two sides (J/mol), which must be energies with zero point and never free
// energies. The factor is the same both ways. It is found by quadrature with a
// relative error below 1e-8.
//
// ErrDomain if a number is not positive and finite, or if the factor is too large
// for a number.
// Source: Eckart, Phys. Rev. 35, 1303 (1930), doi:10.1103/PhysRev.35.1303;
// Johnston and Heicklen, J. Phys. Chem. 66, 532 (1962).
func Eckart(imaginary, forward, back, T float64) (float64, error) {
	u, err := reduced(imaginary, T)
	if err != nil {
		return 0, err
	}
	if err := checkHeights(forward, back); err != nil {
		return 0, err
	}
	kappa, ok := eckart(forward/(R*T), back/(R*T), u)
	if !ok {
		return 0, &DomainError{"accuracy of the tunnelling factor of a barrier with u = hν/(kB·T)", u, "give a frequency, heights and a temperature of a real barrier"}
	}
	return factor(kappa, T)
}

// barrier is Eckart's barrier at one temperature, energies in units of kB·T.
type barrier struct {
	forward, back float64
	scale         float64 // a = scale·√ε, and b of the other side
	high          bool    // d is real
	rest          float64 // high: d − 2·√(α1·α2) + 2·ln(1 + exp(−d)); else ln(2 + 2·cos|d|)
}

// eckart integrates exp(forward − ε)·P(ε) over the energy ε above the reactants.
// ok is false if the quadrature did not settle.
func eckart(forward, back, u float64) (kappa float64, ok bool) {
	alpha1, alpha2 := 2*math.Pi*forward/u, 2*math.Pi*back/u
	w := barrier{forward: forward, back: back}
	w.scale = 2 / (1/math.Sqrt(alpha1) + 1/math.Sqrt(alpha2)) * math.Sqrt(2*math.Pi/u)
	if p, quarter := alpha1*alpha2, math.Pi*math.Pi/4; p >= quarter {
		half := math.Sqrt(p - quarter) // of d
		w.high = true
		w.rest = -2*quarter/(half+math.Sqrt(p)) + 2*math.Log1p(math.Exp(-2*half))
	} else {
		// 2 + 2·cos|d| = 4·sin²(π/2 − |d|/2), which keeps the digits of a thin barrier
		w.rest = 2 * math.Log(2*math.Sin(p/(math.Pi/2+math.Sqrt(quarter-p))))
	}

	// Energies count from the top, where the chance to pass turns to 1 on a scale
	// that can be short. What lies 45 kB·T above adds less than 1e-19.
	parts := [][2]float64{{-min(forward, back), 0}, {0, 45}}

	// The integrand can be beyond the range of numbers where its logarithm is not.
	shift := 0.0
	for _, p := range parts {
		for i := 1; i < 64; i++ {
			shift = max(shift, w.ln(p[0]+(p[1]-p[0])*float64(i)/64))
		}
	}
	sum := 0.0
	for _, p := range parts {
		part, settled := integrate(func(e float64) float64 { return math.Exp(w.ln(e) - shift) }, p[0], p[1])
		if !settled {
			return 0, false
		}
		sum += part
	}
	return math.Exp(shift) * sum, true
}

// ln is the logarithm of exp(−e)·P at the energy e above the top, with the chance
// to pass
//
//	P = 2·sinh a·sinh b / (cosh(a+b) + cosh d)
//
// taken apart so that nothing cancels: with l(x) = ln(1 − exp(−2x)),
// ln P = l(a) + l(b) − 2·l((a+b)/2) − ln(1 + (1 + cosh d)/(2·sinh²((a+b)/2))).
func (w barrier) ln(e float64) float64 {
	rootA, rootB := math.Sqrt(max(0, w.forward+e)), math.Sqrt(max(0, w.back+e))
	if rootA == 0 || rootB == 0 {
		return math.Inf(-1)
	}
	a, b := w.scale*rootA, w.scale*rootB
	l := lnFree((a + b) / 2)
	x := w.rest - 2*l // logarithm of the last term
	if w.high {
		// a + b is 2·√(α1·α2) at the top, and the difference from there is this
		x -= w.scale * e * (1/(rootA+math.Sqrt(w.forward)) + 1/(rootB+math.Sqrt(w.back)))
	} else {
		x -= a + b
	}
	if x > 0 {
		return lnFree(a) + lnFree(b) - 2*l - x - math.Log1p(math.Exp(-x)) - e
	}
	return lnFree(a) + lnFree(b) - 2*l - math.Log1p(math.Exp(x)) - e
}

// lnFree is ln(1 − exp(−2x)).
func lnFree(x float64) float64 { return math.Log(-math.Expm1(-2 * x)) }

// integrate is the integral of a positive f over a to b, which may have a
// singular slope at either end: the trapezoidal rule after x = tanh(π/2·sinh t),
// halved until two sums agree to 1e-9; each halving doubles the digits, so the
// last sum has more.
// Source: Takahasi and Mori, Publ. RIMS 9, 721 (1974).
func integrate(f func(float64) float64, a, b float64) (sum float64, settled bool) {
	if !(b > a) {
		return 0, true
	}
	const reach, levels = 3.3, 12
	at := func(t float64) float64 {
		s := math.Pi / 2 * math.Sinh(t)
		c := math.Cosh(s)
		gap := (b - a) / (1 + math.Exp(2*math.Abs(s))) // to the nearer end
		x := a + gap
		if t > 0 {
			x = b - gap
		}
		return f(x) * (b - a) / 2 * math.Pi / 2 * math.Cosh(t) / (c * c)
	}
	h := reach / 8
	total := at(0)
	for i := 1; i <= 8; i++ {
		total += at(float64(i)*h) + at(-float64(i)*h)
	}
	last := h * total
	for n := 8; n < 8<<levels; n *= 2 {
		h /= 2
		for i := 1; i <= 2*n; i += 2 {
			total += at(float64(i)*h) + at(-float64(i)*h)
		}
		sum = h * total
		if math.Abs(sum-last) <= 1e-9*sum && n > 16 {
			return sum, true
		}
		last = sum
	}
	return sum, false
}
