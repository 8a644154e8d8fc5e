package station

import (
	"math"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// LookSpread is what an uncertain position does to the direction that it is seen in
// and to the range rate: one standard deviation each, to first order. The direction's
// error is an ellipse on the sky; Along and Across cut it along the apparent motion
// and at a right angle to it, Major and Minor are its half axes.
type LookSpread struct {
	Along, Across unit.Angle
	Major, Minor  unit.Angle
	Elevation     unit.Angle
	Range         unit.Length
	RangeRate     unit.Speed
}

// Total returns the error of the direction, root mean square over both axes together,
// as Antenna.PointingRMS counts it.
func (l LookSpread) Total() unit.Angle {
	return unit.Angle(math.Hypot(l.Along.Radians(), l.Across.Radians()))
}

// earthGravity is the geocentric gravitational constant of WGS-84 in m³/s² (NGA
// STND.0036).
const earthGravity = 3.986004418e14

// LookSpread returns what a spread does at an Earth-fixed state as the site sees it.
// The state must not be at the site itself.
//
// 3 km along the track, 500 km overhead, are 0.34 deg (TestLookSpreadOverhead); draws
// of neighbouring orbits agree within their sampling error (TestSpreadOfDrawnOrbits in
// station/pass).
//
// A spread tells nothing of velocities. For the range rate a spacecraft off along the
// track is taken to fly the same orbit earlier or later; one that is off radially to
// have the same energy, so an error of the eccentricity, whose swing along the track
// is twice the radial one and contained in Along; one that is off across to fly a
// plane turned about an axis of any direction. An error of energy itself shows as
// growth along the track, not here.
func (f *Frame) LookSpread(state orbit.State, spread orbit.Spread) LookSpread {
	d := state.Position.Sub(f.Origin)
	rho := d.Norm()
	sight := d.Scale(1 / rho)
	axes := state.Axes()
	sigma := func(g orbit.Vec3) float64 {
		return math.Sqrt(spread.Variance(g.Dot(axes.Radial), g.Dot(axes.Along), g.Dot(axes.Across)))
	}
	var l LookSpread
	l.Range = unit.Length(sigma(sight))
	if e := f.Up.Sub(sight.Scale(f.Up.Dot(sight))); e.Norm() > zenithSine {
		l.Elevation = unit.Angle(sigma(e.Unit()) / rho)
	}
	motion := state.Velocity.Sub(sight.Scale(state.Velocity.Dot(sight)))
	along := motion.Unit()
	if along.Norm() == 0 { // straight at the site: any direction across the sight will do
		along = sight.Cross(f.East).Unit()
	}
	across := sight.Cross(along)
	l.Along, l.Across = unit.Angle(sigma(along)/rho), unit.Angle(sigma(across)/rho)
	// The variance along the diagonal tells how the two go together.
	diagonal := sigma(along.Add(across).Scale(math.Sqrt2/2)) / rho
	a, b := l.Along.Radians()*l.Along.Radians(), l.Across.Radians()*l.Across.Radians()
	mean := (a + b) / 2
	apart := math.Hypot((a-b)/2, diagonal*diagonal-mean)
	l.Major, l.Minor = unit.Angle(math.Sqrt(mean+apart)), unit.Angle(math.Sqrt(max(0, mean-apart)))
	l.RangeRate = unit.Speed(f.rateSpread(state, &axes, spread, sight, motion.Scale(1/rho)))
	return l
}

// rateSpread returns the standard deviation of the range rate in m/s. sweep is the
// apparent motion in rad/s.
func (f *Frame) rateSpread(state orbit.State, axes *orbit.OrbitAxes, spread orbit.Spread, sight, sweep orbit.Vec3) float64 {
	r := state.Position.Norm()
	n := axes.Rate(state.Position)
	bend := earthGravity / (r * r) / axes.Inertial.Norm() // n on a circular orbit
	// With the displacement (x, y, z) the range rate changes by δ·sweep + sight·δV, where
	// δV, relative to the turning Earth, is the inertial change less ω × δ.
	spin := orbit.Vec3{Z: 7.292115e-5}
	onSight := sight.Cross(spin) // sight·(ω × δ) = (sight × ω)·δ
	g := sweep.Sub(onSight)
	x := g.Dot(axes.Radial) - bend*sight.Dot(axes.Along)
	y := g.Dot(axes.Along) - bend*sight.Dot(axes.Radial)
	z := g.Dot(axes.Across)
	variance := spread.Variance(x, y, z)
	// The radial velocity of the swing: n times the radial spread, and it goes with the
	// swing along the track, which is twice as wide and a quarter turn apart.
	swing := n * spread.Radial.Metres() * sight.Dot(axes.Radial)
	variance += swing * swing
	if along := spread.Along.Metres(); along > 0 {
		together := min(2*spread.Radial.Metres()/along, math.Sqrt(1-spread.RadialAlong*spread.RadialAlong))
		variance += 2 * swing * y * along * together
	}
	tilt := n * spread.Across.Metres() * sight.Dot(axes.Across)
	return math.Sqrt(max(0, variance+tilt*tilt))
}
