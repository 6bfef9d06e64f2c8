package schema

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
	"time"
	"unicode"

	"github.com/BurntSushi/toml"

	"saddlebook/content/fault"
	"saddlebook/content/place"
)

// NodeKind is the kind of value a node holds: Text, Whole, Real, Flag, Table,
// Array or Date.
type NodeKind int

// These are both kinds of node and types of field, and so have no type themselves.
const (
	Text  = iota // a text
	Whole        // a whole number
	Real         // a number
	Flag         // true or false
	Table        // a table
)

const (
	Array NodeKind = Table + 1 + iota // a list or an array of tables
	Date                              // a date, a time or both
)

// A Node is one value of a block, with its place.
type Node struct {
	Key   string      // the key; the ordinal from 1 for an element; "" for the root
	KeyAt fault.Place // of the key; of the value for an element. Whoever parses a block sets the root's to the block
	At    fault.Place // of the value
	Kind  NodeKind
	Text  string  // of a Text what it says; of a number, truth value or date as written
	Num   float64 // Whole, Real; finite
	Truth bool    // Flag
	Kids  []*Node // entries in source order, or elements

	Label  string // root only, set by whoever parses: what diagnostics call the block, as `mechanism "addition"`
	Broken bool   // root only: the source is empty or not well formed, and only the texts at its top are kept

	refused bool // a value that Parse has reported
	simple  bool // a text on one line without escapes: its characters stand as written
	inline  bool // a table or list written in brackets after its key
}

// Parse reads the TOML text of a block. at turns a byte offset of the text (its
// length too) into a place. The node is never nil; it is Broken if the source is
// not well formed. The diagnostics have no Block.
func Parse(text string, at func(offset int) fault.Place) (*Node, fault.List) {
	p := &parser{text: text, at: at}
	root := p.parse()
	root.Key, root.KeyAt, root.At = "", at(0), at(0)
	root.Broken = p.broken
	p.faults.Sort()
	return root, p.faults
}

type parser struct {
	text   string
	at     func(int) fault.Place
	faults fault.List
	broken bool
}

func (p *parser) parse() *Node {
	for _, mark := range []string{"\ufeff", "\xff\xfe", "\xfe\xff"} {
		if strings.HasPrefix(p.text, mark) {
			p.report(0, nil, "a byte order mark stands before the text", "save the file as UTF-8 without a byte order mark")
			return p.texts(&place.Entry{})
		}
	}
	entries, faults := place.Scan(p.text)
	for _, f := range faults {
		if f.First >= 0 {
			f.Fix += fmt.Sprintf(" (the first stands in line %d)", p.at(f.First).Line)
		}
		p.report(f.At, f.Path, f.Msg, f.Fix)
	}
	if len(p.faults) > 0 {
		return p.texts(entries)
	}
	doc, err := decodeTOML(p.text)
	if err != nil {
		p.refused(entries, err)
		return p.texts(entries)
	}
	return p.node(entries, doc, nil)
}

// texts keeps the plain texts at the top of a source with faults, so that the
// block can still be called by its id.
func (p *parser) texts(entries *place.Entry) *Node {
	p.broken = true
	root := &Node{Kind: Table}
	for _, e := range entries.Kids {
		if e.Form != place.String || e.End < e.At+2 {
			continue
		}
		inner := p.text[e.At+1 : e.End-1]
		if !strings.ContainsAny(inner, "\\\"'\r\n") {
			root.Kids = append(root.Kids, &Node{Key: e.Key, KeyAt: p.at(e.KeyAt), At: p.at(e.At), Kind: Text, Text: inner, simple: true})
		}
	}
	return root
}

// decodeTOML calls the TOML reader, which panics where it finds a fault of its own.
func decodeTOML(text string) (doc map[string]any, err error) {
	defer func() {
		if r := recover(); r != nil {
			err = fmt.Errorf("the TOML reader failed: %v", r)
		}
	}()
	_, err = toml.Decode(text, &doc)
	return doc, err
}

func (p *parser) report(offset int, path []string, msg, fix string) {
	p.faults = append(p.faults, fault.Diagnostic{At: p.at(offset), Key: fault.Key(path), Msg: msg, Fix: fix})
}

// refused reports what the TOML reader refuses and the scanner lets pass: dates
// and numbers that are out of range.
func (p *parser) refused(entries *place.Entry, err error) {
	pe, ok := err.(toml.ParseError)
	if !ok {
		p.report(0, nil, firstLine(err.Error()), "simplify the block")
		return
	}
	offset := min(max(pe.Position.Start, 0), len(p.text))
	token := ""
	var path []string
	entries.Walk(func(to []string, e *place.Entry) {
		if e.At <= pe.Position.Start && pe.Position.Start < e.End {
			offset, token, path = e.At, p.text[e.At:e.End], slices.Clone(to)
		}
	})
	switch {
	case strings.Contains(pe.Message, "invalid datetime"):
		p.report(offset, path, token+" is neither a number nor a date", "put it in quotes if it is a text, or write a date as 2031-05-27")
	case strings.Contains(pe.Message, "out of range"):
		fix := "write it with an exponent, as 1.5e20"
		if strings.ContainsAny(token, ".eE") {
			fix = "write a number between -1e308 and 1e308"
		}
		p.report(offset, path, "the number "+token+" is out of range", fix)
	default:
		p.report(offset, path, firstLine(pe.Message), "write key = value, with texts in quotes")
	}
}

func firstLine(text string) string {
	line, _, _ := strings.Cut(text, "\n")
	return line
}

// node joins an entry of the scan with the value the TOML reader found there.
func (p *parser) node(e *place.Entry, value any, path []string) *Node {
	n := &Node{Key: e.Key, KeyAt: p.at(e.KeyAt), At: p.at(e.At), Text: p.text[e.At:e.End]}
	n.inline = e.Form == place.Inline || e.Form == place.List
	switch v := value.(type) {
	case map[string]any:
		n.Kind, n.Text = Table, ""
		p.same(e, len(v), path)
		for _, k := range e.Kids {
			if kid, ok := v[k.Key]; ok {
				n.Kids = append(n.Kids, p.node(k, kid, below(path, k.Key)))
			}
		}
	case []map[string]any:
		n.Kind, n.Text = Array, ""
		p.same(e, len(v), path)
		for i := 0; i < min(len(v), len(e.Kids)); i++ {
			n.Kids = append(n.Kids, p.node(e.Kids[i], v[i], below(path, e.Kids[i].Key)))
		}
	case []any:
		n.Kind, n.Text = Array, ""
		p.same(e, len(v), path)
		for i := 0; i < min(len(v), len(e.Kids)); i++ {
			n.Kids = append(n.Kids, p.node(e.Kids[i], v[i], below(path, e.Kids[i].Key)))
		}
	case string:
		n.Kind = Text
		n.simple = n.Text == `"`+v+`"` || n.Text == "'"+v+"'"
		n.Text = v
		if i := strings.IndexFunc(v, forbidden); i >= 0 {
			n.refused = true
			p.report(e.At, path, fmt.Sprintf("the text holds the control character U+%04X", []rune(v[i:])[0]), "leave it out")
		}
	case int64:
		n.Kind, n.Num = Whole, float64(v)
	case float64:
		n.Kind, n.Num = Real, v
		if math.IsNaN(v) || math.IsInf(v, 0) {
			n.refused = true
			p.report(e.At, path, n.Text+" is no finite number", "write a number, or leave the key out")
		}
	case bool:
		n.Kind, n.Truth = Flag, v
	case time.Time:
		n.Kind = Date
	default:
		n.refused = true
		p.report(e.At, path, fmt.Sprintf("the value is read as %T", value), "write it as a text in quotes")
	}
	if strings.ContainsFunc(e.Key, forbidden) {
		n.refused = true
		p.report(e.KeyAt, path, "the key holds a control character", "leave it out")
	}
	return n
}

// same guards against keys that the TOML reader drops or adds: it must hold as
// many as the source.
func (p *parser) same(e *place.Entry, held int, path []string) {
	if held != len(e.Kids) {
		p.report(e.KeyAt, path, fmt.Sprintf("the source gives %d entries here and the TOML reader holds %d", len(e.Kids), held),
			"write each table once, without empty keys")
		p.broken = true
	}
}

// forbidden reports control characters that have no place in a text: they
// could drive a terminal or reorder what is read.
func forbidden(r rune) bool {
	return unicode.IsControl(r) && r != '\t' && r != '\n' && r != '\r' ||
		r >= '\u202a' && r <= '\u202e' || r >= '\u2066' && r <= '\u2069'
}

// below returns the path of a kid, in memory of its own.
func below(path []string, key string) []string {
	return append(path[:len(path):len(path)], key)
}

// Refused reports whether Parse has reported a value at or below the node, which
// then cannot be decoded.
func (n *Node) Refused() bool {
	return n.refused || slices.ContainsFunc(n.Kids, (*Node).Refused)
}

// Get returns the node at a path of keys and ordinals ("1", "2", ...), or nil.
func (n *Node) Get(path ...string) *Node {
	for _, key := range path {
		if n == nil {
			return nil
		}
		n = n.kid(key)
	}
	return n
}

func (n *Node) kid(key string) *Node {
	if n.Kind == Array {
		if i, err := strconv.Atoi(key); err == nil && i >= 1 && i <= len(n.Kids) {
			return n.Kids[i-1]
		}
		return nil
	}
	for _, k := range n.Kids {
		if k.Key == key {
			return k
		}
	}
	return nil
}

// Place returns where the key at a path stands, or the deepest key on the way
// that is there.
func (n *Node) Place(path ...string) fault.Place {
	for _, key := range path {
		k := n.kid(key)
		if k == nil {
			break
		}
		n = k
	}
	return n.KeyAt
}

// inside returns the place of a character of a text, from 0: exact where the
// text is written as it reads, else that of the value.
func (n *Node) inside(character int) fault.Place {
	at := n.At
	if n.simple && character > 0 && at.Line > 0 {
		at.Col += 1 + character
	}
	return at
}

// quote shows a text in a message, cut if it is long.
func quote(text string) string {
	const most = 40
	if r := []rune(text); len(r) > most {
		text = string(r[:most-1]) + "…"
	}
	return strconv.Quote(text)
}
