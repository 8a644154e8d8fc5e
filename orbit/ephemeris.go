package orbit

import (
	"errors"
	"time"
)

// Ephemeris gives the Earth-fixed state of one object at any instant of its span.
// It is immutable and safe for use by many goroutines.
//
// Inside, seconds since Reference are the argument: a float64 holds them to 1e-10 s
// over a week.
type Ephemeris struct {
	elements  Elements
	reference time.Time
	end       float64
}

// NewEphemeris propagates the elements over [from, to] and keeps the knots.
func NewEphemeris(el Elements, from, to time.Time, earth EarthOrientation) (*Ephemeris, error) {
	return nil, errors.New("orbit: not built yet")
}

// Elements returns the set that the ephemeris was propagated from.
func (e *Ephemeris) Elements() Elements { return e.elements }

// Reference is the instant that Seconds counts from, the start of the span.
func (e *Ephemeris) Reference() time.Time { return e.reference }

// Seconds returns the argument of PositionAt and StateAt for an instant.
func (e *Ephemeris) Seconds(t time.Time) float64 { return t.Sub(e.reference).Seconds() }

// Time returns the instant s seconds after Reference, rounded to the nanosecond.
func (e *Ephemeris) Time(s float64) time.Time {
	return e.reference.Add(time.Duration(s * float64(time.Second)))
}

// Span returns the last valid argument of PositionAt and StateAt; the first is 0.
func (e *Ephemeris) Span() float64 { return e.end }

// PositionAt returns the Earth-fixed position in m at s in [0, Span()]; s outside
// is a programming error and panics.
func (e *Ephemeris) PositionAt(s float64) Vec3 { panic("orbit: not built yet") }

// StateAt returns position and velocity at s in [0, Span()].
func (e *Ephemeris) StateAt(s float64) State { panic("orbit: not built yet") }

// At returns the state at t, or a *SpanError when t lies outside the span.
func (e *Ephemeris) At(t time.Time) (State, error) {
	return State{}, errors.New("orbit: not built yet")
}

// Rebuild makes e the ephemeris of another element set or span and uses its memory
// again, for runs over many satellites. Nobody else may use e meanwhile; after an
// error it holds nothing until it is rebuilt.
func (e *Ephemeris) Rebuild(el Elements, from, to time.Time, earth EarthOrientation) error {
	return errors.New("orbit: not built yet")
}

// Truncated returns why the span ends before the instant asked for, or nil.
func (e *Ephemeris) Truncated() *PropagationError { return nil }

// Step returns the seconds between two knots.
func (e *Ephemeris) Step() float64 { return 0 }

// LightAt returns how much of the Sun the spacecraft sees at s in [0, Span()].
func (e *Ephemeris) LightAt(s float64) Light { panic("orbit: not built yet") }
