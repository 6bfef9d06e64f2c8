package diagram

import (
	"math"

	"saddlebook/diagram/axis"
)

// Profile is an energy profile: one or several paths of levels joined by smooth
// curves.
//
// States that paths have in common (the same name, value and text) are drawn
// once. A path is told from another by colour, by dash and by its name at its
// end. A state that follows another in any path stands to its right.
//
// A figure is as wide as wished; one narrower than 300 may have to become wider.
// Its levels stand at least 92 apart, 69 in a figure of 540 or less. A profile
// with more levels than its width holds is folded into rows of about equal
// length: the last level of a row is also the first of the next. All rows have
// one scale, so that heights compare, and each shows the part of it that its
// levels need. Two sides that do not fit are drawn as two paths to the right
// instead. A row so crowded that its names find no place shows numbers, and lists
// the names below.
//
// No text is smaller than 12 units, shifted letters aside: 7 pt or more in a
// column of 84 mm for a Width of up to 408.
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
	Width float64 // of the figure, default 720
	// Barriers are measured by arrows from level to transition state, Span by an
	// arrow between two points.
	Barriers []ProfileBarrier
	Span     *ProfileSpan
}

// ProfilePath is a row of points from a state to a state.
type ProfilePath struct {
	Name   string // needed unless it is the only path or ends in a state of its own
	Points []ProfilePoint
	// Variant is the Name of the path that this one is a variant of, such as the
	// same states in another solvent. States of one name stand in one column, and
	// the variant shows only its values.
	Variant string
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
	SD       *float64 // standard deviation in Unit, drawn as a band with whiskers; nil: none
	// Again marks the last point of a path: its first state once more, after one
	// turn of a catalytic cycle. An arrow measures the turn. Name and Label default
	// to those of the first point.
	Again   bool
	Picture *Picture // shown with the label; nil: none
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
	return p.drawn(n)
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
			if f := pictureFault(q, p.Width); f != nil {
				return f
			}
			switch {
			case q.key() == "" && !(q.Again && path.Points[0].key() != ""):
				return refuse("name it", "point %d of path %s has no name", k+1, path.called(i))
			case !(math.Abs(q.Value) <= 1e12):
				return refuse("use values within ±1e12 of the zero, or a larger unit", "%q of path %s has the value %g", q.key(), path.called(i), q.Value)
			case q.SD != nil && !(*q.SD >= 0 && *q.SD <= 1e12):
				return refuse("use 0 to 1e12", "%q of path %s has the standard deviation %g", q.key(), path.called(i), *q.SD)
			case q.Peak && !math.IsNaN(q.Position) && !(q.Position >= 0 && q.Position <= 1):
				return refuse("use 0 to 1", "%q of path %s has the position %g", q.key(), path.called(i), q.Position)
			case q.Peak && (k == 0 || k == len(path.Points)-1 || path.Points[k-1].Peak):
				return refuse("put a state on either side of it", "the transition state %q of path %s does not stand between two states", q.key(), path.called(i))
			case q.Again && (k < 2 || k != len(path.Points)-1):
				return refuse("mark only the last point of a cycle", "%q of path %s is marked as the first state again, and is not the last of three points or more", q.key(), path.called(i))
			}
		}
	}
	if err := p.checkVariants(); err != nil {
		return err
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
