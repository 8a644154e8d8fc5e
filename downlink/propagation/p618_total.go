package propagation

import (
	"math"

	"slantwise/orbit/unit"
)

// Contributions are the attenuations that occur together on a path at one percentage.
type Contributions struct{ Gas, Cloud, Rain, Scintillation unit.DB }

// Sum returns the plain sum of the four.
func (c Contributions) Sum() unit.DB { return c.Gas + c.Cloud + c.Rain + c.Scintillation }

// combined combines contributions in dB that were taken at the percentages of
// combinationPercent: gas, and the root of the squares of rain with cloud and of
// scintillation. Source: Rec. ITU-R P.618-14 §2.5, equations (65) and (66).
func combined(gas, cloud, rain, scintillationSquared float64) float64 {
	w := rain + cloud
	return gas + math.Sqrt(w*w+scintillationSquared)
}

// combinationPercent returns the percentage at which gas and cloud enter the total
// of percentage p: not under 5 %, P.618-14 equations (67) and (68), or not under 1 %
// in P.618-13. Rain enters at p up to 5 % and not at all above.
func combinationPercent(pPct float64, edition int) float64 {
	if edition == 13 {
		return math.Max(pPct, 1)
	}
	return math.Max(pPct, 5)
}
