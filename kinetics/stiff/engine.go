package stiff

import "math"

// An engine takes single steps. It knows species in elimination order, time
// from the start of the piece at hand, and nothing of outputs.
type engine struct {
	n      int
	net    *network // the one in use: plain, or that of careful
	plain  *network
	method *tableau
	sparse *sparseLU
	dense  *denseLU // the fallback of the sparse one
	order  *ordering
	byRows bool // the last factorisation is in dense

	careful *careful // in use; nil when the plain system is good enough
	kept    *careful // the last one used
	speed   []float64
	fastest float64 // largest rate at which a species is used up, 1/s

	y, next, arg []float64 // n+1, the last element 1
	f0, ft       []float64
	b, acc       []float64
	u            []float64
	v, g, jac    []float64
	atol         []float64
	rtol         float64

	feed, out []float64 // sources and first-order losses of the piece
	sourced   bool

	moving   bool // rate constants change within the piece
	rates    Rates
	piece    int
	origin   float64 // time of the start of the piece, s
	k, dk    []float64
	dkf, dkb []float64
	sens     *sensitivity
	scaledC  [maxStages][maxStages]float64
	stats    *Stats
	laws     []law
	lawM     []float64 // normal equations of the laws
	lawB     []float64
	lawWork  []float64
}

// rhs adds the change of every species at y to b.
func (e *engine) rhs(y, b []float64) {
	e.net.rates(y, e.v)
	if e.sourced {
		for i := range b {
			b[i] += e.feed[i] - e.out[i]*y[i]
		}
	}
	if e.careful != nil {
		e.careful.sum(b)
	}
	e.net.add(e.v, b)
	e.stats.Evaluations++
}

// ratesAt sets the rate constants of time tau of the piece.
func (e *engine) ratesAt(tau float64, slopes bool) {
	if !slopes {
		e.rates.At(e.piece, e.origin+tau, e.k, nil)
		e.net.setRates(e.k)
		return
	}
	e.rates.At(e.piece, e.origin+tau, e.k, e.dk)
	e.net.setRates(e.k)
	for i, p := range e.net.iKf {
		e.dkf[i] = e.dk[p]
	}
	for i, p := range e.net.iKb {
		e.dkb[i] = e.dk[p]
	}
}

// prepare evaluates everything a step from y at time tau needs that does not
// depend on its length.
func (e *engine) prepare(tau float64) {
	if e.moving {
		e.ratesAt(tau, true)
		kf, kb := e.net.kf, e.net.kb
		e.net.kf, e.net.kb = e.dkf, e.dkb
		e.net.rates(e.y, e.v)
		e.net.kf, e.net.kb = kf, kb
		clear(e.ft)
		e.net.add(e.v, e.ft)
	}
	clear(e.f0)
	e.rhs(e.y, e.f0)
	e.net.slopes(e.y, e.g)
	e.stats.Jacobians++
	if c := e.careful; c != nil {
		if e.sourced {
			clear(c.jac)
		}
		c.net.jacobian(e.g, c.jac)
		if e.sourced {
			for i, p := range c.unitAt {
				c.jac[p] -= c.unitCo[i] * e.out[c.unitCol[i]]
			}
		}
		e.net.speeds(e.y, e.speed)
		e.fastest = 0
		for _, v := range e.speed {
			e.fastest = max(e.fastest, v)
		}
	} else {
		if e.sourced {
			clear(e.jac)
		}
		e.net.jacobian(e.g, e.jac)
		e.fastest = 0
		for i, d := range e.sparse.diag {
			if e.sourced {
				e.jac[d] -= e.out[i]
			}
			if f := -e.jac[d]; f > e.fastest {
				e.fastest = f
			}
		}
	}
	if e.sens != nil {
		e.sens.prepare(e, tau)
	}
}

// factor factorises 1/gh - J.
func (e *engine) factor(gh float64) bool {
	shift := 1 / gh
	e.stats.Factorisations++
	if e.careful != nil {
		ok := e.careful.factor(shift)
		if e.careful.byRows {
			e.stats.Exchanges++
		}
		return ok
	}
	e.sparse.load(e.jac)
	e.sparse.shift(shift)
	if e.sparse.factor() {
		e.byRows = false
		return true
	}
	e.stats.Exchanges++
	e.byRows = true
	if e.dense == nil {
		e.dense = newDenseLU(e.n)
	}
	clear(e.dense.val)
	for i := range e.n {
		row := e.dense.val[i*e.n:][:e.n]
		for p := e.sparse.rowAt[i]; p < e.sparse.rowAt[i+1]; p++ {
			row[e.sparse.cols[p]] = -e.jac[p]
		}
		row[i] += shift
	}
	return e.dense.factor()
}

func (e *engine) solve(b []float64) {
	if e.careful != nil {
		e.careful.solve(b)
	} else if e.byRows {
		e.dense.solve(b)
	} else {
		e.sparse.solve(b)
	}
}

// step tries a step of length h from time tau with the matrix factorised. It
// leaves the new state in next and returns the error in units of the
// tolerance, not below zero; infinity if anything was not finite.
func (e *engine) step(tau, h float64) float64 {
	m := e.method
	ih := 1 / h
	for i := 1; i < m.stages; i++ {
		for j := 0; j < i; j++ {
			e.scaledC[i][j] = m.c[i][j] * ih
		}
	}
	b, acc, arg := e.b, e.acc, e.arg
	copy(b, e.f0)
	if e.moving {
		axpy(h*m.d[0], e.ft, b)
	}
	e.solve(b)
	if e.sens != nil {
		e.sens.stage(e, 0, tau, h)
	}
	for i := 1; i < m.stages; i++ {
		combine(i, b, e.y, arg, acc, e.u, &m.a[i], &e.scaledC[i], m.follows[i])
		if e.moving {
			if m.node[i] != m.node[i-1] {
				e.ratesAt(tau+m.node[i]*h, false)
			}
		}
		e.rhs(arg, acc)
		if e.moving && m.d[i] != 0 {
			axpy(h*m.d[i], e.ft, acc)
		}
		b, acc = acc, b
		e.solve(b)
		if e.sens != nil {
			e.b, e.acc = b, acc
			e.sens.stage(e, i, tau, h)
		}
	}
	e.b, e.acc = b, acc
	worst := e.finish(b)
	if e.sens != nil {
		worst = max(worst, e.sens.finish(e))
	}
	return worst
}

func axpy(a float64, x, y []float64) {
	y = y[:len(x)]
	for i, v := range x {
		y[i] += a * v
	}
}

// finish adds the last stage and measures it: it is the error estimate.
func (e *engine) finish(b []float64) float64 {
	n := len(b)
	y, arg, next, u, atol := e.y[:n], e.arg[:n], e.next[:n], e.u, e.atol[:n]
	last := e.method.stages - 1
	rtol := e.rtol
	worst, sum := 0.0, 0.0
	for i, x := range b {
		u[maxStages*i+last] = x
		z := arg[i] + x
		next[i] = z
		size := math.Abs(z)
		if s := math.Abs(y[i]); s > size {
			size = s
		}
		q := math.Abs(x) / (atol[i] + rtol*size)
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
