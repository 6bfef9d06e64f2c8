package unit

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
	"unicode"
)

// A Unit converts between a value and base quantities: base = Scale·x + Offset.
// Symbol is as typed on a keyboard: "kcal/mol", "M-1 s-1". The zero Unit stands
// for no unit at all; Unit{Scale: 1} is the unit of a plain number.
type Unit struct {
	Symbol        string
	Dim           Dim
	Scale, Offset float64
}

// Base returns the base quantity of x in this unit.
func (u Unit) Base(x float64) float64 { return u.scale()*x + u.Offset }

// Of returns the value in this unit of a base quantity.
func (u Unit) Of(base float64) float64 { return (base - u.Offset) / u.scale() }

func (u Unit) scale() float64 {
	if u.Scale == 0 {
		return 1
	}
	return u.Scale
}

// Lookup finds the unit that a text names, of one of the wanted kinds; any
// kind will do if none is given. "" is the unit of a plain number. cm-1 is an
// energy per mole if that is wanted and a wavenumber is not. The error is an
// *Error that suggests the nearest units.
func Lookup(symbol string, want ...Dim) (Unit, error) {
	text := strings.TrimFunc(symbol, isSpace)
	at := len([]rune(symbol[:strings.Index(symbol, text)]))
	factors, ambiguous, ok := factorise(text)
	if ambiguous {
		return Unit{}, &Error{
			Msg: fmt.Sprintf("unit %s does not say what stands below the line", quoted(text)),
			Fix: `put it in brackets, as in "J/(mol K)", or divide again, as in "J/mol/K"`, At: at,
		}
	}
	u, known := Unit{Scale: 1}, ok
	if ok && len(factors) > 0 {
		u, known = combine(factors)
	}
	if !known {
		if celsiusInside(factors) {
			return Unit{}, &Error{
				Msg: fmt.Sprintf("unit %s has a degree Celsius in a product", quoted(text)),
				Fix: `write K there, as in "cal/mol/K"`, At: at,
			}
		}
		return Unit{}, &Error{Msg: fmt.Sprintf("unit %s is not known", quoted(text)), Fix: suggest(text, want), At: at, unknown: true}
	}
	if len(want) == 0 || slices.Contains(want, u.Dim) {
		return u, nil
	}
	if u.Symbol == "cm-1" && slices.Contains(want, MolarEnergy) {
		return Unit{Symbol: u.Symbol, Dim: MolarEnergy, Scale: 100 * WavenumberEnergy}, nil
	}
	if text == "" {
		return Unit{}, &Error{Msg: "a unit is missing where " + list(want) + " is wanted", Fix: suggest("", want), At: at}
	}
	e := &Error{Msg: fmt.Sprintf("unit %s measures %s where %s is wanted", quoted(text), u.Dim, list(want)), At: at}
	if same := sameButCase(text, Known(want...)); len(same) > 0 {
		e.Fix = choice(same)
	} else {
		e.Fix = likeThese(want)
	}
	return Unit{}, e
}

// Must is Lookup for constants in code. It panics if the unit is not known.
func Must(symbol string, want ...Dim) Unit {
	u, err := Lookup(symbol, want...)
	if err != nil {
		panic("unit: " + err.Error())
	}
	return u
}

// Known lists units of the wanted kinds, or of all kinds, sorted: those worth
// suggesting, not every product that can be read.
func Known(want ...Dim) []string {
	var symbols []string
	for _, k := range kinds {
		if len(want) == 0 || slices.Contains(want, k.dim) {
			symbols = append(symbols, k.units...)
		}
	}
	slices.Sort(symbols)
	return slices.Compact(symbols)
}

// A factor is a part to a power.
type factor struct {
	part int
	exp  int
}

// factorise splits a unit into its factors. ok is false if the text is not a
// product of known parts; ambiguous is true for a product after a stroke
// without brackets, as in J/mol K.
func factorise(text string) (factors []factor, ambiguous, ok bool) {
	text = strings.ReplaceAll(text, "\u03bc", "\u00b5") // the Greek mu for the micro sign
	if text == "" {
		return nil, false, true
	}
	if i, whole := byName[strings.Join(strings.FieldsFunc(text, isSpace), " ")]; whole {
		return []factor{{i, 1}}, false, true
	}
	r := []rune(text)
	below, struck, inside, bracketed := false, false, false, false
	for i := 0; i < len(r); {
		operator := rune(0)
		for i < len(r) && (isSpace(r[i]) || isTimes(r[i]) || isStroke(r[i])) {
			if !isSpace(r[i]) {
				if operator != 0 || inside && isStroke(r[i]) {
					return factors, false, false
				}
				operator = r[i]
			}
			i++
		}
		if i == len(r) {
			if operator != 0 {
				return factors, false, false
			}
			break
		}
		switch {
		case isTimes(operator) && len(factors) == 0:
			return nil, false, false
		case isStroke(operator):
			below, struck = true, true
		case !inside:
			below = false
		}
		switch {
		case r[i] == '(' && !inside:
			inside, bracketed = true, true
			i++
			continue
		case r[i] == ')' && inside && operator == 0:
			inside = false
			i++
			continue
		case r[i] == '1' && len(factors) == 0 && !struck && !bracketed && strokeNext(r[i+1:]):
			i++
			continue
		}
		f, n := readFactor(r[i:])
		if n == 0 || len(factors) == 4 {
			return factors, false, false
		}
		i += n
		if below {
			f.exp = -f.exp
		} else if struck && !inside && f.exp > 0 {
			ambiguous = true
		}
		if slices.ContainsFunc(factors, func(other factor) bool { return other.part == f.part }) {
			return factors, false, false
		}
		factors = append(factors, f)
	}
	return factors, ambiguous, !inside && len(factors) > 0
}

func strokeNext(r []rune) bool {
	for _, c := range r {
		if !isSpace(c) {
			return isStroke(c)
		}
	}
	return false
}

// readFactor reads a symbol and its power; n is how many characters it took,
// 0 if there is none.
func readFactor(r []rune) (f factor, n int) {
	for n < len(r) && isUnitLetter(r[n]) {
		n++
	}
	if n == 0 {
		return f, 0
	}
	name := string(r[:n])
	exp, m, ok := readPower(r[n:])
	if !ok {
		return f, 0
	}
	if cube, is := byName[name+"3"]; is && exp%3 == 0 {
		return factor{cube, exp / 3}, n + m
	}
	i, is := byName[name]
	if !is {
		return f, 0
	}
	return factor{i, exp}, n + m
}

// readPower reads ^-1, -1 or ⁻¹ and the characters it took; no power at all is
// 1. Powers above 9 are refused.
func readPower(r []rune) (exp, n int, ok bool) {
	caret := len(r) > 0 && r[0] == '^'
	if caret {
		n++
	}
	digits, m := readInteger(r[n:], caret)
	if digits == "" {
		return 1, 0, !caret
	}
	exp, err := strconv.Atoi(digits)
	if err != nil || exp == 0 || exp > 9 || exp < -9 {
		return 0, 0, false
	}
	return exp, n + m, true
}

// readInteger reads a signed whole number in plain or in raised digits and
// returns it in plain ones, with the characters it took; plus says whether a
// plain + may lead.
func readInteger(r []rune, plus bool) (digits string, n int) {
	if len(r) == 0 {
		return "", 0
	}
	sign, digit := "", func(c rune) int { return int(c - '0') }
	switch c := r[0]; {
	case c == '⁻' || c == '⁺' || raisedDigit(c) >= 0:
		digit = raisedDigit
		if c == '⁻' {
			sign = "-"
		}
		if c == '⁻' || c == '⁺' {
			n = 1
		}
	case isMinus(c):
		sign, n = "-", 1
	case c == '+' && plus:
		n = 1
	}
	for n < len(r) {
		d := digit(r[n])
		if d < 0 || d > 9 {
			break
		}
		digits += strconv.Itoa(d)
		n++
	}
	if digits == "" {
		return "", 0
	}
	return sign + digits, n
}

// raisedDigit returns the value of a raised digit, or -1.
func raisedDigit(c rune) int {
	return slices.Index([]rune("⁰¹²³⁴⁵⁶⁷⁸⁹"), c)
}

// combine multiplies factors to a unit. It fails for a product of no kind that
// a source may hold.
func combine(factors []factor) (Unit, bool) {
	factors = slices.Clone(factors)
	slices.SortFunc(factors, func(a, b factor) int { return a.part - b.part })
	u, num, den := Unit{}, 1.0, 1.0
	for _, f := range factors {
		p := parts[f.part]
		if p.alone {
			if len(factors) > 1 || f.exp != 1 {
				return Unit{}, false
			}
			return Unit{Symbol: p.symbol, Dim: p.dim, Scale: p.num / p.den, Offset: p.offset}, true
		}
		up, down := p.num, p.den
		if f.exp < 0 {
			up, down = down, up
		}
		n := math.Abs(float64(f.exp))
		num, den = num*math.Pow(up, n), den*math.Pow(down, n)
		u.Dim = u.Dim.times(p.dim, int8(f.exp))
	}
	if _, ok := u.Dim.kind(); !ok || u.Dim == None {
		return Unit{}, false
	}
	u.Scale, u.Symbol = num/den, product(factors, u.Dim)
	return u, true
}

func (d Dim) times(o Dim, n int8) Dim {
	return Dim{
		d.Energy + n*o.Energy, d.Amount + n*o.Amount, d.Volume + n*o.Volume,
		d.Time + n*o.Time, d.Temperature + n*o.Temperature, d.Pressure + n*o.Pressure,
		d.Length + n*o.Length, d.Mass + n*o.Mass, d.Equivalent + n*o.Equivalent,
	}
}

// product writes factors as chemists do: rate constants and reciprocals with
// negative powers, everything else with strokes.
func product(factors []factor, d Dim) string {
	positive := slices.ContainsFunc(factors, func(f factor) bool { return f.exp > 0 })
	powers := !positive || d.Time < 0 && d != HeatRate
	var above, below []string
	for _, f := range factors {
		name, exp := parts[f.part].symbol, f.exp
		if cube, is := strings.CutSuffix(name, "3"); is {
			name, exp = cube, 3*exp
		}
		switch {
		case exp > 0 && exp != 1:
			above = append(above, name+strconv.Itoa(exp))
		case exp == 1:
			above = append(above, name)
		case powers:
			below = append(below, name+strconv.Itoa(exp))
		case exp == -1:
			below = append(below, name)
		default:
			below = append(below, name+strconv.Itoa(-exp))
		}
	}
	if powers {
		return strings.Join(append(above, below...), " ")
	}
	return strings.Join(append([]string{strings.Join(above, " ")}, below...), "/")
}

func celsiusInside(factors []factor) bool {
	return slices.ContainsFunc(factors, func(f factor) bool { return parts[f.part].symbol == "°C" })
}

func isSpace(r rune) bool { return unicode.IsSpace(r) || r == '\u2060' || r == '\ufeff' }

func isTimes(r rune) bool { return strings.ContainsRune("·⋅∙•*.", r) && r != 0 }

func isStroke(r rune) bool { return r == '/' || r == '\u2044' || r == '\u2215' }

func isUnitLetter(r rune) bool {
	return unicode.IsLetter(r) || unicode.Is(unicode.Mn, r) || strings.ContainsRune("°%℃_", r)
}

// isMinus takes every dash that keyboards and word processors put before a
// number.
func isMinus(r rune) bool { return r == '-' || r >= '\u2010' && r <= '\u2013' || r == '\u2212' }
