package draw

import (
	"io"
	"testing"
)

// BenchmarkInline draws all seven pictures of an answer for a page.
func BenchmarkInline(b *testing.B) {
	a := sampleAnswer()
	for b.Loop() {
		for _, p := range OfAnswer(a) {
			if err := p.WriteInline(io.Discard); err != nil {
				b.Fatal(err)
			}
		}
	}
}
