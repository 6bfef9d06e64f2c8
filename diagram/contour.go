package diagram

import (
	"math"
)

// ContourMap is a figure of one value over time (to the right) and temperature
// (upwards): shading in bands with a bar that reads it, labelled lines at chosen
// values, the place of runs, named regions and, where wished, the conditions that
// meet all wishes.
//
// Between the points of the grid shading and lines follow a smooth interpolation
// of the value, or of its logarithm with LogValues, that has no highest or lowest
// place of its own. Around a point without a value
// the map is blank and hatched.
type ContourMap struct {
	ID    string
	Title string // default: the value and its range over the map
	Desc  string // default: extremes, where the levels lie, runs and regions in words

	Axis      string // what the values are, such as "1,2-adduct:1,4-adduct"; default "value"
	Unit      string // of the values, such as "mol/L"
	Share     bool   // the values are fractions, shown in percent; Unit is not used
	Ratio     bool   // the values are ratios of two amounts, shown as 20:1; Unit is not used
	LogValues bool   // a logarithmic value scale; 0 and +Inf take the colours of its ends
	// Low and High are the ends of the value scale; what lies beyond takes the
	// colour of the end. Both or none. Default: around all values; on a
	// logarithmic scale at most a hundred times beyond the levels, or eight
	// decades in all without a level.
	Low, High *float64

	Times  []float64   // s, ascending; above 0 on a logarithmic axis
	Log    bool        // a logarithmic time axis
	Temps  []float64   // in TempUnit, ascending
	Values [][]float64 // Values[i][k] at Temps[i] and Times[k]; NaN: none

	TempAxis string // default "temperature"
	TempUnit string // default "°C"
	Nothing  string // what a place without a value means, default "no value"

	Levels   []MapLevel
	Runs     []MapPoint
	Regions  []MapRegion
	Feasible *MapRegion // hatched, with an outline
	Best     *MapPoint  // a point marked with a star, such as the one with most room

	Width float64 // default 720
}

// MapLevel is a value with a line on the map.
type MapLevel struct {
	Value float64
	Text  string // default: Value as printed
}

// MapPoint is a named place on the map.
type MapPoint struct {
	Name string
	T    float64 // s
	Temp float64 // in the unit of the map
}

// MapRegion is a part of the map: where its measure is above 0. A condition that
// only holds or not is 1 or -1; a measure that changes steadily, such as 0.5 minus
// a control, gives a smooth border.
type MapRegion struct {
	Name    string
	Measure [][]float64 // as ContourMap.Values; NaN: outside
	Border  bool        // draws the border
}

const (
	mostGrid    = 400 // points along one side
	mostLevels  = 12
	mostRuns    = 24
	mostRegions = 8
)

// Scene lays the map out. The error is an *Error.
func (m ContourMap) Scene() (Scene, error) {
	m.defaults()
	if !(m.Width >= 280 && m.Width <= 4000) {
		return Scene{}, refuse("use 280 to 4000", "a map cannot be %g wide", m.Width)
	}
	for _, check := range []func() error{m.checkGrid, m.checkScale, m.checkPlaces} {
		if err := check(); err != nil {
			return Scene{}, err
		}
	}
	l := mapLayout{m: m}
	if err := l.scale(); err != nil {
		return Scene{}, err
	}
	marks := l.marks()
	if m.Title == "" {
		m.Title = l.heading()
	}
	if m.Desc == "" {
		m.Desc = l.words()
	}
	return Scene{ID: m.ID, Title: m.Title, Desc: m.Desc, Width: m.Width, Height: l.height, Marks: marks}, nil
}

func (m *ContourMap) defaults() {
	set := func(s *string, to string) {
		if *s == "" {
			*s = to
		}
	}
	set(&m.Axis, "value")
	set(&m.TempAxis, "temperature")
	set(&m.TempUnit, "°C")
	set(&m.Nothing, "no value")
	if m.Width == 0 {
		m.Width = 720
	}
	if m.Share || m.Ratio {
		m.Unit = ""
	}
}

func (m *ContourMap) checkGrid() error {
	nt, nk := len(m.Temps), len(m.Times)
	switch {
	case nt < 2 || nk < 2:
		return refuse("give at least two of each", "a map of %d temperatures and %d times", nt, nk)
	case nt > mostGrid || nk > mostGrid:
		return refuse("use fewer", "a map of %d temperatures and %d times, more than %d of one", nt, nk, mostGrid)
	case m.Share && m.Ratio:
		return refuse("choose one", "a map whose values are both shares and ratios")
	}
	if err := grid("values", m.Values, nt, nk); err != nil {
		return err
	}
	for k, t := range m.Times {
		switch {
		case !(t >= 0 && t <= mostTime):
			return refuse("use times of 0 or more", "the map has the time %g s", t)
		case k > 0 && !(t > m.Times[k-1]):
			return refuse("sort by time, each once", "the map has the time %g s behind %g s", t, m.Times[k-1])
		}
	}
	if m.Log && m.Times[0] == 0 {
		return refuse("start above 0, or use a linear time axis", "a logarithmic time axis from 0 s")
	}
	if first, last := m.Times[0], m.Times[nk-1]; !(last-first > 1e-9*last) {
		return refuse("give times farther apart", "a map from %g s to %g s", first, last)
	}
	for i, t := range m.Temps {
		switch {
		case !(math.Abs(t) <= 1e5):
			return refuse("use temperatures within ±100000", "the map has the temperature %g", t)
		case i > 0 && !(t > m.Temps[i-1]):
			return refuse("sort by temperature, each once", "the map has the temperature %g behind %g", t, m.Temps[i-1])
		}
	}
	if first, last := m.Temps[0], m.Temps[nt-1]; !(last-first > 1e-3) {
		return refuse("give temperatures farther apart", "a map from %g %s to %g %s", first, m.TempUnit, last, m.TempUnit)
	}
	return nil
}

func grid(what string, values [][]float64, nt, nk int) error {
	if len(values) != nt {
		return refuse("give one row for each temperature", "%s in %d rows for %d temperatures", what, len(values), nt)
	}
	for i, row := range values {
		if len(row) != nk {
			return refuse("give one for each time", "%d %s in row %d for %d times", len(row), what, i+1, nk)
		}
	}
	return nil
}

func (m *ContourMap) checkScale() error {
	some := false
	for i, row := range m.Values {
		for k, v := range row {
			some = some || !math.IsNaN(v)
			switch {
			case m.LogValues && v < 0:
				return refuse("use a linear value scale", "the value %g at %g %s and %g s on a logarithmic scale", v, m.Temps[i], m.TempUnit, m.Times[k])
			case m.LogValues && math.IsInf(v, 1):
			case math.Abs(v) > 1e300 || !m.LogValues && math.Abs(v) > mostValue:
				return refuse("use values within ±1e12, a larger unit or a logarithmic scale", "the value %g at %g %s and %g s", v, m.Temps[i], m.TempUnit, m.Times[k])
			}
		}
	}
	if !some {
		return refuse("leave the figure out", "a map without a value")
	}
	if (m.Low == nil) != (m.High == nil) {
		return refuse("give both or none", "the value scale of a map has one end only")
	}
	if m.Low != nil && !(*m.Low < *m.High && math.Abs(*m.Low) <= mostValue && math.Abs(*m.High) <= mostValue && (!m.LogValues || *m.Low > 0)) {
		return refuse("use numbers within ±1e12, the lower one first, above 0 on a logarithmic scale", "the value scale of a map from %g to %g", *m.Low, *m.High)
	}
	if n := len(m.Levels); n > mostLevels {
		return refuse("draw fewer", "a map with %d levels, more than the %d that can be labelled", n, mostLevels)
	}
	for i, v := range m.Levels {
		if !(math.Abs(v.Value) <= 1e300) || m.LogValues && !(v.Value > 0) {
			return refuse("use a finite number, above 0 on a logarithmic scale", "level %d of the map is %g", i+1, v.Value)
		}
		for _, w := range m.Levels[:i] {
			if w.Value == v.Value {
				return refuse("give it once", "two levels of the map are %g", v.Value)
			}
		}
	}
	return nil
}

func (m *ContourMap) checkPlaces() error {
	switch {
	case len(m.Runs) > mostRuns:
		return refuse("show fewer", "a map with %d runs, more than %d", len(m.Runs), mostRuns)
	case len(m.Regions) > mostRegions:
		return refuse("name fewer", "a map with %d regions, more than %d", len(m.Regions), mostRegions)
	}
	points := m.Runs
	if m.Best != nil {
		points = append(points[:len(points):len(points)], *m.Best)
	}
	for _, r := range points {
		if !(r.T >= 0 && r.T <= mostTime) || !(math.Abs(r.Temp) <= 1e5) {
			return refuse("use times of 0 or more and temperatures within ±100000", "%q stands at %g s and %g %s", r.Name, r.T, r.Temp, m.TempUnit)
		}
	}
	regions := m.Regions
	if m.Feasible != nil {
		regions = append(regions[:len(regions):len(regions)], *m.Feasible)
	}
	for i, r := range regions {
		if r.Name == "" && i < len(m.Regions) {
			return refuse("name it, or leave it out", "region %d of the map has no name", i+1)
		}
		if err := grid("measures of the region "+r.Name, r.Measure, len(m.Temps), len(m.Times)); err != nil {
			return err
		}
		for _, row := range r.Measure {
			for _, v := range row {
				if math.IsInf(v, 0) || math.Abs(v) > 1e300 {
					return refuse("use finite numbers, or NaN for none", "the region %q has the measure %g", r.Name, v)
				}
			}
		}
	}
	return nil
}
