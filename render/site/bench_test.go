package site

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func many() map[string][]byte {
	files := map[string][]byte{}
	for i := range 10_000 {
		files[fmt.Sprintf("part-%d/page-%d.html", i%40, i)] = []byte(strings.Repeat(fmt.Sprintf("<p>line of page %d</p>\n", i), 400))
	}
	return files
}

// The reference stands beside each case: the same files read and hashed, or
// written, without a stage. Sites are removed at the end only: removing one
// while timing would charge the next for it.
func BenchmarkPublish(b *testing.B) {
	files := many()
	target := filepath.Join(b.TempDir(), "published")
	if _, err := tryPublish(target, files, tricks{}); err != nil {
		b.Fatal(err)
	}
	b.Run("case=read-and-hash", func(b *testing.B) {
		for b.Loop() {
			for p := range files {
				data, err := os.ReadFile(filepath.Join(target, p))
				if err != nil {
					b.Fatal(err)
				}
				_ = sum(data)
			}
		}
	})
	b.Run("case=nothing-changed", func(b *testing.B) {
		for b.Loop() {
			if r, err := tryPublish(target, files, tricks{}); err != nil || !r.Unchanged {
				b.Fatal(r, err)
			}
		}
	})
	b.Run("case=one-changed", func(b *testing.B) {
		n := 0
		for b.Loop() {
			n++
			files["part-0/page-0.html"] = fmt.Appendf(nil, "page %d", n)
			if r, err := tryPublish(target, files, tricks{}); err != nil || r.Written != 1 {
				b.Fatal(r, err)
			}
		}
	})
	for _, sync := range []bool{false, true} {
		b.Run(fmt.Sprintf("case=first/sync=%v", sync), func(b *testing.B) {
			for b.Loop() {
				fresh := filepath.Join(b.TempDir(), "published")
				if _, err := tryPublish(fresh, files, tricks{noSync: !sync}); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
	b.Run("case=plain-write", func(b *testing.B) {
		for b.Loop() {
			fresh := b.TempDir()
			for p, data := range files {
				full := filepath.Join(fresh, p)
				if err := os.MkdirAll(filepath.Dir(full), 0o777); err != nil {
					b.Fatal(err)
				}
				if err := os.WriteFile(full, data, 0o666); err != nil {
					b.Fatal(err)
				}
			}
		}
	})
}
