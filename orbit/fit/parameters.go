package fit

import (
	"math"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// The unknowns, in this order:
//
//	n        mean motion (Kozai), rev/day
//	h, k     e sin ϖ, e cos ϖ with ϖ = ω + I Ω
//	p, q     tan(i/2)^I sin Ω, tan(i/2)^I cos Ω
//	λ        mean longitude M + ω + I Ω, rad
//	B*       1/Earth radii
//
// I is 1, and -1 for inclinations above 90 degrees (the retrograde factor), so that only an
// orbit of the opposite sense would be singular. Source: Broucke and Cefola, Celestial
// Mechanics 5, 303 (1972), with n in place of the semi-major axis; from memory.
const unknowns = 7

const (
	atMotion = iota
	atH
	atK
	atP
	atQ
	atLongitude
	atDrag
)

// Parameters names the unknowns with their units, in the order of Result.Covariance.
var Parameters = [unknowns]string{"mean motion rev/day", "e sin(w+IN)", "e cos(w+IN)", "tan(i/2)^I sin N", "tan(i/2)^I cos N",
	"mean longitude rad", "B* per Earth radius"}

// parameters are the unknowns with the retrograde factor that they are for.
type parameters struct {
	v          [unknowns]float64
	retrograde float64 // 1 or -1
}

// fromElements returns the unknowns of an element set with the retrograde factor that
// suits it.
func fromElements(el *orbit.Elements) parameters {
	if el.Inclination.Radians() > math.Pi/2 {
		return withFactor(el, -1)
	}
	return withFactor(el, 1)
}

func withFactor(el *orbit.Elements, factor float64) parameters {
	i := el.Inclination.Radians()
	if factor < 0 {
		i = math.Pi - i
	}
	tan := math.Tan(i / 2)
	perigee := el.ArgPerigee.Radians() + factor*el.RAAN.Radians()
	sin, cos := math.Sincos(perigee)
	sinN, cosN := math.Sincos(el.RAAN.Radians())
	return parameters{retrograde: factor, v: [unknowns]float64{
		el.MeanMotion, el.Eccentricity * sin, el.Eccentricity * cos, tan * sinN, tan * cosN,
		el.MeanAnomaly.Radians() + perigee, el.BStar}}
}

// into writes the unknowns into an element set. Out of range values come out as they
// are; Validate finds them.
func (p *parameters) into(el *orbit.Elements) {
	i := 2 * math.Atan(math.Hypot(p.v[atP], p.v[atQ]))
	if p.retrograde < 0 {
		i = math.Pi - i
	}
	node := math.Atan2(p.v[atP], p.v[atQ])
	perigee := math.Atan2(p.v[atH], p.v[atK])
	el.MeanMotion = p.v[atMotion]
	el.Eccentricity = math.Hypot(p.v[atH], p.v[atK])
	el.Inclination = unit.Angle(i)
	el.RAAN = unit.Angle(node).Wrapped()
	el.ArgPerigee = unit.Angle(perigee - p.retrograde*node).Wrapped()
	el.MeanAnomaly = unit.Angle(p.v[atLongitude] - perigee).Wrapped()
	el.BStar = p.v[atDrag]
}

// minus returns p - o with the longitudes taken the short way round.
func (p *parameters) minus(o *parameters) (d [unknowns]float64) {
	for j := range d {
		d[j] = p.v[j] - o.v[j]
	}
	d[atLongitude] = math.Remainder(d[atLongitude], 2*math.Pi)
	return d
}

// onDigits rounds an element set to the digits of a two-line set, which the propagation
// takes in a single run of SGP4 instead of one for each element that has more.
func onDigits(el *orbit.Elements) {
	round := func(x, step float64) float64 { return math.Round(x/step) * step }
	angle := func(a unit.Angle) unit.Angle { return unit.Angle(round(a.Degrees(), 1e-4)) * unit.Degree }
	el.MeanMotion = round(el.MeanMotion, 1e-8)
	el.Eccentricity = round(el.Eccentricity, 1e-7)
	el.Inclination, el.RAAN = angle(el.Inclination), angle(el.RAAN)
	el.ArgPerigee, el.MeanAnomaly = angle(el.ArgPerigee), angle(el.MeanAnomaly)
	if b := math.Abs(el.BStar); b != 0 {
		step := math.Pow10(max(int(math.Floor(math.Log10(b)))+1, -9) - 5)
		el.BStar = round(el.BStar, step)
	}
}
