package orbit

import "math"

// knot is the state at one instant: the position with its Taylor coefficients in
// units of the step (m), and SGP4's own velocity (m/s). The coefficients come from
// differences of positions, since SGP4's velocity is not the derivative of its
// position (millimetres to decimetres per second off), and an interpolant of the
// positions that trusts it inherits the difference times the step.
type knot struct {
	p, c1, c2, c3 Vec3
	v             Vec3
}

// between returns the position at the fraction u in [0, 1] of the way from a to b:
// the polynomial of degree 7 with both knots' positions and first three derivatives
// (Hermite).
func between(a, b *knot, u float64) Vec3 {
	w := 1 - u
	u2, w2 := u*u, w*w
	u4, w4 := u2*u2, w2*w2
	a0, b0 := w4*(1+u*(4+u*(10+20*u))), u4*(1+w*(4+w*(10+20*w)))
	a1, b1 := w4*u*(1+u*(4+10*u)), -u4*w*(1+w*(4+10*w))
	a2, b2 := w4*u2*(1+4*u), u4*w2*(1+4*w)
	a3, b3 := w4*u2*u, -u4*w2*w
	return Vec3{
		a0*a.p.X + a1*a.c1.X + a2*a.c2.X + a3*a.c3.X + b0*b.p.X + b1*b.c1.X + b2*b.c2.X + b3*b.c3.X,
		a0*a.p.Y + a1*a.c1.Y + a2*a.c2.Y + a3*a.c3.Y + b0*b.p.Y + b1*b.c1.Y + b2*b.c2.Y + b3*b.c3.Y,
		a0*a.p.Z + a1*a.c1.Z + a2*a.c2.Z + a3*a.c3.Z + b0*b.p.Z + b1*b.c1.Z + b2*b.c2.Z + b3*b.c3.Z,
	}
}

// velocityPoints is the number of knots that a velocity is interpolated from.
const velocityPoints = 2 * velocityReach

const velocityReach = reach

// velocityBetween returns the velocity at the fraction u in [0, 1] of the way from
// the middle knots of the twelve given, by the polynomial of Lagrange.
func velocityBetween(knots []knot, u float64) Vec3 {
	x := u + (velocityReach - 1) // in steps from the first knot
	var left [velocityPoints]float64
	product := 1.0
	for j := range left {
		left[j] = product
		product *= x - float64(j)
	}
	v, right := Vec3{}, 1.0
	for j := velocityPoints - 1; j >= 0; j-- {
		v = v.Add(knots[j].v.Scale(left[j] * right * lagrange[j]))
		right *= x - float64(j)
	}
	return v
}

// lagrange holds 1/Π(j-m) over all m other than j.
var lagrange = func() (w [velocityPoints]float64) {
	for j := range w {
		w[j] = 1
		for m := range w {
			if m != j {
				w[j] /= float64(j - m)
			}
		}
	}
	return w
}()

// knotStep returns the seconds between knots for an element set and the greatest
// eccentricity that its orbit comes to. Two things bound it: the angular speed at the
// perigee (to the power of 4 rather than 2 in 1+e), since the flattening of the Earth
// adds harmonics of it, and, on eccentric orbits, the nearest complex time at which
// the two-body orbit passes through the Earth's centre, since polynomials in time
// converge within that distance only. The factors were chosen by measurement
// (TestInterpolationError).
func knotStep(el *Elements, e float64) float64 {
	const (
		turn      = 0.35 // rad at the perigee
		reached   = 0.11 // of the distance to the singularity
		leastStep = 4
		mostStep  = 3600
	)
	motion, _ := el.recovered()
	n := motion / 60 // rad/s
	step := turn / (n * math.Pow(1+e, 4))
	if e > 0 {
		step = min(step, reached*(math.Acosh(1/e)-math.Sqrt(1-e*e))/n)
	}
	return max(leastStep, min(mostStep, step))
}

// kinkStep returns the greatest step in s that keeps the interpolation within 0.25 m
// of a kink in which the speed changes by jump m/s, but no less than 2 s. A kink
// costs 0.16 of the jump times the step (measured).
func kinkStep(jump float64) float64 { return max(2, 0.25/(0.16*jump)) }
