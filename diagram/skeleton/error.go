package skeleton

import "fmt"

// Error says what is wrong in a molfile, where, and what to write instead.
type Error struct {
	Line, Col int // from 1; 0: the file as a whole
	Msg       string
	Fix       string
}

func (e *Error) Error() string {
	if e.Line == 0 {
		return e.Msg + "; " + e.Fix
	}
	return fmt.Sprintf("line %d, column %d: %s; %s", e.Line, e.Col, e.Msg, e.Fix)
}

// place is where something stands in the file.
type place struct{ line, col int }

func (p place) fault(fix, format string, args ...any) *Error {
	return &Error{Line: p.line, Col: p.col, Msg: fmt.Sprintf(format, args...), Fix: fix}
}

// Limits on what is read.
const (
	MaxBytes = 1 << 20
	MaxAtoms = 500
	MaxBonds = 600
	maxLine  = 2000 // bytes
	maxText  = 40   // letters of a short name
	maxSpan  = 500  // bond lengths from one end to the other
)
