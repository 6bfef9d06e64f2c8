package mark

import (
	"bytes"
	"strings"

	"github.com/yuin/goldmark/ast"
	"github.com/yuin/goldmark/parser"
	"github.com/yuin/goldmark/renderer"
	"github.com/yuin/goldmark/text"
	"github.com/yuin/goldmark/util"
)

// A Reading is a result set into running text: `{= key }` or `{= key in unit }`.
// It may break over lines within a paragraph. The last " in " divides key and
// unit.
type Reading struct {
	Key, In string // single spaces between words; In is "" without a unit
	Start   int    // offset of the `{`
}

// KindReading is the kind of the node that carries a [Reading].
var KindReading = ast.NewNodeKind("SaddlebookReading")

// readingNode carries a Reading in the tree.
type readingNode struct {
	ast.BaseInline
	reading *Reading
}

// Kind returns KindReading.
func (n *readingNode) Kind() ast.NodeKind { return KindReading }

// Dump prints the node for debugging.
func (n *readingNode) Dump(source []byte, level int) {
	ast.DumpHelper(n, source, level, map[string]string{"Key": n.reading.Key, "In": n.reading.In}, nil)
}

var opening = []byte("{=")

// longestReading bounds the search for the closing brace, in bytes.
const longestReading = 1000

type readingParser struct{}

func (readingParser) Trigger() []byte { return []byte{'{'} }

// Parse takes a well-formed reading. Anything else stays literal here and is
// reported by the scan of the source in walk.lost.
func (readingParser) Parse(parent ast.Node, block text.Reader, pc parser.Context) ast.Node {
	line, segment := block.PeekLine()
	if !bytes.HasPrefix(line, opening) {
		return nil
	}
	body := line[len(opening):]
	var joined []byte
	advance := len(opening)
	for {
		i := bytes.IndexAny(body, "{}")
		if i >= 0 && body[i] == '{' || len(joined)+len(body) > longestReading && i < 0 {
			return nil
		}
		if i >= 0 {
			joined = append(joined, body[:i]...)
			block.Advance(advance + i + 1)
			break
		}
		joined = append(append(joined, body...), ' ')
		block.AdvanceLine()
		next, _ := block.PeekLine()
		if next == nil {
			return nil
		}
		body, advance = next, 0
	}
	key, in, problem := split(string(joined))
	if problem != nil {
		return nil
	}
	return &readingNode{reading: &Reading{Key: key, In: in, Start: segment.Start}}
}

// A problem says what is wrong with the text between the braces.
type problem struct{ msg, fix string }

// split takes the text between `{=` and `}` apart.
func split(body string) (key, in string, _ *problem) {
	words := strings.Fields(body)
	if len(words) == 0 {
		return "", "", &problem{"the reading names no result", "write a result key, as in {= cold/yield/A }"}
	}
	for i := len(words) - 1; i >= 0; i-- {
		if words[i] != "in" {
			continue
		}
		key, in = strings.Join(words[:i], " "), strings.Join(words[i+1:], " ")
		if key == "" {
			return "", "", &problem{`the reading has no result key before "in"`, "write the key first, as in {= addition/barrier/TSa in kJ/mol }"}
		}
		if in == "" {
			return "", "", &problem{`the reading has no unit after "in"`, `write a unit, as in {= ` + key + ` in kJ/mol }, or leave "in" out`}
		}
		return key, in, nil
	}
	return strings.Join(words, " "), "", nil
}

type readingRenderer struct{}

func (readingRenderer) RegisterFuncs(reg renderer.NodeRendererFuncRegisterer) {
	reg.Register(KindReading, func(w util.BufWriter, _ []byte, n ast.Node, entering bool) (ast.WalkStatus, error) {
		if !entering {
			return ast.WalkContinue, nil
		}
		return ast.WalkSkipChildren, cut(w, Hole{Reading: n.(*readingNode).reading})
	})
}
