package stiff

import "math"

// A multistep takes the steps of the numerical differentiation formulas of
// orders 1 to 5: one right side and one solution of linear equations a step or
// two, and a factorisation only where the length of the step changes. That is
// cheaper than the stages of a Rosenbrock step where a factorisation is dear
// and the tolerance asks for many steps.
//
// The past is kept as backward differences of the solution at equal distances,
// and is interpolated when the length changes. Source: L. F. Shampine and M. W.
// Reichelt, SIAM J. Sci. Comput. 18, 1 (1997).
type multistep struct {
	e     *engine
	order int
	equal int                     // steps since order or length changed
	d     [topOrder + 3][]float64 // differences 0 to order+2
	pred  []float64
	psi   []float64 // what the past adds to the equations
	delta []float64 // next less pred
	inv   []float64 // 1/(tolerance), by component
	at    float64   // length over alpha that is factorised; 0: none
	rate  float64   // of convergence; 0: not known
	fresh bool      // the Jacobian is that of the present state
	end   float64   // time of difference 0
	len   float64   // distance of the differences
}

const (
	topOrder  = 5
	newtons   = 4
	closeness = 0.03 // of Newton's method, in units of the tolerance
	grow      = 1.3  // least change for which a longer step is worth a factorisation
)

// formulas holds the constants of each order. Any kappa keeps the order; those
// of the source, quoted here from memory, lessen the error at some cost of
// stability. The tests measure the orders and the angles of stability.
var formulas = func() (f [topOrder + 2]struct{ alpha, gamma, err float64 }) {
	kappa := [topOrder + 2]float64{0, -0.1850, -1.0 / 9, -0.0823, -0.0415, 0, 0}
	for k := range f {
		if k > 0 {
			f[k].gamma = f[k-1].gamma + 1/float64(k)
		}
		f[k].alpha = (1 - kappa[k]) * f[k].gamma
		f[k].err = kappa[k]*f[k].gamma + 1/float64(k+1)
	}
	return f
}()

// The multistep formulas are used where a factorisation takes about dear times
// as long as a solution, or longer, and the relative tolerance is fine or
// finer. A step may use up the share strict of the tolerance: errors of many
// steps add up, and so both methods end about as near to the solution.
const (
	dear   = 5.0
	fine   = 1e-4
	strict = 0.03
)

func newMultistep(e *engine) *multistep {
	n := e.n
	m := &multistep{e: e}
	slab := make([]float64, (len(m.d)+4)*n)
	take := func() []float64 {
		x := slab[:n:n]
		slab = slab[n:]
		return x
	}
	for i := range m.d {
		m.d[i] = take()
	}
	m.pred, m.psi, m.delta, m.inv = take(), take(), take(), take()
	return m
}

// start begins at order 1 from the state and slope of the engine.
func (m *multistep) start(h float64) {
	for i := range m.d {
		clear(m.d[i])
	}
	copy(m.d[0], m.e.y)
	axpy(h, m.e.f0, m.d[1])
	m.order, m.equal, m.at, m.rate, m.fresh = 1, 0, 0, 0, true
	m.len = h
}

// stretch interpolates the differences for steps of length h.
func (m *multistep) stretch(h float64) {
	k := m.order
	f := h / m.len
	var r, u, ru [topOrder + 1][topOrder + 1]float64
	fill := func(x *[topOrder + 1][topOrder + 1]float64, f float64) {
		for j := range k + 1 {
			x[0][j] = 1
			for i := 1; i <= k; i++ {
				x[i][j] = x[i-1][j] * (float64(i) - 1 - f*float64(j)) / float64(i)
			}
		}
	}
	fill(&r, f)
	fill(&u, 1)
	for i := range k + 1 {
		for j := range k + 1 {
			for l := range k + 1 {
				ru[i][j] += r[i][l] * u[l][j]
			}
		}
	}
	var x [topOrder + 1]float64
	for i := range m.pred {
		for l := range k + 1 {
			x[l] = m.d[l][i]
		}
		for j := 1; j <= k; j++ {
			sum := 0.0
			for l := 1; l <= k; l++ {
				sum += ru[l][j] * x[l]
			}
			m.d[j][i] = sum
		}
	}
	m.len, m.equal = h, 0
}

// predict extrapolates the differences and sets the weights.
func (m *multistep) predict() {
	k := m.order
	e := m.e
	pred, psi := m.pred, m.psi
	copy(pred, m.d[0])
	clear(psi)
	for j := 1; j <= k; j++ {
		g := formulas[j].gamma / formulas[k].alpha
		for i, x := range m.d[j][:len(pred)] {
			pred[i] += x
			psi[i] += g * x
		}
	}
	y, atol, inv := m.d[0][:len(pred)], e.atol[:len(pred)], m.inv[:len(pred)]
	for i, p := range pred {
		inv[i] = 1 / (strict * (atol[i] + e.rtol*max(math.Abs(p), math.Abs(y[i]))))
	}
}

// size is the largest component of x in units of the tolerance, or infinity.
func (m *multistep) size(x []float64) float64 {
	worst, sum := 0.0, 0.0
	inv := m.inv[:len(x)]
	for i, v := range x {
		q := math.Abs(v) * inv[i]
		sum += q
		if q > worst {
			worst = q
		}
	}
	if math.IsNaN(sum) || math.IsInf(sum, 0) {
		return math.Inf(1)
	}
	return worst
}

// solve finds the state at the end of the step, in engine.next, by Newton's
// method, and reports whether it converged.
func (m *multistep) solve() bool {
	e := m.e
	b := e.acc
	ic := 1 / m.at
	clear(m.delta)
	copy(e.arg, m.pred)
	old := 0.0
	for turn := range newtons {
		for i, p := range m.psi {
			b[i] = -(p + m.delta[i]) * ic
		}
		e.rhs(e.arg, b)
		e.solve(b)
		size := m.size(b)
		if turn > 0 {
			m.rate = max(0.2*m.rate, size/old)
			if !(m.rate < 0.9) || math.IsInf(size, 1) {
				return false
			}
		} else if math.IsInf(size, 1) {
			return false
		}
		for i, x := range b {
			m.delta[i] += x
			e.arg[i] = m.pred[i] + m.delta[i]
		}
		if size == 0 || m.rate > 0 && size*m.rate/(1-m.rate) < closeness || size < 1e-3*closeness {
			copy(e.next, e.arg)
			return true
		}
		old = size
	}
	return false
}

// update moves the differences on to the step just taken.
func (m *multistep) update() {
	k := m.order
	d := m.delta
	a, b := m.d[k+2][:len(d)], m.d[k+1][:len(d)]
	for i, x := range d {
		a[i] = x - b[i]
		b[i] = x
	}
	for j := k; j > 0; j-- {
		a, b := m.d[j][:len(d)], m.d[j+1][:len(d)]
		for i, x := range b {
			a[i] += x
		}
	}
	copy(m.d[0], m.e.next)
	m.equal++
	m.fresh = false
}

// adapt chooses order and length for the steps to come, from the size of the
// error of the last one, and returns the factor of the length.
func (m *multistep) adapt(size float64) float64 {
	k := m.order
	guess := func(size float64, k int) float64 { return math.Pow(max(size, 1e-12), -1/float64(k+1)) }
	best, f := k, guess(size, k)
	if k > 1 {
		if g := guess(formulas[k-1].err*m.size(m.d[k]), k-1); g > f {
			best, f = k-1, g
		}
	}
	if k < topOrder {
		if g := guess(formulas[k+1].err*m.size(m.d[k+2]), k+1); g > f {
			best, f = k+1, g
		}
	}
	f *= 0.85
	m.order = best
	return min(f, 10)
}

// value writes the solution at time tau within the last step to out, by place.
func (m *multistep) value(tau float64, place []int32, out []float64) {
	var w [topOrder + 1]float64
	w[0] = 1
	x := (tau - m.end) / m.len
	for j := 1; j <= m.order; j++ {
		w[j] = w[j-1] * (x + float64(j-1)) / float64(j)
	}
	for i, p := range place {
		sum := 0.0
		for j := m.order; j >= 0; j-- {
			sum += w[j] * m.d[j][p]
		}
		out[i] = sum
	}
}
