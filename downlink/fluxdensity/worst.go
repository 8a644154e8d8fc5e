package fluxdensity

import (
	"fmt"
	"math"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// Orbit is what the worst geometry is sought over.
type Orbit struct {
	Perigee, Apogee unit.Length // from the Earth's centre, greater than its equatorial radius
	LeastElevation  unit.Angle  // of the station toward which antennas are held, [0°, 90°]
}

// polarRadius is the semi-minor axis of WGS-84, in m.
const polarRadius = station.EquatorialRadius * (1 - station.Flattening)

// Worst assesses the emissions in every geometry that an orbit may bring: on the ground
// all heights from the perigee over the equator to the apogee over a pole, over a
// sphere of the equatorial radius; toward the geostationary orbit all radii, past a
// sphere of the polar one, which hides least; and for antennas held to a station all
// elevations from the least. Findings are as those of Along.
//
// The heights are looked at in eight steps and the elevations in sixteen, then about
// the worst in steps that halve.
func Worst(o Orbit, emissions []Emission) ([]Finding, error) {
	if err := o.check(); err != nil {
		return nil, err
	}
	checks, out, err := prepare(emissions)
	if err != nil {
		return nil, err
	}
	for i := range checks {
		c := &checks[i]
		earth, highest := station.EquatorialRadius, o.Apogee.Metres()+station.EquatorialRadius-polarRadius
		if c.limit.Place == Geostationary {
			earth, highest = polarRadius, o.Apogee.Metres()
		}
		out = append(out, c.worst(earth, o.Perigee.Metres(), highest, o.LeastElevation.Radians()))
	}
	return out, nil
}

func (o *Orbit) check() error {
	p, a := o.Perigee.Kilometres(), o.Apogee.Kilometres()
	if !(p > station.EquatorialRadius/1000) || !(p <= 1e6) {
		return &unit.RangeError{Quantity: "perigee from the Earth's centre", Value: p, Unit: "km", Allowed: "greater than 6378.137 and at most 1e6 km"}
	}
	if !(a >= p && a <= 1e6) {
		return &unit.RangeError{Quantity: "apogee from the Earth's centre", Value: a, Unit: "km", Allowed: fmt.Sprintf("%g to 1e6 km", p)}
	}
	if e := o.LeastElevation.Degrees(); !(e >= 0 && e <= 90) {
		return &unit.RangeError{Quantity: "least elevation", Value: e, Unit: "deg", Allowed: "0 to 90 deg"}
	}
	return nil
}

// worst seeks over distances from the centre of a sphere, in m, and where it matters
// elevations of the station in rad.
func (c *check) worst(earth, low, high, least float64) Finding {
	var all tally
	bestR, bestE := low, math.Pi/2
	look := func(radius, e float64) {
		s := sphereScene(earth, radius, e)
		t := c.scan(&s, c.scanShell)
		if t.any && (!all.any || t.worst.distance < all.worst.distance) {
			bestR, bestE = radius, e
		}
		all.merge(&t)
	}
	const radii, angles = 8, 16
	stepR, stepE := (high-low)/radii, (math.Pi/2-least)/angles
	for i := range radii + 1 {
		r := low + stepR*float64(i)
		look(r, math.Pi/2)
		for j := 0; c.pointsAtStation() && j < angles; j++ {
			look(r, least+stepE*float64(j))
		}
	}
	for range 8 {
		stepR, stepE = stepR/2, stepE/2
		r, e := bestR, bestE
		look(max(low, r-stepR), e)
		look(min(high, r+stepR), e)
		if c.pointsAtStation() {
			look(r, max(least, e-stepE))
			look(r, min(math.Pi/2, e+stepE))
		}
	}
	f := c.finding(&all)
	f.Altitude = unit.Length(bestR - earth)
	if math.IsNaN(float64(f.Distance)) {
		f.Altitude = unit.Length(math.NaN())
	}
	return f
}

// sphereScene is a craft at a distance from the centre of a sphere, with the station
// that sees it at an elevation.
func sphereScene(earth, radius, elevation float64) scene {
	craft := orbit.Vec3{X: radius}
	s := newScene(craft, nil, earth, 0)
	at := s.ground(s.cap(s.capAngle(elevation), 0)).at
	return newScene(craft, &at, earth, 0)
}
