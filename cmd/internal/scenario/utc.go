package scenario

import (
	"fmt"
	"strings"
	"time"
)

// The instants that a scenario may name: from the first satellite to where a
// two-digit year of an element set ends.
var (
	firstInstant = time.Date(1957, 1, 1, 0, 0, 0, 0, time.UTC)
	lastInstant  = time.Date(2057, 1, 1, 0, 0, 0, 0, time.UTC)
)

// ParseUTC reads an instant in ISO 8601, in UTC and ending in Z: date, T, hours and
// minutes, optionally seconds with up to nine decimals. A time without a zone or in
// another one is refused, as is one before 1957 or after 2056.
func ParseUTC(s string) (time.Time, error) {
	const next = "give UTC as in 2026-03-10T14:05:00Z"
	body, utc := strings.CutSuffix(s, "Z")
	for _, layout := range []string{"2006-01-02T15:04:05", "2006-01-02T15:04"} {
		t, err := time.Parse(layout, body)
		if err != nil {
			continue
		}
		switch {
		case !utc:
			return time.Time{}, fmt.Errorf("%q has no time zone; %s (with the Z)", s, next)
		case strings.Contains(body, ","):
			return time.Time{}, fmt.Errorf("%q has a comma; %s", s, next)
		case t.Before(firstInstant) || !t.Before(lastInstant):
			return time.Time{}, fmt.Errorf("%q is not allowed; it must be in the years 1957 to 2056", s)
		}
		return t, nil
	}
	if strings.Contains(body, ":60") {
		return time.Time{}, fmt.Errorf("%q is a leap second or no time at all, and neither can be used; %s", s, next)
	}
	return time.Time{}, fmt.Errorf("%q is not an instant in UTC; %s", s, next)
}
