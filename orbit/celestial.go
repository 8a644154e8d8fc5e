package orbit

import (
	"math"
	"time"

	"slantwise/orbit/unit"
)

// matrix turns a vector's components from one frame into another, a row a component.
type matrix [3][3]float64

func (m *matrix) times(v Vec3) Vec3 {
	return Vec3{
		m[0][0]*v.X + m[0][1]*v.Y + m[0][2]*v.Z,
		m[1][0]*v.X + m[1][1]*v.Y + m[1][2]*v.Z,
		m[2][0]*v.X + m[2][1]*v.Y + m[2][2]*v.Z,
	}
}

// back is the turn the other way.
func (m *matrix) back(v Vec3) Vec3 {
	return Vec3{
		m[0][0]*v.X + m[1][0]*v.Y + m[2][0]*v.Z,
		m[0][1]*v.X + m[1][1]*v.Y + m[2][1]*v.Z,
		m[0][2]*v.X + m[1][2]*v.Y + m[2][2]*v.Z,
	}
}

func (m *matrix) after(o *matrix) (p matrix) {
	for i := range 3 {
		for j := range 3 {
			p[i][j] = m[i][0]*o[0][j] + m[i][1]*o[1][j] + m[i][2]*o[2][j]
		}
	}
	return p
}

// turn returns the matrix of a turn of the axes by an angle about axis 0, 1 or 2.
func turn(axis int, angle float64) matrix {
	s, c := math.Sincos(angle)
	i, j := (axis+1)%3, (axis+2)%3
	var m matrix
	m[axis][axis] = 1
	m[i][i], m[i][j], m[j][i], m[j][j] = c, s, -s, c
	return m
}

const arcsec = float64(unit.Arcsecond)

// nutation returns the nutation in longitude and obliquity and the mean obliquity, in
// rad, by the IAU 1980 theory (5 mas, TestNutationAgainstReference).
//
// Source of the fundamental arguments: the same theory (Seidelmann 1982). c counts Julian centuries
// of TT: 10 s more or less, as centuriesTT has them, are 20 micro-arcseconds.
func nutation(c float64) (psi, eps, obliquity float64) {
	revolutions := func(zero, turns, rate, square, cube float64) float64 { // arcseconds
		return math.Mod(zero+turns*1296000*c+c*(rate+c*(square+c*cube)), 1296000) * arcsec
	}
	d := revolutions(1072261.307, 1236, 1105601.328, -6.891, 0.019)
	sun := revolutions(1287099.804, 99, 1292581.224, -0.577, -0.012)
	moon := revolutions(485866.733, 1325, 715922.633, 31.310, 0.064)
	f := revolutions(335778.877, 1342, 295263.137, -13.257, 0.011)
	node := revolutions(450160.280, -5, -482890.539, 7.455, 0.008)
	for i := len(nutationTerms) - 1; i >= 0; i-- { // small ones first
		t := &nutationTerms[i]
		s, cos := math.Sincos(t.elongation*d + t.sun*sun + t.moon*moon + t.latitude*f + t.node*node)
		psi += (t.psi + t.psiRate*c) * s
		eps += (t.eps + t.epsRate*c) * cos
	}
	obliquity = (84381.406 + c*(-46.836769+c*(-0.0001831+c*0.0020034))) * arcsec
	return psi * 1e-4 * arcsec, eps * 1e-4 * arcsec, obliquity
}

// frameBias turns GCRF into the mean equator and equinox of J2000.
//
// Source: IERS Conventions (2003), section 5.5: offsets of the pole and of the origin.
var frameBias = func() matrix {
	const xi, eta, alpha = -0.0166170 * arcsec, -0.0068192 * arcsec, -0.01460 * arcsec
	x, y, z := turn(0, -eta), turn(1, xi), turn(2, alpha)
	yz := y.after(&z)
	return x.after(&yz)
}()

// ofDate turns GCRF into the true equator and equinox of date and into the mean ones:
// bias, the precession of IAU 2006, the nutation of IAU 1980.
//
// Source: Capitaine, Wallace and Chapront, Astron. Astrophys. 412, 567 (2003), equations
// 37 to 40, for the precession and the mean obliquity.
func ofDate(t time.Time) (trueOfDate, meanOfDate matrix) {
	c := centuriesTT(t)
	zeta := 2.650545 + c*(2306.083227+c*(0.2988499+c*0.01801828))
	z := -2.650545 + c*(2306.077181+c*(1.0927348+c*0.01826837))
	theta := c * (2004.191903 - c*(0.4294934+c*0.04182264))
	a, b, d := turn(2, -zeta*arcsec), turn(1, theta*arcsec), turn(2, -z*arcsec)
	ba := b.after(&a)
	mean := d.after(&ba)
	meanOfDate = mean.after(&frameBias)
	psi, eps, obliquity := nutation(c)
	x, y, w := turn(0, obliquity), turn(2, -psi), turn(0, -(obliquity+eps))
	yx := y.after(&x)
	n := w.after(&yx)
	return n.after(&meanOfDate), meanOfDate
}

// intermediate turns GCRF into the true equator of date with the origin that does not
// turn along it (CIRS): from there, the Earth's rotation angle leads to the Earth.
//
// Source: IERS Conventions (2003), equations 5.6 to 5.10, and 5.17 for s.
func intermediate(trueOfDate *matrix, t time.Time) matrix {
	x, y, z := trueOfDate[2][0], trueOfDate[2][1], trueOfDate[2][2]
	a := 1 / (1 + z)
	m := matrix{{1 - a*x*x, -a * x * y, -x}, {-a * x * y, 1 - a*y*y, -y}, {x, y, z}}
	s := -x*y/2 + (94e-6+3808.65e-6*centuriesTT(t))*arcsec
	spin := turn(2, -s)
	return spin.after(&m)
}

// rotationAngle returns the Earth's rotation angle in rad, not reduced to one turn but
// for whole days.
//
// Source: Capitaine et al., Astron. Astrophys. 355, 398 (2000); IERS Conventions (2003), equation 5.13.
func rotationAngle(t time.Time, ut1MinusUTC time.Duration) float64 {
	r := newRotation(t, EarthOrientation{UT1MinusUTC: ut1MinusUTC})
	fraction := r.secondOfDay / 86400
	return 2 * math.Pi * (0.7790572732640 + math.Mod(0.00273781191135448*(r.day+fraction), 1) + math.Mod(r.day, 1) + fraction)
}
