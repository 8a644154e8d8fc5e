package contacts

import (
	"strings"
	"testing"
	"time"
)

var start = time.Date(2026, 3, 10, 0, 0, 0, 0, time.UTC)

func window() WindowRow {
	return WindowRow{Place: "w.csv: line 2", Request: "R1", Spacecraft: "Wagtail 1", Station: "Skerry Point", Antenna: "dish",
		Start: start.Add(time.Hour), End: start.Add(2 * time.Hour), MinimumS: 60, DesiredS: 600, SetUpS: 30, TearDownS: 10, ValuePerS: 2}
}

func TestAddWindows(t *testing.T) {
	p := &Problem{Start: start, Length: Day}
	second := window()
	second.Start = second.Start.Add(5500 * time.Microsecond)
	second.End = second.End.Add(5500 * time.Microsecond)
	if err := p.AddWindows([]WindowRow{window(), second}); err != nil {
		t.Fatal(err)
	}
	if err := p.Check(); err != nil {
		t.Fatal(err)
	}
	if len(p.Requests) != 1 || len(p.Spacecraft) != 1 || len(p.Antennas) != 1 || len(p.Candidates) != 2 {
		t.Fatalf("%d requests, %d spacecraft, %d antennas, %d windows; want 1, 1, 1, 2", len(p.Requests), len(p.Spacecraft), len(p.Antennas), len(p.Candidates))
	}
	// Half milliseconds are rounded into the window.
	if w := p.Candidates[1].Window; w.From != Hour+6 || w.To != 2*Hour+5 {
		t.Errorf("window %v, want %v", w, Span{Hour + 6, 2*Hour + 5})
	}
}

func TestBadWindows(t *testing.T) {
	change := func(f func(*WindowRow)) []WindowRow {
		r := window()
		f(&r)
		return []WindowRow{r}
	}
	other := window()
	other.DesiredS, other.Place = 700, "w.csv: line 3"
	for _, row := range []struct {
		name string
		rows []WindowRow
		want string
	}{
		{"reversed", change(func(r *WindowRow) { r.Start, r.End = r.End, r.Start }), "are the two reversed?"},
		{"outside", change(func(r *WindowRow) { r.End = start.Add(25 * time.Hour) }), "is not within the horizon"},
		{"before", change(func(r *WindowRow) { r.Start = start.Add(-time.Hour) }), "is not within the horizon"},
		{"no antenna", change(func(r *WindowRow) { r.Antenna = "" }), "antenna is empty"},
		{"minimum", change(func(r *WindowRow) { r.MinimumS = 0 }), "minimum_s is 0"},
		{"desired", change(func(r *WindowRow) { r.DesiredS = 30 }), "desired_s 30 is less than minimum_s 60"},
		{"two desires", []WindowRow{window(), other}, "w.csv: line 3: request \"R1\": desired_s is 700 here and 600 before"},
	} {
		t.Run(row.name, func(t *testing.T) {
			p := &Problem{Start: start, Length: Day}
			err := p.AddWindows(row.rows)
			if err == nil || !strings.Contains(err.Error(), row.want) {
				t.Errorf("error %v, want one with %q", err, row.want)
			}
			if len(p.Candidates) != 0 || len(p.Requests) != 0 {
				t.Errorf("%d windows and %d requests stay after an error", len(p.Candidates), len(p.Requests))
			}
		})
	}
}

func TestHeldContradict(t *testing.T) {
	p := &Problem{Start: start, Length: Day, Split: true}
	if err := p.AddWindows([]WindowRow{window()}); err != nil {
		t.Fatal(err)
	}
	p.Held = []Contact{{0, Span{Hour, Hour + 5*Minute}, true}, {0, Span{Hour + 5*Minute + 30*Second, Hour + 9*Minute}, true}}
	err := p.Check()
	if err == nil || !strings.Contains(err.Error(), `contradict each other: antenna "dish" serves one at a time`) ||
		strings.Count(err.Error(), `"R1 Skerry Point dish 2026-03-10T01:00:00Z"`) != 2 {
		t.Errorf("error %v does not name the pair", err)
	}
	p.Held[1].From += 10 * Second // tear-down and set-up touch
	if err := p.Check(); err != nil {
		t.Error(err)
	}
}

func TestUnserved(t *testing.T) {
	p := &Problem{Start: start, Length: Day}
	short, closed, fine := window(), window(), window()
	short.Request, short.MinimumS, short.DesiredS = "short", 4000, 4000
	closed.Request, closed.Antenna = "closed", "mast"
	if err := p.AddWindows([]WindowRow{short, closed, fine}); err != nil {
		t.Fatal(err)
	}
	p.Requests = append(p.Requests, Request{Name: "none", Desired: 1000})
	p.Antennas[1].Closed = []Span{{Hour - 20*Second, Hour + 50*Minute}, {Hour + 40*Minute, 3 * Hour}}
	got := p.Unserved()
	want := []string{"a contact lasts at least 4000 s", "closed times", "it has no window"}
	if len(got) != len(want) {
		t.Fatalf("unserved %v, want %d", got, len(want))
	}
	for i := range want {
		if !strings.Contains(got[i].Error(), want[i]) {
			t.Errorf("unserved %q, want it to say %q", got[i], want[i])
		}
	}
}

func TestRowsComeBack(t *testing.T) {
	p := &Problem{Start: start, Length: Day, Split: true}
	if err := p.AddWindows([]WindowRow{window()}); err != nil {
		t.Fatal(err)
	}
	plan := Plan{[]Contact{{0, Span{Hour, Hour + 2*Minute}, false}, {0, Span{Hour + 5*Minute, Hour + 9*Minute}, true}}}
	rows := p.Rows(plan, Worth{})
	if len(rows) != 2 || rows[1].Contact != rows[0].Contact+" (2)" || !rows[1].SetUpStart.Equal(start.Add(time.Hour+4*time.Minute+30*time.Second)) {
		t.Fatalf("rows %+v", rows)
	}
	var back []PlanRow
	for _, r := range rows {
		back = append(back, PlanRow{"p.csv", r.Contact, r.Request, r.Spacecraft, r.Station, r.Antenna, r.Start, r.End, r.Fixed})
	}
	got, err := p.FromRows(back)
	if err != nil || len(got) != 2 || got[0] != plan.Contacts[0] || got[1] != plan.Contacts[1] {
		t.Errorf("contacts %v (%v), want %v", got, err, plan.Contacts)
	}
	back[0].Antenna = "mast"
	if _, err := p.FromRows(back); err == nil {
		t.Error("a row on an unknown antenna was read")
	}
}
