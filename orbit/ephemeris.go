package orbit

import (
	"math"
	"time"

	"slantwise/orbit/unit"
)

// Ephemeris gives the Earth-fixed state of one object at any instant of its span.
// It is immutable (but for Rebuild) and safe for use by many goroutines.
//
// Inside, seconds since Reference are the argument: a float64 holds them to 1e-10 s
// over a week. MaxPositionError and MaxVelocityError bound the interpolation.
type Ephemeris struct {
	elements  Elements
	reference time.Time
	end       float64
	truncated *PropagationError

	first float64 // of the knot at index reach, in seconds after reference; at most 0
	step  float64
	rate  float64 // 1/step
	last  int     // the greatest interval
	knots []knot  // reach knots before the first interval and after the last
	sun   SunTrack

	later []run  // further runs of knots, where a trajectory has several
	spans []Span // where there are states; empty: from 0 to end
	gaps  []Gap
	bend  unit.Length
}

// MaxPositionError and MaxVelocityError are how far an ephemeris is from SGP4's own
// state at most: orbits with perigees of 180 km and more
// (TestInterpolationErrorOfAnyOrbit) and decaying ones up to their end
// (TestPublishedVerificationFailures). Most are within a tenth of it.
const (
	MaxPositionError unit.Length = 0.3
	MaxVelocityError unit.Speed  = 1e-3
)

// NewEphemeris propagates the elements over [from, to] and keeps the knots.
//
// It fails with what the Validate methods of both return, with a *unit.RangeError for
// a span that is reversed or farther than ten years from the epoch, and with a *PropagationError where
// SGP4 has no state at from, or none somewhere between the epoch and from. Where it
// fails later, the span ends just before: see Truncated.
func NewEphemeris(el Elements, from, to time.Time, earth EarthOrientation) (*Ephemeris, error) {
	e := &Ephemeris{}
	if err := e.Rebuild(el, from, to, earth); err != nil {
		return nil, err
	}
	return e, nil
}

// Elements returns the set that the ephemeris was propagated from.
func (e *Ephemeris) Elements() Elements { return e.elements }

// Reference is the instant that Seconds counts from, the start of the span.
func (e *Ephemeris) Reference() time.Time { return e.reference }

// Seconds returns the argument of PositionAt and StateAt for an instant.
func (e *Ephemeris) Seconds(t time.Time) float64 { return t.Sub(e.reference).Seconds() }

// Time returns the instant s seconds after Reference, rounded to the nanosecond.
func (e *Ephemeris) Time(s float64) time.Time {
	return e.reference.Add(time.Duration(math.Round(s * float64(time.Second))))
}

// Span returns the last valid argument of PositionAt and StateAt; the first is 0. A
// trajectory may have gaps between them: see Spans.
func (e *Ephemeris) Span() float64 {
	if n := len(e.later); n > 0 {
		return e.later[n-1].end
	}
	return e.end
}

// Step returns the seconds between two knots.
func (e *Ephemeris) Step() float64 { return e.step }

// Truncated returns why the span ends before the instant asked for, or nil.
func (e *Ephemeris) Truncated() *PropagationError { return e.truncated }

// PositionAt returns the Earth-fixed position in m at s in one of Spans, as a rule
// [0, Span()]; s outside is a programming error and panics.
func (e *Ephemeris) PositionAt(s float64) Vec3 {
	i, u := e.locate(s)
	return between(&e.knots[i], &e.knots[i+1], u)
}

// StateAt returns position and velocity at s in [0, Span()]; s outside is a
// programming error and panics.
func (e *Ephemeris) StateAt(s float64) State {
	i, u := e.locate(s)
	return State{
		Position: between(&e.knots[i], &e.knots[i+1], u),
		Velocity: velocityBetween(e.knots[i+1-velocityReach:i+1+velocityReach], u),
	}
}

// SunAt returns the Earth-fixed position of the Sun in m at s in [0, Span()].
func (e *Ephemeris) SunAt(s float64) Vec3 { return e.sun.PositionAt(s) }

// LightAt returns how much of the Sun the spacecraft sees at s in [0, Span()].
func (e *Ephemeris) LightAt(s float64) Light { return LightAt(e.PositionAt(s), e.SunAt(s)) }

// At returns the state at t, or a *SpanError when t lies outside the span or in a gap.
func (e *Ephemeris) At(t time.Time) (State, error) {
	s := e.Seconds(t)
	if !e.Covers(s) {
		return State{}, e.spanError(t)
	}
	return e.StateAt(s), nil
}

// locate returns the index of the knot before s and the fraction of the way to the
// next.
func (e *Ephemeris) locate(s float64) (int, float64) {
	if !(s >= 0 && s <= e.end) {
		s = e.elsewhere(s)
	}
	x := (s - e.first) * e.rate
	i := min(int(x), e.last)
	return i + reach, x - float64(i)
}
