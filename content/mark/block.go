package mark

import (
	"strings"

	"github.com/yuin/goldmark/ast"
	"github.com/yuin/goldmark/parser"
	"github.com/yuin/goldmark/renderer"
	"github.com/yuin/goldmark/text"
	"github.com/yuin/goldmark/util"
)

// A Block is a fence whose information string is `toml KIND`.
type Block struct {
	Kind   string // the second word of the information string
	Start  int    // offset of the first fence character
	Info   int    // offset of the information string
	KindAt int    // offset of its second word
	Text   string // the TOML, without the prefixes of quotes and lists
	Closed bool   // by a fence of its own
	Fence  string // the run of characters that opens it, and must close it

	extra  *word // a third word of the information string
	stop   int   // offset after the last line
	pieces []piece
}

// A piece is one line of a block's text: where it starts in the text, how many
// of its first bytes are virtual spaces of a partly eaten tab, and where the
// rest stands in the source.
type piece struct{ text, padding, source, stop int }

// KindBlock is the kind of the node that carries a [Block].
var KindBlock = ast.NewNodeKind("SaddlebookBlock")

// blockNode carries a Block in the tree. It is apart from Block so that keeping
// a Block does not keep the tree.
type blockNode struct {
	ast.BaseBlock
	block *Block
}

// Kind returns KindBlock. (The kind of the block itself is block.Kind.)
func (n *blockNode) Kind() ast.NodeKind { return KindBlock }

// IsRaw is true: the text is TOML and not Markdown.
func (n *blockNode) IsRaw() bool { return true }

// Dump prints the node for debugging.
func (n *blockNode) Dump(source []byte, level int) {
	ast.DumpHelper(n, source, level, map[string]string{"Kind": n.block.Kind}, nil)
}

// Offset returns the offset in the source of byte i of Text. Virtual spaces of
// a partly eaten tab stand at that tab. Offsets past the end give the end of
// the last line; a block without lines gives its information string.
func (b *Block) Offset(i int) int {
	if len(b.pieces) == 0 {
		return b.Info
	}
	lo, hi := 0, len(b.pieces)-1
	for lo < hi { // last piece that starts at or before i
		mid := (lo + hi + 1) / 2
		if b.pieces[mid].text <= i {
			lo = mid
		} else {
			hi = mid - 1
		}
	}
	p := b.pieces[lo]
	in := max(i-p.text, 0)
	if in < p.padding {
		return max(p.source-1, 0)
	}
	return min(p.source+in-p.padding, p.stop)
}

// fenceParser is the CommonMark parser of fences, with two additions: a fence
// for a block becomes a Block, and whether it was closed is kept.
type fenceParser struct{ parser.BlockParser }

func (f fenceParser) Open(parent ast.Node, reader text.Reader, pc parser.Context) (ast.Node, parser.State) {
	node, state := f.BlockParser.Open(parent, reader, pc)
	fence, ok := node.(*ast.FencedCodeBlock)
	if !ok || fence.Info == nil {
		return node, state
	}
	info := fence.Info.Segment
	words := fields(info.Value(reader.Source()), info.Start)
	if len(words) < 2 || words[0].text != "toml" {
		return node, state
	}
	_, line := reader.PeekLine()
	b := &Block{
		Kind:   words[1].text,
		Start:  line.Start + pc.BlockOffset() - line.Padding,
		Info:   info.Start,
		KindAt: words[1].at,
		stop:   info.Stop,
	}
	if len(words) > 2 {
		b.extra = &words[2]
	}
	return &blockNode{block: b}, state
}

func (f fenceParser) Continue(node ast.Node, reader text.Reader, pc parser.Context) parser.State {
	state := f.BlockParser.Continue(node, reader, pc)
	if n, ok := node.(*blockNode); ok && state == parser.Close {
		n.block.Closed = true
	}
	return state
}

func (f fenceParser) Close(node ast.Node, reader text.Reader, pc parser.Context) {
	if n, ok := node.(*blockNode); ok {
		n.block.gather(n.Lines(), reader.Source())
	}
	f.BlockParser.Close(node, reader, pc)
}

// gather joins the lines of the fence into Text and keeps where each stands.
func (b *Block) gather(lines *text.Segments, source []byte) {
	var sb strings.Builder
	for i := range lines.Len() {
		l := lines.At(i)
		p := piece{text: sb.Len(), padding: l.Padding, source: l.Start, stop: l.Stop}
		if p.stop > p.source && source[p.stop-1] == '\n' {
			p.stop-- // past the end means the end of the line
			if p.stop > p.source && source[p.stop-1] == '\r' {
				p.stop--
			}
		}
		sb.Write(l.Value(source))
		b.pieces = append(b.pieces, p)
		b.stop = max(b.stop, l.Stop)
	}
	b.Text = sb.String()
}

// A word is a word of an information string and its offset.
type word struct {
	text string
	at   int
}

func fields(info []byte, at int) []word {
	var words []word
	for i := 0; i < len(info); {
		start := i
		for i < len(info) && !util.IsSpace(info[i]) {
			i++
		}
		if i > start {
			words = append(words, word{string(info[start:i]), at + start})
		}
		for i < len(info) && util.IsSpace(info[i]) {
			i++
		}
	}
	return words
}

type blockRenderer struct{}

func (blockRenderer) RegisterFuncs(reg renderer.NodeRendererFuncRegisterer) {
	reg.Register(KindBlock, func(w util.BufWriter, _ []byte, n ast.Node, entering bool) (ast.WalkStatus, error) {
		if !entering {
			return ast.WalkContinue, nil
		}
		return ast.WalkSkipChildren, cut(w, Hole{Block: n.(*blockNode).block})
	})
}
