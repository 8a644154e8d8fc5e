package orbit

import (
	"math"
	"time"
)

// radiusM and rootMu turn the theory's units into metres and seconds.
var (
	radiusM = wgs72RadiusKm * 1000
	rootMu  = math.Sqrt(wgs72Mu * 1e9) // m^1.5/s
)

// state returns position and velocity in TEME (m, m/s) at seconds after the epoch.
//
// Source: Spacetrack Report No. 3, section 6, with the reference's names in comments.
func (t *keptTurn) state(seconds float64) (position, velocity Vec3) {
	m := t.anomaly + t.anomalyRate*seconds
	w := t.perigee + t.perigeeRate*seconds
	node := t.node + t.nodeRate*seconds
	c, s, a, e := t.cosI, t.sinI, t.axis, t.eccentricity

	// Long-period terms of J3: axn, ayn, and the longitude without the node.
	const j3 = wgs72J3 / wgs72J2
	p := 1 / (a * (1 - e*e))
	sinW, cosW := math.Sincos(w)
	axn := e * cosW
	ayn := e*sinW - 0.5*j3*s*p
	spread := 1 + c
	if math.Abs(spread) < 1.5e-12 { // an orbit exactly against the Earth's turn
		spread = 1.5e-12
	}
	u := m + w - 0.25*j3*s*(3+5*c)/spread*p*axn

	sinE, cosE := eccentricLongitude(u, axn, ayn)
	ecosE, esinE := axn*cosE+ayn*sinE, axn*sinE-ayn*cosE
	el2 := axn*axn + ayn*ayn
	pl, r := a*(1-el2), a*(1-ecosE)
	beta := math.Sqrt(1 - el2)
	k := esinE / (1 + beta)
	sinU := a / r * (sinE - ayn - axn*k)
	cosU := a / r * (cosE - axn + ayn*k)

	// Short-period terms of J2.
	one := 0.5 * wgs72J2 / pl
	two := one / pl
	sin2U, cos2U := 2*sinU*cosU, 1-2*sinU*sinU
	theta := 3*c*c - 1
	motion := rootMu / math.Pow(a*radiusM, 1.5) // rad/s
	rk := r*(1-1.5*two*beta*theta) + 0.5*one*s*s*cos2U
	uk := math.Atan2(sinU, cosU) - 0.25*two*(7*c*c-1)*sin2U
	nodeK := node + 1.5*two*c*sin2U
	incK := t.inclination + 1.5*two*c*s*cos2U
	scale := rootMu / math.Sqrt(radiusM)
	rise := scale*math.Sqrt(a)*esinE/r - motion*radiusM*one*s*s*sin2U
	across := scale*math.Sqrt(pl)/r + motion*radiusM*one*(s*s*cos2U+1.5*theta)

	sinU, cosU = math.Sincos(uk)
	sinN, cosN := math.Sincos(nodeK)
	sinI, cosI := math.Sincos(incK)
	mx, my := -sinN*cosI, cosN*cosI
	out := Vec3{mx*sinU + cosN*cosU, my*sinU + sinN*cosU, sinI * sinU}
	on := Vec3{mx*cosU - cosN*sinU, my*cosU - sinN*sinU, sinI * cosU}
	return out.Scale(rk * radiusM), out.Scale(rise).Add(on.Scale(across))
}

// eccentricLongitude solves Kepler's equation u = E - axn sin E + ayn cos E, in which E
// counts from the node, and returns the sine and cosine of E.
func eccentricLongitude(u, axn, ayn float64) (sin, cos float64) {
	u = math.Remainder(u, 2*math.Pi)
	e := u
	for range 50 {
		sin, cos = math.Sincos(e)
		step := (u - ayn*cos + axn*sin - e) / (1 - cos*axn - sin*ayn)
		step = max(-0.95, min(0.95, step)) // as the theory bounds it: high eccentricities overshoot
		e += step
		if math.Abs(step) < 1e-13 {
			break
		}
	}
	return math.Sincos(e)
}

// Ephemeris returns the Earth-fixed states of the kept orbit over [from, to], which may
// lie any time from its epoch. It fails with a *unit.RangeError for a span that is
// reversed and as EarthOrientation.Validate does. scratch is used again where it is not
// nil; nobody else may use it then.
func (k *KeptOrbit) Ephemeris(from, to time.Time, earth EarthOrientation, scratch *Ephemeris) (*Ephemeris, error) {
	if err := earth.Validate(); err != nil {
		return nil, err
	}
	if err := checkOrder(from, to); err != nil {
		return nil, err
	}
	e := scratch
	if e == nil {
		e = &Ephemeris{}
	}
	*e = Ephemeris{elements: k.elements, reference: from.UTC(), knots: e.knots[:0], sun: SunTrack{knots: e.sun.knots}}
	rot := newRotation(from, earth)
	e.sun.prepare(from, to, rot)
	e.layOut(0, to.Sub(from).Seconds(), math.Floor(knotStep(&k.elements, k.elements.Eccentricity)))
	sinceEpoch := from.Sub(k.elements.Epoch).Seconds()
	for i := range e.knots {
		s := e.first + float64(i-reach)*e.step
		p, v := k.turn.state(sinceEpoch + s)
		st := rot.earthFixed(s, p, v)
		e.knots[i].p, e.knots[i].v = st.Position, st.Velocity
	}
	for i := reach; i <= e.last+1+reach; i++ {
		differentiate(e.knots, i)
	}
	return e, nil
}
