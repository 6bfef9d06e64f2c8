package kinetics

import (
	"fmt"
	"slices"
	"strconv"
	"strings"
)

// Atom is one kind of atom of a formula, N times. D and T are kinds of their
// own beside H, and so is any isotope that is written with its mass, "¹³C":
// no elementary step turns one into another.
type Atom struct {
	Symbol string
	N      int
}

// Formula is what a species is made of.
type Formula struct {
	Atoms  []Atom // each kind once: C, H, then by symbol; by symbol alone without C
	Charge int    // in elementary charges
}

// FormulaError is a formula that cannot be read.
type FormulaError struct {
	Text string
	At   int    // rune offset in Text of what is wrong
	Msg  string // what is wrong, the value quoted
	Fix  string // what to write instead
}

func (e *FormulaError) Error() string { return e.Msg + "; " + e.Fix }

// ParseFormula reads the formula of one molecule or ion: "C6H10O", "NH4+",
// "SO4^2-", "H₂O", "[Fe(CN)6]³⁻", "CuSO4·5H2O", "¹³CO2", "e-". The error is a
// *FormulaError. The rules:
//
//   - Symbols are those of the 118 elements, D and T. A raised number in front
//     of a symbol is the mass of an isotope: ¹³C or ^13C; ²H is D and ³H is T.
//     Short names of groups (Me, Ph) are refused; Ac, Pr and Ts are elements.
//   - A number behind a symbol or a bracket is a count: 2, ₂ or _2. Brackets
//     are ( ), [ ] and { }.
//   - The charge stands at the end: raised (²⁻, ^2-, ^-2, ^{2-}), or as bare
//     signs (+, --). A number in front of a bare sign is a count where nothing
//     else is meant: one digit behind several symbols (NH4+, ClO4-), or any
//     number behind hydrogen (C15H25+). Behind square brackets around the whole
//     it is the charge: [Cu(NH3)4]2+. All others can be read two ways (Cu2+,
//     O2-, SO42-) and are refused.
//   - A dot between two formulas joins them, the second with a number of its
//     own: CuSO4·5H2O. A dot with no formula beside it marks a radical and
//     counts for nothing: ·OH, C10H16•+.
//   - An oxidation number, Cu(I), is refused: it says nothing of the charge of
//     the whole, and (I) could be iodine, as it is in CH2(I)2.
//   - e- is the electron.
func ParseFormula(text string) (Formula, error) {
	r := &formulaReader{text: text, runes: []rune(text)}
	if strings.TrimSpace(text) == "" {
		return Formula{}, r.fault(0, "the formula is empty", "write one such as C6H10O, or leave the key out")
	}
	if r.runes[0] == 'e' {
		r.at = 1
		charge, err := r.charge(lastUnit{})
		if err != nil {
			return Formula{}, err
		}
		if charge != -1 || r.at < len(r.runes) {
			return Formula{}, r.fault(0, fmt.Sprintf("%q is neither a formula nor the electron", text), `write the electron as e-, and symbols of elements with a capital, such as C6H10O`)
		}
		return Formula{Charge: -1}, nil
	}
	total, charge := map[string]int{}, 0
	for first := true; ; first = false {
		times := 1
		if first {
			r.radical()
			if n := r.digitsAt(r.at, plainDigit); n > 0 {
				number := string(r.runes[r.at : r.at+n])
				return Formula{}, r.fault(r.at, fmt.Sprintf("formula %q begins with the number %s, and a formula is of one molecule", text, number),
					"leave the number out, and write how many molecules take part in the reaction; the mass of an isotope is raised: ¹³C or ^13C")
			}
		} else {
			r.spaces()
			if r.digitsAt(r.at, plainDigit) > 0 {
				n, err := r.number(plainDigit)
				if err != nil {
					return Formula{}, err
				}
				times = n
				r.spaces()
			}
		}
		part, last, err := r.units(0, 0)
		if err != nil {
			return Formula{}, err
		}
		if r.radical() {
			last = lastUnit{} // its number is not in front of the sign
		}
		q, err := r.charge(last)
		if err != nil {
			return Formula{}, err
		}
		r.radical()
		if charge += times * q; charge > mostAtoms || charge < -mostAtoms {
			return Formula{}, r.fault(0, fmt.Sprintf("the charge of %q makes no sense", text), "correct the numbers")
		}
		if err := r.add(total, part, times); err != nil {
			return Formula{}, err
		}
		dot := r.at
		r.spaces()
		if r.at == len(r.runes) && dot == r.at {
			break
		}
		if r.at == len(r.runes) || !isDot(r.runes[r.at]) {
			return Formula{}, r.stray(dot)
		}
		r.at++
	}
	return newFormula(total, charge), nil
}

func newFormula(atoms map[string]int, charge int) Formula {
	f := Formula{Charge: charge}
	for symbol, n := range atoms {
		if n != 0 {
			f.Atoms = append(f.Atoms, Atom{symbol, n})
		}
	}
	place := func(symbol string) string {
		if atoms["C"] != 0 && symbol == "C" {
			return "0"
		}
		if atoms["C"] != 0 && symbol == "H" {
			return "1"
		}
		return symbol
	}
	slices.SortFunc(f.Atoms, func(a, b Atom) int { return strings.Compare(place(a.Symbol), place(b.Symbol)) })
	return f
}

// String writes the formula so that ParseFormula reads it again: "C6H9O⁻". No
// atoms at all are "e⁻", "2 e⁻", "a charge of +1" or "nothing".
func (f Formula) String() string {
	if len(f.Atoms) == 0 {
		switch {
		case f.Charge == 0:
			return "nothing"
		case f.Charge == -1:
			return "e⁻"
		case f.Charge < 0:
			return strconv.Itoa(-f.Charge) + " e⁻"
		}
		return "a charge of " + chargeText(f.Charge)
	}
	var b strings.Builder
	for _, a := range f.Atoms {
		b.WriteString(a.Symbol)
		if a.N != 1 {
			b.WriteString(strconv.Itoa(a.N))
		}
	}
	if f.Charge == 0 {
		return b.String()
	}
	n, sign := f.Charge, "⁺"
	if n < 0 {
		n, sign = -n, "⁻"
	}
	if n != 1 {
		b.WriteString(raised(n))
	}
	return b.String() + sign
}

const raisedDigits, loweredDigits = "⁰¹²³⁴⁵⁶⁷⁸⁹", "₀₁₂₃₄₅₆₇₈₉"

func raised(n int) string {
	var b strings.Builder
	for _, d := range strconv.Itoa(n) {
		b.WriteRune([]rune(raisedDigits)[d-'0'])
	}
	return b.String()
}

// chargeText prints a charge with its sign: "+1", "−2".
func chargeText(q int) string {
	if q < 0 {
		return "−" + strconv.Itoa(-q)
	}
	return "+" + strconv.Itoa(q)
}

// symbols are the elements by atomic number, from 1.
var symbols = strings.Fields(`H He Li Be B C N O F Ne Na Mg Al Si P S Cl Ar K Ca Sc Ti V Cr Mn Fe Co Ni Cu Zn Ga Ge As Se Br Kr
	Rb Sr Y Zr Nb Mo Tc Ru Rh Pd Ag Cd In Sn Sb Te I Xe Cs Ba La Ce Pr Nd Pm Sm Eu Gd Tb Dy Ho Er Tm Yb Lu
	Hf Ta W Re Os Ir Pt Au Hg Tl Pb Bi Po At Rn Fr Ra Ac Th Pa U Np Pu Am Cm Bk Cf Es Fm Md No Lr
	Rf Db Sg Bh Hs Mt Ds Rg Cn Nh Fl Mc Lv Ts Og`)

var atomicNumber = func() map[string]int {
	m := map[string]int{"D": 1, "T": 1}
	for i, s := range symbols {
		m[s] = i + 1
	}
	return m
}()

// groupAtoms is what to write for common short names of groups.
var groupAtoms = map[string]string{
	"Me": "CH3", "Et": "C2H5", "Bu": "C4H9", "Ph": "C6H5", "Bn": "C7H7", "Bz": "C7H5O",
	"Cy": "C6H11", "Cp": "C5H5", "Tf": "CF3SO2", "Ms": "CH3SO2", "Boc": "C5H9O2",
}
