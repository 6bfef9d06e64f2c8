package site

import (
	"crypto/sha256"
	"path"
	"path/filepath"
	"strings"
	"testing"
)

func sum(data []byte) digest { return sha256.Sum256(data) }

func TestList(t *testing.T) {
	// Both digests: NIST, "SHA-256 example values" (one block "abc") and the
	// test vector of the empty message, FIPS 180 validation set.
	got := formatList(map[string]entry{"notes/b c.html": {sum: sum([]byte("abc"))}, "a.html": {sum: sum(nil), kept: true}})
	want := "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855  a.html\n" +
		"ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad  notes/b c.html\n"
	if string(got) != want {
		t.Errorf("got\n%swant\n%s", got, want)
	}
}

func TestDamagedLists(t *testing.T) {
	zeros := strings.Repeat("0", 64)
	for _, tt := range []struct{ list, says string }{
		{"x", "line 1 is not"},
		{zeros + " a.html", "line 1 is not"},
		{zeros + "  a.html\n" + zeros[1:] + "  b.html", "line 2 is not"},
		{"g" + zeros[1:] + "  a.html", "does not begin with a SHA-256"},
		{zeros + "  a.html\n\n" + zeros + "  a.html", "line 3: the path \"a.html\" stands there twice"},
		{zeros + "  /a", "absolute"},
		{zeros + "  ", "is empty"},
		{zeros + "  " + ListName, "reserved"},
		{strings.Repeat("é", 200), "..."},
	} {
		if _, err := parseList([]byte(tt.list)); err == nil || !strings.Contains(err.Error(), tt.says) {
			t.Errorf("%q: got %v", tt.list, err)
		}
	}
}

// An accepted list is written back as it was read, and no path of it leaves
// the folder.
func FuzzList(f *testing.F) {
	zeros := strings.Repeat("0", 64)
	f.Add([]byte(""))
	f.Add([]byte(zeros + "  a.html\n"))
	f.Add([]byte(zeros + "  a.html\r\n" + zeros + "  b/c  d.html"))
	f.Add([]byte(zeros + "  ../a"))
	f.Add([]byte("<<<<<<< ours\n"))
	f.Fuzz(func(t *testing.T, data []byte) {
		listed, err := parseList(data)
		if err != nil {
			_ = err.Error()
			return
		}
		files := map[string]entry{}
		for p, d := range listed {
			if path.Clean(p) != p || !filepath.IsLocal(filepath.FromSlash(p)) {
				t.Errorf("path %q accepted", p)
			}
			files[p] = entry{sum: d}
		}
		again, err := parseList(formatList(files))
		if err != nil {
			t.Fatal(err)
		}
		if len(again) != len(listed) {
			t.Fatalf("%d paths, then %d", len(listed), len(again))
		}
		for p, d := range listed {
			if again[p] != d {
				t.Errorf("%q: %x, then %x", p, d, again[p])
			}
		}
	})
}
