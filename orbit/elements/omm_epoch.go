package elements

import (
	"regexp"
	"strconv"
	"time"
)

// calendarTime and ordinalTime are the two CCSDS ASCII time codes (CCSDS 301.0-B,
// codes A and B).
var (
	calendarTime = regexp.MustCompile(`^([0-9]{4})-([0-9]{2})-([0-9]{2})T([0-9]{2}):([0-9]{2}):([0-9]{2})(?:\.([0-9]*))?Z?$`)
	ordinalTime  = regexp.MustCompile(`^([0-9]{4})-([0-9]{3})T([0-9]{2}):([0-9]{2}):([0-9]{2})(?:\.([0-9]*))?Z?$`)
)

// parseEpoch reads a time in calendar or day-of-year form, with or without Z; it is
// UTC. exact is false when digits beyond the nanosecond were rounded away. problem
// is empty when it succeeded.
func parseEpoch(s string) (t time.Time, exact bool, problem, next string) {
	const form = "write it as 2026-03-10T14:05:00.123456 or 2026-069T14:05:00.123456"
	var year, month, day, clock int // clock: index of the hours
	m := calendarTime.FindStringSubmatch(s)
	if m != nil {
		year, month, day, clock = number(m[1]), number(m[2]), number(m[3]), 4
		if month < 1 || month > 12 {
			return t, false, "month " + m[2] + " is not 01 to 12", form
		}
		if last := time.Date(year, time.Month(month)+1, 0, 0, 0, 0, 0, time.UTC).Day(); day < 1 || day > last {
			return t, false, "day " + m[3] + " is not 01 to " + strconv.Itoa(last) + ", the last of that month", form
		}
	} else if m = ordinalTime.FindStringSubmatch(s); m != nil {
		year, month, day, clock = number(m[1]), 1, number(m[2]), 3
		if last := daysIn(year); day < 1 || day > last {
			return t, false, "day " + m[2] + " is not 001 to " + strconv.Itoa(last) + ", the last of that year", form
		}
	} else {
		return t, false, "is not a time in UTC", form
	}
	h, min, sec := number(m[clock]), number(m[clock+1]), number(m[clock+2])
	switch {
	case h > 23:
		return t, false, "hour " + m[clock] + " is not 00 to 23", form
	case min > 59:
		return t, false, "minute " + m[clock+1] + " is not 00 to 59", form
	case sec == 60:
		return t, false, "the leap second 60 cannot be an epoch: SGP4 counts days of 86,400 s", "give the elements for another epoch"
	case sec > 60:
		return t, false, "second " + m[clock+2] + " is not 00 to 59", form
	}
	ns, exact := nanoseconds(m[clock+3])
	return time.Date(year, time.Month(month), day, h, min, sec, 0, time.UTC).Add(ns), exact, "", ""
}

// number reads digits that a pattern has matched already.
func number(digits string) int {
	n := 0
	for _, c := range []byte(digits) {
		n = 10*n + int(c-'0')
	}
	return n
}

// nanoseconds turns the digits behind a decimal point of seconds into a duration,
// rounded to the nanosecond.
func nanoseconds(digits string) (d time.Duration, exact bool) {
	exact = true
	for i := range 9 {
		d *= 10
		if i < len(digits) {
			d += time.Duration(digits[i] - '0')
		}
	}
	for i := 9; i < len(digits); i++ {
		if digits[i] != '0' {
			exact = false
		}
	}
	if len(digits) > 9 && digits[9] >= '5' {
		d++
	}
	return d, exact
}
