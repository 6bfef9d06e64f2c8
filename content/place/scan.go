package place

import (
	"fmt"
	"strings"
	"unicode/utf8"
)

// MaxDepth is how deep lists and tables may nest, and how many parts a dotted
// key may have. It keeps a hostile text from exhausting the stack.
const MaxDepth = 200

// Scan finds the places of all keys of a TOML text. The root it returns is an
// Open entry with the top-level keys as its kids.
//
// For a text that the TOML reader accepts, the entries are exactly the keys and
// elements of the tree it decodes, unless Scan returns a Clash: the reader lets
// some keys through that cannot stand together. For any other text Scan goes as
// far as it can, and mostly returns the fault that stops it as its last.
func Scan(text string) (*Entry, []Fault) {
	s := &scanner{text: text, root: &Entry{Form: Open}}
	for _, m := range []string{mark, "\xff\xfe", "\xfe\xff"} {
		if strings.HasPrefix(text, m) {
			s.pos = len(m)
			break
		}
	}
	s.table, s.in = s.root, s.root
	if !s.characters() {
		return s.root, s.faults
	}
	for s.blank(); s.pos < len(s.text); s.blank() {
		ok := false
		if s.text[s.pos] == '[' {
			ok = s.header() && s.lineEnd()
		} else {
			ok = s.pair(s.table, top) && s.lineEnd()
		}
		if !ok {
			break
		}
	}
	return s.root, s.faults
}

// characters wants UTF-8 without control characters other than tabs and line ends.
func (s *scanner) characters() bool {
	for i := s.pos; i < len(s.text); {
		r, width := utf8.DecodeRuneInString(s.text[i:])
		switch {
		case r == utf8.RuneError && width == 1:
			return s.fail(i, fmt.Sprintf("the byte 0x%02X is not UTF-8", s.text[i]), "save the file as UTF-8")
		case r == '\r' && !strings.HasPrefix(s.text[i:], "\r\n"):
			return s.fail(i, "a carriage return stands without a line feed", "end lines with LF or CRLF")
		case r < ' ' && r != '\t' && r != '\n' && r != '\r' || r == 0x7f:
			return s.fail(i, fmt.Sprintf("the control character U+%04X stands in the text", r), "delete it")
		}
		i += width
	}
	return true
}

// where a value stands decides what ends it
type where byte

const (
	top     where = 0
	inList  where = '['
	inTable where = '{'
)

type scanner struct {
	text   string
	pos    int
	root   *Entry
	table  *Entry // the table that the last header opened
	in     *Entry // the entry in hand, for faults
	depth  int
	faults []Fault
}

type part struct {
	name string
	at   int
}

// peek returns the byte at the place in hand, or 0 at the end.
func (s *scanner) peek() byte {
	if s.pos < len(s.text) {
		return s.text[s.pos]
	}
	return 0
}

func (s *scanner) spaces() {
	for c := s.peek(); c == ' ' || c == '\t'; c = s.peek() {
		s.pos++
	}
}

// blank skips spaces, line ends and comments, and tells whether a line ended.
func (s *scanner) blank() (newLine bool) {
	for s.pos < len(s.text) {
		switch s.text[s.pos] {
		case ' ', '\t':
			s.pos++
		case '\n', '\r':
			newLine = true
			s.pos++
		case '#':
			s.pos = s.eol(s.pos)
		default:
			return newLine
		}
	}
	return newLine
}

// eol returns the offset of the end of the line.
func (s *scanner) eol(from int) int {
	if i := strings.IndexAny(s.text[from:], "\r\n"); i >= 0 {
		return from + i
	}
	return len(s.text)
}

// lineEnd wants nothing more on the line but a comment.
func (s *scanner) lineEnd() bool {
	s.spaces()
	if s.pos == len(s.text) || strings.IndexByte("\r\n#", s.text[s.pos]) >= 0 {
		return true
	}
	return s.trailing()
}

// header reads [a.b] or [[a.b]] and opens the table it names.
func (s *scanner) header() bool {
	start := s.pos
	s.pos++
	array := s.peek() == '['
	if array {
		s.pos++
	}
	s.in = s.root
	parts, ok := s.key(']')
	if !ok {
		return s.badHeader(start)
	}
	s.pos++ // ]
	if array {
		if s.peek() != ']' {
			return s.badHeader(start)
		}
		s.pos++
	}
	last := parts[len(parts)-1]
	t := s.descend(s.root, parts[:len(parts)-1], false)
	e := t.Kid(last.name)
	switch {
	case e == nil && array:
		e = t.add(&Entry{Key: last.name, KeyAt: last.at, At: start, End: start, Form: Tables})
		s.table = e.element(last.at, start, Open)
	case e == nil:
		s.table = t.add(&Entry{Key: last.name, KeyAt: last.at, At: start, End: start, Form: Open, headed: true})
	case array && e.Form == Tables:
		s.table = e.element(last.at, start, Open)
	case !array && e.Form == Open && !e.headed && !e.dotted:
		e.headed = true
		s.table = e
	default:
		s.table = &Entry{Key: last.name, Form: Open, parent: t} // what follows has no place in the tree
		s.in = s.table
		s.clashHeader(e, last, array)
	}
	s.in = s.table
	return true
}

// key reads the parts of a dotted key up to the byte that ends it, which it
// leaves. On failure the offset stands where the reading stopped.
func (s *scanner) key(end byte) ([]part, bool) {
	var parts []part
	for {
		s.spaces()
		p := part{at: s.pos}
		switch c := s.peek(); {
		case c == '"' || c == '\'':
			name, ok := s.quotedKey(c)
			if !ok {
				return parts, false
			}
			p.name = name
		default:
			for bare(s.peek()) {
				s.pos++
			}
			p.name = s.text[p.at:s.pos]
			if p.name == "" {
				return parts, false
			}
		}
		parts = append(parts, p)
		s.spaces()
		switch {
		case s.peek() == end:
			return parts, true
		case s.peek() != '.':
			return parts, false
		case len(parts) == MaxDepth:
			return parts, s.fail(parts[0].at, "a dotted key has too many parts", "nest less deeply")
		}
		s.pos++
	}
}

// pair reads key = value into table t.
func (s *scanner) pair(t *Entry, in where) bool {
	start := s.pos
	outer := s.in
	defer func() { s.in = outer }()
	parts, ok := s.key('=')
	if !ok {
		return s.badKey(start, in)
	}
	s.pos++ // =
	last := parts[len(parts)-1]
	t = s.descend(t, parts[:len(parts)-1], true)
	e := &Entry{Key: last.name, KeyAt: last.at, parent: t}
	s.in = e
	if t.Kid(last.name) != nil {
		s.clash(last.at, t.Kid(last.name).KeyAt, "the key "+quote(last.name)+" is given twice", "keep one of the two")
	} else {
		t.add(e)
	}
	return s.value(e, in)
}

// descend follows the parts of a key from t, making the tables it implies.
func (s *scanner) descend(t *Entry, parts []part, dotted bool) *Entry {
	for _, p := range parts {
		e := t.Kid(p.name)
		switch {
		case e == nil:
			t = t.add(&Entry{Key: p.name, KeyAt: p.at, At: p.at, End: p.at, Form: Open, dotted: dotted})
		case e.Form == Open:
			t = e
		case e.Form == Tables:
			t = e.Kids[len(e.Kids)-1]
		default:
			t = &Entry{Key: p.name, Form: Open, parent: t}
			s.in = t
			s.clashInside(e, p)
		}
	}
	return t
}

// value reads the value of e, which starts after spaces.
func (s *scanner) value(e *Entry, in where) bool {
	s.spaces()
	e.At = s.pos
	ok := true
	switch c := s.peek(); c {
	case '"', '\'':
		e.Form = String
		if strings.HasPrefix(s.text[s.pos:], strings.Repeat(string(c), 3)) {
			ok = s.long(c)
		} else {
			_, ok = s.short(c)
		}
	case '[':
		e.Form = List
		ok = s.list(e)
	case '{':
		e.Form = Inline
		ok = s.inline(e)
	default:
		e.Form = Scalar
		ok = s.scalar(e, in)
	}
	e.End = s.pos
	return ok
}

// list reads [ ... ]: elements, commas, line ends and comments.
func (s *scanner) list(e *Entry) bool {
	if s.depth++; s.depth > MaxDepth {
		return s.fail(e.At, "lists and tables are nested too deep", "write tables with [headers] instead")
	}
	defer func() { s.depth-- }()
	s.pos++
	for comma := true; ; {
		newLine := s.blank()
		switch c := s.peek(); {
		case c == ']':
			s.pos++
			return true
		case c == ',' && comma:
			return s.fail(s.pos, "a comma stands before any value", "leave this comma out")
		case c == ',':
			s.pos++
			comma = true
		case !comma || c == 0 || c == '}' || newLine && s.lineIsNew():
			return s.unclosed(e, newLine, "list", ']')
		default:
			k := e.element(s.pos, s.pos, Scalar)
			s.in = k
			if !s.value(k, inList) {
				return false
			}
			s.in = e
			comma = false
		}
	}
}

// inline reads { ... }: pairs, commas, line ends and comments.
func (s *scanner) inline(e *Entry) bool {
	if s.depth++; s.depth > MaxDepth {
		return s.fail(e.At, "lists and tables are nested too deep", "write tables with [headers] instead")
	}
	defer func() { s.depth-- }()
	s.pos++
	t := &Entry{Form: Open, Key: e.Key, parent: e.parent} // open until the brace
	for comma := true; ; {
		newLine := s.blank()
		switch c := s.peek(); {
		case c == '}':
			s.pos++
			e.Kids, e.index = t.Kids, t.index
			for _, k := range e.Kids {
				k.close()
			}
			return true
		case c == ',' && comma:
			return s.fail(s.pos, "a comma stands before any key", "leave this comma out")
		case c == ',':
			s.pos++
			comma = true
		case !comma || c == 0 || c == ']' || c == '[':
			return s.unclosed(e, newLine, "inline table", '}')
		default:
			if !s.pair(t, inTable) {
				return false
			}
			comma = false
		}
	}
}

// close makes the tables of dotted keys part of the closed table around them.
func (e *Entry) close() {
	if e.Form == Open {
		e.Form = Inline
		for _, k := range e.Kids {
			k.close()
		}
	}
}

// bare reports whether a key may hold this character without quotes.
func bare(c byte) bool {
	return c >= 'a' && c <= 'z' || c >= 'A' && c <= 'Z' || c >= '0' && c <= '9' || c == '_' || c == '-'
}
