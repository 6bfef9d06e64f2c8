package render

import (
	"fmt"
	"os"
	"testing"
)

// The tests share a cache of their own, so that the demo notebook is sampled
// once; those that are about the cache set another one.
func TestMain(m *testing.M) {
	dir, err := os.MkdirTemp("", "saddlebook-test-cache")
	if err == nil {
		err = os.Setenv("SADDLEBOOK_CACHE", dir)
	}
	if err != nil {
		fmt.Fprintln(os.Stderr, err)
		os.Exit(1)
	}
	code := m.Run()
	if err := os.RemoveAll(dir); err != nil {
		fmt.Fprintln(os.Stderr, err)
		code = 1
	}
	os.Exit(code)
}
