package elements

import (
	"fmt"
	"strconv"
	"strings"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

// Choice says which of several sets of one object is used.
type Choice int

// The choices.
const (
	Newest  Choice = iota // the latest epoch
	Nearest               // the epoch nearest to the time asked for
)

var choiceNames = [...]string{"newest", "nearest"}

// String returns "newest" or "nearest".
func (c Choice) String() string {
	if c < 0 || int(c) >= len(choiceNames) {
		return fmt.Sprintf("Choice(%d)", int(c))
	}
	return choiceNames[c]
}

// ParseChoice reads "newest" or "nearest".
func ParseChoice(s string) (Choice, error) {
	for i, n := range choiceNames {
		if s == n {
			return Choice(i), nil
		}
	}
	return 0, fmt.Errorf("%q is not allowed; it must be %s%s", s, strings.Join(choiceNames[:], " or "), suggestion(s, choiceNames[:]))
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
// numbered 0, when they have the same name. Of two sets with the same epoch (or
// equally near ones) the one with the later epoch, then the one that stands later,
// is taken.
func Choose(sets []orbit.Elements, how Choice, at time.Time) []Chosen {
	index := map[string]int{}
	var out []Chosen
	for i := range sets {
		key := objectKey(&sets[i])
		j, known := index[key]
		if !known {
			index[key] = len(out)
			out = append(out, Chosen{Elements: sets[i], Among: 1})
			continue
		}
		out[j].Among++
		if !how.prefers(out[j].Epoch, sets[i].Epoch, at) {
			out[j].Elements = sets[i]
		}
	}
	for i := range out {
		out[i].Age = out[i].Elements.Age(at)
		out[i].Caution = caution(&out[i].Elements, at)
	}
	return out
}

// objectKey tells objects apart; many sets made by hand are numbered 0.
func objectKey(el *orbit.Elements) string {
	if el.CatalogNumber == 0 {
		return "0 " + el.Name
	}
	return strconv.Itoa(el.CatalogNumber)
}

// prefers tells whether the set with the first epoch stays, against the second.
func (c Choice) prefers(first, second, at time.Time) bool {
	if c == Nearest {
		a, b := first.Sub(at).Abs(), second.Sub(at).Abs()
		if a != b {
			return a < b
		}
	}
	return first.After(second)
}

// An element set of a low orbit is good for about three days, since drag is not
// known better (common practice).
const (
	relied     = 3 * 24 * time.Hour
	lowPerigee = 1000 * unit.Kilometre
)

// caution warns of a set of a low orbit that is used too far from its epoch.
func caution(el *orbit.Elements, at time.Time) string {
	age := el.Age(at)
	if age.Abs() <= relied {
		return ""
	}
	facts, err := el.Facts()
	if err != nil || facts.Perigee >= lowPerigee {
		return "" // what is wrong with the orbit is told where it is flown
	}
	days, when, next := age.Hours()/24, "old", "fetch a newer set"
	if days < 0 {
		days, when, next = -days, "ahead", "take a set of that time"
	}
	return fmt.Sprintf("the element set of %s is %.1f days %s at %s; under 1000 km of perigee (here %.0f km) 3 days are relied on by common practice: %s",
		Label(*el), days, when, at.UTC().Format("2006-01-02T15:04:05Z"), facts.Perigee.Kilometres(), next)
}
