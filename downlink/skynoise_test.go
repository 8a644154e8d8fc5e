package downlink

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// TestSkyNoiseByHand computes the contributors again from P.618-14 equation (69),
// P.372-16 equation (14) and the share of the spill-over.
func TestSkyNoiseByHand(t *testing.T) {
	_, path := kaWeather(t, 26.25*unit.Gigahertz)
	n := NewSkyNoise(path, false, Surroundings{SpillOver: station.Constant(0.1), Ground: 290})
	g := Geometry{Elevation: 20 * unit.Degree}
	got := make([]float64, len(n.Parts()))
	if err := n.Kelvins(&g, got); err != nil {
		t.Fatal(err)
	}
	s, err := path.At(g.Elevation)
	if err != nil {
		t.Fatal(err)
	}
	through := math.Pow(10, -float64(s.Gas+s.Cloud+s.Rain)/10)
	galaxy := 290 * math.Pow(10, 0.6) * math.Pow(262.5, -2.75) // equation (13) at 100 MHz, scaled by (14)
	sky := (path.Medium().Kelvins())*(1-through) + (2.7+galaxy)*through
	want := 0.9*sky + 0.1*290
	sum := 0.0
	for _, k := range got {
		sum += k
	}
	if math.Abs(sum-want) > 1e-9 {
		t.Errorf("the contributors add to %.9f K, want %.9f K", sum, want)
	}
	// The mean radiating temperature of P.618-14 equation (70) from the surface of the
	// P.835-6 mid-latitude-to-high profile at 48 deg lies between 240 and 280 K.
	if m := path.Medium().Kelvins(); m < 240 || m > 280 {
		t.Errorf("medium at %g K", m)
	}
	if math.Abs(got[5]-29) > 1e-12 || len(got) != 6 {
		t.Errorf("ground %g K among %d parts, want 29 K and no man-made noise", got[5], len(got))
	}
}

// Noise never falls under the cosmic background, and weather never lowers that of a
// cold sky.
func TestSkyNoiseProperties(t *testing.T) {
	paths := map[unit.Frequency]*propagation.Path{}
	for _, f := range []unit.Frequency{0.4 * unit.Gigahertz, 2.2 * unit.Gigahertz, 8.2 * unit.Gigahertz, 26 * unit.Gigahertz} {
		_, paths[f] = kaWeather(t, f)
	}
	rapid.Check(t, func(t *rapid.T) {
		f := rapid.SampledFrom([]unit.Frequency{0.4 * unit.Gigahertz, 2.2 * unit.Gigahertz, 8.2 * unit.Gigahertz, 26 * unit.Gigahertz}).Draw(t, "frequency")
		el := unit.Angle(rapid.Float64Range(0, 90).Draw(t, "elevation")) * unit.Degree
		around := Surroundings{SpillOver: station.Constant(rapid.Float64Range(0, 1).Draw(t, "spill")), Ground: 250, ManMade: 3}
		sum := func(clear bool) float64 {
			n := NewSkyNoise(paths[f], clear, around)
			k := make([]float64, len(n.Parts()))
			if err := n.Kelvins(&Geometry{Elevation: el}, k); err != nil {
				t.Fatal(err)
			}
			total := 0.0
			for i, v := range k {
				if !(v >= 0) {
					t.Fatalf("%s is %g K", n.Parts()[i].Name, v)
				}
				total += v
			}
			return total
		}
		weather, clear := sum(false), sum(true)
		if clear < propagation.CosmicBackground.Kelvins() {
			t.Fatalf("clear sky of %g K", clear)
		}
		if weather < clear-1e-9 {
			t.Fatalf("weather lowers the noise from %g to %g K", clear, weather)
		}
	})
}

// A link whose antenna states its spill-over takes all its antenna noise from the sky;
// the parts add to the system noise.
func TestLinkTakesTheSky(t *testing.T) {
	spec := LinkSpec{Transmitter: Transmitter{Name: "beacon", Frequency: 8.2 * unit.Gigahertz, EIRP: levelp(10)},
		Antenna: &station.Antenna{Name: "dish", Kind: station.Dish, Diameter: 3, Efficiency: 0.6, FeedLoss: 0.5,
			Noise: &station.Noise{SpillOver: station.Constant(0.08), Chain: []station.Stage{{Name: "amplifier", Gain: 40, NoiseTemperature: kelvinp(60)}}}}}
	if _, err := NewLink(spec); err == nil {
		t.Error("without a sky: no error")
	}
	w, path := kaWeather(t, 8.2*unit.Gigahertz)
	spec.PathModels = []PathModel{w}
	spec.NoiseModels = []NoiseModel{NewSkyNoise(path, false, Surroundings{SpillOver: spec.Antenna.Noise.SpillOver, Ground: spec.Antenna.Noise.Ground()})}
	l, err := NewLink(spec)
	if err != nil {
		t.Fatal(err)
	}
	b, err := l.At(Geometry{Range: 1000 * unit.Kilometre, Elevation: 20 * unit.Degree})
	if err != nil {
		t.Fatal(err)
	}
	sum := 0.0
	for _, p := range b.NoiseParts {
		sum += p.Temperature.Kelvins()
	}
	feed := math.Pow(10, -0.05)
	ground := b.NoiseParts[5]
	if sum != b.SystemNoise.Kelvins() || ground.Name != "ground" || math.Abs(ground.Temperature.Kelvins()-0.08*290*feed) > 1e-9 {
		t.Errorf("parts add to %g K of %v; %+v", sum, b.SystemNoise, ground)
	}
}
