package orbit

import (
	"errors"
	"math"
	"strconv"
	"time"

	"slantwise/orbit/unit"
)

// Epochs that SGP4 element sets can have: the two digits of the year in the
// two-line format stand for 1957 to 2056.
var (
	firstEpoch = time.Date(1957, 1, 1, 0, 0, 0, 0, time.UTC)
	lastEpoch  = time.Date(2056, 12, 31, 23, 59, 59, 0, time.UTC)
)

// Validate returns nil, or one *ElementError for each field outside its range,
// joined. What it accepts may still describe no orbit: a perigee below the ground
// is found by Facts and NewEphemeris.
//
// The drag rates MeanMotionDot and MeanMotionDDot do not enter SGP4; they must be
// finite.
func (e *Elements) Validate() error {
	v := validator{}
	v.require(e.CatalogNumber >= 0 && e.CatalogNumber <= 999999999,
		"catalogue number", strconv.Itoa(e.CatalogNumber), "0 to 999999999")
	v.require(!e.Epoch.Before(firstEpoch) && !e.Epoch.After(lastEpoch),
		"epoch", e.Epoch.UTC().Format(timeLayout), "1957 to 2056")
	v.number("mean motion", e.MeanMotion, " rev/day", 1e-8, 20)
	v.require(e.Eccentricity >= 0 && e.Eccentricity <= 0.9999999,
		"eccentricity", printed(e.Eccentricity), "0 to 0.9999999")
	v.number("inclination", e.Inclination.Degrees(), " deg", 0, 180)
	v.turn("right ascension of the ascending node", e.RAAN)
	v.turn("argument of perigee", e.ArgPerigee)
	v.turn("mean anomaly", e.MeanAnomaly)
	v.number("drag term B*", e.BStar, " per Earth radius", -10, 10)
	v.number("first derivative of the mean motion", e.MeanMotionDot, " rev/day²", -1e3, 1e3)
	v.number("second derivative of the mean motion", e.MeanMotionDDot, " rev/day³", -1e9, 1e9)
	return errors.Join(v.faults...)
}

// validator gathers faults.
type validator struct{ faults []error }

func (v *validator) require(ok bool, field, value, allowed string) {
	if !ok {
		v.faults = append(v.faults, &ElementError{Field: field, Value: value, Allowed: allowed})
	}
}

// number requires lo <= x <= hi. A little more than hi is let through, so that a
// limit survives the way from degrees to radians and back.
func (v *validator) number(field string, x float64, unitName string, lo, hi float64) {
	slack := 1e-12 * math.Abs(hi)
	v.require(x >= lo && x <= hi+slack, field, printed(x)+unitName, printed(lo)+" to "+printed(hi)+unitName)
}

func (v *validator) turn(field string, a unit.Angle) { v.number(field, a.Degrees(), " deg", 0, 360) }

func printed(x float64) string { return strconv.FormatFloat(x, 'g', -1, 64) }
