package diagram

import (
	"math"

	"saddlebook/diagram/axis"
	"saddlebook/diagram/lettering"
)

// straightLayout turns a plot into marks. From top to bottom: titles, the axis of
// °C, the plot, the strip of residuals, the axis of 1000 K/T, names behind numbers.
type straightLayout struct {
	p           StraightPlot
	room        room
	xs          axis.Scale // of 1000 K/T
	ys          axis.Scale
	rs          axis.Scale // of residuals
	left, right float64
	height      float64
}

const (
	stripRoom  = 84.0 // the strip of residuals
	stripGap   = 40.0 // above it, with its title
	overEdge   = 4.0  // half of a point beyond the residuals
	celsiusGap = 10.0 // between two temperatures
)

func inverse(t float64) float64 { return 1000 / t }

// ranges gives the ends of the axes: of x, of the values and of the residuals.
func (l *straightLayout) ranges() (x, y [2]float64, residual float64) {
	x, y = [2]float64{math.Inf(1), math.Inf(-1)}, [2]float64{math.Inf(1), math.Inf(-1)}
	see := func(r *[2]float64, v float64) { r[0], r[1] = math.Min(r[0], v), math.Max(r[1], v) }
	used, all := 0.0, 0.0
	for _, q := range l.p.Points {
		see(&x, inverse(q.T))
		see(&y, q.Y)
		low, high := q.Y, q.Y
		if q.Low != nil {
			low, high = math.Min(low, *q.Low), math.Max(high, *q.High)
			see(&y, low)
			see(&y, high)
		}
		fit := l.p.line(q.T)
		r := math.Max(math.Abs(low-fit), math.Abs(high-fit))
		all = math.Max(all, r)
		if !q.Excluded {
			used = math.Max(used, r)
		}
	}
	for _, b := range l.p.Band {
		see(&x, inverse(b.T))
		see(&y, b.Low)
		see(&y, b.High)
	}
	room := 0.03 * (x[1] - x[0])
	if len(l.p.Band) == 0 {
		room *= 2
	}
	x[0], x[1] = math.Max(x[0]/2, x[0]-room), x[1]+room
	see(&y, l.p.Intercept+l.p.Slope*x[0])
	see(&y, l.p.Intercept+l.p.Slope*x[1])
	// An excluded point far off would flatten the others.
	residual = math.Min(all, 1.3*used)
	if used == 0 {
		residual = all
	}
	if noise := 1e-9 * math.Max(1, math.Max(math.Abs(y[0]), math.Abs(y[1]))); residual < noise {
		residual = 0.01
	}
	pad := 0.04 * math.Max(y[1]-y[0], 1e-6*math.Max(1, math.Abs(y[0])))
	return x, [2]float64{y[0] - pad, y[1] + pad}, 1.08 * residual
}

// ticksIn gives about n round values from low to high, at least two.
func ticksIn(low, high float64, n int) ([]float64, int) {
	for ; ; n++ {
		all, decimals := axis.Ticks(low, high, n)
		var in []float64
		for _, v := range all {
			if v >= low && v <= high {
				in = append(in, v)
			}
		}
		if len(in) >= 2 || n > 12 {
			return in, decimals
		}
	}
}

func (l *straightLayout) marks() []Mark {
	p := &l.p
	xr, yr, residual := l.ranges()
	yTicks, yDecimals := ticksIn(yr[0], yr[1], 6)
	rTicks, rDecimals := ticksIn(-residual, residual, 6) // at least a fifth of the strip apart
	wide := 0.0
	for _, v := range yTicks {
		wide = math.Max(wide, lettering.Width(lettering.Plain(axis.Text(v, yDecimals)), tickSize))
	}
	for _, v := range rTicks {
		wide = math.Max(wide, lettering.Width(lettering.Plain(axis.Text(v, rDecimals)), tickSize))
	}
	l.left, l.right = margin+wide+9, p.Width-margin-16
	l.xs = axis.Scale{Low: xr[0], High: xr[1], From: l.left, To: l.right}

	var marks []Mark
	y := margin
	write := func(runs []lettering.Run, anchor Anchor, x float64) {
		for _, line := range lettering.WrapRuns(runs, tickSize, p.Width-2*margin) {
			marks = append(marks, Words{Role: "axis-text", X: x, Y: y + lettering.Ascent*tickSize, Size: tickSize, Anchor: anchor, Runs: line})
			y += rowHeight
		}
	}
	write(lettering.Quantity("temperature", "°C"), End, l.right)
	// Side by side with the other title where there is room.
	if title := p.axis(); lettering.Width(title, tickSize)+lettering.Width(lettering.Quantity("temperature", "°C"), tickSize)+20 <= l.right-margin {
		y = margin
		write(title, Start, margin)
	} else {
		write(title, Start, margin)
	}
	top := y + 29
	bottom := top + math.Round(math.Min(340, math.Max(200, 0.44*p.Width)))
	l.ys = axis.Scale{Low: yr[0], High: yr[1], From: bottom, To: top}
	stripTop := bottom + stripGap
	foot := stripTop + stripRoom
	l.rs = axis.Scale{Low: -residual, High: residual, From: foot, To: stripTop}
	l.room = newRoom(Rect{l.left, top, l.right, bottom}, false)

	marks = append(marks, l.celsius(top)...)
	marks = append(marks, l.values(yTicks, yDecimals, l.ys)...)
	marks = append(marks, l.values(rTicks, rDecimals, l.rs)...)
	marks = append(marks,
		Line{Role: "axis", X1: l.left, Y1: bottom, X2: l.right, Y2: bottom},
		Words{Role: "axis-text", X: margin, Y: stripTop - 16, Size: tickSize, Runs: lettering.Runs("residual")},
		Line{Role: "zero", X1: l.left, Y1: l.rs.At(0), X2: l.right, Y2: l.rs.At(0)})
	marks = append(marks, l.line()...)
	marks = append(marks, l.points()...)
	l.names()
	below := l.facts()
	marks = append(marks, l.room.over...)
	bottomAxis, y := l.bottomAxis(foot)
	marks = append(marks, bottomAxis...)
	for _, text := range below {
		for _, line := range lettering.Wrap(text, tickSize, p.Width-2*margin) {
			marks = append(marks, Words{Role: "aside", X: margin, Y: y + lettering.Ascent*tickSize, Size: tickSize, Runs: line})
			y += rowHeight
		}
	}
	l.height = math.Ceil(y + margin)
	return marks
}

// celsius draws the axis of temperatures on top, as many round ones as there is
// room for.
func (l *straightLayout) celsius(top float64) []Mark {
	marks := []Mark{Line{Role: "axis", X1: l.left, Y1: top, X2: l.right, Y2: top}}
	low, high := 1000/l.xs.High-273.15, 1000/l.xs.Low-273.15
	for n := max(2, int((l.right-l.left)/40)); ; n-- {
		values, decimals := axis.Ticks(low, high, n)
		var ticks []Mark
		ok, end := true, math.Inf(-1)
		for i := len(values) - 1; i >= 0; i-- {
			v := values[i]
			if v < low || v > high {
				continue
			}
			x := l.xs.At(1000 / (v + 273.15))
			w := Words{Role: "tick-text", X: x, Y: top - 12, Size: tickSize, Anchor: Middle, Runs: lettering.Plain(axis.Text(v, decimals))}
			b := w.Bounds()
			if b.X0 < margin || b.X1 > l.p.Width-margin {
				continue
			}
			ok = ok && b.X0 >= end+celsiusGap
			if b.X0 < end+celsiusGap && n == 2 {
				continue // the fewest there are
			}
			end = b.X1
			ticks = append(ticks, Line{Role: "tick", X1: x, Y1: top - courseTick, X2: x, Y2: top}, w)
		}
		if ok || n == 2 {
			return append(marks, ticks...)
		}
	}
}

// values draws an axis on the left, as long as its scale.
func (l *straightLayout) values(ticks []float64, decimals int, s axis.Scale) []Mark {
	marks := []Mark{Line{Role: "axis", X1: l.left, Y1: s.To, X2: l.left, Y2: s.From}}
	for _, v := range ticks {
		y := s.At(v)
		marks = append(marks,
			Line{Role: "tick", X1: l.left - courseTick, Y1: y, X2: l.left, Y2: y},
			Words{Role: "tick-text", X: l.left - 8, Y: y + 0.35*tickSize, Size: tickSize, Anchor: End, Runs: lettering.Plain(axis.Text(v, decimals))})
	}
	return marks
}

// bottomAxis draws the axis of 1000 K/T and gives where it ends.
func (l *straightLayout) bottomAxis(y float64) ([]Mark, float64) {
	marks := []Mark{Line{Role: "axis", X1: l.left, Y1: y, X2: l.right, Y2: y}}
	for n := max(2, int((l.right-l.left)/40)); ; n-- {
		values, decimals := axis.Ticks(l.xs.Low, l.xs.High, n)
		var ticks []Mark
		ok, end := true, math.Inf(-1)
		for _, v := range values {
			if v < l.xs.Low || v > l.xs.High {
				continue
			}
			w := Words{Role: "tick-text", X: l.xs.At(v), Y: y + 20.5, Size: tickSize, Anchor: Middle, Runs: lettering.Plain(axis.Text(v, decimals))}
			b := w.Bounds()
			if b.X0 < margin || b.X1 > l.p.Width-margin {
				continue
			}
			ok = ok && b.X0 >= end+celsiusGap
			end = b.X1
			ticks = append(ticks, Line{Role: "tick", X1: w.X, Y1: y, X2: w.X, Y2: y + courseTick}, w)
		}
		if ok || n == 2 {
			marks = append(marks, ticks...)
			break
		}
	}
	title := []lettering.Run{{Text: "1000 K / "}, {Text: "T", Italic: true}}
	marks = append(marks, Words{Role: "axis-text", X: l.right, Y: y + 38, Size: tickSize, Anchor: End, Runs: title})
	return marks, y + 38 + lettering.Descent*tickSize + 3
}
