package downlink

import (
	"math"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/attitude"
	"slantwise/orbit/unit"
)

// Body tells where an antenna sits on its body and what the attitude needs beside its
// word. The zero value is an antenna that looks along body z.
type Body struct {
	Boresight BodyDirection // of the antenna
	// Turn is the angle of the pattern's own zero about the boresight, from the direction
	// of growing angle to body z (of body x where the boresight is z) and as a right hand
	// turns about the boresight. Only a pattern of two angles heeds it.
	Turn unit.Angle

	SpinAxis orbit.Vec3 // of AttitudeSpin: of length one, true equator and mean equinox of date
	SpinGain SpinGain   // of AttitudeSpin: what the turning counts as

	History *attitude.History // of AttitudeHistory
}

// BodyDirection is a direction in body axes. The zero value is body z.
type BodyDirection struct {
	OffZ    unit.Angle // from body z, [0°, 180°]
	AroundZ unit.Angle // about body z, from body x toward body y
}

// BodyDirectionOf returns the direction of a vector in body axes, of any length but 0;
// about z it is 0 for a vector on z.
func BodyDirectionOf(v orbit.Vec3) BodyDirection {
	off, around := polar(v.X, v.Y, v.Z)
	return BodyDirection{off, around}
}

// vector returns the direction in body axes.
func (d BodyDirection) vector() orbit.Vec3 {
	st, ct := math.Sincos(d.OffZ.Radians())
	sp, cp := math.Sincos(d.AroundZ.Radians())
	return orbit.Vec3{X: st * cp, Y: st * sp, Z: ct}
}

// antennaAxes returns the antenna's axes in body axes: c is the boresight, a the
// pattern's zero about it. Without a turn a is the direction in which the angle to body
// z grows fastest, R_z(around) R_y(off) x, which is body x for a boresight on z.
func (b *Body) antennaAxes() (a, x, c orbit.Vec3) {
	st, ct := math.Sincos(b.Boresight.OffZ.Radians())
	sp, cp := math.Sincos(b.Boresight.AroundZ.Radians())
	outward, along := orbit.Vec3{X: ct * cp, Y: ct * sp, Z: -st}, orbit.Vec3{X: -sp, Y: cp}
	s, k := math.Sincos(b.Turn.Radians())
	return outward.Scale(k).Add(along.Scale(s)), along.Scale(k).Sub(outward.Scale(s)), b.Boresight.vector()
}

// bodyView works out where an antenna on a body sees the station.
type bodyView struct {
	attitude Attitude
	body     *Body
	bodies   *Bodies    // the Sun, and how the Earth is turned
	origin   orbit.Vec3 // of the site, Earth-fixed, m
	a, b, c  orbit.Vec3 // the antenna's axes in body axes
}

// newBodyView returns nil where the angle to the boresight is all there is to know,
// which is quicker.
func (l *Link) newBodyView() *bodyView {
	t := &l.spec.Transmitter
	plain := t.Body.Boresight.OffZ == 0 && t.Pattern.Kind != GainGrid
	sky := t.Attitude == AttitudeNadir || l.spec.Bodies != nil
	if l.spec.Frame == nil || !sky || !t.Attitude.HasBody() || t.Attitude == AttitudeNadir && plain {
		return nil
	}
	v := &bodyView{attitude: t.Attitude, body: &t.Body, bodies: l.spec.Bodies, origin: l.spec.Frame.Origin}
	v.a, v.b, v.c = t.Body.antennaAxes()
	return v
}

// HasBodyAngles tells whether the geometries of the link have the angles about the
// boresight and the body's axes.
func (l *Link) HasBodyAngles() bool { return l.view != nil }

// look fills the angles of a geometry whose time is set; those that are not known are
// NaN.
func (v *bodyView) look(g *Geometry, s orbit.State) {
	to := v.origin.Sub(s.Position).Unit()
	if v.attitude == AttitudeSpin {
		g.BodyOffZ = angleTo(to, v.spinAxis(g.Time))
		if v.body.Boresight.OffZ == 0 {
			g.OffBoresight = g.BodyOffZ
		}
		return
	}
	x, y, z, err := v.axes(g.Time, s)
	if err != nil {
		return // told where the gain is asked for
	}
	d := orbit.Vec3{X: to.Dot(x), Y: to.Dot(y), Z: to.Dot(z)}
	g.BodyOffZ, g.BodyAroundZ = polar(d.X, d.Y, d.Z)
	g.OffBoresight, g.AroundBoresight = polar(d.Dot(v.a), d.Dot(v.b), d.Dot(v.c))
}

// polar returns the angle off the third axis and the one about it, the latter in
// [0, 2π).
func polar(x, y, z float64) (off, around unit.Angle) {
	return unit.Angle(math.Atan2(math.Hypot(x, y), z)), unit.Angle(math.Atan2(y, x)).Wrapped()
}

// angleTo returns the angle between two directions of length one.
func angleTo(a, b orbit.Vec3) unit.Angle {
	return unit.Angle(math.Atan2(a.Cross(b).Norm(), a.Dot(b)))
}

// spinAxis returns the axis in Earth-fixed components.
func (v *bodyView) spinAxis(t time.Time) orbit.Vec3 {
	return orbit.TEMEToEarthFixed(v.body.SpinAxis, orbit.Vec3{}, t, v.bodies.earth).Position
}

// axes returns the body's axes in Earth-fixed components; the error is that of a
// history.
func (v *bodyView) axes(t time.Time, s orbit.State) (x, y, z orbit.Vec3, err error) {
	switch v.attitude {
	case AttitudeHistory:
		return v.body.History.BodyAxes(t, v.bodies.earth)
	case AttitudeSun:
		sun, _ := v.bodies.positions(t)
		x, y, z = sunAxes(sun.Sub(s.Position).Unit())
	case AttitudeYawSteering:
		sun, _ := v.bodies.positions(t)
		x, y, z = yawAxes(s, sun.Sub(s.Position).Unit())
	default:
		x, y, z = nadirAxes(s)
	}
	return x, y, z, nil
}

// nadirAxes: z to the Earth's centre, y against the orbit's normal.
func nadirAxes(s orbit.State) (x, y, z orbit.Vec3) {
	z = s.Position.Unit().Scale(-1)
	y = s.InertialVelocity().Cross(s.Position).Unit() // -(r × v)
	return y.Cross(z), y, z
}

// sunAxes: z to the Sun, x toward the pole's side. The Sun never stands within 66
// degrees of the pole.
func sunAxes(sun orbit.Vec3) (x, y, z orbit.Vec3) {
	y = sun.Cross(orbit.Vec3{Z: 1}).Unit()
	return y.Cross(sun), y, sun
}

// yawAxes: z to the Earth's centre, y normal to z and the Sun, x on the Sun's side, so
// that an array that turns about y meets the Sun squarely. With the Sun on the line to
// the Earth's centre no yaw is better than another, and that of nadir is taken.
//
// Source: the law of nominal yaw steering, Bar-Sever, A new model for GPS yaw attitude,
// Journal of Geodesy 70 (1996), from memory.
func yawAxes(s orbit.State, sun orbit.Vec3) (x, y, z orbit.Vec3) {
	z = s.Position.Unit().Scale(-1)
	y = z.Cross(sun)
	if y.Norm() < 1e-9 {
		return nadirAxes(s)
	}
	y = y.Unit()
	return y.Cross(z), y, z
}
