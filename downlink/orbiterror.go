package downlink

import (
	"errors"
	"fmt"
	"math"
	"sync"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// OrbitError is how uncertain a spacecraft's position is, and how that counts in the
// budget of an antenna that follows the prediction.
//
// The beam's loss is that of station.PointingLoss, which grows with the square of the
// angle. Left at 0, Probability asks for the mean: the square of the orbit's error adds
// to that of the antenna, and so the terms "pointing loss" and "orbit pointing loss"
// each hold their own part. Else the two terms together are the loss that is not exceeded
// with Probability, for errors that are normal along both axes and independent of each
// other; the orbit's term is what the antenna's own mean leaves of it.
type OrbitError struct {
	Uncertainty orbit.Uncertainty
	Probability float64 // 0: the mean; else LeastProbability to below 1
}

// LeastProbability is the least probability of OrbitError: below it the loss not
// exceeded may be less than the mean, and a loss would turn into a gain. For an error
// along one axis the two meet at 0.6827.
const LeastProbability = 0.7

// SureProbability is the probability by which a beam is judged: it is too narrow to be
// sure of where the pointing error stays inside the half-power points with less.
const SureProbability = 0.95

// noLook is a spread that is not known.
var noLook = station.LookSpread{Along: unit.Angle(math.NaN()), Across: unit.Angle(math.NaN()), RangeRate: unit.Speed(math.NaN())}

// ledByOrbit tells whether the orbit's error is one of pointing.
func (l *Link) ledByOrbit() bool {
	a := l.spec.Antenna
	return l.spec.Orbit != nil && l.beamwidth > 0 && a.Kind != station.Fixed && a.Follows == station.FollowsPrediction
}

// sureQuantile is the same for every link, and is worked out for the first.
var sureQuantile = sync.OnceValues(func() (*station.ErrorQuantile, error) { return station.NewErrorQuantile(SureProbability) })

func (l *Link) prepareOrbitError() error {
	o := l.spec.Orbit
	if o == nil {
		return nil
	}
	if l.spec.Frame == nil || o.Uncertainty == nil {
		return errors.New("the orbit's error needs the site of the station and an uncertainty; the link was made without")
	}
	var err error
	if l.sure, err = sureQuantile(); err != nil {
		return err
	}
	if o.Probability == 0 {
		return nil
	}
	if !(o.Probability >= LeastProbability && o.Probability < 1) {
		return &unit.RangeError{Quantity: "probability of the pointing loss", Value: o.Probability, Allowed: fmt.Sprintf("%g to below 1, or left out for the mean loss", LeastProbability)}
	}
	l.quantile, err = station.NewErrorQuantile(o.Probability)
	return err
}

func (l *Link) addOrbitPointing() {
	if !l.ledByOrbit() {
		return
	}
	source := fmt.Sprintf("12 (e/w)², the mean over the orbit's error e, w %.4g deg", l.beamwidth.Degrees())
	if q := l.quantile; q != nil {
		source = fmt.Sprintf("12 (e/w)² not exceeded with probability %g over the orbit's and the antenna's error together, less the pointing loss, w %.4g deg", q.Probability(), l.beamwidth.Degrees())
	}
	l.slots.orbitPointing = l.add("orbit pointing loss", -1, "dB", 0, source)
}

func (l *Link) noteOrbitError() {
	o := l.spec.Orbit
	if o == nil {
		return
	}
	l.note(Assumption, "the position is uncertain %s", o.Uncertainty.Basis())
	a := l.spec.Antenna
	switch {
	case l.ledByOrbit():
		l.note(Assumption, "the antenna follows the prediction: the orbit's error is one of pointing, a term of its own; the beam is too narrow to be sure of where the error stays inside the half-power points with a probability under %g", SureProbability)
	case a.Kind != station.Fixed && a.Follows == station.FollowsSignal:
		l.note(Assumption, "the antenna follows the signal: the orbit's error adds no pointing loss once the signal is found; to find it the beam must hold the error")
	}
}

// fillOrbitPointing works out what the orbit's error does, and returns the pointing error
// e with it.
func (l *Link) fillOrbitPointing(g *Geometry, s *scratch, e unit.Angle) (unit.Angle, error) {
	r := &s.result
	r.look, r.sureError = noLook, unit.Angle(math.NaN())
	o := l.spec.Orbit
	if o == nil {
		return e, nil
	}
	if !g.flown || g.Time.IsZero() {
		return e, errors.New("the orbit's error needs a state at an instant; a stated geometry has none: leave the orbit's error out of its link")
	}
	spread, err := o.Uncertainty.At(g.Time)
	if err != nil {
		return e, err
	}
	r.look = l.spec.Frame.LookSpread(g.state, spread)
	if l.slots.orbitPointing < 0 {
		return e, nil
	}
	r.sureError = both(l.sure, r.look, e)
	own := station.PointingLoss(e, l.beamwidth)
	if l.quantile != nil {
		e = both(l.quantile, r.look, e)
	} else {
		e = unit.Angle(math.Hypot(e.Radians(), r.look.Total().Radians()))
	}
	s.terms[l.slots.orbitPointing] = float64(station.PointingLoss(e, l.beamwidth) - own)
	return e, nil
}

// both returns a quantile of the orbit's error and the antenna's together: the antenna's
// is alike along both axes.
func both(q *station.ErrorQuantile, look station.LookSpread, antenna unit.Angle) unit.Angle {
	own := antenna.Radians() / math.Sqrt2
	return q.Of(unit.Angle(math.Hypot(look.Major.Radians(), own)), unit.Angle(math.Hypot(look.Minor.Radians(), own)))
}

func (l *Link) dopplerSpread(look station.LookSpread) unit.Frequency {
	return unit.Frequency(math.Abs(l.Doppler(look.RangeRate).Hertz()))
}

// unsure returns while the beam is too narrow to be sure of, nil where the orbit does
// not lead it.
func (l *Link) unsure(p *Profile) []Interval {
	if l.slots.orbitPointing < 0 {
		return nil
	}
	room := make([]float64, len(p.SureErrorDeg))
	for i, e := range p.SureErrorDeg {
		room[i] = -e
	}
	return p.within(room, -(l.beamwidth / 2).Degrees())
}

// LeastHeight returns how near a track comes to the site at most: its least distance from the
// Earth's centre over its first day, less the site's own.
func (l *Link) LeastHeight(track Track) unit.Length {
	least := math.Inf(1)
	gapped, _ := track.(interface{ Covers(s float64) bool })
	for s := 0.0; s <= min(track.Span(), 86400); s += 30 {
		if gapped != nil && !gapped.Covers(s) {
			continue
		}
		p := track.StateAt(s).Position
		least = min(least, p.Norm())
	}
	return unit.Length(least - l.spec.Frame.Origin.Norm())
}

// TooNarrowFrom returns from when on the beam is too narrow to be sure of: the first
// instant of [from, to] at which the pointing error of a pass straight overhead, at a
// height over the site, stays inside the half-power points with less than
// SureProbability. ok is false where that is at no instant, or where the orbit does
// not lead the beam. Instants for which the uncertainty is not known end the search.
//
// It looks every ten minutes, since an uncertainty from covariances may fall again, and
// divides down to a second.
func (l *Link) TooNarrowFrom(height unit.Length, from, to time.Time) (at time.Time, ok bool) {
	if !l.ledByOrbit() || !(height > 0) {
		return at, false
	}
	narrow := func(t time.Time) (bool, error) {
		spread, err := l.spec.Orbit.Uncertainty.At(t)
		if err != nil {
			return false, err
		}
		look := station.LookSpread{Major: unit.Angle(math.Atan2(spread.Along.Metres(), height.Metres())), Minor: unit.Angle(math.Atan2(spread.Across.Metres(), height.Metres()))}
		return both(l.sure, look, l.spec.Antenna.PointingRMS) > l.beamwidth/2, nil
	}
	const step = 10 * time.Minute
	for t := from; !t.After(to); t = t.Add(step) {
		is, err := narrow(t)
		if err != nil {
			return at, false
		}
		if !is {
			continue
		}
		low, high := t.Add(-step), t
		if t.Equal(from) {
			return from, true
		}
		for high.Sub(low) > time.Second {
			mid := low.Add(high.Sub(low) / 2)
			if is, err := narrow(mid); err == nil && !is {
				low = mid
			} else {
				high = mid
			}
		}
		return high.Truncate(time.Second), true
	}
	return at, false
}
