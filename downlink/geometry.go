package downlink

import (
	"errors"
	"math"
	"time"

	"slantwise/downlink/propagation"
	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// Geometry is where the spacecraft stands as seen from the station. A number that
// is not known is NaN.
type Geometry struct {
	Time         time.Time // zero for a stated geometry
	Azimuth      unit.Angle
	Elevation    unit.Angle // geometric
	Range        unit.Length
	OffBoresight unit.Angle // of the station, as the transmit antenna sees it; NaN when tumbling

	// What the models of one evaluation share.
	air    propagation.Sample
	airOf  *propagation.Path // whose sample it is; nil: there is none
	bodies bodyAngles

	state orbit.State // that the geometry was made of
	flown bool        // there is one; a stated geometry has none
}

// MeanEarthRadius is the mean radius R1 of the WGS-84 ellipsoid, which stands for a
// site's distance from the Earth's centre where a stated geometry has no site
// (Moritz, Geodetic Reference System 1980, rounded to 1 m).
const MeanEarthRadius = 6371009 * unit.Metre

// StatedGeometry returns the geometry of a stated range and elevation, for which no
// element set is needed. azimuth nil: not known, which a fixed antenna does not
// allow. offBoresight nil: from the attitude: for nadir over a sphere through the
// site (or of MeanEarthRadius), else 0.
func (l *Link) StatedGeometry(slant unit.Length, elevation unit.Angle, azimuth, offBoresight *unit.Angle) (Geometry, error) {
	if !(slant >= unit.Metre && slant <= 1e12) {
		return Geometry{}, &unit.RangeError{Quantity: "range", Value: slant.Kilometres(), Unit: "km", Allowed: "0.001 to 1e9 km"}
	}
	if !(elevation >= -90*unit.Degree && elevation <= 90*unit.Degree) {
		return Geometry{}, &unit.RangeError{Quantity: "elevation", Value: asGiven(elevation), Unit: "deg", Allowed: "-90 to 90 deg"}
	}
	g := Geometry{Azimuth: unit.Angle(math.NaN()), Elevation: elevation, Range: slant}
	if azimuth != nil {
		g.Azimuth = *azimuth
		if !(*azimuth >= -360*unit.Degree && *azimuth <= 360*unit.Degree) {
			return Geometry{}, &unit.RangeError{Quantity: "azimuth", Value: asGiven(*azimuth), Unit: "deg", Allowed: "-360 to 360 deg"}
		}
	}
	tumbling := l.spec.Transmitter.Attitude == AttitudeTumbling
	switch {
	case offBoresight != nil && tumbling:
		return Geometry{}, errors.New("a tumbling spacecraft has no off-boresight angle; leave the angle out")
	case offBoresight != nil && !(*offBoresight >= 0 && *offBoresight <= 180*unit.Degree):
		return Geometry{}, &unit.RangeError{Quantity: "off-boresight angle", Value: asGiven(*offBoresight), Unit: "deg", Allowed: "0 to 180 deg"}
	case offBoresight != nil:
		g.OffBoresight = *offBoresight
	case tumbling:
		g.OffBoresight = unit.Angle(math.NaN())
	case l.spec.Transmitter.Attitude == AttitudeNadir:
		g.OffBoresight = l.nadirAngle(slant, elevation)
	}
	return g, nil
}

// nadirAngle is the angle at the spacecraft in the plane triangle of the Earth's
// centre, the site and the spacecraft.
func (l *Link) nadirAngle(slant unit.Length, elevation unit.Angle) unit.Angle {
	radius := MeanEarthRadius.Metres()
	if l.spec.Frame != nil {
		radius = l.spec.Frame.Origin.Norm()
	}
	sin, cos := math.Sincos(elevation.Radians())
	return unit.Angle(math.Atan2(radius*cos, slant.Metres()+radius*sin))
}

// offBoresight returns the angle between the transmit antenna's boresight and the
// station for a spacecraft's Earth-fixed position.
func (l *Link) offBoresight(position orbit.Vec3) unit.Angle {
	switch l.spec.Transmitter.Attitude {
	case AttitudeStation:
		return 0
	case AttitudeNadir:
		up := position.Sub(l.spec.Frame.Origin)
		cos := position.Dot(up) / math.Sqrt(position.Dot(position)*up.Dot(up))
		return unit.Angle(math.Acos(max(-1, min(1, cos)))) // rounding only
	}
	return unit.Angle(math.NaN())
}

// asGiven returns the degrees of an angle as someone may have written them: the way
// to radians and back leaves digits behind.
func asGiven(a unit.Angle) float64 { return math.Round(a.Degrees()*1e9) / 1e9 }
