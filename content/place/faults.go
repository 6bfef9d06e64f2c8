package place

import (
	"strconv"
	"strings"
	"unicode/utf8"
)

// Name writes a key as a TOML text has it: in quotes unless it is bare.
func Name(key string) string {
	for i := 0; i < len(key); i++ {
		if !bare(key[i]) {
			return Literal(key)
		}
	}
	if key == "" {
		return `""`
	}
	return key
}

// Literal writes a text in the quotes that need no escapes, if there are such.
func Literal(text string) string {
	if strings.ContainsAny(text, "\"\\") && !strings.ContainsAny(text, "'\r\n") {
		return "'" + text + "'"
	}
	return strconv.Quote(text)
}

// quote shows a piece of the source in a message: on one line, cut if it is long.
func quote(text string) string {
	const most = 40
	if utf8.RuneCountInString(text) > most {
		text = string([]rune(text)[:most-1]) + "…"
	}
	return strconv.Quote(text)
}

// fail records what stops the scan, and returns false.
func (s *scanner) fail(at int, msg, fix string) bool {
	s.faults = append(s.faults, Fault{At: at, First: -1, Path: s.in.path(), Msg: msg, Fix: fix})
	return false
}

func (s *scanner) clash(at, first int, msg, fix string) {
	s.faults = append(s.faults, Fault{At: at, First: first, Path: s.in.path(), Msg: msg, Fix: fix, Clash: true})
}

// clashInside records a key that leads through something that takes no more keys.
func (s *scanner) clashInside(e *Entry, p part) {
	if e.Form == Inline {
		s.clash(p.at, e.KeyAt, "the table "+quote(p.name)+" is closed by its braces", "write the key inside the braces")
		return
	}
	what := "a single value"
	if e.Form == List {
		what = "a list"
	}
	s.clash(p.at, e.KeyAt, quote(p.name)+" is "+what+" and cannot hold keys", "rename one of the two")
}

// clashHeader records a header for something that is there already.
func (s *scanner) clashHeader(e *Entry, last part, array bool) {
	name := quote(last.name)
	switch {
	case array && e.Form == Open, !array && e.Form == Tables:
		s.clash(last.at, e.KeyAt, "the table "+name+" has single and double brackets", "write double brackets at each, or single ones and one table")
	case e.Form == Open:
		s.clash(last.at, e.KeyAt, "the table "+name+" is opened twice", "write its keys under one header")
	case e.Form == Inline:
		s.clash(last.at, e.KeyAt, "the table "+name+" is closed by its braces", "write its keys inside the braces")
	default:
		s.clash(last.at, e.KeyAt, "the key "+name+" is given twice", "rename one of the two")
	}
}

// open records a text on one line that has no closing quote.
func (s *scanner) open(start int, q byte) bool {
	line := strings.TrimSpace(s.text[start+1 : s.eol(start)])
	return s.fail(start, "the text "+quote(line)+" has no closing quote on its line", "write "+string(q)+" at its end")
}

// unclosed explains what stands where a list or an inline table should go on.
func (s *scanner) unclosed(e *Entry, newLine bool, what string, closer byte) bool {
	c := s.peek()
	switch {
	case c == ']' || c == '}':
		return s.fail(s.pos, "the "+what+" is closed with "+string(c), "write "+string(closer))
	case s.pos == len(s.text):
		return s.fail(e.At, "the "+what+" that opens here is not closed", "write "+string(closer)+" at its end")
	case newLine && (closer == '}' || c == '[' || s.lineIsNew()):
		return s.fail(e.At, "the "+what+" that opens here is not closed before the next line", "write "+string(closer)+" at its end, or a comma where it goes on")
	}
	return s.fail(s.pos, "a comma is missing before "+quote(s.rest(s.pos, " \t,]}#")), "write commas between the entries of a list or an inline table")
}

// rest returns the source from an offset up to one of the stops or the end of
// the line. A quote at its start runs to the closing one.
func (s *scanner) rest(from int, stops string) string {
	line := s.text[from:s.eol(from)]
	if line != "" && (line[0] == '"' || line[0] == '\'') {
		if i := strings.IndexByte(line[1:], line[0]); i >= 0 {
			return line[1 : i+1]
		}
	}
	if i := strings.IndexAny(line, stops); i > 0 {
		line = line[:i]
	}
	return strings.TrimSpace(line)
}

// trailing explains what stands after a whole value or header.
func (s *scanner) trailing() bool {
	rest := s.rest(s.pos, "#")
	whole := s.text[s.pos:s.eol(s.pos)]
	before := s.text[:s.pos]
	before = strings.TrimSpace(before[strings.LastIndexByte(before, '\n')+1:])
	switch {
	case rest == ",":
		return s.fail(s.pos, "a comma ends the line", "leave it out")
	case rest == "]" && strings.HasPrefix(before, "["):
		return s.fail(s.pos, "the header "+before+" has a bracket too many", "write "+before)
	case strings.HasPrefix(before, "["):
		return s.fail(s.pos, quote(rest)+" stands after the header "+before, "begin a new line for it, or start a comment with #")
	case newLine.MatchString(whole):
		return s.fail(s.pos, quote(rest)+" stands after a value", "begin a new line for each key")
	}
	return s.fail(s.pos, quote(rest)+" stands after a value", "put the whole value in one pair of quotes, or start a comment with #")
}

// badHeader explains a line that starts with a bracket and is no header.
func (s *scanner) badHeader(start int) bool {
	if s.failed() {
		return false // inside a quoted key
	}
	line := s.rest(start, "#")
	inner := strings.TrimSpace(strings.Trim(line, "[] \t"))
	shut := strings.HasSuffix(line, "]")
	open, closing := "[", "]"
	if strings.HasPrefix(line, "[[") {
		open, closing = "[[", "]]"
	}
	switch {
	case inner == "":
		return s.fail(start, "the header "+line+" has no name", "write a name between the brackets")
	case inner[0] == '.' || strings.Contains(inner, "..") || strings.HasSuffix(inner, "."):
		return s.fail(start, "the header "+line+" has an empty part", "write a name on each side of a dot")
	case !strings.HasSuffix(line, closing) && (shut || s.pos == s.eol(s.pos)):
		return s.fail(start, "the header "+line+" lacks a closing bracket", "write "+open+inner+closing)
	case !shut:
		return s.fail(start, "the header "+line+" lacks a closing bracket", "write it on a line of its own, as [name] or [[name]]")
	}
	return s.fail(start, "the header "+line+" has a character that needs quotes", "write "+open+Literal(inner)+closing)
}

func (s *scanner) failed() bool {
	return len(s.faults) > 0 && !s.faults[len(s.faults)-1].Clash
}

// badKey explains a line, or an entry of an inline table, that is no key with a
// value.
func (s *scanner) badKey(start int, in where) bool {
	if s.failed() {
		return false // inside a quoted key
	}
	stops := "#"
	if in == inTable {
		stops = "#,}"
	}
	end := s.eol(start)
	if i := strings.IndexAny(s.text[start:end], stops); i > 0 {
		end = start + i
	}
	line := strings.TrimSpace(s.text[start:end])
	name, value, found := strings.Cut(line, "=")
	name, value = strings.TrimSpace(name), strings.TrimSpace(value)
	word, after, _ := strings.Cut(line, " ")
	head, tail, colon := strings.Cut(line, ":")
	switch {
	case found && name == "":
		return s.fail(start, "no key stands before the =", "write one, such as key = "+value)
	case found && strings.Contains(name, "..") || found && (name[0] == '.' || strings.HasSuffix(name, ".")):
		return s.fail(start, "the key "+quote(name)+" has an empty part", "write a name on each side of a dot")
	case found && strings.ContainsAny(name, `"'`):
		return s.fail(start, "the key "+quote(name)+" is partly in quotes", "put the whole key in one pair of quotes")
	case found && dashed(name) != "":
		return s.fail(start, "the key "+quote(name)+" has a space in it", "write "+dashed(name)+", or "+Literal(name)+" if the space is meant")
	case found:
		return s.fail(start, "the key "+quote(name)+" has a character that needs quotes", "write "+Literal(name)+" = "+value)
	case colon && Name(strings.TrimSpace(head)) == strings.TrimSpace(head):
		return s.fail(start, "a colon stands after the key "+quote(strings.TrimSpace(head)), "write "+strings.TrimSpace(head)+" = "+asValue(strings.TrimSpace(tail)))
	case after != "" && Name(word) == word && startsValue(after):
		return s.fail(start, "the key "+quote(word)+" has no = after it", "write "+word+" = "+strings.TrimSpace(after))
	}
	fix := "write key = value"
	if in == top {
		fix += ", or start a comment with #"
	}
	return s.fail(start, quote(line)+" is no key with a value", fix)
}

// dashed joins the words of a key with hyphens, or returns "" if that gives no
// bare key of several words.
func dashed(name string) string {
	words := strings.Fields(name)
	joined := strings.Join(words, "-")
	if len(words) < 2 || Name(joined) != joined {
		return ""
	}
	return joined
}

func startsValue(text string) bool {
	text = strings.TrimSpace(text)
	return text != "" && strings.IndexByte(`"'[{+-0123456789`, text[0]) >= 0
}

// asValue shows a bare value as it should be written.
func asValue(text string) string {
	if text == "" {
		return `"text"`
	}
	if plain(text) || startsValue(text) && strings.IndexByte(`"'[{`, text[0]) >= 0 {
		return text
	}
	return Literal(text)
}
