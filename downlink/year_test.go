package downlink

import (
	"math"
	"testing"

	"slantwise/downlink/modem"
	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// yearLink is a Ka-band link with an antenna whose noise comes from the sky, under the
// weather exceeded for p or under a clear sky.
func yearLink(t *testing.T, spec propagation.PathSpec, p propagation.Exceedance, clear bool) *Link {
	t.Helper()
	spec.Exceedance = p
	path, err := propagation.NewPath(spec)
	if err != nil {
		t.Fatal(err)
	}
	weather := NewWeather(path)
	if clear {
		weather = NewClearSky(path)
	}
	spill := station.Constant(0.1)
	threshold := unit.DB(2)
	l, err := NewLink(LinkSpec{
		Transmitter: Transmitter{Name: "beacon", Frequency: spec.Frequency, EIRP: levelp(23), RequiredMargin: 1, HighestRate: 2e8},
		Mode:        &modem.Mode{Name: "steady", Modulation: "qpsk", Coding: "none", DataRate: 5e7, RequiredEbN0: &threshold},
		Antenna: &station.Antenna{Name: "dish", Kind: station.Dish, Diameter: 3, Efficiency: 0.6, FeedLoss: 0.5,
			Noise: &station.Noise{SpillOver: spill, Chain: []station.Stage{{Name: "amplifier", Gain: 40, NoiseTemperature: kelvinp(90)}}}},
		PathModels: []PathModel{weather}, NoiseModels: []NoiseModel{NewSkyNoise(path, clear, Surroundings{SpillOver: spill, Ground: 290})}, ClearSky: clear,
	})
	if err != nil {
		t.Fatal(err)
	}
	return l
}

// yearSpec is a path through all weather at 26 GHz; its figures are invented, of the
// usual size for a temperate coast.
func yearSpec(t *testing.T) propagation.PathSpec {
	t.Helper()
	rate, rainHeight := 30*propagation.MillimetrePerHour, 2.5*unit.Kilometre
	cloud, err := propagation.NewCurve("cloud", "kg/m2", propagation.Exceeded{P: 0.1 * propagation.Percent, Value: 1.5},
		propagation.Exceeded{P: 5 * propagation.Percent, Value: 0.5}, propagation.Exceeded{P: 50 * propagation.Percent, Value: 0.02})
	if err != nil {
		t.Fatal(err)
	}
	return propagation.PathSpec{Frequency: 26 * unit.Gigahertz, Tilt: 45 * unit.Degree, Aperture: &propagation.Aperture{Diameter: 3, Efficiency: 0.6},
		Climate: propagation.Climate{Latitude: 50 * unit.Degree, Rate001: &rate, RainHeight: &rainHeight, CloudWater: cloud}}
}

// overhead returns the geometries of a contact at even steps of time: up from 5° to
// 75° and down, at the ranges of a satellite 700 km over a sphere.
func overhead() []Geometry {
	const n, earth, orbit = 61, 6371e3, 7071e3
	var out []Geometry
	for i := range n {
		deg := 75 - 70*math.Pow(math.Abs(float64(i)/(n-1)*2-1), 0.6) // low most of the time, as contacts are
		s := math.Sin(deg * math.Pi / 180)
		slant := math.Sqrt(orbit*orbit-earth*earth*(1-s*s)) - earth*s
		out = append(out, Geometry{Azimuth: unit.Angle(math.NaN()), Elevation: unit.Angle(deg) * unit.Degree, Range: unit.Length(slant)})
	}
	return out
}

// TestYearPlainly counts the year again: at each instant of a contact a whole budget
// under the weather of each of many percentages, each for the share of the year
// between it and its neighbours, against the cells and roots of Year.
func TestYearPlainly(t *testing.T) {
	spec, seconds := yearSpec(t), 10.0
	clear := yearLink(t, spec, 1*propagation.Percent, true)
	contact := overhead()
	profile := &Profile{}
	for i, g := range contact {
		b, err := clear.At(g)
		if err != nil {
			t.Fatal(err)
		}
		profile.Seconds = append(profile.Seconds, float64(i)*seconds)
		profile.ElevationDeg = append(profile.ElevationDeg, g.Elevation.Degrees())
		profile.CN0DBHz = append(profile.CN0DBHz, float64(b.CN0))
		profile.SystemNoiseK = append(profile.SystemNoiseK, b.SystemNoise.Kelvins())
		profile.Usable = append(profile.Usable, b.Usable)
	}
	var cells ContactCells
	cells.Add(profile)
	year, err := NewYear(clear, spec, &cells)
	if err != nil {
		t.Fatal(err)
	}

	const grid = 120
	margins := []unit.DB{-6, -3, 0, 2, 4}
	under, mode, achievable := make([]float64, len(margins)), 0.0, 0.0
	exceeding := make([]float64, 3)
	attenuations := []unit.DB{2, 5, 12}
	at := func(k float64) float64 { return 0.001 * math.Pow(50/0.001, k/(grid-1)) / 100 }
	for k := range grid {
		from, to := at(float64(k)-0.5), at(float64(k)+0.5)
		switch k {
		case 0:
			from = 0
		case grid - 1:
			to = 1 // the rest of the year is as at 50 %
		}
		l := yearLink(t, spec, propagation.Exceedance(at(float64(k))), false)
		for i, g := range contact {
			b, err := l.At(g)
			if err != nil {
				t.Fatal(err)
			}
			w := (to - from) * seconds
			if i == 0 || i == len(contact)-1 {
				w /= 2
			}
			loss := unit.DB(0)
			for _, term := range b.Terms {
				switch term.Name {
				case "gas attenuation", "cloud attenuation", "rain attenuation", "scintillation", "atmospheric combination":
					loss -= unit.DB(term.Sign) * unit.DB(term.Value)
				}
			}
			for j, a := range attenuations {
				if loss > a {
					exceeding[j] += w
				}
			}
			for j, m := range margins {
				if b.MarginOver < m {
					under[j] += w
				}
			}
			if b.MarginOver >= 0 {
				mode += w * b.DataRate.BitsPerSecond() / 8
			}
			achievable += w * b.AchievableRate.BitsPerSecond() / 8
		}
	}
	total := seconds * float64(len(contact)-1)
	if year.ContactSeconds() != total {
		t.Errorf("%g s of contact, want %g s", year.ContactSeconds(), total)
	}
	// A step of the percentages is 9.5 %, so that a count is off by up to half of it at
	// an instant and by less over many; the widths of the cells make as much again.
	near := func(what string, got, want, tolerance float64) {
		if !(math.Abs(got-want) <= tolerance*want) {
			t.Errorf("%s: %.6g, counted plainly %.6g", what, got, want)
		}
	}
	for j, m := range margins {
		span, _ := year.UnderMargin(m)
		t.Logf("under %g dB: %.5f to %.5f, plainly %.5f", m, span.Low, span.High, under[j]/total)
		near("under a margin", math.Max(span.Low, math.Min(span.High, under[j]/total)), under[j]/total, 0.05)
	}
	for j, a := range attenuations {
		span := year.moving.ExceedingTotal(a)
		t.Logf("above %g dB: %.5f to %.5f, plainly %.5f", a, span.Low, span.High, exceeding[j]/total)
		near("above an attenuation", math.Max(span.Low, math.Min(span.High, exceeding[j]/total)), exceeding[j]/total, 0.05)
	}
	volume, _ := year.Volume()
	t.Log(volume, mode, achievable)
	near("bytes in the mode", volume.Mode, mode, 0.01)
	near("bytes at the achievable rate", volume.Achievable, achievable, 0.002)
}
