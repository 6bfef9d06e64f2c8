// Package ink writes scenes as SVG, for pages and as files that stand alone. It
// is the only user of svgo.
//
// Numbers are written with at most two decimals and never as -0; a scene that
// fails its Check is refused before a byte is written. Every text and attribute
// is escaped, so that a name taken from a note stays a name. The same scene gives
// the same bytes.
package ink

import (
	"bytes"
	"encoding/base64"
	"encoding/xml"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"

	svg "github.com/ajstarks/svgo/float"

	"saddlebook/diagram"
	"saddlebook/diagram/lettering"
)

// Inline writes s as an svg element for an HTML page that carries Style. It has
// classes only, no style of its own, so that it holds under a strict content
// security policy; its ids start with s.ID.
func Inline(w io.Writer, s diagram.Scene) error {
	return write(w, s, false)
}

// Alone writes s as a whole SVG file with its style inside, for light, dark and
// print.
func Alone(w io.Writer, s diagram.Scene) error {
	return write(w, s, true)
}

func write(w io.Writer, s diagram.Scene, alone bool) error {
	if err := s.Check(); err != nil {
		return err
	}
	out := &steady{w: w}
	p := pen{canvas: svg.New(out)}
	id := ident(s.ID)
	width, height := number(s.Width), number(s.Height)
	if alone {
		io.WriteString(out, "<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n")
	}
	fmt.Fprintf(out, `<svg class="figure" xmlns="http://www.w3.org/2000/svg" xml:space="preserve" role="img" aria-labelledby="%s-title %s-desc" viewBox="0 0 %s %s" width="%s" height="%s">`+"\n",
		id, id, width, height, width, height)
	fmt.Fprintf(out, "<title id=\"%s-title\">%s</title>\n", id, escape(s.Title))
	fmt.Fprintf(out, "<desc id=\"%s-desc\">%s</desc>\n", id, escape(s.Desc))
	if alone {
		fmt.Fprintf(out, "<style>\n%s</style>\n", aloneStyle())
		p.exact(0, s.Width, s.Height)
		p.canvas.Rect(0, 0, tidy(s.Width), tidy(s.Height), class("ground"))
	}
	p.marks(s.Marks)
	p.canvas.End()
	return out.err
}

// steady passes bytes on until the first error, which it keeps.
type steady struct {
	w   io.Writer
	err error
}

func (s *steady) Write(b []byte) (int, error) {
	if s.err != nil {
		return 0, s.err
	}
	var n int
	n, s.err = s.w.Write(b)
	return n, s.err
}

type pen struct{ canvas *svg.SVG }

func (p pen) marks(marks []diagram.Mark) {
	for _, m := range marks {
		switch m := m.(type) {
		case diagram.Line:
			p.exact(m.X1, m.Y1, m.X2, m.Y2)
			p.canvas.Line(tidy(m.X1), tidy(m.Y1), tidy(m.X2), tidy(m.Y2), class(m.Role))
		case diagram.Curve:
			p.canvas.Path(path(m.Path), class(m.Role))
		case diagram.Box:
			p.exact(m.X, m.Y, m.W, m.H, m.Round)
			if m.Round > 0 {
				p.canvas.Roundrect(tidy(m.X), tidy(m.Y), tidy(m.W), tidy(m.H), tidy(m.Round), tidy(m.Round), class(m.Role))
			} else {
				p.canvas.Rect(tidy(m.X), tidy(m.Y), tidy(m.W), tidy(m.H), class(m.Role))
			}
		case diagram.Dot:
			p.exact(m.X, m.Y, m.R)
			p.canvas.Circle(tidy(m.X), tidy(m.Y), tidy(m.R), class(m.Role))
		case diagram.Words:
			p.words(m)
		case diagram.Image:
			fmt.Fprintf(p.canvas.Writer, `<image x="%s" y="%s" width="%s" height="%s" %s role="img" %s href="data:%s;base64,%s" />`+"\n",
				number(m.X), number(m.Y), number(m.W), number(m.H), class(m.Role), attr("aria-label", m.Alt), escape(m.Type), base64.StdEncoding.EncodeToString(m.Data))
		case diagram.Group:
			if m.Role == "" {
				p.marks(m.Marks)
				continue
			}
			p.canvas.Group(class(m.Role))
			p.marks(m.Marks)
			p.canvas.Gend()
		default:
			panic(fmt.Sprintf("ink: a mark of type %T", m))
		}
	}
}

// words writes one line of text. Its measured length goes with it, so that the
// box that the layout kept free holds under any font.
func (p pen) words(m diagram.Words) {
	width := m.Width()
	if width <= 0 {
		return
	}
	p.exact(m.X, m.Y)
	attrs := []string{class(m.Role), attr("font-size", number(m.Size)), attr("textLength", number(width)), attr("lengthAdjust", "spacingAndGlyphs")}
	switch m.Anchor {
	case diagram.Middle:
		attrs = append(attrs, attr("text-anchor", "middle"))
	case diagram.End:
		attrs = append(attrs, attr("text-anchor", "end"))
	}
	p.canvas.Textspan(tidy(m.X), tidy(m.Y), "", attrs...)
	at := 0.0 // how far the pen stands below the line
	for _, run := range m.Runs {
		to, small := 0.0, false
		switch run.Shift {
		case lettering.Sub:
			to, small = lettering.Drop*m.Size, true
		case lettering.Super:
			to, small = -lettering.Rise*m.Size, true
		}
		var a []string
		if d := number(to - at); d != "0" {
			a = append(a, attr("dy", d))
			at = to
		}
		if small {
			a = append(a, attr("font-size", number(lettering.Small*m.Size)))
		}
		if run.Italic {
			a = append(a, attr("class", "quantity"))
		}
		p.canvas.Span(run.Text, a...)
	}
	p.canvas.TextEnd()
}

// exact tells svgo the least number of decimals, up to two, that carries all
// values.
func (p pen) exact(values ...float64) {
	p.canvas.Decimals = 0
	for _, v := range values {
		s := number(v)
		if i := strings.IndexByte(s, '.'); i >= 0 {
			p.canvas.Decimals = max(p.canvas.Decimals, len(s)-i-1)
		}
	}
}

func path(commands []diagram.Command) string {
	var b strings.Builder
	for i, c := range commands {
		if i > 0 {
			b.WriteByte(' ')
		}
		b.WriteByte(byte(c.Op))
		switch c.Op {
		case diagram.Close:
			continue
		case diagram.Cubic:
			fmt.Fprintf(&b, "%s %s %s %s ", number(c.X1), number(c.Y1), number(c.X2), number(c.Y2))
		}
		b.WriteString(number(c.X) + " " + number(c.Y))
	}
	return b.String()
}

// tidy rounds to two decimals and turns -0 into 0.
func tidy(v float64) float64 { return math.Round(v*100)/100 + 0 }

func number(v float64) string { return strconv.FormatFloat(tidy(v), 'f', -1, 64) }

func class(r diagram.Role) string { return attr("class", string(r)) }

func attr(name, value string) string { return name + `="` + escape(value) + `"` }

func escape(text string) string {
	var b bytes.Buffer
	xml.EscapeText(&b, []byte(text)) // a bytes.Buffer gives no errors
	return b.String()
}

// ident turns any text into a name that ids can start with: letters, digits and
// hyphens stay, every other letter becomes its number between underscores.
func ident(text string) string {
	var b strings.Builder
	for i, r := range text {
		switch {
		case r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z',
			i > 0 && (r >= '0' && r <= '9' || r == '-'):
			b.WriteRune(r)
		default:
			fmt.Fprintf(&b, "_%x_", r)
		}
	}
	return b.String()
}
