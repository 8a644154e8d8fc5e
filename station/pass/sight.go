package pass

import (
	"math"

	"slantwise/orbit"
	"slantwise/station"
)

// sight is what a site sees at one instant: the height over its horizontal plane and
// the range, with their rates. The elevation is over a level when
//
//	u - c ρ >= 0,  c the sine of that level,
//
// and this function is as smooth as the motion, which the angle itself is not near
// the zenith.
type sight struct {
	t       float64 // s
	u, du   float64 // m, m/s
	rho, dr float64 // m, m/s
	ddu     float64 // m/s²
	speed   float64 // m/s, relative to the Earth
}

// over returns u - c ρ.
func (p *sight) over(c float64) float64 { return p.u - c*p.rho }

// rate returns the derivative of over.
func (p *sight) rate(c float64) float64 { return p.du - c*p.dr }

// climb has the sign of the elevation rate, and is smoother: near a culmination it
// is almost linear in time.
func (p *sight) climb() float64 { return p.rho * (p.du*p.rho - p.u*p.dr) }

// sine returns the sine of the elevation.
func (p *sight) sine() float64 { return p.u / p.rho }

// scene is one spacecraft before one site.
type scene struct {
	*track
	frame  station.Frame
	ground float64 // radius of the site, m
	out    []float64
}

// see returns the sight at a node.
func (s *scene) see(n *node) sight {
	d, f := n.pos.Sub(s.frame.Origin), &s.frame
	rho := d.Norm()
	return sight{
		t: n.t, u: d.Dot(f.Up), du: n.vel.Dot(f.Up), ddu: n.acc.Dot(f.Up),
		rho: rho, dr: d.Dot(n.vel) / rho, speed: n.speed,
	}
}

// look returns the sight at an instant, without speed and acceleration.
func (s *scene) look(t float64) sight {
	st := s.motion.StateAt(t)
	d, f := st.Position.Sub(s.frame.Origin), &s.frame
	rho := d.Norm()
	return sight{t: t, u: d.Dot(f.Up), du: st.Velocity.Dot(f.Up), rho: rho, dr: d.Dot(st.Velocity) / rho}
}

// direction returns the offset from the site by east, north and up, in m.
func (s *scene) direction(t float64) orbit.Vec3 {
	d, f := s.motion.PositionAt(t).Sub(s.frame.Origin), &s.frame
	return orbit.Vec3{X: d.Dot(f.East), Y: d.Dot(f.North), Z: d.Dot(f.Up)}
}

// sineAt returns the sine of the elevation from the position alone.
func (s *scene) sineAt(t float64) float64 { return s.frame.SinElevation(s.motion.PositionAt(t)) }

// nearest returns a lower bound of the range within a stretch, in m: the range
// changes by at most speed times half the time from the nearer end, and no site is
// nearer than the difference of the radii. It is never less than a metre: a
// spacecraft does not fly through a station.
func (s *scene) nearest(a, b float64, h float64, st *stretch) float64 {
	return math.Max(1, math.Max(math.Min(a, b)-st.speed*h/2, st.low-s.ground))
}
