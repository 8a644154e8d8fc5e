package orbit

import (
	"fmt"
	"time"
)

// ElementError says that one field of an element set lies outside what SGP4 and
// the exchange formats allow. Elements.Validate joins one for each faulty field.
type ElementError struct {
	Field   string // in plain words, "eccentricity"
	Value   string // as it would be printed, with its unit
	Allowed string // "0 to below 1"
}

// Error returns "eccentricity: 1.2 is not allowed; it must be 0 to below 1".
func (e *ElementError) Error() string {
	return fmt.Sprintf("%s: %s is not allowed; it must be %s", e.Field, e.Value, e.Allowed)
}

// Reason tells why an element set has no state at an instant.
type Reason int

// Reasons.
const (
	Decayed    Reason = iota + 1 // the orbit's radius falls below the Earth's
	Diverged                     // the theory leaves the range in which its equations hold
	NotANumber                   // a component of the state is not finite
)

// String returns the reason in words that complete "the element set …".
func (r Reason) String() string {
	switch r {
	case Decayed:
		return "has decayed: the orbit falls below the Earth's surface"
	case Diverged:
		return "diverges: SGP4 leaves the range that its equations hold in"
	case NotANumber:
		return "gives no finite state"
	}
	return fmt.Sprintf("fails for reason %d", int(r))
}

// PropagationError says that SGP4 has no valid state for an element set from an
// instant on (seen from the epoch: before it, where the instant lies before the
// epoch).
type PropagationError struct {
	Name          string // of the element set, may be empty
	CatalogNumber int
	Time          time.Time // the first instant without a state, to the second
	Epoch         time.Time
	Reason        Reason
	Detail        string // more about the cause, may be empty
}

// Error names the object, the instant, its distance from the epoch and the cause.
func (e *PropagationError) Error() string {
	s := fmt.Sprintf("element set %s: at %s, %.2f days from its epoch, the set %s",
		objectName(e.Name, e.CatalogNumber), e.Time.UTC().Format(timeLayout), e.Time.Sub(e.Epoch).Hours()/24, e.Reason)
	if e.Detail != "" {
		s += " (" + e.Detail + ")"
	}
	return s + "; take a newer element set or an earlier window"
}

const timeLayout = "2006-01-02T15:04:05.000Z"

func objectName(name string, number int) string {
	if name == "" {
		return fmt.Sprintf("%05d", number)
	}
	return fmt.Sprintf("%05d %q", number, name)
}
