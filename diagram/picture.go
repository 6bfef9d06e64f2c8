package diagram

import (
	"fmt"

	"saddlebook/diagram/skeleton"
)

// Picture is something drawn that stands in a figure, such as a skeletal formula
// at a level: marks inside a frame from (0, 0) to (Width, Height).
type Picture struct {
	Width, Height float64
	Marks         []Mark
	Alt           string // what it shows, for readers who do not see it
}

// At gives the picture as one mark with its top left corner at x, y.
func (p Picture) At(x, y float64) Group { return Group{Marks: moved(p.Marks, x, y)} }

// Skeletal draws a molecule with labels of a type size, which must be above 0. Bonds are
// skeleton's: 1.7 times the size or longer. All of it is in the ink of the text:
// no colour stands for an element.
func Skeletal(m *skeleton.Molecule, size float64) Picture {
	d := m.Draw(size)
	p := Picture{Width: d.Width, Height: d.Height, Alt: "skeletal formula of " + m.Formula}
	if m.Name != "" {
		p.Alt = fmt.Sprintf("skeletal formula of %s, %s", m.Name, m.Formula)
	}
	for _, f := range d.Fills {
		p.Marks = append(p.Marks, Curve{Role: "wedge", Path: append(corners(f), Command{Op: Close})})
	}
	for _, l := range d.Rungs {
		p.Marks = append(p.Marks, Line{"bond rung", l.A.X, l.A.Y, l.B.X, l.B.Y})
	}
	for _, l := range d.Lines {
		p.Marks = append(p.Marks, Line{"bond", l.A.X, l.A.Y, l.B.X, l.B.Y})
	}
	for _, w := range d.Waves {
		path := []Command{{Op: Move, X: w[0].X, Y: w[0].Y}}
		for i := 1; i+2 < len(w); i += 3 {
			path = append(path, Command{Cubic, w[i].X, w[i].Y, w[i+1].X, w[i+1].Y, w[i+2].X, w[i+2].Y})
		}
		p.Marks = append(p.Marks, Curve{Role: "bond", Path: path})
	}
	for _, t := range d.Texts {
		p.Marks = append(p.Marks, Words{Role: "atom", X: t.X, Y: t.Y, Size: d.Size, Runs: t.Runs})
	}
	return p
}

func corners(points []skeleton.Point) []Command {
	path := make([]Command, 0, len(points)+1)
	for i, c := range points {
		op := To
		if i == 0 {
			op = Move
		}
		path = append(path, Command{Op: op, X: c.X, Y: c.Y})
	}
	return path
}

// moved gives copies of marks, shifted.
func moved(marks []Mark, dx, dy float64) []Mark {
	out := make([]Mark, len(marks))
	for i, m := range marks {
		switch m := m.(type) {
		case Line:
			m.X1, m.X2, m.Y1, m.Y2 = m.X1+dx, m.X2+dx, m.Y1+dy, m.Y2+dy
			out[i] = m
		case Curve:
			path := make([]Command, len(m.Path))
			for k, c := range m.Path {
				if c.Op != Close {
					c.X, c.Y = c.X+dx, c.Y+dy
				}
				if c.Op == Cubic {
					c.X1, c.X2, c.Y1, c.Y2 = c.X1+dx, c.X2+dx, c.Y1+dy, c.Y2+dy
				}
				path[k] = c
			}
			m.Path = path
			out[i] = m
		case Box:
			m.X, m.Y = m.X+dx, m.Y+dy
			out[i] = m
		case Dot:
			m.X, m.Y = m.X+dx, m.Y+dy
			out[i] = m
		case Words:
			m.X, m.Y = m.X+dx, m.Y+dy
			out[i] = m
		case Image:
			m.X, m.Y = m.X+dx, m.Y+dy
			out[i] = m
		case Group:
			m.Marks = moved(m.Marks, dx, dy)
			out[i] = m
		default:
			panic(fmt.Sprintf("diagram: a mark of type %T cannot be moved", m)) // a kind of mark added without its line here
		}
	}
	return out
}
