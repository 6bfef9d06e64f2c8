package diagram

import (
	"math"
	"sort"
	"strings"

	"saddlebook/diagram/lettering"
	"saddlebook/kinetics/unit"
)

// StraightPlot is a plot of rate constants whose logarithms lie on a straight line
// over 1000 K/T: an Eyring plot of ln(k/T) or an Arrhenius plot of ln k, with an
// axis of °C on top, the line with its band, residuals on a strip beneath and the
// quantities that follow from the line as text in the plot.
type StraightPlot struct {
	ID        string
	Title     string // default: the kind of plot and the first of Facts
	Desc      string // default: the line, its facts, points and largest residual in words
	Arrhenius bool   // the values are ln k; without: ln(k/T)
	Unit      string // of k, default "s-1"
	Axis      string // what the values are; default from Arrhenius and Unit

	Points []StraightPoint
	// The line is Intercept + Slope · 1000 K/T.
	Slope, Intercept float64
	Band             []StraightBand // around the line, such as its 95 % confidence; none: no band
	BandText         string         // what the band is, such as "95 % confidence"
	Facts            []string       // as printed, such as "ΔH‡ = 85.2 ± 1.3 kJ/mol"
	Width            float64        // default 720
}

// StraightPoint is a measured value.
type StraightPoint struct {
	Name      string   // shown for outliers and excluded points
	T, Y      float64  // K; ln(k/T) or ln k
	Low, High *float64 // ends of its error bar; both or none
	Excluded  bool     // not used for the line: drawn open
	Outlier   bool     // used, but far off: ringed and named
}

// StraightBand is the band at one temperature.
type StraightBand struct {
	T         float64 // K
	Low, High float64
}

const (
	mostPoints = 1000
	mostNamed  = 16
	mostLog    = 1e6 // of a logarithm
)

// Scene lays the plot out. The error is an *Error.
func (p StraightPlot) Scene() (Scene, error) {
	if p.Unit == "" {
		p.Unit = "s-1"
	}
	if p.Width == 0 {
		p.Width = 720
	}
	if !(p.Width >= 280 && p.Width <= 4000) {
		return Scene{}, refuse("use 280 to 4000", "a plot cannot be %g wide", p.Width)
	}
	if err := p.check(); err != nil {
		return Scene{}, err
	}
	p.Band = append([]StraightBand{}, p.Band...)
	sort.SliceStable(p.Band, func(i, k int) bool { return p.Band[i].T > p.Band[k].T })
	l := straightLayout{p: p}
	marks := l.marks()
	if p.Title == "" {
		p.Title = p.heading()
	}
	if p.Desc == "" {
		p.Desc = p.words()
	}
	return Scene{ID: p.ID, Title: p.Title, Desc: p.Desc, Width: p.Width, Height: l.height, Marks: marks}, nil
}

func legalT(t float64) bool { return t >= 1 && t <= 1e5 }

func (p StraightPlot) check() error {
	what := strings.ToLower(p.kind())
	if !(math.Abs(p.Slope) <= mostLog) || !(math.Abs(p.Intercept) <= mostLog) {
		return refuse("use numbers within ±1e6", "the line of an %s has the slope %g and the intercept %g", what, p.Slope, p.Intercept)
	}
	if n := len(p.Points); n > mostPoints {
		return refuse("show fewer", "an %s with %d points, more than %d", what, n, mostPoints)
	}
	named := 0
	least, most := math.Inf(1), math.Inf(-1)
	for i, q := range p.Points {
		if (q.Excluded || q.Outlier) && q.Name != "" {
			named++
		}
		if legalT(q.T) {
			least, most = math.Min(least, q.T), math.Max(most, q.T)
		}
		switch {
		case !legalT(q.T):
			return refuse("use kelvins from 1 to 100000", "point %d of an %s stands at %g K", i+1, what, q.T)
		case !(math.Abs(q.Y) <= mostLog):
			return refuse("use logarithms within ±1e6", "point %d of an %s has the value %g", i+1, what, q.Y)
		case (q.Low == nil) != (q.High == nil):
			return refuse("give both or none", "point %d of an %s has one end of its error bar only", i+1, what)
		case q.Low != nil && !(*q.Low <= *q.High && math.Abs(*q.Low) <= mostLog && math.Abs(*q.High) <= mostLog):
			return refuse("use logarithms within ±1e6, the lower one first", "point %d of an %s has an error bar from %g to %g", i+1, what, *q.Low, *q.High)
		}
	}
	switch {
	case !(most-least > 1e-6*most):
		return refuse("give points at two temperatures at least", "an %s with %d points at one temperature or none", what, len(p.Points))
	case named > mostNamed:
		return refuse("name fewer", "an %s with %d named points, more than %d", what, named, mostNamed)
	}
	for _, b := range p.Band {
		if !legalT(b.T) || !(b.Low <= b.High && math.Abs(b.Low) <= mostLog && math.Abs(b.High) <= mostLog) {
			return refuse("use kelvins from 1 to 100000 and logarithms within ±1e6, the lower one first", "the band of an %s goes from %g to %g at %g K", what, b.Low, b.High, b.T)
		}
	}
	return nil
}

func (p StraightPlot) kind() string {
	if p.Arrhenius {
		return "Arrhenius plot"
	}
	return "Eyring plot"
}

// line is the value of the line at a temperature.
func (p StraightPlot) line(t float64) float64 { return p.Intercept + p.Slope*1000/t }

// axis is the title of the value axis: the logarithm of a number.
func (p StraightPlot) axis() []lettering.Run {
	if p.Axis != "" {
		return lettering.Runs(p.Axis)
	}
	k, t := lettering.Run{Text: "k", Italic: true}, lettering.Run{Text: "T", Italic: true}
	plain := func(s string) lettering.Run { return lettering.Run{Text: s} }
	if p.Arrhenius {
		runs := append([]lettering.Run{plain("ln("), k, plain(" / ")}, lettering.Unit(p.Unit)...)
		return append(runs, plain(")"))
	}
	runs := append([]lettering.Run{plain("ln["), k, t, {Text: "−1", Shift: lettering.Super}, plain(" / ")}, lettering.Unit(p.Unit+"/K")...)
	return append(runs, plain("]"))
}

func (p StraightPlot) heading() string {
	if len(p.Facts) > 0 {
		return p.kind() + ": " + p.Facts[0]
	}
	return p.kind() + " with a slope of " + unit.Digits(1000*p.Slope, 3) + " K"
}

// words tells the figure to those who do not see it.
func (p StraightPlot) words() string {
	least, most := math.Inf(1), math.Inf(-1)
	used := 0
	worst, at := 0.0, 0.0
	var outliers, excluded []string
	for i, q := range p.Points {
		least, most = math.Min(least, q.T), math.Max(most, q.T)
		name := q.Name
		if name == "" {
			name = "point " + unit.Fixed(float64(i+1), 0)
		}
		if q.Excluded {
			excluded = append(excluded, name)
			continue
		}
		if used++; math.Abs(q.Y-p.line(q.T)) > math.Abs(worst) {
			worst, at = q.Y-p.line(q.T), q.T
		}
		if q.Outlier {
			outliers = append(outliers, name)
		}
	}
	value := "ln(k/T)"
	if p.Arrhenius {
		value = "ln k"
	}
	celsius := func(t float64) string { return plainNumber(t-273.15) + " °C" }
	parts := []string{"The line goes from " + value + " = " + unit.Fixed(p.line(least), 2) + " at " + celsius(least) + " to " +
		unit.Fixed(p.line(most), 2) + " at " + celsius(most) + ", a slope of " + unit.Digits(1000*p.Slope, 3) + " K."}
	if len(p.Facts) > 0 {
		parts = append(parts, strings.Join(p.Facts, "; ")+".")
	}
	text := unit.Fixed(float64(used), 0) + " points used"
	if worst != 0 {
		text += ", the largest residual " + unit.Digits(worst, 2) + " at " + celsius(at)
	}
	parts = append(parts, text+".")
	if len(outliers) > 0 {
		parts = append(parts, "Outliers: "+strings.Join(outliers, ", ")+".")
	}
	if len(excluded) > 0 {
		parts = append(parts, "Not used: "+strings.Join(excluded, ", ")+".")
	}
	if len(p.Band) > 0 && p.BandText != "" {
		parts = append(parts, "Band: "+p.BandText+".")
	}
	return strings.Join(parts, " ")
}
