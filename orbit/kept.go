package orbit

import (
	"math"
	"time"

	"slantwise/orbit/unit"
)

// KeptOrbit is an orbit that its operator holds: without drag, the semi-major axis, the
// eccentricity and the inclination stay as they are, and node, perigee and anomaly move
// evenly by the Earth's flattening. Of a Sun-synchronous orbit the node's local time is
// held, too. It is what long statistics are flown on: shares of time hold over years,
// the instants of single passes do not.
//
// The mean elements are those of SGP4. At any instant its first-order short- and
// long-period terms by J2 and J3 are added, so that over a day the orbit lies within
// a centimetre of SGP4 without drag (TestKeptOrbitAgainstSGP4). Left out, beside drag: the
// Moon, the Sun and resonances, so that an orbit of 225 minutes or more is kept from
// what SGP4 would do to it.
//
// Source: Hoots and Roehrich, Spacetrack Report No. 3 (1980), section 6, without its
// drag; the constants are those of WGS-72 as in AIAA 2006-6753.
type KeptOrbit struct {
	elements Elements
	turn     keptTurn
	held     bool // the node's local time
	drift    unit.AngularRate
}

// keptTurn holds what moves: values at the epoch, rates in rad/s.
type keptTurn struct {
	axis, eccentricity, cosI, sinI     float64 // Earth radii
	anomaly, perigee, node             float64 // rad
	anomalyRate, perigeeRate, nodeRate float64 // rad/s
	inclination                        float64
}

const (
	wgs72J3 = -0.00000253881
	wgs72J4 = -0.00000165597
)

// tropicalYear is the mean year of the seasons at J2000 in days (Explanatory
// Supplement to the Astronomical Almanac), in which the mean Sun goes round once.
const tropicalYear = 365.2421897

// meanSunRate is the rate of the mean Sun's right ascension, at which the node of a
// Sun-synchronous orbit turns.
const meanSunRate = 2 * math.Pi / (tropicalYear * 86400)

// heldWithin is the drift of the node's local time within which an orbit is taken as
// Sun-synchronous: an hour in a year. Operators that hold the local time correct less.
const heldWithin = math.Pi / 12 / (365.25 * 86400)

// KeepOrbit returns the kept orbit of an element set from its epoch on. An orbit whose
// node keeps its local time to an hour a year is taken as Sun-synchronous and held
// exactly there. It fails where Elements.Validate does, and with a *PropagationError
// where the perigee lies in the ground.
func KeepOrbit(el Elements) (*KeptOrbit, error) {
	if err := el.Validate(); err != nil {
		return nil, err
	}
	if el.perigeeKm() < 0 {
		return nil, &PropagationError{Name: el.Name, CatalogNumber: el.CatalogNumber, Time: el.Epoch, Epoch: el.Epoch, Reason: Decayed}
	}
	k := &KeptOrbit{elements: el, turn: newKeptTurn(&el)}
	k.elements.BStar, k.elements.MeanMotionDot, k.elements.MeanMotionDDot = 0, 0, 0
	k.drift = unit.AngularRate(k.turn.nodeRate - meanSunRate)
	if k.held = math.Abs(float64(k.drift)) < heldWithin; k.held {
		k.turn.nodeRate = meanSunRate
	}
	return k, nil
}

func newKeptTurn(el *Elements) keptTurn {
	motion, axis := el.recovered()
	t := keptTurn{
		axis: axis, eccentricity: el.Eccentricity, inclination: el.Inclination.Radians(),
		anomaly: el.MeanAnomaly.Radians(), perigee: el.ArgPerigee.Radians(), node: el.RAAN.Radians(),
	}
	t.sinI, t.cosI = math.Sincos(t.inclination)
	t.anomalyRate, t.perigeeRate, t.nodeRate = secularRates(motion/60, axis, el.Eccentricity, t.cosI)
	return t
}

// secularRates returns the rates of mean anomaly, argument of perigee and node in rad/s
// for a mean motion n in rad/s and a semi-major axis in Earth radii: the terms of J2,
// its square, and J4.
func secularRates(n, axis, e, c float64) (anomaly, perigee, node float64) {
	beta := math.Sqrt(1 - e*e)
	q := 1 / (axis * axis * (1 - e*e) * (1 - e*e)) // of the parameter, squared
	p2 := q * q
	c2 := c * c
	c4 := c2 * c2
	one := 1.5 * wgs72J2 * q * n
	two := 0.5 * one * wgs72J2 * q
	four := -0.46875 * wgs72J4 * p2 * n
	anomaly = n + 0.5*one*beta*(3*c2-1) + 0.0625*two*beta*(13-78*c2+137*c4)
	perigee = -0.5*one*(1-5*c2) + 0.0625*two*(7-114*c2+395*c4) + four*(3-36*c2+49*c4)
	node = -one*c + (0.5*two*(4-19*c2)+2*four*(3-7*c2))*c
	return anomaly, perigee, node
}

// Elements returns the mean elements at the epoch, without drag.
func (k *KeptOrbit) Elements() Elements { return k.elements }

// SunSynchronous tells whether the node's local time is held.
func (k *KeptOrbit) SunSynchronous() bool { return k.held }

// NodeDrift is how fast the flattening alone would turn the node away from the mean
// Sun, eastward positive. It is what is held back where the local time is held.
func (k *KeptOrbit) NodeDrift() unit.AngularRate { return k.drift }

// NodalPeriod is the time from one ascending node to the next, and NodalDay the Earth's
// turn under the orbit's plane. Where so many of the one are so many of the other, the
// ground track repeats.
func (k *KeptOrbit) NodalPeriod() time.Duration {
	return fromSeconds(2 * math.Pi / (k.turn.anomalyRate + k.turn.perigeeRate))
}

// NodalDay returns the time in which the Earth turns once under the orbit's plane.
func (k *KeptOrbit) NodalDay() time.Duration {
	return fromSeconds(2 * math.Pi / (siderealRate - k.turn.nodeRate))
}

// siderealRate is the rate of Greenwich mean sidereal time in rad/s, IAU 1982 at J2000:
// the frame of SGP4 turns with the mean equinox.
const siderealRate = 2 * math.Pi * (1 + 8640184.812866/(36525*86400)) / 86400

func fromSeconds(s float64) time.Duration {
	return time.Duration(math.Min(math.Round(s*1e9), math.MaxInt64/2))
}

// AscendingNodes lists the seconds after from, up to those of to, at which the mean
// orbit comes to its ascending node, with the last one before from at the head. The true
// node lies within the eccentricity's swing of it, some ten seconds on a low orbit.
func (k *KeptOrbit) AscendingNodes(from, to time.Time) []float64 {
	rate := k.turn.anomalyRate + k.turn.perigeeRate
	latitude := k.turn.anomaly + k.turn.perigee + rate*from.Sub(k.elements.Epoch).Seconds()
	period := 2 * math.Pi / rate
	past := latitude / (2 * math.Pi)
	first := (math.Floor(past) - past) * period
	var out []float64
	for i := 0; first+float64(i)*period <= to.Sub(from).Seconds(); i++ {
		out = append(out, first+float64(i)*period)
	}
	return out
}

// LocalTimeOfNode returns the mean local solar time of the ascending node at t as an
// angle, 180° at noon.
func (k *KeptOrbit) LocalTimeOfNode(t time.Time) unit.Angle {
	node := k.turn.node + k.turn.nodeRate*t.Sub(k.elements.Epoch).Seconds()
	return LocalTimeOfNode(unit.Angle(node), t)
}

// LocalTimeOfNode returns the mean local solar time under a right ascension at t as an
// angle in [0, 2π), 180° at noon: universal time plus the longitude that the node
// stands over.
func LocalTimeOfNode(raan unit.Angle, t time.Time) unit.Angle {
	r := newRotation(t, EarthOrientation{})
	return unit.Angle(raan.Radians() - r.angle(0) + r.secondOfDay*2*math.Pi/86400).Wrapped()
}
