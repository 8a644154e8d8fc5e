package elements

import (
	"regexp"
	"strconv"
)

var (
	shortDesignator = regexp.MustCompile(`^([0-9]{2})([0-9]{3}[A-Z]{1,3})$`)
	longDesignator  = regexp.MustCompile(`^([0-9]{4})-([0-9]{3}[A-Z]{1,3})$`)
)

// Two-digit years of a TLE: 57 to 99 are 1957 to 1999, 00 to 56 are 2000 to 2056.
const (
	firstYear = 1957
	lastYear  = 2056
)

func fullYear(twoDigits int) int {
	if twoDigits >= firstYear%100 {
		return 1900 + twoDigits
	}
	return 2000 + twoDigits
}

// longForm turns "26001A" into "2026-001A"; ok is false when s has another form and
// comes back as it is.
func longForm(s string) (long string, ok bool) {
	m := shortDesignator.FindStringSubmatch(s)
	if m == nil {
		return s, s == ""
	}
	year, err := strconv.Atoi(m[1])
	if err != nil {
		return s, false
	}
	return strconv.Itoa(fullYear(year)) + "-" + m[2], true
}

// shortForm turns "2026-001A" into "26001A". Another text that fits the eight
// columns of a TLE stays as it is; ok is false when it does not fit.
func shortForm(s string) (short string, ok bool) {
	m := longDesignator.FindStringSubmatch(s)
	if m == nil {
		for _, r := range s {
			if r < ' ' || r > '~' {
				return "", false
			}
		}
		if len(s) > 8 {
			return "", false
		}
		return s, true
	}
	if m[1] < strconv.Itoa(firstYear) || m[1] > strconv.Itoa(lastYear) {
		return "", false
	}
	return m[1][2:] + m[2], true
}
