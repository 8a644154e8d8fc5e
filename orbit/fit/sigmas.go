package fit

import (
	"math"

	"slantwise/orbit"
)

// Sigmas are standard deviations of the classical elements, in their units in orbit.Elements
// but angles in degrees. Those of the perigee and the node are great, or NaN, where the orbit
// is nearly circular or equatorial, as they must be; the covariance of the unknowns is not.
type Sigmas struct {
	MeanMotion, Eccentricity, Inclination, RAAN, ArgPerigee, MeanAnomaly, BStar float64
}

// Sigmas carries the covariance over to the classical elements, to first order.
func (r *Result) Sigmas() Sigmas {
	p := fromElements(&r.Elements)
	classical := func(p parameters) [unknowns]float64 {
		el := orbit.Elements{}
		p.into(&el)
		return [unknowns]float64{el.MeanMotion, el.Eccentricity, el.Inclination.Degrees(), el.RAAN.Degrees(), el.ArgPerigee.Degrees(),
			el.MeanAnomaly.Degrees(), el.BStar}
	}
	var partials [unknowns][unknowns]float64
	for j := range unknowns {
		const h = 1e-9
		up, down := p, p
		up.v[j] += h
		down.v[j] -= h
		a, b := classical(up), classical(down)
		for i := range unknowns {
			d := a[i] - b[i]
			if i >= 3 && i <= 5 {
				d = math.Remainder(d, 360)
			}
			partials[i][j] = d / (2 * h)
		}
	}
	var s [unknowns]float64
	for i := range unknowns {
		v := 0.0
		for j := range unknowns {
			for k := range unknowns {
				v += partials[i][j] * r.Covariance[j][k] * partials[i][k]
			}
		}
		s[i] = math.Sqrt(v)
	}
	return Sigmas{s[0], s[1], s[2], s[3], s[4], s[5], s[6]}
}
