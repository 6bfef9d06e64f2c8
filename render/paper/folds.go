package paper

import (
	"fmt"
	"net/url"
)

// folds writes what stands folded below a block, in one row: the numbers of its
// figures, what it was given, how sure its results are, method and assumptions, and the source; at
// its end the block's own name, which leads to it.
func (s *Sheet) folds(w *writer) {
	start := w.Len()
	w.raw("<div class=\"folds\">\n")
	empty := w.Len()
	for i, f := range s.figures {
		if len(f.Numbers.Rows) == 0 {
			continue
		}
		head := "Numbers"
		if len(s.figures) > 1 {
			head = fmt.Sprintf("Numbers of figure %d of this block", i+1)
		}
		w.fold("numbers", head, func() { f.Numbers.html(w) })
	}
	if s.given != nil {
		w.fold("given", "Given", func() { s.given.html(w) })
	}
	if t := s.intervals(); len(t.Rows) > 0 {
		w.fold("sure", "How sure", func() { t.html(w) })
	}
	if len(s.methods)+len(s.assumptions) > 0 {
		w.fold("method", "Method and assumptions", func() {
			w.list("Method", s.methods)
			w.list("What this assumes", s.assumptions)
		})
	}
	if s.block.Text != "" {
		w.fold("source", "Source", func() {
			w.raw("<pre tabindex=\"0\" role=\"group\" aria-label=\"Source of the block\"><code>")
			w.text(s.block.Text)
			w.raw("</code></pre>\n<p class=\"small\">")
			w.text(fmt.Sprintf("%s, line %d", s.block.File, s.block.Line))
			w.raw("</p>\n")
		})
	}
	if s.block.ID != "" {
		w.raw("<p class=\"handle\"><a")
		w.attr("href", (&url.URL{Fragment: s.block.Anchor()}).String())
		w.raw(">")
		w.text(s.block.Kind + " " + s.block.ID)
		w.raw("</a></p>\n")
	}
	if w.Len() == empty {
		w.Truncate(start)
		return
	}
	w.raw("</div>\n")
}

func (w *writer) fold(class, head string, inside func()) {
	w.raw("<details class=\"" + class + "\"><summary>" + head + "</summary>\n")
	inside()
	w.raw("</details>\n")
}

func (w *writer) list(head string, items []string) {
	if len(items) == 0 {
		return
	}
	w.raw("<p class=\"head\">" + head + "</p>\n<ul>\n")
	w.items(items)
	w.raw("</ul>\n")
}

func (w *writer) items(items []string) {
	for _, i := range items {
		w.raw("<li>")
		w.name(i)
		w.raw("</li>\n")
	}
}

// intervals is a table of the intervals of the listed results, with a column for
// each sampling.
func (s *Sheet) intervals() Table {
	column := map[string]int{}
	t := Table{Caption: "5 to 95 % intervals", Columns: []Column{{Head: "Result"}, {Head: "Value", Number: true}}}
	values := make([]Value, len(s.uncertain))
	for i, key := range s.uncertain {
		values[i] = s.look(key)
		for _, v := range values[i].Intervals {
			if _, known := column[v.Case]; !known {
				column[v.Case] = len(t.Columns)
				t.Columns = append(t.Columns, Column{Head: "errors " + v.Case, Number: true})
			}
		}
	}
	for i, key := range s.uncertain {
		if len(values[i].Intervals) == 0 {
			continue
		}
		cells := []Cell{{Text: key, verbatim: true}, {Text: values[i].Text, Key: key}}
		for len(cells) < len(t.Columns) {
			cells = append(cells, Text("–"))
		}
		for _, v := range values[i].Intervals {
			cells[column[v.Case]] = Text(v.Text)
		}
		t.Rows = append(t.Rows, cells)
	}
	return t
}
