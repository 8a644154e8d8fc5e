package pass

import (
	"math"

	"slantwise/orbit"
	"slantwise/station"
)

// sight is what a site sees at one instant: where the spacecraft is, and its height
// over the horizontal plane and its range, with their rates. The elevation is over a
// level when
//
//	u - c ρ >= 0,  c the sine of that level,
//
// and this function is as smooth as the motion, which the angle itself is not near
// the zenith.
type sight struct {
	t       float64    // s
	d       orbit.Vec3 // offset from the site, m, Earth-fixed axes
	u, du   float64    // m, m/s
	rho, dr float64    // m, m/s
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
	out    []sight // crossings found so far
}

func (s *scene) set(p *sight, t float64, pos, vel *orbit.Vec3) {
	f := &s.frame
	x, y, z := pos.X-f.Origin.X, pos.Y-f.Origin.Y, pos.Z-f.Origin.Z
	p.t = t
	p.d = orbit.Vec3{X: x, Y: y, Z: z}
	p.u = x*f.Up.X + y*f.Up.Y + z*f.Up.Z
	p.du = vel.X*f.Up.X + vel.Y*f.Up.Y + vel.Z*f.Up.Z
	p.rho = math.Sqrt(x*x + y*y + z*z)
	p.dr = (x*vel.X + y*vel.Y + z*vel.Z) / p.rho
}

// see returns the sight at a node.
func (s *scene) see(n *node) (p sight) {
	s.set(&p, n.t, &n.pos, &n.vel)
	return p
}

// look returns the sight at an instant.
func (s *scene) look(t float64) (p sight) {
	pos, vel := s.motion.TrackAt(t)
	s.set(&p, t, &pos, &vel)
	return p
}

// nearest returns a lower bound of the range within a stretch, in m: the range
// changes by at most speed times half the time from the nearer end, and no site is
// nearer than the difference of the radii. It is never less than a metre: a
// spacecraft does not fly through a station.
func (s *scene) nearest(a, b float64, h float64, st *stretch) float64 {
	return max(1, min(a, b)-st.speed*h/2, st.low-s.ground)
}
