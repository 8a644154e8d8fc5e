package planfiles

import (
	"bytes"
	"errors"
	"io"
	"strings"
	"testing"
	"time"
)

// clock reads times as a scenario does, as far as the tests need it.
func clock(s string) (time.Time, error) {
	t, err := time.Parse("2006-01-02T15:04:05Z", s)
	if err != nil {
		return time.Time{}, errors.New("not a time in UTC")
	}
	return t, nil
}

const windowHead = "request,spacecraft,station,antenna,window_start_utc,window_end_utc,minimum_s,desired_s,setup_s,teardown_s,value_per_s\n"

func TestWindows(t *testing.T) {
	rows, err := Windows("w.csv", strings.NewReader("\uFEFF"+windowHead+"r1,S,G,A,2026-03-10T00:00:00Z,2026-03-10T01:00:00Z,60,600,120,30,1.5\n"), clock)
	if err != nil {
		t.Fatal(err)
	}
	if w := rows[0]; len(rows) != 1 || w.Place != "w.csv: line 2" || w.Request != "r1" || w.MinimumS != 60 || w.TearDownS != 30 || w.ValuePerS != 1.5 || w.End.Sub(w.Start) != time.Hour {
		t.Errorf("%+v", rows)
	}
}

func TestFaults(t *testing.T) {
	const good = "r1,S,G,A,2026-03-10T00:00:00Z,2026-03-10T01:00:00Z,60,600,120,30,1\n"
	read := map[string]func(string) error{
		"windows": func(s string) error { _, err := Windows("f.csv", strings.NewReader(s), clock); return err },
		"plan":    func(s string) error { _, err := Plan("f.csv", strings.NewReader(s), clock); return err },
		"closed":  func(s string) error { _, err := Closed("f.csv", strings.NewReader(s), clock); return err },
		"ics":     func(s string) error { _, err := Closed("f.ics", strings.NewReader(s), clock); return err },
	}
	for _, tt := range []struct{ name, of, text, want string }{
		{"empty", "windows", "", "f.csv: line 1: the file is empty; its first line must name the columns request,"},
		{"column unknown", "windows", strings.Replace(windowHead, "setup_s", "set_up_s", 1) + good, `f.csv: line 1: column "set_up_s" is not known; did you mean "setup_s"?`},
		{"column missing", "windows", strings.Replace(windowHead, "setup_s,", "", 1), `f.csv: line 1: column "setup_s" is missing`},
		{"column twice", "windows", strings.Replace(windowHead, "setup_s", "minimum_s", 1), `f.csv: line 1: column "minimum_s" stands twice`},
		{"cell missing", "windows", windowHead + good + "r1,S,G\n", "f.csv: line 3: the row has 3 cells and the header 11"},
		{"no zone", "windows", windowHead + strings.Replace(good, "01:00:00Z", "01:00:00", 1), "f.csv: line 2: window_end_utc: not a time in UTC"},
		{"not a number", "windows", windowHead + strings.Replace(good, ",60,", ",1e999,", 1), `f.csv: line 2: minimum_s: "1e999" is not allowed; it must be a number`},
		{"not finite", "windows", windowHead + strings.Replace(good, ",60,", ",NaN,", 1), `minimum_s: "NaN" is not allowed`},
		{"quote", "windows", windowHead + "\"r1,S\n", "f.csv: parse error on line 2"},
		{"fixed", "plan", "station,antenna,spacecraft,start_utc,end_utc,fixed\nG,A,S,2026-03-10T00:00:00Z,2026-03-10T01:00:00Z,maybe\n", `line 2: fixed: "maybe" is not allowed; it must be true or false`},
		{"nothing closed", "closed", "start_utc,end_utc\n2026-03-10T00:00:00Z,2026-03-10T01:00:00Z\n", "line 2: neither station nor spacecraft is named"},
		{"not a calendar", "ics", "hello\n", "f.ics: it cannot be read as a calendar"},
		{"cut short", "ics", "BEGIN:VCALENDAR\r\nBEGIN:VEVENT\r\n", "f.ics: BEGIN:VEVENT has no END; is the file cut short?"},
		{"unpaired", "ics", "BEGIN:VCALENDAR\r\nEND:VEVENT\r\n", "f.ics: line 2: END:VEVENT without its BEGIN"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			if err := read[tt.of](tt.text); err == nil || !strings.Contains(err.Error(), tt.want) {
				t.Errorf("got %v\nwant %s", err, tt.want)
			}
		})
	}
}

// calendar wraps the lines of events.
func calendar(events ...string) string {
	var b strings.Builder
	b.WriteString("BEGIN:VCALENDAR\r\nVERSION:2.0\r\nPRODID:-//x//y//EN\r\n")
	for i, e := range events {
		b.WriteString("BEGIN:VEVENT\r\nUID:" + string(rune('a'+i)) + "\r\nDTSTAMP:20260301T000000Z\r\n" + strings.ReplaceAll(e, "\n", "\r\n") + "\r\nEND:VEVENT\r\n")
	}
	b.WriteString("END:VCALENDAR\r\n")
	return b.String()
}

// Clocks go forward in London on 29 March 2026 at 01:00 UTC (tz database, Europe/London):
// 00:30 GMT is 00:30 UTC, 02:30 BST is 01:30 UTC.
func TestCalendarOutages(t *testing.T) {
	list, err := CalendarOutages("o.ics", strings.NewReader(calendar(
		"SUMMARY:grease\nLOCATION:Skerry Point\\, dish\nDTSTART;TZID=Europe/London:20260329T003000\nDTEND;TZID=Europe/London:20260329T023000",
		"LOCATION:Hoarfjord\nDTSTART:20260310T120000Z\nDURATION:PT1H30M",
		"LOCATION:Hoarfjord\nDTSTART:20260311T120000Z\nDURATION:PT1H\nSTATUS:CANCELLED",
		"LOCATION:Hoarfjord\nDTSTART:20260311T120000Z\nDURATION:PT1H\nTRANSP:TRANSPARENT",
	)))
	if err != nil || len(list) != 2 {
		t.Fatalf("%v %+v", err, list)
	}
	if o := list[0]; o.Station != "Skerry Point" || o.Antenna != "dish" || o.Reason != "grease" || o.Place != "o.ics: line 4" || !o.Start.Equal(time.Date(2026, 3, 29, 0, 30, 0, 0, time.UTC)) || o.End.Sub(o.Start) != time.Hour {
		t.Errorf("%+v", o)
	}
	if o := list[1]; o.Station != "Hoarfjord" || o.Antenna != "" || o.End.Sub(o.Start) != 90*time.Minute {
		t.Errorf("%+v", o)
	}
	_, err = CalendarOutages("o.ics", strings.NewReader(calendar("LOCATION:Skerry Point\nDTSTART;TZID=Europe/London:20260329T013000\nDTEND;TZID=Europe/London:20260329T023000")))
	if err == nil || !strings.Contains(err.Error(), "does not exist in Europe/London") {
		t.Errorf("an hour that does not exist: %v", err)
	}
}

func instant(h, m int) time.Time { return time.Date(2026, 3, 10, h, m, 0, 0, time.UTC) }

func TestReviseAndRoundTrip(t *testing.T) {
	of := EventOf{Spacecraft: "Wagtail 1, spare; \\ one", Station: "Skerry Point", Antenna: "dish"}
	first := []Event{
		{Start: instant(1, 0).Add(400 * time.Millisecond), End: instant(1, 10).Add(400 * time.Millisecond), Stamp: instant(0, 0), Of: of, Summary: "a", Description: strings.Repeat("long line, with ü and commas; ", 8) + "\nsecond line"},
		{Start: instant(5, 0), End: instant(5, 10), Stamp: instant(0, 0), Of: of, Summary: "b"},
		{Start: instant(9, 0), End: instant(9, 10), Stamp: instant(0, 0), Of: of, Summary: "c"},
	}
	again := func(events []Event) []Event {
		var b bytes.Buffer
		if err := WriteCalendar(&b, events); err != nil {
			t.Fatal(err)
		}
		for i, line := range strings.Split(b.String(), "\r\n") {
			if len(line) > 75 { // RFC 5545, section 3.1: 75 octets, line break aside
				t.Errorf("line %d has %d octets: %s", i+1, len(line), line)
			}
		}
		if strings.Count(b.String(), "\n") != strings.Count(b.String(), "\r\n") {
			t.Error("a line does not end in CR LF")
		}
		back, err := ReadCalendar("p.ics", &b)
		if err != nil {
			t.Fatal(err)
		}
		return back
	}
	one := again(Revise(nil, first, instant(0, 0)))
	if len(one) != 3 || one[0].UID == one[1].UID || one[0].Sequence != 0 {
		t.Fatalf("%+v", one)
	}
	if e := one[0]; !e.Start.Equal(instant(1, 0)) || !e.End.Equal(instant(1, 10).Add(time.Second)) || e.Of != of || e.Description != first[0].Description {
		t.Errorf("rounding or text: %+v", e)
	}
	// At noon-like replanning: the first is over, the second has moved, the third is dropped, one is new.
	second := []Event{
		{Start: instant(5, 2), End: instant(5, 12), Stamp: instant(3, 0), Of: of},
		{Start: instant(7, 0), End: instant(7, 10), Stamp: instant(3, 0), Of: of},
	}
	two := again(Revise(one, second, instant(3, 0)))
	if len(two) != 4 {
		t.Fatalf("%+v", two)
	}
	if two[0].UID != one[1].UID || two[0].Sequence != 1 || two[0].Cancelled {
		t.Errorf("moved: %+v", two[0])
	}
	if two[1].Sequence != 0 || two[1].UID == one[2].UID {
		t.Errorf("new: %+v", two[1])
	}
	if two[2].UID != one[0].UID || two[2].Cancelled || two[2].Sequence != 0 {
		t.Errorf("over: %+v", two[2])
	}
	if two[3].UID != one[2].UID || !two[3].Cancelled || two[3].Sequence != 1 || !two[3].Stamp.Equal(instant(3, 0)) {
		t.Errorf("dropped: %+v", two[3])
	}
	three := again(Revise(two, first[2:], instant(4, 0)))
	if three[0].UID != one[2].UID || three[0].Cancelled || three[0].Sequence != 2 {
		t.Errorf("taken again: %+v", three[0])
	}
}

func FuzzTables(f *testing.F) {
	f.Add(windowHead + "r1,S,G,A,2026-03-10T00:00:00Z,2026-03-10T01:00:00Z,60,600,120,30,1.5\n") // good
	f.Add(windowHead + "r1,S,G,A,2026-03-10T00:00:00,x,60,600,120,30,1e999\n")                   // nearly good
	f.Add("station,antenna,spacecraft,start_utc,end_utc\nG,A,S,2026-03-10T00:00:00Z,2026-03-10T01:00:00Z\n")
	f.Add("start_utc,end_utc,spacecraft\n2026-03-10T00:00:00Z,2026-03-10T01:00:00Z,S\n")
	f.Fuzz(func(t *testing.T, text string) {
		for _, read := range []func(io.Reader) error{
			func(r io.Reader) error {
				rows, err := Windows("f", r, clock)
				for _, w := range rows {
					if w.Start.IsZero() || !(w.ValuePerS-w.ValuePerS == 0) {
						t.Errorf("accepted %+v", w)
					}
				}
				return err
			},
			func(r io.Reader) error { _, err := Plan("f", r, clock); return err },
			func(r io.Reader) error {
				list, err := Outages("f", r, clock)
				for _, o := range list {
					if !o.End.After(o.Start) {
						t.Errorf("accepted %+v", o)
					}
				}
				return err
			},
		} {
			if err := read(strings.NewReader(text)); err != nil && err.Error() == "" {
				t.Error("an error without a text")
			}
		}
	})
}

func FuzzCalendars(f *testing.F) {
	f.Add(calendar("LOCATION:G\nDTSTART:20260310T120000Z\nDURATION:PT1H30M"))                                                     // good
	f.Add(calendar("LOCATION:G\nDTSTART;TZID=Europe/London:20260329T013000\nDTEND;TZID=Europe/London:20260329T023000"))           // an hour that does not exist
	f.Add(calendar("LOCATION:G\nDTSTART;VALUE=DATE:20260310\nRRULE:FREQ=DAILY"))                                                  // refused
	f.Add(strings.ReplaceAll(calendar("X-SLANTWISE-SPACECRAFT:S\nSEQUENCE:1\nDTSTART:20260310T120000Z\nDURATION:P1D"), "\r", "")) // lines end in LF
	f.Fuzz(func(t *testing.T, text string) {
		list, err := CalendarOutages("f.ics", strings.NewReader(text))
		for _, o := range list {
			if err == nil && !o.End.After(o.Start) {
				t.Errorf("accepted %+v", o)
			}
		}
		events, err := ReadCalendar("f.ics", strings.NewReader(text))
		if err != nil {
			return
		}
		for _, e := range events {
			if e.UID == "" || e.Sequence < 0 {
				t.Errorf("accepted %+v", e)
			}
		}
	})
}
