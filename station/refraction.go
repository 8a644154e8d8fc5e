package station

import (
	"errors"

	"slantwise/orbit/unit"
)

// Refraction turns geometric into apparent elevation and back for one height above
// sea level, in the average atmosphere of Rec. ITU-R P.834. It is prepared once,
// immutable, and costs some tens of nanoseconds a call.
type Refraction struct{}

// NewRefraction prepares the refraction for a station; heightAboveSea -500 m to 9 km,
// else a *unit.RangeError.
func NewRefraction(heightAboveSea unit.Length) (*Refraction, error) {
	return nil, errors.New("station: refraction is not built yet")
}

// Apparent returns the apparent elevation of a spacecraft at a geometric elevation;
// ok is false where no ray arrives, below the horizon.
func (r *Refraction) Apparent(geometric unit.Angle) (apparent unit.Angle, ok bool) { return 0, false }

// Geometric returns the geometric elevation that is seen at an apparent one; ok is
// false below the horizon, where no ray arrives.
func (r *Refraction) Geometric(apparent unit.Angle) (geometric unit.Angle, ok bool) { return 0, false }

// Horizon returns the least apparent elevation that sees the sky over a smooth Earth.
func (r *Refraction) Horizon() unit.Angle { return 0 }
