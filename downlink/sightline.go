package downlink

import (
	"math"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// Sightline is how an antenna sees the station, in the plane that holds the spacecraft,
// the station and the boresight: there the angle between the two is a true one. The
// spacecraft is the origin, the Earth's centre lies straight below it as far as the plane
// tells, y grows downward, x toward the station.
type Sightline struct {
	Time      time.Time
	OnAxis    bool // the direction is a spin axis, about which the boresight turns
	Off       unit.Angle
	OffNadir  unit.Angle // of the station
	Boresight unit.Angle // off nadir, of the boresight or the spin axis

	StationX, StationY     unit.Length
	EarthY                 unit.Length // of the centre of the circle that the plane cuts out of the Earth, through the station
	EarthRadius            unit.Length // of that circle
	BoresightX, BoresightY float64     // of length one
}

// Sightline returns how the antenna sees the station from a state at an instant; ok is
// false where the attitude tells no direction (a tumbling spacecraft, an isotropic
// antenna, a stated EIRP, an instant that a history does not hold). The Earth is the
// sphere through the site. The link needs a Frame.
func (l *Link) Sightline(t time.Time, s orbit.State) (sight Sightline, ok bool) {
	tx := &l.spec.Transmitter
	if tx.EIRP != nil || tx.Pattern.Kind == Isotropic {
		return sight, false
	}
	site := l.spec.Frame.Origin
	to := site.Sub(s.Position)
	u, n := to.Unit(), s.Position.Unit().Scale(-1)
	b, ok := l.boresight(t, s, u, n)
	if !ok {
		return sight, false
	}
	sight = Sightline{Time: t, OnAxis: l.spin != nil, Off: angleTo(u, b), OffNadir: angleTo(u, n), Boresight: angleTo(b, n)}
	// The plane of station and boresight, or of station and nadir where those are one line.
	across := b.Sub(u.Scale(b.Dot(u)))
	if across.Norm() < 1e-6 {
		across = n.Sub(u.Scale(n.Dot(u)))
	}
	if across.Norm() < 1e-9 {
		across = l.spec.Frame.East
	}
	across = across.Unit()
	r := s.Position.Norm()
	nu, na := n.Dot(u), n.Dot(across)
	flat := math.Hypot(nu, na)
	down, side := u.Scale(nu).Add(across.Scale(na)).Scale(1/flat), u.Scale(na).Sub(across.Scale(nu)).Scale(1/flat)
	if side.Dot(u) < 0 {
		side = side.Scale(-1)
	}
	slant := to.Norm()
	sight.StationX, sight.StationY = unit.Length(slant*u.Dot(side)), unit.Length(slant*u.Dot(down))
	sight.EarthY = unit.Length(r * flat)
	sight.EarthRadius = unit.Length(math.Hypot(float64(sight.StationX), float64(sight.StationY-sight.EarthY)))
	sight.BoresightX, sight.BoresightY = b.Dot(side), b.Dot(down)
	return sight, true
}

// boresight returns the direction of the boresight, or of the spin axis, Earth-fixed; u
// is that to the station, n to the Earth's centre.
func (l *Link) boresight(t time.Time, s orbit.State, u, n orbit.Vec3) (orbit.Vec3, bool) {
	switch a := l.spec.Transmitter.Attitude; {
	case l.view != nil && a == AttitudeSpin:
		return l.view.spinAxis(t), true
	case l.view != nil:
		x, y, z, err := l.view.axes(t, s)
		c := l.view.c
		return x.Scale(c.X).Add(y.Scale(c.Y)).Add(z.Scale(c.Z)), err == nil
	case a == AttitudeStation:
		return u, true
	case a == AttitudeNadir:
		return n, true
	}
	return orbit.Vec3{}, false
}
