package diagram

import (
	"math"

	"saddlebook/diagram/axis"
	"saddlebook/diagram/lettering"
)

// courseLayout turns a time course into marks. From top to bottom: the programme,
// rows of events, the title of the value axis, the plot, the time axis and, where
// events are numbered, their words.
type courseLayout struct {
	c          TimeCourse
	from, to   float64 // s
	low, high  float64 // of the value axis
	floor      float64 // LogY: the least value shown
	hidden     bool    // LogY: there are values below it
	size       float64 // the value of one unit of the axis' numbers
	yTicks     []axis.Tick
	yTitle     []lettering.Run
	left       float64 // ends of the time axis
	right      float64
	top        float64 // of the plot
	bottom     float64
	height     float64
	ends       []*endLabel
	leaderRoom float64
	guides     []float64 // x of the events
	titles     []Rect    // of the axes, which guides keep clear of
	strips     Rect      // the programme
	eventFoot  float64   // below the texts of events
}

const (
	rowHeight   = 16.0 // of a row of events
	stripHeight = 34.0 // of the programme's line
	courseTick  = 4.0
	keyRoom     = 13.0 // a marker before a label
)

// rule chooses the scales.
func (l *courseLayout) rule() error {
	c := &l.c
	l.to = 0
	first := math.Inf(1)
	see := func(t float64) {
		l.to = math.Max(l.to, t)
		if t > 0 {
			first = math.Min(first, t)
		}
	}
	for _, line := range c.Lines {
		for i, t := range line.T {
			if t > 0 || i == len(line.T)-1 {
				see(t)
				break
			}
		}
		see(line.T[len(line.T)-1])
	}
	for _, p := range c.Points {
		see(p.T)
	}
	for _, e := range c.Events {
		l.to = math.Max(l.to, e.T)
	}
	l.from = c.From
	if c.Log && l.from == 0 {
		l.from = first
	}
	if !(l.to-l.from > 1e-9*l.to) {
		return refuse("give at least two times", "a time course from %g s to %g s", l.from, l.to)
	}
	return l.values()
}

// values chooses the value axis.
func (l *courseLayout) values() error {
	c := &l.c
	low, high, least := math.Inf(1), math.Inf(-1), math.Inf(1)
	see := func(y float64) {
		if math.IsNaN(y) {
			return
		}
		low, high = math.Min(low, y), math.Max(high, y)
		if y > 0 {
			least = math.Min(least, y)
		}
	}
	for _, line := range c.Lines {
		for i, t := range line.T {
			if t < l.from && !(i+1 < len(line.T) && line.T[i+1] > l.from) {
				continue
			}
			see(line.Y[i])
			if line.Low != nil {
				see(line.Low[i])
				see(line.High[i])
			}
		}
	}
	for _, p := range c.Points {
		if p.T >= l.from {
			see(p.Y)
			if p.Low != nil {
				see(*p.Low)
				see(*p.High)
			}
		}
	}
	if low > high {
		return refuse("start earlier", "a time course without a value from %g s on", l.from)
	}
	unit := c.Unit
	l.size = 1
	if c.Share {
		l.size, unit = 0.01, "%"
	}
	l.height = math.Min(330, math.Max(200, 0.42*c.Width)) // of the plot, for now
	if c.LogY {
		if math.IsInf(least, 1) {
			return refuse("use a linear axis", "a logarithmic axis for values of which none is above 0")
		}
		l.floor = math.Max(least, high*1e-8)
		l.hidden = low < l.floor
		l.yTicks = axis.Decades(l.floor/l.size, high/l.size, 9)
		l.yTitle = lettering.Quantity(c.Axis, unit)
		l.low, l.high = l.yTicks[0].At*l.size, l.yTicks[len(l.yTicks)-1].At*l.size
		l.floor = math.Max(l.low, l.floor)
		return nil
	}
	low, high = math.Min(low, 0), math.Max(high, 0)
	// Whatever computed them, shares may miss 0 and 1 by a rounding.
	if low > -1e-9*math.Max(1e-300, high) {
		low = 0
	}
	if c.Share && high < 1+1e-9 {
		high = 1
	}
	if high <= low {
		high = low + 1
	}
	power := axis.Power(math.Max(high, -low) / l.size)
	l.size *= math.Pow10(power)
	values, decimals := axis.Ticks(low/l.size, high/l.size, 6)
	for _, v := range values {
		l.yTicks = append(l.yTicks, axis.Tick{At: v, Text: axis.Text(v, decimals)})
	}
	l.yTitle = scaled(c.Axis, unit, power)
	l.low, l.high = values[0]*l.size, values[len(values)-1]*l.size
	return nil
}

// scaled is the title of an axis whose numbers are multiples of a power of ten.
func scaled(name, unit string, power int) []lettering.Run {
	if power == 0 {
		return lettering.Quantity(name, unit)
	}
	runs := append([]lettering.Run{}, lettering.Quantity(name, "")...)
	runs = append(runs, lettering.Run{Text: " / "})
	runs = append(runs, lettering.Runs("10^"+axis.Text(float64(power), 0))...)
	if unit != "" {
		runs = append(append(runs, lettering.Run{Text: " "}), lettering.Unit(unit)...)
	}
	return runs
}

// x is the place of a time; times before the beginning stand there.
func (l *courseLayout) x(t float64) float64 {
	t = math.Max(t, l.from)
	if l.c.Log {
		return axis.Log{Low: l.from, High: l.to, From: l.left, To: l.right}.At(t)
	}
	return axis.Scale{Low: l.from, High: l.to, From: l.left, To: l.right}.At(t)
}

// y is the place of a value; ok is false where it is none or too low to be shown.
func (l *courseLayout) y(v float64) (y float64, ok bool) {
	if l.c.LogY {
		if !(v >= l.floor*(1-1e-9)) {
			return l.bottom, false
		}
		return axis.Log{Low: l.low, High: l.high, From: l.bottom, To: l.top}.At(v), true
	}
	return axis.Scale{Low: l.low, High: l.high, From: l.bottom, To: l.top}.At(v), !math.IsNaN(v)
}

// marks lays everything out.
func (l *courseLayout) marks() []Mark {
	l.columns()
	var marks []Mark
	y := margin
	strip, y := l.strip(y)
	events, y := l.events(y)
	title := l.titled(&y, l.yTitle, "axis-text")
	l.top = y + 8
	l.bottom = l.top + l.height
	l.spreadEnds()

	marks = append(marks, l.guide()...)
	marks = append(marks, strip...)
	marks = append(marks, events.marks...)
	marks = append(marks, title...)
	marks = append(marks, l.valueAxis()...)
	timeAxis, y := l.timeAxis()
	marks = append(marks, timeAxis...)
	marks = append(marks, l.lines()...)
	marks = append(marks, l.measured()...)
	marks = append(marks, l.endMarks()...)
	for _, line := range events.key {
		marks = append(marks, Words{Role: "aside", X: margin, Y: y + lettering.Ascent*tickSize, Size: tickSize, Runs: line})
		y += rowHeight
	}
	l.height = math.Ceil(y + margin)
	return marks
}

// columns shares the width between the value axis, the plot and the labels.
func (l *courseLayout) columns() {
	tick := 0.0
	wide := func(text string) { tick = math.Max(tick, lettering.Width(lettering.Runs(text), tickSize)) }
	for _, t := range l.yTicks {
		wide(t.Text)
	}
	if low, high, ok := l.extremeNodes(); ok {
		wide(low.plain())
		wide(high.plain())
	}
	l.left = margin + tick + 9
	label := l.makeEnds()
	label = math.Max(label, 20) // for half of the last time
	if len(l.c.Events) > 0 {
		label = math.Max(label, 44) // for the number of a last event
	}
	l.leaderRoom = 10
	switch n := len(l.ends); {
	case n > 6:
		l.leaderRoom = 34
	case n > 2:
		l.leaderRoom = 20
	}
	l.right = l.c.Width - margin - label - l.leaderRoom
}

// titled sets the title of an axis over the full width, y being its top, and moves
// y below it.
func (l *courseLayout) titled(y *float64, runs []lettering.Run, role Role) []Mark {
	var marks []Mark
	for _, line := range lettering.WrapRuns(runs, tickSize, l.c.Width-2*margin) {
		w := Words{Role: role, X: margin, Y: *y + lettering.Ascent*tickSize, Size: tickSize, Runs: line}
		marks = append(marks, w)
		l.titles = append(l.titles, w.Bounds())
		*y += rowHeight
	}
	return marks
}

func (l *courseLayout) valueAxis() []Mark {
	marks := []Mark{Line{Role: "axis", X1: l.left, Y1: l.top, X2: l.left, Y2: l.bottom}}
	for _, t := range l.yTicks {
		at := axis.Scale{Low: l.low, High: l.high, From: l.bottom, To: l.top}.At(t.At * l.size)
		if l.c.LogY {
			at = axis.Log{Low: l.low, High: l.high, From: l.bottom, To: l.top}.At(t.At * l.size)
		}
		marks = append(marks,
			Line{Role: "tick", X1: l.left - courseTick, Y1: at, X2: l.left, Y2: at},
			Words{Role: "tick-text", X: l.left - 8, Y: at + 0.35*tickSize, Size: tickSize, Anchor: End, Runs: lettering.Runs(t.Text)})
	}
	if l.low < 0 && !l.c.LogY {
		zero, _ := l.y(0)
		marks = append(marks, Line{Role: "zero", X1: l.left, Y1: zero, X2: l.right, Y2: zero})
	}
	return marks
}

// timeAxis gives the marks of the time axis and where they end.
func (l *courseLayout) timeAxis() ([]Mark, float64) {
	marks := []Mark{Line{Role: "axis", X1: l.left, Y1: l.bottom, X2: l.right, Y2: l.bottom}}
	ticks, title := l.timeTicks()
	for _, t := range ticks {
		x := l.x(t.At)
		marks = append(marks, Line{Role: "tick", X1: x, Y1: l.bottom, X2: x, Y2: l.bottom + courseTick})
		if t.Text != "" {
			marks = append(marks, Words{Role: "tick-text", X: x, Y: l.bottom + 20.5, Size: tickSize, Anchor: Middle, Runs: lettering.Runs(t.Text)})
		}
	}
	y := l.bottom + 38
	marks = append(marks, Words{Role: "axis-text", X: l.right, Y: y, Size: tickSize, Anchor: End, Runs: title})
	return marks, y + lettering.Descent*tickSize + 3
}

// timeTicks gives as many round times as there is room for.
func (l *courseLayout) timeTicks() ([]axis.Tick, []lettering.Run) {
	width := func(t axis.Tick) float64 { return lettering.Width(lettering.Runs(t.Text), tickSize) }
	clear := func(a, b axis.Tick) bool {
		return math.Abs(l.x(a.At)-l.x(b.At)) >= (width(a)+width(b))/2+8
	}
	if l.c.Log {
		all := axis.LogTimes(l.from, l.to)
		labelled := 0
		for rank := range 4 {
			if rank > 1 && labelled > 5 {
				break
			}
			for i := range all {
				ok := all[i].Rank == rank
				for k := range all {
					ok = ok && (k == i || all[k].Rank >= 0 || clear(all[i], all[k]))
				}
				if ok {
					all[i].Rank, labelled = -1, labelled+1 // -1: labelled
				}
			}
		}
		if labelled >= 2 {
			var out []axis.Tick
			for _, t := range all {
				switch {
				case t.Rank == 0 || t.Rank == 1:
					t.Text = ""
					out = append(out, t)
				case t.Rank < 0:
					out = append(out, t)
				}
			}
			return out, lettering.Runs("time")
		}
	}
	for n := max(2, int((l.right-l.left)/36)); n >= 2; n-- {
		ticks, unit, power := axis.Times(l.from, l.to, n)
		ok := true
		for i := 1; i < len(ticks); i++ {
			ok = ok && clear(ticks[i-1], ticks[i])
		}
		if ok || n == 2 {
			return ticks, scaled("time", unit, power)
		}
	}
	return nil, lettering.Runs("time")
}
