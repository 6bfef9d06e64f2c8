package stiff

import "math"

// A law is a weighted sum of concentrations that no reaction changes.
type law struct {
	at     []int32
	w      []float64
	target float64
	held   bool // no removal takes from it in this piece
	inflow float64
	slack  float64 // the absolute tolerances of its species: what a law may miss when they are all near zero
}

// lawsOf lays the conservation laws out in elimination order.
func lawsOf(s *System, place []int32) []law {
	out := make([]law, len(s.laws))
	for i, row := range s.laws {
		out[i].at, out[i].w = make([]int32, len(row)), make([]float64, len(row))
		for j, x := range row {
			out[i].at[j], out[i].w[j] = place[x.at], x.co
		}
	}
	return out
}

// begin takes the sums of the present state as those to keep.
func (l *law) begin(e *engine) {
	l.target, l.inflow, l.slack, l.held = 0, 0, 0, true
	for j, p := range l.at {
		l.slack += math.Abs(l.w[j]) * e.atol[p]
		l.target += l.w[j] * e.y[p]
		l.inflow += l.w[j] * e.feed[p]
		if e.out[p] != 0 {
			l.held = false
		}
	}
}

// defect returns how far the sum at y is from what it should be, tau after the
// start of the piece, and the size of its terms.
func (l *law) defect(y []float64, tau float64) (defect, size float64) {
	at := l.at[:len(l.w)]
	sum := 0.0
	for j, w := range l.w {
		t := w * y[at[j]]
		sum += t
		size += math.Abs(t)
	}
	return sum - (l.target + l.inflow*tau), size
}

// exact is the defect, relative to the size of the terms, that is left alone.
const exact = 3e-16

// conserve takes the rounding of a step out of the conservation laws in the
// new state, tau after the start of the piece: with the concentrations as
// weights it makes the least change, relative to each, that restores all sums.
// So small concentrations keep their relative accuracy and no sign changes. It
// reports false, for a shorter step, when a defect is more than rounding and
// tolerance explain.
func (e *engine) conserve(tau float64) bool {
	m := len(e.laws)
	off := false
	for i := range e.laws {
		l := &e.laws[i]
		e.lawB[i] = 0
		if !l.held {
			continue
		}
		d, size := l.defect(e.next, tau)
		if math.Abs(d) > e.rtol*size+l.slack {
			return false
		}
		if math.Abs(d) > exact*size {
			e.lawB[i], off = d, true
		}
	}
	if !off {
		return true
	}
	// Normal equations W |Y| W' x = defect by Cholesky; a law whose species are
	// all at zero has nothing to restore.
	y, w := e.next, e.lawWork
	for i := range m {
		li := &e.laws[i]
		row := e.lawM[i*m:][:m]
		if !li.held {
			clear(row)
			continue
		}
		for j, p := range li.at {
			w[p] = li.w[j] * math.Abs(y[p])
		}
		for j := range i + 1 {
			sum := 0.0
			if lj := &e.laws[j]; lj.held {
				for x, p := range lj.at {
					sum += lj.w[x] * w[p]
				}
			}
			row[j] = sum
		}
		for _, p := range li.at {
			w[p] = 0
		}
	}
	for i := range m {
		row := e.lawM[i*m:][:m]
		whole := row[i]
		for j := range i {
			s := row[j]
			for k, v := range e.lawM[j*m:][:j] {
				s -= v * row[k]
			}
			if d := e.lawM[j*m+j]; d != 0 {
				s /= d
			} else {
				s = 0
			}
			row[j] = s
			row[i] -= s * s
		}
		if row[i] > 1e-14*whole {
			row[i] = math.Sqrt(row[i])
		} else {
			row[i] = 0
		}
		b := e.lawB[i]
		for j, v := range row[:i] {
			b -= v * e.lawB[j]
		}
		e.lawB[i] = 0
		if row[i] != 0 {
			e.lawB[i] = b / row[i]
		}
	}
	for i := m - 1; i >= 0; i-- {
		if d := e.lawM[i*m+i]; d != 0 {
			b := e.lawB[i]
			for j := i + 1; j < m; j++ {
				b -= e.lawM[j*m+i] * e.lawB[j]
			}
			e.lawB[i] = b / d
		}
	}
	// The factors of all laws together, then one change of each concentration.
	for i := range e.laws {
		if f := e.lawB[i]; f != 0 {
			for j, p := range e.laws[i].at {
				w[p] += f * e.laws[i].w[j]
			}
		}
	}
	for i, f := range w {
		if f != 0 {
			y[i] -= f * math.Abs(y[i])
			w[i] = 0
		}
	}
	return true
}
