package fit

import (
	"math"

	"slantwise/orbit"
)

// mu is the Earth's gravitational parameter of WGS-72, which SGP4 is bound to.
const mu = 398600.8e9 // m³/s²

// between returns the velocity at a of the two-body orbit that goes from a to b (m) in so
// many seconds the short way, by less than half a revolution; ok is false where there is
// none, or a and b lie in line with the Earth's centre.
//
// Source: Lambert's problem in universal variables, Bate, Mueller and White, Fundamentals
// of Astrodynamics, 1971, section 5.3; from memory. Tested against Kepler's motion.
func between(a, b orbit.Vec3, seconds float64) (velocity orbit.Vec3, ok bool) {
	ra, rb := a.Norm(), b.Norm()
	cos := a.Dot(b) / (ra * rb)
	sin := a.Cross(b).Norm() / (ra * rb)
	if !(sin > 1e-6) || !(seconds > 0) {
		return orbit.Vec3{}, false
	}
	shape := sin * math.Sqrt(ra*rb/(1-cos))
	y := func(z float64) float64 {
		c, s := stumpff(z)
		return ra + rb - shape*(1-z*s)/math.Sqrt(c)
	}
	time := func(z float64) float64 { // -Inf where y is negative: too small a z
		c, s := stumpff(z)
		height := y(z)
		if height < 0 {
			return math.Inf(-1)
		}
		x := math.Sqrt(height / c)
		return (x*x*x*s + shape*math.Sqrt(height)) / math.Sqrt(mu)
	}
	low, high := -4*math.Pi*math.Pi, 4*math.Pi*math.Pi-1e-6
	if !(time(low) < seconds && time(high) > seconds) {
		return orbit.Vec3{}, false
	}
	for range 80 {
		if mid := (low + high) / 2; time(mid) < seconds {
			low = mid
		} else {
			high = mid
		}
	}
	height := y(high)
	f, g := 1-height/ra, shape*math.Sqrt(height/mu)
	return b.Sub(a.Scale(f)).Scale(1 / g), true
}

// stumpff returns Stumpff's C and S.
func stumpff(z float64) (c, s float64) {
	switch {
	case z > 1e-3:
		r := math.Sqrt(z)
		return (1 - math.Cos(r)) / z, (r - math.Sin(r)) / (r * z)
	case z < -1e-3:
		r := math.Sqrt(-z)
		return (math.Cosh(r) - 1) / -z, (math.Sinh(r) - r) / (r * -z)
	}
	return 0.5 - z/24*(1-z/30), 1.0/6 - z/120*(1-z/42)
}
