package elements

import (
	"errors"
	"time"

	"slantwise/orbit"
)

// Choice says which of several sets of one object is used.
type Choice int

// The choices.
const (
	Newest  Choice = iota // the latest epoch
	Nearest               // the epoch nearest to the time asked for
)

// ParseChoice reads "newest" or "nearest".
func ParseChoice(s string) (Choice, error) {
	return 0, errors.New("elements: not built yet")
}

// Chosen is the set that is used for one object.
type Chosen struct {
	orbit.Elements
	Among   int           // how many sets of the object there were, this one included
	Age     time.Duration // from the epoch to the time asked for; negative: the epoch lies later
	Caution string        // when the set is too old for its orbit to be relied on; else empty
}

// Choose picks one set for each object, in the order in which the objects first
// occur. Sets belong to one object when they have the same catalogue number; sets
// numbered 0, when they have the same name.
func Choose(sets []orbit.Elements, how Choice, at time.Time) []Chosen { return nil }

// Match returns all sets of the object that ref names: by catalogue number (plain
// or Alpha-5), by the exact name, or by the name in any case, in this order. The
// error is a *NotFoundError or an *AmbiguousError.
func Match(sets []orbit.Elements, ref string) ([]orbit.Elements, error) {
	return nil, errors.New("elements: not built yet")
}

// NotFoundError says that no set answers to a reference.
type NotFoundError struct {
	Ref     string
	Nearest []string // names most alike, best first; may be empty
	Count   int      // how many objects there were
}

// AmbiguousError says that a name stands for several objects.
type AmbiguousError struct {
	Ref        string
	Candidates []string // "name (catalogue number)"
}

func (e *NotFoundError) Error() string  { return "elements: not built yet" }
func (e *AmbiguousError) Error() string { return "elements: not built yet" }
