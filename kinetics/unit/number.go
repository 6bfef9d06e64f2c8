package unit

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"unicode"
)

// A numeral is a number as read: decimal digits and a power of ten, kept apart
// so that a power behind a bracket can be added before anything is rounded.
type numeral struct {
	digits string // with an ASCII sign
	power  string // whole number, may be ""
	at     int
}

// value returns the number times ten to a further power. Numbers too large or
// too small for a float64 are refused.
func (n numeral) value(s *scanner, further string) (float64, *Error) {
	power := 0
	for _, p := range []string{n.power, further} {
		if p == "" {
			continue
		}
		k, err := strconv.Atoi(p)
		if err != nil || k > 9999 || k < -9999 {
			k = 9999 // out of range either way
			if strings.HasPrefix(p, "-") {
				k = -9999
			}
		}
		power += k
	}
	x, err := strconv.ParseFloat(n.digits+"e"+strconv.Itoa(power), 64)
	if err != nil || math.IsInf(x, 0) {
		return 0, s.fault(n.at, "has a number that is too large", "check its power of ten")
	}
	if x == 0 && strings.ContainsAny(n.digits, "123456789") {
		return 0, s.fault(n.at, "has a number that is too small", "check its power of ten, or write 0")
	}
	return x + 0, nil // never -0
}

// A scanner reads a quantity from left to right.
type scanner struct {
	text []rune
	at   int
	like string // the remedy of last resort: examples of what is wanted
}

// fault words what is wrong with the text, which is the subject of msg.
func (s *scanner) fault(at int, msg, fix string) *Error {
	return &Error{Msg: quoted(string(s.text)) + " " + msg, Fix: fix, At: at}
}

func (s *scanner) spaces() {
	for s.at < len(s.text) && isSpace(s.text[s.at]) {
		s.at++
	}
}

func (s *scanner) peek(ahead int) rune {
	if s.at+ahead < len(s.text) {
		return s.text[s.at+ahead]
	}
	return 0
}

func isDigit(r rune) bool { return r >= '0' && r <= '9' }

// number reads a sign, digits with a decimal point, and a power of ten as e-3,
// × 10⁻³ or × 10^-3. A power of ten alone, as 10⁻³, is a number too.
func (s *scanner) number() (numeral, *Error) {
	n := numeral{at: s.at}
	if isMinus(s.peek(0)) {
		n.digits = "-"
		s.at++
	} else if s.peek(0) == '+' {
		s.at++
	}
	start, points, digits := s.at, 0, 0
	for {
		switch c := s.peek(0); {
		case isDigit(c):
			digits++
		case c == '.' && (isDigit(s.peek(1)) || points == 0 && digits > 0):
			points++
		default:
			if digits == 0 {
				return n, s.noNumber(n.at)
			}
			if points > 1 {
				return n, s.fault(start, "has more than one decimal point", "write one point and no sign between groups of digits")
			}
			sign := n.digits
			n.digits += string(s.text[start:s.at])
			if e := s.grouped(start, sign); e != nil {
				return n, e
			}
			return n, s.power(&n, string(s.text[start:s.at]) == "10")
		}
		s.at++
	}
}

// noNumber is the fault of a text without a number where one is due.
func (s *scanner) noNumber(at int) *Error {
	rest := strings.ToLower(string(s.text[s.at:]))
	switch {
	case rest == "":
		return s.fault(at, "lacks a number", s.like)
	case strings.HasPrefix(rest, "nan"), strings.HasPrefix(rest, "inf"), strings.HasPrefix(rest, "∞"):
		return s.fault(at, "is not a finite number", s.like)
	case strings.ContainsRune("<>~≈≤≥≲≳", s.peek(0)):
		return s.fault(at, "has a sign before the number", `write the number alone, or with its standard deviation, as in "9.9 ± 0.3"`)
	}
	return s.fault(at, "has no number where one is due", s.like)
}

// grouped refuses a decimal comma and digits in groups, after the digits that
// begin at start, behind the sign.
func (s *scanner) grouped(start int, sign string) *Error {
	head := sign + string(s.text[start:s.at])
	c, next := s.peek(0), s.peek(1)
	tail := func(from int) string {
		end := from
		for end < len(s.text) && isDigit(s.text[end]) {
			end++
		}
		return string(s.text[from:end])
	}
	switch {
	case c == ',' && isDigit(next):
		after := tail(s.at + 1)
		fix := fmt.Sprintf("write the decimal point: %q", head+"."+after)
		if len(after) == 3 && !strings.Contains(head, ".") {
			fix = fmt.Sprintf("write %q or %q", head+after, head+"."+after)
		}
		return s.fault(s.at, "has a comma", fix)
	case strings.ContainsRune("_'’", c) && c != 0 && isDigit(next):
		return s.fault(s.at, "has digits in groups", fmt.Sprintf("write %q", head+tail(s.at+1)))
	case isSpace(c):
		from := s.at
		for from < len(s.text) && isSpace(s.text[from]) {
			from++
		}
		after := tail(from)
		if after == "" || after == "1" && strokeNext(s.text[from+1:]) {
			return nil
		}
		return s.fault(from, "has digits in groups", fmt.Sprintf("write %q", head+after))
	case unicode.IsDigit(c):
		return s.fault(s.at, "has a digit other than 0 to 9", s.like)
	}
	return nil
}

// power reads the power of ten behind the digits, if there is one; ten says
// that the digits are a bare 10, which may be raised itself.
func (s *scanner) power(n *numeral, ten bool) *Error {
	if ten {
		if p, m := raisedPower(s.text[s.at:], false); m > 0 {
			n.digits, n.power = strings.TrimSuffix(n.digits, "0"), p
			s.at += m
			return nil
		}
	}
	if c := s.peek(0); c == 'e' || c == 'E' {
		if p, m := readInteger(s.text[s.at+1:], true); m > 0 {
			n.power = p
			s.at += 1 + m
			return nil
		}
	}
	p, e := s.timesTen()
	n.power = p
	return e
}

// timesTen reads × 10⁻³ and returns "-3", or "" if there is no such thing.
func (s *scanner) timesTen() (string, *Error) {
	was := s.at
	s.spaces()
	cross := s.at
	if c := s.peek(0); c != 0 && strings.ContainsRune("×xX·⋅*", c) {
		s.at++
		s.spaces()
		if s.peek(0) == '1' && s.peek(1) == '0' {
			if p, m := raisedPower(s.text[s.at+2:], true); m > 0 {
				s.at += 2 + m
				return p, nil
			}
		}
		if c == '×' {
			return "", s.fault(cross, "has a × without a power of ten", `write it as in "1.5e-3" or "1.5 × 10^-3"`)
		}
	}
	s.at = was
	return "", nil
}

// raisedPower reads ^-3 or ⁻³, and also -3 if plain signed digits are allowed.
func raisedPower(r []rune, plain bool) (string, int) {
	if len(r) == 0 {
		return "", 0
	}
	switch c := r[0]; {
	case c == '^':
		if p, m := readInteger(r[1:], true); m > 0 {
			return p, m + 1
		}
	case c == '⁻' || c == '⁺' || raisedDigit(c) >= 0, plain && (isMinus(c) || c == '+'):
		return readInteger(r, true)
	}
	return "", 0
}
