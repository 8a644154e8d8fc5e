package reports

import (
	"bytes"
	"fmt"
	"math"
	"slices"
	"time"
)

// Timeline is a contact plan as a page: antennas as rows over time, the recorders below
// on the same axis, and what is said of each contact and of each window not taken.
type Timeline struct {
	Head     string
	From, To time.Time // of the plan
	Answer   string    // its worth and how sure that is
	Lines    []string
	Files    []string // that stand beside the page, by name

	Spacecraft []string
	Antennas   []string
	Contacts   []TimelineContact // by start
	Windows    []TimelineWindow  // not taken
	Closed     []TimelineSpan    // of antennas
	Recorders  []TimelineRecorder
	Volumes    []TimelineVolume
	Changes    []string // against the plan in force
	Limits     []string // what more of each limit is worth
	Notes      []string
	Basis      Basis
}

// TimelineContact is a contact of the plan.
type TimelineContact struct {
	Spacecraft, Antenna int
	Name, Request       string
	SetUp, Start        time.Time
	End, TearDown       time.Time
	Fixed               bool
	Links               string  // its links with their bytes
	Value               float64 // of the plan's value
}

// TimelineWindow is a window that the plan leaves.
type TimelineWindow struct {
	Spacecraft, Antenna int
	Name                string
	Start, End          time.Time
	Why                 string
}

// TimelineSpan is a time of an antenna.
type TimelineSpan struct {
	Antenna  int
	From, To time.Time
}

// TimelineRecorder is the memory of a spacecraft over the plan.
type TimelineRecorder struct {
	Spacecraft int
	Capacity   float64 // bytes
	Points     []TimelinePoint
}

// TimelinePoint is the state of a recorder; straight from point to point.
type TimelinePoint struct {
	At     time.Time
	Stored float64 // bytes
}

// TimelineVolume is what a spacecraft brings down on a UTC day.
type TimelineVolume struct {
	Spacecraft int
	Day        time.Time
	Bytes      float64
}

type timelineView struct {
	pageView
	*Timeline
	Legend     []string
	Days       []timelineDay
	ContactsOn []timelineEntry
	WindowsOn  []timelineEntry
	Table      [][]string // volumes: a head, then a row a spacecraft
}

// timelineDay is a UTC day of the drawing.
type timelineDay struct {
	Name  string
	Rows  []timelineRow
	Ticks []timelineTick
}

type timelineTick struct{ X, Text, Anchor string }

// timelineRow is a strip of a day; Recorder: a line in place of bars.
type timelineRow struct {
	Name  string
	Bars  []timelineBar
	Line  string // points of a recorder, 0 to 1000 across and 100 to 0 up; empty: none
	Scale string
}

// timelineBar is a bar in percent of the day.
type timelineBar struct {
	Kind, X, Width, Letter, Middle, Link, Title string
}

type timelineEntry struct {
	ID, Letter, Head, When, Text string
}

// TimelinePage returns the page as one file of HTML without any script.
func TimelinePage(t *Timeline) ([]byte, error) {
	if !t.To.After(t.From) {
		return nil, fmt.Errorf("report: a plan from %s to %s has no length", t.From, t.To)
	}
	v := timelineView{Timeline: t, pageView: plainPage(t.Head)}
	v.foot(&t.Basis, "")
	for i, name := range t.Spacecraft {
		v.Legend = append(v.Legend, letter(i)+" "+name)
	}
	first := t.From.UTC().Truncate(24 * time.Hour)
	for day := first; day.Before(t.To); day = day.Add(24 * time.Hour) {
		v.Days = append(v.Days, t.day(day))
	}
	for i := range t.Contacts {
		v.ContactsOn = append(v.ContactsOn, t.contactEntry(i))
	}
	for i := range t.Windows {
		w := &t.Windows[i]
		v.WindowsOn = append(v.WindowsOn, timelineEntry{ID: fmt.Sprintf("window-%d", i+1), Letter: letter(w.Spacecraft), Head: t.Spacecraft[w.Spacecraft] + " over " + t.Antennas[w.Antenna],
			When: fromTo(w.Start, w.End), Text: w.Why})
	}
	v.Table = t.volumes()
	var out bytes.Buffer
	if err := pageTemplates().ExecuteTemplate(&out, "timeline.html", v); err != nil {
		return nil, fmt.Errorf("report: %w", err)
	}
	return out.Bytes(), nil
}

// letter is what a spacecraft is called in the drawing: A to Z, then AA and on.
func letter(i int) string {
	s := ""
	for i++; i > 0; i = (i - 1) / 26 {
		s = string(rune('A'+(i-1)%26)) + s
	}
	return s
}

func fromTo(from, to time.Time) string {
	return from.UTC().Format("2006-01-02 15:04:05") + " to " + to.UTC().Format("15:04:05") + " UTC"
}

func (t *Timeline) contactEntry(i int) timelineEntry {
	c := &t.Contacts[i]
	e := timelineEntry{ID: fmt.Sprintf("contact-%d", i+1), Letter: letter(c.Spacecraft), Head: t.Spacecraft[c.Spacecraft] + " over " + t.Antennas[c.Antenna], When: fromTo(c.Start, c.End)}
	if c.Request != "" {
		e.Head = c.Request + ": " + e.Head
	}
	e.Text = fmt.Sprintf("set-up from %s, tear-down to %s; %s; value %s", c.SetUp.UTC().Format("15:04:05"), c.TearDown.UTC().Format("15:04:05"), c.Links, grouped(c.Value))
	if c.Fixed {
		e.Text = "fixed; " + e.Text
	}
	return e
}

// day lays a day out.
func (t *Timeline) day(day time.Time) timelineDay {
	out := timelineDay{Name: day.Format("Monday, 2006-01-02") + " UTC"}
	for h := 0; h <= 24; h += 3 {
		anchor := "middle"
		switch h {
		case 0:
			anchor = "start"
		case 24:
			anchor = "end"
		}
		out.Ticks = append(out.Ticks, timelineTick{percent(float64(h) / 24), fmt.Sprintf("%02d", h), anchor})
	}
	for a, name := range t.Antennas {
		row := timelineRow{Name: name}
		for _, c := range t.Closed {
			if c.Antenna == a {
				row.bar(day, c.From, c.To, timelineBar{Kind: "closed", Title: "closed " + fromTo(c.From, c.To)})
			}
		}
		for i := range t.Windows {
			if w := &t.Windows[i]; w.Antenna == a {
				row.bar(day, w.Start, w.End, timelineBar{Kind: "left", Link: fmt.Sprintf("#window-%d", i+1), Title: "not taken: " + t.Spacecraft[w.Spacecraft] + ", " + fromTo(w.Start, w.End)})
			}
		}
		for i := range t.Contacts {
			if c := &t.Contacts[i]; c.Antenna == a {
				t.contactBars(&row, day, i)
			}
		}
		out.Rows = append(out.Rows, row)
	}
	for i := range t.Recorders {
		out.Rows = append(out.Rows, t.recorderRow(day, &t.Recorders[i]))
	}
	return out
}

// contactBars draws a contact with its set-up and tear-down.
func (t *Timeline) contactBars(row *timelineRow, day time.Time, i int) {
	c := &t.Contacts[i]
	link, title := fmt.Sprintf("#contact-%d", i+1), t.Spacecraft[c.Spacecraft]+", "+fromTo(c.Start, c.End)
	kind := "contact"
	if c.Fixed {
		kind, title = "contact fixed", title+", fixed"
	}
	row.bar(day, c.SetUp, c.Start, timelineBar{Kind: "around", Title: "set-up"})
	row.bar(day, c.End, c.TearDown, timelineBar{Kind: "around", Title: "tear-down"})
	row.bar(day, c.Start, c.End, timelineBar{Kind: kind, Letter: letter(c.Spacecraft), Link: link, Title: title})
}

// bar adds what of a bar lies on a day.
func (r *timelineRow) bar(day, from, to time.Time, b timelineBar) {
	x, end := share(day, from), share(day, to)
	if end <= x {
		return
	}
	b.X, b.Width, b.Middle = percent(x), percent(end-x), percent((x+end)/2)
	r.Bars = append(r.Bars, b)
}

// share is where an instant lies on a day, cut to 0 and 1.
func share(day, at time.Time) float64 {
	return min(1, max(0, at.Sub(day).Hours()/24))
}

func percent(v float64) string { return fmt.Sprintf("%.4f%%", 100*v) }

// recorderRow draws what is stored on a day, from nothing to the most of the plan.
func (t *Timeline) recorderRow(day time.Time, r *TimelineRecorder) timelineRow {
	most := 0.0
	for _, p := range r.Points {
		most = max(most, p.Stored)
	}
	row := timelineRow{Name: t.Spacecraft[r.Spacecraft] + ", recorder", Scale: fmt.Sprintf("0 to %.4g GB, of %.4g GB", most/1e9, r.Capacity/1e9)}
	var line bytes.Buffer
	end := day.Add(24 * time.Hour)
	add := func(at time.Time, stored float64) {
		y := 100.0
		if most > 0 {
			y = 100 * (1 - stored/most)
		}
		fmt.Fprintf(&line, "%.2f,%.2f ", 1000*share(day, at), y)
	}
	for i, p := range r.Points {
		if i > 0 {
			q := r.Points[i-1]
			for _, edge := range []time.Time{day, end} {
				if q.At.Before(edge) && p.At.After(edge) {
					s := edge.Sub(q.At).Seconds() / p.At.Sub(q.At).Seconds()
					add(edge, q.Stored+s*(p.Stored-q.Stored))
				}
			}
		}
		if !p.At.Before(day) && !p.At.After(end) {
			add(p.At, p.Stored)
		}
	}
	row.Line = line.String()
	return row
}

// volumes are the bytes by spacecraft and day as a table, with the sums.
func (t *Timeline) volumes() [][]string {
	var days []time.Time
	for _, v := range t.Volumes {
		if !slices.ContainsFunc(days, v.Day.Equal) {
			days = append(days, v.Day)
		}
	}
	slices.SortFunc(days, time.Time.Compare)
	head := []string{"spacecraft"}
	for _, d := range days {
		head = append(head, d.Format("2006-01-02"))
	}
	out := [][]string{append(head, "all days")}
	for i, name := range t.Spacecraft {
		row, sum := []string{name}, 0.0
		for _, d := range days {
			bytes := 0.0
			for _, v := range t.Volumes {
				if v.Spacecraft == i && v.Day.Equal(d) {
					bytes += v.Bytes
				}
			}
			sum += bytes
			row = append(row, grouped(math.Round(bytes/1e3)/1e3))
		}
		out = append(out, append(row, grouped(math.Round(sum/1e3)/1e3)))
	}
	return out
}

// grouped writes a number with thin spaces between thousands, with up to three decimals.
func grouped(v float64) string {
	s := fmt.Sprintf("%.3f", math.Abs(v))
	whole, decimals := s[:len(s)-4], s[len(s)-4:]
	out := ""
	for len(whole) > 3 {
		out = "\u2009" + whole[len(whole)-3:] + out
		whole = whole[:len(whole)-3]
	}
	if v < 0 {
		whole = "-" + whole
	}
	if decimals == ".000" || math.Abs(v) >= 1e6 {
		decimals = ""
	}
	return whole + out + decimals
}
