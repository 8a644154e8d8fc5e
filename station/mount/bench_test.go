package mount

import "testing"

// BenchmarkPlan plans a pass of 140 s that is followed whole, and one through the keyhole.
func BenchmarkPlan(b *testing.B) {
	for _, c := range []struct {
		name    string
		nearest float64
	}{{"whole", 40}, {"keyhole", 0.5}} {
		b.Run(c.name, func(b *testing.B) {
			d := drive(b, -270, 270, 10)
			course := circle(c.nearest, 40, 0.9, 140)
			b.ReportAllocs()
			for b.Loop() {
				d.Plan(course, Options{Tolerance: 0.05 * degree})
			}
		})
	}
}
