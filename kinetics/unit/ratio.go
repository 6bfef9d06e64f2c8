package unit

import (
	"math"
	"strings"
	"unicode/utf8"
)

// ParseRatio reads a ratio of two amounts: "15:1" is 15, "96:4" is 24, "21.7"
// is 21.7. Both sides are at least 0, the right one above. The error is an
// *Error.
func ParseRatio(text string) (float64, error) {
	s := &scanner{text: []rune(text), like: `write it as in "15:1"`}
	if !utf8.ValidString(text) {
		return 0, s.fault(0, "holds bytes that are not UTF-8", "save the file as UTF-8")
	}
	r, e := s.ratio()
	if e != nil {
		return 0, e
	}
	return r, nil
}

func (s *scanner) ratio() (float64, *Error) {
	s.spaces()
	if s.at == len(s.text) {
		return 0, &Error{Msg: "the ratio is empty", Fix: s.like}
	}
	sides := []float64{}
	for {
		s.spaces()
		at := s.at
		n, e := s.number()
		if e != nil {
			return 0, e
		}
		x, e := n.value(s, "")
		if e != nil {
			return 0, e
		}
		if x < 0 {
			return 0, s.fault(at, "has a side below 0", s.like)
		}
		sides = append(sides, x)
		s.spaces()
		if s.at == len(s.text) {
			break
		}
		if !strings.ContainsRune(":∶", s.text[s.at]) || len(sides) == 2 {
			return 0, s.fault(s.at, "has more in it than a ratio", `write two numbers and no unit, as in "15:1" or "96:4"`)
		}
		s.at++
	}
	if len(sides) == 1 {
		return sides[0], nil
	}
	r := sides[0] / sides[1]
	switch {
	case sides[1] == 0:
		return 0, s.fault(0, "has a right side of 0", `write a number above 0 there, as in "99:1"`)
	case math.IsInf(r, 0) || r == 0 && sides[0] != 0:
		return 0, s.fault(0, "is a ratio too large or too small to compute with", "check its powers of ten")
	}
	return r, nil
}
