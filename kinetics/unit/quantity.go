package unit

import (
	"math"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"
)

// A Quantity is a value in base quantities with its standard deviation, and
// the unit it was written in. SD is 0 for a value taken as exact; that of a
// temperature is a difference, without offset.
type Quantity struct {
	SI, SD float64
	Unit   Unit
}

// String writes the quantity as in a source, "18.4 ± 0.6 kcal/mol", with as
// many digits as it takes to read the same quantity back.
func (q Quantity) String() string {
	s := shortest(q.SI, q.Unit)
	if q.SD != 0 {
		s += " ± " + shortest(q.SD, Unit{Scale: q.Unit.Scale})
	}
	if q.Unit.Symbol != "" {
		s += " " + q.Unit.Symbol
	}
	return s
}

// shortest is the value in u with the fewest digits that converts to base.
func shortest(base float64, u Unit) string {
	x := u.Of(base)
	for n := 1; n < 17; n++ {
		y, err := strconv.ParseFloat(strconv.FormatFloat(x, 'g', n, 64), 64)
		if err == nil && u.Base(y) == base {
			x = y
			break
		}
	}
	return strconv.FormatFloat(x+0, 'g', -1, 64)
}

// Parse reads a quantity of one of the wanted kinds, or of any kind if none is
// given. bare is the unit of a number written without one; with the zero Unit a
// unit is required unless the value is exactly 0 or a plain number is wanted.
// (A temperature always needs one: 0 K is not 0 °C.) The error is an *Error.
func Parse(text string, bare Unit, want ...Dim) (Quantity, error) {
	s := &scanner{text: []rune(text), like: likeThese(want)}
	if !utf8.ValidString(text) {
		return Quantity{}, s.fault(0, "holds bytes that are not UTF-8", "save the file as UTF-8")
	}
	q, err := s.quantity(bare, want)
	if err != nil {
		return Quantity{}, err
	}
	return q, nil
}

func (s *scanner) quantity(bare Unit, want []Dim) (Quantity, *Error) {
	s.spaces()
	start := s.at
	if s.at == len(s.text) {
		return Quantity{}, &Error{Msg: "the quantity is empty", Fix: s.like}
	}
	bracket := s.peek(0) == '('
	if bracket {
		s.at++
		s.spaces()
	}
	value, e := s.number()
	if e != nil {
		return Quantity{}, e
	}
	var deviation *numeral
	s.spaces()
	if s.deviates() {
		s.spaces()
		d, e := s.number()
		if e != nil {
			return Quantity{}, e
		}
		deviation = &d
		s.spaces()
	}
	further := ""
	if bracket {
		if s.peek(0) != ')' {
			return Quantity{}, s.fault(s.at, "has a bracket that is not closed behind the numbers", `write it as in "(9.9 ± 0.3) kcal/mol"`)
		}
		s.at++
		if further, e = s.timesTen(); e != nil {
			return Quantity{}, e
		}
		s.spaces()
	}
	x, e := value.value(s, further)
	if e != nil {
		return Quantity{}, e
	}
	sd := 0.0
	if deviation != nil {
		if sd, e = deviation.value(s, further); e != nil {
			return Quantity{}, e
		}
		if sd < 0 {
			return Quantity{}, s.fault(deviation.at, "has a standard deviation below 0", "write it without a sign")
		}
	}
	u, e := s.unit(x, sd, bare, want, string(s.text[start:s.at]))
	if e != nil {
		return Quantity{}, e
	}
	return convert(x, sd, u, s.text, start)
}

// deviates reads ± or +/-.
func (s *scanner) deviates() bool {
	switch {
	case s.peek(0) == '±':
		s.at++
	case s.peek(0) == '+' && s.peek(1) == '/' && isMinus(s.peek(2)):
		s.at += 3
	case s.peek(0) == '+' && isMinus(s.peek(1)):
		s.at += 2
	default:
		return false
	}
	return true
}

// unit reads what follows the numbers.
func (s *scanner) unit(x, sd float64, bare Unit, want []Dim, numbers string) (Unit, *Error) {
	rest := string(s.text[s.at:])
	if strings.TrimFunc(rest, isSpace) == "" {
		u, e := unitOfBare(x, sd, bare, want, strings.TrimFunc(numbers, isSpace))
		if e != nil {
			e.At = s.at
		}
		return u, e
	}
	u, err := Lookup(rest, want...)
	if err == nil {
		return u, nil
	}
	e := err.(*Error)
	e.At += s.at
	if !e.unknown {
		return u, e
	}
	switch {
	case strings.HasPrefix(rest, "±"), strings.HasPrefix(rest, "+/-"):
		return u, s.fault(s.at, "has ± twice", `write one standard deviation, as in "9.9 ± 0.3 kcal/mol"`)
	case strings.Contains(rest, "±"), strings.Contains(rest, "+/-"):
		return u, s.fault(s.at, "has its unit before ±", `write it last, as in "9.9 ± 0.3 kcal/mol"`)
	}
	switch first := s.peek(0); {
	case first == '(' && isDigit(s.peek(1)):
		return u, s.fault(s.at, "has a standard deviation in brackets", `write it behind ±, as in "9.9 ± 0.3"`)
	case isMinus(first) && isDigit(s.peek(1)), isDigit(first), strings.HasPrefix(rest, "to "):
		return u, s.fault(s.at, "holds more than one number", `write one value, or one value and its standard deviation, as in "9.9 ± 0.3"`)
	}
	word, more, _ := strings.Cut(strings.TrimFunc(rest, isSpace), " ")
	if more = strings.TrimFunc(more, isSpace); more == "" {
		return u, e
	}
	if _, err := Lookup(word, want...); err == nil {
		if isDigit(rune(more[0])) || strings.HasPrefix(more, "to ") {
			return u, s.fault(s.at, "holds more than one quantity", "write one value in one unit, "+strings.TrimPrefix(s.like, "write it "))
		}
		return u, s.fault(s.at, "has "+quoted(more)+" behind its unit", "leave that out")
	}
	return u, e
}

// unitOfBare decides on the unit of a number without one.
func unitOfBare(x, sd float64, bare Unit, want []Dim, numbers string) (Unit, *Error) {
	plain := len(want) == 0 || slices.Contains(want, None)
	switch {
	case bare != (Unit{}) && (len(want) == 0 || slices.Contains(want, bare.Dim)):
		return bare, nil
	case plain:
		return Unit{Scale: 1}, nil
	case x == 0 && sd == 0 && !slices.Contains(want, Temperature):
		if u, err := Lookup(usual(want[0]), want[0]); err == nil {
			return u, nil
		}
		return Unit{Scale: 1, Dim: want[0]}, nil
	}
	fix := likeThese(want)
	if k, ok := want[0].kind(); ok {
		choices := []string{}
		for _, u := range k.units[:min(2, len(k.units))] {
			choices = append(choices, numbers+" "+u)
		}
		fix = choice(choices)
	}
	return Unit{}, &Error{Msg: quoted(numbers) + " has no unit where " + list(want) + " is wanted", Fix: fix}
}

func usual(d Dim) string {
	if k, ok := d.kind(); ok {
		return k.units[0]
	}
	return ""
}

// Bare reads a number that stands without text around it, as a TOML number.
// The rules are those of Parse for a number without a unit.
func Bare(value float64, bare Unit, want ...Dim) (Quantity, error) {
	text := strconv.FormatFloat(value, 'g', -1, 64)
	if math.IsNaN(value) || math.IsInf(value, 0) {
		return Quantity{}, &Error{Msg: "the number " + text + " is not finite", Fix: "write a number of decimal digits"}
	}
	u, e := unitOfBare(value, 0, bare, want, text)
	if e != nil {
		return Quantity{}, e
	}
	q, e := convert(value, 0, u, []rune(text), 0)
	if e != nil {
		return Quantity{}, e
	}
	return q, nil
}

// convert goes over to base quantities and refuses what they cannot hold.
func convert(x, sd float64, u Unit, text []rune, at int) (Quantity, *Error) {
	q := Quantity{SI: u.Base(x) + 0, SD: u.scale() * sd, Unit: u}
	written := string(text[at:])
	switch {
	case math.IsInf(q.SI, 0) || math.IsInf(q.SD, 0):
		return Quantity{}, &Error{Msg: quoted(written) + " is too large", Fix: "check its power of ten", At: at}
	case x != 0 && u.Offset == 0 && q.SI == 0 || sd != 0 && q.SD == 0:
		return Quantity{}, &Error{Msg: quoted(written) + " is too small", Fix: "check its power of ten, or write 0", At: at}
	case u.Dim == Temperature && q.SI < 0:
		return Quantity{}, &Error{
			Msg: quoted(written) + " is below absolute zero",
			Fix: `write a temperature of at least "0 K" or "-273.15 °C"`, At: at,
		}
	}
	return q, nil
}
