package reports

import (
	"context"
	"testing"
)

// BenchmarkReport renders the index and all pages of 100 passes of about ten minutes
// with their CSV and JSON, in memory; passes are made beforehand.
func BenchmarkReport(b *testing.B) {
	r := fixtureReport(100)
	passes := make([]*Pass, len(r.Keys))
	for i := range passes {
		p, err := r.Load(b.Context(), i)
		if err != nil {
			b.Fatal(err)
		}
		passes[i] = p
	}
	r.Load = func(_ context.Context, i int) (*Pass, error) { return passes[i], nil }
	b.ReportAllocs()
	for b.Loop() {
		bytes := 0
		put := func(_ string, content []byte) error { bytes += len(content); return nil }
		if err := newWriter(r, Options{Workers: 1}, chartScript(), put).write(b.Context()); err != nil {
			b.Fatal(err)
		}
		b.SetBytes(int64(bytes))
	}
}

// BenchmarkPassFiles writes the CSV and the JSON of one pass of eleven minutes.
func BenchmarkPassFiles(b *testing.B) {
	p := fixturePass(basicShape())
	b.ReportAllocs()
	for b.Loop() {
		if _, err := passJSON(p); err != nil {
			b.Fatal(err)
		}
		samplesCSV(p)
	}
}
