package orbit

import "math"

// Constants of WGS-72 that the published SGP4 is bound to (AIAA 2006-6753).
const (
	wgs72RadiusKm = 6378.135
	wgs72Mu       = 398600.8 // km³/s²
	wgs72J2       = 0.001082616
)

// recovered returns the Brouwer mean motion in rad/min and the semi-major axis in
// Earth radii that belong to the Kozai mean motion of the element set.
//
// Source: Spacetrack Report No. 3, section 6.
func (e *Elements) recovered() (motion, axis float64) {
	xke := 60 / math.Sqrt(wgs72RadiusKm*wgs72RadiusKm*wgs72RadiusKm/wgs72Mu)
	kozai := e.MeanMotion * 2 * math.Pi / 1440
	cosI := math.Cos(e.Inclination.Radians())
	beta2 := 1 - e.Eccentricity*e.Eccentricity
	d := 0.75 * wgs72J2 * (3*cosI*cosI - 1) / (beta2 * math.Sqrt(beta2))
	a1 := math.Pow(xke/kozai, 2.0/3)
	d1 := d / (a1 * a1)
	a0 := a1 * (1 - d1*(1.0/3+d1*(1+134*d1/81)))
	motion = kozai / (1 + d/(a0*a0))
	return motion, math.Pow(xke/motion, 2.0/3)
}

// perigeeKm returns the height of the perigee above the equatorial radius.
func (e *Elements) perigeeKm() float64 {
	_, axis := e.recovered()
	return (axis*(1-e.Eccentricity) - 1) * wgs72RadiusKm
}
