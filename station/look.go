package station

import (
	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// Look is the direction and distance from a site to a spacecraft, and how they
// change. Azimuth is clockwise from true north in [0, 2π), elevation to the plane
// normal to the ellipsoid, both of the straight line.
type Look struct {
	Azimuth, Elevation         unit.Angle
	Range                      unit.Length
	RangeRate                  unit.Speed // positive: receding
	AzimuthRate, ElevationRate unit.AngularRate
}

// Frame is the local east, north, up frame of a site, prepared once.
type Frame struct {
	Origin          orbit.Vec3 // Earth-fixed position, m
	East, North, Up orbit.Vec3 // unit vectors
}
