package fit

import (
	"context"
	"math"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// elementsNear returns elements whose state at t is the given one, as nearly as SGP4 has
// it. Where orbit.ElementsFromState finds none that give it back exactly (some orbits within a
// hundredth of a degree of the equator have none), the correction goes on from a guess and
// takes what comes nearest, which is enough to start from.
func elementsNear(position, velocity orbit.Vec3, t time.Time, bStar float64, guess *orbit.Elements) (orbit.Elements, error) {
	el, refused := orbit.ElementsFromState(position, velocity, t, bStar)
	if refused == nil {
		return el, nil
	}
	if guess != nil {
		el = *guess
	} else {
		el = osculating(position, velocity)
	}
	el.Epoch, el.BStar = t, bStar
	if el.Validate() != nil {
		return el, refused
	}
	pr := newProblem(context.Background(), []Datum{{Time: t, Position: position, Velocity: velocity, HasVelocity: true}}, el, false)
	p, _, _ := pr.correct(fromElements(&el)) // how near it comes decides, not why it ended
	if p == nil || p.cost > nearEnough*nearEnough {
		return el, refused
	}
	p.at.into(&el)
	return el, nil
}

// nearEnough in m is how far a start may lie from the state that it is for.
const nearEnough = 100e3

// osculating returns the elements of the two-body orbit through a state. The source is any
// text on two-body motion.
func osculating(r, v orbit.Vec3) (el orbit.Elements) {
	h := r.Cross(v)
	pole := h.Unit()
	node := orbit.Vec3{X: -h.Y, Y: h.X}.Unit()
	if node == (orbit.Vec3{}) {
		node = orbit.Vec3{X: 1}
	}
	ahead := pole.Cross(node)
	eccentric := v.Cross(h).Scale(1 / mu).Sub(r.Unit())
	e := eccentric.Norm()
	axis := 1 / (2/r.Norm() - v.Dot(v)/mu)
	perigee := math.Atan2(eccentric.Dot(ahead), eccentric.Dot(node))
	anomaly := math.Atan2(r.Dot(ahead), r.Dot(node)) - perigee // true
	half := math.Atan2(math.Sqrt(1-e)*math.Sin(anomaly/2), math.Sqrt(1+e)*math.Cos(anomaly/2))
	el.MeanMotion = 86400 / (2 * math.Pi) * math.Sqrt(mu/(axis*axis*axis))
	el.Eccentricity = e
	el.Inclination = unit.Angle(math.Acos(math.Max(-1, math.Min(1, pole.Z))))
	el.RAAN = unit.Angle(math.Atan2(node.Y, node.X)).Wrapped()
	el.ArgPerigee = unit.Angle(perigee).Wrapped()
	el.MeanAnomaly = unit.Angle(2*half - e*math.Sin(2*half)).Wrapped()
	return el
}
