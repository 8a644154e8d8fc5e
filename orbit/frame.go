package orbit

import (
	"fmt"
	"math"
	"time"
)

// Frame is a geocentric reference frame of positions and velocities.
type Frame int

// The frames.
const (
	// EarthFixed is the ITRF as State has it: positions turn with the Earth, velocities
	// are relative to it. Its realisations differ by centimetres and are taken as one.
	EarthFixed Frame = iota
	// PseudoEarthFixed is EarthFixed before polar motion: z is the axis of rotation.
	PseudoEarthFixed
	// TEME is the frame of SGP4: true equator, mean equinox of date.
	TEME
	// TrueOfDate has the true equator and the true equinox of date.
	TrueOfDate
	// MeanOfDate has the mean equator and the mean equinox of date.
	MeanOfDate
	// J2000 has the mean equator and equinox of 2000-01-01T12:00 TT (EME2000).
	J2000
	// GCRF is the geocentric celestial frame, on the axes of the ICRF; 0.023
	// arcseconds from J2000.
	GCRF
)

var frameNames = [...]string{"Earth-fixed", "pseudo Earth-fixed", "TEME", "true of date", "mean of date", "J2000", "GCRF"}

// String returns the frame in words.
func (f Frame) String() string {
	if f < 0 || int(f) >= len(frameNames) {
		return fmt.Sprintf("Frame(%d)", int(f))
	}
	return frameNames[f]
}

// Rotates tells whether the frame turns with the Earth.
func (f Frame) Rotates() bool { return f == EarthFixed || f == PseudoEarthFixed }

// Turner turns states between a frame and the Earth-fixed one. It holds what changes
// slowly, so that states one after another are quick; it is not safe for use by
// several goroutines.
//
// The pole of the inertial frames is that of IAU 2006/2000A to 15 milli-arcseconds, 0.5 m
// on a low orbit (TestFramesOfReferenceLibrary); files made with the precession of IAU 1976 differ by
// 0.08 arcseconds in 2026, 2.7 m there. The velocity of precession (0.05 mm/s) is left out.
type Turner struct {
	earth       EarthOrientation
	polar       rotation // of polar motion alone
	first       time.Time
	known       bool
	one, two    dateTurns // an interval apart
	mixed       dateTurns
	mixedAt     time.Time
	mixedIsHere bool
}

// dateTurns are the turns from GCRF at an instant that change with the pole.
type dateTurns struct{ intermediate, trueOfDate, meanOfDate matrix }

// turnInterval is the span that the turns of the pole are interpolated over: what is
// left out of nutation of 5 days and more is 0.1 milli-arcseconds.
const turnInterval = 3 * time.Hour

// NewTurner prepares turns; the error is that of EarthOrientation.Validate.
func NewTurner(earth EarthOrientation) (*Turner, error) {
	if err := earth.Validate(); err != nil {
		return nil, err
	}
	return &Turner{earth: earth, polar: newRotation(time.Unix(0, 0), earth)}, nil
}

func newDateTurns(t time.Time) (d dateTurns) {
	d.trueOfDate, d.meanOfDate = ofDate(t)
	d.intermediate = intermediate(&d.trueOfDate, t)
	return d
}

// at returns the turns at an instant.
func (k *Turner) at(t time.Time) *dateTurns {
	if k.mixedIsHere && t.Equal(k.mixedAt) {
		return &k.mixed
	}
	if s := t.Sub(k.first); !k.known || s < 0 || s > turnInterval {
		k.first, k.known = t.Truncate(turnInterval), true
		k.one, k.two = newDateTurns(k.first), newDateTurns(k.first.Add(turnInterval))
	}
	u := float64(t.Sub(k.first)) / float64(turnInterval)
	mix := func(a, b, out *matrix) {
		for i := range 3 {
			for j := range 3 {
				out[i][j] = a[i][j] + u*(b[i][j]-a[i][j])
			}
		}
	}
	mix(&k.one.intermediate, &k.two.intermediate, &k.mixed.intermediate)
	mix(&k.one.trueOfDate, &k.two.trueOfDate, &k.mixed.trueOfDate)
	mix(&k.one.meanOfDate, &k.two.meanOfDate, &k.mixed.meanOfDate)
	k.mixedAt, k.mixedIsHere = t, true
	return &k.mixed
}

// earthAngle returns the angle from TEME or, for the inertial frames, from the
// intermediate one to the pseudo Earth-fixed frame.
func (k *Turner) earthAngle(f Frame, t time.Time) float64 {
	if f == TEME {
		r := newRotation(t, k.earth)
		return r.angle(0)
	}
	return rotationAngle(t, k.earth.UT1MinusUTC)
}

// ToEarthFixed turns a position in m and a velocity in m/s at an instant.
func (k *Turner) ToEarthFixed(f Frame, position, velocity Vec3, t time.Time) State {
	p, v := position, velocity
	if f == EarthFixed {
		return State{Position: p, Velocity: v}
	}
	if f != PseudoEarthFixed {
		if f != TEME {
			d := k.at(t)
			p, v = d.fromFrame(f, p), d.fromFrame(f, v)
			p, v = d.intermediate.times(p), d.intermediate.times(v)
		}
		sin, cos := math.Sincos(k.earthAngle(f, t))
		p, v = Vec3{cos*p.X + sin*p.Y, cos*p.Y - sin*p.X, p.Z}, Vec3{cos*v.X + sin*v.Y, cos*v.Y - sin*v.X, v.Z}
		v.X += earthRate * p.Y
		v.Y -= earthRate * p.X
	}
	if k.polar.polar {
		p, v = k.polar.toPole(p), k.polar.toPole(v)
	}
	return State{Position: p, Velocity: v}
}

// FromEarthFixed is the turn the other way.
func (k *Turner) FromEarthFixed(f Frame, s State, t time.Time) (position, velocity Vec3) {
	p, v := s.Position, s.Velocity
	if f == EarthFixed {
		return p, v
	}
	if k.polar.polar {
		p, v = k.polar.fromPole(p), k.polar.fromPole(v)
	}
	if f == PseudoEarthFixed {
		return p, v
	}
	v.X -= earthRate * p.Y
	v.Y += earthRate * p.X
	sin, cos := math.Sincos(k.earthAngle(f, t))
	p, v = Vec3{cos*p.X - sin*p.Y, cos*p.Y + sin*p.X, p.Z}, Vec3{cos*v.X - sin*v.Y, cos*v.Y + sin*v.X, v.Z}
	if f == TEME {
		return p, v
	}
	d := k.at(t)
	p, v = d.intermediate.back(p), d.intermediate.back(v)
	return d.toFrame(f, p), d.toFrame(f, v)
}

// Between turns a state from one frame into another.
func (k *Turner) Between(from, to Frame, position, velocity Vec3, t time.Time) (Vec3, Vec3) {
	if from == to {
		return position, velocity
	}
	return k.FromEarthFixed(to, k.ToEarthFixed(from, position, velocity, t), t)
}

// fromFrame turns a vector of an inertial frame into GCRF.
func (d *dateTurns) fromFrame(f Frame, v Vec3) Vec3 {
	switch f {
	case TrueOfDate:
		return d.trueOfDate.back(v)
	case MeanOfDate:
		return d.meanOfDate.back(v)
	case J2000:
		return frameBias.back(v)
	}
	return v
}

func (d *dateTurns) toFrame(f Frame, v Vec3) Vec3 {
	switch f {
	case TrueOfDate:
		return d.trueOfDate.times(v)
	case MeanOfDate:
		return d.meanOfDate.times(v)
	case J2000:
		return frameBias.times(v)
	}
	return v
}
