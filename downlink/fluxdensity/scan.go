package fluxdensity

import (
	"math"

	"slantwise/orbit"
)

// Bearings about the point under the craft, and about the boresight of an antenna
// that is held to the station.
const (
	bearingsRound = 8
	bearingsBeam  = 12
)

// elevations are the angles at which the ground is looked at, in rad: every degree,
// and with it both bends of the limits.
var elevations = func() (out [91]float64) {
	for i := range out {
		out[i] = float64(i) * math.Pi / 180
	}
	return out
}()

// beamSteps are the angles off a boresight at which the ground is looked at, in rad:
// 0.02° and ever twice as much, to 41°.
var beamSteps = func() (out [12]float64) {
	for i := range out {
		out[i] = 0.02 * math.Pi / 180 * math.Exp2(float64(i))
	}
	return out
}()

// scanGround looks at every visible point of the ground, in steps of a degree of
// elevation (and about the beam's centre), and closes in on the worst.
func (c *check) scanGround(s *scene) tally {
	var t tally
	bearings := bearingsRound
	if s.flat == 0 && !c.pointsAtStation() {
		bearings = 1 // all alike about the nadir of a sphere
	}
	for _, el := range elevations {
		angle := s.capAngle(el)
		for b := range bearings {
			t.add(c.at(s, s.ground(s.cap(angle, 2*math.Pi*float64(b)/float64(bearings)))))
			if angle == 0 {
				break
			}
		}
	}
	if c.pointsAtStation() {
		c.scanBeam(s, &t)
	}
	if t.any {
		c.closeIn(s, &t, s.ground, s.onGround)
	}
	return t
}

// scanBeam looks along the boresight to the station and around it.
func (c *check) scanBeam(s *scene, t *tally) {
	look := func(direction orbit.Vec3) {
		if u, ok := s.hit(direction); ok {
			t.add(c.at(s, s.ground(u)))
		}
	}
	look(s.station)
	a, b := across(s.station)
	for _, off := range beamSteps {
		so, co := math.Sincos(off)
		for i := range bearingsBeam {
			sb, cb := math.Sincos(2 * math.Pi * float64(i) / bearingsBeam)
			look(s.station.Scale(co).Add(a.Scale(so * cb)).Add(b.Scale(so * sb)))
		}
	}
}

func (s *scene) onGround(u orbit.Vec3) bool { return u.Dot(s.stretched) >= math.Cos(s.rim) }

// closeIn moves from the worst reading to worse ones near it, in steps that halve,
// until they are 1e-7 rad, a metre on the ground. place makes a target of a unit
// vector; allowed tells whether it is seen.
func (c *check) closeIn(s *scene, t *tally, place func(orbit.Vec3) target, allowed func(orbit.Vec3) bool) {
	u := s.stretch(t.worst.target.at).Unit()
	for step := math.Pi / 180; step > 1e-7; step /= 2 {
		for moved, n := true, 0; moved && n < 20; n++ {
			moved = false
			for _, d := range [4][2]float64{{step, 0}, {-step, 0}, {0, step}, {0, -step}} {
				v := away(u, d[0], d[1])
				if !allowed(v) {
					continue
				}
				before := t.worst.distance
				t.add(c.at(s, place(v)))
				if t.worst.distance < before {
					u, moved = v, true
				}
			}
		}
	}
}

// scanRing looks at the geostationary orbit itself, every degree, and closes in
// on the worst.
func (c *check) scanRing(s *scene) tally {
	var t tally
	ring := func(longitude float64) (target, bool) {
		sl, cl := math.Sincos(longitude)
		at := orbit.Vec3{X: cl, Y: sl}.Scale(geostationaryRadius)
		return target{at, orbit.Vec3{X: cl, Y: sl}}, s.clear(at)
	}
	worstAt := 0.0
	look := func(longitude float64) {
		p, seen := ring(longitude)
		if !seen {
			return
		}
		before := t
		t.add(c.at(s, p))
		if t.any && (!before.any || t.worst.distance < before.worst.distance) {
			worstAt = longitude
		}
	}
	for i := range 360 {
		look(float64(i) * math.Pi / 180)
	}
	for step := math.Pi / 360; t.any && step > 1e-7; step /= 2 {
		at := worstAt
		look(at - step)
		look(at + step)
	}
	return t
}

// scanShell looks at every point of the geostationary radius that sees the craft,
// whatever its declination: the worst that an orbit's plane can bring.
func (c *check) scanShell(s *scene) tally {
	var t tally
	shell := func(u orbit.Vec3) target { return target{u.Scale(geostationaryRadius), u} }
	rim := s.rim + math.Acos(s.earth/geostationaryRadius)
	seen := func(u orbit.Vec3) bool { return u.Dot(s.stretched) >= math.Cos(min(math.Pi, rim)) }
	const steps = 180
	bearings := 1 // all alike about the nadir
	if c.pointsAtStation() {
		bearings = bearingsRound
	}
	for i := range steps + 1 {
		angle := min(math.Pi, rim) * float64(i) / steps
		for b := range bearings {
			t.add(c.at(s, shell(s.cap(angle, 2*math.Pi*float64(b)/bearingsRound))))
		}
	}
	if t.any {
		c.closeIn(s, &t, shell, seen)
	}
	return t
}
