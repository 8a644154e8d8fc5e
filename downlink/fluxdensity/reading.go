package fluxdensity

import (
	"math"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// check is one limit against the transmitters that send together in one reference
// bandwidth.
type check struct {
	limit     *Limit
	names     []string
	radiators []radiator
}

// reading is the flux at one point.
type reading struct {
	distance   float64 // limit less flux, dB; +Inf where nothing known arrives
	flux       float64 // dB(W/m²)
	limit      float64
	arrivalSin float64
	slant      float64 // m
	offNadir   float64 // rad
	off        float64 // rad, off the boresight of the first radiator that has one; NaN without
	known      bool    // every pattern is known in this direction
	target     target
}

// at returns the flux at a target. What is not known counts nothing, so that a
// reading without known is a lower bound of the flux.
func (c *check) at(s *scene, t target) reading {
	d := t.at.Sub(s.craft)
	r := reading{slant: d.Norm(), known: true, off: math.NaN(), target: t}
	direction := d.Scale(1 / r.slant)
	r.arrivalSin = -direction.Dot(t.normal)
	cosNadir := direction.Dot(s.nadir)
	r.offNadir = math.Acos(max(-1, min(1, cosNadir)))
	watts := 0.0
	for i := range c.radiators {
		ra := &c.radiators[i]
		cos := cosNadir
		if ra.axis == axisStation {
			cos = direction.Dot(s.station)
		}
		if ra.axis != axisAny && math.IsNaN(r.off) {
			r.off = math.Acos(max(-1, min(1, cos)))
		}
		w, known := ra.eirp(cos)
		watts += w
		r.known = r.known && known
	}
	arrival := unit.Angle(math.Asin(max(-1, min(1, r.arrivalSin))))
	r.limit = c.limit.At(arrival)
	r.flux = 10 * math.Log10(watts/(4*math.Pi*r.slant*r.slant)) // -Inf where nothing arrives
	r.distance = r.limit - r.flux
	return r
}

// tally keeps the worst reading and what was not known.
type tally struct {
	worst    reading
	any      bool
	unknown  bool
	from, to float64 // rad off boresight (or nadir) between which directions were not known
}

func (t *tally) add(r reading) {
	if !r.known {
		off := r.off
		if math.IsNaN(off) {
			off = r.offNadir
		}
		if !t.unknown {
			t.from, t.to = off, off
		}
		t.unknown = true
		t.from, t.to = min(t.from, off), max(t.to, off)
	}
	// An unknown direction counts where what is known there is too much already.
	if (r.known || r.distance < 0) && (!t.any || r.distance < t.worst.distance) {
		t.worst, t.any = r, true
	}
}

// merge takes another tally in.
func (t *tally) merge(o *tally) {
	if o.any && (!t.any || o.worst.distance < t.worst.distance) {
		t.worst, t.any = o.worst, true
	}
	if o.unknown {
		if !t.unknown {
			t.from, t.to = o.from, o.to
		}
		t.unknown = true
		t.from, t.to = min(t.from, o.from), max(t.to, o.to)
	}
}

// pointsAtStation tells whether an antenna of the check is held to the station.
func (c *check) pointsAtStation() bool {
	for i := range c.radiators {
		if c.radiators[i].axis == axisStation {
			return true
		}
	}
	return false
}

// away moves a unit vector by a small step along two directions across it.
func away(u orbit.Vec3, x, y float64) orbit.Vec3 {
	a, b := across(u)
	return u.Add(a.Scale(x)).Add(b.Scale(y)).Unit()
}
