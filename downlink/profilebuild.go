package downlink

import (
	"errors"
	"fmt"
	"math"
	"time"

	"slantwise/downlink/propagation"
	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// Track gives Earth-fixed states over a span of seconds; *orbit.Ephemeris is one.
type Track interface {
	Seconds(t time.Time) float64 // the argument for an instant
	Span() float64               // the last valid argument; the first is 0
	StateAt(s float64) orbit.State
}

// MostSamples is how many samples a profile may have.
const MostSamples = 10_000_000

// Profile returns the budget along a pass from aos to los, a sample every step and
// one at los. aos must not be after los, the track must hold both, and step must be
// at least a millisecond. An error of one sample is the profile's error, with the
// instant in it.
func (l *Link) Profile(track Track, aos, los time.Time, step time.Duration) (*Profile, error) {
	p, err := l.prepareProfile(track, aos, los, step)
	if err != nil {
		return nil, err
	}
	s := l.newScratch()
	first := track.Seconds(aos)
	for i, sec := range p.Seconds {
		state := track.StateAt(min(first+sec, track.Span()))
		if err := l.sample(p, i, state, s); err != nil {
			return nil, fmt.Errorf("at %s: %w", aos.Add(time.Duration(sec*float64(time.Second))).UTC().Format("2006-01-02T15:04:05.000Z"), err)
		}
	}
	p.Volume = p.volume()
	if l.spec.Bodies != nil && l.beamwidth > 0 {
		p.SunInBeam = p.within(p.sunUpDeg, (l.beamwidth/2 + propagation.SunDiameter/2).Degrees())
		p.MoonInBeam = p.within(p.moonUpDeg, (l.beamwidth/2 + propagation.MoonDiameter/2).Degrees())
	}
	p.BeamUnsure = l.unsure(p)
	return p, nil
}

func (l *Link) prepareProfile(track Track, aos, los time.Time, step time.Duration) (*Profile, error) {
	if l.spec.Frame == nil {
		return nil, errors.New("a profile needs the site of the station; the link was made without one")
	}
	if step < time.Millisecond {
		return nil, fmt.Errorf("step: %v is not allowed; it must be at least 1ms", step)
	}
	// An instant holds whole nanoseconds, the span may end between two.
	if track.Seconds(aos) < 0 || track.Seconds(los) > track.Span()+1e-9 || los.Before(aos) {
		return nil, fmt.Errorf("pass: %s to %s does not lie within the track", aos.UTC().Format(time.RFC3339Nano), los.UTC().Format(time.RFC3339Nano))
	}
	whole := int64(los.Sub(aos) / step)
	if whole > MostSamples {
		return nil, fmt.Errorf("step: %v gives %d samples, more than %d; take a longer step", step, whole, MostSamples)
	}
	n := int(whole) + 1
	if los.Sub(aos)%step != 0 {
		n++
	}
	p := newProfile(l, n)
	p.Start = aos
	for i := range p.Seconds {
		p.Seconds[i] = (time.Duration(i) * step).Seconds()
	}
	p.Seconds[n-1] = los.Sub(aos).Seconds()
	return p, nil
}

// newProfile lays out the columns in one piece of memory.
func newProfile(l *Link, n int) *Profile {
	p := &Profile{Terms: l.terms, TermValues: make([][]float64, len(l.terms)),
		NoiseParts: l.noise.parts, NoiseK: make([][]float64, len(l.noise.parts)),
		AchievableLimit: make([]RateLimit, n), Usable: make([]bool, n),
		DataRate: l.dataRate(), RequiredMarginDB: float64(l.spec.Transmitter.RequiredMargin), HalfBeamDeg: math.NaN()}
	if l.beamwidth > 0 {
		p.HalfBeamDeg = (l.beamwidth / 2).Degrees()
	}
	columns := []*[]float64{&p.Seconds, &p.AzimuthDeg, &p.ElevationDeg, &p.ApparentElevationDeg, &p.RangeKm, &p.RangeRateKmS,
		&p.OffBoresightDeg, &p.OrbitAlongDeg, &p.OrbitTotalDeg, &p.DopplerSpreadHz, &p.SureErrorDeg, &p.SunDeg, &p.MoonDeg, &p.sunUpDeg, &p.moonUpDeg, &p.DopplerHz, &p.ReceivedPowerDBm, &p.FluxDensityDBWM2, &p.SystemNoiseK, &p.GOverTDBK,
		&p.CN0DBHz, &p.EbN0DB, &p.MarginDB, &p.MarginOverDB, &p.AchievableRateBps}
	if l.view != nil {
		columns = append(columns, &p.AroundBoresightDeg, &p.BodyOffZDeg, &p.BodyAroundZDeg)
	}
	for i := range p.TermValues {
		columns = append(columns, &p.TermValues[i])
	}
	for i := range p.NoiseK {
		columns = append(columns, &p.NoiseK[i])
	}
	all := make([]float64, n*len(columns))
	for i, c := range columns {
		*c = all[i*n : (i+1)*n : (i+1)*n]
	}
	return p
}

// sample evaluates one state into row i.
func (l *Link) sample(p *Profile, i int, state orbit.State, s *scratch) error {
	g := &s.geometry
	var rate unit.Speed
	*g, rate = l.GeometryOf(p.at(p.Seconds[i]), state)
	if err := l.evaluate(s); err != nil {
		if !isBlocked(err) {
			return err
		}
		s.noValue()
	}
	p.AzimuthDeg[i], p.ElevationDeg[i] = g.Azimuth.Degrees(), g.Elevation.Degrees()
	p.ApparentElevationDeg[i] = l.apparentDeg(g.Elevation)
	p.RangeKm[i], p.RangeRateKmS[i] = g.Range.Kilometres(), rate.KilometresPerSecond()
	p.OffBoresightDeg[i] = g.OffBoresight.Degrees()
	if p.BodyOffZDeg != nil {
		p.AroundBoresightDeg[i], p.BodyOffZDeg[i], p.BodyAroundZDeg[i] = g.AroundBoresight.Degrees(), g.BodyOffZ.Degrees(), g.BodyAroundZ.Degrees()
	}
	p.DopplerHz[i] = l.Doppler(rate).Hertz()
	k := &s.result
	p.OrbitAlongDeg[i], p.OrbitTotalDeg[i], p.SureErrorDeg[i] = k.look.Along.Degrees(), k.look.Total().Degrees(), k.sureError.Degrees()
	p.DopplerSpreadHz[i] = l.dopplerSpread(k.look).Hertz()
	p.SunDeg[i], p.MoonDeg[i] = g.bodies.sun.Degrees(), g.bodies.moon.Degrees()
	p.sunUpDeg[i], p.moonUpDeg[i] = math.NaN(), math.NaN()
	if g.bodies.sunUp {
		p.sunUpDeg[i] = p.SunDeg[i]
	}
	if g.bodies.moonUp {
		p.moonUpDeg[i] = p.MoonDeg[i]
	}
	for t, v := range s.terms {
		p.TermValues[t][i] = v
	}
	for t, v := range s.noise {
		p.NoiseK[t][i] = v
	}
	r := &s.result
	p.ReceivedPowerDBm[i], p.FluxDensityDBWM2[i] = r.receivedDBm, r.fluxDBWM2
	p.SystemNoiseK[i], p.GOverTDBK[i] = r.systemK, r.gOverT
	p.CN0DBHz[i], p.EbN0DB[i] = r.cn0, r.ebn0
	p.MarginDB[i], p.MarginOverDB[i] = r.margin, r.marginOver
	p.AchievableRateBps[i], p.AchievableLimit[i], p.Usable[i] = r.achievableBps, r.limit, r.usable
	return nil
}

// isBlocked tells whether the ground is in the ray's way.
func isBlocked(err error) bool {
	var blocked *propagation.BlockedRayError
	return errors.As(err, &blocked)
}

// noValue marks a sample whose ray the ground blocks: nothing gets through, and no
// number of the link exists.
func (s *scratch) noValue() {
	nan := math.NaN()
	for i := range s.terms {
		s.terms[i] = nan
	}
	for i := range s.noise {
		s.noise[i] = nan
	}
	s.geometry.bodies = noAngles
	s.result = result{receivedDBm: nan, fluxDBWM2: nan, systemK: nan, gOverT: nan, cn0: nan, ebn0: nan, margin: nan, marginOver: nan,
		limit: LimitUnusable, look: noLook, sureError: unit.Angle(nan)}
}

// within returns the intervals in which a column is at most a bound, from crossing to
// crossing, linear between samples; never nil.
func (p *Profile) within(column []float64, most float64) []Interval {
	out := []Interval{}
	begun := math.NaN()
	for i, v := range column {
		at := p.Seconds[i]
		crossing := at
		if i > 0 {
			if before := column[i-1]; (before <= most) != (v <= most) && !math.IsNaN(before+v) {
				crossing = p.Seconds[i-1] + (at-p.Seconds[i-1])*(most-before)/(v-before)
			}
		}
		switch in := v <= most; {
		case in && math.IsNaN(begun):
			begun = crossing
		case !in && begun <= crossing: // an angle that is lost ends it at this sample
			out = append(out, Interval{p.at(begun), p.at(crossing)})
			begun = math.NaN()
		}
	}
	if last := p.Seconds[len(p.Seconds)-1]; begun < last {
		out = append(out, Interval{p.at(begun), p.at(last)})
	}
	return out
}

func (l *Link) apparentDeg(geometric unit.Angle) float64 {
	if l.spec.Refraction == nil {
		return math.NaN()
	}
	apparent, ok := l.spec.Refraction.Apparent(geometric)
	if !ok {
		return math.NaN()
	}
	return apparent.Degrees()
}
