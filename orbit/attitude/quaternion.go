package attitude

import (
	"math"

	"slantwise/orbit"
)

// Quaternion turns a reference frame into the body: by the angle 2 arccos C about the
// axis (X, Y, Z). It is of length one.
type Quaternion struct{ X, Y, Z, C float64 }

// Axes returns the body's axes in components of the reference frame.
func (q Quaternion) Axes() (x, y, z orbit.Vec3) {
	return orbit.Vec3{X: 1 - 2*(q.Y*q.Y+q.Z*q.Z), Y: 2 * (q.X*q.Y + q.Z*q.C), Z: 2 * (q.X*q.Z - q.Y*q.C)},
		orbit.Vec3{X: 2 * (q.X*q.Y - q.Z*q.C), Y: 1 - 2*(q.X*q.X+q.Z*q.Z), Z: 2 * (q.Y*q.Z + q.X*q.C)},
		orbit.Vec3{X: 2 * (q.X*q.Z + q.Y*q.C), Y: 2 * (q.Y*q.Z - q.X*q.C), Z: 1 - 2*(q.X*q.X+q.Y*q.Y)}
}

// then returns the turn q followed by r about an axis that q has turned.
func (q Quaternion) then(r Quaternion) Quaternion {
	return Quaternion{
		X: q.C*r.X + q.X*r.C + q.Y*r.Z - q.Z*r.Y,
		Y: q.C*r.Y - q.X*r.Z + q.Y*r.C + q.Z*r.X,
		Z: q.C*r.Z + q.X*r.Y - q.Y*r.X + q.Z*r.C,
		C: q.C*r.C - q.X*r.X - q.Y*r.Y - q.Z*r.Z,
	}
}

func (q Quaternion) inverse() Quaternion { return Quaternion{-q.X, -q.Y, -q.Z, q.C} }

func (q Quaternion) dot(r Quaternion) float64 { return q.X*r.X + q.Y*r.Y + q.Z*r.Z + q.C*r.C }

func (q Quaternion) scaled(k float64) Quaternion {
	return Quaternion{k * q.X, k * q.Y, k * q.Z, k * q.C}
}

// about returns the turn by an angle in rad about axis 0, 1 or 2.
func about(axis int, angle float64) Quaternion {
	s, c := math.Sincos(angle / 2)
	q := Quaternion{C: c}
	*[...]*float64{&q.X, &q.Y, &q.Z}[axis] = s
	return q
}

// between turns from q (w = 0) to r (w = 1) about one axis at a steady rate, the shorter
// way.
func between(q, r Quaternion, w float64) Quaternion {
	cos := q.dot(r)
	if cos < 0 {
		r, cos = r.scaled(-1), -cos
	}
	a, b := 1-w, w
	if angle := math.Acos(min(1, cos)); angle > 1e-6 { // under it the chord is the arc to 1e-13
		sin := math.Sin(angle)
		a, b = math.Sin(a*angle)/sin, math.Sin(b*angle)/sin
	}
	m := Quaternion{a*q.X + b*r.X, a*q.Y + b*r.Y, a*q.Z + b*r.Z, a*q.C + b*r.C}
	return m.scaled(1 / math.Sqrt(m.dot(m)))
}

// ofAxes returns the quaternion whose axes these are. They must be square to each other,
// right-handed and of length one.
func ofAxes(x, y, z orbit.Vec3) Quaternion {
	// The greatest of the four squares is at least 1/4: dividing by it loses nothing.
	s := [4]float64{1 + x.X - y.Y - z.Z, 1 - x.X + y.Y - z.Z, 1 - x.X - y.Y + z.Z, 1 + x.X + y.Y + z.Z}
	best := 0
	for i := range s {
		if s[i] > s[best] {
			best = i
		}
	}
	var q Quaternion
	switch best {
	case 0:
		q = Quaternion{s[0], x.Y + y.X, x.Z + z.X, y.Z - z.Y}
	case 1:
		q = Quaternion{x.Y + y.X, s[1], y.Z + z.Y, z.X - x.Z}
	case 2:
		q = Quaternion{x.Z + z.X, y.Z + z.Y, s[2], x.Y - y.X}
	default:
		q = Quaternion{y.Z - z.Y, z.X - x.Z, x.Y - y.X, s[3]}
	}
	return q.scaled(1 / math.Sqrt(q.dot(q)))
}
