package orbit

import (
	"math"
	"time"
)

// MoonPosition returns the Earth-fixed position of the Moon's centre in m as seen
// from the Earth's centre. The direction is good to 0.03 degrees, 1957 to 2056
// (TestSunAndMoon); from a site the Moon stands up to a degree elsewhere, so
// subtract the site's position.
//
// Source: J. Meeus, Astronomical Algorithms, 2nd ed., chapter 47: the largest terms
// of the theory ELP-2000/82.
func MoonPosition(t time.Time, earth EarthOrientation) Vec3 {
	r := newRotation(t, earth)
	return r.fixed(0, moonTEME(centuriesTT(t)))
}

// moonTerm is a periodic term in the mean elongation D, the Sun's and the Moon's
// mean anomaly M and M', and the Moon's argument of latitude F.
type moonTerm struct {
	d, m, mm, f int
	sine        float64 // 1e-6 degrees
	cosine      float64 // m
}

var moonLongitude = []moonTerm{
	{0, 0, 1, 0, 6288774, -20905355},
	{2, 0, -1, 0, 1274027, -3699111},
	{2, 0, 0, 0, 658314, -2955968},
	{0, 0, 2, 0, 213618, -569925},
	{0, 1, 0, 0, -185116, 48888},
	{0, 0, 0, 2, -114332, -3149},
	{2, 0, -2, 0, 58793, 246158},
	{2, -1, -1, 0, 57066, -152138},
	{2, 0, 1, 0, 53322, -170733},
	{2, -1, 0, 0, 45758, -204586},
	{0, 1, -1, 0, -40923, -129620},
	{1, 0, 0, 0, -34720, 108743},
	{0, 1, 1, 0, -30383, 104755},
	{2, 0, 0, -2, 15327, 10321},
	{0, 0, 1, 2, -12528, 0},
	{0, 0, 1, -2, 10980, 79661},
	{4, 0, -1, 0, 10675, -34782},
	{0, 0, 3, 0, 10034, -23210},
	{4, 0, -2, 0, 8548, -21636},
	{2, 1, -1, 0, -7888, 24208},
	{2, 1, 0, 0, -6766, 30824},
	{1, 0, -1, 0, -5163, -8379},
	{1, 1, 0, 0, 4987, -16675},
	{2, -1, 1, 0, 4036, -12831},
	{2, 0, 2, 0, 3994, -10445},
	{4, 0, 0, 0, 3861, -11650},
	{2, 0, -3, 0, 3665, 14403},
}

var moonLatitude = []moonTerm{
	{0, 0, 0, 1, 5128122, 0},
	{0, 0, 1, 1, 280602, 0},
	{0, 0, 1, -1, 277693, 0},
	{2, 0, 0, -1, 173237, 0},
	{2, 0, -1, 1, 55413, 0},
	{2, 0, -1, -1, 46271, 0},
	{2, 0, 0, 1, 32573, 0},
	{0, 0, 2, 1, 17198, 0},
	{2, 0, 1, -1, 9266, 0},
	{0, 0, 2, -1, 8822, 0},
	{2, -1, 0, -1, 8216, 0},
	{2, 0, -2, -1, 4324, 0},
	{2, 0, 1, 1, 4200, 0},
}

// moonTEME returns the position of the Moon in m in the frame of SGP4 at c Julian
// centuries of terrestrial time.
func moonTEME(c float64) Vec3 {
	const degree = math.Pi / 180
	a := moonArguments{
		d:  (297.8501921 + c*(445267.1114034-c*0.0018819)) * degree,
		m:  (357.5291092 + c*(35999.0502909-c*0.0001536)) * degree,
		mm: (134.9633964 + c*(477198.8675055+c*0.0087414)) * degree,
		f:  (93.2720950 + c*(483202.0175233-c*0.0036539)) * degree,
		e:  1 - c*(0.002516+c*0.0000074),
	}
	mean := 218.3164477 + c*(481267.88123421-c*0.0015786)
	longitude, distance := a.sum(moonLongitude)
	latitude, _ := a.sum(moonLatitude)
	return eclipticToTEME((mean+longitude*1e-6)*degree, latitude*1e-6*degree, 385000560+distance, c)
}

// moonArguments are the fundamental arguments in rad; e scales the terms of the
// Sun's anomaly with the shrinking eccentricity of the Earth's orbit.
type moonArguments struct{ d, m, mm, f, e float64 }

func (a *moonArguments) sum(terms []moonTerm) (sines, cosines float64) {
	for i := range terms {
		t := &terms[i]
		sin, cos := math.Sincos(float64(t.d)*a.d + float64(t.m)*a.m + float64(t.mm)*a.mm + float64(t.f)*a.f)
		scale := 1.0
		if t.m != 0 { // only ±1 occurs
			scale = a.e
		}
		sines += t.sine * scale * sin
		cosines += t.cosine * scale * cos
	}
	return sines, cosines
}
