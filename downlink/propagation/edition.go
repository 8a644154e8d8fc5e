package propagation

import (
	"fmt"
	"strings"
)

// Editions says which edition of a Recommendation a calculation follows, for those
// of which more than one is built in. The other Recommendations are at the edition
// that doc.go names.
type Editions struct {
	P618 int // 14 or 13: they differ in the percentage at which gas and cloud are held
	P676 int // 13 or 12: they differ in Annex 2
	P840 int // 9 or 8: they differ in the absorption coefficient of liquid water
}

// Newest holds the editions in force.
var Newest = Editions{P618: 14, P676: 13, P840: 9}

// editionChoices lists what With takes, the newest of each first.
var editionChoices = []string{"618-14", "618-13", "676-13", "676-12", "840-9", "840-8"}

// With returns e with the edition that name says, such as "676-12" or "P.676-12".
func (e Editions) With(name string) (Editions, error) {
	switch strings.TrimPrefix(strings.TrimPrefix(strings.ToUpper(name), "ITU-R "), "P.") {
	case "618-14":
		e.P618 = 14
	case "618-13":
		e.P618 = 13
	case "676-13":
		e.P676 = 13
	case "676-12":
		e.P676 = 12
	case "840-9":
		e.P840 = 9
	case "840-8":
		e.P840 = 8
	default:
		return e, fmt.Errorf("edition %q is not built in; give one of %s", name, strings.Join(editionChoices, ", "))
	}
	return e, nil
}

// check returns an error for an edition that is not built in.
func (e Editions) check() error {
	if (e.P618 == 14 || e.P618 == 13) && (e.P676 == 13 || e.P676 == 12) && (e.P840 == 9 || e.P840 == 8) {
		return nil
	}
	return fmt.Errorf("editions P.618-%d, P.676-%d, P.840-%d: built in are %s; start from propagation.Newest",
		e.P618, e.P676, e.P840, strings.Join(editionChoices, ", "))
}
