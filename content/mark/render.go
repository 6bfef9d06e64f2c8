package mark

import (
	"errors"

	"github.com/yuin/goldmark/ast"
	"github.com/yuin/goldmark/renderer"
	"github.com/yuin/goldmark/renderer/html"
	"github.com/yuin/goldmark/util"
)

// cut makes a hole at the end of what was written.
func cut(w util.BufWriter, h Hole) error {
	to, ok := w.(*holed)
	if !ok {
		return errors.New("mark: a page is rendered by Page.Render only")
	}
	h.At = to.Len()
	to.holes = append(to.holes, h)
	return nil
}

// proseRenderer renders what differs from plain CommonMark: links and images have
// checked addresses, and raw HTML leaves no trace.
type proseRenderer struct{}

func (proseRenderer) RegisterFuncs(reg renderer.NodeRendererFuncRegisterer) {
	reg.Register(ast.KindLink, renderLink)
	reg.Register(ast.KindImage, renderImage)
	reg.Register(ast.KindHTMLBlock, leaveOut)
	reg.Register(ast.KindRawHTML, leaveOut)
}

func leaveOut(util.BufWriter, []byte, ast.Node, bool) (ast.WalkStatus, error) {
	return ast.WalkSkipChildren, nil
}

// renderLink writes the address the collector left in Destination; a link without
// one has a fault and is written without an address.
func renderLink(w util.BufWriter, _ []byte, node ast.Node, entering bool) (ast.WalkStatus, error) {
	if !entering {
		_, err := w.WriteString("</a>")
		return ast.WalkContinue, err
	}
	n := node.(*ast.Link)
	_, _ = w.WriteString("<a")
	address(w, "href", n.Destination)
	title(w, n.Title)
	return ast.WalkContinue, w.WriteByte('>')
}

func renderImage(w util.BufWriter, source []byte, node ast.Node, entering bool) (ast.WalkStatus, error) {
	if !entering {
		return ast.WalkContinue, nil
	}
	n := node.(*ast.Image)
	_, _ = w.WriteString("<img")
	address(w, "src", n.Destination)
	alt, _ := plain(n, source)
	_, _ = w.WriteString(` alt="`)
	_, _ = w.Write(util.EscapeHTML([]byte(alt)))
	_ = w.WriteByte('"')
	title(w, n.Title)
	return ast.WalkSkipChildren, w.WriteByte('>')
}

func address(w util.BufWriter, name string, to []byte) {
	if len(to) == 0 {
		return
	}
	_, _ = w.WriteString(" " + name + `="`)
	_, _ = w.Write(util.EscapeHTML(util.URLEscape(to, false)))
	_ = w.WriteByte('"')
}

func title(w util.BufWriter, text []byte) {
	if text == nil {
		return
	}
	_, _ = w.WriteString(` title="`)
	html.DefaultWriter.Write(w, text)
	_ = w.WriteByte('"')
}
