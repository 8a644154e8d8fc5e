package downlink

import (
	"math"
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
	"slantwise/station/pass"
)

var sink float64

// BenchmarkProfileWeek is the full link of one spacecraft and station over a week of
// passes at 1 s, look angles, refraction and Doppler in it: an invented orbit of 550
// km over an invented site. The reference is a plain loop over the same samples with
// only the formulas that a received power and a C/N0 cannot do without.
func BenchmarkProfileWeek(b *testing.B) {
	start := time.Date(2026, 3, 10, 0, 0, 0, 0, time.UTC)
	end := start.AddDate(0, 0, 7)
	el := orbit.Elements{CatalogNumber: 99001, Epoch: start, MeanMotion: 15.05, Eccentricity: 0.001, Inclination: deg(97.6),
		RAAN: deg(70), ArgPerigee: deg(90), MeanAnomaly: deg(270), BStar: 5e-5}
	eph, err := orbit.NewEphemeris(el, start, end, orbit.EarthOrientation{})
	if err != nil {
		b.Fatal(err)
	}
	place := station.Site{Latitude: deg(58.4), Longitude: deg(-6.1), Altitude: 42, MinimumElevation: deg(5)}
	passes, err := pass.Search(eph, &place, pass.Window{From: start, To: end}, station.Geometric)
	if err != nil {
		b.Fatal(err)
	}
	spec := wagtail(b)
	frame := place.Frame()
	spec.Frame = &frame
	if spec.Refraction, err = station.NewRefraction(42); err != nil {
		b.Fatal(err)
	}
	l := mustLink(b, spec)
	b.Run("link", func(b *testing.B) {
		b.ReportAllocs()
		samples := 0
		for b.Loop() {
			samples = 0
			for i := range passes {
				p, err := l.Profile(eph, passes[i].AOS, passes[i].LOS, time.Second)
				if err != nil {
					b.Fatal(err)
				}
				sink += p.Volume.ModeBytes
				samples += len(p.Seconds)
			}
		}
		perSample(b, samples)
	})
	// The same with the body's axes worked out: yaw steering and a pattern in two angles.
	spec.Transmitter.Attitude, spec.Transmitter.Pattern = AttitudeYawSteering, Pattern{Kind: GainGrid, Grid: bowl(b)}
	spec.Bodies = NewBodies(start, end, orbit.EarthOrientation{})
	held := mustLink(b, spec)
	b.Run("body", func(b *testing.B) {
		b.ReportAllocs()
		samples := 0
		for b.Loop() {
			samples = 0
			for i := range passes {
				p, err := held.Profile(eph, passes[i].AOS, passes[i].LOS, time.Second)
				if err != nil {
					b.Fatal(err)
				}
				sink += p.Volume.ModeBytes
				samples += len(p.Seconds)
			}
		}
		perSample(b, samples)
	})
	b.Run("reference", func(b *testing.B) {
		samples := 0
		for b.Loop() {
			samples = 0
			for i := range passes {
				from, to := eph.Seconds(passes[i].AOS), eph.Seconds(passes[i].LOS)
				for s := from; s <= to; s++ {
					state := eph.StateAt(s)
					look := frame.Look(state)
					up := state.Position.Sub(frame.Origin)
					cos := state.Position.Dot(up) / (state.Position.Norm() * float64(look.Range))
					fsl := 20 * math.Log10(4*math.Pi*float64(look.Range)*8180e6/unit.SpeedOfLight)
					noise := 10 * math.Log10(100+float64(look.Elevation))
					sink += math.Pow(10, (20*math.Log10(cos)-fsl-noise)/10)
					samples++
				}
			}
		}
		perSample(b, samples)
	})
}

func perSample(b *testing.B, samples int) {
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N*samples), "ns/sample")
	b.ReportMetric(float64(samples), "samples")
}
