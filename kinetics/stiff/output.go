package stiff

// A Step is an accepted step, seen by a visitor: a time interval on which the
// solution may be asked for anywhere. It is good only until the visitor
// returns.
type Step struct {
	T0, T1    float64 // s
	e         *engine
	tau0, len float64
	origin    float64
	multi     *multistep // that took the step; nil: the Rosenbrock method did
}

func (st *Step) set(e *engine, tau0, tau1, to float64, final bool) {
	st.multi = nil
	st.e, st.origin, st.tau0, st.len = e, e.origin, tau0, tau1-tau0
	st.T0, st.T1 = e.origin+tau0, e.origin+tau1
	if final {
		st.T1 = to
	}
}

// At writes the concentrations at time t, T0 to T1, to out. The ends are the
// states of the integration; between them the dense output of the method, or
// the polynomial of the multistep formulas, is as accurate as a step to within a
// small factor.
func (st *Step) At(t float64, out []float64) {
	e := st.e
	if th := st.fraction(t); st.multi == nil || th == 0 || th == 1 {
		st.blend(th, e.y, e.next, e.u, out)
	} else {
		st.multi.value(t-st.origin, e.order.place, out)
	}
}

// SlopeAt writes dy/dp of a parameter at time t to out.
func (st *Step) SlopeAt(param int, t float64, out []float64) {
	q := st.e.sens.list[param]
	st.blend(st.fraction(t), q.s, q.next, q.u, out)
}

func (st *Step) fraction(t float64) float64 {
	switch {
	case t >= st.T1:
		return 1
	case t <= st.T0:
		return 0
	}
	return min(1, max(0, (t-st.origin-st.tau0)/st.len))
}

func (st *Step) blend(th float64, y0, y1, u, out []float64) {
	m := st.e.method
	for i, p := range st.e.order.place {
		a, b := y0[p], y1[p]
		switch th {
		case 0:
			out[i] = a
			continue
		case 1:
			out[i] = b
			continue
		}
		w := u[maxStages*int(p):][:m.stages]
		var k [3]float64
		for j, x := range w {
			k[0] += m.dense[0][j] * x
			k[1] += m.dense[1][j] * x
			k[2] += m.dense[2][j] * x
		}
		r := 1 - th
		out[i] = r*a + th*(b+r*(k[0]+th*(k[1]+th*k[2])))
	}
}
