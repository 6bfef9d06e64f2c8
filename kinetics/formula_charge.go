package kinetics

import (
	"fmt"
	"strings"
)

// sign gives the direction of a sign, and whether it is raised.
func sign(c rune) (direction int, isRaised bool) {
	switch c {
	case '+':
		return 1, false
	case '-', '−':
		return -1, false
	case '⁺':
		return 1, true
	case '⁻':
		return -1, true
	}
	return 0, false
}

// radical passes over dots that have nothing behind them but a charge, or stand
// at the front: they mark unpaired electrons, not atoms.
// It tells whether there were any.
func (r *formulaReader) radical() bool {
	from := r.at
	for isDot(r.peek(0)) {
		r.at++
	}
	c := r.peek(0)
	direction, _ := sign(c)
	charged := direction != 0 || (c == '^' || raisedDigit(c) >= 0) && !r.massAhead()
	if from > 0 && r.at < len(r.runes) && !charged {
		r.at = from // it joins what follows
	}
	return r.at > from
}

// numberAndSign tells whether plain digits and a bare sign come.
func (r *formulaReader) numberAndSign() bool {
	n := r.digitsAt(r.at, plainDigit)
	direction, isRaised := sign(r.peek(n))
	return n > 0 && direction != 0 && !isRaised
}

// charge reads the charge at the end of a part, 0 if there is none. last is the
// unit in front of it.
func (r *formulaReader) charge(last lastUnit) (int, error) {
	begin := r.at
	var q int
	var err error
	direction, isRaised := sign(r.peek(0))
	switch {
	case last.charge:
		n, err := r.number(plainDigit)
		if err != nil {
			return 0, err
		}
		direction, _ = sign(r.peek(0))
		r.at++
		q = direction * n
	case r.peek(0) == '^':
		r.at++
		q, err = r.raisedCharge(begin, plainDigit, false)
	case isRaised || raisedDigit(r.peek(0)) >= 0:
		q, err = r.raisedCharge(begin, raisedDigit, true)
	case direction != 0:
		q = direction * r.signs(direction, false)
		if n := r.digitsAt(r.at, plainDigit); n > 0 && (r.at+n == len(r.runes) || isDot(r.runes[r.at+n])) {
			return 0, r.fault(begin, fmt.Sprintf("the charge %q in formula %q has its number behind the sign", string(r.runes[begin:r.at+n]), r.text),
				fmt.Sprintf("write %s^%s%c", string(r.runes[:begin]), string(r.runes[r.at:r.at+n]), r.runes[begin]))
		}
		if last.number > 0 {
			err = r.withNumber(last, begin)
		}
	default:
		return 0, nil
	}
	if err != nil {
		return 0, err
	}
	if c := r.peek(0); c != 0 && !isDot(c) && c != ' ' && !strings.ContainsRune(")]}", c) {
		if direction, _ := sign(c); direction != 0 || c == '^' || raisedDigit(c) >= 0 {
			return 0, r.fault(r.at, fmt.Sprintf("formula %q has more than one charge", r.text), "write one charge, at the end, such as SO4^2-")
		}
		return 0, r.fault(begin, fmt.Sprintf("the charge %q in formula %q does not stand at the end", string(r.runes[begin:r.at]), r.text), "write the charge of the whole at the end, and leave out bonds")
	}
	return q, nil
}

// signs counts equal signs.
func (r *formulaReader) signs(direction int, isRaised bool) int {
	n := 0
	for {
		d, raised := sign(r.peek(0))
		if d != direction || raised != isRaised {
			return n
		}
		r.at++
		n++
	}
}

// raisedCharge reads what stands behind ^, or is raised by itself: a number and
// a sign, a sign and a number, or signs.
func (r *formulaReader) raisedCharge(begin int, digit func(rune) int, isRaised bool) (int, error) {
	brace := !isRaised && r.peek(0) == '{'
	if brace {
		r.at++
	}
	if !isRaised { // ^•+
		for isDot(r.peek(0)) {
			r.at++
		}
	}
	n, numbered := 1, false
	if r.digitsAt(r.at, digit) > 0 {
		var err error
		if n, err = r.number(digit); err != nil {
			return 0, err
		}
		numbered = true
	}
	direction, raised := sign(r.peek(0))
	if direction == 0 || raised != isRaised {
		return 0, r.fault(begin, fmt.Sprintf("the charge %q in formula %q has no sign", string(r.runes[begin:r.at]), r.text), "write a charge as SO4^2- or SO4²⁻, and an isotope as ^13C")
	}
	signs := r.signs(direction, isRaised)
	if !numbered && signs == 1 && r.digitsAt(r.at, digit) > 0 {
		var err error
		if n, err = r.number(digit); err != nil {
			return 0, err
		}
	} else if numbered && signs > 1 {
		return 0, r.fault(begin, fmt.Sprintf("the charge %q in formula %q has a number and several signs", string(r.runes[begin:r.at]), r.text), "write a charge as SO4^2-")
	}
	if brace {
		if r.peek(0) != '}' {
			return 0, r.fault(begin, fmt.Sprintf("the { of the charge in formula %q is not closed", r.text), "write a charge as SO4^2-")
		}
		r.at++
	}
	return direction * n * signs, nil
}

// withNumber decides what a number of plain digits in front of a bare sign is:
// a count, or a fault if it could be the charge. The sign is read.
func (r *formulaReader) withNumber(last lastUnit, begin int) error {
	digits, signs := string(r.runes[last.number:begin]), string(r.runes[begin:r.at])
	hydrogen := last.symbol == "H" || last.symbol == "D" || last.symbol == "T"
	if hydrogen || len(digits) == 1 && last.units > 1 && !last.square {
		return nil
	}
	front, split := string(r.runes[:last.number]), len(digits)-1
	fix := fmt.Sprintf("write %s%s^%s if %s is a count", front, digits, signs, digits)
	charge := front + digits[:split] + "^" + digits[split:] + signs
	if _, err := ParseFormula(charge); err == nil {
		fix += fmt.Sprintf(", or %s if the charge is %s", charge, digits[split:]+signs)
	}
	return r.fault(last.number, fmt.Sprintf("%q at the end of formula %q can be read two ways", digits+signs, string(r.runes[:r.at])), fix)
}
