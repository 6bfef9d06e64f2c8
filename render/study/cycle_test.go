package study

import (
	"context"
	"fmt"
	"strings"
	"testing"
	"testing/fstest"

	"saddlebook/content"
	"saddlebook/content/schema"
	"saddlebook/render/kind"
	"saddlebook/render/paper"
)

// A linkSource is the source of a kind for this test alone: a block that needs
// others of its kind, which no kind of the program does.
type linkSource struct {
	ID    string   `key:"id"`
	Needs []string `key:"needs"`
}

func init() {
	kind.Register(kind.Kind[linkSource, string]{
		Name: "link", Doc: "A link of a chain, for a test.", Version: 1,
		Fields: []schema.Field{
			{Key: "id", Doc: "its name", Type: schema.Text, Required: true, Example: "a"},
			{Key: "needs", Doc: "the links it hangs on", Type: schema.Words, Example: `["b"]`},
		},
		ID: func(s *linkSource) string { return s.ID },
		Refs: func(s *linkSource) []kind.Ref {
			var refs []kind.Ref
			for i, n := range s.Needs {
				refs = append(refs, kind.Ref{Target: n, Path: []string{"needs", fmt.Sprint(i + 1)}})
			}
			return refs
		},
		Compute: func(_ context.Context, s *linkSource, in kind.Inputs) (string, error) {
			chain := s.ID
			for _, n := range s.Needs {
				v, err := in.Value(n)
				if err != nil {
					return "", err
				}
				chain += "(" + v.(string) + ")"
			}
			return chain, nil
		},
		Present: func(*linkSource, string, *paper.Sheet) {},
	})
}

// TestCycles holds that blocks which need each other in a circle are refused
// with the names of its members, once for each circle, and that what stands
// beside or below the circle is computed or left alone without a second fault.
func TestCycles(t *testing.T) {
	for _, tt := range []struct {
		name, blocks string // blocks: id and what it needs, by spaces; in other.md after a |
		faults       string
		computed     string
	}{
		{"none", "a b; b c; c", "", "a(b(c)); b(c); c"},
		{"two", "a b; b a; c", `note.md:9:10: error: link "b", needs.1: blocks depend on each other in a circle: note#a needs note#b needs note#a; let one of them name a block outside the circle`, "c"},
		{"itself", "a a", `note.md:5:10: error: link "a", needs.1: blocks depend on each other in a circle: note#a needs note#a; let one of them name a block outside the circle`, ""},
		{"a tail before the circle", "a b; b c; c b; d", `note.md:13:10: error: link "c", needs.1: blocks depend on each other in a circle: note#b needs note#c needs note#b; let one of them name a block outside the circle`, "d"},
		{"two circles", "a b; b a; c d; d c", `note.md:9:10: error: link "b", needs.1: blocks depend on each other in a circle: note#a needs note#b needs note#a; let one of them name a block outside the circle
note.md:17:10: error: link "d", needs.1: blocks depend on each other in a circle: note#c needs note#d needs note#c; let one of them name a block outside the circle`, ""},
		{"over two notes", "a other#b | b note#a", `other.md:5:10: error: link "b", needs.1: blocks depend on each other in a circle: note#a needs other#b needs note#a; let one of them name a block outside the circle`, ""},
		{"a diamond is none", "a b c; b d; c d; d", "", "a(b(d))(c(d)); b(d); c(d); d"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			fsys := fstest.MapFS{"saddlebook.toml": {Data: []byte("title = \"Chains\"\n")}}
			here, there, _ := strings.Cut(tt.blocks, "|")
			fsys["note.md"] = &fstest.MapFile{Data: []byte(links(here))}
			if there != "" {
				fsys["other.md"] = &fstest.MapFile{Data: []byte(links(there))}
			}
			book, faults := content.Open(fsys, "")
			if len(faults) > 0 {
				t.Fatal(faults)
			}
			for _, jobs := range []int{1, 4} {
				s, faults, err := Run(context.Background(), book, Options{Jobs: jobs})
				if err != nil {
					t.Fatal(err)
				}
				var told, computed []string
				for _, d := range faults {
					told = append(told, d.Error())
				}
				for _, b := range s.Blocks {
					if b.Done {
						computed = append(computed, b.Value.(string))
					}
				}
				if got := strings.Join(told, "\n"); got != tt.faults {
					t.Errorf("%d jobs: got\n%s\nwant\n%s", jobs, got, tt.faults)
				}
				if got := strings.Join(computed, "; "); got != tt.computed {
					t.Errorf("%d jobs: computed %q, want %q", jobs, got, tt.computed)
				}
			}
		})
	}
}

// links writes a note of link blocks.
func links(list string) string {
	var b strings.Builder
	b.WriteString("# Chain\n\n")
	for _, one := range strings.Split(list, ";") {
		words := strings.Fields(one)
		b.WriteString("```toml link\nid = \"" + words[0] + "\"\n")
		if len(words) > 1 {
			b.WriteString("needs = [\"" + strings.Join(words[1:], "\", \"") + "\"]\n")
		}
		b.WriteString("```\n")
	}
	return b.String()
}
