package stiff

import "math"

// A sensitivity carries dy/dp for every parameter through the steps of an
// engine. Each stage of y is followed by the same stage of the variational
// equation s' = J s + df/dp, with the same factorisation and the derivative of
// J taken along, so that s is the derivative of the numerical solution itself.
type sensitivity struct {
	list     []*variation
	dir      []float64 // the stage of y at hand, n+1, the last element 0
	v        []float64
	kf0, kb0 []float64 // rate constants at the start of the step
}

type variation struct {
	s, next, arg []float64 // n+1, the last element 0
	u            []float64
	b, acc       []float64
	ft           []float64
	wf, wb       []float64 // d ln k by channel, before the scale
	scale        func(int, float64) (float64, float64)
	phi, dphi    float64 // at the start of the step
	size         float64 // of dy/dp for y = 1
	floor        float64
}

func newSensitivity(e *engine, params int) *sensitivity {
	n := e.n
	s := &sensitivity{dir: make([]float64, n+1), v: make([]float64, e.net.nc),
		kf0: make([]float64, len(e.net.kf)), kb0: make([]float64, len(e.net.kb))}
	for range params {
		s.list = append(s.list, &variation{
			s: make([]float64, n+1), next: make([]float64, n+1), arg: make([]float64, n+1),
			u: make([]float64, maxStages*n), b: make([]float64, n), acc: make([]float64, n), ft: make([]float64, n),
			wf: make([]float64, len(e.net.kf)), wb: make([]float64, len(e.net.kb))})
	}
	return s
}

// start sets weights and initial slopes.
func (s *sensitivity) start(e *engine, params []Param, place []int32) {
	for i, p := range params {
		q := s.list[i]
		clear(q.s)
		clear(q.wf)
		clear(q.wb)
		q.scale, q.size, q.floor = p.Scale, 0, 0
		for j, x := range p.Start {
			q.s[place[j]] = x
			q.floor = max(q.floor, 1e-3*math.Abs(x))
		}
		for _, w := range p.Weights {
			q.size = max(q.size, math.Abs(w.W))
			for c, k := range e.net.iKf {
				if int(k) == w.K {
					q.wf[c] += w.W
				}
			}
			for c, k := range e.net.iKb {
				if int(k) == w.K {
					q.wb[c] += w.W
				}
			}
		}
	}
}

func (q *variation) at(e *engine, tau float64) (phi, dphi float64) {
	if q.scale == nil {
		return 1, 0
	}
	return q.scale(e.piece, e.origin+tau)
}

func (s *sensitivity) prepare(e *engine, tau float64) {
	copy(s.kf0, e.net.kf)
	copy(s.kb0, e.net.kb)
	for _, q := range s.list {
		q.phi, q.dphi = q.at(e, tau)
		if !e.moving {
			continue
		}
		w := e.net
		w.tangent(e.dkf, e.dkb, e.y, q.s, q.wf, q.wb, q.phi, s.v)
		if q.dphi != 0 {
			w.tangent(w.kf, w.kb, e.y, s.zero(e), q.wf, q.wb, q.dphi, e.v)
			for c, x := range e.v {
				s.v[c] += x
			}
		}
		clear(q.ft)
		w.add(s.v, q.ft)
	}
}

// zero returns a direction of zeros.
func (s *sensitivity) zero(e *engine) []float64 {
	clear(s.dir)
	return s.dir
}

// stage follows stage i of y, whose argument is e.arg and whose u is e.b.
func (s *sensitivity) stage(e *engine, i int, tau, h float64) {
	m, w := e.method, e.net
	copy(s.dir, e.b)
	y := e.y
	if i > 0 {
		y = e.arg
	}
	for _, q := range s.list {
		sa := q.s
		if i == 0 {
			clear(q.acc)
		} else {
			combine(i, q.b, q.s, q.arg, q.acc, q.u, &m.a[i], &e.scaledC[i], m.follows[i])
			sa = q.arg
		}
		phi := q.phi
		if e.moving && q.scale != nil {
			phi, _ = q.at(e, tau+m.node[i]*h)
		}
		kf, kb := w.kf, w.kb
		if i == 0 {
			kf, kb = s.kf0, s.kb0
		}
		w.tangent(kf, kb, y, sa, q.wf, q.wb, phi, s.v)
		w.bend(s.kf0, s.kb0, e.y, q.s, s.dir, q.wf, q.wb, q.phi, s.v)
		if e.sourced {
			for j := range q.acc {
				q.acc[j] -= e.out[j] * sa[j]
			}
		}
		if e.careful != nil {
			e.careful.sum(q.acc)
		}
		if e.moving && m.d[i] != 0 {
			axpy(h*m.d[i], q.ft, q.acc)
		}
		w.add(s.v, q.acc)
		q.b, q.acc = q.acc, q.b
		e.solve(q.b)
	}
}

// finish adds the last stage and measures it.
func (s *sensitivity) finish(e *engine) float64 {
	last := e.method.stages - 1
	worst, sum := 0.0, 0.0
	for _, q := range s.list {
		unit := q.size * math.Abs(q.phi)
		for i, x := range q.b {
			q.u[maxStages*i+last] = x
			z := q.arg[i] + x
			q.next[i] = z
			size := max(math.Abs(z), math.Abs(q.s[i]), unit*math.Abs(e.next[i]), q.floor)
			r := math.Abs(x) / (e.atol[i]*max(unit, q.floor) + e.rtol*size + math.SmallestNonzeroFloat64)
			sum += r
			if r > worst {
				worst = r
			}
		}
	}
	if math.IsNaN(sum) || math.IsInf(sum, 0) {
		return math.Inf(1)
	}
	return worst
}

func (s *sensitivity) accept() {
	for _, q := range s.list {
		q.s, q.next = q.next, q.s
	}
}

// tangent writes the change of every channel rate along s, and by the weights:
// k (y_a s_b + s_a y_b + phi w y_a y_b), the way back taken off.
func (w *network) tangent(kf, kb, y, s, wf, wb []float64, phi float64, v []float64) {
	for i, r := range w.one {
		v[i] = kf[i] * (y[r.a]*s[r.b] + s[r.a]*y[r.b] + phi*wf[i]*y[r.a]*y[r.b])
	}
	at := len(w.one)
	for j, r := range w.pair {
		i := at + j
		v[i] = kf[i]*(y[r.a]*s[r.b]+s[r.a]*y[r.b]+phi*wf[i]*y[r.a]*y[r.b]) -
			kb[j]*(y[r.c]*s[r.d]+s[r.c]*y[r.d]+phi*wb[j]*y[r.c]*y[r.d])
	}
	at += len(w.pair)
	for j := 0; j+1 < len(w.longAt); j++ {
		in := w.long[w.longAt[j]:w.longAt[j+1]]
		sum, all := 0.0, 1.0
		for x, a := range in {
			p := s[a]
			for z, b := range in {
				if z != x {
					p *= y[b]
				}
			}
			sum += p
			all *= y[a]
		}
		v[at+j] = kf[at+j] * (sum + phi*wf[at+j]*all)
	}
}

// bend adds the second derivative of every channel rate along s and u, and
// along u by the weights.
func (w *network) bend(kf, kb, y, s, u, wf, wb []float64, phi float64, v []float64) {
	for i, r := range w.one {
		v[i] += kf[i] * (s[r.a]*u[r.b] + u[r.a]*s[r.b] + phi*wf[i]*(u[r.a]*y[r.b]+y[r.a]*u[r.b]))
	}
	at := len(w.one)
	for j, r := range w.pair {
		i := at + j
		v[i] += kf[i]*(s[r.a]*u[r.b]+u[r.a]*s[r.b]+phi*wf[i]*(u[r.a]*y[r.b]+y[r.a]*u[r.b])) -
			kb[j]*(s[r.c]*u[r.d]+u[r.c]*s[r.d]+phi*wb[j]*(u[r.c]*y[r.d]+y[r.c]*u[r.d]))
	}
	at += len(w.pair)
	for j := 0; j+1 < len(w.longAt); j++ {
		in := w.long[w.longAt[j]:w.longAt[j+1]]
		sum := 0.0
		for x, a := range in {
			first := u[a] * phi * wf[at+j]
			for z, b := range in {
				if z != x {
					first *= y[b]
				}
			}
			sum += first
			for z, b := range in {
				if z == x {
					continue
				}
				p := s[a] * u[b]
				for q, c := range in {
					if q != x && q != z {
						p *= y[c]
					}
				}
				sum += p
			}
		}
		v[at+j] += kf[at+j] * sum
	}
}
