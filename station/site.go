package station

import (
	"time"

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
