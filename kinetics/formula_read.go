package kinetics

import (
	"fmt"
	"strings"
	"unicode"
)

const (
	mostAtoms  = 1_000_000 // of one kind; more is a slip
	mostNested = 16        // brackets in brackets
)

// formulaReader walks a formula, rune by rune.
type formulaReader struct {
	text  string
	runes []rune
	at    int
}

// lastUnit is what a charge needs to know of the unit in front of it.
type lastUnit struct {
	units  int    // of this part of the formula so far
	symbol string // "" for a bracket
	square bool
	count  int
	number int  // rune offset of a count in plain digits; 0: there is none
	charge bool // the plain digits behind it belong to the sign
}

func (r *formulaReader) fault(at int, msg, fix string) *FormulaError {
	return &FormulaError{Text: r.text, At: at, Msg: msg, Fix: fix}
}

func (r *formulaReader) peek(ahead int) rune {
	if i := r.at + ahead; i < len(r.runes) {
		return r.runes[i]
	}
	return 0
}

func (r *formulaReader) spaces() {
	for r.peek(0) == ' ' {
		r.at++
	}
}

func isDot(c rune) bool { return strings.ContainsRune("·•∙⋅", c) }

func plainDigit(c rune) int {
	if c >= '0' && c <= '9' {
		return int(c - '0')
	}
	return -1
}

func loweredDigit(c rune) int { return place(loweredDigits, c) }
func raisedDigit(c rune) int  { return place(raisedDigits, c) }

// place is the number of the digit c in a row of digits, or -1.
func place(digits string, c rune) int {
	n := 0
	for _, d := range digits {
		if d == c {
			return n
		}
		n++
	}
	return -1
}

// digitsAt counts the digits from i on.
func (r *formulaReader) digitsAt(i int, digit func(rune) int) int {
	n := 0
	for i+n < len(r.runes) && digit(r.runes[i+n]) >= 0 {
		n++
	}
	return n
}

// number reads the digits at hand, of which there is one at least.
func (r *formulaReader) number(digit func(rune) int) (int, error) {
	begin, n := r.at, 0
	length := r.digitsAt(r.at, digit)
	for r.at < begin+length {
		n = min(10*n+digit(r.runes[r.at]), 10*mostAtoms)
		r.at++
	}
	if digit(r.runes[begin]) == 0 || n > mostAtoms {
		return 0, r.fault(begin, fmt.Sprintf("the number %s in formula %q makes no sense", string(r.runes[begin:r.at]), r.text),
			"give a whole number, 1 or more, without zeros in front")
	}
	return n, nil
}

// add adds the atoms of a part, times over.
func (r *formulaReader) add(total, part map[string]int, times int) error {
	for symbol, n := range part {
		if n > mostAtoms/times || total[symbol]+n*times > mostAtoms {
			return r.fault(0, fmt.Sprintf("formula %q has more than a million atoms of one kind", r.text), "correct the numbers")
		}
		total[symbol] += n * times
	}
	return nil
}

// units reads symbols and brackets with their counts until something else comes.
// closing is the bracket that ends them, 0 at the top.
func (r *formulaReader) units(closing rune, depth int) (map[string]int, lastUnit, error) {
	atoms := map[string]int{}
	last := lastUnit{}
	for {
		c := r.peek(0)
		mass := r.massAhead()
		switch {
		case c >= 'A' && c <= 'Z' || mass:
			symbol, err := r.symbol(mass)
			if err != nil {
				return nil, last, err
			}
			last = lastUnit{units: last.units + 1, symbol: symbol}
			if err := r.count(&last); err != nil {
				return nil, last, err
			}
			if err := r.add(atoms, map[string]int{symbol: 1}, last.count); err != nil {
				return nil, last, err
			}
		case c == '(' || c == '[' || c == '{':
			begin := r.at
			if err := r.oxidation(); err != nil {
				return nil, last, err
			}
			if depth == mostNested {
				return nil, last, r.fault(begin, fmt.Sprintf("formula %q has more than %d brackets in one another", r.text, mostNested), "multiply the inner ones out")
			}
			r.at++
			end := map[rune]rune{'(': ')', '[': ']', '{': '}'}[c]
			inside, _, err := r.units(end, depth+1)
			if err != nil {
				return nil, last, err
			}
			if r.peek(0) != end {
				return nil, last, r.unclosed(begin, end)
			}
			r.at++
			last = lastUnit{units: last.units + 1, square: c == '[', count: 1}
			if depth == 0 && last.square && last.units == 1 && r.numberAndSign() {
				last.charge = true
				return inside, last, nil
			}
			if err := r.count(&last); err != nil {
				return nil, last, err
			}
			if err := r.add(atoms, inside, last.count); err != nil {
				return nil, last, err
			}
		case last.units == 0:
			return nil, last, r.nothing()
		default:
			return atoms, last, nil
		}
	}
}

// nothing says what stands where a formula, or one in brackets, should begin.
func (r *formulaReader) nothing() *FormulaError {
	c := r.peek(0)
	switch {
	case r.at == len(r.runes):
		return r.fault(r.at, fmt.Sprintf("formula %q ends where an element is due", r.text), "add what is missing, or leave out what is in front")
	case plainDigit(c) >= 0:
		return r.fault(r.at, fmt.Sprintf("the number %c in formula %q stands in front of its element", c, r.text), "write a count behind its element, and the mass of an isotope raised: ¹³C or ^13C")
	case strings.ContainsRune(")]}", c):
		return r.fault(r.at, fmt.Sprintf("the bracket %c in formula %q has nothing in front of it", c, r.text), "fill the brackets or leave them out")
	}
	return r.stray(r.at)
}

// stray says what does not belong at i.
func (r *formulaReader) stray(i int) *FormulaError {
	c := r.runes[i]
	quoted := fmt.Sprintf("%q in formula %q", c, r.text)
	switch {
	case unicode.IsSpace(c):
		return r.fault(i, fmt.Sprintf("formula %q has a space in it", r.text), "leave it out; a charge is written SO4^2-")
	case c == '.' || c == '*':
		return r.fault(i, quoted+" does not join two formulas", "join them with a middle dot, such as CuSO4·5H2O, and give whole numbers only")
	case strings.ContainsRune(")]}", c):
		return r.fault(i, quoted+" closes no bracket that was opened so", "open it, or leave it out")
	case strings.ContainsRune("=#≡–—", c):
		return r.fault(i, quoted+" is not read: a formula has no bonds", "write atoms and counts only, such as C2H4")
	case unicode.IsLower(c) && atomicNumber[string(unicode.ToUpper(c))] > 0:
		return r.fault(i, quoted+" is not an element", fmt.Sprintf("write symbols with a capital, such as %c", unicode.ToUpper(c)))
	case c == '^' || raisedDigit(c) >= 0:
		return r.fault(i, quoted+" begins neither a charge nor an isotope", "write a charge as SO4^2- and an isotope as ^13C")
	}
	if direction, _ := sign(c); direction != 0 {
		return r.fault(i, quoted+" has no atoms in front of it", "write the charge once, at the end")
	}
	return r.fault(i, quoted+" is not read", "write symbols of elements, counts, brackets and a charge at the end, such as NH4+")
}

// massAhead tells whether the mass of an isotope comes: ¹³C or ^13C.
func (r *formulaReader) massAhead() bool {
	i, n := r.at, 0
	if r.peek(0) == '^' {
		i++
		n = r.digitsAt(i, plainDigit)
	} else {
		n = r.digitsAt(i, raisedDigit)
	}
	return n > 0 && i+n < len(r.runes) && unicode.IsLetter(r.runes[i+n])
}

// symbol reads one symbol, with the mass in front of it if there is one.
func (r *formulaReader) symbol(mass bool) (string, error) {
	begin, nucleons := r.at, 0
	if mass {
		digit := raisedDigit
		if r.peek(0) == '^' {
			r.at++
			digit = plainDigit
		}
		n, err := r.number(digit)
		if err != nil {
			return "", err
		}
		nucleons = n
		if c := r.peek(0); c < 'A' || c > 'Z' {
			return "", r.stray(r.at)
		}
	}
	start := r.at
	r.at++
	for c := r.peek(0); c >= 'a' && c <= 'z'; c = r.peek(0) {
		r.at++
	}
	s := string(r.runes[start:r.at])
	z := atomicNumber[s]
	if z == 0 {
		return "", r.unknown(start, s)
	}
	if !mass {
		return s, nil
	}
	// No nucleus has fewer nucleons than protons, and none that is known has
	// more than three a proton and a few (hydrogen 7, helium 10).
	if nucleons < z || nucleons > 3*z+4 || s == "D" || s == "T" {
		return "", r.fault(begin, fmt.Sprintf("%q in formula %q is no isotope", string(r.runes[begin:r.at]), r.text), "write the whole number of its protons and neutrons raised in front of the element, such as ¹³C")
	}
	switch {
	case s == "H" && nucleons == 2:
		return "D", nil
	case s == "H" && nucleons == 3:
		return "T", nil
	}
	return raised(nucleons) + s, nil
}

// unknown says what a symbol that is no element may have been meant to be.
func (r *formulaReader) unknown(at int, s string) *FormulaError {
	fix := "write symbols of elements only, with a capital; write groups and ligands out"
	before := ""
	if at > 0 {
		before = string(r.runes[at-1]) + strings.ToLower(s)
	}
	switch {
	case groupAtoms[s] != "":
		fix = fmt.Sprintf("write the group out: %s is %s", s, groupAtoms[s])
	case atomicNumber[before] > 0:
		fix = fmt.Sprintf("did you mean %s?", before)
	}
	return r.fault(at, fmt.Sprintf("%q in formula %q is not an element", s, r.text), fix)
}

// oxidation refuses an oxidation number in round brackets.
func (r *formulaReader) oxidation() error {
	if r.peek(0) != '(' {
		return nil
	}
	n := 1
	for r.peek(n) != 0 && strings.ContainsRune("IVX0", r.peek(n)) {
		n++
	}
	inside := string(r.runes[r.at+1 : r.at+n])
	switch inside {
	case "0", "I", "II", "III", "IV", "V", "VI", "VII", "VIII", "IX":
	default:
		return nil
	}
	if r.peek(n) != ')' {
		return nil
	}
	if next := r.peek(n + 1); plainDigit(next) >= 0 || loweredDigit(next) >= 0 || next == '_' {
		return nil // counted, and so atoms
	}
	fix := "leave it out and give the charge of the whole, such as Cu^+"
	if inside == "I" || inside == "V" {
		fix += fmt.Sprintf("; if the element %s is meant, leave out the brackets", inside)
	}
	return r.fault(r.at, fmt.Sprintf("(%s) in formula %q reads as an oxidation number, which says nothing of atoms or of the charge of the whole", inside, r.text), fix)
}

// count reads the number behind a unit.
func (r *formulaReader) count(u *lastUnit) error {
	u.count = 1
	digit := plainDigit
	c := r.peek(0)
	switch {
	case c == '_':
		r.at++
		if r.digitsAt(r.at, plainDigit) == 0 {
			return r.fault(r.at-1, fmt.Sprintf("the _ in formula %q has no number behind it", r.text), "write a count as H_2 or H2")
		}
	case plainDigit(c) >= 0:
		u.number = r.at
	case loweredDigit(c) >= 0:
		digit = loweredDigit
	default:
		return nil
	}
	n, err := r.number(digit)
	u.count = n
	return err
}

// unclosed says what keeps a bracket from closing.
func (r *formulaReader) unclosed(begin int, end rune) *FormulaError {
	c := r.peek(0)
	direction, _ := sign(c)
	switch {
	case direction != 0 || c == '^' || raisedDigit(c) >= 0:
		return r.fault(r.at, fmt.Sprintf("formula %q has a charge inside its brackets", r.text), "write the charge of the whole, once, at the end")
	case r.at < len(r.runes) && !strings.ContainsRune(")]}", c):
		return r.stray(r.at)
	}
	return r.fault(begin, fmt.Sprintf("the bracket %c in formula %q is not closed", r.runes[begin], r.text), fmt.Sprintf("close it with %c", end))
}
