package orbit

import (
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
