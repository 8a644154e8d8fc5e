package planfiles

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"regexp"
	"strconv"
	"strings"
	"time"
	_ "time/tzdata" // time zones on machines that have no table of them

	ics "github.com/arran4/golang-ical"
)

// CalendarOutages reads outages from a calendar, an event an outage. LOCATION says of
// what: "Station", or "Station, antenna". Cancelled events and those that take no time
// (TRANSP:TRANSPARENT) are passed over. Refused, each with the line of its event: events
// that recur, that last whole days, or whose times have no time zone.
//
// Source: RFC 5545, sections 3.6.1 and 3.8.
func CalendarOutages(file string, r io.Reader) ([]Outage, error) {
	events, lines, err := readEvents(file, r)
	if err != nil {
		return nil, err
	}
	var out []Outage
	var faults []error
	for i, e := range events {
		place := fmt.Sprintf("%s: line %d", file, lines[i])
		if value(e, ics.ComponentPropertyStatus) == string(ics.ObjectStatusCancelled) || value(e, ics.ComponentPropertyTransp) == "TRANSPARENT" {
			continue
		}
		o, err := outageOf(place, e)
		if err != nil {
			if len(faults) < mostFaults {
				faults = append(faults, fmt.Errorf("%s: event %q: %w", place, value(e, ics.ComponentPropertySummary), err))
			}
			continue
		}
		out = append(out, o)
	}
	return out, errors.Join(faults...)
}

// readEvents reads the events of a calendar with the lines in which they begin. The
// library is told to stop where lines do not pair up, and what it still trips over is an
// error, too.
func readEvents(file string, r io.Reader) (events []*ics.VEvent, lines []int, err error) {
	text, err := readAll(file, r)
	if err != nil {
		return nil, nil, err
	}
	if err := balanced(file, text); err != nil {
		return nil, nil, err
	}
	defer func() {
		if fault := recover(); fault != nil {
			events, lines, err = nil, nil, fmt.Errorf("%s: it cannot be read as a calendar: %v", file, fault)
		}
	}()
	cal, err := ics.ParseCalendar(bytes.NewReader(text))
	if err != nil {
		return nil, nil, fmt.Errorf("%s: it cannot be read as a calendar: %w; give a file that begins with BEGIN:VCALENDAR", file, err)
	}
	events = cal.Events()
	for i, line := range bytes.Split(text, []byte("\n")) {
		if strings.EqualFold(strings.TrimSpace(string(line)), "BEGIN:VEVENT") {
			lines = append(lines, i+1)
		}
	}
	if len(lines) != len(events) {
		return nil, nil, fmt.Errorf("%s: %d events begin, and %d could be read; is one inside another?", file, len(lines), len(events))
	}
	return events, lines, nil
}

// balanced checks that what begins ends.
func balanced(file string, text []byte) error {
	var open []string
	for i, raw := range bytes.Split(text, []byte("\n")) {
		line := strings.TrimRight(string(raw), "\r")
		upper := strings.ToUpper(strings.TrimSpace(line))
		if name, ok := strings.CutPrefix(upper, "BEGIN:"); ok {
			open = append(open, name)
			continue
		}
		name, ok := strings.CutPrefix(upper, "END:")
		if !ok {
			continue
		}
		if n := len(open); n == 0 || open[n-1] != name {
			return fmt.Errorf("%s: line %d: END:%s without its BEGIN", file, i+1, name)
		}
		open = open[:len(open)-1]
	}
	if len(open) > 0 {
		return fmt.Errorf("%s: BEGIN:%s has no END; is the file cut short?", file, open[len(open)-1])
	}
	return nil
}

func value(e *ics.VEvent, property ics.ComponentProperty) string {
	if p := e.GetProperty(property); p != nil {
		return strings.TrimSpace(p.Value)
	}
	return ""
}

func outageOf(place string, e *ics.VEvent) (Outage, error) {
	for _, p := range []ics.ComponentProperty{ics.ComponentPropertyRrule, ics.ComponentPropertyRdate, ics.ComponentPropertyExrule} {
		if e.HasProperty(p) {
			return Outage{}, fmt.Errorf("%s makes it recur, which is not supported; export each time as an event of its own", p)
		}
	}
	o := Outage{Place: place, Reason: value(e, ics.ComponentPropertySummary)}
	where := value(e, ics.ComponentPropertyLocation)
	if where == "" {
		return o, errors.New("LOCATION is missing; let it name the station, or the station and its antenna with a comma between them")
	}
	station, antenna, _ := strings.Cut(where, ",")
	o.Station, o.Antenna = strings.TrimSpace(station), strings.TrimSpace(antenna)
	var err error
	if o.Start, err = eventTime(e, ics.ComponentPropertyDtStart); err != nil {
		return o, err
	}
	if o.End, err = eventEnd(e, o.Start); err != nil {
		return o, err
	}
	if !o.End.After(o.Start) {
		return o, fmt.Errorf("it ends at %s and does not end after its start %s; are the two reversed?", o.End.Format(time.RFC3339), o.Start.Format(time.RFC3339))
	}
	return o, nil
}

// eventEnd returns DTEND, or DTSTART and DURATION.
func eventEnd(e *ics.VEvent, start time.Time) (time.Time, error) {
	if e.HasProperty(ics.ComponentPropertyDtEnd) || !e.HasProperty(ics.ComponentPropertyDuration) {
		return eventTime(e, ics.ComponentPropertyDtEnd)
	}
	text := value(e, ics.ComponentPropertyDuration)
	d, ok := parseLength(text)
	if !ok {
		return time.Time{}, fmt.Errorf("DURATION %q is not a length of time; give one as PT1H30M", text)
	}
	return start.Add(d), nil
}

// eventTime reads a DATE-TIME in UTC or in a named time zone.
func eventTime(e *ics.VEvent, property ics.ComponentProperty) (time.Time, error) {
	p := e.GetProperty(property)
	if p == nil {
		return time.Time{}, fmt.Errorf("%s is missing; give it", property)
	}
	text := strings.TrimSpace(p.Value)
	if kind := p.ICalParameters["VALUE"]; len(kind) > 0 && strings.EqualFold(kind[0], "DATE") || len(text) == len("20260310") {
		return time.Time{}, fmt.Errorf("%s %s is a whole day, and nobody knows by whose clock; give times in UTC or with a TZID", property, text)
	}
	if utc, ok := strings.CutSuffix(text, "Z"); ok {
		t, err := time.Parse("20060102T150405", utc)
		if err != nil {
			return time.Time{}, fmt.Errorf("%s %q is not a time; give one as 20260310T140500Z", property, text)
		}
		return t, nil
	}
	zones := p.ICalParameters["TZID"]
	if len(zones) == 0 {
		return time.Time{}, fmt.Errorf("%s %s has no time zone; let it end in Z, or name one in TZID", property, text)
	}
	name := strings.Trim(zones[0], `"`)
	zone, err := time.LoadLocation(name)
	if err != nil || name == "" || name == "Local" {
		return time.Time{}, fmt.Errorf("%s: TZID %q is not in the table of time zones; give a name as Europe/London", property, name)
	}
	t, err := time.ParseInLocation("20060102T150405", text, zone)
	if err != nil {
		return time.Time{}, fmt.Errorf("%s %q is not a time; give one as 20260310T140500", property, text)
	}
	if t.Format("20060102T150405") != text {
		return time.Time{}, fmt.Errorf("%s %s does not exist in %s: the clock is put forward over it; give it in UTC", property, text, name)
	}
	return t.UTC(), nil
}

var length = regexp.MustCompile(`^P(?:(\d{1,4})W)?(?:(\d{1,5})D)?(?:T(?:(\d{1,6})H)?(?:(\d{1,7})M)?(?:(\d{1,8})S)?)?$`)

// parseLength reads a DURATION that is not negative.
func parseLength(s string) (time.Duration, bool) {
	m := length.FindStringSubmatch(strings.TrimPrefix(s, "+"))
	if m == nil {
		return 0, false
	}
	total := time.Duration(0)
	for i, part := range []time.Duration{7 * 24 * time.Hour, 24 * time.Hour, time.Hour, time.Minute, time.Second} {
		if n, err := strconv.Atoi(m[i+1]); err == nil {
			total += time.Duration(n) * part
		}
	}
	return total, total > 0
}
