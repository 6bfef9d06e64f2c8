package mark

import (
	"html"
	"strconv"
	"strings"
	"unicode"

	"github.com/yuin/goldmark/ast"
)

// plain returns the text of a node without markup, words one space apart, and
// the readings it leaves out.
func plain(n ast.Node, source []byte) (string, []*Reading) {
	var sb strings.Builder
	var readings []*Reading
	var visit func(ast.Node)
	visit = func(n ast.Node) {
		switch n := n.(type) {
		case *ast.Text:
			v := n.Segment.Value(source)
			if n.IsRaw() {
				sb.Write(v)
			} else {
				sb.WriteString(resolve(v))
			}
			if n.SoftLineBreak() || n.HardLineBreak() {
				sb.WriteByte(' ')
			}
		case *ast.String: // typographic quotes and dashes, as entities
			sb.WriteString(html.UnescapeString(string(n.Value)))
		case *ast.AutoLink:
			sb.Write(n.Label(source))
		case *readingNode:
			readings = append(readings, n.reading)
		}
		for c := n.FirstChild(); c != nil; c = c.NextSibling() {
			visit(c)
		}
	}
	for c := n.FirstChild(); c != nil; c = c.NextSibling() {
		visit(c)
	}
	return strings.Join(strings.Fields(sb.String()), " "), readings
}

// nameHeadings gives each heading an id made from its text.
func (p *Page) nameHeadings(taken []string) {
	used := make(map[string]bool, len(taken)+len(p.Headings))
	for _, t := range taken {
		used[t] = true
	}
	next := map[string]int{}
	for i := range p.Headings {
		h := &p.Headings[i]
		base := anchor(h.Text)
		id := base
		for n := max(next[base], 2); used[id]; n++ {
			id = base + "-" + strconv.Itoa(n)
			next[base] = n + 1
		}
		used[id] = true
		h.ID = id
		h.node.SetAttributeString("id", []byte(id))
	}
}

// anchor makes an id of a heading: letters and digits in lower case, one hyphen
// for whatever stands between them.
func anchor(text string) string {
	var sb strings.Builder
	gap := false
	for _, r := range strings.ToLower(text) {
		if !unicode.IsLetter(r) && !unicode.IsDigit(r) && !unicode.IsMark(r) {
			gap = gap || unicode.IsSpace(r) || r == '-' || r == '_' || r == '/'
			continue
		}
		if gap && sb.Len() > 0 {
			sb.WriteByte('-')
		}
		gap = false
		sb.WriteRune(r)
	}
	if sb.Len() == 0 {
		return "section"
	}
	return sb.String()
}
