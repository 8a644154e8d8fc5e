package elements

import (
	"strings"
	"testing"
	"time"

	"slantwise/orbit"
)

// TestCaution: 3 days under 1000 km of perigee (common practice).
func TestCaution(t *testing.T) {
	low := exampleSet() // about 500 km
	high := low
	high.MeanMotion = 12.5 // about 1500 km
	for name, c := range map[string]struct {
		el   orbit.Elements
		at   time.Time
		want string
	}{
		"low, three days":     {low, day(3), ""},
		"low, older":          {low, day(3.2), "is 3.2 days old at 2026-03-13T16:48:00Z; under 1000 km of perigee (here 488 km) 3 days are relied on by common practice: fetch a newer set"},
		"low, far before":     {low, day(-4), "is 4.0 days ahead at 2026-03-06T12:00:00Z; under 1000 km of perigee (here 488 km) 3 days are relied on by common practice: take a set of that time"},
		"high, much older":    {high, day(30), ""},
		"low, three and more": {low, day(3).Add(time.Second), "is 3.0 days old"},
	} {
		t.Run(name, func(t *testing.T) {
			got := Choose([]orbit.Elements{c.el}, Newest, c.at)[0].Caution
			if (c.want == "") != (got == "") || !strings.Contains(got, c.want) {
				t.Errorf("caution %q, want %q in it", got, c.want)
			}
			if got != "" && (!strings.Contains(got, "WAGTAIL 1 (99001)") || !strings.Contains(got, "common practice")) {
				t.Errorf("caution %q lacks the object or the reason", got)
			}
		})
	}
}
