package fluxdensity_test

import (
	"encoding/csv"
	"math"
	"math/rand/v2"
	"os"
	"strconv"
	"strings"
	"testing"
	"time"

	"slantwise/downlink"
	"slantwise/downlink/fluxdensity"
	"slantwise/downlink/modem"
	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

const earth = station.EquatorialRadius * unit.Metre

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s: got %.6f, want %.6f, difference %.3g over %.3g", what, got, want, got-want, tol)
	}
}

func isotropic(gain unit.DB) *downlink.Pattern {
	return &downlink.Pattern{Kind: downlink.Isotropic, PeakGain: gain}
}

func cosine(peak unit.DB, n float64, back *unit.DB) *downlink.Pattern {
	return &downlink.Pattern{Kind: downlink.CosinePower, PeakGain: peak, Exponent: n, BackLobe: back}
}

func table(points ...float64) *downlink.Pattern {
	p := &downlink.Pattern{Kind: downlink.GainTable}
	for i := 0; i < len(points); i += 2 {
		p.Table = append(p.Table, downlink.PatternPoint{OffBoresight: unit.Angle(points[i]) * unit.Degree, Gain: unit.DB(points[i+1])})
	}
	return p
}

// xBand is 10 dBW spread over 4 Mbaud at 8200 MHz.
func xBand(p *downlink.Pattern, a downlink.Attitude) fluxdensity.Emission {
	return fluxdensity.Emission{
		Name: "X", Centre: 8200 * unit.Megahertz, Power: unit.LevelDBW(10), Pattern: p, Attitude: a,
		Spectrum: fluxdensity.Spectrum{Kind: fluxdensity.LinearSpectrum, SymbolRate: 4 * unit.Megahertz},
	}
}

func circular(height float64) fluxdensity.Orbit {
	r := earth + unit.Length(height)*unit.Kilometre
	return fluxdensity.Orbit{Perigee: r, Apogee: r, LeastElevation: 5 * unit.Degree}
}

// find returns the finding of a place and, where it is not empty, of a rule.
func find(t *testing.T, all []fluxdensity.Finding, place fluxdensity.Place, rule string) fluxdensity.Finding {
	t.Helper()
	for _, f := range all {
		if f.Limit != nil && f.Limit.Place == place && strings.Contains(f.Limit.Rule, rule) {
			return f
		}
	}
	t.Fatalf("no finding for %s %s among %d", place, rule, len(all))
	return fluxdensity.Finding{}
}

// The points are computed from the rules in testdata/review (see SOURCES.md), exact
// to the printed digits.
func TestLimitsAtChosenAngles(t *testing.T) {
	f, err := os.Open("../../testdata/review/flux_mask_points.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil || len(rows) != 37 {
		t.Fatalf("%d rows, %v", len(rows), err)
	}
	for _, r := range rows[1:] {
		mhz, _ := strconv.ParseFloat(r[0], 64)
		angle, _ := strconv.ParseFloat(r[1], 64)
		want, err := strconv.ParseFloat(r[2], 64)
		if err != nil {
			t.Fatal(err)
		}
		for _, l := range fluxdensity.Limits() { // the first one of the band is the one of the points
			if l.Place == fluxdensity.Ground && mhz >= l.Low.Megahertz() && mhz <= l.High.Megahertz() {
				near(t, r[0]+" MHz at "+r[1]+" deg", l.At(unit.Angle(angle)*unit.Degree), want, 1e-9)
				break
			}
		}
	}
}

// TestLimitsAreWhole: the slope leads from the lower figure to the upper one, every
// row names its rule, and rows from memory say so.
func TestLimitsAreWhole(t *testing.T) {
	recalled := 0
	for _, l := range fluxdensity.Limits() {
		near(t, l.Rule+": slope", l.LowDBWM2+20*l.SlopeDBPerDeg, l.HighDBWM2, 1e-9)
		if l.Rule == "" || !(l.High > l.Low) || !(l.Reference > 0) {
			t.Errorf("row %+v is not whole", l)
		}
		if l.Recalled {
			recalled++
			if !strings.Contains(l.Provenance(), "memory") {
				t.Errorf("%s: the provenance %q does not say that it is from memory", l.Rule, l.Provenance())
			}
		}
	}
	if recalled == 0 || recalled == len(fluxdensity.Limits()) {
		t.Errorf("%d rows are recalled; some are, and some were read", recalled)
	}
}

// 10 dBW over 4 MHz at 8200 MHz from 500 km in the zenith: -144.97 dB(W/m²) in 4 kHz,
// 4.97 dB under the limit (computed, from the spreading loss 124.9715 dB of
// testdata/link/spreading_loss.csv; half a unit of the printed digit).
func TestCheckFigure(t *testing.T) {
	all, err := fluxdensity.Worst(circular(500), []fluxdensity.Emission{xBand(isotropic(0), downlink.AttitudeNadir)})
	if err != nil {
		t.Fatal(err)
	}
	f := find(t, all, fluxdensity.Ground, "Article 21")
	near(t, "flux density", f.FluxDBWM2, -144.97, 0.005)
	near(t, "distance", float64(f.Distance), 4.97, 0.005)
	near(t, "arrival", f.Arrival.Degrees(), 90, 0.01)
	near(t, "altitude", f.Altitude.Kilometres(), 500, 1e-6)
	if f.Outcome != fluxdensity.Passed {
		t.Errorf("outcome %s, want pass", f.Outcome)
	}
}

// TestWorstAngleIsNotTheZenith: an antenna shaped to favour the rim is worst there,
// where the limit is lowest. Expected by hand at 5° of arrival: range 2077.96 km and
// 66.43 deg off nadir from the plane triangle at 500 km, gain 5 dBi all around there.
func TestWorstAngleIsNotTheZenith(t *testing.T) {
	p := table(0, -10, 50, -10, 62, 5, 90, 5)
	all, err := fluxdensity.Worst(circular(500), []fluxdensity.Emission{xBand(p, downlink.AttitudeNadir)})
	if err != nil {
		t.Fatal(err)
	}
	f := find(t, all, fluxdensity.Ground, "Article 21")
	near(t, "arrival", f.Arrival.Degrees(), 5, 0.01)
	d := math.Sqrt(6878.137*6878.137-math.Pow(6378.137*math.Cos(5*math.Pi/180), 2)) - 6378.137*math.Sin(5*math.Pi/180)
	near(t, "flux density", f.FluxDBWM2, 10+5-30-20*math.Log10(d*1000)-10*math.Log10(4*math.Pi), 0.002)
}

// TestNothingKnownNothingPassed: a direction without a known gain is never passed.
func TestNothingKnownNothingPassed(t *testing.T) {
	weak := func(e fluxdensity.Emission) fluxdensity.Emission { e.Power = unit.LevelDBW(-40); return e }
	back := unit.DB(-20)
	for _, c := range []struct {
		name        string
		e           fluxdensity.Emission
		ground, geo fluxdensity.Outcome
	}{
		{"table to 30 deg", weak(xBand(table(0, 6, 30, 3), downlink.AttitudeNadir)), fluxdensity.NotAssessed, fluxdensity.NotAssessed},
		{"table to 90 deg", weak(xBand(table(0, 6, 90, 0), downlink.AttitudeNadir)), fluxdensity.Passed, fluxdensity.NotAssessed},
		{"table to 180 deg", weak(xBand(table(0, 6, 180, -10), downlink.AttitudeNadir)), fluxdensity.Passed, fluxdensity.Passed},
		{"cosine without back lobe", weak(xBand(cosine(6, 2, nil), downlink.AttitudeNadir)), fluxdensity.Passed, fluxdensity.NotAssessed},
		{"cosine with back lobe", weak(xBand(cosine(6, 2, &back), downlink.AttitudeNadir)), fluxdensity.Passed, fluxdensity.Passed},
		{"cosine, tumbling", weak(xBand(cosine(6, 2, nil), downlink.AttitudeTumbling)), fluxdensity.NotAssessed, fluxdensity.NotAssessed},
		{"no pattern", weak(xBand(nil, downlink.AttitudeNadir)), fluxdensity.NotAssessed, fluxdensity.NotAssessed},
		{"held to the station, front alone", weak(xBand(cosine(20, 50, nil), downlink.AttitudeStation)), fluxdensity.NotAssessed, fluxdensity.NotAssessed},
		{"too much where it is known", xBand(table(0, 16, 30, 13), downlink.AttitudeNadir), fluxdensity.Failed, fluxdensity.NotAssessed},
	} {
		t.Run(c.name, func(t *testing.T) {
			all, err := fluxdensity.Worst(circular(500), []fluxdensity.Emission{c.e})
			if err != nil {
				t.Fatal(err)
			}
			ground, geo := find(t, all, fluxdensity.Ground, "Article 21"), find(t, all, fluxdensity.Geostationary, "")
			if ground.Outcome != c.ground || geo.Outcome != c.geo {
				t.Errorf("ground %s, geostationary %s; want %s, %s", ground.Outcome, geo.Outcome, c.ground, c.geo)
			}
			for _, f := range []fluxdensity.Finding{ground, geo} {
				if (f.Outcome == fluxdensity.NotAssessed) != (f.Reason != "") {
					t.Errorf("%s: %s with the reason %q", f.Limit.Place, f.Outcome, f.Reason)
				}
			}
		})
	}
}

func TestNoLimitIsNotAssessed(t *testing.T) {
	e := xBand(isotropic(0), downlink.AttitudeNadir)
	e.Centre = 437 * unit.Megahertz
	all, err := fluxdensity.Worst(circular(500), []fluxdensity.Emission{e})
	if err != nil || len(all) != 1 {
		t.Fatalf("%d findings, %v", len(all), err)
	}
	if f := all[0]; f.Outcome != fluxdensity.NotAssessed || f.Limit != nil || f.Reason != "no limit is known here for 437 MHz" {
		t.Errorf("got %+v", f)
	}
}

// TestGeostationary works the flux in the zenith out by hand: 35286.03 km from 500 km
// to the geostationary radius 42164.17 km.
func TestGeostationary(t *testing.T) {
	e := xBand(isotropic(0), downlink.AttitudeNadir)
	all, err := fluxdensity.Worst(circular(500), []fluxdensity.Emission{e})
	if err != nil {
		t.Fatal(err)
	}
	f := find(t, all, fluxdensity.Geostationary, "22.5")
	near(t, "range", f.Range.Kilometres(), 42164.17-6878.137, 0.01)
	near(t, "flux density", f.FluxDBWM2, 10-30-20*math.Log10(f.Range.Metres())-10*math.Log10(4*math.Pi), 1e-6)
	near(t, "off nadir", f.OffNadir.Degrees(), 180, 0.01)
	craft := orbit.Vec3{X: 6878137}
	along, err := fluxdensity.Along(fluxdensity.Track{Times: []time.Time{time.Unix(0, 0)}, Positions: []orbit.Vec3{craft}}, []fluxdensity.Emission{e})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "range on the ring", find(t, along, fluxdensity.Geostationary, "").Range.Kilometres(), 42164.17-6878.137, 0.01)
}

func TestTransmittersAdd(t *testing.T) {
	a, b := xBand(isotropic(0), downlink.AttitudeNadir), xBand(isotropic(0), downlink.AttitudeNadir)
	a.Name, b.Name = "a", "b"
	one := func(e ...fluxdensity.Emission) []fluxdensity.Finding {
		all, err := fluxdensity.Worst(circular(500), e)
		if err != nil {
			t.Fatal(err)
		}
		var ground []fluxdensity.Finding
		for _, f := range all {
			if f.Limit != nil && f.Limit.Place == fluxdensity.Ground {
				ground = append(ground, f)
			}
		}
		return ground
	}
	alone := one(a)
	both := one(a, b)
	if len(both) != 1 || len(both[0].Transmitters) != 2 {
		t.Fatalf("two of unknown width: got %+v", both)
	}
	near(t, "two alike", float64(alone[0].Distance-both[0].Distance), 10*math.Log10(2), 1e-6)
	a.Width, b.Width = 5*unit.Megahertz, 5*unit.Megahertz
	b.Centre = 8300 * unit.Megahertz
	if apart := one(a, b); len(apart) != 2 || len(apart[0].Transmitters) != 1 {
		t.Errorf("two far apart: got %d findings", len(apart))
	}
	b.Centre = 8204 * unit.Megahertz
	if joined := one(a, b); len(joined) != 1 {
		t.Errorf("two that overlap: got %d findings", len(joined))
	}
}

// TestAgainstScatteredPoints compares the scan with the worst of many points strewn
// over the ellipsoid, by way of the station's own look angles: the scan must find at
// least as much, and not much more.
func TestAgainstScatteredPoints(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	back := unit.DB(-15)
	patterns := []*downlink.Pattern{isotropic(2), cosine(8, 3, &back), cosine(14, 20, &back), table(0, 0, 20, 1, 45, 4, 63, 8, 75, -2, 180, -20)}
	for i, p := range patterns {
		for _, attitude := range []downlink.Attitude{downlink.AttitudeNadir, downlink.AttitudeStation} {
			site := station.Site{Latitude: 50 * unit.Degree, Longitude: 10 * unit.Degree}
			frame := site.Frame()
			over := station.Site{Latitude: 55 * unit.Degree, Longitude: unit.Angle(10+float64(4*i)) * unit.Degree, Altitude: 600 * unit.Kilometre}
			craft := over.Frame().Origin
			e := xBand(p, attitude)
			all, err := fluxdensity.Along(fluxdensity.Track{Times: []time.Time{time.Unix(0, 0)}, Positions: []orbit.Vec3{craft}, Station: &frame.Origin}, []fluxdensity.Emission{e})
			if err != nil {
				t.Fatal(err)
			}
			got := find(t, all, fluxdensity.Ground, "Article 21")
			worst := scattered(r, craft, frame.Origin, &e, got.Limit)
			if d := float64(got.Distance); d > worst+1e-9 || d < worst-0.1 {
				t.Errorf("pattern %d, %s: the scan finds %.4f dB, the scattered points %.4f", i, attitude, d, worst)
			}
		}
	}
}

func scattered(r *rand.Rand, craft, toward orbit.Vec3, e *fluxdensity.Emission, l *fluxdensity.Limit) float64 {
	worst := math.Inf(1)
	axis := craft.Scale(-1).Unit()
	if e.Attitude == downlink.AttitudeStation {
		axis = toward.Sub(craft).Unit()
	}
	for range 150_000 {
		ground := station.Site{
			Latitude: unit.Angle(25+60*r.Float64()) * unit.Degree, Longitude: unit.Angle(-40+120*r.Float64()) * unit.Degree,
		}
		frame := ground.Frame()
		_, el, distance := frame.Direction(craft)
		if el < 0 {
			continue
		}
		off := math.Acos(max(-1, min(1, frame.Origin.Sub(craft).Unit().Dot(axis))))
		g, err := e.Pattern.GainAt(unit.Angle(off))
		if err != nil {
			continue
		}
		flux := e.Power.DBW() + float64(g) - 30 - 20*math.Log10(distance.Metres()) - 10*math.Log10(4*math.Pi)
		worst = min(worst, l.At(el)-flux)
	}
	return worst
}

// TestWorstBoundsTheTrack: no instant of an orbit is worse than its worst geometry.
func TestWorstBoundsTheTrack(t *testing.T) {
	back := unit.DB(-15)
	site := station.Site{Latitude: 60 * unit.Degree}
	frame := site.Frame()
	for _, p := range []*downlink.Pattern{cosine(8, 3, &back), table(0, 0, 45, 4, 63, 8, 75, -2, 180, -20)} {
		for _, attitude := range []downlink.Attitude{downlink.AttitudeNadir, downlink.AttitudeStation, downlink.AttitudeTumbling} {
			track := fluxdensity.Track{Station: &frame.Origin}
			const radius = 6928137
			for i := range 60 { // a polar pass over the site's meridian, in sight of it
				s, c := math.Sincos((45 + float64(i)/2) * math.Pi / 180)
				craft := orbit.Vec3{X: radius * c * 0.99, Y: radius * c * math.Sqrt(1-0.99*0.99), Z: radius * s}
				if frame.SinElevation(craft) > math.Sin(5*math.Pi/180) {
					track.Times, track.Positions = append(track.Times, time.Unix(int64(i), 0)), append(track.Positions, craft)
				}
			}
			e := []fluxdensity.Emission{xBand(p, attitude)}
			along, err := fluxdensity.Along(track, e)
			if err != nil {
				t.Fatal(err)
			}
			worst, err := fluxdensity.Worst(fluxdensity.Orbit{Perigee: radius, Apogee: radius, LeastElevation: 5 * unit.Degree}, e)
			if err != nil {
				t.Fatal(err)
			}
			for i := range along {
				if !(worst[i].Distance <= along[i].Distance+0.01) {
					t.Errorf("%s, %s: the track has %.3f dB left, the worst geometry %.3f", attitude, along[i].Limit.Place, float64(along[i].Distance), float64(worst[i].Distance))
				}
			}
		}
	}
}

// TestFluxOfTheBudget: toward the station the flux is that of the link budget, less
// the share that falls in the reference bandwidth.
func TestFluxOfTheBudget(t *testing.T) {
	power, _ := unit.LevelWatts(2)
	tx := downlink.Transmitter{Name: "X", Frequency: 8180 * unit.Megahertz, Power: power, LineLoss: 0.8, Pattern: *isotropic(3)}
	mode := modem.Mode{Name: "m", Modulation: "qpsk", Coding: "ccsds-conv-1-2", SymbolRate: 10 * unit.Megahertz}
	link, err := downlink.NewLink(downlink.LinkSpec{Transmitter: tx, Mode: &mode, Antenna: &station.Antenna{
		Name: "d", Kind: station.Dish, Diameter: 3, Efficiency: 0.5, Noise: &station.Noise{SystemTemperature: station.Constant(130)}}})
	if err != nil {
		t.Fatal(err)
	}
	b, err := link.At(downlink.Geometry{Range: 500 * unit.Kilometre, Elevation: 90 * unit.Degree})
	if err != nil {
		t.Fatal(err)
	}
	all, err := fluxdensity.Worst(circular(500), []fluxdensity.Emission{fluxdensity.FromTransmitter(&tx, link.Mode())})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "flux", find(t, all, fluxdensity.Ground, "").FluxDBWM2, b.PowerFluxDensity+10*math.Log10(4e3/10e6), 1e-6)
}
