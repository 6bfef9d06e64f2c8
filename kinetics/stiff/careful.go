package stiff

import (
	"math"
	"sort"
)

// A careful system of linear equations, for steps so long against the fastest
// reaction that 1/(gamma h) - J loses the slow part in rounding. Its rows are
// sums of the rows of the plain one, chosen so that each fast channel stands in
// one row alone, with slower ones, in exact whole-number arithmetic before any
// rate is multiplied in. The slow rows then hold slow rates only, and keep
// their digits whatever the fast ones are.
type careful struct {
	net     *network
	ops     []rowOp
	place   []int32 // species in the engine's numbering to its place in lu
	lu      *sparseLU
	unitAt  []int32 // places of the sums themselves, which the shift multiplies
	unitCo  []float64
	unitCol []int32 // column, in the engine's numbering
	jac     []float64
	full    *denseLU // with row exchange; only if lu fails
	byRows  bool
	scale   []float64
	work    []float64
	done    []bool  // channels worked through
	chosen  []int32 // channels with a row of their own, fast ones first
}

// Bounds in units of the relative tolerance, with gh for gamma h, or what stands
// for it in the multistep formulas. The plain system is left when the digits
// that cancel in a pivot, or gh times the fastest rate where rows had to be
// exchanged, times the rounding unit exceed enter; it is taken up again when gh
// times the fastest rate times the rounding unit is below leave. Channels within reach below enter are worked through too, so
// that a longer step need not start anew.
const (
	rounding = 1.1e-16
	enter    = 0.1
	leave    = 0.02
	reach    = 1e2
	disorder = 1e3
)

// speeds writes the largest partial derivative of each channel's rate, 1/s.
func (w *network) speeds(y, out []float64) {
	n := int32(w.n)
	part := func(k float64, this, other int32) float64 {
		if this == n {
			return 0
		}
		return math.Abs(k * y[other])
	}
	for i, r := range w.one {
		out[i] = max(part(w.kf[i], r.a, r.b), part(w.kf[i], r.b, r.a))
	}
	for j, r := range w.pair {
		i := len(w.one) + j
		out[i] = max(part(w.kf[i], r.a, r.b), part(w.kf[i], r.b, r.a), part(w.kb[j], r.c, r.d), part(w.kb[j], r.d, r.c))
	}
	at := len(w.one) + len(w.pair)
	for j := 0; j+1 < len(w.longAt); j++ {
		out[at+j] = 0
		in := w.long[w.longAt[j]:w.longAt[j+1]]
		for x := range in {
			p := w.kf[at+j]
			for z, s := range in {
				if z != x {
					p *= y[s]
				}
			}
			out[at+j] = max(out[at+j], math.Abs(p))
		}
	}
}

// partial returns the derivative of a channel's rate by one species, absolute.
func (w *network) partial(ch int, species int32, y []float64) float64 {
	one := func(k float64, a, b int32) float64 {
		p := 0.0
		if a == species {
			p += k * y[b]
		}
		if b == species {
			p += k * y[a]
		}
		return p
	}
	if ch < len(w.one) {
		return math.Abs(one(w.kf[ch], w.one[ch].a, w.one[ch].b))
	}
	if j := ch - len(w.one); j < len(w.pair) {
		r := w.pair[j]
		return math.Abs(one(w.kf[ch], r.a, r.b)) + math.Abs(one(w.kb[j], r.c, r.d))
	}
	j := ch - len(w.one) - len(w.pair)
	in := w.long[w.longAt[j]:w.longAt[j+1]]
	sum := 0.0
	for x, a := range in {
		if a != species {
			continue
		}
		p := w.kf[ch]
		for z, s := range in {
			if z != x {
				p *= y[s]
			}
		}
		sum += p
	}
	return math.Abs(sum)
}

// newCareful builds the careful system for the channels faster than least.
func newCareful(e *engine, s *System, speed []float64, least float64) *careful {
	n := s.species
	c := &careful{done: make([]bool, len(s.channels)), place: make([]int32, n),
		scale: make([]float64, n), work: make([]float64, n)}
	var order []int
	all := make([]int, len(s.channels))
	for i, v := range speed {
		all[i] = i
		if v > least {
			order = append(order, i)
			c.done[i] = true
		}
	}
	sort.SliceStable(order, func(a, b int) bool { return speed[order[a]] > speed[order[b]] })
	place := e.order.place
	ech := eliminate(n, func(ch int) []Term { return s.channels[ch].net }, all, order, func(ch, _ int, sum []entry) float64 {
		like := 0.0
		for _, x := range sum {
			like += math.Abs(x.co) * e.plain.partial(ch, place[x.at], e.y)
		}
		return like
	})
	c.chosen = ech.chosen
	for _, o := range ech.ops {
		c.ops = append(c.ops, rowOp{place[o.from], place[o.to], o.f})
	}
	// The system with summed rows, in the caller's numbering.
	t := &System{species: n, rates: s.rates, oneWay: s.oneWay, pairs: s.pairs, channels: make([]channel, len(s.channels))}
	copy(t.channels, s.channels)
	for i := range t.channels {
		t.channels[i].net = nil
	}
	for row := range n {
		for _, x := range ech.rows[row] {
			t.channels[x.at].net = append(t.channels[x.at].net, Term{row, x.co})
		}
	}
	seen := map[int]bool{}
	for _, ch := range t.channels {
		for _, in := range [2][]int{ch.fwd, ch.back} {
			for _, col := range in {
				for _, x := range ch.net {
					if x.Species != col {
						seen[x.Species*n+col] = true
					}
				}
			}
		}
	}
	units := 0
	for row := range n {
		units += len(ech.sums[row])
		for _, x := range ech.sums[row] {
			if int(x.at) != row {
				seen[row*n+int(x.at)] = true
			}
		}
	}
	for p := range seen {
		t.positions = append(t.positions, p)
	}
	sort.Ints(t.positions)
	first := make([]int, len(ech.pivots))
	for i, p := range ech.pivots {
		first[i] = int(p)
	}
	o := newOrdering(n, t.positions, first)
	c.lu = newSparseLU(o, bound(e.rtol))
	for i, p := range place {
		c.place[p] = o.place[i]
	}
	c.net = newNetwork(t, place, func(row, col int32) int32 { return o.find(c.place[row], c.place[col]) })
	c.net.kf, c.net.kb = e.plain.kf, e.plain.kb
	c.unitAt, c.unitCo, c.unitCol = make([]int32, 0, units), make([]float64, 0, units), make([]int32, 0, units)
	for row := range n {
		for _, x := range ech.sums[row] {
			c.unitAt = append(c.unitAt, o.find(o.place[row], o.place[x.at]))
			c.unitCo = append(c.unitCo, x.co)
			c.unitCol = append(c.unitCol, place[x.at])
		}
	}
	c.jac = make([]float64, len(o.cols))
	return c
}

// fits reports whether the channels faster than least are worked through, in
// an order that still is near enough that of their speeds.
func (c *careful) fits(speed []float64, least float64) bool {
	for i, v := range speed {
		if v > least && !c.done[i] {
			return false
		}
	}
	slowest := math.Inf(1)
	for _, ch := range c.chosen {
		v := speed[ch]
		if v > least && v > disorder*slowest {
			return false
		}
		slowest = min(slowest, v)
	}
	return true
}

// sum applies the row operations to a right side.
func (c *careful) sum(b []float64) {
	for _, o := range c.ops {
		b[o.to] -= o.f * b[o.from]
	}
}

func (c *careful) factor(shift float64) bool {
	c.lu.load(c.jac)
	for i, p := range c.unitAt {
		c.lu.val[p] += shift * c.unitCo[i]
	}
	c.byRows = false
	if c.lu.factor() {
		return true
	}
	n := c.lu.n
	if c.full == nil {
		c.full = newDenseLU(n)
	}
	c.byRows = true
	clear(c.full.val)
	for i := range n {
		row := c.full.val[i*n:][:n]
		for p := c.lu.rowAt[i]; p < c.lu.rowAt[i+1]; p++ {
			row[c.lu.cols[p]] = -c.jac[p]
		}
	}
	for i, p := range c.unitAt {
		row := sort.Search(n, func(r int) bool { return c.lu.rowAt[r+1] > p })
		c.full.val[row*n+int(c.lu.cols[p])] += shift * c.unitCo[i]
	}
	for i := range n {
		row := c.full.val[i*n:][:n]
		big := 0.0
		for _, v := range row {
			big = max(big, math.Abs(v))
		}
		if !(big > 0) {
			return false
		}
		c.scale[i] = 1 / big
		for j := range row {
			row[j] *= c.scale[i]
		}
	}
	return c.full.factor()
}

func (c *careful) solve(b []float64) {
	w := c.work
	for i, p := range c.place {
		w[p] = b[i]
	}
	if c.byRows {
		for i, s := range c.scale {
			w[i] *= s
		}
		c.full.solve(w)
	} else {
		c.lu.solve(w)
	}
	for i, p := range c.place {
		b[i] = w[p]
	}
}

// factorise factorises 1/gh - J, with the careful system when the plain one has
// lost more digits than the tolerance allows, and prepares the step from time
// tau anew if the system changed.
func (e *engine) factorise(s *System, tau, gh float64) bool {
	strain := rounding * gh * e.fastest
	if e.careful != nil && strain < leave*e.rtol {
		e.kept, e.careful, e.net = e.careful, nil, e.plain
		e.prepare(tau)
	}
	if e.careful == nil {
		ok := e.factor(gh)
		if strain <= enter*e.rtol || ok && !e.byRows && rounding*e.sparse.loss <= enter*e.rtol {
			return ok
		}
	}
	if e.speed == nil {
		e.speed = make([]float64, len(s.channels))
	}
	least := enter * e.rtol / (rounding * gh)
	e.net.speeds(e.y, e.speed)
	c := e.careful
	if c == nil {
		c = e.kept
	}
	if c == nil || !c.fits(e.speed, least) {
		c = newCareful(e, s, e.speed, least/reach)
		e.stats.Rebuilds++
	}
	if c != e.careful {
		e.careful, e.net = c, c.net
		e.prepare(tau)
	}
	return e.factor(gh)
}
