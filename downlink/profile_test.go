package downlink

import (
	"math"
	"strings"
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/station"
)

// circle is a spacecraft on a circle about the Earth's centre through the zenith of
// site: a stand-in for an orbit whose every number is known.
type circle struct {
	start time.Time
	span  float64
}

const circleRadius, circleRate = 6921e3, 0.0011 // m, rad/s: about 550 km up

func (c circle) Seconds(t time.Time) float64 { return t.Sub(c.start).Seconds() }
func (c circle) Span() float64               { return c.span }
func (c circle) StateAt(s float64) orbit.State {
	f := circleSite
	sin, cos := math.Sincos(circleRate * (s - c.span/2))
	along := f.East
	return orbit.State{
		Position: f.Up.Scale(circleRadius * cos).Add(along.Scale(circleRadius * sin)),
		Velocity: f.Up.Scale(-circleRadius * circleRate * sin).Add(along.Scale(circleRadius * circleRate * cos)),
	}
}

var circleStart = time.Date(2026, 3, 10, 12, 0, 0, 0, time.UTC)

var circleSite = site()

func flown(t testing.TB, spec LinkSpec, span float64, step time.Duration) (*Link, *Profile) {
	t.Helper()
	l := mustLink(t, spec)
	track := circle{circleStart, span}
	p, err := l.Profile(track, circleStart, circleStart.Add(time.Duration(span*1e9)), step)
	if err != nil {
		t.Fatal(err)
	}
	return l, p
}

// A profile is the budgets along the pass, number for number.
func TestProfileIsTheBudgets(t *testing.T) {
	spec := wagtail(t)
	refraction, err := station.NewRefraction(0)
	if err != nil {
		t.Fatal(err)
	}
	spec.Refraction = refraction
	spec.PathModels, spec.NoiseModels = []PathModel{addedLoss{0.7}}, []NoiseModel{addedNoise{9}}
	l, p := flown(t, spec, 400.5, time.Second)
	if n := len(p.Seconds); n != 402 || p.Seconds[n-1] != 400.5 || p.Seconds[n-2] != 400 {
		t.Fatalf("%d samples, the last at %g s", n, p.Seconds[n-1])
	}
	track := circle{circleStart, 400.5}
	for i, s := range p.Seconds {
		state := track.StateAt(s)
		g, rate := l.GeometryOf(time.Time{}, state)
		b := mustAt(t, l, g)
		for name, v := range map[string][2]float64{
			"received power": {p.ReceivedPowerDBm[i], b.ReceivedPowerDBm}, "flux density": {p.FluxDensityDBWM2[i], b.PowerFluxDensity},
			"noise": {p.SystemNoiseK[i], b.SystemNoise.Kelvins()}, "G/T": {p.GOverTDBK[i], float64(b.GOverT)}, "C/N0": {p.CN0DBHz[i], float64(b.CN0)},
			"Eb/N0": {p.EbN0DB[i], float64(b.EbN0)}, "margin": {p.MarginDB[i], float64(b.Margin)}, "margin over": {p.MarginOverDB[i], float64(b.MarginOver)},
			"rate": {p.AchievableRateBps[i], float64(b.AchievableRate)}, "range": {p.RangeKm[i], b.Range.Kilometres()},
			"elevation": {p.ElevationDeg[i], b.Elevation.Degrees()}, "off boresight": {p.OffBoresightDeg[i], b.OffBoresight.Degrees()},
			"Doppler": {p.DopplerHz[i], -8180e6 * float64(rate) / 299792458},
		} {
			if v[0] != v[1] {
				t.Fatalf("sample %d, %s: profile %v, budget %v", i, name, v[0], v[1])
			}
		}
		for k, x := range b.Terms {
			if p.TermValues[k][i] != x.Value {
				t.Fatalf("sample %d, %s: profile %v, budget %v", i, x.Name, p.TermValues[k][i], x.Value)
			}
		}
		if p.Usable[i] != b.Usable || p.AchievableLimit[i] != b.AchievableLimit {
			t.Fatalf("sample %d: usable %v, limit %v", i, p.Usable[i], p.AchievableLimit[i])
		}
		if a := p.ApparentElevationDeg[i]; !(a > p.ElevationDeg[i]) {
			t.Fatalf("sample %d: apparent elevation %v under the geometric one, %v", i, a, p.ElevationDeg[i])
		}
	}
	// The plane triangle of the circle: range and nadir angle by the cosine and sine rules.
	angle := circleRate * 400.5 / 2
	d := math.Sqrt(circleRadius*circleRadius + 6371e3*6371e3 - 2*circleRadius*6371e3*math.Cos(angle))
	near(t, "range at AOS", p.RangeKm[0], d/1000, 1e-9*d)
	near(t, "nadir angle at AOS", p.OffBoresightDeg[0], math.Asin(6371e3*math.Sin(angle)/d)*180/math.Pi, 1e-6)
	rate := -circleRadius * 6371e3 * math.Sin(angle) * circleRate / d // the range falls
	near(t, "Doppler at AOS", p.DopplerHz[0], -8180e6*rate/299792458, 1e-3)
}

// The integral of the rates against one at steps ten times shorter, and the closing
// times against bisection on the budget.
func TestVolume(t *testing.T) {
	spec := wagtail(t)
	spec.Mode.DataRate = 4e7
	l, coarse := flown(t, spec, 600, time.Second)
	_, fine := flown(t, spec, 600, 100*time.Millisecond)
	near(t, "achievable bytes", coarse.Volume.AchievableBytes/fine.Volume.AchievableBytes, 1, 1e-5)
	if len(coarse.Volume.Closes) != 1 {
		t.Fatalf("closes %d times: %v", len(coarse.Volume.Closes), coarse.Volume.Closes)
	}
	over := func(s float64) float64 {
		g, _ := l.GeometryOf(circleStart, circle{circleStart, 600}.StateAt(s))
		return float64(mustAt(t, l, g).MarginOver)
	}
	low, high := 0.0, 300.0
	for range 60 {
		if mid := (low + high) / 2; over(mid) < 0 {
			low = mid
		} else {
			high = mid
		}
	}
	c := coarse.Volume.Closes[0]
	near(t, "begins to close", c.From.Sub(circleStart).Seconds(), low, 0.01)
	near(t, "ceases to close", c.To.Sub(circleStart).Seconds(), 600-low, 0.01)
	near(t, "mode's bytes", coarse.Volume.ModeBytes, 4e7*c.To.Sub(c.From).Seconds()/8, 1)
	achievable, mode := coarse.VolumeSoFar()
	last := len(mode) - 1
	near(t, "bytes at the achievable rate by LOS", achievable[last], coarse.Volume.AchievableBytes, 1e-3)
	near(t, "bytes in the mode by LOS", mode[last], coarse.Volume.ModeBytes, 1)
	near(t, "bytes in the mode by culmination", mode[300], coarse.Volume.ModeBytes/2, 0.01*coarse.Volume.ModeBytes)
	if mode[0] != 0 || achievable[0] != 0 {
		t.Errorf("%g and %g bytes at AOS", mode[0], achievable[0])
	}
	spec.Mode.DataRate = 1
	if _, all := flown(t, spec, 600, time.Second); len(all.Volume.Closes) != 1 || all.Volume.Closes[0] != (Interval{circleStart, circleStart.Add(600 * time.Second)}) {
		t.Errorf("a slow mode closes %v, want the whole pass", all.Volume.Closes)
	}
	spec.Mode.DataRate = 1e14
	if _, none := flown(t, spec, 600, time.Second); len(none.Volume.Closes) != 0 || none.Volume.ModeBytes != 0 || none.Volume.AchievableBytes == 0 {
		t.Errorf("a mode too fast: %+v", none.Volume)
	}
}

// A fixed antenna hears the top of the pass alone.
func TestVolumeOfAFixedAntenna(t *testing.T) {
	spec := wagtail(t)
	spec.Mode.DataRate = 1000
	spec.Antenna = &station.Antenna{Kind: station.Fixed, Gain: station.Constant(15), Beamwidth: deg(30), Boresight: station.Direction{Elevation: deg(90)}, Noise: spec.Antenna.Noise}
	_, p := flown(t, spec, 600, time.Second)
	if len(p.Volume.Closes) != 1 {
		t.Fatalf("closes %v", p.Volume.Closes)
	}
	for i, usable := range p.Usable {
		if want := p.ElevationDeg[i] >= 60; usable != want {
			t.Errorf("%.3f deg of elevation: usable %v, want %v", p.ElevationDeg[i], usable, want)
		}
		if !usable && p.AchievableRateBps[i] != 0 {
			t.Errorf("%.3f deg of elevation: %g bit/s", p.ElevationDeg[i], p.AchievableRateBps[i])
		}
	}
}

func TestProfileRefuses(t *testing.T) {
	l := mustLink(t, wagtail(t))
	track := circle{circleStart, 600}
	for _, c := range []struct {
		name     string
		aos, los time.Duration
		step     time.Duration
		want     string
	}{
		{"step 0", 0, time.Minute, 0, "at least 1ms"},
		{"before the track", -time.Second, time.Minute, time.Second, "within the track"},
		{"beyond the track", 0, 601 * time.Second, time.Second, "within the track"},
		{"reversed", time.Minute, 0, time.Second, "within the track"},
	} {
		if _, err := l.Profile(track, circleStart.Add(c.aos), circleStart.Add(c.los), c.step); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %q in it", c.name, err, c.want)
		}
	}
	spec := wagtail(t)
	spec.Frame = nil
	if _, err := mustLink(t, spec).Profile(track, circleStart, circleStart, time.Second); err == nil || !strings.Contains(err.Error(), "needs the site") {
		t.Errorf("without a site: %v", err)
	}
	if p, err := l.Profile(track, circleStart, circleStart, time.Second); err != nil || len(p.Seconds) != 1 || len(p.Volume.Closes) != 0 {
		t.Errorf("a pass of no length: %v, %v", p, err)
	}
}

// Only the columns are allocated: as often for ten thousand samples as for ten.
func TestProfileDoesNotAllocateBySample(t *testing.T) {
	l := mustLink(t, wagtail(t))
	track := circle{circleStart, 600}
	count := func(step time.Duration) float64 {
		return testing.AllocsPerRun(5, func() {
			if _, err := l.Profile(track, circleStart, circleStart.Add(600*time.Second), step); err != nil {
				t.Fatal(err)
			}
		})
	}
	if few, many := count(time.Minute), count(60*time.Millisecond); few != many {
		t.Errorf("%g allocations for 11 samples, %g for 10001", few, many)
	}
}

func TestVolumeSoFarOfIntervals(t *testing.T) {
	at := func(s float64) time.Time { return circleStart.Add(time.Duration(s * float64(time.Second))) }
	f := &Profile{Start: circleStart, Seconds: []float64{0, 1, 2, 3, 4}, AchievableRateBps: []float64{0, 8, 8, 16, 0}, DataRate: 8}
	f.Volume.Closes = []Interval{{From: at(0.5), To: at(1.5)}, {From: at(3), To: at(3.25)}}
	achievable, mode := f.VolumeSoFar()
	// By hand: trapezia of the rates over 8 bits; a byte a second while it closes.
	for i, want := range []struct{ achievable, mode float64 }{{0, 0}, {0.5, 0.5}, {1.5, 1}, {3, 1}, {4, 1.25}} {
		if achievable[i] != want.achievable || mode[i] != want.mode {
			t.Errorf("at %d s: %v and %v bytes, want %v and %v", i, achievable[i], mode[i], want.achievable, want.mode)
		}
	}
}
