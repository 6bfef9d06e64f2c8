package paper

import (
	"bytes"
	"fmt"
	"html"
	"strings"
	"unicode"

	"saddlebook/diagram/lettering"
)

// writer writes HTML that is well-formed as XML too. Whatever a note says goes
// through text, name or attr, which escape it.
type writer struct {
	block Block
	bytes.Buffer
	errs []error
}

func (w *writer) raw(s string)            { w.WriteString(s) }
func (w *writer) text(s string)           { w.raw(escape(s)) }
func (w *writer) attr(name, value string) { w.raw(" " + name + `="` + escape(value) + `"`) }
func (w *writer) failf(format string, args ...any) {
	w.errs = append(w.errs, fmt.Errorf(format, args...))
}

// name writes a text with its subscripts and superscripts set.
func (w *writer) name(s string) { w.runs(lettering.Runs(s)) }

func (w *writer) runs(runs []lettering.Run) {
	for _, r := range runs {
		var tags []string
		switch r.Shift {
		case lettering.Sub:
			tags = append(tags, "sub")
		case lettering.Super:
			tags = append(tags, "sup")
		}
		if r.Italic {
			tags = append(tags, "i")
		}
		for _, t := range tags {
			w.raw("<" + t + ">")
		}
		w.text(r.Text)
		for i := len(tags) - 1; i >= 0; i-- {
			w.raw("</" + tags[i] + ">")
		}
	}
}

// scroll opens a box that scrolls sideways when the page is narrow. It takes
// the focus, so that the keys can scroll it, and has a name for screen readers.
func (w *writer) scroll(class, label string) {
	w.raw("<div")
	w.attr("class", class)
	w.raw(` role="group" tabindex="0"`)
	w.attr("aria-label", label)
	w.raw(">\n")
}

func escape(s string) string { return html.EscapeString(legible(s)) }

// legible puts U+FFFD for what no page can hold, and for the marks that turn
// the direction of writing, which would make a block read as it is not.
func legible(s string) string {
	return strings.Map(func(r rune) rune {
		switch {
		case r == '\n', r == '\t':
			return r
		case unicode.IsControl(r), unicode.Is(unicode.Bidi_Control, r), r == 0xFFFE, r == 0xFFFF:
			return unicode.ReplacementChar
		}
		return r
	}, strings.ToValidUTF8(strings.ReplaceAll(s, "\r\n", "\n"), "\uFFFD"))
}

// element is the id of an element for any text: no spaces in it.
func element(id string) string { return strings.Join(strings.Fields(id), "-") }
