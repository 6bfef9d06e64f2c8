package skeleton

import (
	"fmt"
	"slices"
	"strings"
	"unicode/utf8"
)

// columns is a line of fixed columns.
type columns struct {
	text string
	line int
}

// field gives the text of n columns from the column from (from 1).
func (c columns) field(from, n int) string {
	if from > len(c.text) {
		return ""
	}
	return strings.TrimSpace(c.text[from-1 : min(len(c.text), from-1+n)])
}

func (c columns) place(from int) place {
	return place{c.line, 1 + utf8.RuneCountInString(c.text[:min(len(c.text), from-1)])}
}

// number reads a whole number; empty columns are 0.
func (c columns) number(from, n int, what string) (int, *Error) {
	s := c.field(from, n)
	if s == "" {
		return 0, nil
	}
	v, ok := whole(s)
	if !ok {
		return 0, c.place(from).fault(fmt.Sprintf("write a whole number in columns %d to %d", from, from+n-1), "%s is %q", what, s)
	}
	return v, nil
}

// zero refuses columns that must be empty.
func (c columns) zero(from, n int, what, fix string) *Error {
	v, err := c.number(from, n, what)
	if err == nil && v != 0 {
		err = c.place(from).fault(fix, "%s is %d", what, v)
	}
	return err
}

func (r *reader) columns(want string) (columns, *Error) {
	s, err := r.line(want)
	return columns{s, r.at}, err
}

func (r *reader) v2000() *Error {
	head, _ := r.columns("the line of counts") // read was sure of it
	atoms, err := head.number(1, 3, "the number of atoms")
	if err != nil {
		return err
	}
	bonds, err := head.number(4, 3, "the number of bonds")
	if err != nil {
		return err
	}
	if err := counts(atoms, bonds, head.place(1)); err != nil {
		return err
	}
	if err := head.zero(7, 3, "the number of atom lists", search); err != nil {
		return err
	}
	if err := head.zero(16, 3, "the number of text entries", "take the texts out: only the molecule is drawn"); err != nil {
		return err
	}
	for range atoms {
		if err := r.atom2000(); err != nil {
			return err
		}
	}
	for range bonds {
		if err := r.bond2000(); err != nil {
			return err
		}
	}
	if err := r.m.twice(); err != nil {
		return err
	}
	return r.properties()
}

func counts(atoms, bonds int, at place) *Error {
	switch {
	case atoms < 1:
		return at.fault("give at least one atom", "the molecule has %d atoms", atoms)
	case atoms > MaxAtoms:
		return at.fault("draw a part of it, or put short names in place of groups", "the molecule has %d atoms, more than %d", atoms, MaxAtoms)
	case bonds < 0 || bonds > MaxBonds:
		return at.fault(fmt.Sprintf("give 0 to %d", MaxBonds), "the molecule has %d bonds", bonds)
	}
	return nil
}

// charges are the codes of the atom line; 4 is a doublet.
var charges = []int{0, 3, 2, 1, 0, -1, -2, -3}

func (r *reader) atom2000() *Error {
	c, err := r.columns(fmt.Sprintf("atom %d", len(r.m.atoms)+1))
	if err != nil {
		return err
	}
	a := atom{valence: -1, at: c.place(32)}
	for k, v := range []*float64{&a.x, &a.y, &a.z} {
		s, ok := c.field(1+10*k, 10), false
		if *v, ok = real(s); !ok {
			return c.place(1+10*k).fault(fmt.Sprintf("write a number in columns %d to %d", 1+10*k, 10+10*k), "the coordinate %c of atom %d is %q", "xyz"[k], len(r.m.atoms)+1, s)
		}
	}
	if err := r.label(&a, c.field(32, 3)); err != nil {
		return err
	}
	var offset, code, valence int
	for _, f := range []struct {
		from, n int
		what    string
		into    *int
	}{{35, 2, "the mass difference", &offset}, {37, 3, "the charge code", &code}, {49, 3, "the valence", &valence}} {
		if *f.into, err = c.number(f.from, f.n, f.what); err != nil {
			return err
		}
	}
	if code < 0 || code >= len(charges) {
		return c.place(37).fault("write 0 to 7, or a line M  CHG", "the charge code is %d", code)
	}
	a.charge = charges[code]
	if code == 4 {
		a.radical = 1
	}
	if offset != 0 {
		base, ok := natural[a.symbol]
		if !ok || offset < -3 || offset > 4 {
			return c.place(35).fault("write its mass in a line M  ISO", "the mass difference of atom %d (%s) is %d", len(r.m.atoms)+1, a.symbol, offset)
		}
		a.mass = base + offset
	}
	switch {
	case valence == 15:
		a.valence = 0
	case valence < 0 || valence > 15:
		return c.place(49).fault("write 0 (not stated), 1 to 14, or 15 (none)", "the valence is %d", valence)
	case valence > 0:
		a.valence = valence
	}
	if err := c.zero(43, 3, "the hydrogen count", search); err != nil {
		return err
	}
	if n, err := c.number(61, 3, "the map number"); err != nil {
		return err
	} else if n != 0 {
		r.m.note("atom map numbers")
	}
	r.m.atoms = append(r.m.atoms, a)
	return nil
}

func (r *reader) bond2000() *Error {
	c, err := r.columns(fmt.Sprintf("bond %d", len(r.m.bonds)+1))
	if err != nil {
		return err
	}
	var v [4]int
	for k, what := range []string{"the first atom", "the second atom", "the type", "the stereo code"} {
		if v[k], err = c.number(1+3*k, 3, what); err != nil {
			return err
		}
	}
	b := bond{order: order(v[2]), at: c.place(1)}
	for k, p := range []*int{&b.a, &b.b} {
		if v[k] < 1 || v[k] > len(r.m.atoms) {
			return c.place(1+3*k).fault(fmt.Sprintf("name an atom from 1 to %d", len(r.m.atoms)), "bond %d names atom %d", len(r.m.bonds)+1, v[k])
		}
		*p = v[k] - 1
	}
	switch {
	case v[3] == 0:
	case v[3] == 1 && b.order != double:
		b.look = wedge
	case v[3] == 4 && b.order != double, v[3] == 3 && b.order == double:
		b.look = wavy
	case v[3] == 6 && b.order != double:
		b.look = hash
	default:
		return c.place(10).fault("write 0, for a single bond 1 (wedge), 4 (either) or 6 (hash), for a double bond 3 (either)", "the stereo code of a bond of type %d is %d", b.order, v[3])
	}
	if err := c.zero(16, 3, "the topology of a bond", search); err != nil {
		return err
	}
	return r.add(b)
}

// drawn over: lines of S-groups that only place or name a group.
var groupLines = strings.Fields("SLB SST SCN SDS SAL SBL SPA SMT SDI SBV SDT SDD SCD SED SPL SNC CRS SCL SAP SBT SPR SNM")

// properties reads the lines behind the bonds, to M  END.
func (r *reader) properties() *Error {
	charged, masses := false, false
	for {
		c, err := r.columns("M  END")
		if err != nil {
			return err
		}
		if strings.TrimRight(c.text, " ") == "M  END" {
			return nil
		}
		switch {
		case strings.HasPrefix(c.text, "A  "):
			i, err := r.index(c, 4)
			if err != nil {
				return err
			}
			text, err := r.line("the alias of an atom")
			if err != nil {
				return err
			}
			text = strings.TrimSpace(text)
			if text == "" || !letters(text) || utf8.RuneCountInString(text) > maxText {
				return place{r.at, 1}.fault(fmt.Sprintf("write 1 to %d letters", maxText), "the alias of atom %d is %q", i+1, text)
			}
			r.m.atoms[i].alias = text
		case strings.HasPrefix(c.text, "V  "):
			r.m.note("values of atoms")
		case strings.HasPrefix(c.text, "S  SKP"):
			n, err := c.number(7, 3, "the number of lines to skip")
			if err != nil {
				return err
			}
			if n < 0 || n > len(r.lines)-r.at {
				return c.place(7).fault("give the number of lines that follow", "%d lines are to be skipped", n)
			}
			r.at += n
			r.m.note("skipped lines")
		case strings.HasPrefix(c.text, "M  CHG"), strings.HasPrefix(c.text, "M  RAD"):
			if !charged { // the lines supersede all charges and radicals of the atom lines
				for i := range r.m.atoms {
					r.m.atoms[i].charge, r.m.atoms[i].radical = 0, 0
				}
				charged = true
			}
			err = r.pairs(c, r.set(c.text[3:6]))
		case strings.HasPrefix(c.text, "M  ISO"):
			if !masses {
				for i := range r.m.atoms {
					r.m.atoms[i].mass = 0
				}
				masses = true
			}
			err = r.pairs(c, r.set("MASS"))
		case strings.HasPrefix(c.text, "M  RGP"):
			err = r.pairs(c, r.set("RGROUPS"))
		case strings.HasPrefix(c.text, "M  STY"):
			for k := 0; k < (len(c.text)-9)/8 && err == nil; k++ {
				err = r.group(c.field(15+8*k, 3), c.place(15+8*k))
			}
		case len(c.text) >= 6 && strings.HasPrefix(c.text, "M  ") && slices.Contains(groupLines, c.text[3:6]):
			r.m.note("groups (their atoms are drawn in full)")
		case strings.TrimSpace(c.text) == "":
			err = c.place(1).fault("end the molecule with M  END", "an empty line stands among the properties")
		default:
			err = c.place(1).fault("take the line out if the formula holds without it", "the property line %q is not drawn", short(c.text))
		}
		if err != nil {
			return err
		}
	}
}

func short(s string) string {
	s = strings.TrimSpace(s)
	if r := []rune(s); len(r) > 24 {
		s = string(r[:24]) + "…"
	}
	return s
}

// index reads the number of an atom and gives it from 0.
func (r *reader) index(c columns, from int) (int, *Error) {
	n, err := c.number(from, 3, "the atom")
	if err == nil && (n < 1 || n > len(r.m.atoms)) {
		err = c.place(from).fault(fmt.Sprintf("name an atom from 1 to %d", len(r.m.atoms)), "the line names atom %d", n)
	}
	return n - 1, err
}

// pairs reads the atoms and values of a property line.
func (r *reader) pairs(c columns, set func(i, v int, at place) *Error) *Error {
	n, err := c.number(7, 3, "the number of entries")
	if err != nil {
		return err
	}
	if n < 1 || n > 8 || len(strings.TrimRight(c.text, " ")) > 9+8*n || len(strings.TrimRight(c.text, " ")) <= 9+8*(n-1)+4 {
		return c.place(7).fault("give 1 to 8 entries of an atom and a value, four columns each", "the line counts %d entries", n)
	}
	for k := range n {
		i, err := r.index(c, 11+8*k)
		if err != nil {
			return err
		}
		v, err := c.number(15+8*k, 3, "the value")
		if err != nil {
			return err
		}
		if err := set(i, v, c.place(15+8*k)); err != nil {
			return err
		}
	}
	return nil
}

// set gives what puts a value of a property on an atom, for both versions.
func (r *reader) set(key string) func(i, v int, at place) *Error {
	return func(i, v int, at place) *Error {
		a := &r.m.atoms[i]
		switch key {
		case "CHG":
			if v < -15 || v > 15 {
				return at.fault("give -15 to 15", "the charge of atom %d is %d", i+1, v)
			}
			a.charge = v
		case "RAD":
			if v < 0 || v > 3 {
				return at.fault("give 1 (singlet), 2 (doublet) or 3 (triplet)", "the radical of atom %d is %d", i+1, v)
			}
			a.radical, a.singlet = []int{0, 2, 1, 2}[v], v == 1
		case "MASS":
			if v < 1 || v > 350 {
				return at.fault("give the mass number itself, such as 13", "the mass of atom %d is %d", i+1, v)
			}
			a.mass = v
		case "RGROUPS":
			if v < 1 || v > 999 || a.symbol != "R" {
				return at.fault("give an atom R# a number from 1 to 999", "atom %d (%s) has the R group %d", i+1, a.symbol, v)
			}
			a.group = v
		}
		return nil
	}
}
