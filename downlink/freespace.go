package downlink

import (
	"math"

	"slantwise/orbit/unit"
)

// FreeSpaceLoss returns 20 log10(4π d/λ) dB, the free-space basic transmission loss
// of Rec. ITU-R P.525 with the exact speed of light; d and f greater than 0, else it
// is NaN.
func FreeSpaceLoss(d unit.Length, f unit.Frequency) unit.DB {
	if !(d > 0 && f > 0) {
		return unit.DB(math.NaN())
	}
	return unit.DB(20 * math.Log10(4*math.Pi*d.Metres()*f.Hertz()/unit.SpeedOfLight))
}
