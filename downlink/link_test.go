package downlink

import (
	"errors"
	"math"
	"strings"
	"testing"

	"slantwise/downlink/modem"
	"slantwise/orbit/unit"
	"slantwise/station"
)

func (l *Link) noted(kind NoteKind, text string) bool {
	for _, n := range l.notes {
		if n.Kind == kind && strings.Contains(n.Text, text) {
			return true
		}
	}
	return false
}

func TestTermsOfTheBudget(t *testing.T) {
	spec := wagtail(t)
	spec.PathModels = []PathModel{addedLoss{1}}
	l := mustLink(t, spec)
	want := []string{"transmit power", "line loss", "transmit antenna gain", "spacecraft pointing", "free-space loss", "polarisation mismatch", "rain attenuation",
		"station antenna gain", "surface loss", "blockage loss", "pointing loss", "feed loss", "radome", "old feed"}
	var got []string
	for i, x := range l.Terms() {
		got = append(got, x.Name)
		gain := strings.HasSuffix(x.Name, "gain") || i == 0
		if gain != (x.Sign == 1) || !gain && (x.Sign != -1 || x.Unit != "dB") || x.Source == "" {
			t.Errorf("term %+v", x)
		}
	}
	if strings.Join(got, ";") != strings.Join(want, ";") {
		t.Errorf("terms are\n%v\nwant\n%v", got, want)
	}
}

// A measured G/T, with the gain and without: the same C/N0 = EIRP - losses + G/T +
// 228.599, whatever the feed loss; received power falls by the feed loss.
func TestMeasuredGOverT(t *testing.T) {
	g := Geometry{Elevation: deg(20), Range: 1.2e6, OffBoresight: deg(45)}
	spec := wagtail(t)
	dish := *spec.Antenna
	dish.Noise, dish.ExtraLosses, dish.GOverT = &station.Noise{PhysicalTemperature: 290}, nil, station.Constant(24.5)
	dish.Measurement = &station.Measurement{Date: "2025-11-04", Weather: "clear"}
	spec.Antenna = &dish
	known := mustLink(t, spec)
	b := mustAt(t, known, g)
	eirp := b.term("transmit power") - 30 - b.term("line loss") + b.term("transmit antenna gain") - b.term("spacecraft pointing")
	want := eirp - b.term("free-space loss") - b.term("polarisation mismatch") - b.term("pointing loss") + 24.5 + 228.5991672
	near(t, "C/N0 with the gain known", float64(b.CN0), want, 1e-6)
	near(t, "G/T", float64(b.GOverT), 24.5, 1e-9)
	near(t, "implied noise", hz(float64(b.SystemNoise)), b.term("station antenna gain")-b.term("surface loss")-b.term("blockage loss")-0.4-24.5, 1e-9)

	more := dish
	more.FeedLoss = 1.4
	spec.Antenna = &more
	after := mustAt(t, mustLink(t, spec), g)
	near(t, "C/N0 with 1 dB more of feed loss", float64(after.CN0), want, 1e-6)
	near(t, "received power with 1 dB more of feed loss", after.ReceivedPowerDBm, b.ReceivedPowerDBm-1, 1e-9)

	bare := station.Antenna{Kind: station.Directive, GOverT: station.Constant(24.5), Polarization: dish.Polarization, FeedLoss: 0.4}
	spec.Antenna = &bare
	l := mustLink(t, spec)
	alone := mustAt(t, l, g)
	near(t, "C/N0 with the gain unknown", float64(alone.CN0), want+b.term("pointing loss"), 1e-6)
	if !math.IsNaN(alone.ReceivedPowerDBm) || !math.IsNaN(float64(alone.SystemNoise)) || len(alone.NoiseParts) != 0 {
		t.Errorf("received power %v dBm and noise %v K without a gain", alone.ReceivedPowerDBm, alone.SystemNoise)
	}
	if !known.noted(Assumption, "G/T as measured, 2025-11-04, clear") || !l.noted(Warning, "in all weather") {
		t.Error("the notes do not say what a measured G/T means")
	}
}

// Extra losses at the antenna enter received power and C/N0 alike with a measured
// G/T; a dissipative one also emits, behind the feed loss.
func TestMeasuredGOverTWithExtraLosses(t *testing.T) {
	g := Geometry{Elevation: deg(20), Range: 1.2e6, OffBoresight: deg(45)}
	spec := wagtail(t)
	dish := *spec.Antenna
	dish.Noise, dish.GOverT, dish.ExtraLosses = nil, station.Constant(24.5), nil
	spec.Antenna = &dish
	plain := mustAt(t, mustLink(t, spec), g)
	lossy := dish
	lossy.ExtraLosses = []station.Loss{{Name: "cover", Loss: 1}}
	spec.Antenna = &lossy
	b := mustAt(t, mustLink(t, spec), g)
	near(t, "C/N0 with 1 dB of extra loss", float64(b.CN0), float64(plain.CN0)-1, 1e-9)
	near(t, "received power with 1 dB of extra loss", b.ReceivedPowerDBm, plain.ReceivedPowerDBm-1, 1e-9)
	lossy.ExtraLosses = []station.Loss{{Name: "cover", Loss: 1, Dissipative: true}}
	b = mustAt(t, mustLink(t, spec), g)
	emitted := 290 * (1 - math.Pow(10, -0.1)) / math.Pow(10, 0.04)
	near(t, "noise with 1 dB of dissipative loss", float64(b.SystemNoise-plain.SystemNoise), emitted, 1e-9)
}

func TestMeasuredTables(t *testing.T) {
	spec := wagtail(t)
	gain, err := station.TabulateGrid([][3]float64{{10, 8000, 46}, {90, 8000, 47}, {10, 8200, 46.4}, {90, 8200, 47.4}})
	if err != nil {
		t.Fatal(err)
	}
	gt, err := station.TabulateElevation([][2]float64{{10, 22}, {90, 25}})
	if err != nil {
		t.Fatal(err)
	}
	spec.Antenna = &station.Antenna{Kind: station.Directive, Gain: gain, Beamwidth: deg(0.7), GOverT: gt, Bands: spec.Antenna.Bands}
	l := mustLink(t, spec)
	b := mustAt(t, l, Geometry{Elevation: deg(50), Range: 1e6, OffBoresight: 0})
	near(t, "gain, half way in elevation and nine tenths in frequency", b.term("station antenna gain"), 46.86, 1e-9)
	near(t, "G/T half way", float64(b.GOverT), 23.5, 1e-9)
	if len(b.Cautions) != 0 {
		t.Errorf("cautions inside the tables: %v", b.Cautions)
	}
	if !l.noted(Assumption, "table of the measured G/T runs from 10 to 90 deg") {
		t.Errorf("notes: %v", l.Notes())
	}
	low := mustAt(t, l, Geometry{Elevation: deg(6), Range: 1e6, OffBoresight: 0})
	if len(low.Cautions) != 2 || !strings.Contains(low.Cautions[0], "runs from 10 to 90 deg: at 6.00 deg") {
		t.Errorf("cautions under the tables: %v", low.Cautions)
	}
	spec.Transmitter.Frequency = 8300 * unit.Megahertz
	if _, err := NewLink(spec); err == nil || !strings.Contains(err.Error(), "does not reach 8300 MHz") {
		t.Errorf("beyond the table's frequencies: %v", err)
	}
}

func TestOutsideTheBands(t *testing.T) {
	spec := wagtail(t)
	spec.Transmitter.Frequency = 2245 * unit.Megahertz
	_, err := NewLink(spec)
	var band *BandError
	if !errors.As(err, &band) || !strings.Contains(err.Error(), `antenna "dish": 2245 MHz lies outside its bands 8025 to 8400 MHz`) {
		t.Errorf("got %v", err)
	}
}

func TestAllFaultsOfALinkAtOnce(t *testing.T) {
	spec := wagtail(t)
	spec.Transmitter.LineLoss = -1
	spec.Antenna.Efficiency = 7
	spec.Mode = &modem.Mode{Name: "odd", Modulation: "qpsk", Coding: "ccsds-conv-1-3", DataRate: 1}
	_, err := NewLink(spec)
	for _, want := range []string{`transmitter "X-band": line loss: -1 dB`, `antenna "dish": efficiency: 7`, `mode "odd": coding with qpsk`} {
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("got %v, want %q in it", err, want)
		}
	}
	if _, err := NewLink(LinkSpec{Transmitter: spec.Transmitter}); err == nil || !strings.Contains(err.Error(), "no station antenna") {
		t.Errorf("without an antenna: %v", err)
	}
}

func TestAchievableRateAndWhatHoldsIt(t *testing.T) {
	g := Geometry{Elevation: deg(60), Range: 6e5, OffBoresight: deg(20)}
	spec := wagtail(t)
	free := mustAt(t, mustLink(t, spec), g)
	if free.AchievableLimit != LimitPower {
		t.Fatalf("held by %v, want power", free.AchievableLimit)
	}
	// At that rate the margin over what is required is nil: definition.
	spec.Mode.DataRate = free.AchievableRate
	near(t, "margin over at the achievable rate", float64(mustAt(t, mustLink(t, spec), g).MarginOver), 0, 1e-9)
	spec.Transmitter.AllottedBandwidth = 1 * unit.Megahertz
	b := mustAt(t, mustLink(t, spec), g)
	if want := 1e6 / 1.35 * 2 * 223 / 510; b.AchievableLimit != LimitBandwidth || math.Abs(float64(b.AchievableRate)-want) > 1e-6 {
		t.Errorf("%v bit/s held by %v, want %v by the bandwidth", b.AchievableRate, b.AchievableLimit, want)
	}
	spec.Transmitter.HighestRate = 5e5
	if b := mustAt(t, mustLink(t, spec), g); b.AchievableLimit != LimitTransmitter || b.AchievableRate != 5e5 {
		t.Errorf("%v bit/s held by %v, want 500000 by the transmitter", b.AchievableRate, b.AchievableLimit)
	}
	if l := mustLink(t, spec); !l.noted(Warning, "more than the allotted") || !l.noted(Default, "roll-off") {
		t.Errorf("notes: %v", l.Notes())
	}
	spec.Mode = nil
	b = mustAt(t, mustLink(t, spec), g)
	if !math.IsNaN(float64(b.AchievableRate)) || !math.IsNaN(float64(b.EbN0)) || b.AchievableLimit != LimitUnknown {
		t.Errorf("a carrier without data has %v bit/s, Eb/N0 %v", b.AchievableRate, b.EbN0)
	}
}

func TestFixedAntenna(t *testing.T) {
	spec := wagtail(t)
	spec.Antenna = &station.Antenna{Name: "turnstile", Kind: station.Fixed, Gain: station.Constant(5), Beamwidth: deg(60),
		Boresight: station.Direction{Elevation: deg(90)}, PointingRMS: deg(3), Noise: spec.Antenna.Noise}
	l := mustLink(t, spec)
	b := mustAt(t, l, Geometry{Azimuth: unit.Angle(math.NaN()), Elevation: deg(70), Range: 1e6})
	near(t, "12 ((20² + 3²)/60²)", b.term("pointing loss"), 12*(20.0*20+3*3)/3600, 1e-9)
	if !b.Usable || len(b.Cautions) != 0 {
		t.Errorf("usable %v, cautions %v", b.Usable, b.Cautions)
	}
	if b := mustAt(t, l, Geometry{Elevation: deg(50), Range: 1e6}); !b.Usable || len(b.Cautions) != 1 || !strings.Contains(b.Cautions[0], "beyond the half-power point") {
		t.Errorf("40 deg off: usable %v, cautions %v", b.Usable, b.Cautions)
	}
	low := mustAt(t, l, Geometry{Elevation: deg(20), Range: 1e6})
	if low.Usable || low.AchievableRate != 0 || low.AchievableLimit != LimitUnusable || !strings.Contains(low.Cautions[0], "outside the main lobe") {
		t.Errorf("70 deg off a beam of 60: usable %v, %v bit/s, %v", low.Usable, low.AchievableRate, low.Cautions)
	}
	tilted := *spec.Antenna
	tilted.Boresight = station.Direction{Azimuth: deg(90), Elevation: deg(45)}
	spec.Antenna = &tilted
	l = mustLink(t, spec)
	if _, err := l.At(Geometry{Azimuth: unit.Angle(math.NaN()), Elevation: deg(70), Range: 1e6}); err == nil || !strings.Contains(err.Error(), "needs the azimuth") {
		t.Errorf("without azimuth: %v", err)
	}
}

func TestNotesOfThePolarisation(t *testing.T) {
	spec := wagtail(t)
	spec.Transmitter.Polarization = nil
	l := mustLink(t, spec)
	if b := mustAt(t, l, Geometry{Elevation: 1, Range: 1e6}); !math.IsNaN(b.term("polarisation mismatch")) || !l.noted(Warning, "up to 3 dB may hide") {
		t.Error("a polarisation left out gives a term or no warning")
	}
	spec.Transmitter.Polarization = &station.Polarization{Kind: station.LeftHandCircular}
	if l := mustLink(t, spec); !l.noted(Warning, "opposite hands") || !l.noted(Default, "axial ratio of the transmitter left out") {
		t.Errorf("notes: %v", l.Notes())
	}
	line := &station.Polarization{Kind: station.Linear}
	spec.Transmitter.Polarization, spec.Antenna.Polarization = line, line
	if l := mustLink(t, spec); !l.noted(Warning, "90 % of the angles lose no more than 16.1") {
		t.Errorf("notes: %v", l.Notes())
	}
}

func TestTumbling(t *testing.T) {
	spec := wagtail(t)
	spec.Transmitter.Attitude = AttitudeTumbling
	if _, err := NewLink(spec); err == nil || !strings.Contains(err.Error(), "give the pattern's back lobe") {
		t.Errorf("without a back lobe: %v", err)
	}
	spec.Transmitter.Pattern.BackLobe = dbp(-8)
	l := mustLink(t, spec)
	g, err := l.StatedGeometry(1e6, deg(30), nil, nil)
	if err != nil {
		t.Fatal(err)
	}
	b := mustAt(t, l, g)
	// With 0.9 the gain is that of the least tenth: the front beyond cos 0.2, 6 + 20 log10 0.2 = -7.98 dBi, but the back is less.
	near(t, "gain exceeded with 0.9", b.term("transmit antenna gain"), -8, 1e-9)
	if !math.IsNaN(float64(b.OffBoresight)) || !l.noted(Default, "attitude probability left out: 0.9") {
		t.Errorf("off boresight %v, notes %v", b.OffBoresight, l.Notes())
	}
	if _, err := l.StatedGeometry(1e6, deg(30), nil, degp(20)); err == nil {
		t.Error("a tumbling spacecraft has an off-boresight angle")
	}
}

func TestPatternThatRadiatesTooMuch(t *testing.T) {
	spec := wagtail(t)
	spec.Transmitter.Pattern = Pattern{PeakGain: 3}
	if l := mustLink(t, spec); !l.noted(Warning, "radiates 2 times the power that it is fed (3.00 dB too much") {
		t.Errorf("notes: %v", l.Notes())
	}
	// The same gain of a steered antenna is that on its axis, and no pattern is stated.
	spec.Transmitter.Attitude = AttitudeStation
	l := mustLink(t, spec)
	if l.noted(Warning, "radiates") || !l.noted(Assumption, "boresight points at the station") {
		t.Errorf("steered: notes: %v", l.Notes())
	}
}

func TestStatedGeometry(t *testing.T) {
	spec := wagtail(t)
	spec.Frame = nil
	l := mustLink(t, spec)
	g, err := l.StatedGeometry(1200*unit.Kilometre, deg(20), nil, nil)
	if err != nil {
		t.Fatal(err)
	}
	// Plane triangle: the orbit's radius from the cosine rule, the angle from the sine rule.
	r := math.Sqrt(6371.009*6371.009 + 1200*1200 + 2*6371.009*1200*math.Sin(20*math.Pi/180))
	near(t, "nadir angle", g.OffBoresight.Degrees(), math.Asin(6371.009*math.Cos(20*math.Pi/180)/r)*180/math.Pi, 1e-9)
	for _, bad := range []struct {
		km, el float64
		off    *unit.Angle
	}{{0, 20, nil}, {-5, 20, nil}, {math.NaN(), 20, nil}, {math.Inf(1), 20, nil}, {1200, 91, nil}, {1200, math.NaN(), nil}, {1200, 20, degp(181)}, {1200, 20, degp(math.NaN())}} {
		var re *unit.RangeError
		if _, err := l.StatedGeometry(unit.Length(bad.km)*unit.Kilometre, deg(bad.el), nil, bad.off); !errors.As(err, &re) {
			t.Errorf("%+v: got %v, want a *unit.RangeError", bad, err)
		}
	}
	spec.Transmitter.Attitude = AttitudeUnstated
	l = mustLink(t, spec)
	if g, err := l.StatedGeometry(1e6, deg(20), nil, nil); err != nil || g.OffBoresight != 0 || !l.noted(Assumption, "attitude left out") {
		t.Errorf("without attitude: %v off boresight, %v", g.OffBoresight, err)
	}
	spec.Transmitter.Pattern.BackLobe = dbp(-8) // which must not stand in for the angle
	l = mustLink(t, spec)
	if _, err := l.At(Geometry{Elevation: 0.3, Range: 1e6, OffBoresight: unit.Angle(math.NaN())}); err == nil || !strings.Contains(err.Error(), "give the attitude") {
		t.Errorf("a flown spacecraft without attitude: %v", err)
	}
	if _, err := l.At(Geometry{Elevation: 0.3, Range: 0}); err == nil {
		t.Error("a range of nothing has a budget")
	}
}

// failing is a model that has no value.
type failing struct{ addedLoss }

func (failing) Losses(*Geometry, []float64) error { return errors.New("rain: 900 GHz is out of range") }

func TestAModelsErrorIsTheBudgets(t *testing.T) {
	spec := wagtail(t)
	spec.PathModels = []PathModel{failing{}}
	if _, err := mustLink(t, spec).At(Geometry{Elevation: 0.3, Range: 1e6}); err == nil || !strings.Contains(err.Error(), "900 GHz") {
		t.Errorf("got %v", err)
	}
}
