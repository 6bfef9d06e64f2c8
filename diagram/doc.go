// Package diagram lays out figures: it turns numbers and names into a Scene of
// placed marks. It knows nothing of chemistry files, pages or rates. Package ink
// writes a Scene as SVG.
//
// # Units
//
// Lengths are SVG user units (px); x runs to the right, y downwards from the top
// left corner of the frame. Energies and shares come in the unit that is to be
// shown.
//
// # Style
//
// A mark carries a Role and never a colour. ink.Style and ink.Alone give each
// role its look, in light, in dark and in print.
//
// # Errors
//
// Input that cannot be drawn gives an *Error, which says what is wrong and what
// to do instead.
package diagram

import "fmt"

// Error says why a figure cannot be drawn and what to change.
type Error struct{ Msg, Fix string }

func (e *Error) Error() string { return e.Msg + "; " + e.Fix }

func refuse(fix, format string, args ...any) *Error {
	return &Error{Msg: fmt.Sprintf(format, args...), Fix: fix}
}
