package schema

import (
	"io"
	"slices"
	"strings"
	"unicode/utf8"

	"saddlebook/content/place"
	"saddlebook/kinetics/unit"
)

const pageWidth = 80 // columns of the reference text

// Reference writes what a block kind takes: its name, what it is for, and each
// key with its meaning, type, unit, default and example, on 80 columns. Keys
// inside tables are indented. It returns the first error of w.
func Reference(w io.Writer, name, doc string, fields []Field) error {
	var b strings.Builder
	b.WriteString(name + "\n")
	wrap(&b, 2, doc)
	listFields(&b, 2, fields)
	_, err := io.WriteString(w, b.String())
	return err
}

func listFields(b *strings.Builder, indent int, fields []Field) {
	width := 0
	for _, f := range fields {
		width = max(width, utf8.RuneCountInString(f.Key))
	}
	text := indent + min(width, 18) + 2
	for _, f := range fields {
		b.WriteString("\n" + strings.Repeat(" ", indent) + f.Key)
		if used := indent + utf8.RuneCountInString(f.Key); used+2 > text {
			b.WriteString("\n" + strings.Repeat(" ", text))
		} else {
			b.WriteString(strings.Repeat(" ", text-used))
		}
		var meaning strings.Builder
		wrap(&meaning, text, f.Doc)
		b.WriteString(strings.TrimLeft(meaning.String(), " "))
		wrap(b, text, f.facts())
		if f.Example != "" {
			wrap(b, text, f.line())
		}
		if len(f.Fields) > 0 {
			wrap(b, text, map[Type]string{Table: "it takes:", Tables: "each takes:", Named: "each takes:"}[f.Type])
			listFields(b, min(indent+4, 16), f.Fields)
		}
	}
}

// facts says what a field takes.
func (f Field) facts() string {
	parts := []string{f.wanted()}
	if len(f.OneOf) > 0 {
		parts[0] = alternatives(f.OneOf)
		if f.Type == Words {
			parts[0] += ", or a list of these"
		}
	}
	if f.Wants != "" {
		parts[0] += " (" + f.Wants + ")"
	}
	if len(f.Dims) > 0 {
		parts = append(parts, f.bareWords())
	}
	switch {
	case f.Required:
		parts = append(parts, "required")
	case f.Default != "":
		parts = append(parts, "without it: "+f.Default)
	}
	return strings.Join(parts, "; ")
}

// bareWords says what a number without a unit means.
func (f Field) bareWords() string {
	key, named := strings.CutPrefix(f.Bare, "@")
	switch {
	case named:
		return "a bare number is in the unit that " + key + " gives"
	case f.Bare != "":
		return "a bare number is in " + f.Bare
	case slices.Contains(f.Dims, unit.None):
		return "a bare number has no unit"
	}
	return "with its unit"
}

// wrap writes text in lines of the page, each indented. A word longer than a
// line has a line of its own.
func wrap(b *strings.Builder, indent int, text string) {
	used := 0
	for _, word := range strings.Fields(text) {
		n := utf8.RuneCountInString(word)
		switch {
		case used == 0:
			b.WriteString(strings.Repeat(" ", indent))
			used = indent
		case used+1+n > pageWidth:
			b.WriteString("\n" + strings.Repeat(" ", indent))
			used = indent
		default:
			b.WriteString(" ")
			used++
		}
		b.WriteString(word)
		used += n
	}
	if used > 0 {
		b.WriteString("\n")
	}
}

// line shows how a field is written.
func (f Field) line() string { return place.Name(f.Key) + " = " + f.sample() }
