package stiff

// A network is a System laid out flat for the kernels, with the species
// renumbered into elimination order. Concentration vectors have one more
// element, which is 1 (0 in a direction), and stands for a reactant that is
// not there: so first-order and zero-order steps need no branch.
//
// Channels are one-way steps of up to two reactants, then pairs of opposite
// steps, then longer steps. Partial derivatives are numbered 2 for a one-way
// channel, 4 for a pair, one a reactant for a long one.
type network struct {
	n, nc  int
	one    []duo
	pair   []quad
	longAt []int32 // long channel to its first reactant
	long   []int32 // reactants
	kf, kb []float64
	iKf    []int32 // places in the caller's list of rate constants
	iKb    []int32

	// f_i = sum over the row of coef * v[channel]
	rowAt []int32
	rowCh []int32
	rowCo []float64
	// J at place jacTo = sum of coef * partial
	jacTo []int32
	jacAt []int32
	jacPa []int32
	jacCo []float64
}

type duo struct{ a, b int32 }
type quad struct{ a, b, c, d int32 }

func (w *network) partials() int { return 2*len(w.one) + 4*len(w.pair) + len(w.long) }

// rates writes the net rate of every channel to v.
func (w *network) rates(y, v []float64) {
	one, pair := w.one, w.pair
	kf := w.kf[:len(one)]
	out := v[:len(one)]
	for i, r := range one {
		out[i] = kf[i] * y[r.a] * y[r.b]
	}
	kf = w.kf[len(one):][:len(pair)]
	kb := w.kb[:len(pair)]
	out = v[len(one):][:len(pair)]
	for i, r := range pair {
		out[i] = kf[i]*y[r.a]*y[r.b] - kb[i]*y[r.c]*y[r.d]
	}
	w.ratesLong(y, v)
}

func (w *network) ratesLong(y, v []float64) {
	at := len(w.one) + len(w.pair)
	for j := 0; j+1 < len(w.longAt); j++ {
		p := w.kf[at+j]
		for _, s := range w.long[w.longAt[j]:w.longAt[j+1]] {
			p *= y[s]
		}
		v[at+j] = p
	}
}

// add adds the change of every species by the channel rates v to f.
func (w *network) add(v, f []float64) {
	at := w.rowAt[0]
	ch, co := w.rowCh, w.rowCo[:len(w.rowCh)]
	ends := w.rowAt[1:]
	f = f[:len(ends)]
	for i, end := range ends {
		s := f[i]
		for ; at < end; at++ {
			s += co[at] * v[ch[at]]
		}
		f[i] = s
	}
}

// slopes writes every partial derivative of a channel rate to g.
func (w *network) slopes(y, g []float64) {
	for i, r := range w.one {
		k := w.kf[i]
		p := (*[2]float64)(g)
		p[0], p[1] = k*y[r.b], k*y[r.a]
		g = g[2:]
	}
	kf := w.kf[len(w.one):]
	for i, r := range w.pair {
		k, m := kf[i], -w.kb[i]
		p := (*[4]float64)(g)
		p[0], p[1], p[2], p[3] = k*y[r.b], k*y[r.a], m*y[r.d], m*y[r.c]
		g = g[4:]
	}
	if len(w.long) > 0 {
		kf = kf[len(w.pair):]
		for j := 0; j+1 < len(w.longAt); j++ {
			in := w.long[w.longAt[j]:w.longAt[j+1]]
			for x := range in {
				p := kf[j]
				for z, s := range in {
					if z != x {
						p *= y[s]
					}
				}
				g[int(w.longAt[j])+x] = p
			}
		}
	}
}

// jacobian gathers partial derivatives into the places of the matrix.
func (w *network) jacobian(g, jac []float64) {
	at := int32(0)
	pa, co := w.jacPa, w.jacCo[:len(w.jacPa)]
	ends := w.jacAt[1:]
	to := w.jacTo[:len(ends)]
	for i, end := range ends {
		s := 0.0
		for ; at < end; at++ {
			s += co[at] * g[pa[at]]
		}
		jac[to[i]] = s
	}
}

// setRates copies the caller's rate constants into channel order.
func (w *network) setRates(k []float64) {
	for i, p := range w.iKf {
		w.kf[i] = k[p]
	}
	for i, p := range w.iKb {
		w.kb[i] = k[p]
	}
}

// newNetwork lays out s with species p at place[p]; position gives the place
// of a matrix element in the storage of the factorisation.
func newNetwork(s *System, place []int32, position func(row, col int32) int32) *network {
	n := s.species
	w := &network{n: n, nc: len(s.channels)}
	nnz, nlong := 0, 0
	for i := range s.channels {
		nnz += len(s.channels[i].net)
	}
	for _, c := range s.channels[s.oneWay+s.pairs:] {
		nlong += len(c.fwd)
	}
	w.one, w.pair = make([]duo, s.oneWay), make([]quad, s.pairs)
	w.kf, w.kb = make([]float64, w.nc), make([]float64, s.pairs)
	w.iKf, w.iKb = make([]int32, w.nc), make([]int32, s.pairs)
	w.long = make([]int32, 0, nlong)
	w.longAt = make([]int32, 1, w.nc-s.oneWay-s.pairs+1)
	get := func(in []int, x int) int32 {
		if x < len(in) {
			return place[in[x]]
		}
		return int32(n)
	}
	type entry struct {
		to, partial int32
		co          float64
	}
	var jac []entry
	partial := int32(0)
	put := func(c *channel, in []int, width int) {
		for x := 0; x < width; x++ {
			if x < len(in) {
				for _, t := range c.net {
					jac = append(jac, entry{position(place[t.Species], place[in[x]]), partial, t.Coef})
				}
			}
			partial++
		}
	}
	jac = make([]entry, 0, 4*nnz)
	count := make([]int32, n+1)
	for i := range s.channels {
		c := &s.channels[i]
		w.iKf[i] = int32(c.kf)
		switch j := i - s.oneWay; {
		case j < 0:
			w.one[i] = duo{get(c.fwd, 0), get(c.fwd, 1)}
			put(c, c.fwd, 2)
		case j < s.pairs:
			w.pair[j] = quad{get(c.fwd, 0), get(c.fwd, 1), get(c.back, 0), get(c.back, 1)}
			w.iKb[j] = int32(c.kb)
			put(c, c.fwd, 2)
			put(c, c.back, 2)
		default:
			for _, a := range c.fwd {
				w.long = append(w.long, place[a])
			}
			w.longAt = append(w.longAt, int32(len(w.long)))
			put(c, c.fwd, len(c.fwd))
		}
		for _, t := range c.net {
			count[place[t.Species]+1]++
		}
	}
	for i := 0; i < n; i++ {
		count[i+1] += count[i]
	}
	w.rowAt = append([]int32(nil), count...)
	w.rowCh, w.rowCo = make([]int32, nnz), make([]float64, nnz)
	for i := range s.channels {
		for _, t := range s.channels[i].net {
			p := place[t.Species]
			w.rowCh[count[p]], w.rowCo[count[p]] = int32(i), t.Coef
			count[p]++
		}
	}
	// By place in the matrix, with the order of channels kept within a place:
	// a counting sort.
	high := int32(0)
	for _, e := range jac {
		high = max(high, e.to+1)
	}
	start := make([]int32, high+1)
	for _, e := range jac {
		start[e.to+1]++
	}
	places := 0
	for i := range start[:high] {
		if start[i+1] > 0 {
			places++
		}
		start[i+1] += start[i]
	}
	w.jacTo, w.jacAt = make([]int32, 0, places), make([]int32, 1, places+1)
	for i := range start[:high] {
		if start[i+1] > start[i] {
			w.jacTo, w.jacAt = append(w.jacTo, int32(i)), append(w.jacAt, start[i+1])
		}
	}
	w.jacPa, w.jacCo = make([]int32, len(jac)), make([]float64, len(jac))
	for _, e := range jac {
		w.jacPa[start[e.to]], w.jacCo[start[e.to]] = e.partial, e.co
		start[e.to]++
	}
	return w
}
