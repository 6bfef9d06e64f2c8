package diagram

import (
	"math"

	"saddlebook/diagram/lettering"
)

// Scene is a figure laid out: marks inside a frame from (0, 0) to (Width, Height),
// drawn first to last.
type Scene struct {
	ID            string // unique on the page; every id written to the page starts with it
	Width, Height float64
	Title, Desc   string // for readers who do not see the figure
	Marks         []Mark
}

// Role names the style of a mark, such as "level" or "path path-1": one or more
// words of a to z, 0 to 9 and hyphens.
type Role string

// Mark is a Line, Curve, Box, Dot, Words, Image or Group.
type Mark interface {
	// Bounds is the smallest upright rectangle around the mark, line widths left out.
	Bounds() Rect
	style() Role
}

// Line is a straight stroke.
type Line struct {
	Role           Role
	X1, Y1, X2, Y2 float64
}

// Curve is a stroked or filled path.
type Curve struct {
	Role Role
	Path []Command
}

// Op is what a Command does.
type Op byte

const (
	Move  Op = 'M' // to X, Y
	To    Op = 'L' // straight to X, Y
	Cubic Op = 'C' // to X, Y by the control points (X1, Y1) and (X2, Y2)
	Close Op = 'Z'
)

// Command is one part of a path.
type Command struct {
	Op             Op
	X1, Y1, X2, Y2 float64 // Cubic only
	X, Y           float64 // not for Close
}

// Box is a rectangle; Round is the radius of its corners.
type Box struct {
	Role              Role
	X, Y, W, H, Round float64
}

// Dot is a filled circle.
type Dot struct {
	Role    Role
	X, Y, R float64
}

// Anchor tells which part of a text stands at its X.
type Anchor int8

const (
	Start Anchor = iota
	Middle
	End
)

// Words is one line of text with its base line at Y.
type Words struct {
	Role   Role
	X, Y   float64
	Size   float64
	Anchor Anchor
	Runs   []lettering.Run
}

// Group holds marks that belong together. Its role may be empty.
type Group struct {
	Role  Role
	Marks []Mark
}

func (m Line) style() Role  { return m.Role }
func (m Curve) style() Role { return m.Role }
func (m Box) style() Role   { return m.Role }
func (m Dot) style() Role   { return m.Role }
func (m Words) style() Role { return m.Role }
func (m Group) style() Role { return m.Role }

// Rect is an upright rectangle.
type Rect struct{ X0, Y0, X1, Y1 float64 }

// Width of the text, as measured.
func (m Words) Width() float64 { return lettering.Width(m.Runs, m.Size) }

// Bounds of a line.
func (m Line) Bounds() Rect {
	return Rect{math.Min(m.X1, m.X2), math.Min(m.Y1, m.Y2), math.Max(m.X1, m.X2), math.Max(m.Y1, m.Y2)}
}

// Bounds of a curve: those of its end and control points.
func (m Curve) Bounds() Rect {
	r := nothing()
	for _, c := range m.Path {
		if c.Op == Close {
			continue
		}
		r = r.point(c.X, c.Y)
		if c.Op == Cubic {
			r = r.point(c.X1, c.Y1).point(c.X2, c.Y2)
		}
	}
	return r
}

// Bounds of a box.
func (m Box) Bounds() Rect { return Rect{m.X, m.Y, m.X + m.W, m.Y + m.H} }

// Bounds of a dot.
func (m Dot) Bounds() Rect { return Rect{m.X - m.R, m.Y - m.R, m.X + m.R, m.Y + m.R} }

// Bounds of a line of text, with room for shifted letters.
func (m Words) Bounds() Rect {
	w := m.Width()
	x := m.X - w*float64(m.Anchor)/2
	return Rect{x, m.Y - lettering.Ascent*m.Size, x + w, m.Y + lettering.Descent*m.Size}
}

// Bounds of a group: around all its marks.
func (m Group) Bounds() Rect { return bounds(m.Marks) }

func bounds(marks []Mark) Rect {
	r := nothing()
	for _, m := range marks {
		r = r.join(m.Bounds())
	}
	return r
}

// nothing is the rectangle that join and point start from.
func nothing() Rect { return Rect{math.Inf(1), math.Inf(1), math.Inf(-1), math.Inf(-1)} }

func (r Rect) join(q Rect) Rect {
	return Rect{math.Min(r.X0, q.X0), math.Min(r.Y0, q.Y0), math.Max(r.X1, q.X1), math.Max(r.Y1, q.Y1)}
}

func (r Rect) point(x, y float64) Rect { return r.join(Rect{x, y, x, y}) }

// grown is r with d more on every side.
func (r Rect) grown(d float64) Rect { return Rect{r.X0 - d, r.Y0 - d, r.X1 + d, r.Y1 + d} }

func (r Rect) meets(q Rect) bool { return r.X0 < q.X1 && q.X0 < r.X1 && r.Y0 < q.Y1 && q.Y0 < r.Y1 }

// Check reports the first fault that would spoil the drawing: a number that is
// NaN or infinite, a mark outside the frame, a mark without a role, a scene
// without an id or a title.
func (s Scene) Check() error {
	const fix = "this is a fault of the layout: please report it with the numbers that led to it"
	switch {
	case s.ID == "":
		return refuse("give it the id of its block", "the figure %q has no id", s.Title)
	case s.Title == "":
		return refuse("give it a title, which is read aloud to those who do not see it", "the figure %q has no title", s.ID)
	case !(s.Width > 0 && s.Height > 0 && s.Width < 1e5 && s.Height < 1e5):
		return refuse(fix, "the figure %q has a frame of %g by %g", s.ID, s.Width, s.Height)
	}
	return s.check(s.Marks, fix)
}

func (s Scene) check(marks []Mark, fix string) error {
	for _, m := range marks {
		if g, ok := m.(Group); ok {
			if g.Role != "" && !g.Role.valid() {
				return refuse(fix, "the figure %q has a group with the role %q", s.ID, g.Role)
			}
			if err := s.check(g.Marks, fix); err != nil {
				return err
			}
			continue
		}
		if !m.style().valid() {
			return refuse(fix, "the figure %q has a mark with the role %q", s.ID, m.style())
		}
		// The bounds of finite numbers can still hide a NaN: max and min pass it on,
		// so one comparison each finds both.
		b := m.Bounds()
		if x, ok := m.(Box); ok && !(x.W >= 0 && x.H >= 0 && x.Round >= 0) || b.X0 > b.X1 {
			return refuse(fix, "the figure %q has a %T without extent", s.ID, m)
		}
		const slack = 0.01
		if !(b.X0 >= -slack && b.Y0 >= -slack && b.X1 <= s.Width+slack && b.Y1 <= s.Height+slack) {
			return refuse(fix, "the figure %q has a %T at %.6g, %.6g to %.6g, %.6g, outside its frame of %g by %g",
				s.ID, m, b.X0, b.Y0, b.X1, b.Y1, s.Width, s.Height)
		}
		if x, ok := m.(Image); ok && (!(x.W > 0 && x.H > 0) || len(x.Data) == 0 || x.Type != "image/png" && x.Type != "image/svg+xml") {
			return refuse(fix, "the figure %q has an image of type %q, %g by %g, with %d bytes", s.ID, x.Type, x.W, x.H, len(x.Data))
		}
		if w, ok := m.(Words); ok && !(w.Size > 0) {
			return refuse(fix, "the figure %q has text of size %g", s.ID, w.Size)
		}
	}
	return nil
}

func (r Role) valid() bool {
	for _, c := range r {
		if !(c >= 'a' && c <= 'z' || c >= '0' && c <= '9' || c == '-' || c == ' ') {
			return false
		}
	}
	return r != ""
}
