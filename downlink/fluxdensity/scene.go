package fluxdensity

import (
	"math"

	"slantwise/orbit"
)

// geostationaryRadius is the radius of the geostationary orbit in m: the cube root of
// GM (T/2π)² for one sidereal day (WGS-84 GM 3.986004418e14 m³/s², 86164.0905 s).
const geostationaryRadius = 42164.17e3

// scene is where the spacecraft stands, and over what Earth. Stretching z by 1/(1-f)
// turns the ellipsoid into a sphere and keeps lines straight, so that the visible
// ground is a cap of that sphere, to its very rim.
type scene struct {
	craft   orbit.Vec3 // Earth-fixed, m
	earth   float64    // equatorial radius of the Earth, m
	flat    float64    // its flattening
	nadir   orbit.Vec3 // unit vector to the Earth's centre
	station orbit.Vec3 // unit vector to the station; zero: none

	stretched orbit.Vec3 // unit vector to the stretched craft
	radius    float64    // of the stretched craft, m
	e1, e2    orbit.Vec3 // across stretched
	rim       float64    // half-angle of the visible cap about stretched, rad
}

func newScene(craft orbit.Vec3, toward *orbit.Vec3, earth, flat float64) scene {
	s := scene{craft: craft, earth: earth, flat: flat, nadir: craft.Scale(-1 / craft.Norm())}
	if toward != nil {
		s.station = toward.Sub(craft).Unit()
	}
	p := s.stretch(craft)
	s.radius = p.Norm()
	s.stretched = p.Scale(1 / s.radius)
	s.e1, s.e2 = across(s.stretched)
	s.rim = math.Acos(min(1, s.earth/s.radius))
	return s
}

// across returns two unit vectors that stand on v and on each other.
func across(v orbit.Vec3) (a, b orbit.Vec3) {
	side := orbit.Vec3{Z: 1}
	if math.Abs(v.Z) > 0.9 {
		side = orbit.Vec3{X: 1}
	}
	a = v.Cross(side).Unit()
	return a, v.Cross(a)
}

func (s *scene) stretch(v orbit.Vec3) orbit.Vec3 {
	return orbit.Vec3{X: v.X, Y: v.Y, Z: v.Z / (1 - s.flat)}
}

// target is a point that receives: its place, and the outward normal there.
type target struct{ at, normal orbit.Vec3 }

// ground returns the point of the ground over which the unit vector u of the
// stretched space stands.
func (s *scene) ground(u orbit.Vec3) target {
	at := u.Scale(s.earth)
	at.Z *= 1 - s.flat
	// The normal of the ellipsoid is the gradient of x² + y² + (z/(1-f))².
	normal := orbit.Vec3{X: u.X, Y: u.Y, Z: u.Z / (1 - s.flat)}
	return target{at, normal.Unit()}
}

// cap returns the unit vector of the stretched space an angle away from under the
// craft, toward a bearing.
func (s *scene) cap(angle, bearing float64) orbit.Vec3 {
	sa, ca := math.Sincos(angle)
	sb, cb := math.Sincos(bearing)
	return s.stretched.Scale(ca).Add(s.e1.Scale(sa * cb)).Add(s.e2.Scale(sa * sb))
}

// capAngle returns the angle from under the craft at which the ground of a sphere sees
// it at an elevation.
func (s *scene) capAngle(elevation float64) float64 {
	return math.Acos(min(1, s.earth*math.Cos(elevation)/s.radius)) - elevation
}

// hit returns where a ray from the craft meets the ground, in stretched space.
func (s *scene) hit(direction orbit.Vec3) (u orbit.Vec3, ok bool) {
	p, d := s.stretched.Scale(s.radius), s.stretch(direction)
	dd, pd := d.Dot(d), p.Dot(d)
	root := pd*pd - dd*(s.radius*s.radius-s.earth*s.earth)
	if !(root >= 0) || pd >= 0 {
		return u, false
	}
	along := (-pd - math.Sqrt(root)) / dd
	return p.Add(d.Scale(along)).Unit(), true
}

// clear tells whether the line from the craft to a point passes the Earth by.
func (s *scene) clear(to orbit.Vec3) bool {
	p := s.stretched.Scale(s.radius)
	d := s.stretch(to).Sub(p)
	t := -p.Dot(d) / d.Dot(d) // where the line is closest to the centre
	if t <= 0 || t >= 1 {
		return true
	}
	return p.Add(d.Scale(t)).Norm() >= s.earth
}
