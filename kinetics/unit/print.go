package unit

import (
	"math"
	"strconv"
	"strings"
)

// A Form says how a computed value is printed.
type Form int

const (
	FormPlain    Form = iota // a stated value: up to 6 digits, no closing zeros
	FormEnergy               // to 0.1 kcal/mol or kJ/mol, and as fine as that in other units
	FormEntropy              // to 0.1 cal/mol/K or J/mol/K
	FormPercent              // a fraction as a percentage, see Percent
	FormRatio                // see Ratio
	FormRate                 // 2 digits
	FormSpan                 // a time in the unit that suits it, whatever unit is given; see Span
	FormTime                 // a time in the given unit, 3 digits
	FormPosition             // 2 decimals
	FormMolar                // a concentration, 3 digits; in M, below 0.01 M, in the unit that suits it
	FormFactor               // 2 digits
	FormConstant             // an equilibrium constant, 2 digits
	FormWhole                // no decimals
	FormKelvin               // a temperature, up to 2 decimals
	FormRise                 // a difference of temperatures, 2 digits: 10 K is 10 °C
)

const (
	space = "\u00a0" // no-break, between a number and its unit and around ×
	minus = "\u2212"
	none  = "none" // in place of NaN
)

// Print writes a base quantity in unit u with the digits it deserves. The unit
// is left out where the form brings its own (percent, ratio, span) and where
// there is no number: NaN is "none".
func Print(base float64, u Unit, f Form) string {
	switch f {
	case FormPercent:
		return Percent(base)
	case FormRatio:
		return Ratio(base)
	case FormSpan:
		return Span(base)
	case FormMolar:
		u = prefixed(base, u)
	}
	s := PrintBare(base, u, f)
	if u.Symbol == "" || s == none {
		return s
	}
	return s + space + strings.ReplaceAll(Superscript(u.Symbol), " ", space)
}

// prefixed is M with the prefix that suits a concentration: 1.00 mM, 6.30 µM.
// Any other unit, and what is below 1 pM, stays as it is.
func prefixed(base float64, u Unit) Unit {
	if u.Symbol != molars[0].Symbol || base == 0 {
		return u
	}
	for i, p := range molars {
		least := 0.9995 // rounds to 1.00
		if i == 0 {
			least = 0.009995
		}
		if math.Abs(p.Of(base)) >= least {
			return p
		}
	}
	return u
}

var molars = []Unit{Must("M"), Must("mM"), Must("µM"), Must("nM"), Must("pM")}

// PrintBare is Print without the unit, for columns that name it in their head.
// A span is in u there.
func PrintBare(base float64, u Unit, f Form) string {
	if f == FormRise {
		u.Offset = 0
	}
	x := u.Of(base)
	switch f {
	case FormEnergy:
		return Fixed(x, decimals(u, 0.1*1000*Calorie))
	case FormEntropy:
		return Fixed(x, decimals(u, 0.1*Calorie))
	case FormPercent:
		return strings.TrimSuffix(Percent(base), space+"%")
	case FormRatio:
		return Ratio(base)
	case FormSpan, FormTime, FormMolar:
		return digits(x, 3, -3, 4)
	case FormPosition:
		return Fixed(x, 2)
	case FormRate, FormFactor, FormConstant:
		return digits(x, 2, -3, 2) // from 1000 on closing zeros would pass for digits
	case FormWhole:
		return Fixed(x, 0)
	case FormKelvin:
		return trim(Fixed(x, 2))
	case FormRise:
		return digits(x, 2, -3, 3)
	}
	mantissa, power, scientific := strings.Cut(digits(x, 6, -3, 5), space)
	if scientific {
		return trim(mantissa) + space + power
	}
	return trim(mantissa)
}

// decimals is how many it takes in unit u to show a step of the given size in
// base quantities.
func decimals(u Unit, step float64) int {
	return max(0, int(math.Ceil(-math.Log10(step/u.scale())-1e-9)))
}

// Fixed prints x with a fixed number of decimals: U+2212 for minus, and never
// a minus before zeros.
func Fixed(x float64, decimals int) string {
	switch {
	case math.IsNaN(x) || math.IsInf(x, 0):
		return unusual(x)
	case math.Abs(x) >= 1e15:
		return Digits(x, 6)
	}
	return signed(x < 0, strconv.FormatFloat(math.Abs(x), 'f', max(0, decimals), 64))
}

// Digits prints x with n significant digits, with a power of ten below 1e-3
// and from 1e5 on: 0.0123, 12300, 1.2 × 10⁻⁵. Zero is "0".
func Digits(x float64, n int) string { return digits(x, n, -3, 4) }

// digits prints plainly if the power of ten of x, once rounded, is from low to
// high.
func digits(x float64, n, low, high int) string {
	switch {
	case math.IsNaN(x) || math.IsInf(x, 0):
		return unusual(x)
	case x == 0:
		return "0"
	}
	n = max(1, n)
	rounded := strconv.FormatFloat(math.Abs(x), 'e', n-1, 64)
	mantissa, power, _ := strings.Cut(rounded, "e")
	p, _ := strconv.Atoi(power) // FormatFloat writes a whole number there
	if p < low || p > high {
		return signed(x < 0, mantissa+space+"×"+space+"10"+raise(strconv.Itoa(p)))
	}
	y, _ := strconv.ParseFloat(rounded, 64) // and a number here
	return signed(x < 0, strconv.FormatFloat(y, 'f', max(0, n-1-p), 64))
}

// Percent prints a fraction to 0.1 %: "72.1 %". What would round to 0.0 has one
// digit ("0.04 %", "0.002 %"), below 0.001 % a power of ten ("3.1 × 10⁻⁵ %"); what would round to 100.0 without reaching it is
// ">99.9 %", and exactly 0 and 1 are "0 %" and "100 %".
func Percent(fraction float64) string {
	p := 100 * math.Abs(fraction)
	sign := ""
	if fraction < 0 {
		sign = minus
	}
	s := ""
	switch {
	case math.IsNaN(p):
		return none
	case p == 0:
		s = "0"
	case p < 0.00095:
		s = sign + digits(p, 2, 0, 0)
	case p < 0.05:
		s = sign + digits(p, 1, -3, 0)
	case p >= 99.95 && math.Abs(fraction) < 1:
		s = ">" + sign + "99.9"
		if fraction < 0 {
			s = "<" + sign + "99.9"
		}
	case math.Abs(fraction) == 1:
		s = sign + "100"
	default:
		s = sign + Fixed(p, 1)
	}
	return s + space + "%"
}

// Ratio prints the ratio of two amounts as whole shares of 100, "96:4", and
// beyond a hundredth as ">99:1" or "<1:99". NaN and what is below 0 is "none".
func Ratio(r float64) string {
	switch {
	case math.IsNaN(r) || r < 0:
		return none
	case r > 99:
		return ">99:1"
	case r < 1.0/99:
		return "<1:99"
	}
	share := int(math.Round(100 * r / (1 + r)))
	return strconv.Itoa(share) + ":" + strconv.Itoa(100-share)
}

// RatioToOne prints the ratio of two amounts against 1: "21.7:1", "1:3.2",
// "5.4 × 10³:1". NaN and what is below 0 is "none".
func RatioToOne(r float64) string {
	if math.IsNaN(r) || r < 0 {
		return none
	}
	if r >= 1 {
		return times(r) + ":1"
	}
	return "1:" + times(1/r)
}

func times(x float64) string {
	switch {
	case x < 99.95:
		return Fixed(x, 1)
	case x < 999.5:
		return Fixed(x, 0)
	}
	return digits(x, 2, 0, 2)
}

// Span prints a time in the unit that suits it: "2.1 ms", "45 s", "3.2 h",
// "12 d", "4.0 years", "2 × 10⁴ years". Without end it is "∞".
func Span(seconds float64) string {
	t := math.Abs(seconds)
	if math.IsNaN(t) || math.IsInf(t, 0) {
		return unusual(seconds)
	}
	if t == 0 {
		return "0" + space + "s"
	}
	for _, u := range spans {
		x := t / u.seconds
		if x >= u.below {
			continue
		}
		s := spanDigits(x)
		if y, err := strconv.ParseFloat(s, 64); err == nil && y >= u.below {
			continue // 59.7 s is 1.0 min
		}
		return signed(seconds < 0, s) + space + u.symbol
	}
	s := strings.Replace(digits(t/year, 2, 0, 3), ".0"+space, space, 1)
	return signed(seconds < 0, s) + space + "years"
}

const year = 365.25 * 86400

var spans = []struct {
	symbol  string
	seconds float64
	below   float64 // the next unit from here on
}{
	{"ps", 1e-12, 1000}, {"ns", 1e-9, 1000}, {"µs", 1e-6, 1000}, {"ms", 1e-3, 1000},
	{"s", 1, 60}, {"min", 60, 60}, {"h", 3600, 48}, {"d", 86400, 365.25}, {"years", year, 1000},
}

// spanDigits gives 2 digits, and 3 where the third is not behind the point.
func spanDigits(x float64) string {
	switch {
	case x < 0.95: // below a picosecond; 59.7 s is 1.0 min
		return digits(x, 2, -1, 9)
	case x < 9.95:
		return Fixed(x, 1)
	}
	return Fixed(x, 0)
}

// Superscript raises the powers of a unit symbol: "M-1 s-1" to "M⁻¹ s⁻¹".
func Superscript(symbol string) string {
	var b strings.Builder
	r := []rune(symbol)
	for i := 0; i < len(r); {
		b.WriteRune(r[i])
		i++
		if i < len(r) && isUnitLetter(r[i-1]) {
			if power, n := readInteger(r[i:], false); n > 0 {
				b.WriteString(raise(power))
				i += n
			}
		}
	}
	return b.String()
}

var raise = strings.NewReplacer("-", "⁻", "0", "⁰", "1", "¹", "2", "²", "3", "³", "4", "⁴",
	"5", "⁵", "6", "⁶", "7", "⁷", "8", "⁸", "9", "⁹").Replace

// signed puts the minus before a number unless all its digits are zeros.
func signed(negative bool, s string) string {
	if negative && strings.ContainsAny(s, "123456789∞") {
		return minus + s
	}
	return s
}

func unusual(x float64) string {
	if math.IsNaN(x) {
		return none
	}
	return signed(x < 0, "∞")
}

// trim drops closing zeros behind the point.
func trim(s string) string {
	if strings.Contains(s, ".") {
		s = strings.TrimRight(strings.TrimRight(s, "0"), ".")
	}
	return s
}
