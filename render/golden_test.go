package render

import (
	"bytes"
	"context"
	"encoding/xml"
	"flag"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"testing/fstest"

	"saddlebook/render/kind"
)

var update = flag.Bool("update", false, "rewrite the golden files; read the change before it is kept")

// TestKinds holds what each kind computes and shows against golden files: a
// note for each kind in testdata/kinds, its results and its page text beside it.
func TestKinds(t *testing.T) {
	notes, err := filepath.Glob("testdata/kinds/*.md")
	if err != nil {
		t.Fatal(err)
	}
	covered := map[string]bool{}
	for _, file := range notes {
		name := strings.TrimSuffix(filepath.Base(file), ".md")
		t.Run(name, func(t *testing.T) {
			source, err := os.ReadFile(file)
			if err != nil {
				t.Fatal(err)
			}
			fsys := fstest.MapFS{"saddlebook.toml": {Data: []byte("title = \"Kinds\"\n")}, "kind-" + name + ".md": {Data: source}}
			s, faults, err := open(context.Background(), Source{FS: fsys}, Options{Jobs: 1})
			if err != nil {
				t.Fatal(err)
			}
			var results bytes.Buffer
			for _, d := range faults {
				results.WriteString(d.Error() + "\n")
			}
			if faults.Failed() {
				t.Fatal(results.String())
			}
			for _, b := range s.Blocks {
				covered[b.Kind.Name] = true
				if err := WriteResults(&results, resultsOf(b), "text"); err != nil {
					t.Fatal(err)
				}
			}
			page, err := body(s, s.Book.Notes[0])
			if err != nil {
				t.Fatal(err)
			}
			wellFormed(t, "<body>"+page+"</body>")
			golden(t, "testdata/kinds/"+name+".results.golden", results.String())
			golden(t, "testdata/kinds/"+name+".html.golden", page)
		})
	}
	for _, k := range kind.Names() {
		if !covered[k] {
			t.Errorf("no note in testdata/kinds has a block of kind %q", k)
		}
	}
}

func golden(t *testing.T, file, got string) {
	t.Helper()
	if *update {
		if err := os.WriteFile(file, []byte(got), 0o666); err != nil {
			t.Fatal(err)
		}
		return
	}
	want, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	if got == string(want) {
		return
	}
	g, w := strings.Split(got, "\n"), strings.Split(string(want), "\n")
	for i := range max(len(g), len(w)) {
		a, b := "(nothing)", "(nothing)"
		if i < len(g) {
			a = g[i]
		}
		if i < len(w) {
			b = w[i]
		}
		if a != b {
			t.Errorf("%s differs from line %d on; rewrite it with -update and read the change\ngot  %.300s\nwant %.300s", file, i+1, a, b)
			return
		}
	}
}

// wellFormed reads HTML that we write as strictly as XML.
func wellFormed(t *testing.T, text string) {
	t.Helper()
	d := xml.NewDecoder(strings.NewReader(text))
	d.Strict = true
	d.AutoClose = []string{"br", "hr", "img"}
	d.Entity = xml.HTMLEntity
	for {
		if _, err := d.Token(); err == io.EOF {
			return
		} else if err != nil {
			t.Errorf("not well formed: %v", err)
			return
		}
	}
}
