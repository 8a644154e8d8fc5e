package station

import (
	"math"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// Look is the direction and distance from a site to a spacecraft, and how they
// change. Azimuth is clockwise from true north in [0, 2π), elevation to the plane
// normal to the ellipsoid, both of the straight line at one instant: neither
// refraction nor the travel time of light is in it.
type Look struct {
	Azimuth, Elevation         unit.Angle
	Range                      unit.Length
	RangeRate                  unit.Speed // positive: receding
	AzimuthRate, ElevationRate unit.AngularRate
}

// Frame is the local east, north, up frame of a site, prepared once.
type Frame struct {
	Origin          orbit.Vec3 // Earth-fixed position, m
	East, North, Up orbit.Vec3 // unit vectors
}

// zenithSine is the sine of the zenith distance under which the azimuth has no
// meaning: 1e-9 rad is a millimetre at a thousand kilometres.
const zenithSine = 1e-9

// Look returns the look angles and their rates from the state's own velocity.
//
// In the zenith (and nadir), closer than 1e-9 rad, azimuth has no value: azimuth and
// its rate are 0 there, and the elevation rate is minus the whole angular speed,
// which is how the elevation goes on from the top. A state at the site itself has no direction: all is
// 0 but the range rate, the speed.
func (f *Frame) Look(s orbit.State) Look {
	d := s.Position.Sub(f.Origin)
	e, n, u := d.Dot(f.East), d.Dot(f.North), d.Dot(f.Up)
	ve, vn, vu := s.Velocity.Dot(f.East), s.Velocity.Dot(f.North), s.Velocity.Dot(f.Up)
	g2 := e*e + n*n
	rho2 := g2 + u*u
	rho, g := math.Sqrt(rho2), math.Sqrt(g2)
	if rho == 0 {
		return Look{RangeRate: unit.Speed(s.Velocity.Norm())}
	}
	l := Look{
		Elevation: unit.Angle(math.Atan2(u, g)),
		Range:     unit.Length(rho),
		RangeRate: unit.Speed((e*ve + n*vn + u*vu) / rho),
	}
	if g < zenithSine*rho {
		l.ElevationRate = unit.AngularRate(-math.Copysign(math.Hypot(ve, vn)/rho, u))
		return l
	}
	gRate := (e*ve + n*vn) / g
	l.Azimuth = unit.Angle(math.Atan2(e, n)).Wrapped()
	l.AzimuthRate = unit.AngularRate((n*ve - e*vn) / g2)
	l.ElevationRate = unit.AngularRate((g*vu - u*gRate) / rho2)
	return l
}

// Direction returns azimuth, elevation and range to an Earth-fixed position in m,
// as Look does, without the rates.
func (f *Frame) Direction(position orbit.Vec3) (azimuth, elevation unit.Angle, distance unit.Length) {
	l := f.Look(orbit.State{Position: position})
	return l.Azimuth, l.Elevation, l.Range
}

// SinElevation returns the sine of the geometric elevation of an Earth-fixed
// position in m; the position must not be the site itself.
func (f *Frame) SinElevation(position orbit.Vec3) float64 {
	x, y, z := position.X-f.Origin.X, position.Y-f.Origin.Y, position.Z-f.Origin.Z
	u := x*f.Up.X + y*f.Up.Y + z*f.Up.Z
	return u / math.Sqrt(x*x+y*y+z*z)
}
