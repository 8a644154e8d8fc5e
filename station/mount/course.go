package mount

import (
	"fmt"
	"math"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// Track gives Earth-fixed states over a span of seconds; *orbit.Ephemeris is one.
type Track interface {
	Seconds(t time.Time) float64 // the argument for an instant
	Span() float64               // the last valid argument; the first is 0
	StateAt(s float64) orbit.State
}

// Course is where a target stands in the sky of a site, at any instant of a span.
type Course struct {
	length float64                                   // s
	at     func(s float64) (direction, v orbit.Vec3) // unit vector in east, north, up, and its rate in 1/s
}

// Length returns the length of the course in seconds.
func (c *Course) Length() float64 { return c.length }

// PassCourse returns the course of a spacecraft over a site from one instant to another,
// both held by the track and to after from. With a refraction it is the apparent one,
// which is where the antenna must look; where no ray arrives the geometric one goes on
// with the bending at the horizon. nil: geometric.
func PassCourse(f station.Frame, track Track, from, to time.Time, r *station.Refraction) (*Course, error) {
	first, last := track.Seconds(from), track.Seconds(to)
	if !(first >= 0 && last <= track.Span()+1e-9 && last > first) {
		return nil, fmt.Errorf("course: %s to %s does not lie within the track", from.UTC().Format(time.RFC3339Nano), to.UTC().Format(time.RFC3339Nano))
	}
	return &Course{length: last - first, at: func(s float64) (orbit.Vec3, orbit.Vec3) {
		d, v := sight(&f, track.StateAt(min(first+s, track.Span())))
		return bent(d, v, r)
	}}, nil
}

// FixedCourse is the course of a target that stands still.
func FixedCourse(d station.Direction, seconds float64) *Course {
	at := vector(d)
	return &Course{length: seconds, at: func(float64) (orbit.Vec3, orbit.Vec3) { return at, orbit.Vec3{} }}
}

// sight returns the unit vector to a state in east, north, up, and its rate, from the
// state's own velocity.
func sight(f *station.Frame, s orbit.State) (d, v orbit.Vec3) {
	local := func(x orbit.Vec3) orbit.Vec3 { return orbit.Vec3{X: x.Dot(f.East), Y: x.Dot(f.North), Z: x.Dot(f.Up)} }
	d, v = local(s.Position.Sub(f.Origin)), local(s.Velocity)
	far := d.Norm()
	d, v = d.Scale(1/far), v.Scale(1/far)
	return d, v.Sub(d.Scale(d.Dot(v)))
}

// bent lifts a direction and its rate to where the refracted ray comes from.
func bent(d, v orbit.Vec3, r *station.Refraction) (orbit.Vec3, orbit.Vec3) {
	across := math.Hypot(d.X, d.Y)
	if r == nil || across < poleSine {
		return d, v
	}
	el := math.Atan2(d.Z, across)
	lift := func(el float64) float64 {
		apparent, ok := r.Apparent(unit.Angle(el))
		if !ok {
			apparent = r.Horizon()
			seen, _ := r.Geometric(apparent)
			return float64(apparent - seen)
		}
		return float64(apparent) - el
	}
	const step = 1e-4 // rad, some knots of the table apart from nothing, so that the slope is smooth
	up := lift(el)
	slope := (lift(el+step) - lift(el-step)) / (2 * step)
	ahead := orbit.Vec3{X: d.X / across, Y: d.Y / across} // level, toward the target
	side := orbit.Vec3{X: -ahead.Y, Y: ahead.X}
	sin, cos := math.Sincos(el + up)
	elRate := v.Z / across * (1 + slope)
	turn := v.Dot(side) / across // azimuth rate, anticlockwise
	return ahead.Scale(cos).Add(orbit.Vec3{Z: sin}),
		ahead.Scale(-sin * elRate).Add(side.Scale(turn * cos)).Add(orbit.Vec3{Z: cos * elRate})
}
