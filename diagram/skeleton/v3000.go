package skeleton

import (
	"fmt"
	"strings"
	"unicode/utf8"
)

// token is a word of a V3000 line, and where it stands.
type token struct {
	text string
	at   place
}

// sentence is a line of V3000 with its continuations, in words.
type sentence []token

func (s sentence) is(words ...string) bool {
	if len(s) < len(words) {
		return false
	}
	for i, w := range words {
		if s[i].text != w {
			return false
		}
	}
	return true
}

const opening = "M  V30 "

// sentence reads the next line, joined with those it goes on in.
func (r *reader) sentence(want string) (sentence, *Error) {
	var text []rune
	var at []place
	for {
		l, err := r.line(want)
		if err != nil {
			return nil, err
		}
		body, ok := strings.CutPrefix(l, opening)
		if !ok {
			return nil, place{r.at, 1}.fault(fmt.Sprintf("open the line with %q", opening), "%q stands where %s should", short(l), want)
		}
		body = strings.TrimRight(body, " \t")
		body, more := strings.CutSuffix(body, "-")
		col := len(opening)
		for _, c := range body {
			col++
			text, at = append(text, c), append(at, place{r.at, col})
		}
		if len(text) > 20*maxLine {
			return nil, place{r.at, 1}.fault("shorten it", "the line goes on over more than %d letters", 20*maxLine)
		}
		if !more {
			return cutWords(text, at, r.at)
		}
	}
}

// cutWords parts text at spaces outside quotes and brackets; quotes go, and stand for
// themselves when doubled.
func cutWords(text []rune, at []place, line int) (sentence, *Error) {
	var out sentence
	for i := 0; i < len(text); {
		if text[i] == ' ' || text[i] == '\t' {
			i++
			continue
		}
		var b strings.Builder
		from, depth, quoted := at[i], 0, false
		for ; i < len(text) && (quoted || depth > 0 || text[i] != ' ' && text[i] != '\t'); i++ {
			switch c := text[i]; {
			case c == '"' && quoted && i+1 < len(text) && text[i+1] == '"':
				b.WriteByte('"')
				i++
			case c == '"':
				quoted = !quoted
			case quoted:
				b.WriteRune(c)
			default:
				switch c {
				case '(', '[':
					depth++
				case ')', ']':
					depth--
				}
				b.WriteRune(c)
			}
		}
		if quoted || depth > 0 {
			return nil, from.fault("close it", "a quote or bracket opens and does not close")
		}
		out = append(out, token{b.String(), from})
	}
	if len(out) == 0 {
		return nil, place{line, 1}.fault("take it out", "the line is empty")
	}
	return out, nil
}

func (r *reader) v3000() *Error {
	r.at++ // the counts of the line are 0
	s, err := r.sentence("BEGIN CTAB")
	if err != nil {
		return err
	}
	if !s.is("BEGIN", "CTAB") {
		return s[0].at.fault("begin with BEGIN CTAB", "%q stands where BEGIN CTAB should", s[0].text)
	}
	if s, err = r.sentence("COUNTS"); err != nil {
		return err
	}
	var n [3]int
	ok := s.is("COUNTS") && len(s) >= 4
	for k := range n {
		if ok {
			n[k], ok = whole(s[1+k].text)
		}
	}
	if !ok {
		return s[0].at.fault("write COUNTS and the numbers of atoms, bonds, groups, 3D objects and the chiral flag", "the counts cannot be read")
	}
	if err := counts(n[0], n[1], s[1].at); err != nil {
		return err
	}
	t := table{r: r, index: map[int]int{}}
	if err := r.section("ATOM", n[0], t.atom); err != nil {
		return err
	}
	if n[1] > 0 {
		if err := r.section("BOND", n[1], t.bond); err != nil {
			return err
		}
	}
	if err := r.m.twice(); err != nil {
		return err
	}
	if err := t.middles(); err != nil {
		return err
	}
	return r.behind()
}

// section reads n lines between BEGIN and END.
func (r *reader) section(name string, n int, each func(sentence) *Error) *Error {
	s, err := r.sentence("BEGIN " + name)
	if err != nil {
		return err
	}
	if !s.is("BEGIN", name) {
		return s[0].at.fault("begin the part with BEGIN "+name, "%q stands where BEGIN %s should", s[0].text, name)
	}
	for i := 0; ; i++ {
		if s, err = r.sentence("END " + name); err != nil {
			return err
		}
		if s.is("END", name) {
			if i != n {
				return s[0].at.fault("let the counts and the lines agree", "%d lines stand in the part %s, and the counts say %d", i, name, n)
			}
			return nil
		}
		if i == n {
			return s[0].at.fault("let the counts and the lines agree", "more lines stand in the part %s than the %d of the counts", name, n)
		}
		if err := each(s); err != nil {
			return err
		}
	}
}

// behind reads what may follow the bonds, to M  END.
func (r *reader) behind() *Error {
	for {
		s, err := r.sentence("END CTAB")
		if err != nil {
			return err
		}
		switch {
		case s.is("END", "CTAB"):
			l, err := r.line("M  END")
			if err != nil {
				return err
			}
			if strings.TrimSpace(l) != "M  END" {
				return place{r.at, 1}.fault("keep one table, without definitions of R groups or templates, and end with M  END", "%q stands where M  END should", short(l))
			}
			return nil
		case s.is("BEGIN", "SGROUP"):
			err = r.until("SGROUP", func(s sentence) *Error {
				if len(s) < 2 {
					return s[0].at.fault("write its number and kind", "the group has no kind")
				}
				if s.is("DEFAULT") {
					return nil
				}
				return r.group(s[1].text, s[1].at)
			})
		case s.is("BEGIN", "COLLECTION"):
			r.m.note("collections, such as those of relative stereochemistry")
			err = r.until("COLLECTION", func(sentence) *Error { return nil })
		default:
			err = s[0].at.fault("take the part out", "a part that opens with %q is not drawn", short(s[0].text))
		}
		if err != nil {
			return err
		}
	}
}

func (r *reader) until(name string, each func(sentence) *Error) *Error {
	for {
		s, err := r.sentence("END " + name)
		if err != nil || s.is("END", name) {
			return err
		}
		if err := each(s); err != nil {
			return err
		}
	}
}

// table knows the atoms by the numbers that the file gives them.
type table struct {
	r     *reader
	index map[int]int
	ends  []int // bonds to the middle of several atoms
}

func (t *table) atom(s sentence) *Error {
	if len(s) < 6 {
		return s[0].at.fault("write number, type, x, y, z and map number", "the atom has %d entries", len(s))
	}
	a := atom{valence: -1, at: s[1].at}
	n, ok := whole(s[0].text)
	if _, taken := t.index[n]; !ok || n < 1 || taken {
		return s[0].at.fault("number the atoms with whole numbers from 1, each once", "the number of an atom is %q", s[0].text)
	}
	for k, v := range []*float64{&a.x, &a.y, &a.z} {
		if *v, ok = real(s[2+k].text); !ok {
			return s[2+k].at.fault("write a number", "the coordinate %c of atom %d is %q", "xyz"[k], n, s[2+k].text)
		}
	}
	if err := t.r.label(&a, s[1].text); err != nil {
		return err
	}
	if s[5].text != "0" {
		t.r.m.note("atom map numbers")
	}
	t.index[n] = len(t.r.m.atoms)
	t.r.m.atoms = append(t.r.m.atoms, a)
	for _, w := range s[6:] {
		if err := t.atomKey(len(t.r.m.atoms)-1, w); err != nil {
			return err
		}
	}
	return nil
}

func (t *table) atomKey(i int, w token) *Error {
	key, value, _ := strings.Cut(w.text, "=")
	at := place{w.at.line, w.at.col + utf8.RuneCountInString(key) + 1}
	switch key {
	case "CHG", "RAD", "MASS", "VAL":
		v, ok := whole(value)
		if !ok {
			return at.fault("write a whole number", "%s is %q", key, value)
		}
		if key != "VAL" {
			if key == "MASS" && v == 0 {
				return nil
			}
			return t.r.set(key)(i, v, at)
		}
		if v < -1 || v > 14 {
			return at.fault("write 1 to 14, or -1 for none", "VAL is %d", v)
		}
		if v != 0 {
			t.r.m.atoms[i].valence = max(v, 0)
		}
	case "RGROUPS":
		list, ok := numbers(value)
		if !ok || len(list) != 1 {
			return at.fault("write one, such as (1 2)", "RGROUPS is %q", value)
		}
		return t.r.set(key)(i, list[0], at)
	case "CFG", "STBOX", "INVRET", "EXACHG", "ATTCHORD", "SEQID", "CLASS":
		if key != "CFG" && key != "STBOX" {
			t.r.m.note("marks of reactions and sequences")
		}
	default:
		if value == "0" {
			return nil
		}
		return w.at.fault("take it out if the formula holds without it", "the mark %q of an atom is not drawn", short(w.text))
	}
	return nil
}

func (t *table) bond(s sentence) *Error {
	if len(s) < 4 {
		return s[0].at.fault("write number, type and two atoms", "the bond has %d entries", len(s))
	}
	b := bond{at: s[0].at}
	kind, ok := whole(s[1].text)
	if !ok {
		return s[1].at.fault("write 1 to 4, 9 (dative) or 10 (hydrogen)", "the type of a bond is %q", s[1].text)
	}
	b.order = order(kind)
	for k, p := range []*int{&b.a, &b.b} {
		n, ok := whole(s[2+k].text)
		i, known := t.index[n]
		if !ok || !known {
			return s[2+k].at.fault("name an atom of the list", "the bond names the atom %q", s[2+k].text)
		}
		*p = i
	}
	for _, w := range s[4:] {
		key, value, _ := strings.Cut(w.text, "=")
		switch key {
		case "CFG":
			switch {
			case value == "0":
			case value == "1" && b.order != double:
				b.look = wedge
			case value == "2":
				b.look = wavy
			case value == "3" && b.order != double:
				b.look = hash
			default:
				return w.at.fault("write 0, 2 (either), or for a single bond 1 (wedge) or 3 (hash)", "CFG of a bond of type %d is %q", b.order, value)
			}
		case "ENDPTS":
			list, ok := numbers(value)
			for _, n := range list {
				_, known := t.index[n]
				ok = ok && known
			}
			if !ok || len(list) < 2 {
				return w.at.fault("name two or more atoms, such as (2 4 5)", "ENDPTS is %q", value)
			}
			t.ends = append(t.ends, len(t.r.m.bonds))
		case "ATTACH", "STBOX", "DISP":
		case "RXCTR":
			t.r.m.note("marks of reactions and sequences")
		default:
			if value == "0" {
				continue
			}
			return w.at.fault("take it out if the formula holds without it", "the mark %q of a bond is not drawn", short(w.text))
		}
	}
	return t.r.add(b)
}

// middles takes the label from the * that stands in the middle of several atoms.
func (t *table) middles() *Error {
	for _, k := range t.ends {
		b := t.r.m.bonds[k]
		a, o := &t.r.m.atoms[b.a], &t.r.m.atoms[b.b]
		switch {
		case a.symbol == "*":
			a.bare = true
		case o.symbol == "*":
			o.bare = true
		default:
			return b.at.fault("let one of its atoms be a * in their middle", "the bond to several atoms joins %s and %s", a.symbol, o.symbol)
		}
	}
	return nil
}

// numbers reads a list such as (2 4 5): how many, then each.
func numbers(s string) ([]int, bool) {
	s, ok := strings.CutPrefix(s, "(")
	s, ok2 := strings.CutSuffix(s, ")")
	f := strings.Fields(s)
	if !ok || !ok2 || len(f) < 2 {
		return nil, false
	}
	var out []int
	for _, w := range f {
		n, ok := whole(w)
		if !ok {
			return nil, false
		}
		out = append(out, n)
	}
	return out[1:], out[0] == len(out)-1
}
