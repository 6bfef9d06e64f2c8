// Package fault holds what can be wrong with a source, in a form an author can
// act on: where it is, what is wrong and what to write instead.
//
// A Diagnostic knows its place in a file. A Problem is known only by the key it
// belongs to: it is what checking and computing return, before the place is
// joined from the source.
package fault

import (
	"cmp"
	"io"
	"slices"
	"strconv"
	"strings"
	"unicode"
)

// A Place is a position in a source file. Line and Col count from 1, Col in
// characters. Line 0 stands for the whole file.
type Place struct {
	File      string
	Line, Col int
}

// String returns file:line:col, without the parts that are not set.
func (p Place) String() string {
	s := p.File
	if p.Line <= 0 {
		return s
	}
	if s != "" {
		s += ":"
	}
	s += strconv.Itoa(p.Line)
	if p.Col > 0 {
		s += ":" + strconv.Itoa(p.Col)
	}
	return s
}

// Severity says whether a fault stops the work.
type Severity int

const (
	Error   Severity = iota // nothing is written
	Warning                 // the result stands, with a caution
)

// String returns "error" or "warning".
func (s Severity) String() string {
	if s == Warning {
		return "warning"
	}
	return "error"
}

// A Diagnostic is one fault an author can mend.
type Diagnostic struct {
	At       Place
	Severity Severity
	Block    string // the block as its fence names it, such as `mechanism "addition"`; or ""
	Key      string // dotted, array elements from 1; or ""
	Msg      string // what is wrong, the value quoted
	Fix      string // what to write instead; never empty
	Err      error  // for errors.Is and errors.As; may be nil
}

// Error returns the diagnostic on one line, leaving out what is empty:
//
//	file:line:col: severity: block, key: msg; fix
func (d Diagnostic) Error() string {
	var b strings.Builder
	if at := d.At.String(); at != "" {
		b.WriteString(at)
		b.WriteString(": ")
	}
	b.WriteString(d.Severity.String())
	b.WriteString(": ")
	sentence(&b, d.Block, d.Key, d.Msg, d.Fix)
	return oneLine(b.String())
}

// Unwrap returns the cause, for errors.Is and errors.As.
func (d Diagnostic) Unwrap() error { return d.Err }

// List is the diagnostics of a notebook, note or block.
type List []Diagnostic

// Sort orders the list by file, line, column, severity (errors first) and
// message, keeping the order of what is equal, and drops exact doubles: those
// that agree in all but their cause.
func (l *List) Sort() {
	slices.SortStableFunc(*l, func(a, b Diagnostic) int {
		return cmp.Or(
			cmp.Compare(a.At.File, b.At.File),
			cmp.Compare(a.At.Line, b.At.Line),
			cmp.Compare(a.At.Col, b.At.Col),
			cmp.Compare(a.Severity, b.Severity),
			cmp.Compare(a.Msg, b.Msg),
		)
	})
	seen := make(map[Diagnostic]bool, len(*l))
	*l = slices.DeleteFunc(*l, func(d Diagnostic) bool {
		d.Err = nil // causes need not be comparable
		double := seen[d]
		seen[d] = true
		return double
	})
}

// Failed reports whether any diagnostic is an error.
func (l List) Failed() bool {
	return slices.ContainsFunc(l, func(d Diagnostic) bool { return d.Severity == Error })
}

// Write writes one diagnostic a line, in the order of the list. It returns the
// first error of w.
func (l List) Write(w io.Writer) error {
	for _, d := range l {
		if _, err := io.WriteString(w, d.Error()+"\n"); err != nil {
			return err
		}
	}
	return nil
}

// sentence writes "block, key: msg; fix" without the empty parts.
func sentence(b *strings.Builder, block, key, msg, fix string) {
	b.WriteString(block)
	if block != "" && key != "" {
		b.WriteString(", ")
	}
	b.WriteString(key)
	if block != "" || key != "" {
		b.WriteString(": ")
	}
	b.WriteString(msg)
	if msg != "" && fix != "" {
		b.WriteString("; ")
	}
	b.WriteString(fix)
}

// oneLine turns control characters into spaces: one diagnostic is one line
// for editors, and nothing an author wrote may drive the terminal.
func oneLine(s string) string {
	return strings.Map(func(r rune) rune {
		if unicode.IsControl(r) || r == '\u2028' || r == '\u2029' {
			return ' '
		}
		return r
	}, s)
}
