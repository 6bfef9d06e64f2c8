package diagram

import (
	"math"

	"saddlebook/diagram/axis"
	"saddlebook/diagram/lettering"
)

// OverTemperature is a figure of shares, ratios or other values over temperature:
// up to 12 lines with bands, named at their ends, measured points, marked
// temperatures and the places where lines cross each other or a value.
type OverTemperature struct {
	ID    string
	Title string // default: the axis and what the first line does, such as "Share of A 99 % at −78 °C, 12 % at 25 °C"
	Desc  string // default: the ends of all lines, where they cross and the marks in words
	Axis  string // what the values are, default "share" with Share, else "ratio"
	Unit  string // of the values; "" for ratios
	Share bool   // the values are fractions, shown from 0 to 100 %; Unit is not used
	LogY  bool   // a logarithmic value axis, over at most 8 decades; what lies below is cut off

	TempUnit string // default "°C"
	Lines    []TempLine
	Points   []TempPoint // measured
	Marks    []TempMark
	Cross    []TempCross
	Width    float64 // default 720
}

// TempLine is one value over temperature.
type TempLine struct {
	Name      string    // tells lines apart; default Label
	Label     string    // as shown; default Name
	Text      string    // the last value as printed, shown behind the label; may be empty
	Temps     []float64 // ascending
	Y         []float64 // in Unit; NaN: none
	Low, High []float64 // a band, such as an interval; both or none; NaN: none
	Emphasis  bool      // a heavier line
}

// TempPoint is a measured value.
type TempPoint struct {
	Line      string // the Name of the line that it belongs to; "": none
	Temp, Y   float64
	Low, High *float64 // ends of its error bar; both or none
}

// TempMark is a temperature with a text over the plot, such as that of a run.
type TempMark struct {
	Temp float64
	Text string
}

// TempCross asks for a vertical line at each temperature where line A crosses line
// B, or the value At if B is empty. Between two temperatures the lines count as
// straight, on a logarithmic axis their logarithms.
type TempCross struct {
	A, B string // Names
	At   float64
	Text string // what happens there, such as "A = B"; the temperature is added
}

// crossing is where two lines meet.
type crossing struct {
	temp, y float64
	text    string
}

const mostCrossings = 6

// Scene lays the figure out. The error is an *Error.
func (o OverTemperature) Scene() (Scene, error) {
	if o.Axis == "" {
		o.Axis = "ratio"
		if o.Share {
			o.Axis = "share"
		}
	}
	if o.TempUnit == "" {
		o.TempUnit = "°C"
	}
	if o.Width == 0 {
		o.Width = 720
	}
	if !(o.Width >= 240 && o.Width <= 4000) {
		return Scene{}, refuse("use 240 to 4000", "a figure over temperature cannot be %g wide", o.Width)
	}
	if err := o.check(); err != nil {
		return Scene{}, err
	}
	l := overLayout{o: o}
	if err := l.rule(); err != nil {
		return Scene{}, err
	}
	marks := l.marks()
	if o.Title == "" {
		o.Title = l.heading()
	}
	if o.Desc == "" {
		o.Desc = l.words()
	}
	return Scene{ID: o.ID, Title: o.Title, Desc: o.Desc, Width: o.Width, Height: l.height, Marks: marks}, nil
}

func (o OverTemperature) check() error {
	switch n := len(o.Lines); {
	case n == 0:
		return refuse("add one", "a figure over temperature without a line")
	case n > maxTimeLines:
		return refuse("draw a second figure", "a figure over temperature with %d lines, more than the %d that can be told apart", n, maxTimeLines)
	}
	known := map[string]bool{}
	for i, l := range o.Lines {
		name := l.course().key()
		if name == "" && len(o.Lines) > 1 {
			return refuse("name it", "line %d of the figure over temperature has no name", i+1)
		}
		if known[name] {
			return refuse("give each its own", "two lines of the figure over temperature have the name %q", name)
		}
		known[name] = true
		if err := l.check(name); err != nil {
			return err
		}
	}
	for _, p := range o.Points {
		switch {
		case p.Line != "" && !known[p.Line]:
			return refuse("name a line, or none", "a measured point of %q, which is no line of the figure", p.Line)
		case !(math.Abs(p.Temp) <= 1e5) || !(math.Abs(p.Y) <= mostValue):
			return refuse("use temperatures within ±100000 and values within ±1e12", "a measured point of %q at %g %s with the value %g", p.Line, p.Temp, o.TempUnit, p.Y)
		case (p.Low == nil) != (p.High == nil):
			return refuse("give both or none", "a measured point of %q at %g %s has one end of its error bar only", p.Line, p.Temp, o.TempUnit)
		case p.Low != nil && !(*p.Low <= *p.High && math.Abs(*p.Low) <= mostValue && math.Abs(*p.High) <= mostValue):
			return refuse("use values within ±1e12, the lower one first", "a measured point of %q at %g %s has an error bar from %g to %g", p.Line, p.Temp, o.TempUnit, *p.Low, *p.High)
		}
	}
	for _, m := range o.Marks {
		switch {
		case !(math.Abs(m.Temp) <= 1e5):
			return refuse("use temperatures within ±100000", "the mark %q stands at %g %s", m.Text, m.Temp, o.TempUnit)
		case m.Text == "":
			return refuse("say what it is", "a mark at %g %s has no text", m.Temp, o.TempUnit)
		}
	}
	for _, c := range o.Cross {
		switch {
		case !known[c.A]:
			return refuse("name a line", "a crossing of %q, which is no line of the figure", c.A)
		case c.B != "" && !known[c.B]:
			return refuse("name a line, or none and a value", "a crossing with %q, which is no line of the figure", c.B)
		case !(math.Abs(c.At) <= mostValue) || c.B == "" && o.LogY && !(c.At > 0):
			return refuse("use a value within ±1e12, above 0 on a logarithmic axis", "a crossing of %q with the value %g", c.A, c.At)
		}
	}
	return nil
}

func (l TempLine) check(name string) error {
	switch {
	case len(l.Temps) == 0 || len(l.Temps) != len(l.Y):
		return refuse("give one value for each temperature", "%q has %d temperatures and %d values", name, len(l.Temps), len(l.Y))
	case (l.Low != nil || l.High != nil) && (len(l.Low) != len(l.Temps) || len(l.High) != len(l.Temps)):
		return refuse("give both ends for each temperature, or none", "%q has %d temperatures and a band of %d and %d", name, len(l.Temps), len(l.Low), len(l.High))
	}
	some := false
	for i, t := range l.Temps {
		some = some || !math.IsNaN(l.Y[i])
		switch {
		case !(math.Abs(t) <= 1e5):
			return refuse("use temperatures within ±100000", "%q has the temperature %g", name, t)
		case i > 0 && t < l.Temps[i-1]:
			return refuse("sort by temperature", "%q has the temperature %g behind %g", name, t, l.Temps[i-1])
		case math.Abs(l.Y[i]) > mostValue:
			return refuse("use values within ±1e12", "%q has the value %g", name, l.Y[i])
		case l.Low != nil && (math.Abs(l.Low[i]) > mostValue || math.Abs(l.High[i]) > mostValue || l.Low[i] > l.High[i]):
			return refuse("use values within ±1e12, the lower one first", "%q has a band from %g to %g", name, l.Low[i], l.High[i])
		}
	}
	if !some {
		return refuse("leave the line out", "%q has no value at any temperature", name)
	}
	return nil
}

// course is the line as one over time, which is laid out alike.
func (l TempLine) course() TimeLine {
	return TimeLine{Name: l.Name, Label: l.Label, Text: l.Text, T: l.Temps, Y: l.Y, Low: l.Low, High: l.High, Emphasis: l.Emphasis}
}

// overLayout is the layout of a time course whose times are temperatures.
type overLayout struct {
	courseLayout
	o         OverTemperature
	crossings []crossing
}

// rule chooses the scales and finds the crossings.
func (l *overLayout) rule() error {
	o := &l.o
	c := TimeCourse{Axis: o.Axis, Unit: o.Unit, Share: o.Share, LogY: o.LogY, Width: o.Width}
	low, high := math.Inf(1), math.Inf(-1)
	see := func(t float64) { low, high = math.Min(low, t), math.Max(high, t) }
	for _, line := range o.Lines {
		c.Lines = append(c.Lines, line.course())
		see(line.Temps[0])
		see(line.Temps[len(line.Temps)-1])
	}
	for _, p := range o.Points {
		see(p.Temp)
		c.Points = append(c.Points, TimePoint{Line: p.Line, T: p.Temp, Y: p.Y, Low: p.Low, High: p.High})
	}
	for _, m := range o.Marks {
		see(m.Temp)
		c.Events = append(c.Events, TimeMark{T: m.Temp, Text: m.Text})
	}
	if !(high-low > 1e-3) {
		return refuse("give at least two temperatures", "a figure over temperature from %g %s to %g %s", low, o.TempUnit, high, o.TempUnit)
	}
	l.findCrossings()
	if len(l.crossings) <= mostCrossings {
		for _, x := range l.crossings {
			c.Events = append(c.Events, TimeMark{T: x.temp, Text: x.text})
		}
	}
	l.courseLayout = courseLayout{c: c, from: low, to: high}
	return l.values()
}

// findCrossings follows each pair of lines over the temperatures of both.
func (l *overLayout) findCrossings() {
	lines := map[string]TempLine{}
	for _, line := range l.o.Lines {
		lines[line.course().key()] = line
	}
	for _, c := range l.o.Cross {
		a := lines[c.A]
		at := func(t float64) float64 { return c.At }
		temps := a.Temps
		if c.B != "" {
			b := lines[c.B]
			at = func(t float64) float64 { return b.value(t, l.o.LogY) }
			temps = merged(a.Temps, b.Temps)
		}
		was, since := math.NaN(), 0.0
		for _, t := range temps {
			y, other := a.value(t, l.o.LogY), at(t)
			d := y - other
			if l.o.LogY {
				d = math.Log(y) - math.Log(other)
			}
			if math.IsNaN(d) || math.IsInf(d, 0) {
				was = math.NaN()
				continue
			}
			if d == 0 && was != 0 || d*was < 0 {
				temp := t
				if d != 0 {
					temp = since + (t-since)*was/(was-d)
				}
				text := plainNumber(temp) + " " + l.o.TempUnit
				if c.Text != "" {
					text = c.Text + " at " + text
				}
				l.crossings = append(l.crossings, crossing{temp, a.value(temp, l.o.LogY), text})
			}
			was, since = d, t
		}
	}
}

// value is the value of a line at a temperature; NaN where it has none.
func (l TempLine) value(t float64, log bool) float64 {
	for i := range l.Temps {
		switch {
		case l.Temps[i] == t:
			return l.Y[i]
		case i > 0 && l.Temps[i-1] < t && t < l.Temps[i]:
			f := (t - l.Temps[i-1]) / (l.Temps[i] - l.Temps[i-1])
			if log {
				return math.Exp(math.Log(l.Y[i-1]) + f*(math.Log(l.Y[i])-math.Log(l.Y[i-1])))
			}
			return l.Y[i-1] + f*(l.Y[i]-l.Y[i-1])
		}
	}
	return math.NaN()
}

// merged joins two ascending lists.
func merged(a, b []float64) []float64 {
	var out []float64
	for len(a) > 0 || len(b) > 0 {
		if len(b) == 0 || len(a) > 0 && a[0] <= b[0] {
			out, a = append(out, a[0]), a[1:]
		} else {
			out, b = append(out, b[0]), b[1:]
		}
	}
	return out
}

// marks lays everything out as a time course does, over a temperature axis.
func (l *overLayout) marks() []Mark {
	l.columns()
	events, y := l.events(margin)
	title := l.titled(&y, l.yTitle, "axis-text")
	l.top = y + 8
	l.bottom = l.top + l.height
	l.spreadEnds()
	marks := l.guide()
	marks = append(marks, events.marks...)
	marks = append(marks, title...)
	marks = append(marks, l.valueAxis()...)
	tempAxis, y := l.tempAxis()
	marks = append(marks, tempAxis...)
	for _, c := range l.o.Cross {
		if at, ok := l.y(c.At); ok && c.B == "" && at > l.top && at < l.bottom {
			marks = append(marks, Line{Role: "zero", X1: l.left, Y1: at, X2: l.right, Y2: at})
		}
	}
	marks = append(marks, l.lines()...)
	marks = append(marks, l.measured()...)
	for _, x := range l.crossings {
		if at, ok := l.y(x.y); ok && len(l.crossings) <= mostCrossings {
			marks = append(marks, Dot{Role: "meet", X: l.x(x.temp), Y: at, R: markerSize + 1.4})
		}
	}
	marks = append(marks, l.endMarks()...)
	for _, line := range events.key {
		marks = append(marks, Words{Role: "aside", X: margin, Y: y + lettering.Ascent*tickSize, Size: tickSize, Runs: line})
		y += rowHeight
	}
	l.height = math.Ceil(y + margin)
	return marks
}

// tempAxis gives the marks of the temperature axis and where they end.
func (l *overLayout) tempAxis() ([]Mark, float64) {
	marks := []Mark{Line{Role: "axis", X1: l.left, Y1: l.bottom, X2: l.right, Y2: l.bottom}}
	for n := max(2, int((l.right-l.left)/40)); ; n-- {
		values, decimals := axis.Ticks(l.from, l.to, max(2, n))
		var ticks []Mark
		end, ok := math.Inf(-1), true
		for _, v := range values {
			if v < l.from-1e-9*math.Abs(v) || v > l.to+1e-9*math.Abs(v) {
				continue
			}
			x := l.x(v)
			w := Words{Role: "tick-text", X: x, Y: l.bottom + 20.5, Size: tickSize, Anchor: Middle, Runs: lettering.Plain(axis.Text(v, decimals))}
			b := w.Bounds()
			ok = ok && b.X0 >= end+8
			end = b.X1
			ticks = append(ticks, Line{Role: "tick", X1: x, Y1: l.bottom, X2: x, Y2: l.bottom + courseTick}, w)
		}
		if ok || n <= 2 {
			marks = append(marks, ticks...)
			break
		}
	}
	y := l.bottom + 38
	for _, line := range lettering.WrapRuns(lettering.Quantity("temperature", l.o.TempUnit), tickSize, l.right-margin) {
		marks = append(marks, Words{Role: "axis-text", X: l.right, Y: y, Size: tickSize, Anchor: End, Runs: line})
		y += rowHeight
	}
	return marks, y - rowHeight + lettering.Descent*tickSize + 3
}
