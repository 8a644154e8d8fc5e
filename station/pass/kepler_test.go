package pass

import (
	"math"

	"slantwise/orbit"
)

// kepler is an exact two-body orbit seen in the rotating Earth-fixed frame: a motion
// of known smoothness, apart from SGP4 and from interpolation.
type kepler struct {
	a, e, inc, node, peri, m0 float64 // m, 1, rad
	span                      float64 // s
}

func (k kepler) Span() float64 { return k.span }

// Step is near to what the ephemeris takes for such an orbit: an hour when stationary.
func (k kepler) Step() float64 {
	n := math.Sqrt(gravity / (k.a * k.a * k.a))
	step := 0.34 / n
	if k.e > 1e-6 {
		step = min(step, 0.1*(math.Acosh(1/k.e)-math.Sqrt(1-k.e*k.e))/n)
	}
	return max(5, min(3600, math.Floor(step)))
}

func (k kepler) TrackAt(s float64) (position, derivative orbit.Vec3) {
	n := math.Sqrt(gravity / (k.a * k.a * k.a))
	m := math.Remainder(k.m0+n*s, 2*math.Pi)
	ea := m
	if k.e > 0.8 {
		ea = math.Copysign(math.Pi, m)
	}
	for range 50 { // Kepler's equation by Newton's method
		d := (ea - k.e*math.Sin(ea) - m) / (1 - k.e*math.Cos(ea))
		ea -= d
		if math.Abs(d) < 1e-15 {
			break
		}
	}
	sinE, cosE := math.Sincos(ea)
	b := math.Sqrt(1 - k.e*k.e)
	rate := n / (1 - k.e*cosE)
	x, y := k.a*(cosE-k.e), k.a*b*sinE
	vx, vy := -k.a*sinE*rate, k.a*b*cosE*rate
	sinW, cosW := math.Sincos(k.peri)
	x, y = cosW*x-sinW*y, sinW*x+cosW*y
	vx, vy = cosW*vx-sinW*vy, sinW*vx+cosW*vy
	sinI, cosI := math.Sincos(k.inc)
	z, vz := sinI*y, sinI*vy
	y, vy = cosI*y, cosI*vy
	// The node moves backwards in the Earth-fixed frame.
	sinN, cosN := math.Sincos(k.node - rotation*s)
	p := orbit.Vec3{X: cosN*x - sinN*y, Y: sinN*x + cosN*y, Z: z}
	return p, orbit.Vec3{X: cosN*vx - sinN*vy + rotation*p.Y, Y: sinN*vx + cosN*vy - rotation*p.X, Z: vz}
}
