package unit

import "strconv"

// An Error is what is wrong with a text, what to write instead and where in
// the text, counted in characters from 0.
type Error struct {
	Msg, Fix string
	At       int
	unknown  bool // a unit that is not known: the text behind a number may be something else
}

// Error returns "msg; fix".
func (e *Error) Error() string {
	if e.Fix == "" {
		return e.Msg
	}
	return e.Msg + "; " + e.Fix
}

// quoted quotes a text for a message, shortened so that the message stays
// readable.
func quoted(text string) string {
	const most = 40
	if r := []rune(text); len(r) > most {
		text = string(r[:most]) + "…"
	}
	return strconv.Quote(text)
}
