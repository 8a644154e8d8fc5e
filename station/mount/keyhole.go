package mount

import (
	"math"

	"slantwise/orbit/unit"
)

// KeyholeRadius returns how near to the pole of the lower axis (the zenith; for a Y over
// X mount the ends of the X axis) a target that crosses the sky at an angular rate
// asks more of that axis than a rate: asin(ω/V). At the angle z from the pole the axis turns at
// ω/sin z where the target passes nearest, since a circle of that radius is sin z as long as the
// equator (common practice: azimuth rate = cross-elevation rate / cos elevation). rate and
// limit greater than 0, else NaN; 90° where the axis is slower than the target everywhere.
func KeyholeRadius(rate, limit unit.AngularRate) unit.Angle {
	if !(rate > 0 && limit > 0) {
		return unit.Angle(math.NaN())
	}
	return unit.Angle(math.Asin(min(1, float64(rate/limit))))
}

// KeyholeTime returns the least time that a lower axis without limit of acceleration
// leaves the track of a target that passes its pole at a least distance z, (0°, 90°), along
// a great circle at a constant rate ω, slewing at its rate V.
//
// Since the target was nearest, the axis on track has turned by θ(t) = atan(tan ωt / sin z)
// (Napier's rule in the triangle of the pole, the nearest point and the target). A slew from
// t1 to t2 needs θ(t2) - θ(t1) = V (t2 - t1), and what can be followed outside of it
// θ' <= V. Of all such chords of θ the shortest touches it at one end, where θ' = V:
//
//	sin² ω t2 = (ω sin z / V - sin² z) / cos² z
//
// so the mount slews ahead on the near side and takes the track up again as soon as the
// axis can follow, or the other way round in time. The chord through the middle, half
// before and half after, leaves the track for longer and errs less on the way. 0 where the axis keeps up,
// +Inf where it does not within a quarter of the circle. Arguments greater than 0, else NaN.
func KeyholeTime(rate, limit unit.AngularRate, nearest unit.Angle) float64 {
	w, v := float64(rate), float64(limit)
	sin, cos := math.Sincos(nearest.Radians())
	switch {
	case !(w > 0 && v > 0 && sin > 0 && cos > 0):
		return math.NaN()
	case w/sin <= v:
		return 0
	case w*sin >= v:
		return math.Inf(1) // slower than the target over all of its way
	}
	turn := func(t float64) float64 { return math.Atan2(math.Sin(w*t), sin*math.Cos(w*t)) }
	end := math.Asin(math.Sqrt((w*sin/v-sin*sin)/(cos*cos))) / w
	ahead := func(back float64) float64 { return turn(end) - turn(end-back) - v*back }
	low, high := 2*end, end+math.Pi/2/w // it grows up to -t2, where the axis is slower again
	if ahead(high) > 0 {
		return math.Inf(1)
	}
	for range 100 {
		if back := (low + high) / 2; ahead(back) > 0 {
			low = back
		} else {
			high = back
		}
	}
	return high
}

// LowerRate returns the rate of the lower axis for a target that moves across it at a
// rate, the upper axis standing at an angle: ω/cos β. Infinite at 90°.
func LowerRate(across unit.AngularRate, upper unit.Angle) unit.AngularRate {
	return across / unit.AngularRate(math.Abs(math.Cos(upper.Radians())))
}
