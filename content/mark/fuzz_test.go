package mark

import (
	"regexp"
	"strings"
	"testing"
	"unicode/utf8"
)

// Every `{=` that is neither code nor escaped is a node or a fault; every byte of
// every block stands where it claims; nothing panics.
func FuzzParse(f *testing.F) {
	for _, s := range []string{
		"# a\n\n```toml run\na = 1\n```\n{= b/c in d }", "> - ```toml x\n>\t a\n", "| a |\n|---|\n| b | {= c } |", "![{= a }](b)", "\\{= a }",
		"a[^1]\n\n[^1]: {= b }\n\n\t```toml c\n\t\td\n", "[a](<{= b }> '{= c }')", "<!-- {= a", "-\t```toml a\r\n\tb\r\n", "a\n: {= b }\n:\t```toml c\n\td",
		"```toml a\f\v b\n", "```toml a \v", "1.\t> ```toml a\n\t>\t\tb\n", "`{= a", "[{= a }][b]\n\n[b]: c.md#d", "\t\t```toml a\n", "{=\n> }",
	} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, source string) {
		if strings.ContainsRune(source, 0) || !utf8.ValidString(source) {
			return // refused before parsing
		}
		p := Parse([]byte(source))
		html, holes, err := p.Render(nil)
		if err != nil {
			t.Fatal(err)
		}
		if strings.ContainsRune(html, 0) {
			t.Errorf("NUL in %q", html)
		}
		if want := len(p.Readings); want > len(holes) {
			t.Errorf("%d readings, %d holes", want, len(holes))
		}
		last := 0
		for _, h := range holes {
			if h.At < last || h.At > len(html) {
				t.Errorf("hole at %d after %d", h.At, last)
			}
			last = h.At
		}
		for _, r := range p.Readings {
			if !strings.HasPrefix(source[r.Start:], "{=") {
				t.Errorf("a reading at %d, where the source is %q", r.Start, source[r.Start:])
			}
		}
		for _, b := range p.Blocks {
			checkOffsets(t, source, b)
			if run := fenceRun([]byte(source[b.Start:])); len(run) < 3 {
				t.Errorf("no fence at %d of %q", b.Start, source)
			}
			if !strings.HasPrefix(source[b.Info:], "toml") {
				t.Errorf("no information string at %d of %q", b.Info, source)
			}
		}
		checkNoneVanished(t, source, filled(html, holes), p)
		for _, q := range p.Faults {
			if q.Start < 0 || q.Start > len(source) || q.Msg == "" || q.Fix == "" {
				t.Errorf("fault %+v", q)
			}
		}
	})
}

// filled is the page with a sign in every hole, so that what stands on either
// side of one does not meet.
func filled(html string, holes []Hole) string {
	var b strings.Builder
	last := 0
	for _, h := range holes {
		b.WriteString(html[last:h.At] + "•")
		last = h.At
	}
	return b.String() + html[last:]
}

// checkNoneVanished counts: each `{=` of the source is a reading, a fault, code on
// the page or text of a block; and none is shown literally without a fault.
func checkNoneVanished(t *testing.T, source, html string, p *Page) {
	if strings.ContainsAny(source, "\\&") || strings.Contains(source, "<!--") {
		return // escapes and comments need the parser to tell
	}
	for _, line := range strings.Split(source, "\n") {
		if strings.Contains(line, "{=") && (strings.Contains(line, "```") || strings.Contains(line, "~~~")) {
			return // perhaps an information string
		}
	}
	lost := 0
	for _, f := range p.Faults {
		if f.Warn && strings.HasPrefix(f.Msg, "the footnote ") {
			return // it is left out, as the warning says, and the code in it too
		}
		if !f.Warn && strings.HasPrefix(source[f.Start:], "{=") {
			lost++
		}
	}
	inBlocks := 0
	for _, b := range p.Blocks {
		inBlocks += strings.Count(b.Text, "{=")
	}
	all, onPage := strings.Count(source, "{="), strings.Count(html, "{=")
	if len(p.Readings)+lost+inBlocks+onPage < all {
		t.Errorf("%d of `{=`, but %d readings, %d faults, %d in blocks, %d on the page\nsource %q\nhtml %q", all, len(p.Readings), lost, inBlocks, onPage, source, html)
	}
	if strings.Contains(source, "![") && strings.Contains(source, "`") {
		return // code in the text of an image is plain text on the page
	}
	if literal := strings.Count(code.ReplaceAllString(html, "•"), "{="); literal > lost {
		t.Errorf("%d of `{=` stand literally on the page, %d faults\nsource %q\nhtml %q", literal, lost, source, html)
	}
}

var code = regexp.MustCompile(`(?s)<code.*?</code>`)
