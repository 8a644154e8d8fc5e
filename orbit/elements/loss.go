package elements

import (
	"fmt"
	"time"

	"slantwise/orbit"
)

// Loss is an object of which a new text knows less than an old one did.
type Loss struct {
	Object string    // name and catalogue number
	Before time.Time // the newest epoch of the object in the old text
	After  time.Time // in the new text; zero when the object is missing there
}

// String returns "object: missing; …" or "object: older; …" with the epochs.
func (l Loss) String() string {
	if l.After.IsZero() {
		return fmt.Sprintf("%s: missing; its epoch was %s", l.Object, formatEpoch(l.Before))
	}
	return fmt.Sprintf("%s: older; its epoch was %s and would be %s", l.Object, formatEpoch(l.Before), formatEpoch(l.After))
}

// Losses compares the sets of an old text with those of a new one, and returns each
// object that is missing from the new one or has only older epochs there, in the
// order of the old text. Objects are told apart as in Choose.
func Losses(before, after []orbit.Elements) []Loss {
	newest := map[string]time.Time{}
	for _, c := range Choose(after, Newest, time.Time{}) {
		newest[objectKey(&c.Elements)] = c.Epoch
	}
	var out []Loss
	for _, c := range Choose(before, Newest, time.Time{}) {
		epoch, there := newest[objectKey(&c.Elements)]
		if !there || epoch.Before(c.Epoch) {
			out = append(out, Loss{Object: Label(c.Elements), Before: c.Epoch, After: epoch})
		}
	}
	return out
}
