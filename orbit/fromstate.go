package orbit

import (
	"fmt"
	"math"
	"time"

	"slantwise/orbit/unit"
)

// StateReason tells why no SGP4 elements belong to a state.
type StateReason int

// The reasons.
const (
	StateNotFinite     StateReason = iota + 1 // a component is not a number, or infinite
	StateInsideEarth                          // the position is nearer the Earth's centre than its equatorial radius
	StateUnbound                              // the speed is the escape speed or more
	StateBeyondRange                          // SGP4 does not take such an orbit
	StateNotReproduced                        // no elements were found that give the state back
)

// String returns the reason in words that complete "the state …".
func (r StateReason) String() string {
	switch r {
	case StateNotFinite:
		return "has a component that is no finite number"
	case StateInsideEarth:
		return "lies inside the Earth"
	case StateUnbound:
		return "is on no closed orbit"
	case StateBeyondRange:
		return "is on an orbit that SGP4 does not take"
	case StateNotReproduced:
		return "is given back by no SGP4 elements that were found"
	}
	return fmt.Sprintf("fails for reason %d", int(r))
}

// StateError says that no SGP4 elements belong to a state.
type StateError struct {
	Reason StateReason
	Detail string // the value and what is allowed; may be empty
	Err    error  // what the elements are at fault with, for StateBeyondRange; else nil
}

// Error names the reason, the value and what to do.
func (e *StateError) Error() string {
	s := "the state " + e.Reason.String()
	if e.Detail != "" {
		s += ": " + e.Detail
	}
	if e.Err != nil {
		s += ": " + e.Err.Error()
	}
	return s + "; check its units (m and m/s inside, km and km/s in files), its frame and its epoch"
}

// Unwrap returns Err.
func (e *StateError) Unwrap() error { return e.Err }

// ElementsFromState returns the SGP4 mean elements whose state at their epoch is the
// one given: position (m) and velocity (m/s) in TEME, to a millimetre and a micrometre
// a second (TestStateGivesElementsBack). bstar, in 1/Earth radii, changes nothing at
// the epoch and is taken over. Names and numbers of the elements are left empty.
//
// Of deep-space orbits within hundredths of a degree of the equator's plane, SGP4 gives
// only some states; the others are refused, as are those whose perigee lies so deep in the
// ground that the theory is far from any orbit.
//
// One state says nothing of its own error: a centimetre a second along the track is
// 2.6 km a day. The error is a *StateError.
//
// Method: own. The unknown is the two-body state that has the mean elements as its
// osculating ones, which is free of singularities; it is corrected by what the theory's
// state misses (the two differ by the Earth's flattening, one part in a thousand). Where
// that does not converge, Newton's method follows.
func ElementsFromState(position, velocity Vec3, epoch time.Time, bstar float64) (Elements, error) {
	if err := checkState(position, velocity); err != nil {
		return Elements{}, err
	}
	c := corrector{target: phase{position, velocity}, epoch: epoch.UTC(), bstar: bstar}
	mean := c.target
	start, err := c.elementsOf(mean)
	if err != nil {
		return Elements{}, err
	}
	least := math.Inf(1)
	for range fixedPoints {
		el, err := c.elementsOf(mean)
		if err != nil {
			break
		}
		miss, err := c.miss(&el)
		if err != nil {
			break
		}
		if miss.small() {
			return el, nil
		}
		if size := miss.size(); size < least {
			start, least = el, size
		} else if size > 100*least {
			break
		}
		mean = mean.plus(miss)
	}
	return c.newton(start)
}

// checkState refuses what is no state of a satellite.
func checkState(p, v Vec3) error {
	if !finite(p) || !finite(v) {
		return &StateError{Reason: StateNotFinite}
	}
	r := p.Norm()
	if !(r >= wgs72RadiusKm*1000) {
		return &StateError{Reason: StateInsideEarth,
			Detail: fmt.Sprintf("%.3f km from the centre, it must be at least %.3f km", r/1000, wgs72RadiusKm)}
	}
	if escape := math.Sqrt(2 * wgs72Mu * 1e9 / r); !(v.Norm() < escape) {
		return &StateError{Reason: StateUnbound,
			Detail: fmt.Sprintf("%.4f km/s at %.3f km from the centre, it must be less than %.4f km/s", v.Norm()/1000, r/1000, escape/1000)}
	}
	return nil
}

const (
	fixedPoints = 40
	newtonSteps = 30
	// closeState is how near the state is met, in m; the speed to a thousandth of it per second.
	closeState = 1e-3
)

// phase is a position and a velocity in TEME.
type phase struct{ p, v Vec3 }

func (s phase) plus(o phase) phase { return phase{s.p.Add(o.p), s.v.Add(o.v)} }

func (s phase) small() bool { return s.p.Norm() < closeState && s.v.Norm() < closeState/1000 }

// corrector seeks the elements of a state.
type corrector struct {
	target phase
	epoch  time.Time
	bstar  float64
}

// elementsOf turns the two-body state into the elements that it stands for.
func (c *corrector) elementsOf(mean phase) (Elements, error) {
	el, err := osculatingElements(mean)
	if err != nil {
		return Elements{}, err
	}
	return c.complete(el)
}

// complete adds epoch and drag, and checks.
func (c *corrector) complete(el Elements) (Elements, error) {
	el.Epoch, el.BStar = c.epoch, c.bstar
	if err := el.Validate(); err != nil {
		return Elements{}, &StateError{Reason: StateBeyondRange, Err: err}
	}
	return el, nil
}

// miss returns the target less the theory's state at the epoch.
func (c *corrector) miss(el *Elements) (phase, error) {
	p, err := newPropagator(el)
	if err != nil {
		return phase{}, &StateError{Reason: StateBeyondRange, Err: err}
	}
	pos, vel := p.raw(0)
	if !p.smooth(0, pos, vel) {
		return phase{}, &StateError{Reason: StateBeyondRange, Detail: "the theory has no value there"}
	}
	return phase{c.target.p.Sub(pos), c.target.v.Sub(vel)}, nil
}

// osculatingElements returns the elements of the two-body orbit through a state, the
// mean motion in Kozai's form as element sets carry it.
//
// Source: any text on two-body motion; the semi-major axis is taken as Brouwer's.
func osculatingElements(s phase) (Elements, error) {
	const mu = wgs72Mu * 1e9
	r, h := s.p.Norm(), s.p.Cross(s.v)
	h2 := h.Dot(h)
	axis := 1 / (2/r - s.v.Dot(s.v)/mu)
	eCos, eSin := h2/(mu*r)-1, s.p.Dot(s.v)*math.Sqrt(h2)/(mu*r)
	e := math.Hypot(eCos, eSin)
	if !(axis > 0 && e < 1 && h2 > 0) {
		return Elements{}, &StateError{Reason: StateBeyondRange, Detail: fmt.Sprintf("its eccentricity is %.7f, it must be less than 1", e)}
	}
	node := math.Atan2(h.X, -h.Y)
	if h.X == 0 && h.Y == 0 {
		node = 0
	}
	sinN, cosN := math.Sincos(node)
	along := Vec3{cosN, sinN, 0}
	latitude := math.Atan2(s.p.Dot(h.Unit().Cross(along)), s.p.Dot(along))
	anomaly := math.Atan2(eSin, eCos)
	sinE, cosE := math.Sqrt(1-e*e)*math.Sin(anomaly), e+math.Cos(anomaly)
	eccentric := math.Atan2(sinE, cosE)
	el := Elements{
		Eccentricity: e,
		Inclination:  unit.Angle(math.Atan2(math.Hypot(h.X, h.Y), h.Z)),
		RAAN:         unit.Angle(node).Wrapped(),
		ArgPerigee:   unit.Angle(latitude - anomaly).Wrapped(),
		MeanAnomaly:  unit.Angle(eccentric - e*math.Sin(eccentric)).Wrapped(),
	}
	el.MeanMotion = kozaiMotion(axis/(wgs72RadiusKm*1000), &el)
	return el, nil
}
