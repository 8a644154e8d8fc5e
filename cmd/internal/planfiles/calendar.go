package planfiles

import (
	"crypto/sha256"
	"fmt"
	"io"
	"strconv"
	"time"

	ics "github.com/arran4/golang-ical"
)

// Event is a contact in a calendar.
type Event struct {
	UID         string // stays the contact's from export to export
	Sequence    int    // counts the exports
	Cancelled   bool   // it was in an earlier export and is not in the plan any more
	Start, End  time.Time
	Stamp       time.Time // instant of planning
	Summary     string
	Description string
	Of          EventOf
}

// EventOf says of what an event is.
type EventOf struct{ Request, Spacecraft, Station, Antenna string }

// Names of what our events carry beside the standard's properties.
const (
	propertyRequest    = ics.ComponentProperty("X-SLANTWISE-REQUEST")
	propertySpacecraft = ics.ComponentProperty("X-SLANTWISE-SPACECRAFT")
	propertyStation    = ics.ComponentProperty("X-SLANTWISE-STATION")
	propertyAntenna    = ics.ComponentProperty("X-SLANTWISE-ANTENNA")
)

const calendarTime = "20060102T150405Z"

// WriteCalendar writes events. A DATE-TIME has whole seconds: an event begins with the
// second in which its contact begins and ends with the one in which the contact has ended.
//
// Source: RFC 5545, sections 3.3.5, 3.4 and 3.6.1.
func WriteCalendar(w io.Writer, events []Event) error {
	cal := ics.NewCalendarFor("slantwise")
	cal.SetProductId("-//slantwise//contact plan//EN")
	cal.SetCalscale("GREGORIAN")
	for _, e := range events {
		v := cal.AddEvent(e.UID)
		v.SetProperty(ics.ComponentPropertyDtstamp, e.Stamp.UTC().Format(calendarTime))
		v.SetProperty(ics.ComponentPropertyDtStart, e.Start.UTC().Truncate(time.Second).Format(calendarTime))
		v.SetProperty(ics.ComponentPropertyDtEnd, ceilSecond(e.End).Format(calendarTime))
		v.SetSequence(e.Sequence)
		v.SetSummary(e.Summary)
		v.SetDescription(e.Description)
		v.SetLocation(e.Of.Station + ", " + e.Of.Antenna)
		status := ics.ObjectStatusConfirmed
		if e.Cancelled {
			status = ics.ObjectStatusCancelled
		}
		v.SetStatus(status)
		for _, x := range []struct {
			property ics.ComponentProperty
			value    string
		}{{propertyRequest, e.Of.Request}, {propertySpacecraft, e.Of.Spacecraft}, {propertyStation, e.Of.Station}, {propertyAntenna, e.Of.Antenna}} {
			if x.value != "" {
				v.SetProperty(x.property, x.value)
			}
		}
	}
	if err := cal.SerializeTo(w, ics.WithNewLine("\r\n")); err != nil {
		return fmt.Errorf("write the calendar: %w", err)
	}
	return nil
}

func ceilSecond(t time.Time) time.Time {
	return t.UTC().Add(time.Second - time.Nanosecond).Truncate(time.Second)
}

// ReadCalendar reads a calendar that WriteCalendar wrote. Events of others are passed
// over.
func ReadCalendar(file string, r io.Reader) ([]Event, error) {
	events, lines, err := readEvents(file, r)
	if err != nil {
		return nil, err
	}
	var out []Event
	for i, v := range events {
		e := Event{
			UID: v.Id(), Cancelled: value(v, ics.ComponentPropertyStatus) == string(ics.ObjectStatusCancelled),
			Summary: value(v, ics.ComponentPropertySummary), Description: value(v, ics.ComponentPropertyDescription),
			Of: EventOf{value(v, propertyRequest), value(v, propertySpacecraft), value(v, propertyStation), value(v, propertyAntenna)},
		}
		if e.Of.Spacecraft == "" {
			continue
		}
		place := fmt.Sprintf("%s: line %d: event %q", file, lines[i], e.UID)
		if e.UID == "" {
			return nil, fmt.Errorf("%s: UID is missing; export the calendar into a new file", place)
		}
		if e.Start, err = eventTime(v, ics.ComponentPropertyDtStart); err == nil {
			e.End, err = eventEnd(v, e.Start)
		}
		if err == nil {
			e.Stamp, err = eventTime(v, ics.ComponentPropertyDtstamp)
		}
		if err != nil {
			return nil, fmt.Errorf("%s: %w", place, err)
		}
		if s := value(v, ics.ComponentPropertySequence); s != "" {
			if e.Sequence, err = strconv.Atoi(s); err != nil || e.Sequence < 0 || e.Sequence > 1<<30 {
				return nil, fmt.Errorf("%s: SEQUENCE %q is not allowed; it must be a whole number", place, s)
			}
		}
		out = append(out, e)
	}
	return out, nil
}

// Revise gives the events of a new export their UIDs and sequence numbers. An event is
// the one of the earlier export that is of the same request, spacecraft, station and
// antenna and shares the most time with it. Earlier events that are in the new export no
// more follow as cancelled, unless they were over at the instant of planning, the stamp.
func Revise(earlier, now []Event, stamp time.Time) []Event {
	used := make([]bool, len(earlier))
	taken := map[string]bool{}
	for _, e := range earlier {
		taken[e.UID] = true
	}
	out := make([]Event, 0, len(now))
	for _, e := range now {
		best, most := -1, time.Duration(0)
		for i, old := range earlier {
			if !used[i] && old.Of == e.Of {
				if share := overlap(old, e); share > most {
					best, most = i, share
				}
			}
		}
		if best >= 0 {
			used[best] = true
			e.UID, e.Sequence = earlier[best].UID, earlier[best].Sequence+1
		} else {
			e.UID, e.Sequence = newUID(e, taken), 0
			taken[e.UID] = true
		}
		out = append(out, e)
	}
	for i, old := range earlier {
		if used[i] {
			continue
		}
		if stamp.After(old.Stamp) {
			old.Stamp = stamp
		}
		if over := !old.Cancelled && !old.End.After(old.Stamp); over {
			out = append(out, old)
			continue
		}
		old.Cancelled, old.Sequence = true, old.Sequence+1
		out = append(out, old)
	}
	return out
}

func overlap(a, b Event) time.Duration {
	from, to := a.Start, a.End
	if b.Start.After(from) {
		from = b.Start
	}
	if b.End.Before(to) {
		to = b.End
	}
	return to.Sub(from)
}

// newUID makes a UID from what an event is of and when it begins.
func newUID(e Event, taken map[string]bool) string {
	for n := 0; ; n++ {
		sum := sha256.Sum256(fmt.Appendf(nil, "%q %q %q %q %s %d", e.Of.Request, e.Of.Spacecraft, e.Of.Station, e.Of.Antenna, e.Start.UTC().Format(time.RFC3339Nano), n))
		if uid := fmt.Sprintf("%x@slantwise.invalid", sum[:12]); !taken[uid] {
			return uid
		}
	}
}
