package downlink

import (
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"

	"slantwise/downlink/propagation"
)

// BenchmarkLinkUnderWeather is one sample of a link with all terms of the air, the sky's
// noise by contributor, the Sun and the Moon; beside it the same in free space.
func BenchmarkLinkUnderWeather(b *testing.B) {
	w, path := kaWeather(b, 26.25*unit.Gigahertz)
	at := time.Date(2026, 3, 10, 12, 0, 0, 0, time.UTC)
	site := station.Site{Latitude: 48 * unit.Degree}
	frame := site.Frame()
	sun := propagation.Disc{Brightness: 6500, Diameter: propagation.SunDiameter}
	spec := LinkSpec{Transmitter: Transmitter{Name: "beacon", Frequency: 26.25 * unit.Gigahertz, EIRP: levelp(10)}, Frame: &frame,
		Antenna: &station.Antenna{Name: "dish", Kind: station.Dish, Diameter: 3, Efficiency: 0.6,
			Noise: &station.Noise{AntennaTemperature: station.Constant(60), Chain: []station.Stage{{Name: "amplifier", Gain: 40, NoiseTemperature: kelvinp(90)}}}}}
	bare := spec
	spec.PathModels, spec.NoiseModels = []PathModel{w}, []NoiseModel{NewWeatherNoise(path)}
	spec.Bodies, spec.Sun, spec.Moon = NewBodies(at.Add(-time.Hour), at.Add(time.Hour), orbit.EarthOrientation{}), &sun, &propagation.Moon
	for _, c := range []struct {
		name string
		spec LinkSpec
	}{{"weather", spec}, {"free space", bare}} {
		b.Run(c.name, func(b *testing.B) {
			l, err := NewLink(c.spec)
			if err != nil {
				b.Fatal(err)
			}
			s := l.newScratch()
			b.ReportAllocs()
			for b.Loop() {
				s.geometry = Geometry{Time: at, Azimuth: 1, Elevation: 20 * unit.Degree, Range: 1e6}
				if err := l.evaluate(s); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
