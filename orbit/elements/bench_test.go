package elements

import (
	"bytes"
	"testing"
	"time"

	"slantwise/orbit"
)

// manySets are a thousand sets of a thousand objects.
func manySets() []orbit.Elements {
	sets := make([]orbit.Elements, 1000)
	for i := range sets {
		sets[i] = exampleSet()
		sets[i].CatalogNumber = 90_000 + i
	}
	return sets
}

// BenchmarkRead reads a thousand sets in each format.
func BenchmarkRead(b *testing.B) {
	for f := TLE; f <= OMMCSV; f++ {
		b.Run(f.String(), func(b *testing.B) {
			var text bytes.Buffer
			if _, err := Write(&text, manySets(), f, Header{Created: time.Date(2026, 3, 10, 6, 0, 0, 0, time.UTC)}); err != nil {
				b.Fatal(err)
			}
			b.SetBytes(int64(text.Len()))
			b.ReportAllocs()
			for b.Loop() {
				if sets, _, err := Read(bytes.NewReader(text.Bytes()), "sets"); err != nil || len(sets) != 1000 {
					b.Fatalf("%d sets, %v", len(sets), err)
				}
			}
		})
	}
}
