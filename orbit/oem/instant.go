package oem

import (
	"fmt"
	"time"
)

// scale is a time scale of the standard.
type scale string

// The scales that are read.
const (
	utc scale = "UTC"
	tai scale = "TAI"
	tt  scale = "TT"
	gps scale = "GPS"
	ut1 scale = "UT1"
)

// ttAhead and gpsBehind are how TT and GPS time differ from TAI; both are exact.
const (
	ttAhead   = 32184 * time.Millisecond
	gpsBehind = 19 * time.Second
)

// leap is an instant from which on TAI is ahead of UTC by so many seconds.
type leap struct {
	year  int
	month time.Month
	ahead int
}

// leaps are all leap seconds up to LeapsKnownUntil: the IERS list of leap seconds (leap-seconds.list), as the time zone
// database ships it.
var leaps = [...]leap{
	{1972, 1, 10}, {1972, 7, 11}, {1973, 1, 12}, {1974, 1, 13}, {1975, 1, 14}, {1976, 1, 15}, {1977, 1, 16},
	{1978, 1, 17}, {1979, 1, 18}, {1980, 1, 19}, {1981, 7, 20}, {1982, 7, 21}, {1983, 7, 22}, {1985, 7, 23},
	{1988, 1, 24}, {1990, 1, 25}, {1991, 1, 26}, {1992, 7, 27}, {1993, 7, 28}, {1994, 7, 29}, {1996, 1, 30},
	{1997, 7, 31}, {1999, 1, 32}, {2006, 1, 33}, {2009, 1, 34}, {2012, 7, 35}, {2015, 7, 36}, {2017, 1, 37},
}

// LeapsKnownUntil is where the list of leap seconds ends. Later instants in TAI, TT or
// GPS time are taken with the last offset, and a warning says so.
var LeapsKnownUntil = time.Date(2026, 6, 28, 0, 0, 0, 0, time.UTC)

// utcOf turns a reading of a clock of the scale into UTC; problem is empty when that
// can be done.
func (s scale) utcOf(t time.Time, ut1MinusUTC time.Duration) (at time.Time, problem string) {
	switch s {
	case utc:
		return t, ""
	case ut1:
		return t.Add(-ut1MinusUTC), ""
	case tt:
		t = t.Add(-ttAhead)
	case gps:
		t = t.Add(gpsBehind)
	}
	for i := len(leaps) - 1; i >= 0; i-- {
		l := &leaps[i]
		at := t.Add(-time.Duration(l.ahead) * time.Second)
		if !at.Before(time.Date(l.year, l.month, 1, 0, 0, 0, 0, time.UTC)) {
			return at, ""
		}
	}
	return t, fmt.Sprintf("%s before 1972 has no whole number of seconds to UTC", s)
}

// instant reads a CCSDS time in calendar or day-of-year form, to the nanosecond; zone Z may
// stand at its end. problem is empty when it succeeded.
func instant(s string) (t time.Time, problem string) {
	const form = "is not a time as 2026-03-10T14:05:00.123 or 2026-069T14:05:00.123"
	b := s
	if n := len(b); n > 0 && b[n-1] == 'Z' {
		b = b[:n-1]
	}
	if len(b) < 17 || b[4] != '-' {
		return t, form
	}
	year, ok := digits(b[:4])
	month, day, rest := 1, 0, ""
	if b[7] == '-' {
		var okM, okD bool
		month, okM = digits(b[5:7])
		day, okD = digits(b[8:10])
		ok = ok && okM && okD
		rest = b[10:]
		if ok && (month < 1 || month > 12 || day < 1 || day > time.Date(year, time.Month(month)+1, 0, 0, 0, 0, 0, time.UTC).Day()) {
			return t, "is no day of the calendar"
		}
	} else {
		var okD bool
		day, okD = digits(b[5:8])
		ok = ok && okD
		rest = b[8:]
		if ok && (day < 1 || day > time.Date(year, 12, 31, 0, 0, 0, 0, time.UTC).YearDay()) {
			return t, "is no day of the calendar"
		}
	}
	if len(rest) < 9 || rest[0] != 'T' || rest[3] != ':' || rest[6] != ':' {
		return t, form
	}
	h, okH := digits(rest[1:3])
	m, okM := digits(rest[4:6])
	sec, okS := digits(rest[7:9])
	ns, okN := fraction(rest[9:])
	if !ok || !okH || !okM || !okS || !okN {
		return t, form
	}
	if sec == 60 {
		return t, "is a leap second, which cannot be used; leave the state out"
	}
	if h > 23 || m > 59 || sec > 59 {
		return t, "is no time of day"
	}
	if year < 1957 || year > 2056 {
		return t, "is not in the years 1957 to 2056"
	}
	return time.Date(year, time.Month(month), day, h, m, sec, ns, time.UTC), ""
}

func digits(s string) (n int, ok bool) {
	for _, c := range []byte(s) {
		if c < '0' || c > '9' {
			return 0, false
		}
		n = 10*n + int(c-'0')
	}
	return n, true
}

// fraction reads ".123" as nanoseconds, cut off behind the ninth digit.
func fraction(s string) (ns int, ok bool) {
	if s == "" {
		return 0, true
	}
	if s[0] != '.' {
		return 0, false
	}
	weight := 100_000_000
	for _, c := range []byte(s[1:]) {
		if c < '0' || c > '9' {
			return 0, false
		}
		ns += int(c-'0') * weight
		weight /= 10
	}
	return ns, true
}
