package place

import (
	"regexp"
	"strings"
)

var (
	number = regexp.MustCompile(`^([+-]?(0|[1-9](_?[0-9])*)(\.[0-9](_?[0-9])*)?([eE][+-]?[0-9](_?[0-9])*)?` +
		`|0x[0-9a-fA-F](_?[0-9a-fA-F])*|0o[0-7](_?[0-7])*|0b[01](_?[01])*|[+-]?(inf|nan))$`)
	date     = regexp.MustCompile(`^[0-9]+[-:][-0-9:TtZz .+]*$`) // the reader checks the rest
	newLine  = regexp.MustCompile(`^[A-Za-z0-9_-]+[ \t]*=`)
	halfOpen = regexp.MustCompile(`^[+-]?(\.[0-9]+|[0-9]+\.)([eE][+-]?[0-9]+)?$`)
	zeros    = regexp.MustCompile(`^([+-]?)0+([0-9].*)$`)
	comma    = regexp.MustCompile(`^([+-]?[0-9]+),([0-9]+)$`)
	nextKey  = regexp.MustCompile(`^(\S+)[ \t]+("[^"]*"|'[^']*'|[A-Za-z0-9_.-]+)[ \t]*=`)
)

// lineIsNew tells whether the rest of the line looks like a key of its own.
func (s *scanner) lineIsNew() bool { return newLine.MatchString(s.text[s.pos:s.eol(s.pos)]) }

func plain(token string) bool {
	return token == "true" || token == "false" || number.MatchString(token) || date.MatchString(token)
}

// scalar reads a number, a truth value or a date.
func (s *scanner) scalar(e *Entry, in where) bool {
	ends := map[where]string{top: "\r\n#", inList: "\r\n#,]}", inTable: "\r\n#,]}"}[in]
	end := len(s.text)
	if i := strings.IndexAny(s.text[s.pos:], ends); i >= 0 {
		end = s.pos + i
	}
	token := strings.TrimRight(s.text[s.pos:end], " \t")
	if plain(token) {
		s.pos += len(token)
		return true
	}
	return s.badScalar(e, token, in)
}

// badScalar explains a token that is no number, truth value or date.
func (s *scanner) badScalar(e *Entry, token string, in where) bool {
	lead := ""
	if in != inList {
		lead = Name(e.Key) + " = "
	}
	m := nextKey.FindStringSubmatch(token)
	switch {
	case token == "":
		return s.fail(e.KeyAt, "the key "+quote(e.Key)+" has no value", "write one after the =, such as "+lead+"\"text\" or "+lead+"1.5")
	case in == inTable && m != nil && plain(m[1]):
		return s.fail(e.At+len(m[1]), "a comma is missing after "+m[1], "write a comma between the keys of an inline table")
	case in == top && m != nil && plain(m[1]):
		return s.fail(e.At+len(m[1])+1, quote(strings.TrimSpace(token[len(m[1]):]))+" stands after the value "+m[1], "begin a new line for each key")
	case in == inList && strings.IndexAny(token, " \t") > 0 && allPlain(token):
		return s.fail(e.At+strings.IndexAny(token, " \t"), "a comma is missing in "+quote(token), "write "+strings.Join(strings.Fields(token), ", "))
	case strings.IndexAny(token, " \t") > 0 && in == inList && strings.ContainsAny(token, `"'`):
		head := strings.Fields(token)[0]
		return s.fail(e.At+len(head), "a comma is missing after "+head, "write commas between the elements of a list")
	case in == top && strings.HasSuffix(token, ",") && plain(strings.TrimRight(token, ", \t")):
		return s.fail(e.At+len(token)-1, "a comma ends the line", "leave it out: "+lead+strings.TrimRight(token, ", \t"))
	case comma.MatchString(token):
		return s.fail(e.At, "the number "+token+" has a comma", "write "+lead+strings.Replace(token, ",", ".", 1)+", or a list "+lead+"["+strings.Replace(token, ",", ", ", 1)+"]")
	case strings.EqualFold(token, "true") || strings.EqualFold(token, "false"):
		return s.fail(e.At, quote(token)+" has capital letters", "write "+lead+strings.ToLower(token))
	case halfOpen.MatchString(token):
		return s.fail(e.At, "the number "+token+" lacks a digit beside its point", "write "+lead+wholePoint(token))
	case zeros.MatchString(token) && number.MatchString(zeros.ReplaceAllString(token, "$1$2")):
		return s.fail(e.At, "the number "+token+" starts with a zero", "write "+lead+zeros.ReplaceAllString(token, "$1$2")+", or put it in quotes if it is a name")
	case curly(token):
		return s.fail(e.At, "the value "+quote(token)+" stands in typographic quotes", "write "+lead+Literal(strings.Trim(token, "“”„‘’‚«»")))
	}
	return s.fail(e.At, "the value "+quote(token)+" stands without quotes", "write "+lead+Literal(token))
}

func allPlain(token string) bool {
	for _, f := range strings.Fields(token) {
		if !plain(f) {
			return false
		}
	}
	return true
}

// wholePoint writes 0 on the open side of a decimal point.
func wholePoint(token string) string {
	sign := ""
	if token[0] == '+' || token[0] == '-' {
		sign, token = token[:1], token[1:]
	}
	if token[0] == '.' {
		return sign + "0" + token
	}
	i := strings.IndexByte(token, '.')
	return sign + token[:i+1] + "0" + token[i+1:]
}

func curly(token string) bool {
	for _, q := range []string{"“", "„", "‘", "‚", "«", "”", "’"} {
		if strings.HasPrefix(token, q) {
			return true
		}
	}
	return false
}
