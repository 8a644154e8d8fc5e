package scenario

import "testing"

func BenchmarkLoadDemo(b *testing.B) {
	b.Chdir(b.TempDir())
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Load(Request{}); err != nil {
			b.Fatal(err)
		}
	}
}
