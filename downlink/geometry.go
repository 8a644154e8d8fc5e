package downlink

import (
	"errors"
	"fmt"
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
	OffBoresight unit.Angle // of the station, as the transmit antenna sees it; NaN when tumbling, and for an antenna that a spin carries around

	// Of the station in the antenna's and the body's axes; NaN where they are not known, or
	// not worked out since no gain depends on them.
	AroundBoresight       unit.Angle // about the boresight, from the pattern's own zero
	BodyOffZ, BodyAroundZ unit.Angle // from body z, and about it from x toward y

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
// site (or of MeanEarthRadius), else 0 where an attitude with body axes does not need
// it. For a spinning antenna it is the angle off the spin axis. The angle around the
// boresight stays NaN; a caller who knows it sets it.
func (l *Link) StatedGeometry(slant unit.Length, elevation unit.Angle, azimuth, offBoresight *unit.Angle) (Geometry, error) {
	if !(slant >= unit.Metre && slant <= 1e12) {
		return Geometry{}, &unit.RangeError{Quantity: "range", Value: slant.Kilometres(), Unit: "km", Allowed: "0.001 to 1e9 km"}
	}
	if !(elevation >= -90*unit.Degree && elevation <= 90*unit.Degree) {
		return Geometry{}, &unit.RangeError{Quantity: "elevation", Value: asGiven(elevation), Unit: "deg", Allowed: "-90 to 90 deg"}
	}
	nan := unit.Angle(math.NaN())
	g := Geometry{Azimuth: nan, Elevation: elevation, Range: slant, AroundBoresight: nan, BodyOffZ: nan, BodyAroundZ: nan}
	if azimuth != nil {
		g.Azimuth = *azimuth
		if !(*azimuth >= -360*unit.Degree && *azimuth <= 360*unit.Degree) {
			return Geometry{}, &unit.RangeError{Quantity: "azimuth", Value: asGiven(*azimuth), Unit: "deg", Allowed: "-360 to 360 deg"}
		}
	}
	t := &l.spec.Transmitter
	tumbling := t.Attitude == AttitudeTumbling
	toCentre := t.Attitude == AttitudeNadir || t.Attitude == AttitudeYawSteering
	switch {
	case offBoresight != nil && tumbling:
		return Geometry{}, errors.New("a tumbling spacecraft has no off-boresight angle; leave the angle out")
	case offBoresight != nil && !(*offBoresight >= 0 && *offBoresight <= 180*unit.Degree):
		return Geometry{}, &unit.RangeError{Quantity: "off-boresight angle", Value: asGiven(*offBoresight), Unit: "deg", Allowed: "0 to 180 deg"}
	case offBoresight != nil:
		g.OffBoresight = *offBoresight
	case tumbling:
		g.OffBoresight = nan
	case toCentre && t.Body.Boresight.OffZ == 0:
		g.OffBoresight = l.nadirAngle(slant, elevation)
	case l.pattern != nil && t.Attitude.HasBody():
		return Geometry{}, fmt.Errorf("range and elevation do not tell how an antenna with attitude %s looks at the station; give the off-boresight angle (for a spin, that off its axis)", t.Attitude)
	}
	if l.spin != nil {
		g.BodyOffZ, g.OffBoresight = g.OffBoresight, nan
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

// lookFromSpacecraft fills the angles under which the transmit antenna sees the station,
// for an Earth-fixed state; the geometry's time is set.
func (l *Link) lookFromSpacecraft(g *Geometry, s orbit.State) {
	nan := unit.Angle(math.NaN())
	g.OffBoresight, g.AroundBoresight, g.BodyOffZ, g.BodyAroundZ = nan, nan, nan, nan
	switch {
	case l.view != nil:
		l.view.look(g, s)
	case l.spec.Transmitter.Attitude == AttitudeStation:
		g.OffBoresight = 0
	case l.spec.Transmitter.Attitude == AttitudeNadir:
		up := s.Position.Sub(l.spec.Frame.Origin)
		cos := s.Position.Dot(up) / math.Sqrt(s.Position.Dot(s.Position)*up.Dot(up))
		g.OffBoresight = unit.Angle(math.Acos(max(-1, min(1, cos)))) // rounding only
		g.BodyOffZ = g.OffBoresight
	}
}

// asGiven returns the degrees of an angle as someone may have written them: the way
// to radians and back leaves digits behind.
func asGiven(a unit.Angle) float64 { return math.Round(a.Degrees()*1e9) / 1e9 }
