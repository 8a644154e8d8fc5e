package orbit

import (
	"math"
	"testing"
	"time"
)

// BenchmarkReferenceLoop is a fixed chain of a thousand dependent additions and
// multiplications: what it takes tells how fast the machine is, so that figures of
// different machines can be compared.
func BenchmarkReferenceLoop(b *testing.B) {
	x := 0.0
	for b.Loop() {
		x = 1.0
		for range 1000 {
			x = x*0.999999 + 1e-7
		}
	}
	if math.IsNaN(x) {
		b.Fatal("the loop gives no number")
	}
}

// weekOf returns an ephemeris of a low orbit over a week.
func weekOf(b *testing.B) *Ephemeris {
	b.Helper()
	e, err := NewEphemeris(orbitKinds[1].elements(), testEpoch, testEpoch.Add(7*24*time.Hour), EarthOrientation{})
	if err != nil {
		b.Fatal(err)
	}
	return e
}

// BenchmarkPosition takes one position with the sine of the elevation over a site.
func BenchmarkPosition(b *testing.B) {
	e := weekOf(b)
	site, up := Vec3{3.9e6, 0.3e6, 5.0e6}, Vec3{0.61, 0.05, 0.79}.Unit()
	b.ReportAllocs()
	s, sine := 0.0, 0.0
	for b.Loop() {
		d := e.PositionAt(s).Sub(site)
		sine = d.Dot(up) / d.Norm()
		if s += 17.3; s > 600000 {
			s = 0
		}
	}
	if math.IsNaN(sine) {
		b.Fatal("no number")
	}
}

func BenchmarkState(b *testing.B) {
	e := weekOf(b)
	b.ReportAllocs()
	s, sum := 0.0, 0.0
	for b.Loop() {
		sum = e.StateAt(s).Velocity.X
		if s += 17.3; s > 600000 {
			s = 0
		}
	}
	if math.IsNaN(sum) {
		b.Fatal("no number")
	}
}

func BenchmarkLight(b *testing.B) {
	e := weekOf(b)
	b.ReportAllocs()
	s, lit := 0.0, 0
	for b.Loop() {
		if e.LightAt(s) == Sunlit {
			lit++
		}
		if s += 17.3; s > 600000 {
			s = 0
		}
	}
	if lit == 0 {
		b.Fatal("never lit")
	}
}

func BenchmarkSun(b *testing.B) {
	b.ReportAllocs()
	for b.Loop() {
		SunPosition(testEpoch, EarthOrientation{})
	}
}

func BenchmarkMoon(b *testing.B) {
	b.ReportAllocs()
	for b.Loop() {
		MoonPosition(testEpoch, EarthOrientation{})
	}
}

// BenchmarkPropagate is one call of the library through the adaptor.
func BenchmarkPropagate(b *testing.B) {
	for _, kind := range []int{1, 12} {
		el := orbitKinds[kind].elements()
		b.Run(el.Name, func(b *testing.B) {
			p, err := newPropagator(&el)
			if err != nil {
				b.Fatal(err)
			}
			b.ReportAllocs()
			k := 0
			for b.Loop() {
				p.raw(k)
				k += 317
			}
		})
	}
}

// BenchmarkNewEphemerisWeek builds a week as a run over many satellites does.
func BenchmarkNewEphemerisWeek(b *testing.B) {
	for _, kind := range []int{1, 4, 10, 12, 15} {
		el := orbitKinds[kind].elements()
		b.Run(el.Name, func(b *testing.B) {
			b.ReportAllocs()
			var e Ephemeris
			for b.Loop() {
				if err := e.Rebuild(el, testEpoch, testEpoch.Add(7*24*time.Hour), EarthOrientation{}); err != nil {
					b.Fatal(err)
				}
			}
			b.ReportMetric(float64(len(e.knots)), "knots")
		})
	}
}
