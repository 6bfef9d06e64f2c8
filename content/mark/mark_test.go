package mark

import (
	"fmt"
	"runtime"
	"slices"
	"strings"
	"testing"
	"weak"

	"github.com/yuin/goldmark/ast"
	extast "github.com/yuin/goldmark/extension/ast"
	"github.com/yuin/goldmark/renderer"
	"github.com/yuin/goldmark/util"
)

// rendered returns the page with its holes written as [block KIND] and
// [reading KEY in UNIT].
func rendered(t testing.TB, source string, taken ...string) (string, *Page) {
	t.Helper()
	p := Parse([]byte(source))
	html, holes, err := p.Render(taken)
	if err != nil {
		t.Fatal(err)
	}
	var sb strings.Builder
	from := 0
	for _, h := range holes {
		sb.WriteString(html[from:h.At])
		from = h.At
		switch {
		case h.Block != nil:
			fmt.Fprintf(&sb, "[block %s]", h.Block.Kind)
		case h.Reading.In != "":
			fmt.Fprintf(&sb, "[reading %s in %s]", h.Reading.Key, h.Reading.In)
		default:
			fmt.Fprintf(&sb, "[reading %s]", h.Reading.Key)
		}
	}
	return sb.String() + html[from:], p
}

func faults(p *Page) string {
	var out []string
	for _, f := range p.Faults {
		out = append(out, fmt.Sprintf("%d: %s; %s", f.Start, f.Msg, f.Fix))
	}
	return strings.Join(out, "\n")
}

func TestReadings(t *testing.T) {
	const r = "{= cold/yield/A@2 h in % }"
	const hole = "[reading cold/yield/A@2 h in %]"
	for _, tt := range []struct{ name, source, want string }{
		{"paragraph", "The yield is " + r + ".", "<p>The yield is " + hole + ".</p>\n"},
		{"paragraph start", r + " here", "<p>" + hole + " here</p>\n"},
		{"heading", "## Yield " + r, `<h2 id="yield">Yield ` + hole + "</h2>\n"},
		{"setext heading", "Yield " + r + "\n---", `<h2 id="yield">Yield ` + hole + "</h2>\n"},
		{"list", "- a " + r + "\n- b", "<ul>\n<li>a " + hole + "</li>\n<li>b</li>\n</ul>\n"},
		{"tab list", "-\ta\n\n\tb " + r, "<ul>\n<li>\n<p>a</p>\n<p>b " + hole + "</p>\n</li>\n</ul>\n"},
		{"quote", "> a " + r + "\n> b", "<blockquote>\n<p>a " + hole + "\nb</p>\n</blockquote>\n"},
		{"table", "| a | b |\n|---|--:|\n| 1 | " + r + " |", "<table>\n<thead>\n<tr>\n<th>a</th>\n<th class=\"align-right\">b</th>\n</tr>\n</thead>\n<tbody>\n<tr>\n<td>1</td>\n<td class=\"align-right\">" + hole + "</td>\n</tr>\n</tbody>\n</table>\n"},
		{"table head", "| " + r + " |\n|---|\n| 1 |", "<table>\n<thead>\n<tr>\n<th>" + hole + "</th>\n</tr>\n</thead>\n<tbody>\n<tr>\n<td>1</td>\n</tr>\n</tbody>\n</table>\n"},
		{"definition list", "Yield\n: it is " + r, "<dl>\n<dt>Yield</dt>\n<dd>it is " + hole + "</dd>\n</dl>\n"},
		{"emphasis", "*a " + r + "* **" + r + "**", "<p><em>a " + hole + "</em> <strong>" + hole + "</strong></p>\n"},
		{"link text", "[see " + r + "](x.md)", `<p><a href="x.html">see ` + hole + "</a></p>\n"},
		{"CRLF", "a\r\n" + r + "\r\nb", "<p>a\n" + hole + "\nb</p>\n"},
		{"tab before", "a\t" + r, "<p>a\t" + hole + "</p>\n"},
		{"over two lines", "a {= cold/ratio/A:B@2\nh } b", "<p>a [reading cold/ratio/A:B@2 h] b</p>\n"},
		{"over two quoted lines", "> a {= cold/ratio/A:B@2\n> h in kJ/mol } b", "<blockquote>\n<p>a [reading cold/ratio/A:B@2 h in kJ/mol] b</p>\n</blockquote>\n"},
		{"no spaces", "{=a/b/c}", "<p>[reading a/b/c]</p>\n"},
		{"tabs inside", "{=\ta/b/c\tin\tkJ/mol\t}", "<p>[reading a/b/c in kJ/mol]</p>\n"},
		{"escaped", `a \{= a/b/c } b`, "<p>a {= a/b/c } b</p>\n"},
		{"escaped backslash", `a \\{= a/b/c } b`, "<p>a \\[reading a/b/c] b</p>\n"},
		{"code span", "`{= a/b/c }`", "<p><code>{= a/b/c }</code></p>\n"},
		{"indented code", "    {= a/b/c }\n", "<pre><code>{= a/b/c }\n</code></pre>\n"},
		{"fenced code", "```\n{= a/b/c }\n```\n", "<pre><code>{= a/b/c }\n</code></pre>\n"},
		{"fence info", "~~~ x {= a/b/c }\ny\n~~~\n", "<pre><code class=\"language-x\">y\n</code></pre>\n"},
		{"block", "```toml claims\nx = \"{= a/b/c }\"\n```\n", "[block claims]"},
		{"comment", "a <!-- {= a/b/c } --> b", "<p>a  b</p>\n"},
		{"comment block", "<!--\n{= a/b/c }\n-->\n", ""},
	} {
		t.Run(tt.name, func(t *testing.T) {
			got, p := rendered(t, tt.source)
			if got != tt.want {
				t.Errorf("got  %q\nwant %q", got, tt.want)
			}
			for _, f := range p.Faults {
				if !f.Warn {
					t.Errorf("fault: %s", faults(p))
				}
			}
			for _, m := range p.Readings {
				if !strings.HasPrefix(tt.source[m.Start:], "{=") {
					t.Errorf("a reading at %d, where the source is %q", m.Start, tt.source[m.Start:])
				}
			}
		})
	}
}

func TestReadingInFootnote(t *testing.T) {
	got, p := rendered(t, "a[^1]\n\n[^1]: yield {= a/b/c }\n")
	if !strings.Contains(got, "yield [reading a/b/c]") || len(p.Faults) > 0 {
		t.Errorf("got %q, faults %s", got, faults(p))
	}
}

// Whatever looks like a reading and is not shown is a fault at its place.
func TestLostReadings(t *testing.T) {
	for _, tt := range []struct{ name, source, want string }{
		{"image text", "![a {= k } b](p.png)", "4: a reading in the text of an image is not shown"},
		{"surplus cell", "| a |\n|---|\n| 1 | {= k } |", "18: the reading stands in a table cell beyond"},
		{"surplus cell in a quote", "> | a |\n> |---|\n> | 1 | {= k } |", "24: the reading stands in a table cell beyond"},
		{"left open", "a {= k b\n\nc }", "2: the reading is not closed"},
		{"left open before another", "a {= k {= j } b", "2: the reading is not closed"},
		{"empty", "a {= } b", "2: the reading names no result"},
		{"no unit", "a {= k in } b", "2: the reading has no unit"},
		{"no key", "a {= in kJ/mol } b", "2: the reading has no result key"},
		{"cut by a table", "| a | b |\n|---|---|\n| {= k|j } | 2 |", "22: the reading is cut in two"},
		{"link title", `[a](x.md "{= k }")`, "10: the reading is not shown where it stands"},
		{"link address", `[a](<{= k }>)`, "5: the reading is not shown where it stands"},
		{"reference", "[a]\n\n[a]: x.md '{= k }'\n", "16: the reading is not shown where it stands"},
		{"raw HTML", "<div>{= k }</div>\n", "5: the reading is not shown where it stands"},
		{"attribute of raw HTML", `a <b title="{= k }">b</b>`, "12: the reading is not shown where it stands"},
		{"unused footnote", "a\n\n[^1]: b {= k }\n", "11: the reading stands in a footnote nobody refers to"},
		{"footnote label", "a [^{= k }]\n\n[^{= k }]: b\n", "4: the reading is not shown where it stands"},
		{"end of file", "a {=", "2: the reading is not closed"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			_, p := rendered(t, tt.source)
			found := false
			for _, f := range p.Faults {
				if !f.Warn && strings.HasPrefix(fmt.Sprintf("%d: %s", f.Start, f.Msg), tt.want) && f.Fix != "" {
					found = true
				}
			}
			if !found {
				t.Errorf("want the fault %q, got\n%s", tt.want, faults(p))
			}
		})
	}
}

func TestBlocks(t *testing.T) {
	for _, tt := range []struct{ name, source, kind, text string }{
		{"plain", "```toml run\na = 1\n```\n", "run", "a = 1\n"},
		{"tildes", "~~~~toml run\na = 1\n~~~~\n", "run", "a = 1\n"},
		{"spaces in the information string", "``` \ttoml \t run \t\na = 1\n```\n", "run", "a = 1\n"},
		{"CRLF", "```toml run\r\na = 1\r\nb = 2\r\n```\r\n", "run", "a = 1\r\nb = 2\r\n"},
		{"quote", "> ```toml run\n> a = 1\n>\n> b = 2\n> ```\n", "run", "a = 1\n\nb = 2\n"},
		{"list", "1.  x\n\n    ```toml run\n    a = 1\n      b = 2\n    ```\n", "run", "a = 1\n  b = 2\n"},
		{"tabbed list", "-\tx\n\n\t```toml run\n\ta = 1\n\t\tb = 2\n\t```\n", "run", "a = 1\n\tb = 2\n"},
		{"partly eaten tab", "- x\n\n  ```toml run\n\ta = 1\n  ```\n", "run", "  a = 1\n"},
		{"quote in a list", "- > ```toml run\n  > a = 1\n  > ```\n", "run", "a = 1\n"},
		{"indented fence", "  ```toml run\n  a = 1\n b = 2\n  ```\n", "run", "a = 1\nb = 2\n"},
		{"accents", "é\n\n> ```toml run\n> a = \"é\"\n> ```\n", "run", "a = \"é\"\n"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			_, p := rendered(t, tt.source)
			if len(p.Faults) > 0 {
				t.Error(faults(p))
			}
			if len(p.Blocks) != 1 {
				t.Fatalf("%d blocks", len(p.Blocks))
			}
			b := p.Blocks[0]
			if b.Kind != tt.kind || b.Text != tt.text || !b.Closed {
				t.Errorf("kind %q, closed %v, text %q; want %q, %q", b.Kind, b.Closed, b.Text, tt.kind, tt.text)
			}
			if run := fenceRun([]byte(tt.source[b.Start:])); len(run) < 3 {
				t.Errorf("the fence is not at %d", b.Start)
			}
			if !strings.HasPrefix(tt.source[b.Info:], "toml") {
				t.Errorf("the information string is not at %d", b.Info)
			}
			checkOffsets(t, tt.source, b)
		})
	}
}

// checkOffsets holds every byte of the text to the byte of the source it claims.
func checkOffsets(t testing.TB, source string, b *Block) {
	t.Helper()
	for i := range len(b.Text) {
		at := b.Offset(i)
		if at >= len(source) {
			if i != len(b.Text)-1 || b.Text[i] != '\n' {
				t.Fatalf("byte %d of %q at %d, past the source", i, b.Text, at)
			}
			continue
		}
		switch {
		case b.Text[i] == '\n' || b.Text[i] == '\r': // ends of lines share a place
		case source[at] == b.Text[i]:
		case b.Text[i] == ' ' && source[at] == '\t':
		default:
			t.Fatalf("byte %d of %q is %q, but the source has %q at %d\nsource %q", i, b.Text, b.Text[i], source[at], at, source)
		}
	}
}

func TestBlockFaults(t *testing.T) {
	for _, tt := range []struct{ name, source, want string }{
		{"not closed", "x\n\n```toml run\na = 1\n", "3: the block is not closed; add ``` on a line"},
		{"not closed, tildes", "~~~~toml run\na = 1\n~~~\n", "0: the block is not closed; add ~~~~ on a line"},
		{"closed by its quote only", "> ```toml run\n> a = 1\n\nb\n", "2: the block is not closed"},
		{"closing fence outside the quote", "> ```toml run\n> a = 1\n```\n", "2: the block is not closed"},
		{"empty", "```toml run\n```\n", "3: the block is empty"},
		{"blank", "```toml run\n \n\n```\n", "3: the block is empty"},
		{"third word", "```toml run cold\na = 1\n```\n", `12: the fence has a third word, "cold"`},
		{"capitals", "```TOML run\na = 1\n```\n", `3: "TOML" makes this fence plain code`},
		{"unused footnote", "[^1]: x\n\n    ```toml run\n    a = 1\n    ```\n", "13: the block stands in a footnote"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			_, p := rendered(t, tt.source)
			if !strings.Contains("\n"+faults(p), "\n"+tt.want) {
				t.Errorf("want %q, got\n%s", tt.want, faults(p))
			}
		})
	}
}

func TestPlainFencesStayCode(t *testing.T) {
	for _, source := range []string{"```toml\na = 1\n```\n", "```go run\na\n```\n", "```\na\n```\n", "```tomls run\na\n```\n"} {
		if got, p := rendered(t, source); len(p.Blocks) > 0 || len(p.Faults) > 0 || !strings.HasPrefix(got, "<pre><code") {
			t.Errorf("%q: %q, faults %s", source, got, faults(p))
		}
	}
}

func TestHeadingIDs(t *testing.T) {
	got, p := rendered(t, "# Addition\n## Addition\n## *Barriers* & `k`: how -- many?\n## ΔG‡ of C_6\n## ?\n## Addition 2\n", "addition")
	want := []string{"addition-2", "addition-3", "barriers-k-how-many", "δg-of-c-6", "section", "addition-2-2"}
	for i, h := range p.Headings {
		if h.ID != want[i] || !strings.Contains(got, `id="`+want[i]+`"`) {
			t.Errorf("heading %q has the id %q, want %q", h.Text, h.ID, want[i])
		}
	}
	if p.Headings[2].Text != "Barriers & k: how – many?" {
		t.Errorf("text %q", p.Headings[2].Text)
	}
}

func TestLinks(t *testing.T) {
	for _, tt := range []struct{ dest, href, problem string }{
		{"x.md", "x.html", ""},
		{"../x/y.md#heading", "../x/y.html#heading", ""},
		{"#heading", "#heading", ""},
		{"x.md#%CE%94g", "x.html#%CE%94g", ""},
		{"x%20y.md", "x%20y.html", ""},
		{"<x y.md>", "x%20y.html", ""},
		{"é.csv", "%C3%A9.csv", ""},
		{"a&amp;b.md", "a&amp;b.html", ""},
		{"https://example.org/a?b=c&d", "https://example.org/a?b=c&amp;d", ""},
		{"mailto:a@example.org", "mailto:a@example.org", ""},
		{"javascript:alert(1)", "", "scheme javascript:"},
		{"JavaScript&colon;alert(1)", "", "scheme JavaScript:"},
		{"data:text/html,x", "", "scheme data:"},
		{"doi:10.1063/1.1749604", "", "no address a browser opens"},
		{"/etc/passwd", "", "root of the disk"},
		{"//example.org/x", "", "no scheme"},
		{"..%5Cx.md", `..%5Cx.html`, ""},
		{`a\\b.md`, "", "backslash"},
		{"100%.md", "", "hexadecimal"},
		{"x.md?y", "", "query"},
		{"", "", "no destination"},
	} {
		t.Run(tt.dest, func(t *testing.T) {
			source := "see [text](" + tt.dest + ")"
			got, p := rendered(t, source)
			want := `<a href="` + tt.href + `">`
			if tt.problem != "" {
				want = "<a>"
				if len(p.Faults) != 1 || !strings.Contains(p.Faults[0].Msg, tt.problem) {
					t.Errorf("want the fault %q, got %s", tt.problem, faults(p))
				} else if tt.dest != "" && p.Faults[0].Start != len("see [text](") {
					t.Errorf("fault at %d", p.Faults[0].Start)
				}
			} else if len(p.Faults) > 0 {
				t.Error(faults(p))
			}
			if !strings.Contains(got, want) {
				t.Errorf("got %q, want %q", got, want)
			}
			for _, l := range p.Links {
				if at := strings.TrimPrefix(source[l.Start:], "<"); !strings.HasPrefix(strings.TrimPrefix(tt.dest, "<"), at[:1]) {
					t.Errorf("destination at %d: %q", l.Start, source[l.Start:])
				}
			}
		})
	}
	got, p := rendered(t, "[a][b] and ![alt *text*](p.png \"t\") ![](q.png) <javascript:x>\n\n[b]: c.md\n")
	if !strings.Contains(got, `<a href="c.html">a</a>`) || !strings.Contains(got, `<img src="p.png" alt="alt text" title="t">`) {
		t.Errorf("got %q", got)
	}
	if len(p.Links) != 3 || p.Links[0].Start != len(got[:0])+strings.Index("[a][b] and ![alt *text*](p.png \"t\") ![](q.png) <javascript:x>\n\n[b]: c.md\n", "c.md") {
		t.Errorf("links %+v", p.Links)
	}
	if f := faults(p); !strings.Contains(f, "the image has no text") || !strings.Contains(f, "scheme javascript:") {
		t.Error(f)
	}
}

func TestRawHTML(t *testing.T) {
	got, p := rendered(t, "a <b>c</b>\n\n<div>x</div>\n\nd</b> <br/>\n")
	if got != "<p>a c</p>\n<p>d </p>\n" {
		t.Errorf("got %q", got)
	}
	want := []int{2, 12, 27, 32} // a closing tag goes with the one it closes
	var at []int
	for _, f := range p.Faults {
		if !f.Warn {
			t.Errorf("no warning: %+v", f)
		}
		at = append(at, f.Start)
	}
	if !slices.Equal(at, want) {
		t.Errorf("faults %s", faults(p))
	}
}

func TestTitleReading(t *testing.T) {
	_, p := rendered(t, "# Yield {= a/b/c }\n\n# Again {= a/b/c }\n")
	if len(p.Faults) != 1 || p.Faults[0].Start != 8 || !p.Faults[0].Warn {
		t.Error(faults(p))
	}
}

// 10 000 kept trees would cost some 600 MB.
func TestTreeIsDropped(t *testing.T) {
	p := Parse([]byte("# a {= b }\n\n```toml c\nd = 1\n```\n\n[e](f.md)\n"))
	tree := weak.Make(p.root.(*ast.Document))
	_, holes, err := p.Render(nil)
	if err != nil {
		t.Fatal(err)
	}
	runtime.GC()
	if tree.Value() != nil {
		t.Error("the tree is still held")
	}
	runtime.KeepAlive(p)
	runtime.KeepAlive(holes)
}

func TestPriorities(t *testing.T) {
	for name, list := range map[string][]util.PrioritizedValue{
		"block parsers": blockParsers(), "inline parsers": inlineParsers(), "paragraph transformers": paragraphTransformers(),
		"tree transformers": treeTransformers(), "node renderers": nodeRenderers(),
	} {
		for i := 1; i < len(list); i++ {
			if list[i-1].Priority >= list[i].Priority {
				t.Errorf("%s: %d does not come before %d", name, list[i-1].Priority, list[i].Priority)
			}
		}
	}
}

type registered map[ast.NodeKind]bool

func (r registered) Register(kind ast.NodeKind, _ renderer.NodeRendererFunc) { r[kind] = true }

// A node kind without a renderer would vanish in silence.
func TestEveryNodeKindHasARenderer(t *testing.T) {
	r := registered{}
	for _, v := range nodeRenderers() {
		v.Value.(renderer.NodeRenderer).RegisterFuncs(r)
	}
	for _, k := range []ast.NodeKind{
		KindBlock, KindReading,
		ast.KindDocument, ast.KindTextBlock, ast.KindParagraph, ast.KindHeading, ast.KindThematicBreak, ast.KindCodeBlock,
		ast.KindFencedCodeBlock, ast.KindBlockquote, ast.KindList, ast.KindListItem, ast.KindHTMLBlock, ast.KindLinkReferenceDefinition,
		ast.KindText, ast.KindString, ast.KindCodeSpan, ast.KindEmphasis, ast.KindLink, ast.KindImage, ast.KindAutoLink, ast.KindRawHTML,
		extast.KindTable, extast.KindTableHeader, extast.KindTableRow, extast.KindTableCell,
		extast.KindFootnote, extast.KindFootnoteLink, extast.KindFootnoteBacklink, extast.KindFootnoteList,
		extast.KindDefinitionList, extast.KindDefinitionTerm, extast.KindDefinitionDescription,
	} {
		if !r[k] {
			t.Errorf("no renderer for %s", k)
		}
	}
	for _, source := range []string{"a[^1] <b> `c` {= k } [d](e.md) ![f](g.png) <https://example.org> \"h\" *i*\n\n[^1]: j\n\nk\n: l\n\n| m |\n|---|\n| n |\n\n```toml run\no = 1\n```\n\n```\np\n```\n\n    q\n\n> r\n\n- s\n\n---\n\n# t\n\n<div>\n\n[u]: v\n"} {
		p := Parse([]byte(source))
		_ = ast.Walk(p.root, func(n ast.Node, _ bool) (ast.WalkStatus, error) {
			if !r[n.Kind()] {
				t.Errorf("no renderer for %s", n.Kind())
			}
			return ast.WalkContinue, nil
		})
	}
}
