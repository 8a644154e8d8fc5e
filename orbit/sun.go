package orbit

import (
	"math"
	"time"
)

// astronomicalUnit in m, exact by IAU 2012 resolution B2.
const astronomicalUnit = 149597870700.0

// SunPosition returns the Earth-fixed position of the Sun's centre in m as seen from
// the Earth's centre, light time and aberration in it. The direction is good to
// 0.002 degrees, 1957 to 2056, when UT1-UTC is given,
// the distance to 5e-5 of itself (TestSunAndMoon).
//
// Source: J. Meeus, Astronomical Algorithms, 2nd ed., chapters 22 and 25: the
// largest terms of VSOP87 for the Earth.
func SunPosition(t time.Time, earth EarthOrientation) Vec3 {
	r := newRotation(t, earth)
	return r.fixed(0, sunTEME(centuriesTT(t)))
}

// centuriesTT returns Julian centuries of terrestrial time since J2000. Terrestrial
// time runs 32 s (1957) to 69 s (2026) ahead of UTC; 60 s is taken throughout, in
// which the Sun moves 0.0004 degrees and the Moon 0.005.
func centuriesTT(t time.Time) float64 {
	const aheadOfUTC = 60
	sinceMidnight := float64(t.Unix()-j2000UnixDay*86400) + float64(t.Nanosecond())*1e-9
	return (sinceMidnight - 43200 + aheadOfUTC) / (86400 * 36525)
}

// seriesTerm is amplitude times cos(phase + rate τ).
type seriesTerm struct{ amplitude, phase, rate float64 }

// Heliocentric longitude of the Earth, mean equinox of date: rad, with τ in Julian
// millennia. The polynomial stands in sunTEME.
var (
	earthLongitude = []seriesTerm{
		{3341656e-8, 4.6692568, 6283.0758500},
		{34894e-8, 4.62610, 12566.15170},
		{3497e-8, 2.7441, 5753.3849},
		{3418e-8, 2.8289, 3.5231},
		{3136e-8, 3.6277, 77713.7715},
		{2676e-8, 4.4181, 7860.4194},
		{2343e-8, 6.1352, 3930.2097},
		{1324e-8, 0.7425, 11506.7698},
		{1273e-8, 2.0371, 529.6910},
		{1199e-8, 1.1096, 1577.3435},
		{990e-8, 5.233, 5884.927},
		{902e-8, 2.045, 26.298},
		{857e-8, 3.508, 398.149},
		{780e-8, 1.179, 5223.694},
		{753e-8, 2.533, 5507.553},
		{505e-8, 4.583, 18849.228},
	}
	earthLongitudeRate = seriesTerm{206059e-8, 2.678235, 6283.075850} // a millennium
	// Distance in astronomical units.
	earthDistance = []seriesTerm{
		{1670700e-8, 3.0984635, 6283.0758500},
		{13956e-8, 3.05525, 12566.15170},
		{3084e-8, 5.1985, 77713.7715},
		{1628e-8, 1.1739, 5753.3849},
	}
	earthDistanceRate = seriesTerm{103019e-8, 1.107490, 6283.075850} // a millennium
)

func (t *seriesTerm) at(tau float64) float64 { return t.amplitude * math.Cos(t.phase+t.rate*tau) }

func sum(terms []seriesTerm, tau float64) float64 {
	s := 0.0
	for i := range terms {
		s += terms[i].at(tau)
	}
	return s
}

// sunTEME returns the apparent position of the Sun in m in the frame of SGP4 at c
// Julian centuries of terrestrial time.
func sunTEME(c float64) Vec3 {
	tau := c / 10
	longitude := 1.75347046 + 6283.31966747*tau + 0.00052919*tau*tau +
		sum(earthLongitude, tau) + tau*earthLongitudeRate.at(tau)
	distance := 1.00013989 + sum(earthDistance, tau) + tau*earthDistanceRate.at(tau)
	const aberration = 20.4898 * math.Pi / 180 / 3600
	longitude += math.Pi - aberration/distance
	return eclipticToTEME(longitude, 0, distance*astronomicalUnit, c)
}

// eclipticToTEME turns spherical coordinates of the mean ecliptic and equinox of
// date (rad, m) into a vector on the true equator, counted from the mean equinox.
// Of the nutation the four largest terms are taken; the rest is 0.0001 degrees.
//
// Source: Meeus, chapter 22.
func eclipticToTEME(longitude, latitude, distance, c float64) Vec3 {
	const arcsecond = math.Pi / 180 / 3600
	const degree = math.Pi / 180
	node := (125.04452 - 1934.136261*c) * degree
	sun := (280.4665 + 36000.7698*c) * degree
	moon := (218.3165 + 481267.8813*c) * degree
	inLongitude := (-17.20*math.Sin(node) - 1.32*math.Sin(2*sun) - 0.23*math.Sin(2*moon) + 0.21*math.Sin(2*node)) * arcsecond
	inObliquity := (9.20*math.Cos(node) + 0.57*math.Cos(2*sun) + 0.10*math.Cos(2*moon) - 0.09*math.Cos(2*node)) * arcsecond
	mean := (84381.448 - 46.8150*c) * arcsecond

	sinB, cosB := math.Sincos(latitude)
	sinL, cosL := math.Sincos(longitude + inLongitude)
	sinE, cosE := math.Sincos(mean + inObliquity)
	v := Vec3{cosB * cosL, cosB*sinL*cosE - sinB*sinE, cosB*sinL*sinE + sinB*cosE}
	// From the true equinox to the mean one: the equation of the equinoxes.
	sinQ, cosQ := math.Sincos(inLongitude * math.Cos(mean))
	return Vec3{cosQ*v.X + sinQ*v.Y, cosQ*v.Y - sinQ*v.X, v.Z}.Scale(distance)
}
