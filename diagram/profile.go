package diagram

import (
	"math"
	"strings"

	"saddlebook/diagram/axis"
)

// Profile is an energy profile: one or several paths of levels joined by smooth
// curves.
//
// States that paths have in common (the same name, value and text) are drawn
// once. A path is told from another by colour, by dash and by its name at its
// end. A state that follows another in any path stands to its right.
type Profile struct {
	ID    string
	Title string // default "Energy profile"
	Desc  string // default: the paths in words
	Axis  string // the quantity, default "ΔG"
	Unit  string // of the values, such as "kcal/mol"
	Zero  string // what the zero is, such as "R + X"; may be empty
	Paths []ProfilePath
	// Sides puts the common first state of exactly two paths in the middle, the
	// first path to its left and the second to its right.
	Sides bool
	Width float64 // wished width of the figure, default 720; many states need more and get it
}

// ProfilePath is a row of points from a state to a state.
type ProfilePath struct {
	Name   string // needed unless it is the only path or ends in a state of its own
	Points []ProfilePoint
}

// ProfilePoint is a state, or a transition state between two states.
type ProfilePoint struct {
	Name  string  // tells states apart; default Label
	Label string  // as shown; default Name
	Value float64 // in Unit
	Peak  bool    // a transition state
	// Position says where a transition state stands in the gap between its two
	// levels, from 0 (at the one before) to 1 (at the one behind). NaN: half way.
	// It is moved aside by a few units only where it would cover another one.
	Position float64
	Text     string   // the value as printed; default Value to a fitting number of decimals
	SD       *float64 // standard deviation in Unit, drawn as a band; nil: none
}

const maxPaths = 8 // as many as there are dashes

// Scene lays the profile out. The error is an *Error.
func (p Profile) Scene() (Scene, error) {
	if p.Title == "" {
		p.Title = "Energy profile"
	}
	if p.Axis == "" {
		p.Axis = "ΔG"
	}
	if p.Width == 0 {
		p.Width = 720
	}
	if !(p.Width >= 240 && p.Width <= 4000) {
		return Scene{}, refuse("use 240 to 4000", "a profile cannot be %g wide", p.Width)
	}
	if err := p.check(); err != nil {
		return Scene{}, err
	}
	p.complete()
	n, err := p.net()
	if err != nil {
		return Scene{}, err
	}
	if p.Desc == "" {
		p.Desc = p.words()
	}
	l := layout{p: p, net: n}
	return l.scene(), nil
}

func (p Profile) check() error {
	switch n := len(p.Paths); {
	case n == 0:
		return refuse("add one", "a profile without a path")
	case n > maxPaths:
		return refuse("draw a second profile", "a profile with %d paths, more than the %d that can be told apart", n, maxPaths)
	case p.Sides && n != 2:
		return refuse("give two paths, or leave the sides out", "a two-sided profile with %d paths", n)
	}
	for i, path := range p.Paths {
		if len(path.Points) < 2 {
			return refuse("give it two states or more", "path %s has %d points", path.called(i), len(path.Points))
		}
		for k, q := range path.Points {
			switch {
			case q.key() == "":
				return refuse("name it", "point %d of path %s has no name", k+1, path.called(i))
			case !(math.Abs(q.Value) <= 1e12):
				return refuse("use values within ±1e12 of the zero, or a larger unit", "%q of path %s has the value %g", q.key(), path.called(i), q.Value)
			case q.SD != nil && !(*q.SD >= 0 && *q.SD <= 1e12):
				return refuse("use 0 or more", "%q of path %s has the standard deviation %g", q.key(), path.called(i), *q.SD)
			case q.Peak && !math.IsNaN(q.Position) && !(q.Position >= 0 && q.Position <= 1):
				return refuse("use 0 to 1", "%q of path %s has the position %g", q.key(), path.called(i), q.Position)
			case q.Peak && (k == 0 || k == len(path.Points)-1 || path.Points[k-1].Peak):
				return refuse("put a state on either side of it", "the transition state %q of path %s does not stand between two states", q.key(), path.called(i))
			}
		}
	}
	if p.Sides {
		if a, b := p.Paths[0].Points[0], p.Paths[1].Points[0]; !a.same(b) {
			return refuse("start both paths from one state", "a two-sided profile whose paths start from %q and %q", a.key(), b.key())
		}
	}
	return nil
}

// called names a path in messages.
func (path ProfilePath) called(i int) string {
	if path.Name != "" {
		return `"` + path.Name + `"`
	}
	return axis.Text(float64(i+1), 0)
}

func (q ProfilePoint) key() string {
	if q.Name != "" {
		return q.Name
	}
	return q.Label
}

// same tells whether two points of different paths are one and the same state.
func (q ProfilePoint) same(r ProfilePoint) bool {
	at := func(q ProfilePoint) float64 {
		if !q.Peak || math.IsNaN(q.Position) {
			return 0.5
		}
		return q.Position
	}
	return q.key() == r.key() && q.shown() == r.shown() && q.Value == r.Value && q.Text == r.Text && q.Peak == r.Peak && at(q) == at(r)
}

func (q ProfilePoint) shown() string {
	if q.Label != "" {
		return q.Label
	}
	return q.Name
}

// complete prints the values that come without a text, all to the same decimals.
func (p *Profile) complete() {
	low, high := p.extent()
	decimals := 1
	switch span := high - low; {
	case span >= 300:
		decimals = 0
	case span > 0:
		decimals = min(6, max(1, 1-int(math.Floor(math.Log10(span/3)))))
	}
	paths := make([]ProfilePath, len(p.Paths))
	for i, path := range p.Paths {
		paths[i] = ProfilePath{path.Name, append([]ProfilePoint{}, path.Points...)}
		for k := range path.Points {
			q := &paths[i].Points[k]
			if q.Text == "" {
				q.Text = axis.Text(q.Value, decimals)
			}
			if q.SD != nil && !strings.Contains(q.Text, "±") {
				q.Text += " ± " + axis.Text(*q.SD, decimals)
			}
		}
	}
	p.Paths = paths
}

// extent is the range of the values with their deviations.
func (p Profile) extent() (low, high float64) {
	low, high = math.Inf(1), math.Inf(-1)
	for _, path := range p.Paths {
		for _, q := range path.Points {
			sd := 0.0
			if q.SD != nil {
				sd = *q.SD
			}
			low, high = math.Min(low, q.Value-sd), math.Max(high, q.Value+sd)
		}
	}
	return low, high
}

// words tells the profile to those who do not see it.
func (p Profile) words() string {
	var b strings.Builder
	for i, path := range p.Paths {
		if i > 0 {
			b.WriteByte(' ')
		}
		if path.Name != "" {
			b.WriteString(path.Name + ": ")
		}
		for k, q := range path.Points {
			switch {
			case k == 0:
				b.WriteString("from ")
			case q.Peak:
				b.WriteString(" over ")
			default:
				b.WriteString(" to ")
			}
			b.WriteString(q.shown() + " (" + q.Text + ")")
		}
		b.WriteByte('.')
	}
	if p.Unit != "" {
		b.WriteString(" " + p.Axis + " in " + p.Unit + ".")
	}
	return b.String()
}
