package fit_test

import (
	"context"
	"math/rand/v2"
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/fit"
	"slantwise/orbit/unit"
)

// wagtail is an invented low orbit.
func wagtail() orbit.Elements {
	return orbit.Elements{Name: "WAGTAIL 1", CatalogNumber: 99001, Epoch: time.Date(2026, 3, 10, 12, 0, 0, 0, time.UTC),
		MeanMotion: 15.21987654, Eccentricity: 0.0012345, Inclination: 97.4012 * unit.Degree, RAAN: 120.3456 * unit.Degree,
		ArgPerigee: 85.6789 * unit.Degree, MeanAnomaly: 274.5432 * unit.Degree, BStar: 8.4553e-5}
}

// ephemeris returns SGP4's own states of a set.
func ephemeris(t testing.TB, el orbit.Elements, from time.Time, length, step time.Duration, velocities bool) []fit.Datum {
	t.Helper()
	p, err := orbit.NewPropagation(el)
	if err != nil {
		t.Fatal(err)
	}
	var data []fit.Datum
	for at := time.Duration(0); at <= length; at += step {
		r, v, err := p.At(from.Add(at))
		if err != nil {
			t.Fatal(err)
		}
		d := fit.Datum{Time: from.Add(at), Position: r}
		if velocities {
			d.Velocity, d.HasVelocity = v, true
		}
		data = append(data, d)
	}
	return data
}

// noisy adds errors of a normal law to positions, seeded by the case.
func noisy(data []fit.Datum, sigma float64, seed uint64) []fit.Datum {
	r := rand.New(rand.NewPCG(seed, 1))
	out := make([]fit.Datum, len(data))
	for i, d := range data {
		d.Position = d.Position.Add(orbit.Vec3{X: sigma * r.NormFloat64(), Y: sigma * r.NormFloat64(), Z: sigma * r.NormFloat64()})
		d.Velocity = d.Velocity.Add(orbit.Vec3{X: sigma * r.NormFloat64(), Y: sigma * r.NormFloat64(), Z: sigma * r.NormFloat64()}.Scale(1e-3))
		out[i] = d
	}
	return out
}

func BenchmarkFitDay(b *testing.B) {
	el := wagtail()
	data := ephemeris(b, el, el.Epoch.Add(-24*time.Hour), 24*time.Hour, time.Minute, true)
	data = noisy(data, 100, 7)
	b.ReportAllocs()
	for b.Loop() {
		if _, err := fit.Fit(context.Background(), data, fit.Options{}); err != nil {
			b.Fatal(err)
		}
	}
}
