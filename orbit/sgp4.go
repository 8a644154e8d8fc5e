package orbit

import (
	"math"

	satellite "github.com/joshuaferrara/go-satellite"
)

// propagator is the only place that calls the SGP4 library. It cures what the
// library leaves: see newPropagator, raw and check.
type propagator struct {
	elements Elements
	terms    []term
	mean     eccentricityLaw
}

// term is one element set of the two-line grid with its weight.
type term struct {
	sat    satellite.Satellite
	weight float64
	date   [6]int  // year to second of the library's epoch
	jd     float64 // the library's epoch, as it computed it
}

// newPropagator prepares SGP4 for an element set. The error is what Validate returns.
//
// The library's drag terms are wrong for perigees under 156 km: the height of the
// atmosphere's upper boundary stands as 128 km where the theory has 120 km. All of
// them go with B* times the fourth power of the distance to that boundary, so a
// scaled B* cancels the fault (dragScale).
func newPropagator(el *Elements) (*propagator, error) {
	if err := el.Validate(); err != nil {
		return nil, err
	}
	motion, _ := el.recovered()
	p := &propagator{elements: *el}
	for _, g := range onGrid(el, el.BStar*dragScale(el.perigeeKm()), isDeep(motion)) {
		t := newTerm(g)
		p.terms = append(p.terms, t)
		p.mean.add(newEccentricityLaw(&t.sat), g.weight)
	}
	return p, nil
}

func newTerm(g weighted) term {
	t := g.epoch
	line1, line2 := g.lines()
	date := [6]int{t.Year(), int(t.Month()), t.Day(), t.Hour(), t.Minute(), t.Second()}
	return term{
		sat:    satellite.TLEToSat(line1, line2, satellite.GravityWGS72),
		weight: g.weight,
		date:   date,
		jd:     satellite.JDay(date[0], date[1], date[2], date[3], date[4], date[5]),
	}
}

// isDeep tells whether a recovered mean motion in rad/min gives a period of 225
// minutes or more, where SGP4 adds the terms of the Moon, the Sun and resonances.
func isDeep(motion float64) bool { return 2*math.Pi/motion >= 225 }

// dragScale returns the factor on B* for a perigee height in km.
//
// Source: Spacetrack Report No. 3, section 6, for the theory's constants; the
// library's were read in its source.
func dragScale(perigeeKm float64) float64 {
	if !(perigeeKm < 156) {
		return 1
	}
	s := perigeeKm - 78
	if perigeeKm < 98 {
		s = 20
	}
	r := (120 - s) / (128 - s)
	return r * r * r * r
}

// raw returns position and velocity in TEME (m, m/s) at k whole seconds after the
// true epoch, whether they mean anything or not.
//
// The library truncates the epoch and every instant to whole seconds, so its epoch
// is a whole second near the true one, and its state k seconds after the one is the
// state k seconds after the other. It holds Julian dates in one float64, whose
// steps of 40 µs are 0.3 m along the track: the same arithmetic gives the time that
// it really took, and the state is carried over the rest.
func (p *propagator) raw(k int) (position, velocity Vec3) {
	for i := range p.terms {
		t := &p.terms[i]
		d := &t.date
		second := d[5] + k
		taken := (satellite.JDay(d[0], d[1], d[2], d[3], d[4], second) - t.jd) * 1440
		pos, vel := satellite.Propagate(t.sat, d[0], d[1], d[2], d[3], d[4], second)
		pm := Vec3{pos.X * 1000, pos.Y * 1000, pos.Z * 1000}
		vm := Vec3{vel.X * 1000, vel.Y * 1000, vel.Z * 1000}
		pm, vm = carry(pm, vm, float64(k)-taken*60)
		position = position.Add(pm.Scale(t.weight))
		velocity = velocity.Add(vm.Scale(t.weight))
	}
	return position, velocity
}

// carry moves a state by dt, some microseconds, along its two-body orbit.
func carry(p, v Vec3, dt float64) (Vec3, Vec3) {
	r2 := p.Dot(p)
	g := -wgs72Mu * 1e9 / (r2 * math.Sqrt(r2))
	return p.Add(v.Scale(dt)), v.Add(p.Scale(g * dt))
}

// check returns 0, or why the state that raw gave for k is none. The library
// computes an error code but loses it in a copy, so it is found again from the
// state and from the mean eccentricity.
func (p *propagator) check(k int, position, velocity Vec3) Reason {
	switch {
	case position == (Vec3{}):
		return Diverged // the library's answer to a negative semi-latus rectum
	case !finite(position) || !finite(velocity):
		return NotANumber
	case !p.mean.holds(float64(k) / 60):
		return Diverged
	case position.Norm() < wgs72RadiusKm*1000:
		return Decayed
	}
	return 0
}

// smooth tells whether the equations still run smoothly through the state at k,
// ground or not, so that differences may take it in.
func (p *propagator) smooth(k int, position, velocity Vec3) bool {
	return position != (Vec3{}) && finite(position) && finite(velocity) && p.mean.holds(float64(k)/60)
}

func finite(v Vec3) bool {
	s := v.X + v.Y + v.Z
	return !math.IsNaN(s) && !math.IsInf(s, 0)
}
