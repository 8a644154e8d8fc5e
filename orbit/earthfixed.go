package orbit

import (
	"math"
	"time"

	"slantwise/orbit/unit"
)

// earthRate is the rotation of the Earth in inertial space in rad/s, as AIAA
// 2006-6753 takes it for the velocity (7.29211514670698e-5).
const earthRate = 7.29211514670698e-5

// GMST returns the Greenwich mean sidereal time of IAU 1982 at t, in [0, 2π): the
// angle between the frame of SGP4 and the pseudo Earth-fixed frame. The day and
// its fraction are kept apart; a Julian date in one float64 would cost up to 20 µs,
// a centimetre on the equator.
//
// Source: Aoki et al., Astron. Astrophys. 105, 359 (1982), as in AIAA 2006-6753,
// Appendix C.
func GMST(t time.Time, earth EarthOrientation) unit.Angle {
	r := newRotation(t, earth)
	return unit.Angle(r.angle(0)).Wrapped()
}

// TEMEToEarthFixed turns a state in the frame of SGP4 (true equator, mean equinox;
// m and m/s) at t into the Earth-fixed one; the velocity becomes relative to the
// rotating Earth. The excess length of day is left out: at most 0.02 mm/s on a low
// orbit. Accuracy against the published example: TestFrameExample.
//
// Source: AIAA 2006-6753, Appendix C.
func TEMEToEarthFixed(position, velocity Vec3, t time.Time, earth EarthOrientation) State {
	r := newRotation(t, earth)
	return r.earthFixed(0, position, velocity)
}

// rotation turns TEME into Earth-fixed at seconds after a reference instant.
type rotation struct {
	day         float64 // days from J2000 (noon) to the start of the reference's UT1 day
	secondOfDay float64 // UT1, of the reference
	polar       bool
	sinX, cosX  float64 // of the pole's coordinates
	sinY, cosY  float64
}

func newRotation(reference time.Time, earth EarthOrientation) rotation {
	ut1 := reference.UTC().Add(earth.UT1MinusUTC)
	seconds := ut1.Unix()
	days := floorDiv(seconds, 86400)
	r := rotation{
		day:         float64(days-j2000UnixDay) - 0.5,
		secondOfDay: float64(seconds-days*86400) + float64(ut1.Nanosecond())*1e-9,
		polar:       earth.PolarMotionX != 0 || earth.PolarMotionY != 0,
	}
	r.sinX, r.cosX = math.Sincos(earth.PolarMotionX.Radians())
	r.sinY, r.cosY = math.Sincos(earth.PolarMotionY.Radians())
	return r
}

// j2000UnixDay is 2000-01-01 in days since 1970-01-01; J2000 is its noon.
const j2000UnixDay = 10957

func floorDiv(a, b int64) int64 {
	q := a / b
	if a%b < 0 {
		q--
	}
	return q
}

// angle returns the sidereal angle in rad at s seconds after the reference, not
// reduced.
func (r *rotation) angle(s float64) float64 {
	tod := r.secondOfDay + s
	c := (r.day + tod/86400) / 36525 // Julian centuries of UT1
	sec := tod + 24110.54841 + c*(8640184.812866+c*(0.093104-c*6.2e-6))
	return sec * (2 * math.Pi / 86400)
}

// earthFixed turns a TEME state at s seconds after the reference.
func (r *rotation) earthFixed(s float64, p, v Vec3) State {
	sin, cos := math.Sincos(r.angle(s))
	st := State{
		Position: Vec3{cos*p.X + sin*p.Y, cos*p.Y - sin*p.X, p.Z},
		Velocity: Vec3{cos*v.X + sin*v.Y, cos*v.Y - sin*v.X, v.Z},
	}
	st.Velocity.X += earthRate * st.Position.Y
	st.Velocity.Y -= earthRate * st.Position.X
	if r.polar {
		st.Position, st.Velocity = r.toPole(st.Position), r.toPole(st.Velocity)
	}
	return st
}

// fixed turns a TEME position at s seconds after the reference.
func (r *rotation) fixed(s float64, p Vec3) Vec3 {
	sin, cos := math.Sincos(r.angle(s))
	v := Vec3{cos*p.X + sin*p.Y, cos*p.Y - sin*p.X, p.Z}
	if r.polar {
		v = r.toPole(v)
	}
	return v
}

// toPole turns a vector from the pseudo Earth-fixed frame, whose pole is the
// rotation pole, into the frame of the reference pole.
func (r *rotation) toPole(v Vec3) Vec3 {
	y, z := r.cosY*v.Y-r.sinY*v.Z, r.sinY*v.Y+r.cosY*v.Z
	return Vec3{r.cosX*v.X + r.sinX*z, y, r.cosX*z - r.sinX*v.X}
}

// fromPole is the turn back.
func (r *rotation) fromPole(v Vec3) Vec3 {
	x, z := r.cosX*v.X-r.sinX*v.Z, r.sinX*v.X+r.cosX*v.Z
	return Vec3{x, r.cosY*v.Y + r.sinY*z, r.cosY*z - r.sinY*v.Y}
}
