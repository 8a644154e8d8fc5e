package orbit

import (
	"math"
	"time"

	"slantwise/orbit/unit"
)

// EarthOrientation holds what the rotation of the Earth adds to the sidereal time
// formula. The zero value takes UT1 as UTC and the pole as the reference pole; the
// error of that is at most 0.9 s of rotation, 420 m at the equator.
type EarthOrientation struct {
	UT1MinusUTC                time.Duration // within ±0.9 s by the definition of UTC (ITU-R TF.460-6)
	PolarMotionX, PolarMotionY unit.Angle    // xp, yp of the IERS
}

// Validate returns nil, or a *unit.RangeError for a value that the Earth does not
// show: UT1-UTC beyond 0.9 s, a pole more than an arcsecond from the reference pole
// (the IERS has seen 0.6).
func (o EarthOrientation) Validate() error {
	if s := o.UT1MinusUTC.Seconds(); math.Abs(s) > 0.9 {
		return &unit.RangeError{Quantity: "UT1-UTC", Value: s, Unit: "s", Allowed: "-0.9 to 0.9 s",
			Next: "take it from a bulletin of the IERS"}
	}
	for _, c := range [2]struct {
		name string
		at   unit.Angle
	}{{"polar motion x", o.PolarMotionX}, {"polar motion y", o.PolarMotionY}} {
		if arcsec := float64(c.at / unit.Arcsecond); !(math.Abs(arcsec) <= 1) {
			return &unit.RangeError{Quantity: c.name, Value: arcsec, Unit: "arcsec", Allowed: "-1 to 1 arcsec",
				Next: "take it from a bulletin of the IERS"}
		}
	}
	return nil
}
