package mount

import (
	"math"

	"slantwise/station"
)

// motion is where an axis stands and how fast it turns, rad and rad/s.
type motion struct{ at, rate float64 }

// reach returns the least and the greatest way that an axis makes in a time when it
// begins and ends with given rates, both within its own. ok is false where the time
// does not suffice to change the rate.
//
// Every way between the two can be made: what lies between two courses within the
// limits, sample by sample in the same proportion, is within them.
func reach(a station.Axis, from, to, time float64) (least, most float64, ok bool) {
	v, acc := float64(a.Rate), float64(a.Acceleration)
	if math.IsInf(acc, 1) {
		return -v * time, v * time, time >= 0
	}
	if time < math.Abs(to-from)/acc-timeSlack {
		return 0, 0, false
	}
	return -peakWay(-from, -to, time, v, acc), peakWay(from, to, time, v, acc), true
}

// timeSlack is what rounding may take of a time, s.
const timeSlack = 1e-9

// peakWay is the way of the course that turns as fast forward as it can: up to a peak
// rate, along it, and down.
func peakWay(from, to, time, v, acc float64) float64 {
	peak := min(v, (from+to+acc*time)/2)
	peak = max(peak, from, to) // rounding of a time that just suffices
	up, down := (peak-from)/acc, (peak-to)/acc
	return (peak*peak-from*from)/(2*acc) + (peak*peak-to*to)/(2*acc) + peak*max(0, time-up-down)
}

// quickest returns the shortest time in which an axis gets from one motion to another.
// Between rests it is d/v + v/a, or 2 sqrt(d/a) where the full rate is not reached.
func quickest(a station.Axis, from, to motion) float64 {
	way := to.at - from.at
	if way < 0 {
		from.rate, to.rate, way = -from.rate, -to.rate, -way
	}
	v, acc := float64(a.Rate), float64(a.Acceleration)
	if math.IsInf(acc, 1) {
		return way / v
	}
	if from.rate == 0 && to.rate == 0 {
		if way >= v*v/acc {
			return way/v + v/acc
		}
		return 2 * math.Sqrt(way/acc)
	}
	return quickestMoving(a, from.rate, to.rate, way)
}

// quickestMoving seeks the time by halving. In the least time that changes the rate
// there is one way; what lies ahead of it is reached once the most has grown to it, what
// lies behind once the least has fallen to it. The most is convex in time and the least
// concave, so each gets there once.
func quickestMoving(a station.Axis, from, to, way float64) float64 {
	low := math.Abs(to-from) / float64(a.Acceleration)
	only, _, _ := reach(a, from, to, low)
	if math.Abs(way-only) < 1e-12 {
		return low
	}
	ahead := way > only
	enough := func(t float64) bool {
		least, most, _ := reach(a, from, to, t)
		return ahead && most >= way || !ahead && least <= way
	}
	high := low + 1
	for !enough(high) {
		low, high = high, 2*high
	}
	for high-low > 1e-9*(1+high) {
		if mid := (low + high) / 2; enough(mid) {
			high = mid
		} else {
			low = mid
		}
	}
	return high
}
