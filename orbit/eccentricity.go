package orbit

import (
	"math"
	"reflect"

	satellite "github.com/joshuaferrara/go-satellite"
)

// eccentricityLaw is SGP4's mean eccentricity as a function of time. The theory
// stops where it leaves [-0.001, 1); the library goes on.
type eccentricityLaw struct {
	e0, rate          float64 // at the epoch; per minute, drag and third bodies
	swing, sinAtEpoch float64 // of the term that goes with the mean anomaly
	m0, mdot          float64 // mean anomaly, rad and rad/min
	omg, xm, eta, dm0 float64 // drag terms of the mean anomaly
}

// newEccentricityLaw reads the coefficients that the library prepared; their names
// are those of AIAA 2006-6753.
func newEccentricityLaw(sat *satellite.Satellite) eccentricityLaw {
	v := reflect.ValueOf(sat).Elem()
	f := func(name string) float64 { return v.FieldByName(name).Float() }
	l := eccentricityLaw{
		e0:   f("ecco"),
		rate: f("dedt") - f("bstar")*f("cc4"),
		m0:   f("mo"), mdot: f("mdot"),
	}
	if f("isimp") != 1 {
		l.swing, l.sinAtEpoch = f("bstar")*f("cc5"), f("sinmao")
		l.omg, l.xm, l.eta, l.dm0 = f("omgcof"), f("xmcof"), f("eta"), f("delmo")
	}
	return l
}

// add adds another law by its weight; the weights of the terms sum to one.
func (l *eccentricityLaw) add(o eccentricityLaw, weight float64) {
	l.e0 += weight * o.e0
	l.rate += weight * o.rate
	l.swing += weight * o.swing
	l.sinAtEpoch += weight * o.sinAtEpoch
	l.m0 += weight * o.m0
	l.mdot += weight * o.mdot
	l.omg += weight * o.omg
	l.xm += weight * o.xm
	l.eta += weight * o.eta
	l.dm0 += weight * o.dm0
}

// holds tells whether the mean eccentricity stays in the range of the theory at t
// minutes after the epoch.
func (l *eccentricityLaw) holds(t float64) bool {
	e := l.e0 + l.rate*t
	if reach := 2 * math.Abs(l.swing); e-reach >= -0.001 && e+reach < 1 {
		return true
	}
	m := l.m0 + l.mdot*t
	c := 1 + l.eta*math.Cos(m)
	m += l.omg*t + l.xm*(c*c*c-l.dm0)
	e -= l.swing * (math.Sin(m) - l.sinAtEpoch)
	return e >= -0.001 && e < 1
}

// floor is the mean eccentricity that SGP4 puts in the place of a smaller one.
const floor = 1e-6

// kink returns how abruptly, at most, the eccentricity's rate changes (per minute)
// because it comes to the floor between two times in minutes, or 0. The orbit has a
// kink there.
func (l *eccentricityLaw) kink(from, to float64) float64 {
	a, b := l.e0+l.rate*from, l.e0+l.rate*to
	reach := 2 * math.Abs(l.swing)
	if min(a, b)-reach > floor || max(a, b)+reach < floor {
		return 0
	}
	return math.Abs(l.rate) + math.Abs(l.swing*l.mdot)
}

// eccentricityOver returns the greatest of the element set's eccentricity and, for
// deep-space orbits, which the Moon and the Sun change over the months, the
// osculating ones at two times in s after the epoch.
func (p *propagator) eccentricityOver(from, to float64) float64 {
	e := p.elements.Eccentricity
	if motion, _ := p.elements.recovered(); !isDeep(motion) {
		return e
	}
	for _, s := range [2]float64{from, to} {
		if now := osculating(p.raw(int(s))); now < 1 { // false for no number, too
			e = max(e, now)
		}
	}
	return e
}

// osculating returns the eccentricity of the two-body orbit through a state.
func osculating(position, velocity Vec3) float64 {
	const mu = wgs72Mu * 1e9
	r := position.Norm()
	v2, rv := velocity.Dot(velocity), position.Dot(velocity)
	return position.Scale(v2/mu - 1/r).Sub(velocity.Scale(rv / mu)).Norm()
}
