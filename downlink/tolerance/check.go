package tolerance

import (
	"errors"
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// mostDB bounds every figure of a table, so that all sums and squares are finite.
const mostDB = 1e4

// check returns every fault of an item.
func (it *Item) check(place string) []error {
	var faults []error
	say := func(what string, v unit.DB, allowed, next string) {
		faults = append(faults, &unit.RangeError{Quantity: place + what, Value: float64(v), Unit: "dB", Allowed: allowed, Next: next})
	}
	if it.Law < 0 || int(it.Law) >= len(lawNames) {
		faults = append(faults, fmt.Errorf("%s%s is not known", place, it.Law))
	}
	if !(math.Abs(float64(it.Design)) <= mostDB) {
		say("design value", it.Design, "-10000 to 10000 dB", "")
	}
	if !(it.Favourable >= 0 && it.Favourable <= mostDB) {
		say("favourable tolerance", it.Favourable, "0 to 10000 dB", "it says how much better the term may be")
	}
	if !(it.Adverse <= 0 && it.Adverse >= -mostDB) {
		say("adverse tolerance", it.Adverse, "-10000 to 0 dB", "it says how much worse the term may be, as a negative figure")
	}
	if it.Law == SingleValue && (it.Favourable > 0 || it.Adverse < 0) {
		faults = append(faults, fmt.Errorf("%sa single value has no tolerance, and one is given; give the law of the spread, or 0 for both", place))
	}
	return faults
}

// check returns every fault of a criterion.
func (c *Criterion) check(place string) []error {
	var faults []error
	if c.Statement < 0 || int(c.Statement) >= len(statementNames) {
		faults = append(faults, fmt.Errorf("%s%s is not known", place, c.Statement))
	}
	if !(math.Abs(float64(c.Least)) <= mostDB) {
		faults = append(faults, &unit.RangeError{Quantity: place + "least margin", Value: float64(c.Least), Unit: "dB", Allowed: "-10000 to 10000 dB"})
	}
	if c.Statement == MeanLessSigmas && !(c.Sigmas > 0 && c.Sigmas <= 10) {
		faults = append(faults, &unit.RangeError{Quantity: place + "number of sigmas", Value: c.Sigmas, Allowed: "greater than 0 and at most 10", Next: "2 and 3 are usual"})
	}
	if c.Statement != MeanLessSigmas && c.Sigmas != 0 {
		faults = append(faults, fmt.Errorf("%sthe number of sigmas has no effect on %s; leave it out", place, c.Statement))
	}
	return faults
}

// Check returns every fault of a table's items and criteria at once. A table needs
// one item at least.
func Check(items []Item, criteria []Criterion) error {
	var faults []error
	if len(items) == 0 {
		faults = append(faults, errors.New("the table has no item; give one at least"))
	}
	for i := range items {
		faults = append(faults, items[i].check(fmt.Sprintf("item %q: ", items[i].Name))...)
	}
	for i := range criteria {
		faults = append(faults, criteria[i].check(fmt.Sprintf("criterion %q: ", criteria[i].Name))...)
	}
	return errors.Join(faults...)
}
