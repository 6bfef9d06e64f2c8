package mark

import (
	"bytes"
	"cmp"
	"fmt"
	"slices"
	"strconv"

	"github.com/yuin/goldmark/ast"
	extast "github.com/yuin/goldmark/extension/ast"
	"github.com/yuin/goldmark/parser"
	"github.com/yuin/goldmark/text"
)

// collector walks the tree once and lists in the Page what it holds, with what
// Markdown would otherwise drop in silence.
type collector struct{}

func (collector) Transform(root *ast.Document, reader text.Reader, pc parser.Context) {
	w := walk{page: pc.Get(pageKey).(*Page), source: reader.Source(), shown: map[int]bool{}}
	w.node(root, where{})
	w.lost()
	slices.SortStableFunc(w.page.Faults, func(a, b Fault) int { return cmp.Compare(a.Start, b.Start) })
}

// where says what a node stands in.
type where struct {
	image  bool // the text of an image
	unused bool // a footnote nobody refers to
}

type walk struct {
	page     *Page
	source   []byte
	shown    map[int]bool   // offsets of the readings that are shown
	inImages map[int]bool   // offsets of those in image text
	inUnused map[int]bool   // offsets of those in unused footnotes
	code     []span         // where `{=` means nothing
	rows     []int          // an offset in each table row
	titled   bool           // the first level-1 heading is past
	tags     map[string]int // HTML tags that are open
}

type span struct{ start, stop int }

func (w *walk) fault(f Fault) { w.page.Faults = append(w.page.Faults, f) }

func (w *walk) node(n ast.Node, in where) {
	switch n := n.(type) {
	case *blockNode:
		w.block(n.block, in)
	case *readingNode:
		w.reading(n.reading, in)
	case *ast.Heading:
		w.heading(n)
	case *ast.Link:
		n.Destination = w.link(n.Destination, n.Pos(), false)
	case *ast.Image:
		if alt, _ := plain(n, w.source); alt == "" {
			w.fault(Fault{Start: n.Pos(), Warn: true, Msg: "the image has no text for readers who cannot see it",
				Fix: "say between the brackets what it shows, as in ![colour change on addition](photo.png)"})
		}
		n.Destination = w.link(n.Destination, n.Pos(), true)
		in.image = true
	case *ast.AutoLink:
		if n.AutoLinkType == ast.AutoLinkURL {
			if _, p := newLink(n.URL(w.source), false); p != nil {
				w.fault(Fault{Start: n.Pos() + 1, Msg: p.msg, Fix: p.fix})
			}
		}
	case *ast.CodeSpan:
		w.inline(n)
	case *ast.CodeBlock:
		w.lines(n.Lines(), -1)
	case *ast.FencedCodeBlock:
		w.fence(n)
	case *ast.HTMLBlock:
		w.html(n.Pos(), n.Lines(), n.ClosureLine)
	case *ast.RawHTML:
		if w.closes(n.Pos()) {
			break
		}
		w.html(n.Pos(), n.Segments, text.NewSegment(-1, -1))
	case *extast.TableRow:
		w.rows = append(w.rows, n.Pos())
	case *extast.TableCell:
		if n.Alignment != extast.AlignNone { // a class, because a strict page policy drops inline styles
			n.SetAttributeString("class", []byte("align-"+n.Alignment.String()))
		}
	case *extast.Footnote:
		if n.Index < 0 {
			in.unused = true
			w.fault(Fault{Start: n.Pos(), Warn: true, Msg: fmt.Sprintf("the footnote %q is never referred to, so it is left out", n.Ref),
				Fix: fmt.Sprintf("write [^%s] in the text, or take the footnote away", n.Ref)})
		}
	}
	for c := n.FirstChild(); c != nil; c = c.NextSibling() {
		w.node(c, in)
	}
}

func (w *walk) block(b *Block, in where) {
	b.Fence = fenceRun(w.source[b.Start:])
	w.page.Blocks = append(w.page.Blocks, b)
	w.code = append(w.code, span{b.Start, b.stop})
	at := Fault{Start: b.Start, Block: b}
	if in.unused {
		at.Msg, at.Fix = "the block stands in a footnote nobody refers to, so it is not shown", "move the block into the text"
		w.fault(at)
	}
	if !b.Closed {
		at.Msg, at.Fix = "the block is not closed", "add "+b.Fence+" on a line of its own after its last line"
		w.fault(at)
	}
	if b.extra != nil {
		at.Start = b.extra.at
		at.Msg = fmt.Sprintf("the fence has a third word, %q", b.extra.text)
		at.Fix = "write toml " + b.Kind + " and nothing more; an id goes into the block, as id = \"name\""
		w.fault(at)
	}
	if len(bytes.TrimSpace([]byte(b.Text))) == 0 {
		at.Start, at.Msg, at.Fix = b.Info, "the block is empty", "write its keys between the fences, or take the block away"
		w.fault(at)
	}
}

// fenceRun returns the run of fence characters at the start of s.
func fenceRun(s []byte) string {
	i := 0
	for i < len(s) && (s[i] == '`' || s[i] == '~') {
		i++
	}
	return string(s[:i])
}

func (w *walk) reading(r *Reading, in where) {
	switch {
	case in.image:
		put(&w.inImages, r.Start)
	case in.unused:
		put(&w.inUnused, r.Start)
	default:
		w.shown[r.Start] = true
		w.page.Readings = append(w.page.Readings, r)
	}
}

func put(m *map[int]bool, at int) {
	if *m == nil {
		*m = map[int]bool{}
	}
	(*m)[at] = true
}

func (w *walk) link(dest []byte, label int, image bool) (href []byte) {
	l, p := newLink(dest, image)
	if l.Start = offsetIn(w.source, dest); l.Start < 0 {
		l.Start = label
	}
	if p != nil {
		w.fault(Fault{Start: l.Start, Msg: p.msg, Fix: p.fix})
		return nil
	}
	w.page.Links = append(w.page.Links, l)
	return []byte(l.href)
}

func (w *walk) heading(n *ast.Heading) {
	text, readings := plain(n, w.source)
	w.page.Headings = append(w.page.Headings, Heading{Level: n.Level, Text: text, Start: max(n.Pos(), 0), node: n})
	if n.Level != 1 || w.titled {
		return
	}
	w.titled = true
	for _, r := range readings {
		w.fault(Fault{Start: r.Start, Warn: true, Msg: "lists of notes leave this reading out, because the heading is the title of the note",
			Fix: "keep readings out of the first level-1 heading"})
	}
}

func (w *walk) fence(n *ast.FencedCodeBlock) {
	if n.Info == nil {
		w.lines(n.Lines(), -1)
		return
	}
	info := n.Info.Segment
	words := fields(info.Value(w.source), info.Start)
	if len(words) == 2 && words[0].text != "toml" && bytes.EqualFold([]byte(words[0].text), []byte("toml")) {
		w.fault(Fault{Start: words[0].at, Warn: true, Msg: fmt.Sprintf("%q makes this fence plain code and not a block", words[0].text),
			Fix: "write toml in lower case"})
	}
	w.code = append(w.code, span{info.Start, info.Stop})
	w.lines(n.Lines(), info.Start)
}

// lines notes the lines of a code block as code.
func (w *walk) lines(s *text.Segments, start int) {
	if s.Len() == 0 {
		return
	}
	if start < 0 {
		start = s.At(0).Start
	}
	w.code = append(w.code, span{start, s.At(s.Len() - 1).Stop})
}

func (w *walk) inline(n *ast.CodeSpan) {
	s := span{n.Pos(), n.Pos()}
	for c := n.FirstChild(); c != nil; c = c.NextSibling() {
		if t, ok := c.(*ast.Text); ok {
			s.stop = max(s.stop, t.Segment.Stop)
		}
	}
	w.code = append(w.code, s)
}

// tag quotes the tag that starts at an offset, cut at the end of its line.
func (w *walk) tag(at int) string {
	line, _, _ := bytes.Cut(w.source[at:], []byte("\n"))
	if i := bytes.IndexByte(line, '>'); i >= 0 {
		line = line[:i+1]
	}
	const most = 40
	tag := []rune(string(bytes.TrimSpace(line)))
	if len(tag) > most {
		tag = append(tag[:most-1], '…')
	}
	return strconv.Quote(string(tag))
}

// closes reports whether an HTML tag at an offset closes one that was reported,
// and notes the tag if it opens.
func (w *walk) closes(at int) bool {
	name := bytes.TrimLeft(w.source[at+1:], "/")
	if i := bytes.IndexAny(name, " \t\r\n/>"); i >= 0 {
		name = name[:i]
	}
	if w.tags == nil {
		w.tags = map[string]int{}
	}
	if w.source[at+1] != '/' {
		w.tags[string(name)]++
		return false
	}
	w.tags[string(name)]--
	return w.tags[string(name)] >= 0
}

// html reports raw HTML. What stands in a comment was taken out by the author;
// that one warning covers it.
func (w *walk) html(at int, s *text.Segments, closing text.Segment) {
	w.fault(Fault{Start: at, Warn: true, Msg: "the raw HTML " + w.tag(at) + " is left out", Fix: `write Markdown, or \< for the character itself`})
	if s.Len() == 0 || !bytes.HasPrefix(bytes.TrimLeft(w.source[s.At(0).Start:], " \t"), []byte("<!--")) {
		return
	}
	stop := s.At(s.Len() - 1).Stop
	if closing.Start >= 0 {
		stop = closing.Stop
	}
	w.code = append(w.code, span{s.At(0).Start, stop})
}
