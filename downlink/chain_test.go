package downlink

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"slantwise/downlink/modem"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// site is an invented site on the Greenwich meridian at 58.4° N, its frame worked out
// by hand on a sphere of 6371 km: the tests need a place, not a geodetic one.
func site() *station.Frame {
	sin, cos := math.Sincos(58.4 * math.Pi / 180)
	up := orbit.Vec3{X: cos, Z: sin}
	return &station.Frame{Origin: up.Scale(6371e3), Up: up, East: orbit.Vec3{Y: 1}, North: orbit.Vec3{X: -sin, Z: cos}}
}

func dbp(v float64) *unit.DB { d := unit.DB(v); return &d }

func deg(v float64) unit.Angle { return unit.Angle(v) * unit.Degree }

func degp(v float64) *unit.Angle { a := deg(v); return &a }

func kelvinp(v float64) *unit.Temperature { k := unit.Temperature(v); return &k }

// wagtail is an invented X-band link with every kind of term in it.
func wagtail(t testing.TB) LinkSpec {
	t.Helper()
	sky, err := station.TabulateElevation([][2]float64{{5, 110}, {10, 75}, {30, 45}, {90, 30}})
	if err != nil {
		t.Fatal(err)
	}
	power, err := unit.LevelWatts(2)
	if err != nil {
		t.Fatal(err)
	}
	return LinkSpec{
		Transmitter: Transmitter{
			Name: "X-band", Frequency: 8180 * unit.Megahertz, Power: power, LineLoss: 0.8,
			Pattern:  Pattern{Kind: CosinePower, PeakGain: 6, Exponent: 2},
			Attitude: AttitudeNadir, Polarization: &station.Polarization{AxialRatio: dbp(2)},
			ImplementationLoss: 1.5, RequiredMargin: 3, ExtraLosses: []Loss{{"spacecraft pointing", 0.5}},
		},
		Mode:  &modem.Mode{Name: "safe", Modulation: "qpsk", Coding: "ccsds-conv-1-2+rs-255-223", DataRate: 2e6},
		Frame: site(),
		Antenna: &station.Antenna{
			Name: "dish", Kind: station.Dish, Diameter: 3.7, Efficiency: 0.6, SurfaceRMS: 0.5 * unit.Millimetre, BlockageFraction: 0.02,
			PointingRMS: deg(0.1), Polarization: &station.Polarization{AxialRatio: dbp(1)},
			Bands: []station.Band{{Low: 8025 * unit.Megahertz, High: 8400 * unit.Megahertz}}, FeedLoss: 0.4,
			ExtraLosses: []station.Loss{{Name: "radome", Loss: 0.3, Dissipative: true}, {Name: "old feed", Loss: 0.2}},
			Noise: &station.Noise{PhysicalTemperature: 285, AntennaTemperature: sky, Chain: []station.Stage{
				{Name: "low-noise amplifier", Gain: 45, NoiseTemperature: kelvinp(55)},
				{Name: "cable", Gain: -6},
				{Name: "receiver", Gain: 30, NoiseFigure: dbp(8)},
			}},
		},
	}
}

func mustLink(t testing.TB, spec LinkSpec) *Link {
	t.Helper()
	l, err := NewLink(spec)
	if err != nil {
		t.Fatal(err)
	}
	return l
}

func mustAt(t testing.TB, l *Link, g Geometry) *Budget {
	t.Helper()
	b, err := l.At(g)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

// The whole chain again, in watts and kelvin, from the scenario's numbers, with none
// of the program's formulas: 1e-9 dB.
func TestChainInWattsAndKelvin(t *testing.T) {
	l := mustLink(t, wagtail(t))
	const c, k = 299792458.0, 1.380649e-23 // SI Brochure, 9th edition
	lin := func(db float64) float64 { return math.Exp(db / 10 * math.Ln10) }
	for _, at := range []struct{ elevation, km, off float64 }{{5, 2200, 62}, {17.3, 1321.5, 50.5}, {88, 512, 1.5}} {
		b := mustAt(t, l, Geometry{Elevation: deg(at.elevation), Range: unit.Length(at.km) * unit.Kilometre, OffBoresight: deg(at.off)})
		d, lambda := at.km*1000, c/8180e6
		eirp := 2 / lin(0.8) * lin(6) * math.Pow(math.Cos(at.off*math.Pi/180), 2) / lin(0.5)
		flux := eirp / (4 * math.Pi * d * d)
		// Polarisation: the ellipse formula with voltage ratios, major axes crossed.
		r1, r2 := math.Sqrt(lin(2)), math.Sqrt(lin(1))
		match := 0.5 + (4*r1*r2-(r1*r1-1)*(r2*r2-1))/(2*(r1*r1+1)*(r2*r2+1))
		aperture := math.Pi * 3.7 * 3.7 / 4 * 0.6 * math.Exp(-math.Pow(4*math.Pi*0.5e-3/lambda, 2)) * math.Pow(1-0.02, 2)
		width := 70 * lambda / 3.7
		pointing := lin(12 * math.Pow(0.1/width, 2))
		received := flux * aperture * match / pointing / lin(0.4) / lin(0.3) / lin(0.2)

		sky := map[float64]float64{5: 110, 17.3: 75 + (45-75)*7.3/20, 88: 45 + (30-45)*58.0/60}[at.elevation]
		noise := (sky/lin(0.3)+285*(1-1/lin(0.3)))/lin(0.4) + 285*(1-1/lin(0.4)) +
			55 + 285*(lin(6)-1)/lin(45) + 290*(lin(8)-1)/lin(45)*lin(6)
		cn0 := received / (k * noise)
		ebn0 := cn0 / 2e6
		rate := cn0 / lin(1.5) / lin(2.33) / lin(3)

		db := func(x float64) float64 { return 10 * math.Log(x) / math.Ln10 }
		for _, v := range []struct {
			name      string
			got, want float64
		}{
			{"received power", b.ReceivedPowerDBm, db(received) + 30},
			{"flux density", b.PowerFluxDensity, db(flux)},
			{"noise", db(float64(b.SystemNoise)), db(noise)},
			{"G/T", float64(b.GOverT), db(aperture * 4 * math.Pi / lambda / lambda / lin(0.4) / noise)},
			{"C/N0", float64(b.CN0), db(cn0)},
			{"Eb/N0", float64(b.EbN0), db(ebn0)},
			{"margin", float64(b.Margin), db(ebn0) - 1.5 - 2.33},
			{"margin over", float64(b.MarginOver), db(ebn0) - 1.5 - 2.33 - 3},
			{"achievable rate", db(float64(b.AchievableRate)), db(rate)},
		} {
			if !(math.Abs(v.got-v.want) <= 1e-9) {
				t.Errorf("%g deg, %s: got %.12f, want %.12f", at.elevation, v.name, v.got, v.want)
			}
		}
	}
}

// The terms add to the received power and the parts to the noise bit for bit.
func TestTermsAddExactly(t *testing.T) {
	spec := wagtail(t)
	spec.PathModels, spec.NoiseModels = []PathModel{addedLoss{1.23}}, []NoiseModel{addedNoise{17}}
	l := mustLink(t, spec)
	rapid.Check(t, func(t *rapid.T) {
		g := Geometry{Elevation: deg(rapid.Float64Range(0, 90).Draw(t, "elevation")),
			Range:        unit.Length(rapid.Float64Range(1e5, 4e7).Draw(t, "range")),
			OffBoresight: deg(rapid.Float64Range(0, 89).Draw(t, "off boresight"))}
		b, err := l.At(g)
		if err != nil {
			t.Fatal(err)
		}
		sum, kelvin := 0.0, 0.0
		for _, x := range b.Terms {
			sum += float64(x.Sign) * x.Value
		}
		for _, p := range b.NoiseParts {
			kelvin += p.Temperature.Kelvins()
		}
		if sum != b.ReceivedPowerDBm || kelvin != b.SystemNoise.Kelvins() {
			t.Fatalf("terms %v against %v, parts %v against %v", sum, b.ReceivedPowerDBm, kelvin, b.SystemNoise.Kelvins())
		}
	})
}

// More of any loss never raises the margin; more range neither.
func TestMoreLossNeverRaisesTheMargin(t *testing.T) {
	changes := map[string]func(*LinkSpec, float64){
		"line loss":   func(s *LinkSpec, x float64) { s.Transmitter.LineLoss += unit.DB(x) },
		"extra loss":  func(s *LinkSpec, x float64) { s.Transmitter.ExtraLosses = []Loss{{"loss", unit.DB(0.5 + x)}} },
		"feed loss":   func(s *LinkSpec, x float64) { s.Antenna.FeedLoss += unit.DB(x) },
		"radome":      func(s *LinkSpec, x float64) { s.Antenna.ExtraLosses[0].Loss += unit.DB(x) },
		"surface":     func(s *LinkSpec, x float64) { s.Antenna.SurfaceRMS += unit.Length(x * 1e-4) },
		"blockage":    func(s *LinkSpec, x float64) { s.Antenna.BlockageFraction += x / 100 },
		"pointing":    func(s *LinkSpec, x float64) { s.Antenna.PointingRMS += deg(x / 100) },
		"axial ratio": func(s *LinkSpec, x float64) { s.Antenna.Polarization.AxialRatio = dbp(1 + x) },
		"rain":        func(s *LinkSpec, x float64) { s.PathModels = []PathModel{addedLoss{x}} },
		"noise":       func(s *LinkSpec, x float64) { s.NoiseModels = []NoiseModel{addedNoise{x}} },
		"margin":      func(s *LinkSpec, x float64) { s.Transmitter.RequiredMargin += unit.DB(x) },
	}
	for name, change := range changes {
		t.Run(name, func(t *testing.T) {
			rapid.Check(t, func(rt *rapid.T) {
				g := Geometry{Elevation: deg(rapid.Float64Range(5, 90).Draw(rt, "elevation")), Range: 1e6, OffBoresight: deg(40)}
				spec := wagtail(t)
				before := mustAt(t, mustLink(t, spec), g)
				change(&spec, rapid.Float64Range(0, 20).Draw(rt, "more"))
				after := mustAt(t, mustLink(t, spec), g)
				if after.MarginOver > before.MarginOver+1e-9 || float64(after.AchievableRate) > float64(before.AchievableRate)*(1+1e-9) {
					rt.Fatalf("margin over what is required rose from %v to %v", before.MarginOver, after.MarginOver)
				}
			})
		})
	}
}
func levelp(dbw float64) *unit.Level { l := unit.LevelDBW(dbw); return &l }
