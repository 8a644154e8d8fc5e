package orbit

import (
	"math"
	"time"

	"slantwise/orbit/unit"
)

// Propagation gives SGP4's own states of an element set in TEME, instant by instant,
// for work that looks at few instants of many sets. Whoever samples one set often takes an
// Ephemeris. It is immutable and safe for use by many goroutines.
type Propagation struct{ p *propagator }

// NewPropagation prepares an element set. The error is what Elements.Validate returns.
func NewPropagation(el Elements) (*Propagation, error) {
	p, err := newPropagator(&el)
	if err != nil {
		return nil, err
	}
	return &Propagation{p}, nil
}

// Elements returns the set that is propagated.
func (p *Propagation) Elements() Elements { return p.p.elements }

// At returns position and velocity in TEME (m, m/s) at t. It fails with a
// *PropagationError where SGP4 has no state, and with a *unit.RangeError more than ten
// years from the epoch. Unlike an Ephemeris it does not look at what lies between the
// epoch and t: behind a decay the equations can give states again that look sound.
func (p *Propagation) At(t time.Time) (position, velocity Vec3, err error) {
	d := t.Sub(p.p.elements.Epoch)
	if d > farthestFromEpoch || d < -farthestFromEpoch {
		return Vec3{}, Vec3{}, &unit.RangeError{Quantity: "time from the epoch", Value: math.Round(d.Hours() / 24), Unit: "days",
			Allowed: "within ±3652 days", Next: "take an element set of the time asked for"}
	}
	whole := d / time.Second
	if d%time.Second < 0 {
		whole--
	}
	if u := (d - whole*time.Second).Seconds(); u > 0 {
		return p.between(int(whole), u)
	}
	return p.second(int(whole))
}

// second returns the state at k whole seconds after the epoch.
func (p *Propagation) second(k int) (position, velocity Vec3, err error) {
	position, velocity = p.p.raw(k)
	if p.p.check(k, position, velocity) != 0 {
		return Vec3{}, Vec3{}, p.p.failure(k)
	}
	return position, velocity, nil
}

// between returns the state at the fraction u of the way from the second k to the next,
// by the cubic of Lagrange through four seconds: its error on a low orbit is under a
// micrometre. An interpolant that takes SGP4's velocity for the derivative of the position
// would be metres off on orbits that decay fast.
func (p *Propagation) between(k int, u float64) (position, velocity Vec3, err error) {
	weights := [4]float64{-u * (u - 1) * (u - 2) / 6, (u + 1) * (u - 1) * (u - 2) / 2,
		-(u + 1) * u * (u - 2) / 2, (u + 1) * u * (u - 1) / 6}
	for i, w := range weights {
		p0, v0, err := p.second(k - 1 + i)
		if err != nil {
			return Vec3{}, Vec3{}, err
		}
		position, velocity = position.Add(p0.Scale(w)), velocity.Add(v0.Scale(w))
	}
	return position, velocity, nil
}
