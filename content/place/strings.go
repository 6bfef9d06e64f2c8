package place

import (
	"strconv"
	"strings"
	"unicode/utf8"
)

// quotedKey reads a quoted part of a key and returns what it stands for.
func (s *scanner) quotedKey(quote byte) (string, bool) {
	start := s.pos
	escaped, ok := s.short(quote)
	if !ok {
		return "", false
	}
	name := s.text[start+1 : s.pos-1]
	if escaped {
		name = unescape(name)
	}
	return name, true
}

// short reads a text on one line, its quotes included, and tells whether it
// holds escapes.
func (s *scanner) short(quote byte) (escaped, ok bool) {
	start := s.pos
	for s.pos++; s.pos < len(s.text); {
		switch c := s.text[s.pos]; {
		case c == quote:
			s.pos++
			return escaped, true
		case c == '\n' || c == '\r':
			return escaped, s.open(start, quote)
		case c == '\\' && quote == '"':
			escaped = true
			if !s.escape(false) {
				return escaped, false
			}
		default:
			s.pos++
		}
	}
	return escaped, s.open(start, quote)
}

// long reads a text between triple quotes. The text ends at the first run of
// three or more quotes; up to two more belong to the text.
func (s *scanner) long(quote byte) bool {
	start := s.pos
	for s.pos += 3; s.pos < len(s.text); {
		switch c := s.text[s.pos]; {
		case c == quote:
			run := s.pos
			for s.peek() == quote {
				s.pos++
			}
			most := 5
			if quote == '"' && s.text[run-1] == '\\' {
				most = 6 // the reader lets one more through after an escaped backslash
			}
			if n := s.pos - run; n > most {
				return s.fail(run, strconv.Itoa(n)+" quotes stand in a row", "end the text with three")
			} else if n >= 3 {
				return true
			}
		case c == '\\' && quote == '"':
			if !s.escape(true) {
				return false
			}
		default:
			s.pos++
		}
	}
	three := strings.Repeat(string(quote), 3)
	return s.fail(start, "the text that "+three+" opens here is not closed", "write "+three+" at its end")
}

// escape reads one escape. In a long text a backslash may also end a line.
func (s *scanner) escape(long bool) bool {
	start := s.pos
	s.pos++
	if s.pos == len(s.text) {
		return true // the text is not closed
	}
	c := s.text[s.pos]
	if long && strings.IndexByte(" \t\r\n", c) >= 0 {
		end := s.pos
		for end < len(s.text) && strings.IndexByte(" \t\r\n", s.text[end]) >= 0 {
			end++
		}
		if strings.Contains(s.text[s.pos:end], "\n") {
			s.pos = end
			return true
		}
	}
	if c == '\n' || c == '\r' {
		return true // so is this
	}
	digits := map[byte]int{'x': 2, 'u': 4, 'U': 8}[c]
	if digits == 0 {
		r, width := utf8.DecodeRuneInString(s.text[s.pos:])
		if strings.IndexByte(`btnfre"\`, c) < 0 {
			return s.fail(start, "\\"+string(r)+" has no meaning in a text between double quotes",
				"write \\\\"+string(r)+", or put the text in single quotes, where \\ stands for itself")
		}
		s.pos += width
		return true
	}
	s.pos++
	end := s.pos
	for end < len(s.text) && end-s.pos < digits && hex(s.text[end]) {
		end++
	}
	code, _ := strconv.ParseUint(s.text[s.pos:end], 16, 32) // hexadecimal, at most 32 bits
	if end-s.pos < digits {
		return s.fail(start, "\\"+string(c)+" has no meaning without "+strconv.Itoa(digits)+" hexadecimal digits",
			"write \\\\"+string(c)+" for a backslash, or put the text in single quotes, where \\ stands for itself")
	}
	if !utf8.ValidRune(rune(code)) {
		return s.fail(start, s.text[start:end]+" is no character", "write the character itself")
	}
	s.pos = end
	return true
}

func hex(c byte) bool { return c >= '0' && c <= '9' || c|0x20 >= 'a' && c|0x20 <= 'f' }

// unescape resolves the escapes of a checked text.
func unescape(text string) string {
	var b strings.Builder
	for i := 0; i < len(text); i++ {
		if text[i] != '\\' {
			b.WriteByte(text[i])
			continue
		}
		i++
		switch c := text[i]; c {
		case 'x', 'u', 'U':
			n := map[byte]int{'x': 2, 'u': 4, 'U': 8}[c]
			code, _ := strconv.ParseUint(text[i+1:i+1+n], 16, 32) // checked by escape
			b.WriteRune(rune(code))
			i += n
		default:
			b.WriteByte(map[byte]byte{'b': '\b', 't': '\t', 'n': '\n', 'f': '\f', 'r': '\r', 'e': 0x1b, '"': '"', '\\': '\\'}[c])
		}
	}
	return b.String()
}
