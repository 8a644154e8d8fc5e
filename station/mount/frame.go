package mount

import (
	"math"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// frame is the mount's own axes in the site's east, north, up: pole is the lower axis,
// zero where its angle is 0, quarter where it is 90°.
type frame struct{ pole, zero, quarter orbit.Vec3 }

func newFrame(m *station.Mount) frame {
	east, north, up := orbit.Vec3{X: 1}, orbit.Vec3{Y: 1}, orbit.Vec3{Z: 1}
	f := frame{pole: up, zero: north, quarter: east}
	if m.Kind == station.YOverX {
		sin, cos := math.Sincos(m.XAxisAzimuth.Radians())
		f = frame{pole: orbit.Vec3{X: sin, Y: cos}, zero: up, quarter: orbit.Vec3{X: cos, Y: -sin}}
	}
	if m.TiltAngle != 0 {
		sin, cos := math.Sincos(m.TiltAzimuth.Radians())
		// Right-handed about this level axis, the zenith goes toward (sin, cos).
		axis := orbit.Vec3{X: -cos, Y: sin}
		for _, v := range []*orbit.Vec3{&f.pole, &f.zero, &f.quarter} {
			*v = turned(*v, axis, m.TiltAngle)
		}
	}
	return f
}

// turned turns v about a unit axis, right-handed (Rodrigues' rotation formula).
func turned(v, axis orbit.Vec3, by unit.Angle) orbit.Vec3 {
	sin, cos := math.Sincos(by.Radians())
	return v.Scale(cos).Add(axis.Cross(v).Scale(sin)).Add(axis.Scale(axis.Dot(v) * (1 - cos)))
}

// angles returns the axis angles at which the mount looks along a unit vector, the lower
// one in (-180°, 180°], the upper one in [-90°, 90°]. At the pole the lower one is 0.
func (f *frame) angles(d orbit.Vec3) station.AxisAngles {
	z, q, p := d.Dot(f.zero), d.Dot(f.quarter), d.Dot(f.pole)
	return station.AxisAngles{Lower: unit.Angle(math.Atan2(q, z)), Upper: unit.Angle(math.Atan2(p, math.Hypot(z, q)))}
}

// rates returns how fast the axes turn for a unit vector that moves with v; infinite for
// the lower axis at the pole.
func (f *frame) rates(d, v orbit.Vec3) (lower, upper float64) {
	z, q := d.Dot(f.zero), d.Dot(f.quarter)
	vz, vq, vp := v.Dot(f.zero), v.Dot(f.quarter), v.Dot(f.pole)
	across := math.Hypot(z, q)
	if across < poleSine {
		return math.Inf(1), -math.Copysign(v.Norm(), d.Dot(f.pole))
	}
	return (z*vq - q*vz) / (across * across), vp / across
}

// poleSine is the distance from the pole under which the lower angle has no meaning.
const poleSine = 1e-9

// direction returns the unit vector in which the mount looks.
func (f *frame) direction(a station.AxisAngles) orbit.Vec3 {
	sl, cl := math.Sincos(a.Lower.Radians())
	su, cu := math.Sincos(a.Upper.Radians())
	return f.pole.Scale(su).Add(f.zero.Scale(cu * cl)).Add(f.quarter.Scale(cu * sl))
}

// vector returns the unit vector of a direction in east, north, up.
func vector(d station.Direction) orbit.Vec3 {
	sa, ca := math.Sincos(d.Azimuth.Radians())
	se, ce := math.Sincos(d.Elevation.Radians())
	return orbit.Vec3{X: ce * sa, Y: ce * ca, Z: se}
}

// directionOf is vector turned round; the azimuth in [0°, 360°).
func directionOf(v orbit.Vec3) station.Direction {
	return station.Direction{
		Azimuth:   unit.Angle(math.Atan2(v.X, v.Y)).Wrapped(),
		Elevation: unit.Angle(math.Atan2(v.Z, math.Hypot(v.X, v.Y))),
	}
}

// between returns the angle between two unit vectors.
func between(a, b orbit.Vec3) unit.Angle {
	return unit.Angle(math.Atan2(a.Cross(b).Norm(), a.Dot(b)))
}
