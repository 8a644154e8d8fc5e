package orbit

import (
	"errors"
	"time"

	"slantwise/orbit/unit"
)

// Kind tells which half of SGP4 an orbit needs.
type Kind int

// Kinds of orbit.
const (
	NearEarth Kind = iota // period below 225 minutes
	DeepSpace             // 225 minutes and more: lunar and solar terms, resonances
)

// String returns "near-Earth" or "deep-space".
func (k Kind) String() string {
	if k == DeepSpace {
		return "deep-space"
	}
	return "near-Earth"
}

// Facts are what the mean elements say of an orbit at the epoch. Heights are above
// the equatorial radius of WGS-72, 6378.135 km, from the recovered (Brouwer) mean
// motion, as SGP4 itself takes them.
type Facts struct {
	SemiMajorAxis   unit.Length
	Perigee, Apogee unit.Length // heights
	Period          time.Duration
	Kind            Kind
}

// Facts returns the orbit's facts. It fails where the elements are not valid.
func (e *Elements) Facts() (Facts, error) {
	return Facts{}, errors.New("orbit: not built yet")
}

// NextAscendingNode returns the first instant after t at which the orbit crosses
// the equator northwards, to the millisecond. It fails with a *PropagationError
// where SGP4 does, and with an *ElementError where the orbit lies in the equator's
// plane and has no node.
func (e *Elements) NextAscendingNode(t time.Time) (time.Time, error) {
	return time.Time{}, errors.New("orbit: not built yet")
}
