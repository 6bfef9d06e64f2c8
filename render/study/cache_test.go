package study

import (
	"bytes"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func TestFolder(t *testing.T) {
	f := Folder{Path: filepath.Join(t.TempDir(), "cache")}
	key := strings.Repeat("ab", 32)
	if _, ok := f.Get(key); ok {
		t.Error("an empty cache has a value")
	}
	for _, want := range [][]byte{[]byte("one"), {}, bytes.Repeat([]byte{0, 255}, 5000)} {
		if err := f.Put(key, want); err != nil {
			t.Fatal(err)
		}
		if got, ok := f.Get(key); !ok || !bytes.Equal(got, want) {
			t.Errorf("%d bytes come back as %d, %v", len(want), len(got), ok)
		}
	}
	whole, err := os.ReadFile(f.file(key))
	if err != nil {
		t.Fatal(err)
	}
	changed := bytes.Clone(whole)
	changed[len(changed)-1] ^= 1
	for name, damaged := range map[string][]byte{"empty": nil, "cut": whole[:len(whole)-1], "short": whole[:5], "changed": changed} {
		if err := os.WriteFile(f.file(key), damaged, 0o666); err != nil {
			t.Fatal(err)
		}
		if _, ok := f.Get(key); ok {
			t.Errorf("a file that is %s counts as a value", name)
		}
	}
}

// The identity is that of the program file and of the processor type, and the
// same at every call.
func TestIdentity(t *testing.T) {
	a, err := identity()
	if err != nil {
		t.Fatal(err)
	}
	b, err := identity()
	if err != nil || !bytes.Equal(a, b) || len(a) != 32 {
		t.Errorf("%x and %x, %v", a, b, err)
	}
	if c := identityOf(strings.NewReader("another program")); bytes.Equal(a, c) || bytes.Equal(identityOf(strings.NewReader("x")), c) {
		t.Error("two programs have one identity")
	}
}
