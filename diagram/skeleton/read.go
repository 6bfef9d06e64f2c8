package skeleton

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"
)

// Read reads a molfile and lays it out. Errors are of type *Error.
func Read(text []byte) (*Molecule, error) {
	m, err := read(text)
	if err != nil {
		return nil, err
	}
	return m, nil
}

func read(text []byte) (*Molecule, *Error) {
	if len(text) > MaxBytes {
		return nil, place{}.fault("give one molecule alone", "the molfile has %d bytes, more than %d", len(text), MaxBytes)
	}
	r := &reader{m: &Molecule{}}
	s := strings.TrimPrefix(string(text), "\ufeff")
	s = strings.ReplaceAll(strings.ReplaceAll(s, "\r\n", "\n"), "\r", "\n")
	r.lines = strings.Split(strings.TrimSuffix(s, "\n"), "\n")
	for i, l := range r.lines {
		if len(l) > maxLine {
			return nil, place{i + 1, maxLine}.fault("break it, or take it out", "the line has %d bytes, more than %d", len(l), maxLine)
		}
	}
	if len(r.lines) < 4 {
		return nil, place{len(r.lines), 1}.fault("a molfile opens with three lines of heading and the line of counts", "the file ends after %d lines", len(r.lines))
	}
	r.m.Name = printable(strings.TrimSpace(r.lines[0]))
	r.at = 3
	counts := r.lines[3]
	version := ""
	if len(counts) > 33 {
		version = strings.TrimSpace(counts[33:])
	} else if f := strings.Fields(counts); len(f) > 0 && strings.HasPrefix(f[len(f)-1], "V") {
		version = f[len(f)-1]
	}
	var err *Error
	switch version {
	case "V2000", "": // files older than the stamp have the same columns
		err = r.v2000()
	case "V3000":
		err = r.v3000()
	default:
		err = place{4, 34}.fault("write V2000 or V3000 there", "the version of the molfile is %q", version)
	}
	if err == nil {
		err = r.rest()
	}
	if err == nil {
		err = r.m.settle()
	}
	if err != nil {
		return nil, err
	}
	return r.m, nil
}

// settle does what both versions share once all is read.
func (m *Molecule) settle() *Error {
	m.connect()
	if err := m.flatten(); err != nil {
		return err
	}
	wants, err := m.alternate()
	if err != nil {
		return err
	}
	m.hydrogens(wants)
	m.Formula = m.formula()
	return m.arrange()
}

type reader struct {
	m     *Molecule
	lines []string
	at    int // the line to read next, from 0
}

// line gives the next line.
func (r *reader) line(want string) (string, *Error) {
	if r.at >= len(r.lines) {
		return "", place{len(r.lines), 1}.fault("is the file complete?", "the file ends where %s should stand", want)
	}
	r.at++
	return r.lines[r.at-1], nil
}

// rest looks at what follows M  END: data of a collection, or a second molecule.
func (r *reader) rest() *Error {
	for ; r.at < len(r.lines); r.at++ {
		l := strings.TrimSpace(r.lines[r.at])
		if l == "" {
			continue
		}
		if l != "$$$$" {
			r.m.note("data behind the molecule")
			continue
		}
		for k := r.at + 1; k < len(r.lines); k++ {
			if strings.TrimSpace(r.lines[k]) != "" {
				return place{k + 1, 1}.fault("keep one molecule in a file", "a second molecule begins")
			}
		}
	}
	return nil
}

const search = "take it out: it belongs to a search, and a search has no formula"

// label checks the type of an atom.
func (r *reader) label(a *atom, symbol string) *Error {
	a.symbol = symbol
	switch {
	case symbol == "":
		return a.at.fault("write the element, or R#", "the atom has no symbol")
	case !letters(symbol):
		return a.at.fault("write the element, or a short name of letters", "the atom has the symbol %q", symbol)
	case elements[symbol]:
		return nil
	case symbol == "R#" || symbol == "R":
		a.symbol = "R"
		return nil
	case symbol == "L" || symbol == "A" || symbol == "Q" || symbol == "LP" || strings.HasPrefix(symbol, "[") || strings.HasPrefix(symbol, "NOT"):
		return a.at.fault("write an element, R# or *", "the atom %q stands for a list or for any atom in a search", symbol)
	case len([]rune(symbol)) > maxText:
		return a.at.fault("shorten it", "the name of the atom has %d letters, more than %d", len([]rune(symbol)), maxText)
	}
	if n, err := strconv.Atoi(strings.TrimPrefix(symbol, "R")); symbol[0] == 'R' && err == nil && n > 0 && n < 1000 {
		a.symbol, a.group = "R", n
		return nil
	}
	if proper := strings.ToUpper(symbol[:1]) + strings.ToLower(symbol[1:]); elements[proper] {
		if _, ok := tokens(symbol); !ok || len(symbol) == 2 && !elements[symbol[1:]] { // CO and CN are short names, CL and BR slips
			return a.at.fault(fmt.Sprintf("write %q", proper), "the atom has the symbol %q", symbol)
		}
	}
	return nil
}

// add checks a bond between atoms given from 0.
func (r *reader) add(b bond) *Error {
	switch {
	case b.order >= 5 && b.order <= 8:
		return b.at.fault("write 1 to 4, 9 (dative) or 10 (hydrogen)", "a bond of type %d belongs to a search", b.order)
	case !(b.order >= 1 && b.order <= 4 || b.order == dative || b.order == hydrogen):
		return b.at.fault("write 1 to 4, 9 (dative) or 10 (hydrogen)", "a bond of type %d is not known", b.order)
	case b.a == b.b:
		return b.at.fault("name two atoms", "the bond joins atom %d to itself", b.a+1)
	case b.look != plain && b.order != single && !(b.order == double && b.look == wavy):
		return b.at.fault("keep wedges for single bonds", "a bond of type %d has a wedge", b.order)
	}
	r.m.bonds = append(r.m.bonds, b)
	return nil
}

// twice looks for two bonds between the same atoms.
func (m *Molecule) twice() *Error {
	seen := map[[2]int]bool{}
	for _, b := range m.bonds {
		pair := [2]int{min(b.a, b.b), max(b.a, b.b)}
		if seen[pair] {
			return b.at.fault("keep one of them", "atoms %d and %d have two bonds between them", b.a+1, b.b+1)
		}
		seen[pair] = true
	}
	return nil
}

// group refuses kinds of S-groups that change what the molecule is.
func (r *reader) group(kind string, at place) *Error {
	switch kind {
	case "SUP", "DAT", "GEN":
		r.m.note("groups (their atoms are drawn in full)")
		return nil
	}
	return at.fault("draw the atoms themselves and take the group out", "a group of kind %q (a polymer, mixture or multiple) is not drawn", kind)
}

func whole(s string) (int, bool) {
	n, err := strconv.Atoi(strings.TrimPrefix(s, "+"))
	return n, err == nil && !strings.HasPrefix(s, "+-")
}

func real(s string) (float64, bool) {
	if strings.ContainsAny(s, "xXpPnNiI_") { // no hexadecimals, no inf, no nan
		return 0, false
	}
	v, err := strconv.ParseFloat(s, 64)
	return v, err == nil && math.Abs(v) <= 1e6
}

// letters reports whether s can be shown as a short name.
func letters(s string) bool {
	if !utf8.ValidString(s) {
		return false
	}
	for _, c := range s {
		if !unicode.IsPrint(c) || c == utf8.RuneError {
			return false
		}
	}
	return true
}

func printable(s string) string {
	return strings.TrimSpace(strings.Map(func(c rune) rune {
		if c == utf8.RuneError || !unicode.IsPrint(c) {
			return -1
		}
		return c
	}, s))
}
