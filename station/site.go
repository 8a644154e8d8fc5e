package station

import (
	"fmt"
	"math"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// ElevationKind says which elevation a value is: geometric, the straight line's, or
// apparent, the refracted ray's as an eye at the station sees it.
type ElevationKind int

// Kinds of elevation.
const (
	Geometric ElevationKind = iota
	Apparent
)

// String returns "geometric" or "apparent".
func (k ElevationKind) String() string {
	if k == Apparent {
		return "apparent"
	}
	return "geometric"
}

// Site is a place on the ground with its horizon.
type Site struct {
	Name             string
	Latitude         unit.Angle     // geodetic, WGS-84, [-90°, 90°], north positive
	Longitude        unit.Angle     // [-180°, 180°], east positive
	Altitude         unit.Length    // above the WGS-84 ellipsoid
	GeoidHeight      unit.Length    // of the geoid above the ellipsoid; Altitude - GeoidHeight is above sea level
	TimeZone         *time.Location // nil where none is given
	MinimumElevation unit.Angle     // [-5°, 90°), compared in the kind that decides AOS and LOS
	Mask             *Mask          // nil where the horizon is bare
	MergeGap         time.Duration  // interruptions of at most this length do not split a contact
}

// The ellipsoid of WGS-84 (NIMA TR8350.2, 3rd edition 2000, table 3.1): semi-major
// axis in m and flattening, both defining constants.
const (
	EquatorialRadius = 6378137.0
	Flattening       = 1 / 298.257223563
)

// HeightAboveSea returns the height above mean sea level, Altitude - GeoidHeight.
func (s *Site) HeightAboveSea() unit.Length { return s.Altitude - s.GeoidHeight }

// Frame returns the local frame of the site. At the poles east is the direction
// that the longitude gives it, so that azimuth stays continuous along a meridian.
// The site must be valid (Validate).
//
// Source: geodetic to Cartesian coordinates, NIMA TR8350.2, 3rd edition 2000,
// eq. (4-14).
func (s *Site) Frame() Frame {
	sinLat, cosLat := math.Sincos(s.Latitude.Radians())
	sinLon, cosLon := math.Sincos(s.Longitude.Radians())
	const e2 = Flattening * (2 - Flattening)
	n := EquatorialRadius / math.Sqrt(1-e2*sinLat*sinLat)
	h := s.Altitude.Metres()
	return Frame{
		Origin: orbit.Vec3{
			X: (n + h) * cosLat * cosLon,
			Y: (n + h) * cosLat * sinLon,
			Z: (n*(1-e2) + h) * sinLat,
		},
		East:  orbit.Vec3{X: -sinLon, Y: cosLon},
		North: orbit.Vec3{X: -sinLat * cosLon, Y: -sinLat * sinLon, Z: cosLat},
		Up:    orbit.Vec3{X: cosLat * cosLon, Y: cosLat * sinLon, Z: sinLat},
	}
}

// Validate returns a *unit.RangeError, wrapped with the site's name, for the first
// quantity outside its range; NaN is outside every range.
//
// Altitude must be -500 m to 9 km: the solid ground of the Earth (Dead Sea shore to
// Everest).
func (s *Site) Validate() error {
	for _, q := range []struct {
		name, unit, allowed, next string
		v, lo, hi                 float64
	}{
		{"latitude", "deg", "-90 to 90 deg", "give degrees north of the equator, negative in the south", given(s.Latitude), -90, 90},
		{"longitude", "deg", "-180 to 180 deg", "give degrees east of Greenwich; west is negative", given(s.Longitude), -180, 180},
		{"altitude", "m", "-500 to 9000 m", "give metres above the WGS-84 ellipsoid", s.Altitude.Metres(), -500, 9000},
		{"geoid height", "m", "-120 to 120 m", "give metres of the geoid above the WGS-84 ellipsoid", s.GeoidHeight.Metres(), -120, 120},
		{"minimum elevation", "deg", "at least -5 and less than 90 deg", "give degrees above the horizon", given(s.MinimumElevation), -5, math.Nextafter(90, 0)},
		{"merge gap", "s", "0 or more", "give seconds", s.MergeGap.Seconds(), 0, math.MaxFloat64},
	} {
		if !(q.v >= q.lo && q.v <= q.hi) {
			err := &unit.RangeError{Quantity: q.name, Value: q.v, Unit: q.unit, Allowed: q.allowed, Next: q.next}
			return fmt.Errorf("station %q: %w", s.Name, err)
		}
	}
	return nil
}
