package paper

import (
	"bytes"
	"fmt"
	"html"
	"strings"

	"saddlebook/diagram/ink"
	"saddlebook/diagram/lettering"
)

// writer writes well-formed HTML. Whatever a note says goes through text or
// name, which escape it.
type writer struct {
	bytes.Buffer
	block  Block
	tables int
	err    error
}

func (w *writer) raw(s string)                 { w.WriteString(s) }
func (w *writer) rawf(format string, a ...any) { fmt.Fprintf(w, format, a...) }
func (w *writer) text(s string)                { w.WriteString(html.EscapeString(s)) }

// name writes a text with its subscripts and superscripts set.
func (w *writer) name(s string) {
	for _, r := range lettering.Runs(s) {
		switch r.Shift {
		case lettering.Sub:
			w.raw("<sub>")
			w.text(r.Text)
			w.raw("</sub>")
		case lettering.Super:
			w.raw("<sup>")
			w.text(r.Text)
			w.raw("</sup>")
		default:
			w.text(r.Text)
		}
	}
}

func (p words) html(w *writer) {
	w.raw("<p>")
	w.name(string(p))
	w.raw("</p>\n")
}

func (t Table) html(w *writer) {
	w.tables++
	id := fmt.Sprintf("%s-table-%d", w.block.Anchor(), w.tables)
	w.rawf("<div class=\"table\" role=\"region\" tabindex=\"0\" aria-labelledby=\"%s\">\n<table>\n<caption id=\"%s\">", html.EscapeString(id), html.EscapeString(id))
	w.name(t.Caption)
	w.raw("</caption>\n<thead><tr>")
	for _, c := range t.Columns {
		w.rawf("<th scope=\"col\"%s>", class(c.Number, "number"))
		w.name(c.Head)
		if c.Unit != "" {
			w.raw(" <span class=\"unit\">")
			w.text(c.Unit)
			w.raw("</span>")
		}
		w.raw("</th>")
	}
	w.raw("</tr></thead>\n<tbody>\n")
	for _, row := range t.Rows {
		w.raw("<tr>")
		for i, c := range row {
			number := i < len(t.Columns) && t.Columns[i].Number
			w.cell(c, number, i == 0)
		}
		w.raw("</tr>\n")
	}
	w.raw("</tbody>\n</table>\n</div>\n")
}

func (w *writer) cell(c Cell, number, head bool) {
	tag, scope := "td", ""
	if head {
		tag, scope = "th", " scope=\"row\""
	}
	key := ""
	if c.Key != "" {
		key = fmt.Sprintf(" data-key=\"%s\"", html.EscapeString(c.Key))
	}
	w.rawf("<%s%s%s%s>", tag, scope, class(number, "number"), key)
	w.name(c.Text)
	if c.Beside != "" {
		w.raw(" <span class=\"beside\">")
		w.name(c.Beside)
		w.raw("</span>")
	}
	for _, f := range c.Flags {
		w.raw(" <span class=\"flag\">")
		w.text(f)
		w.raw("</span>")
	}
	w.rawf("</%s>", tag)
}

func class(on bool, name string) string {
	if !on {
		return ""
	}
	return fmt.Sprintf(" class=\"%s\"", name)
}

func (f Figure) html(w *writer) {
	w.raw("<figure>\n")
	if err := ink.Inline(w, f.Scene); err != nil && w.err == nil {
		w.err = err
	}
	w.raw("\n<figcaption>")
	w.name(f.Caption)
	w.raw("</figcaption>\n")
	if len(f.Numbers.Rows) > 0 {
		w.raw("<details class=\"numbers\"><summary>The numbers of this figure</summary>\n")
		f.Numbers.html(w)
		w.raw("</details>\n")
	}
	w.raw("</figure>\n")
}

// standing marks: a word always, and a shape beside it.
var marks = map[string]string{"holds": "●", "fails": "✕", "undecided": "○"}

func (p claims) html(w *writer) {
	w.raw("<ul class=\"claims\">\n")
	for _, c := range p {
		w.rawf("<li class=\"claim %s\" id=\"%s\"><p class=\"says\">", html.EscapeString(c.Standing), html.EscapeString(c.Anchor))
		w.name(c.Says)
		w.raw("</p>\n<p class=\"standing\"><span class=\"mark\" aria-hidden=\"true\">")
		w.text(marks[c.Standing])
		w.raw("</span> <strong>")
		w.text(c.Standing)
		w.raw("</strong>: ")
		w.name(c.Value)
		w.raw(", wanted ")
		w.text(c.Bound)
		if c.Margin != "" {
			w.raw("; margin ")
			w.text(c.Margin)
		}
		if c.Probability != "" {
			w.raw("; probability ")
			w.text(c.Probability)
			if c.Asked != "" {
				w.raw(", asked ")
				w.text(c.Asked)
			}
		} else if c.Standing == "holds" {
			w.raw("; no probability is known, since no energy behind it has a ±")
		}
		if c.Why != "" {
			w.raw(" (")
			w.text(c.Why)
			w.raw(")")
		}
		w.raw(". <code>")
		w.text(c.Reading)
		w.raw("</code></p></li>\n")
	}
	w.raw("</ul>\n")
}

// Anchor is the id of the block's element on its page.
func (b Block) Anchor() string {
	if b.ID == "" {
		return b.Kind
	}
	return strings.Join(strings.Fields(b.ID), "-")
}

// HTML writes the parts as one section, "" if there is nothing to show.
func (s *Sheet) HTML() (string, error) {
	if s.Empty() {
		return "", s.Err()
	}
	w := &writer{block: s.block}
	w.rawf("<section class=\"block %s\" id=\"%s\">\n", html.EscapeString(s.block.Kind), html.EscapeString(s.block.Anchor()))
	for _, p := range s.parts {
		p.html(w)
	}
	s.intervalTable(w)
	for _, c := range s.cautions {
		w.raw("<p class=\"caution\">")
		w.text(c)
		w.raw("</p>\n")
	}
	if len(s.methods)+len(s.assumptions) > 0 {
		w.raw("<details class=\"method\"><summary>Method and assumptions</summary>\n")
		list(w, "How it was computed", s.methods)
		list(w, "What it assumes", s.assumptions)
		w.raw("</details>\n")
	}
	if s.block.Text != "" {
		w.raw("<details class=\"source\"><summary>The block behind this</summary>\n<pre tabindex=\"0\"><code>")
		w.text(s.block.Text)
		w.raw("</code></pre>\n<p class=\"small\">")
		w.text(fmt.Sprintf("%s, line %d", s.block.File, s.block.Line))
		w.raw("</p>\n</details>\n")
	}
	w.raw("</section>\n")
	if w.err != nil {
		s.Fail(w.err)
	}
	return w.String(), s.Err()
}

func list(w *writer, head string, items []string) {
	if len(items) == 0 {
		return
	}
	w.raw("<p class=\"head\">")
	w.text(head)
	w.raw("</p>\n<ul>\n")
	for _, i := range items {
		w.raw("<li>")
		w.name(i)
		w.raw("</li>\n")
	}
	w.raw("</ul>\n")
}

// intervalTable shows the intervals of the listed results, a column for each
// sampling.
func (s *Sheet) intervalTable(w *writer) {
	var cases []string
	t := Table{Caption: "How sure: 5 to 95 % intervals", Columns: []Column{{Head: "Result"}, {Head: "Value", Number: true}}}
	column := map[string]int{}
	type row struct {
		key string
		v   Value
	}
	var rows []row
	for _, key := range s.uncertain {
		v, ok := s.value(key)
		if !ok || len(v.Intervals) == 0 {
			continue
		}
		for _, i := range v.Intervals {
			if _, known := column[i.Case]; !known {
				column[i.Case] = len(cases)
				cases = append(cases, i.Case)
			}
		}
		rows = append(rows, row{key, v})
	}
	if len(rows) == 0 {
		return
	}
	for _, c := range cases {
		t.Columns = append(t.Columns, Column{Head: "errors " + c, Number: true})
	}
	for _, r := range rows {
		cells := make([]Cell, 2+len(cases))
		cells[0], cells[1] = Text(r.key), Cell{Text: r.v.Text, Key: r.key}
		for i := range cases {
			cells[2+i] = Text("–")
		}
		for _, i := range r.v.Intervals {
			cells[2+column[i.Case]] = Text(i.Text)
		}
		t.Rows = append(t.Rows, cells)
	}
	w.raw("<details class=\"sure\"><summary>How sure</summary>\n")
	t.html(w)
	w.raw("</details>\n")
}
