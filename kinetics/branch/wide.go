package branch

import "math"

// wide is m·2^e with m in [0.5, 1), or 0: a float64 that neither overflows nor
// underflows. Rates of a nested trap multiply, and leave the range of float64
// soon: three barriers of 100 kcal/mol at -78 °C do.
type wide struct {
	m float64
	e int
}

func widen(x float64) wide {
	m, e := math.Frexp(x)
	return wide{m, e}
}

func (a wide) norm() wide {
	m, e := math.Frexp(a.m)
	return wide{m, a.e + e}
}

func (a wide) times(b wide) wide { return wide{a.m * b.m, a.e + b.e}.norm() }

// over returns a/b; b is not 0.
func (a wide) over(b wide) wide { return wide{a.m / b.m, a.e - b.e}.norm() }

func (a wide) plus(b wide) wide {
	if a.m == 0 {
		return b
	}
	if b.m == 0 {
		return a
	}
	if a.e < b.e {
		a, b = b, a
	}
	return wide{a.m + math.Ldexp(b.m, b.e-a.e), a.e}.norm()
}

func (a wide) float() float64 { return math.Ldexp(a.m, a.e) }
