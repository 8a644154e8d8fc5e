package station

import (
	"math"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// Place is a point over the Earth's ellipsoid WGS-84.
type Place struct {
	Latitude  unit.Angle  // geodetic, north-positive
	Longitude unit.Angle  // east-positive, in (-180°, 180°]
	Height    unit.Length // over the ellipsoid
}

const eccentricitySquared = Flattening * (2 - Flattening)

// PlaceBelow returns where an Earth-fixed position in m stands: the foot of the normal
// through it and its height. It is good to a micrometre for heights from -100 km up
// (TestPlaceBelow, against Site.Position). The longitude on the Earth's axis is 0; the
// position must lie farther than 100 km from the Earth's centre.
//
// Source: the fixed-point form of the normal's equation, tan φ = (z + e² N sin φ)/p;
// common practice.
func PlaceBelow(position orbit.Vec3) Place {
	p := math.Hypot(position.X, position.Y)
	lat := math.Atan2(position.Z, p*(1-eccentricitySquared))
	for range 12 {
		s, before := math.Sin(lat), lat
		n := EquatorialRadius / math.Sqrt(1-eccentricitySquared*s*s)
		if lat = math.Atan2(position.Z+eccentricitySquared*n*s, p); math.Abs(lat-before) < 1e-15 {
			break
		}
	}
	s, c := math.Sincos(lat)
	height := p*c + position.Z*s - EquatorialRadius*math.Sqrt(1-eccentricitySquared*s*s)
	return Place{Latitude: unit.Angle(lat), Longitude: unit.Angle(math.Atan2(position.Y, position.X)), Height: unit.Length(height)}
}

// Above returns where the ray of a direction passes a height over the ellipsoid: with
// the height of a spacecraft, the point under which it stands when the site sees it in
// this direction. The height must be above the site's, and the elevation at least that
// of a Site, -5°. TestAbove looks back at it.
func (f *Frame) Above(d Direction, height unit.Length) Place {
	sa, ca := math.Sincos(float64(d.Azimuth))
	se, ce := math.Sincos(float64(d.Elevation))
	ray := f.East.Scale(sa * ce).Add(f.North.Scale(ca * ce)).Add(f.Up.Scale(se))
	// On a sphere around the Earth's centre first, then by Newton along the ray: the
	// height grows by the sine of the angle at which the ray leaves the ellipsoid.
	radius := EquatorialRadius + float64(height)
	b := f.Origin.Dot(ray)
	r := -b + math.Sqrt(math.Max(0, b*b+radius*radius-f.Origin.Dot(f.Origin)))
	p := PlaceBelow(f.Origin.Add(ray.Scale(r)))
	for range 12 {
		off := float64(height - p.Height)
		if math.Abs(off) < 1e-6 {
			break
		}
		sl, cl := math.Sincos(float64(p.Latitude))
		so, co := math.Sincos(float64(p.Longitude))
		r += off / ray.Dot(orbit.Vec3{X: cl * co, Y: cl * so, Z: sl})
		p = PlaceBelow(f.Origin.Add(ray.Scale(r)))
	}
	return p
}
