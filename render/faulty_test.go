package render

import (
	"context"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
	"testing/fstest"
)

// A block with a fault is looked through for others, so every kind must bear
// values that are missing or wrong. Each line of each kind's note is spoilt in
// turn; the outcome must be diagnostics with a place and a remedy, or a good
// note.
func TestSpoiltLines(t *testing.T) {
	t.Setenv("SADDLEBOOK_CACHE", "off")
	notes, err := filepath.Glob("testdata/kinds/*.md")
	if err != nil {
		t.Fatal(err)
	}
	entry := regexp.MustCompile(`^(\s*(?:\{ )?"?[\w. -]+"?\s*= ?)(.+?)(,?)$`)
	deviation := regexp.MustCompile(` ± [0-9.]+`)
	probability := regexp.MustCompile(`(?m)^probability = .*\n`)
	spoilt := 0
	for _, file := range notes {
		data, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		text := probability.ReplaceAllString(deviation.ReplaceAllString(string(data), ""), "")
		lines := strings.Split(text, "\n")
		for i, l := range lines {
			m := entry.FindStringSubmatch(l)
			if m == nil {
				continue
			}
			for _, bad := range []string{"", m[1] + "true" + m[3], m[1] + `"x"` + m[3], m[1] + "[]" + m[3], m[1] + "{}" + m[3], m[1] + "-1" + m[3], m[1] + `["", 2]` + m[3]} {
				lines[i] = bad
				spoilt++
				fsys := fstest.MapFS{"saddlebook.toml": {Data: []byte("title = \"T\"\n")}, "n.md": {Data: []byte(strings.Join(lines, "\n"))}}
				s, faults, err := open(context.Background(), Source{FS: fsys}, Options{Jobs: 1})
				if err != nil {
					t.Errorf("%s:%d: %q: %v", file, i+1, bad, err)
				}
				for _, d := range faults {
					if d.At.Line < 1 || d.Msg == "" || d.Fix == "" {
						t.Errorf("%s:%d: %q: no place, message or remedy in %v", file, i+1, bad, d)
					}
				}
				if !faults.Failed() {
					if _, err := body(s, s.Book.Notes[0]); err != nil {
						t.Errorf("%s:%d: %q has no fault and no page: %v", file, i+1, bad, err)
					}
				}
			}
			lines[i] = l
		}
	}
	if spoilt < 300 {
		t.Errorf("only %d lines were spoilt", spoilt)
	}
}
