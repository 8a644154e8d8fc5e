package downlink

import (
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"slantwise/downlink/modem"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// command is an invented S-band uplink with every kind of term in it.
func command(t testing.TB) LinkSpec {
	t.Helper()
	spec := wagtail(t)
	power, err := unit.LevelWatts(5)
	if err != nil {
		t.Fatal(err)
	}
	spec.Antenna.Transmit = &station.Transmit{Power: power, LineLoss: 1.2, Bands: []station.Band{{Low: 2025 * unit.Megahertz, High: 2110 * unit.Megahertz}},
		Polarization: &station.Polarization{Kind: station.LeftHandCircular, AxialRatio: dbp(1.5)}}
	spec.Transmitter = Transmitter{}
	spec.Receiver = &Receiver{
		Transmitter: Transmitter{
			Name: "command", Frequency: 2065 * unit.Megahertz, LineLoss: 0.9,
			Pattern:  Pattern{Kind: CosinePower, PeakGain: 4, Exponent: 1.5},
			Attitude: AttitudeNadir, Polarization: &station.Polarization{Kind: station.LeftHandCircular, AxialRatio: dbp(3)},
			ImplementationLoss: 1.1, RequiredMargin: 6, ExtraLosses: []Loss{{"hybrid", 3.3}},
		},
		Noise: &station.Noise{PhysicalTemperature: 300, AntennaTemperature: station.Constant(250), Chain: []station.Stage{
			{Name: "front end", Gain: 20, NoiseFigure: dbp(3)}, {Name: "receiver", Gain: 10, NoiseFigure: dbp(9)}}},
	}
	required := unit.DB(9.6)
	spec.Mode = &modem.Mode{Name: "slow", Modulation: "bpsk", Coding: "none", DataRate: 16e3, RequiredEbN0: &required}
	return spec
}

// The whole chain of an uplink again in watts and kelvin: 1e-9 dB.
func TestUplinkChainInWattsAndKelvin(t *testing.T) {
	l := mustLink(t, command(t))
	const c, k = 299792458.0, 1.380649e-23 // SI Brochure, 9th edition
	lin := func(db float64) float64 { return math.Exp(db / 10 * math.Ln10) }
	db := func(x float64) float64 { return 10 * math.Log(x) / math.Ln10 }
	for _, at := range []struct{ elevation, km, off float64 }{{5, 2200, 62}, {17.3, 1321.5, 50.5}, {88, 512, 1.5}} {
		b := mustAt(t, l, Geometry{Elevation: deg(at.elevation), Range: unit.Length(at.km) * unit.Kilometre, OffBoresight: deg(at.off)})
		d, lambda := at.km*1000, c/2065e6
		aperture := math.Pi * 3.7 * 3.7 / 4 * 0.6 * math.Exp(-math.Pow(4*math.Pi*0.5e-3/lambda, 2)) * math.Pow(1-0.02, 2)
		width := 70 * lambda / 3.7
		eirp := 5 / lin(1.2) * aperture * 4 * math.Pi / lambda / lambda / lin(12*math.Pow(0.1/width, 2)) / lin(0.3) / lin(0.2)
		flux := eirp / (4 * math.Pi * d * d)
		r1, r2 := math.Sqrt(lin(3)), math.Sqrt(lin(1.5))
		match := 0.5 + (4*r1*r2-(r1*r1-1)*(r2*r2-1))/(2*(r1*r1+1)*(r2*r2+1))
		gain := lin(4) * math.Pow(math.Cos(at.off*math.Pi/180), 1.5)
		received := flux * match * gain * lambda * lambda / (4 * math.Pi) / lin(0.9) / lin(3.3)
		noise := 250/lin(0.9) + 300*(1-1/lin(0.9)) + 290*(lin(3)-1) + 290*(lin(9)-1)/lin(20)
		ebn0 := received / (k * noise) / 16e3
		for _, v := range []struct {
			name      string
			got, want float64
		}{
			{"received power", b.ReceivedPowerDBm, db(received) + 30},
			{"flux density at the spacecraft", b.PowerFluxDensity, db(flux)},
			{"noise", db(float64(b.SystemNoise)), db(noise)},
			{"G/T", float64(b.GOverT), db(gain / lin(0.9) / noise)},
			{"C/N0", float64(b.CN0), db(received / (k * noise))},
			{"margin", float64(b.Margin), db(ebn0) - 1.1 - 9.6},
			{"margin over", float64(b.MarginOver), db(ebn0) - 1.1 - 9.6 - 6},
			{"achievable rate", db(float64(b.AchievableRate)), db(received / (k * noise) / lin(1.1+9.6+6))},
		} {
			if !(math.Abs(v.got-v.want) <= 1e-9) {
				t.Errorf("%g deg, %s: got %.12f, want %.12f", at.elevation, v.name, v.got, v.want)
			}
		}
	}
}

func TestUplinkTermsAddExactly(t *testing.T) {
	spec := command(t)
	spec.PathModels = []PathModel{addedLoss{1.23}}
	l := mustLink(t, spec)
	want := "transmit power,transmit line loss,station antenna gain,surface loss,blockage loss,pointing loss,radome,old feed,free-space loss,polarisation mismatch,rain attenuation,receive antenna gain,line loss,hybrid"
	var names []string
	for _, x := range l.Terms() {
		names = append(names, x.Name)
	}
	if got := strings.Join(names, ","); got != want {
		t.Errorf("terms %s, want %s", got, want)
	}
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

// The margin of the mode that a sensitivity was found in is the received power over it,
// whatever the threshold; at another rate it moves by the ratio of the rates.
func TestSensitivityIsTheMargin(t *testing.T) {
	g := Geometry{Elevation: deg(20), Range: 1.2e6, OffBoresight: deg(30)}
	rapid.Check(t, func(t2 *rapid.T) {
		spec := command(t)
		r := spec.Receiver
		required := unit.DB(rapid.Float64Range(-1, 15).Draw(t2, "required"))
		spec.Mode.RequiredEbN0 = &required
		r.Modes = []modem.Mode{*spec.Mode}
		r.ImplementationLoss = unit.DB(rapid.Float64Range(0, 4).Draw(t2, "implementation"))
		rate := rapid.Float64Range(1e3, 1e5).Draw(t2, "rate")
		dbm := rapid.Float64Range(-120, -90).Draw(t2, "sensitivity")
		r.Noise, r.Sensitivity = nil, &Sensitivity{Power: unit.LevelDBm(dbm), Rate: unit.BitRate(rate)}
		b, err := mustLink(t, spec).At(g)
		if err != nil {
			t2.Fatal(err)
		}
		if want := b.ReceivedPowerDBm - dbm - 10*math.Log10(16e3/rate); math.Abs(float64(b.Margin)-want) > 1e-9 {
			t2.Fatalf("margin %v, want %v", b.Margin, want)
		}
	})
}

// A G/T holds on boresight: there C/N0 is EIRP less losses plus G/T, and off it the
// pattern's fall comes off. Without an antenna it is the same in every direction.
func TestSpacecraftGOverT(t *testing.T) {
	spec := command(t)
	spec.Receiver.Noise, spec.Receiver.GOverT = nil, dbp(-24.5)
	spec.Receiver.ExtraLosses = nil
	k := float64(unit.BoltzmannDB)
	for _, off := range []float64{0, 45} {
		b := mustAt(t, mustLink(t, spec), Geometry{Elevation: deg(20), Range: 1.2e6, OffBoresight: deg(off)})
		fall := -15 * math.Log10(math.Cos(off*math.Pi/180))
		before := b.ReceivedPowerDBm - 30 - b.term("receive antenna gain") + b.term("line loss")
		if want := before - fall - 24.5 - k; math.Abs(float64(b.CN0)-want) > 1e-9 || math.Abs(float64(b.GOverT)+24.5+fall) > 1e-9 {
			t.Errorf("%g deg off boresight: C/N0 %v, want %v; G/T %v", off, b.CN0, want, b.GOverT)
		}
	}
	spec.Receiver.AntennaUnknown, spec.Receiver.Pattern, spec.Receiver.Attitude = true, Pattern{}, AttitudeUnstated
	b := mustAt(t, mustLink(t, spec), Geometry{Elevation: deg(20), Range: 1.2e6, OffBoresight: deg(45)})
	sum := 0.0
	for _, x := range b.Terms {
		sum += float64(x.Sign) * x.Value
	}
	if want := sum - 30 - 24.5 - k; math.Abs(float64(b.CN0)-want) > 1e-9 || !math.IsNaN(b.ReceivedPowerDBm) {
		t.Errorf("C/N0 %v, want %v; received %v", b.CN0, want, b.ReceivedPowerDBm)
	}
}

// Maini and Agrawal, Satellite Communication, example 7.15: an uplink at 6 GHz.
func TestPublishedUplink(t *testing.T) {
	f, c := readFigures(t, "budget_b7.csv"), "complete uplink budget 6 GHz"
	ghz := unit.Frequency(f.in(t, c, "frequency")) * unit.Gigahertz
	aperture := f.in(t, c, "satellite antenna effective efficiency") * f.in(t, c, "satellite antenna area")
	gain := 10 * math.Log10(4*math.Pi*aperture/math.Pow(ghz.Wavelength().Metres(), 2))
	// The station's EIRP alone is printed: an antenna of 0 dBi is fed with it.
	sender := &station.Antenna{Name: "published", Kind: station.Directive, Gain: station.Constant(0), GOverT: station.Constant(0),
		Transmit: &station.Transmit{Power: unit.LevelDBW(f.in(t, c, "station EIRP"))}}
	spec := LinkSpec{Antenna: sender, Receiver: &Receiver{
		Transmitter: Transmitter{Name: "published", Frequency: ghz, Pattern: Pattern{PeakGain: unit.DB(gain)}, ExtraLosses: []Loss{{"atmosphere", unit.DB(f.in(t, c, "atmospheric loss"))}}},
		Noise:       &station.Noise{SystemTemperature: station.Constant(f.in(t, c, "receiver noise temperature"))}}}
	b := budgetOf(t, spec, unit.Length(f.in(t, c, "distance"))*unit.Kilometre)
	band := 10 * math.Log10(f.in(t, c, "bandwidth")*1e6)
	// The book takes 3e8 m/s: 0.006 dB twice, against its printed hundredths cut off.
	for _, v := range []struct {
		quantity string
		got      float64
	}{
		{"satellite antenna gain", b.term("receive antenna gain")}, {"free-space loss", b.term("free-space loss")},
		{"received power", b.ReceivedPowerDBm - 30}, {"C/N", float64(b.CN0) - band}, {"margin", float64(b.CN0) - band - f.in(t, c, "required C/N")},
	} {
		f.agreePrinted(t, c, v.quantity, v.got)
	}
}

// FCC IBFS SAT-LOI-20081223-00238, carrier 8M25G7W: the uplink of a transponder.
func TestPublishedTransponderUplink(t *testing.T) {
	f, c := readFigures(t, "budget_b4.csv"), "8M25G7W"
	sender := &station.Antenna{Name: "published", Kind: station.Directive, Gain: station.Constant(f.in(t, c, "uplink earth-station gain")), GOverT: station.Constant(0),
		Transmit: &station.Transmit{Power: unit.LevelDBW(f.in(t, c, "uplink input power"))}}
	ratio := unit.DB(f.in(t, c, "satellite G/T"))
	spec := LinkSpec{Antenna: sender, Receiver: &Receiver{AntennaUnknown: true, GOverT: &ratio,
		Transmitter: Transmitter{Name: "published", Frequency: unit.Frequency(f.in(t, c, "uplink frequency")) * unit.Gigahertz}}}
	b := budgetOf(t, spec, rangeOfLoss(f.in(t, c, "uplink free-space loss"), spec.Receiver.Frequency))
	f.agree(t, c, "uplink EIRP", b.term("transmit power")-30+b.term("station antenna gain"))
	f.agree(t, c, "uplink thermal C/N", float64(b.CN0)-10*math.Log10(f.in(t, c, "carrier bandwidth")*1e3))
}

func TestUplinkFaults(t *testing.T) {
	for name, c := range map[string]struct {
		change func(*LinkSpec)
		want   string
	}{
		"no transmit side": {func(s *LinkSpec) { s.Antenna.Transmit = nil }, "it has no transmit side"},
		"band":             {func(s *LinkSpec) { s.Receiver.Frequency = 2200 * unit.Megahertz }, "2200 MHz lies outside its bands 2025 to 2110 MHz"},
		"gain of another band": {func(s *LinkSpec) { s.Antenna.Gain, s.Antenna.Efficiency = station.Constant(48), 0 },
			"its gain was measured in the bands that it receives"},
		"beam of another band": {func(s *LinkSpec) {
			s.Antenna.Kind, s.Antenna.Gain, s.Antenna.Beamwidth, s.Antenna.Diameter = station.Directive, station.Constant(48), deg(0.7), 0
			s.Antenna.Transmit.Gain = station.Constant(36)
		}, "its beamwidth was measured in the bands that it receives"},
		"no noise":   {func(s *LinkSpec) { s.Receiver.Noise = nil }, "the receiver's noise is not known"},
		"two noises": {func(s *LinkSpec) { s.Receiver.GOverT = dbp(-20) }, "give one of them"},
		"no pattern": {func(s *LinkSpec) { s.Receiver.AntennaUnknown = true }, "the receive antenna's pattern is missing"},
		"no rate": {func(s *LinkSpec) {
			s.Receiver.Noise, s.Receiver.Sensitivity = nil, &Sensitivity{Power: unit.LevelDBm(-100)}
		}, "data rate of the sensitivity: 0 bit/s is not allowed"},
		"no mode":        {func(s *LinkSpec) { s.Receiver.Noise, s.Receiver.Sensitivity = nil, &Sensitivity{Rate: 1} }, "a sensitivity needs the mode that it was found in"},
		"sky's noise":    {func(s *LinkSpec) { s.NoiseModels = []NoiseModel{addedNoise{1}} }, "an uplink has no noise of the station's sky"},
		"table of noise": {func(s *LinkSpec) { s.Receiver.Noise.AntennaTemperature = wagtail(t).Antenna.Noise.AntennaTemperature }, "a table over the station's elevation has no meaning"},
	} {
		spec := command(t)
		c.change(&spec)
		if _, err := NewLink(spec); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %s", name, err, c.want)
		}
	}
}

// A sensitivity better than a receiver without noise of its own draws a warning.
func TestImpossibleSensitivity(t *testing.T) {
	for dbm, want := range map[float64]bool{-130: true, -110: false} {
		spec := command(t)
		spec.Receiver.Modes = []modem.Mode{*spec.Mode}
		spec.Receiver.Noise, spec.Receiver.Sensitivity = nil, &Sensitivity{Power: unit.LevelDBm(dbm), Rate: 16e3}
		if got := mustLink(t, spec).noted(Warning, "no receiver does so"); got != want {
			t.Errorf("%g dBm: warned %v, want %v", dbm, got, want)
		}
	}
}

// BenchmarkBothDirections is a downlink along a quarter of an hour at 1 s, and the same
// with an uplink beside it: at most twice the time.
func BenchmarkBothDirections(b *testing.B) {
	down, up := mustLink(b, wagtail(b)), mustLink(b, command(b))
	fly := func(b *testing.B, links ...*Link) {
		b.ReportAllocs()
		for b.Loop() {
			for _, l := range links {
				s := l.newScratch()
				for i := range 900 {
					x := float64(i)/450 - 1
					s.geometry = Geometry{Elevation: deg(60 - 55*math.Abs(x)), Range: unit.Length(6e5 + 1.5e6*math.Abs(x)), OffBoresight: deg(20 + 45*math.Abs(x))}
					if err := l.evaluate(s); err != nil {
						b.Fatal(err)
					}
					sink += s.result.margin
				}
			}
		}
	}
	b.Run("down", func(b *testing.B) { fly(b, down) })
	b.Run("up", func(b *testing.B) { fly(b, up) })
	b.Run("both", func(b *testing.B) { fly(b, down, up) })
}
