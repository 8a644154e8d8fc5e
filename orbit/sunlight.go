package orbit

import "math"

// Light tells how much of the Sun a spacecraft sees past the Earth.
type Light int

// Kinds of light.
const (
	Sunlit   Light = iota // the whole disc
	Penumbra              // a part of the disc
	Umbra                 // nothing
)

// String returns "sun", "penumbra" or "umbra".
func (l Light) String() string {
	switch l {
	case Penumbra:
		return "penumbra"
	case Umbra:
		return "umbra"
	}
	return "sun"
}

const (
	sunRadius        = 695700e3          // m, nominal, IAU 2015 resolution B3
	equatorialRadius = 6378137.0         // m, WGS-84
	flattening       = 1 / 298.257223563 // WGS-84
)

// LightAt returns how much of the Sun a spacecraft at an Earth-fixed position sees,
// sun being SunPosition of the same instant. The rays are straight and pass the
// ellipsoid of WGS-84; air, which dims and bends them some tens of kilometres above
// it, is left out. Instants of change against rays traced one by one: TestLight.
//
// Stretching z by 1/(1-f) turns the ellipsoid into a sphere, keeps the rays straight,
// and turns the Sun into a spheroid, of whose half-width the part towards the Earth's
// centre counts. Behind the Earth's cone of shadow, 1.4 million km, there is no umbra.
func LightAt(spacecraft, sun Vec3) Light {
	p := Vec3{spacecraft.X, spacecraft.Y, spacecraft.Z / (1 - flattening)}
	d := Vec3{sun.X, sun.Y, sun.Z / (1 - flattening)}.Sub(p)
	height, distance := p.Norm(), d.Norm()
	if height <= equatorialRadius {
		return Umbra
	}
	along := -d.Dot(p) / (height * distance) // cosine of the angle between the Sun and the Earth's centre
	if along < 0 && height > 1.001*equatorialRadius {
		return Sunlit // the Earth's rim is more than the Sun's width away
	}
	earthWidth := math.Asin(equatorialRadius / height)
	sunWidth := math.Asin(sunHalfWidth(p, d) / distance)
	apart := math.Acos(max(-1, min(1, along)))
	switch {
	case apart >= earthWidth+sunWidth:
		return Sunlit
	case apart > earthWidth-sunWidth:
		return Penumbra
	}
	return Umbra
}

// sunHalfWidth returns the half-width in m of the stretched Sun in the direction,
// square to the line of sight d, in which the Earth's centre lies from it.
func sunHalfWidth(p, d Vec3) float64 {
	side := d.Cross(p).Cross(d)
	n := side.Norm()
	if n == 0 {
		return sunRadius
	}
	stretched := side.Z / n / (1 - flattening)
	return sunRadius * math.Sqrt((side.X*side.X+side.Y*side.Y)/(n*n)+stretched*stretched)
}
