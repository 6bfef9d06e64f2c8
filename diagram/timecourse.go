package diagram

import (
	"math"

	"saddlebook/diagram/axis"
)

// TimeCourse is a figure of values over time: up to 12 lines named at their ends,
// the temperature programme and events above them on the same time axis.
//
// The time shown runs from From to the last time of any line, measured point or
// event; what lies outside, such as the rest of a programme that ended early, is
// not drawn. On a logarithmic time axis the programme and the events before
// the first time shown stand at its beginning.
type TimeCourse struct {
	ID     string
	Title  string // default: the axis and how long, such as "Concentration over 17 h"
	Desc   string // default: ends and highest values, the programme and the events in words
	Axis   string // what the values are, default "concentration", or "share" with Share
	Unit   string // of the values, such as "mol/L"
	Lines  []TimeLine
	Points []TimePoint // measured
	Share  bool        // the values are fractions, shown from 0 to 100 %; Unit is not used
	LogY   bool        // a logarithmic value axis, over at most 8 decades; what lies below is cut off
	Log    bool        // a logarithmic time axis
	From   float64     // s; the first time shown. 0: the first of all, on a logarithmic axis the first above 0
	// Programme is the temperature, straight from node to node; two nodes at one
	// time make a jump.
	Programme     []TimeNode
	ProgrammeUnit string // of the programme, default "°C"
	// Events are written over the time at which they happen, in rows where they
	// need them. Where they would need more than four rows, they are numbered and
	// their words stand below the figure.
	Events []TimeMark
	Width  float64 // default 720
}

// TimeLine is one value over time.
type TimeLine struct {
	Name      string    // tells lines apart; default Label
	Label     string    // as shown; default Name
	Text      string    // the last value as printed, shown behind the label; may be empty
	T         []float64 // s, ascending; two values at one time make a jump
	Y         []float64 // in Unit; NaN: none at this time
	Low, High []float64 // a band, such as an interval; both or none; NaN: none at this time
	Emphasis  bool      // a heavier line
}

// TimePoint is a measured value.
type TimePoint struct {
	Line      string   // the Name of the line that it belongs to; "": none
	T, Y      float64  // s; in Unit
	Low, High *float64 // ends of its error bar; both or none
}

// TimeNode is a corner of a temperature programme.
type TimeNode struct {
	T     float64 // s
	Value float64 // in ProgrammeUnit
	Text  string  // as printed; default Value
}

// TimeMark is an event, such as a dose or a quench.
type TimeMark struct {
	T    float64 // s
	Text string
}

const maxTimeLines = 12 // as many as there are dashes and markers

// Scene lays the figure out. The error is an *Error.
func (c TimeCourse) Scene() (Scene, error) {
	if c.Axis == "" {
		c.Axis = "concentration"
		if c.Share {
			c.Axis = "share"
		}
	}
	if c.ProgrammeUnit == "" {
		c.ProgrammeUnit = "°C"
	}
	if c.Width == 0 {
		c.Width = 720
	}
	if !(c.Width >= 240 && c.Width <= 4000) {
		return Scene{}, refuse("use 240 to 4000", "a time course cannot be %g wide", c.Width)
	}
	if err := c.check(); err != nil {
		return Scene{}, err
	}
	if err := c.checkAside(); err != nil {
		return Scene{}, err
	}
	l := courseLayout{c: c}
	if err := l.rule(); err != nil {
		return Scene{}, err
	}
	marks := l.marks()
	if c.Title == "" {
		c.Title = c.heading(l.from, l.to)
	}
	if c.Desc == "" {
		floor := 0.0
		if l.hidden {
			floor = l.floor
		}
		c.Desc = c.words(l.from, floor)
	}
	return Scene{ID: c.ID, Title: c.Title, Desc: c.Desc, Width: c.Width, Height: l.height, Marks: marks}, nil
}

func (l TimeLine) key() string {
	if l.Name != "" {
		return l.Name
	}
	return l.Label
}

func (l TimeLine) shown() string {
	if l.Label != "" {
		return l.Label
	}
	return l.Name
}

const (
	mostValue = 1e12
	mostTime  = 1e300 // s
)

func (c TimeCourse) check() error {
	switch n := len(c.Lines); {
	case n == 0:
		return refuse("add one", "a time course without a line")
	case n > maxTimeLines:
		return refuse("draw a second figure", "a time course with %d lines, more than the %d that can be told apart", n, maxTimeLines)
	case !(c.From >= 0 && c.From <= mostTime):
		return refuse("use 0 or more", "a time course from %g s", c.From)
	}
	known := map[string]bool{}
	for i, l := range c.Lines {
		name := l.key()
		if name == "" && len(c.Lines) > 1 {
			return refuse("name it", "line %d of the time course has no name", i+1)
		}
		if known[name] {
			return refuse("give each its own", "two lines of the time course have the name %q", name)
		}
		known[name] = true
		if err := l.check(); err != nil {
			return err
		}
	}
	return nil
}

func (l TimeLine) check() error {
	name := l.key()
	switch {
	case len(l.T) == 0 || len(l.T) != len(l.Y):
		return refuse("give one value for each time", "%q has %d times and %d values", name, len(l.T), len(l.Y))
	case (l.Low != nil || l.High != nil) && (len(l.Low) != len(l.T) || len(l.High) != len(l.T)):
		return refuse("give both ends for each time, or none", "%q has %d times and a band of %d and %d", name, len(l.T), len(l.Low), len(l.High))
	}
	some := false
	for i, t := range l.T {
		y := l.Y[i]
		some = some || !math.IsNaN(y)
		switch {
		case !(t >= 0 && t <= mostTime):
			return refuse("use times of 0 or more", "%q has the time %g s", name, t)
		case i > 0 && t < l.T[i-1]:
			return refuse("sort by time", "%q has the time %g s behind %g s", name, t, l.T[i-1])
		case math.Abs(y) > mostValue:
			return refuse("use values within ±1e12, or a larger unit", "%q has the value %g", name, y)
		case l.Low != nil && (math.Abs(l.Low[i]) > mostValue || math.Abs(l.High[i]) > mostValue || l.Low[i] > l.High[i]):
			return refuse("use values within ±1e12, the lower one first", "%q has a band from %g to %g", name, l.Low[i], l.High[i])
		}
	}
	if !some {
		return refuse("leave the line out", "%q has no value at any time", name)
	}
	return nil
}

// checkAside checks what stands beside the lines.
func (c TimeCourse) checkAside() error {
	known := map[string]bool{"": true}
	for _, l := range c.Lines {
		known[l.key()] = true
	}
	for _, p := range c.Points {
		switch {
		case !known[p.Line]:
			return refuse("name a line, or none", "a measured point of %q, which is no line of the time course", p.Line)
		case !(p.T >= 0 && p.T <= mostTime) || !(math.Abs(p.Y) <= mostValue):
			return refuse("use times of 0 or more and values within ±1e12", "a measured point of %q at %g s with the value %g", p.Line, p.T, p.Y)
		case (p.Low == nil) != (p.High == nil):
			return refuse("give both or none", "a measured point of %q at %g s has one end of its error bar only", p.Line, p.T)
		case p.Low != nil && !(*p.Low <= *p.High && math.Abs(*p.Low) <= mostValue && math.Abs(*p.High) <= mostValue):
			return refuse("use values within ±1e12, the lower one first", "a measured point of %q at %g s has an error bar from %g to %g", p.Line, p.T, *p.Low, *p.High)
		}
	}
	for i, n := range c.Programme {
		switch {
		case !(n.T >= 0 && n.T <= mostTime) || !(math.Abs(n.Value) <= mostValue):
			return refuse("use times of 0 or more and values within ±1e12", "the programme has %g at %g s", n.Value, n.T)
		case i > 0 && n.T < c.Programme[i-1].T:
			return refuse("sort by time", "the programme has the time %g s behind %g s", n.T, c.Programme[i-1].T)
		}
	}
	for _, e := range c.Events {
		switch {
		case !(e.T >= 0 && e.T <= mostTime):
			return refuse("use times of 0 or more", "the event %q has the time %g s", e.Text, e.T)
		case e.Text == "":
			return refuse("say what it is", "an event at %g s has no text", e.T)
		}
	}
	return nil
}

// printed gives the text of a node.
func (n TimeNode) printed() string {
	if n.Text != "" {
		return n.Text
	}
	return n.plain()
}

func (n TimeNode) plain() string {
	decimals := 0
	if math.Abs(n.Value-math.Round(n.Value)) > 0.005 {
		decimals = 1
	}
	return axis.Text(n.Value, decimals)
}
