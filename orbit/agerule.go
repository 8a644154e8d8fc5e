package orbit

import (
	"errors"
	"fmt"
	"math"
	"time"

	"slantwise/orbit/unit"
)

// Growth is a standard deviation that grows with the age of an element set. The
// parts are independent, so their squares add:
//
//	σ² = AtEpoch² + (PerDay d)² + (PerDay2 d²)²
//
// with d the days between the epoch and the instant, before or after. PerDay stands
// for an error of the mean motion, PerDay2 for one of the drag. Each part is 0 or
// greater: what is known of an orbit does not get better with time.
type Growth struct {
	AtEpoch unit.Length
	PerDay  unit.Length // a day
	PerDay2 unit.Length // a day squared
}

// At returns the standard deviation d days from the epoch.
func (g Growth) At(d float64) unit.Length {
	return unit.Length(math.Hypot(math.Hypot(g.AtEpoch.Metres(), g.PerDay.Metres()*d), g.PerDay2.Metres()*d*d))
}

// AgeRule tells by common practice how uncertain a position from SGP4 is, by the age
// of the element set alone.
type AgeRule struct{ Radial, Along, Across Growth }

// DefaultAgeRule returns the rule for low orbits where none is given: common practice,
// no measurement. An element set of a low orbit is good to about a kilometre at its
// epoch and grows worse by one to three kilometres a day along the track (Vallado and
// Crawford, SGP4 Orbit Determination, AIAA 2008-6770; from memory); in quiet days of the
// Sun, well-tracked objects stay below, in a storm or low down all go above.
func DefaultAgeRule() AgeRule {
	const km, m = unit.Kilometre, unit.Metre
	return AgeRule{
		Radial: Growth{AtEpoch: 200 * m, PerDay: 50 * m},
		Along:  Growth{AtEpoch: 700 * m, PerDay: 1 * km, PerDay2: 200 * m},
		Across: Growth{AtEpoch: 300 * m, PerDay: 50 * m},
	}
}

// mostSpread is the greatest standard deviation that a rule or a covariance may state
// at its epoch, or add in a day: as far as the Earth is wide, no direction is known.
const mostSpread = 10000 * unit.Kilometre

// Validate returns nil, or a *unit.RangeError for each part that is negative (the
// rule would shrink) or not finite, joined.
func (r AgeRule) Validate() error {
	var faults []error
	for _, axis := range []struct {
		name string
		g    Growth
	}{{"radial", r.Radial}, {"along", r.Along}, {"across", r.Across}} {
		for _, part := range []struct {
			name, unit string
			v          unit.Length
		}{{"at the epoch", "km", axis.g.AtEpoch}, {"a day", "km", axis.g.PerDay}, {"a day squared", "km", axis.g.PerDay2}} {
			if !(part.v >= 0 && part.v <= mostSpread) {
				faults = append(faults, &unit.RangeError{Quantity: "position uncertainty " + axis.name + " " + part.name,
					Value: part.v.Kilometres(), Unit: part.unit, Allowed: "0 to 10000 km",
					Next: "give one standard deviation; it does not shrink with age"})
			}
		}
	}
	return errors.Join(faults...)
}

// String writes the rule with its figures.
func (r AgeRule) String() string {
	axis := func(name string, g Growth) string {
		s := fmt.Sprintf("%s %g km", name, g.AtEpoch.Kilometres())
		if g.PerDay > 0 {
			s += fmt.Sprintf(" and %g km a day", g.PerDay.Kilometres())
		}
		if g.PerDay2 > 0 {
			s += fmt.Sprintf(" and %g km a day²", g.PerDay2.Kilometres())
		}
		return s
	}
	return axis("along", r.Along) + ", " + axis("across", r.Across) + ", " + axis("radially", r.Radial)
}

// AgeUncertainty is an AgeRule applied to an element set, or to another orbit of one
// instant. It knows a spread at every
// instant.
type AgeUncertainty struct {
	Rule  AgeRule
	Epoch time.Time // of the element set
	Of    string    // what is of that instant, in words; empty: the element set
}

// At returns the spread at t.
func (u AgeUncertainty) At(t time.Time) (Spread, error) {
	d := t.Sub(u.Epoch).Hours() / 24
	return Spread{Radial: u.Rule.Radial.At(d), Along: u.Rule.Along.At(d), Across: u.Rule.Across.At(d)}, nil
}

// Basis names the rule, its figures and the epoch.
func (u AgeUncertainty) Basis() string {
	of := u.Of
	if of == "" {
		of = "the element set"
	}
	return "by the age of " + of + " of " + u.Epoch.UTC().Format(timeLayout) + ", one standard deviation, squares added: " + u.Rule.String()
}
