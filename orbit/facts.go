package orbit

import (
	"math"
	"time"

	"slantwise/orbit/unit"
)

// Kind tells which half of SGP4 an orbit needs.
type Kind int

// Kinds of orbit.
const (
	NearEarth Kind = iota // period below 225 minutes
	DeepSpace             // 225 minutes and more: lunar and solar terms, resonances
)

// String returns "near-Earth" or "deep-space".
func (k Kind) String() string {
	if k == DeepSpace {
		return "deep-space"
	}
	return "near-Earth"
}

// Facts are what the mean elements say of an orbit at the epoch, by the recovered
// (Brouwer) mean motion as SGP4 takes it. Heights are above the equatorial radius of
// WGS-72, 6378.135 km; that of a perigee under the ground is negative.
type Facts struct {
	SemiMajorAxis   unit.Length
	Perigee, Apogee unit.Length // heights
	Period          time.Duration
	Kind            Kind
}

// Facts returns the orbit's facts. It fails where Validate does.
func (e *Elements) Facts() (Facts, error) {
	if err := e.Validate(); err != nil {
		return Facts{}, err
	}
	motion, axis := e.recovered()
	height := func(ratio float64) unit.Length {
		return unit.Length((axis*ratio - 1) * wgs72RadiusKm * 1000)
	}
	f := Facts{
		SemiMajorAxis: unit.Length(axis * wgs72RadiusKm * 1000),
		Perigee:       height(1 - e.Eccentricity),
		Apogee:        height(1 + e.Eccentricity),
		Period:        time.Duration(math.Min(2*math.Pi/motion*60e9, math.MaxInt64)),
	}
	if isDeep(motion) {
		f.Kind = DeepSpace
	}
	return f, nil
}
