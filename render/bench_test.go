package render

import (
	"context"
	"testing"

	"saddlebook/content"
)

// BenchmarkEvaluate evaluates the demo notebook without a cache.
func BenchmarkEvaluate(b *testing.B) {
	b.Setenv("SADDLEBOOK_CACHE", "off")
	for b.Loop() {
		if _, _, err := open(context.Background(), Source{FS: content.Demo()}, Options{Jobs: 1}); err != nil {
			b.Fatal(err)
		}
	}
}
