package fault

import (
	"strconv"
	"strings"
	"unicode"
)

// A Problem is a fault known by key and not by place: what checking and
// computing return.
type Problem struct {
	Path     []string // into the block, such as {"step", "TSa", "reaction"}; empty: the block itself
	Char     int      // the character of the value (from 0) where the fault begins
	Lacks    string   // a key beside it that is missing: no problem if that key has a fault of its own
	Severity Severity
	Msg      string // what is wrong, the value quoted
	Fix      string // what to write instead; never empty
	Err      error  `json:"-"` // for errors.Is and errors.As; may be nil

	// A fault in a file that the block reads stands at its own place there.
	File      string // beside the note; "": the fault is in the block
	Line, Col int
}

// Error returns "key: msg; fix" on one line, without the empty parts.
func (p *Problem) Error() string {
	var b strings.Builder
	sentence(&b, "", Key(p.Path), p.Msg, p.Fix)
	return oneLine(b.String())
}

// Unwrap returns the cause, for errors.Is and errors.As.
func (p *Problem) Unwrap() error { return p.Err }

// In joins a problem to the block it was found in and to its place.
func (p *Problem) In(block string, at Place) Diagnostic {
	return Diagnostic{
		At: at, Severity: p.Severity, Block: block, Key: Key(p.Path),
		Msg: p.Msg, Fix: p.Fix, Err: p.Err,
	}
}

// Problems is a list of problems, and an error. An empty list is no fault:
// return it through Err, since an empty list in an error is not nil.
type Problems []*Problem

// Error returns the problems one a line.
func (p Problems) Error() string {
	lines := make([]string, len(p))
	for i, one := range p {
		lines[i] = one.Error()
	}
	return strings.Join(lines, "\n")
}

// Unwrap returns the single problems, for errors.Is and errors.As.
func (p Problems) Unwrap() []error {
	errs := make([]error, len(p))
	for i, one := range p {
		errs[i] = one
	}
	return errs
}

// Failed reports whether any problem is an error.
func (p Problems) Failed() bool {
	for _, one := range p {
		if one.Severity == Error {
			return true
		}
	}
	return false
}

// Err returns the list as an error, or nil if it is empty.
func (p Problems) Err() error {
	if len(p) == 0 {
		return nil
	}
	return p
}

// Key returns a path as a dotted key, quoting the parts that would not read
// back: those that are empty or hold a dot, a space, a quote or a control
// character.
func Key(path []string) string {
	parts := make([]string, len(path))
	for i, part := range path {
		if part == "" || strings.ContainsFunc(part, func(r rune) bool {
			return r == '.' || r == '"' || unicode.IsSpace(r) || unicode.IsControl(r)
		}) {
			part = strconv.Quote(part)
		}
		parts[i] = part
	}
	return strings.Join(parts, ".")
}
