package control

import (
	"context"
	"errors"
	"math"
	"slices"
)

// A steady is a steady state of a system.
type steady struct {
	*system
	x    []float64   // ln c, by free species
	null [][]float64 // fluxes that change no free species, by independent flux, then step
	xi   []float64   // independent fluxes, mol/L/s
	laws []law
}

// law is a conservation law Σ w·c = total of the free species.
type law struct {
	w     []float64
	total float64
}

var errNoConvergence = errors.New("no convergence of the steady state")

// farther is by how many powers of e one direction of a step has to be faster
// than the other to count as the only one: exp(−60) is far below rounding.
const farther = 60

// local is the equation of one step and its derivatives.
type local struct {
	h      float64
	da, db float64 // by ln of the forward and of the backward rate
	lnDV   float64 // ln of minus the derivative by the net rate
}

// equation is (a − b)/2 = asinh(v exp(−(a + b)/2)/2), as a difference of its sides.
func equation(a, b, v float64) local {
	onlyA, onlyB := b < a-farther, a < b-farther
	if onlyA {
		b = a - farther
	}
	if onlyB {
		a = b - farther
	}
	middle := (a + b) / 2
	l := local{h: (a - b) / 2}
	// s = sinh of the other side; more is 1 + |q|, less is 1 − |q|, q = s/√(1+s²).
	more, less, lnRoot := 1.0, 1.0, 0.0
	if v != 0 {
		lnS := math.Log(math.Abs(v)) - math.Ln2 - middle
		var side float64
		if lnS > 20 {
			side = lnS + math.Ln2
			less = math.Exp(-2*lnS) / 2
			more = 2 - less
			lnRoot = lnS
		} else {
			s := math.Exp(lnS)
			root := math.Sqrt(1 + s*s)
			side = math.Asinh(s)
			less = 1 / (root * (root + s))
			more = 1 + s/root
			lnRoot = math.Log1p(s*s) / 2
		}
		l.h -= math.Copysign(side, v)
	}
	if v < 0 {
		more, less = less, more
	}
	l.da, l.db = more/2, -less/2
	l.lnDV = -math.Ln2 - middle - lnRoot
	switch {
	case onlyA:
		l.da, l.db = l.da+l.db, 0
	case onlyB:
		l.da, l.db = 0, l.da+l.db
	}
	return l
}

// gross returns ln of the forward and backward rate of a step.
func (s *system) gross(k int, x []float64) (a, b float64) {
	st := &s.steps[k]
	a, b = st.lnF, st.lnB
	for _, t := range st.from {
		a += float64(t.n) * x[t.at]
	}
	for _, t := range st.to {
		b += float64(t.n) * x[t.at]
	}
	return a, b
}

// flux returns the net rate of a step.
func (t *steady) flux(k int, xi []float64) float64 {
	v := 0.0
	for i, n := range t.null {
		v += n[k] * xi[i]
	}
	return v
}

// residual evaluates every equation.
func (t *steady) residual(x, xi []float64) (h []float64, parts []local) {
	h = make([]float64, 0, len(t.steps)+len(t.laws))
	parts = make([]local, len(t.steps))
	for k := range t.steps {
		a, b := t.gross(k, x)
		parts[k] = equation(a, b, t.flux(k, xi))
		h = append(h, parts[k].h)
	}
	for _, l := range t.laws {
		sum, size := l.sums(x)
		h = append(h, (sum-l.total)/size)
	}
	return h, parts
}

// sums returns what a law adds up to, and the size of what it adds.
func (l *law) sums(x []float64) (sum, size float64) {
	size = math.Abs(l.total)
	for i, w := range l.w {
		if w != 0 {
			c := math.Exp(x[i])
			sum += w * c
			size += math.Abs(w) * c
		}
	}
	return sum, size
}

// jacobian returns the derivatives of the equations by x and by the fluxes, the
// latter in units of scale.
func (t *steady) jacobian(x []float64, parts []local) (m [][]float64, scale []float64) {
	n := len(t.free)
	scale = make([]float64, len(t.xi))
	m = make([][]float64, len(t.steps)+len(t.laws))
	for k := range m {
		m[k] = make([]float64, n+len(t.xi))
	}
	for k, st := range t.steps {
		for _, p := range st.from {
			m[k][p.at] += parts[k].da * float64(p.n)
		}
		for _, p := range st.to {
			m[k][p.at] += parts[k].db * float64(p.n)
		}
	}
	for i, null := range t.null {
		most := math.Inf(-1)
		for k, c := range null {
			if c != 0 {
				most = math.Max(most, parts[k].lnDV+math.Log(math.Abs(c)))
			}
		}
		for k, c := range null {
			if c != 0 {
				m[k][n+i] = -c * math.Exp(parts[k].lnDV-most)
			}
		}
		scale[i] = math.Exp(-most)
	}
	for i, l := range t.laws {
		_, size := l.sums(x)
		for j, w := range l.w {
			if w != 0 {
				m[len(t.steps)+i][j] = w * math.Exp(x[j]) / size
			}
		}
	}
	return m, scale
}

func norm(h []float64) float64 {
	sum := 0.0
	for _, x := range h {
		sum += x * x
	}
	return math.Sqrt(sum)
}

func largest(h []float64) float64 {
	most := 0.0
	for _, x := range h {
		if !(math.Abs(x) <= most) {
			most = math.Abs(x)
		}
	}
	return most
}

// rebase chooses the independent fluxes and the leads of the laws: the fluxes
// small and the species abundant. size is |v| by step.
func (t *steady) rebase(size []float64) {
	order := identity(len(t.steps))
	slices.SortStableFunc(order, func(a, b int) int { return descending(size[a], size[b]) })
	t.null = nullspace(t.net, order)
	rows := make([][]float64, len(t.steps))
	for k := range rows {
		rows[k] = make([]float64, len(t.free))
		for i := range t.free {
			rows[k][i] = t.net[i][k]
		}
	}
	order = identity(len(t.free))
	slices.SortStableFunc(order, func(a, b int) int { return descending(t.x[b], t.x[a]) })
	t.laws = nil
	for _, w := range nullspace(rows, order) {
		l := law{w: w}
		for i, s := range t.free {
			l.total += w[i] * t.total[s]
		}
		t.laws = append(t.laws, l)
	}
}

func descending(a, b float64) int {
	switch {
	case a > b:
		return -1
	case a < b:
		return 1
	}
	return 0
}

// polish finds the steady state next to x.
func (s *system) polish(x []float64) (*steady, error) {
	t := &steady{system: s, x: slices.Clone(x)}
	size, v := make([]float64, len(s.steps)), make([]float64, len(s.steps))
	for k := range s.steps {
		a, b := s.gross(k, x)
		v[k] = math.Exp(a) - math.Exp(b)
		size[k] = math.Max(math.Abs(v[k]), 1e-15*math.Exp(math.Max(a, b)))
	}
	t.rebase(size)
	t.xi = make([]float64, len(t.null))
	for i, null := range t.null {
		t.xi[i] = v[independent(t.null, null)]
	}
	for range 3 {
		if err := t.newton(); err != nil {
			return nil, err
		}
		// Now that the net rates are known, see whether better bases exist.
		for k := range size {
			v[k] = t.flux(k, t.xi)
			size[k] = math.Abs(v[k])
		}
		before := t.null
		t.rebase(size)
		if slices.EqualFunc(before, t.null, slices.Equal[[]float64]) {
			break
		}
		t.xi = t.xi[:0]
		for _, null := range t.null {
			t.xi = append(t.xi, v[independent(t.null, null)])
		}
	}
	return t, t.newton()
}

// independent returns the step whose net rate a vector of the basis stands for:
// where it is 1 and all others are 0.
func independent(basis [][]float64, of []float64) int {
	for k, x := range of {
		if x == 1 && alone(basis, of, k) {
			return k
		}
	}
	panic("control: a basis without an independent flux")
}

// alone tells whether all vectors of a basis but one are 0 at a place.
func alone(basis [][]float64, but []float64, at int) bool {
	for _, other := range basis {
		if &other[0] != &but[0] && other[at] != 0 {
			return false
		}
	}
	return true
}

// newton solves the equations from where t stands.
func (t *steady) newton() error {
	n := len(t.free)
	h, parts := t.residual(t.x, t.xi)
	for range 200 {
		m, scale := t.jacobian(t.x, parts)
		f, ok := factorise(m)
		if !ok {
			return errNoConvergence
		}
		d := slices.Clone(h)
		f.solve(d)
		size := largest(d)
		if math.IsNaN(size) {
			return errNoConvergence
		}
		move := func(by float64) (x, xi []float64) {
			x, xi = slices.Clone(t.x), slices.Clone(t.xi)
			for i := range x {
				x[i] -= by * d[i]
			}
			for i := range xi {
				xi[i] -= by * d[n+i] * scale[i]
			}
			return x, xi
		}
		if size < 1e-10 { // the next one would be its square
			t.x, t.xi = move(1)
			return nil
		}
		by := math.Min(1, 4/largest(d[:n]))
		was := norm(h)
		for {
			x, xi := move(by)
			next, nextParts := t.residual(x, xi)
			if norm(next) < (1-1e-4*by)*was {
				t.x, t.xi, h, parts = x, xi, next, nextParts
				break
			}
			if by /= 2; by < 1e-6 {
				if was < 1e-11 && size < 1e-7 { // nothing but rounding is left
					return nil
				}
				return errNoConvergence
			}
		}
	}
	return errNoConvergence
}

// solve finds the steady state, from that of a neighbour if there is one.
func (s *system) solve(ctx context.Context, near *steady) (*steady, error) {
	if x, ok := s.reduce(); ok {
		if t, err := s.polish(x); err == nil {
			return t, nil
		}
	}
	if near != nil {
		if t, err := s.polish(near.x); err == nil {
			return t, nil
		}
	}
	return s.settle(ctx)
}
