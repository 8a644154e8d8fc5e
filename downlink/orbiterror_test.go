package downlink

import (
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// steady is an uncertainty that stays the same.
type steady orbit.Spread

func (u steady) At(time.Time) (orbit.Spread, error) { return orbit.Spread(u), nil }
func (u steady) Basis() string                      { return "as the test says" }

func withOrbitError(t testing.TB, probability float64, s orbit.Spread) LinkSpec {
	spec := wagtail(t)
	spec.Orbit = &OrbitError{Uncertainty: steady(s), Probability: probability}
	return spec
}

// The geometry of the circle's track s seconds after its start.
func onCircle(l *Link, s float64) Geometry {
	c := circle{circleStart, 400}
	g, _ := l.GeometryOf(circleStart.Add(time.Duration(s*1e9)), c.StateAt(s))
	return g
}

// A published beam, 3.7 m at 8.2 GHz, and 3 km along the track straight overhead at
// 550 km: e = 3/550 rad = 0.3125 deg at a right angle to the sight, loss 12 (e/w)².
func TestOrbitPointingLossOverhead(t *testing.T) {
	l := mustLink(t, withOrbitError(t, 0, orbit.Spread{Along: 3 * unit.Kilometre}))
	b := mustAt(t, l, onCircle(l, 200))
	w := 70 * 299792458.0 / 8180e6 / 3.7
	height := circleRadius - circleSite.Origin.Norm()
	e := math.Atan(3000/height) * 180 / math.Pi
	near(t, "pointing along the track, deg", b.OrbitTotal.Degrees(), e, 2e-5)
	near(t, "orbit pointing loss", b.term("orbit pointing loss"), 12*(e/w)*(e/w), 1e-3)
	near(t, "pointing loss", b.term("pointing loss"), 12*(0.1/w)*(0.1/w), 1e-9)
	if !b.Usable {
		t.Errorf("%.3g deg in a beam of %.3g deg counts as unusable", e, w)
	}
	if !l.noted(Assumption, "the position is uncertain as the test says") {
		t.Error("the notes do not say how uncertain the position is")
	}
	sum := 0.0
	for _, x := range b.Terms {
		sum += float64(float64(x.Sign) * x.Value)
	}
	if sum != b.ReceivedPowerDBm {
		t.Errorf("the terms add to %v, the received power is %v", sum, b.ReceivedPowerDBm)
	}
}

// Draws of displaced spacecraft and mispointed beams against both rules of the budget:
// the mean of the loss, and the loss not exceeded. The mean of n draws is allowed four
// of its own standard deviations; the share of draws over a quantile that of a share.
func TestOrbitPointingLossAgainstDraws(t *testing.T) {
	spread := orbit.Spread{Radial: 400, Along: 1800, Across: 700, RadialAlong: -0.4}
	for _, second := range []float64{60, 200, 290} {
		mean := mustLink(t, withOrbitError(t, 0, spread))
		quantile := mustLink(t, withOrbitError(t, 0.9, spread))
		w := mean.beamwidth
		state := circle{circleStart, 400}.StateAt(second)
		axes := state.Axes()
		f := quantile.spec.Frame
		sight := state.Position.Sub(f.Origin)
		right := sight.Cross(f.Up).Unit()
		top := right.Cross(sight).Unit()
		r := rand.New(rand.NewPCG(1, 26))
		const n = 20000
		own := mean.spec.Antenna.PointingRMS.Radians() / math.Sqrt2
		losses := make([]float64, n)
		sum, squares := 0.0, 0.0
		for i := range losses {
			x, y := r.NormFloat64(), r.NormFloat64()
			y = spread.RadialAlong*x + math.Sqrt(1-spread.RadialAlong*spread.RadialAlong)*y
			moved := sight.Add(axes.Radial.Scale(400 * x)).Add(axes.Along.Scale(1800 * y)).Add(axes.Across.Scale(700 * r.NormFloat64()))
			beam := sight.Unit().Add(right.Scale(own * r.NormFloat64())).Add(top.Scale(own * r.NormFloat64()))
			e := math.Atan2(beam.Cross(moved).Norm(), beam.Dot(moved))
			losses[i] = float64(station.PointingLoss(unit.Angle(e), w))
			sum += losses[i]
			squares += losses[i] * losses[i]
		}
		average := sum / n
		sigma := math.Sqrt((squares/n - average*average) / n)
		b := mustAt(t, mean, onCircle(mean, second))
		near(t, "mean loss", b.term("pointing loss")+b.term("orbit pointing loss"), average, 4*sigma)
		b = mustAt(t, quantile, onCircle(quantile, second))
		limit := b.term("pointing loss") + b.term("orbit pointing loss")
		slices.Sort(losses)
		at, _ := slices.BinarySearch(losses, limit)
		near(t, "share of draws within the loss at 90 %", float64(at)/n, 0.9, 4*math.Sqrt(0.9*0.1/n))
		beyond := 0
		edge := float64(station.PointingLoss(b.SureError, w))
		for _, x := range losses {
			if x > edge {
				beyond++
			}
		}
		near(t, "share of draws beyond the sure error", float64(beyond)/n, 1-SureProbability, 4*math.Sqrt(0.95*0.05/n))
	}
}

// Without an orbit's error, with a fixed antenna and with one that follows the signal
// there is no such term; the Doppler's spread is told all the same.
func TestOrbitErrorOfOtherAntennas(t *testing.T) {
	has := func(l *Link) bool {
		return slices.ContainsFunc(l.Terms(), func(x TermInfo) bool { return x.Name == "orbit pointing loss" })
	}
	if has(mustLink(t, wagtail(t))) {
		t.Error("a link without an orbit's error has the term")
	}
	spec := withOrbitError(t, 0, orbit.Spread{Along: 2 * unit.Kilometre})
	dish := *spec.Antenna
	dish.Follows = station.FollowsSignal
	spec.Antenna = &dish
	l := mustLink(t, spec)
	b := mustAt(t, l, onCircle(l, 150))
	if has(l) || !math.IsNaN(b.SureError.Radians()) || !(b.DopplerSpread > 1) || !(b.OrbitTotal > 0) {
		t.Errorf("follows the signal: sure error %v, Doppler ±%v Hz, pointing ±%v rad", b.SureError, b.DopplerSpread, b.OrbitTotal)
	}
	if _, err := l.At(Geometry{Elevation: deg(20), Range: 1.2e6, OffBoresight: deg(40)}); err == nil || !strings.Contains(err.Error(), "a stated geometry has none") {
		t.Errorf("a stated geometry: got %v", err)
	}
	spec.Orbit = &OrbitError{Uncertainty: steady{}, Probability: 0.3}
	if _, err := NewLink(spec); err == nil || !strings.Contains(err.Error(), "probability of the pointing loss: 0.3 is not allowed; it must be 0.7 to below 1") {
		t.Errorf("a probability of 0.3: got %v", err)
	}
}

// At no share of the minor axis does the loss not exceeded with LeastProbability fall
// below the mean, so that the term stays a loss.
func TestLeastProbability(t *testing.T) {
	q, err := station.NewErrorQuantile(LeastProbability)
	if err != nil {
		t.Fatal(err)
	}
	for minor := 0.0; minor <= 1; minor += 0.01 {
		if e := q.Of(1, unit.Angle(minor)).Radians(); e*e < 1+minor*minor {
			t.Errorf("minor %g: e² %g is below its mean %g", minor, e*e, 1+minor*minor)
		}
	}
}

// The beam of a pass overhead becomes too narrow when 1.96 standard deviations (a
// table of the normal distribution) along the track reach half its width: here the
// antenna is exact, and the rule grows along the track alone.
func TestTooNarrowFrom(t *testing.T) {
	spec := wagtail(t)
	dish := *spec.Antenna
	dish.PointingRMS = 0
	spec.Antenna = &dish
	rule := orbit.AgeUncertainty{Epoch: circleStart, Rule: orbit.AgeRule{Along: orbit.Growth{PerDay: unit.Kilometre}}}
	spec.Orbit = &OrbitError{Uncertainty: rule}
	l := mustLink(t, spec)
	const height = 500e3
	days := math.Tan(l.beamwidth.Radians()/2/1.959964) * height / 1000
	at, ok := l.TooNarrowFrom(height, circleStart, circleStart.AddDate(0, 0, 30))
	if !ok || math.Abs(at.Sub(circleStart).Hours()/24-days) > 2.0/86400 {
		t.Errorf("got %v, %v; want %.5f days after the start", at, ok, days)
	}
	if at, ok := l.TooNarrowFrom(height, circleStart, circleStart.Add(time.Hour)); ok {
		t.Errorf("within the first hour: got %v", at)
	}
	if at, ok := l.TooNarrowFrom(height, circleStart.AddDate(0, 0, 20), circleStart.AddDate(0, 0, 30)); !ok || !at.Equal(circleStart.AddDate(0, 0, 20)) {
		t.Errorf("from the start on: got %v, %v", at, ok)
	}
}

func TestProfileOfAnUncertainOrbit(t *testing.T) {
	_, p := flown(t, withOrbitError(t, 0, orbit.Spread{Along: 2200}), 400, time.Second)
	if len(p.BeamUnsure) != 1 {
		t.Fatalf("unsure %v", p.BeamUnsure)
	}
	// Nearer is worse: the unsure time lies about the culmination, and the pointing error
	// at its edges is half the beam.
	in := p.BeamUnsure[0]
	middle := in.From.Add(in.To.Sub(in.From) / 2)
	if d := middle.Sub(circleStart.Add(200 * time.Second)).Seconds(); math.Abs(d) > 1 {
		t.Errorf("the middle of %v lies %g s from the culmination", in, d)
	}
	i := int(in.From.Sub(circleStart).Seconds())
	half := 70 * 299792458.0 / 8180e6 / 3.7 / 2
	if !(p.SureErrorDeg[i] <= half && p.SureErrorDeg[i+1] >= half) {
		t.Errorf("at its start the error is %g to %g deg, half the beam %g deg", p.SureErrorDeg[i], p.SureErrorDeg[i+1], half)
	}
	_, plain := flown(t, wagtail(t), 400, time.Second)
	if plain.BeamUnsure != nil || !math.IsNaN(plain.OrbitTotalDeg[7]) {
		t.Error("a profile without an orbit's error tells of one")
	}
}

func BenchmarkProfileUncertain(b *testing.B) {
	l := mustLink(b, withOrbitError(b, 0, orbit.Spread{Along: 2200, Radial: 300, Across: 300}))
	track := circle{circleStart, 600}
	b.ReportAllocs()
	for b.Loop() {
		if _, err := l.Profile(track, circleStart, circleStart.Add(600*time.Second), time.Second); err != nil {
			b.Fatal(err)
		}
	}
}
