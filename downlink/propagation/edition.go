package propagation

import (
	"fmt"
	"slices"
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

// onlyEditions lists the Recommendations of which one edition is built in.
var onlyEditions = []string{"453-14", "834-9", "835-6", "837-7", "838-3", "839-4"}

// With returns e with the edition that name says, such as "676-12" or "P.676-12". That
// of a Recommendation with one edition built in changes nothing.
func (e Editions) With(name string) (Editions, error) {
	plain := plainEdition(name)
	switch plain {
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
		if !slices.Contains(onlyEditions, plain) {
			return e, fmt.Errorf("edition %q is not built in; give one of %s, or of those with one edition %s", name, strings.Join(editionChoices, ", "), strings.Join(onlyEditions, ", "))
		}
	}
	return e, nil
}

// plainEdition turns "P.676-12" and "ITU-R P.676-12" into "676-12".
func plainEdition(name string) string {
	return strings.TrimPrefix(strings.TrimPrefix(strings.ToUpper(name), "ITU-R "), "P.")
}

// EditionsNamed returns the newest editions with those of the names in their places. It
// fails for one that is not built in and for two of one Recommendation.
func EditionsNamed(names []string) (Editions, error) {
	e := Newest
	had := map[string]string{}
	for _, name := range names {
		var err error
		if e, err = e.With(name); err != nil {
			return Newest, err
		}
		recommendation, _, _ := strings.Cut(plainEdition(name), "-")
		if before, twice := had[recommendation]; twice && before != plainEdition(name) {
			return Newest, fmt.Errorf("editions %s and %s are of one Recommendation; keep one", before, plainEdition(name))
		}
		had[recommendation] = plainEdition(name)
	}
	return e, nil
}

// editionModels are the models of a batch that follow a Recommendation of which more
// than one edition is built in.
var editionModels = map[string][]string{
	"618": {"rain", "scintillation", "total", "xpd"},
	"676": {"gas-specific", "gas-slant", "total"},
	"840": {"cloud", "total"},
}

// EditionsWithoutPart returns those of the names that make no difference to a model of a
// batch, as its Recommendation has no part in it.
func EditionsWithoutPart(names []string, model string) []string {
	var out []string
	for _, name := range names {
		recommendation, _, _ := strings.Cut(plainEdition(name), "-")
		if models, several := editionModels[recommendation]; several && !slices.Contains(models, model) {
			out = append(out, name)
		}
	}
	return out
}

// check returns an error for an edition that is not built in.
func (e Editions) check() error {
	if (e.P618 == 14 || e.P618 == 13) && (e.P676 == 13 || e.P676 == 12) && (e.P840 == 9 || e.P840 == 8) {
		return nil
	}
	return fmt.Errorf("editions P.618-%d, P.676-%d, P.840-%d: built in are %s; start from propagation.Newest",
		e.P618, e.P676, e.P840, strings.Join(editionChoices, ", "))
}
