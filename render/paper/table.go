package paper

import "saddlebook/diagram/lettering"

// html writes the table in a box of its own.
func (t Table) html(w *writer) {
	w.scroll("table", "Table: "+t.Caption)
	w.raw("<table>\n<caption>")
	w.name(t.Caption)
	w.raw("</caption>\n")
	w.raw("<thead><tr>")
	for _, c := range t.Columns {
		c.head(w)
	}
	w.raw("</tr></thead>\n<tbody>\n")
	for i, row := range t.Rows {
		if len(row) != len(t.Columns) {
			w.failf("table %q: row %d has %d cells for %d columns", t.Caption, i+1, len(row), len(t.Columns))
			continue
		}
		w.raw("<tr>")
		for j, c := range row {
			w.cell(c, t.Columns[j].Number, j == 0)
		}
		w.raw("</tr>\n")
	}
	w.raw("</tbody>\n</table>\n</div>\n")
	if len(t.Notes) > 0 {
		w.raw("<ul class=\"notes\">\n")
		w.items(t.Notes)
		w.raw("</ul>\n")
	}
}

func (c Column) head(w *writer) {
	w.raw("<th scope=\"col\"" + class(c.Number, false) + ">")
	if c.Unit == "" {
		w.name(c.Head)
	} else {
		w.runs(lettering.Quantity(c.Head, ""))
		w.raw(" <span class=\"unit\">/ ") // the stroke goes with the unit, so that a head breaks before it
		w.runs(lettering.Unit(c.Unit))
		w.raw("</span>")
	}
	w.raw("</th>")
}

func (w *writer) cell(c Cell, number, head bool) {
	tag := "td"
	if head {
		tag = "th"
	}
	w.raw("<" + tag)
	if head {
		w.raw(" scope=\"row\"")
	}
	w.raw(class(number, c.Strong))
	if c.Key != "" {
		w.attr("data-key", c.Key)
	}
	w.raw(">")
	if c.verbatim {
		w.raw("<code>")
		w.text(c.Text)
		w.raw("</code>")
	} else {
		w.name(c.Text)
	}
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
	w.raw("</" + tag + ">")
}

func class(number, strong bool) string {
	switch {
	case number && strong:
		return ` class="number strong"`
	case number:
		return ` class="number"`
	case strong:
		return ` class="strong"`
	}
	return ""
}
