package station

import (
	"math"

	"slantwise/orbit/unit"
)

// PointingLoss returns 12 (e/w)² dB, the loss of a beam of half-power width w at e off
// its axis. Against a uniform circular aperture it is within 0.04 dB up to e = w/2
// and 4.3 dB short at e = w (TestPointingLoss); beyond InMainLobe it is no gain to
// count on.
//
// The mean of e² over a random error adds to the square of a constant one, so the
// mean loss in dB follows from the root of the sum of squares exactly.
func PointingLoss(e, w unit.Angle) unit.DB {
	x := e.Radians() / w.Radians()
	return unit.DB(12 * x * x)
}

// InMainLobe tells whether e lies inside the main lobe of a beam of half-power width
// w: within w of the axis. The first null of a uniform circular aperture lies at
// 1.19 w (1.22 λ/D against 1.03 λ/D), a tapered one's further out.
func InMainLobe(e, w unit.Angle) bool { return e <= w }

// AngleBetween returns the angle between two directions in [0, π].
func AngleBetween(a, b Direction) unit.Angle {
	sa, ca := math.Sincos(a.Elevation.Radians())
	sb, cb := math.Sincos(b.Elevation.Radians())
	sd, cd := math.Sincos((a.Azimuth - b.Azimuth).Radians())
	// The form with atan2 keeps its digits near 0 and near π, where acos loses half of them.
	x := ca*sb - sa*cb*cd
	y := cb * sd
	return unit.Angle(math.Atan2(math.Hypot(x, y), sa*sb+ca*cb*cd))
}
