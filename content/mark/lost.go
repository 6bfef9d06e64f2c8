package mark

import (
	"bytes"
	"cmp"
	"slices"
)

// lost finds every `{=` of the source that is neither code nor escaped and became
// no shown reading, and says why.
func (w *walk) lost() {
	slices.SortFunc(w.code, func(a, b span) int { return cmp.Compare(a.start, b.start) })
	code, stop := 0, 0
	for at := 0; ; at += len(opening) {
		i := bytes.Index(w.source[at:], opening)
		if i < 0 {
			return
		}
		at += i
		for ; code < len(w.code) && w.code[code].start <= at; code++ {
			stop = max(stop, w.code[code].stop)
		}
		if at < stop || w.shown[at] || w.escaped(at) {
			continue
		}
		p := w.why(at)
		w.fault(Fault{Start: at, Msg: p.msg, Fix: p.fix})
	}
}

// escaped reports whether an odd number of backslashes stands before offset at.
func (w *walk) escaped(at int) bool {
	n := 0
	for n < at && w.source[at-1-n] == '\\' {
		n++
	}
	return n%2 == 1
}

func (w *walk) why(at int) problem {
	switch {
	case w.inImages[at]:
		return problem{"a reading in the text of an image is not shown", "write the reading in the text beside the image"}
	case w.inUnused[at]:
		return problem{"the reading stands in a footnote nobody refers to, so it is not shown", "refer to the footnote, or move the reading into the text"}
	}
	body := w.source[at+len(opening):]
	body = body[:min(len(body), longestReading)]
	if i := bytes.Index(body, []byte("\n\n")); i >= 0 {
		body = body[:i]
	}
	row := w.inRow(at)
	if i := bytes.IndexByte(body, '\n'); i >= 0 && row {
		body = body[:i]
	}
	end := bytes.IndexAny(body, "{}")
	if end < 0 || body[end] == '{' {
		return problem{"the reading is not closed", "write } after it, or \\{= for the plain characters"}
	}
	if _, _, p := split(string(body[:end])); p != nil {
		return *p
	}
	if row && bytes.IndexByte(body[:end], '|') >= 0 {
		return problem{"the reading is cut in two by the | of the table", "take the | out of the reading"}
	}
	if row {
		return problem{"the reading stands in a table cell beyond the columns of the heading row, so it is not shown",
			"add a column to the heading row, or take the cell away"}
	}
	return problem{"the reading is not shown where it stands: in a link address, a title, a label or raw HTML",
		"move it into the text, or write \\{= for the plain characters"}
}

// inRow reports whether offset at is on the line of a table row.
func (w *walk) inRow(at int) bool {
	line := bytes.LastIndexByte(w.source[:at], '\n') + 1
	for _, r := range w.rows {
		if line <= r && r <= at {
			return true
		}
	}
	return false
}
