package content

import (
	"fmt"
	"strings"
	"testing"
	"unicode/utf8"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
)

// offset returns the byte offset of a place in a source.
func offset(source []byte, at fault.Place) int {
	o := 0
	for range at.Line - 1 {
		o += strings.IndexByte(string(source[o:]), '\n') + 1
	}
	for range at.Col - 1 {
		_, n := utf8.DecodeRune(source[o:])
		o += n
	}
	return o
}

// checkPlaces holds every key of every block to the text at its place.
func checkPlaces(t testing.TB, n *Note) {
	var visit func(k *schema.Node)
	visit = func(k *schema.Node) {
		if o := offset(n.Source, k.At); o < 0 || o > len(n.Source) {
			t.Fatalf("key %s at %v, outside the source", k.Key, k.At)
		}
		for _, kid := range k.Kids {
			if k.Kind == schema.Table {
				rest := string(n.Source[offset(n.Source, kid.KeyAt):])
				if !strings.HasPrefix(strings.TrimLeft(rest, `"'`), kid.Key) && !strings.Contains(rest[:min(len(rest), 4*len(kid.Key)+80)], `\`) {
					t.Errorf("key %q at %v, where the source is %q", kid.Key, kid.KeyAt, rest[:min(len(rest), 20)])
				}
			}
			visit(kid)
		}
	}
	for _, b := range n.Blocks {
		visit(b.Tree)
	}
}

func TestPlaces(t *testing.T) {
	toml := []string{"id = \"é‡\"", "[species]", "A = { G = 0 }", "B.H = \"1 ± 2\"", "[[step]]", "name = \"x\"", "\"quoted key\" = [1, 2]"}
	for name, prefix := range map[string]string{"plain": "", "quote": "> ", "nested": "> - > ", "list": "    ", "tabs": "\t"} {
		for _, end := range []string{"\n", "\r\n"} {
			t.Run(name+fmt.Sprintf("%q", end), func(t *testing.T) {
				lines := []string{"# ñ", ""}
				first, next := prefix, prefix
				switch name {
				case "nested":
					next = ">   > "
				case "list":
					first = "1.  "
				case "tabs":
					first = "-\t"
				}
				lines = append(lines, first+"```toml mechanism")
				for _, l := range toml {
					lines = append(lines, next+l)
				}
				lines = append(lines, next+"```")
				nb, faults := Open(files("n.md", strings.Join(lines, end)+end), ".")
				if len(faults) > 0 || len(nb.Notes[0].Blocks) != 1 {
					t.Fatal(listed(faults))
				}
				b := nb.Notes[0].Blocks[0]
				if b.Label != "mechanism \"é‡\"" || b.Text != strings.Join(toml, end)+end {
					t.Errorf("label %s, text %q", b.Label, b.Text)
				}
				checkPlaces(t, nb.Notes[0])
				if at := b.Tree.Get("species", "B", "H").At; at.Line != 7 {
					t.Errorf("B.H at %v", at)
				}
			})
		}
	}
}

func FuzzOpen(f *testing.F) {
	for _, s := range []string{
		"# a\n\n```toml run\nid = \"b\"\nx.y = [1, { z = 2 }]\n```\n{= b/c in d }\n[e](n.md#a) ![](p.png)\n",
		"> - ```toml x\n>\t id = 1\n>   ```\n", "\ufeff# a\r\n\t```toml b\r\n", "\xff\xfea", "# a\n\n[b](..%2Fx) [c](%00) [d](#%zz)\n\n[e]: <f g.md>\n",
		"-\t```toml a\n\t\tb = \"\"\"\n\tc\"\"\"\n\t```\n", "# {= a }\n\n[^1]\n\n[^1]: ```toml a\n    b = 1\n    ```\n",
	} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, source string) {
		nb, faults := Open(files("n.md", source, "p.png", ""), "root")
		for _, d := range faults {
			if d.At.File == "" || d.At.Line < 1 || d.At.Col < 1 || d.Msg == "" || d.Fix == "" {
				t.Errorf("fault %+v", d)
			}
			_ = d.Error()
		}
		for _, n := range nb.Notes {
			checkPlaces(t, n)
			for _, p := range n.Pieces {
				if strings.ContainsRune(p.HTML, 0) || strings.Contains(p.HTML, "javascript:") && strings.Contains(p.HTML, `href="javascript:`) {
					t.Errorf("page %q", p.HTML)
				}
			}
		}
	})
}
