package cli

import (
	"math"

	"slantwise/downlink"
)

// volumeSoFar returns, at each sample, the bytes since AOS at the achievable rate (by
// the trapezoidal rule, as the profile's volume) and in the chosen mode while its
// margin holds. The last are those of the volume.
func volumeSoFar(f *downlink.Profile) (achievable, mode []float64) {
	n := len(f.Seconds)
	achievable, mode = make([]float64, n), make([]float64, n)
	closes := f.Volume.Closes
	before, next := 0.0, 0 // seconds of the intervals that are over, and the first that is not
	for i, s := range f.Seconds {
		if i > 0 {
			dt := s - f.Seconds[i-1]
			achievable[i] = achievable[i-1] + dt*(f.AchievableRateBps[i-1]+f.AchievableRateBps[i])/16
		}
		for next < len(closes) && closes[next].To.Sub(f.Start).Seconds() <= s {
			before += closes[next].To.Sub(closes[next].From).Seconds()
			next++
		}
		open := 0.0
		if next < len(closes) {
			open = math.Max(0, s-closes[next].From.Sub(f.Start).Seconds())
		}
		mode[i] = (before + open) * f.DataRate.BitsPerSecond() / 8
	}
	if f.DataRate == 0 {
		for i := range mode {
			mode[i] = math.NaN()
		}
	}
	return achievable, mode
}
