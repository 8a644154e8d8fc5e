package orbit

import (
	"math"
	"time"

	"slantwise/orbit/unit"
)

// Spread is how uncertain a position is: one standard deviation along each axis of
// the orbit, with the correlation of the two in its plane. Across is not correlated
// with either: the motions in the plane and out of it are apart to first order.
//
// Radial is away from the Earth's centre, along lies in the plane of the orbit at a
// right angle to it on the side of the motion, across completes the right-handed set
// (the axes R, T, N of CCSDS 502.0-B, from the inertial velocity).
type Spread struct {
	Radial, Along, Across unit.Length // each 0 or greater
	RadialAlong           float64     // correlation, -1 to 1
}

// Total returns the root of the sum of the squares of the three.
func (s Spread) Total() unit.Length {
	return unit.Length(math.Sqrt(float64(s.Radial*s.Radial) + float64(s.Along*s.Along) + float64(s.Across*s.Across)))
}

// Variance returns the variance in m² of the displacement's component along a vector
// that has the components radial, along and across: gᵀ C g.
func (s Spread) Variance(radial, along, across float64) float64 {
	r, a, c := radial*s.Radial.Metres(), along*s.Along.Metres(), across*s.Across.Metres()
	// Rounding may take a full correlation below 0.
	return max(0, r*r+a*a+c*c+2*s.RadialAlong*r*a)
}

// Uncertainty tells how uncertain the position of one object is over time. Its
// methods must be safe for use by many goroutines.
type Uncertainty interface {
	// At returns the spread at an instant; a *UncertaintySpanError where it is not
	// known.
	At(t time.Time) (Spread, error)
	// Basis says in a sentence where the figures come from, with the figures.
	Basis() string
}

// UncertaintySpanError says that an instant lies where nothing is known of how
// uncertain the position is.
type UncertaintySpanError struct{ Time, From, To time.Time }

// Error names the instant and the span.
func (e *UncertaintySpanError) Error() string {
	return "position uncertainty: " + e.Time.UTC().Format(timeLayout) + " is outside the span " + e.From.UTC().Format(timeLayout) +
		" to " + e.To.UTC().Format(timeLayout) + " that it is known for; give a rule by age, or a covariance nearer to it"
}

// OrbitAxes are the unit vectors of the axes of Spread, in the frame of the state.
type OrbitAxes struct {
	Radial, Along, Across Vec3
	Inertial              Vec3 // velocity in m/s as an observer that does not turn with the Earth sees it, on the same axes
}

// Axes returns the axes at an Earth-fixed state; its position and inertial velocity
// must not be parallel.
func (s State) Axes() OrbitAxes {
	spin := Vec3{Z: earthRate}
	a := OrbitAxes{Inertial: s.Velocity.Add(spin.Cross(s.Position))}
	a.Radial = s.Position.Unit()
	a.Across = s.Position.Cross(a.Inertial).Unit()
	a.Along = a.Across.Cross(a.Radial)
	return a
}

// Rate returns how fast the axes turn about Across in rad/s, the orbital motion of
// the moment.
func (a *OrbitAxes) Rate(position Vec3) float64 { return a.Inertial.Dot(a.Along) / position.Norm() }
