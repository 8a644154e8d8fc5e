package orbit

import (
	"math"
	"testing"
	"time"

	"slantwise/orbit/unit"
)

// The derivative must be that of PositionAt: central differences over ±0.5 s, whose
// own error is the third derivative h²/6, under 0.4 mm/s at low perigees (0.01 m/s³
// taken as jerk). SGP4's own velocity lies near it: 0.25 m/s was measured on low orbits
// and 1.8 m/s at the perigee of a deep-space one; 3 m/s here tells the two apart from
// a wrong unit or sign.
func TestTrackAtIsTheDerivative(t *testing.T) {
	epoch := time.Date(2026, 3, 10, 0, 0, 0, 0, time.UTC)
	for _, el := range []Elements{
		{Epoch: epoch, MeanMotion: 15.2, Eccentricity: 0.001, Inclination: 97 * unit.Degree},
		{Epoch: epoch, MeanMotion: 2.006, Eccentricity: 0.72, Inclination: 63.4 * unit.Degree},
		{Epoch: epoch, MeanMotion: 1.0027, Eccentricity: 0.0003},
	} {
		e, err := NewEphemeris(el, epoch, epoch.Add(24*time.Hour), EarthOrientation{})
		if err != nil {
			t.Fatal(err)
		}
		for s := 1.0; s < e.Span()-1; s += 97.3 {
			p, v := e.TrackAt(s)
			if p != e.PositionAt(s) {
				t.Fatalf("at %g s: position %v, PositionAt %v", s, p, e.PositionAt(s))
			}
			d := e.PositionAt(s + 0.5).Sub(e.PositionAt(s - 0.5))
			if off := d.Sub(v).Norm(); !(off < 1e-3) {
				t.Fatalf("%g rev/day at %g s: derivative is %.4f m/s off the difference", el.MeanMotion, s, off)
			}
			if off := e.StateAt(s).Velocity.Sub(v).Norm(); !(off < 3) {
				t.Fatalf("%g rev/day at %g s: derivative is %.4f m/s off SGP4's velocity", el.MeanMotion, s, off)
			}
		}
	}
}

func BenchmarkTrackAt(b *testing.B) {
	epoch := time.Date(2026, 3, 10, 0, 0, 0, 0, time.UTC)
	e, err := NewEphemeris(Elements{Epoch: epoch, MeanMotion: 15.2, Inclination: 97 * unit.Degree}, epoch, epoch.Add(24*time.Hour), EarthOrientation{})
	if err != nil {
		b.Fatal(err)
	}
	b.ReportAllocs()
	s := 0.0
	for b.Loop() {
		e.TrackAt(s)
		s = math.Mod(s+37.7, 86400)
	}
}
