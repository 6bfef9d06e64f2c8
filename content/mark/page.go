package mark

import (
	"bytes"
	"fmt"

	"github.com/yuin/goldmark/ast"
	"github.com/yuin/goldmark/extension"
	"github.com/yuin/goldmark/parser"
	"github.com/yuin/goldmark/renderer"
	"github.com/yuin/goldmark/renderer/html"
	"github.com/yuin/goldmark/text"
	"github.com/yuin/goldmark/util"
)

// A Page is what a note's Markdown holds, in source order.
type Page struct {
	Blocks   []*Block
	Readings []*Reading // those that are shown
	Links    []*Link
	Headings []Heading
	Faults   []Fault

	source []byte
	root   ast.Node // until Render
}

// A Heading of the page. Its ID is set by Render.
type Heading struct {
	Level int
	ID    string // unique in the page
	Text  string // plain, readings left out
	Start int    // offset of the heading

	node *ast.Heading
}

// A Fault is something wrong at an offset of the source.
type Fault struct {
	Start    int
	Warn     bool   // a warning and not an error
	Block    *Block // the block at fault, or nil
	Msg, Fix string
}

// A Hole is a place in the HTML that a block or a reading will fill. Exactly one
// of the two is set.
type Hole struct {
	At      int // offset in the HTML
	Block   *Block
	Reading *Reading
}

// The priorities in use, lowest first within each list. The order of equal ones
// is undefined, so no two are equal (TestPriorities).

func blockParsers() []util.PrioritizedValue {
	return []util.PrioritizedValue{
		util.Prioritized(parser.NewSetextHeadingParser(), 100),
		util.Prioritized(extension.NewDefinitionListParser(), 110),
		util.Prioritized(extension.NewDefinitionDescriptionParser(), 120),
		util.Prioritized(parser.NewThematicBreakParser(), 200),
		util.Prioritized(parser.NewListParser(), 300),
		util.Prioritized(parser.NewListItemParser(), 400),
		util.Prioritized(parser.NewCodeBlockParser(), 500),
		util.Prioritized(parser.NewATXHeadingParser(), 600),
		util.Prioritized(fenceParser{parser.NewFencedCodeBlockParser()}, 700),
		util.Prioritized(parser.NewBlockquoteParser(), 800),
		util.Prioritized(parser.NewHTMLBlockParser(), 900),
		util.Prioritized(extension.NewFootnoteBlockParser(), 950),
		util.Prioritized(parser.NewParagraphParser(), 1000),
	}
}

func inlineParsers() []util.PrioritizedValue {
	return []util.PrioritizedValue{
		util.Prioritized(parser.NewCodeSpanParser(), 100),
		util.Prioritized(extension.NewFootnoteParser(), 110),
		util.Prioritized(readingParser{}, 150),
		util.Prioritized(parser.NewLinkParser(), 200),
		util.Prioritized(parser.NewAutoLinkParser(), 300),
		util.Prioritized(parser.NewRawHTMLParser(), 400),
		util.Prioritized(parser.NewEmphasisParser(), 500),
		util.Prioritized(extension.NewTypographerParser(), 600),
	}
}

func paragraphTransformers() []util.PrioritizedValue {
	return []util.PrioritizedValue{
		util.Prioritized(parser.LinkReferenceParagraphTransformer, 100),
		util.Prioritized(extension.NewTableParagraphTransformer(), 200),
	}
}

// The collector must see unused footnotes, which the footnote transformer drops.
func treeTransformers() []util.PrioritizedValue {
	return []util.PrioritizedValue{
		util.Prioritized(extension.NewTableASTTransformer(), 100),
		util.Prioritized(collector{}, 500),
		util.Prioritized(extension.NewFootnoteASTTransformer(), 900),
	}
}

// Of two renderers for one node kind the one with the lower number is used.
func nodeRenderers() []util.PrioritizedValue {
	return []util.PrioritizedValue{
		util.Prioritized(blockRenderer{}, 100),
		util.Prioritized(readingRenderer{}, 200),
		util.Prioritized(proseRenderer{}, 300),
		util.Prioritized(extension.NewTableHTMLRenderer(extension.WithTableCellAlignMethod(extension.TableCellAlignNone)), 400),
		util.Prioritized(extension.NewFootnoteHTMLRenderer(), 500),
		util.Prioritized(extension.NewDefinitionListHTMLRenderer(), 600),
		util.Prioritized(html.NewRenderer(), 1000),
	}
}

var (
	markdown = parser.NewParser(
		parser.WithBlockParsers(blockParsers()...),
		parser.WithInlineParsers(inlineParsers()...),
		parser.WithParagraphTransformers(paragraphTransformers()...),
		parser.WithASTTransformers(treeTransformers()...),
	)
	pages   = renderer.NewRenderer(renderer.WithNodeRenderers(nodeRenderers()...))
	pageKey = parser.NewContextKey()
)

// Parse reads the Markdown of a note, which must be UTF-8 without NUL. It is safe
// for use by several goroutines. The page holds its tree until Render.
func Parse(source []byte) (p *Page) {
	p = &Page{source: source}
	defer func() { // a fault of the Markdown reader must not end the program
		if r := recover(); r != nil {
			*p = Page{source: source, root: ast.NewDocument()}
			p.Faults = []Fault{{Msg: fmt.Sprintf("the Markdown reader failed: %v", r), Fix: "halve the note until it is read, to find the place, and write that part more simply"}}
		}
	}()
	pc := parser.NewContext()
	pc.Set(pageKey, p)
	p.root = markdown.Parse(text.NewReader(source), parser.WithContext(pc))
	return p
}

// Render gives each heading an id that is neither in taken nor used before, and
// returns the page as HTML with holes, in order. It drops the tree: call it once.
func (p *Page) Render(taken []string) (html string, holes []Hole, err error) {
	p.nameHeadings(taken)
	var w holed
	w.Grow(len(p.source) + len(p.source)/4)
	err = pages.Render(&w, p.source, p.root)
	p.root, p.source = nil, nil
	for i := range p.Headings {
		p.Headings[i].node = nil
	}
	return w.String(), w.holes, err
}

// holed collects HTML and where the holes are. Holes are kept as offsets and not
// as marks in the text, so nothing an author writes can be taken for one.
type holed struct {
	bytes.Buffer
	holes []Hole
}

var _ util.BufWriter = (*holed)(nil)

func (w *holed) Buffered() int { return 0 }
func (w *holed) Flush() error  { return nil }
