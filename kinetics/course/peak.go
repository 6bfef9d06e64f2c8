package course

// A Peak is where there is most of a product.
type Peak struct {
	T, Kelvin float64
	Amount    float64 // mol/L, the sum of its species
}

// A Pace is how fast the steps make each species at one time, mol/L/s; for the
// start of a part of the run, a millionth of the programme after it.
type Pace struct {
	T      float64
	Making []float64
}

// lull is the share of the programme after its start, and after whatever begins,
// ends or jumps, in which the pace is not taken: a fast exchange that is out of
// balance passes within it, and its rate is not that of the run.
const lull = 1e-6

// A summit follows the amount of one product.
type summit struct {
	best  Peak
	point *Point  // the state there, for drawing; nil where it is no turn
	slope float64 // when last seen
}

// climb looks for peaks between a and b, and notes the pace: in the middle and
// at the end, and at the start of a stretch.
func (w *walk) climb(d dense, a, b float64) {
	if !w.p.run.Peaks {
		return
	}
	mid, after := a+(b-a)/2, w.at.from+lull*w.p.end
	fresh := w.climbed != w.at
	w.climbed = w.at
	if fresh {
		w.rise(d, a, a, true)
	}
	for _, part := range [2][2]float64{{a, mid}, {mid, b}} {
		from, to := part[0], part[1]
		if from < after && after < to {
			w.rise(d, from, after, false)
			from = after
		}
		w.rise(d, from, to, false)
	}
}

// rise takes the state at b, after the one at a; first tells that nothing came
// before it.
func (w *walk) rise(d dense, a, b float64, first bool) {
	slope := w.between
	clear(slope)
	d.Slope(b, slope)
	d.At(b, w.look)
	for i := range w.high {
		h := &w.high[i]
		before, turned := h.slope, false
		h.slope = w.climbing(i, slope)
		now := Peak{T: b, Kelvin: w.at.leg.kelvin(b), Amount: w.sum(i, w.look)}
		// rounding about a level is no peak
		if !first && before > 0 && h.slope < 0 && before-h.slope > 1e-9*h.best.Amount/w.p.end {
			now = w.top(d, i, a, b)
			turned = true
		}
		if now.Amount > h.best.Amount*(1+1e-9) {
			h.best, h.point = now, nil
			if turned && w.p.run.Trace > 0 {
				p := w.point(now.T, w.look, w.between)
				h.point = &p
			}
		}
		if turned {
			d.At(b, w.look)
			d.Slope(b, slope)
		}
	}
	if after := w.at.from + lull*w.p.end; b >= after {
		t := b
		if b == after {
			t = w.at.from
		}
		w.c.Pace = append(w.c.Pace, Pace{t, w.making(slope)})
	}
}

// climbing is the slope of a product.
func (w *walk) climbing(product int, slope []float64) float64 {
	sum := 0.0
	for _, s := range w.p.run.Products[product].Members {
		sum += slope[s]
	}
	return sum
}

// top narrows a change of slope from above zero to below, and leaves the state
// there in look and its slope in between.
func (w *walk) top(d dense, product int, a, b float64) Peak {
	for range 50 {
		mid := a + (b-a)/2
		if mid <= a || mid >= b {
			break
		}
		if d.Slope(mid, w.between); w.climbing(product, w.between) > 0 {
			a = mid
		} else {
			b = mid
		}
	}
	d.At(b, w.look)
	d.Slope(b, w.between)
	return Peak{T: b, Kelvin: w.at.leg.kelvin(b), Amount: w.sum(product, w.look)}
}

// making is what the steps make, from the slope of all.
func (w *walk) making(slope []float64) []float64 {
	out := make([]float64, w.p.n)
	for s := range out {
		out[s] = slope[s] - w.at.feed[s]
	}
	for i, v := range w.p.sinks {
		out[w.p.run.Removals[v].Species] += slope[w.p.n+i]
	}
	return out
}
