package content

import (
	"bytes"
	"fmt"
	"testing"

	"github.com/yuin/goldmark"
	"github.com/yuin/goldmark/extension"
	"github.com/yuin/goldmark/parser"
)

// prose returns a note of some 4 kB with links, lists, a table and emphasis.
func prose(i int) string {
	var b bytes.Buffer
	fmt.Fprintf(&b, "# Note %d\n\n", i)
	for s := range 6 {
		fmt.Fprintf(&b, "## Part %d\n\nThe *first* adduct forms \"below\" the second -- see [the next](n%04d.md#part-1), at %d K.\nIts barrier is **not** the lowest; `code` and more words follow here, so that a line is filled.\n\n", s, (i+1)%1000, 200+s)
		fmt.Fprintf(&b, "- one point about the addition\n- another, with a note[^%d]\n\n> Quoted words of a report, over\n> two lines.\n\n[^%d]: Said elsewhere.\n\n| state | energy |\n|---|--:|\n| A | -11.5 |\n| B | -17.0 |\n\n", s, s)
	}
	return b.String()
}

// BenchmarkOpen reads 1000 prose notes beside bare goldmark with the same
// extensions, on one core each for comparison; the last case uses every core.
func BenchmarkOpen(b *testing.B) {
	pairs := []string{}
	total := 0
	for i := range 1000 {
		s := prose(i)
		total += len(s)
		pairs = append(pairs, fmt.Sprintf("n%04d.md", i), s)
	}
	fsys := files(pairs...)
	b.Run("reader=goldmark", func(b *testing.B) {
		md := goldmark.New(goldmark.WithExtensions(extension.Table, extension.Footnote, extension.DefinitionList, extension.Typographer),
			goldmark.WithParserOptions(parser.WithAutoHeadingID()))
		b.SetBytes(int64(total))
		b.ReportAllocs()
		for b.Loop() {
			for i := 1; i < len(pairs); i += 2 {
				var out bytes.Buffer
				if err := md.Convert([]byte(pairs[i]), &out); err != nil {
					b.Fatal(err)
				}
			}
		}
	})
	b.Run("reader=content", func(b *testing.B) {
		b.SetBytes(int64(total))
		b.ReportAllocs()
		for b.Loop() {
			if _, faults := Open(fsys, "."); len(faults) > 0 {
				b.Fatal(listed(faults))
			}
		}
	})
}
