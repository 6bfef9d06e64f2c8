package firstorder

import "math"

// least is the smallest entry kept: numbers that are no longer normal are slow, and
// have few digits.
const least = 0x1p-1000

// same is the relative change of an entry below which a square counts as unchanged.
const same = 1e-13

// maxExponent is that of the longest time that a float64 holds.
const maxExponent = 1023

// square fills first and times. It ends where nothing changes any more, which is
// seen on every entry: what is still on its way, however slow, doubles its entry.
func (p *part) square() {
	n := len(p.states)
	if p.out == 0 { // all rates are too small for a number
		return
	}
	_, e := math.Frexp(p.out) // out < 2^e
	p.first = -e - 1          // so that out·2^first is below 1/2

	now := make([]float64, n*n)
	row, next := make([]float64, n), make([]float64, n)
	for i := range n {
		r := now[i*n : (i+1)*n]
		r[i] = 1
		p.series(r, nil, math.Ldexp(1, p.first), row, next)
		tidy(r)
	}
	for {
		twice := make([]float64, n*n)
		still := true
		for i := range n {
			from, to := now[i*n:(i+1)*n], twice[i*n:(i+1)*n]
			times(from, now, to)
			tidy(to)
			for j, v := range to {
				still = still && math.Abs(v-from[j]) <= same*v
			}
		}
		if still || p.first+len(p.times) > maxExponent {
			p.late = now
			return
		}
		p.times = append(p.times, now)
		now = twice
	}
}

// tidy drops the smallest entries and makes the sum 1.
func tidy(row []float64) {
	sum := 0.0
	for j, v := range row {
		if v < least {
			row[j] = 0
		}
		sum += row[j]
	}
	for j := range row {
		row[j] /= sum
	}
}

// times adds the product of the vector v and the matrix m to out.
func times(v, m, out []float64) {
	n := len(v)
	for i, x := range v {
		if x == 0 {
			continue
		}
		row := m[i*n : (i+1)*n]
		for j, y := range row {
			out[j] += x * y
		}
	}
}

// series replaces v by v·exp(Q·t) plus the integral of feed·exp(Q·s) over s from 0
// to t, for a t of at most 1/(2·out). term and next are scratch.
//
// Both follow from the series of exp(At) with A = Q + out, nonnegative: with the
// feed as one more state that has a rate out to itself. The factor exp(−out·t) is
// the sum of that state's series, so it needs no function.
func (p *part) series(v, feed []float64, t float64, term, next []float64) {
	n := len(v)
	term, next = term[:n], next[:n]
	copy(term, v)
	fed, all := 1.0, 1.0 // (out·t)^m/m! and its sum
	for m := 1; ; m++ {
		f := t / float64(m)
		for i, x := range term {
			next[i] = x * p.stay[i] * f
			if feed != nil {
				next[i] += feed[i] * fed * f
			}
		}
		for _, x := range p.moves {
			next[x.to] += term[x.from] * x.k * f
		}
		fed *= p.out * f
		all += fed
		small := fed <= 0x1p-56*all
		for i, x := range next {
			v[i] += x
			small = small && math.Abs(x) <= 0x1p-56*math.Abs(v[i])
		}
		// The farthest state is reached by term n − 1, fed by term n.
		if small && m > n {
			break
		}
		term, next = next, term
	}
	for i := range v {
		v[i] /= all
	}
}
