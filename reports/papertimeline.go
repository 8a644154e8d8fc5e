package reports

import (
	"fmt"
	"math"
	"strings"
	"time"

	vector "slantwise/reports/drawing"
	"slantwise/reports/paper"
)

// Of a plan on paper: how many rows a drawing of a day has at most, so that it fits a page, how many
// windows that are not taken are listed, and how long the reason of each may be.
const (
	stripsOfDrawing = 22
	windowsOnPaper  = 60
	reasonOnPaper   = 150
)

// longPlan is from how many contacts on a plan on paper has a list of contents.
const longPlan = 40

// TimelinePaper returns a contact plan as a PDF file: its worth first, the antennas over time, its
// contacts, what is not taken and why, the recorders, and what it stands on.
func TimelinePaper(t *Timeline) ([]byte, error) {
	if !t.To.After(t.From) {
		return nil, fmt.Errorf("report: a plan from %s to %s has no length", t.From, t.To)
	}
	chapters := []chapter{
		{"Changes against the plan in force", len(t.Changes) > 0, func(d *paper.Document) { d.Notes(t.Changes) }},
		{"Antennas over time", true, t.stripsOn},
		{"Contacts", len(t.Contacts) > 0, t.contactsOn},
		{"Volume by spacecraft and day, MB", len(t.Volumes) > 0, t.volumesOn},
		{"Recorders", len(t.Recorders) > 0, t.recordersOn},
		{"Not taken, and why", len(t.Windows) > 0, t.windowsOn},
		{"What more of a limit is worth", len(t.Limits) > 0, func(d *paper.Document) { d.Notes(t.Limits) }},
		{"Taken for granted", len(t.Notes) > 0, func(d *paper.Document) { d.Notes(t.Notes) }},
	}
	when := dayClock(t.From) + " to " + dayClock(t.To) + " UTC"
	info := infoOf(t.Head+", "+when, &t.Basis, t.From)
	if len(t.Contacts) >= longPlan {
		info.Contents = countOf(chapters) + 2 // the answer and the cautions
	}
	d := paper.New(info)
	d.Page()
	d.Title(t.Head, when+" · scenario "+t.Basis.Scenario)
	d.Chapter("Answer")
	d.Answer(t.Answer)
	for _, text := range t.Lines {
		d.Paragraph(text)
	}
	d.List()
	chaptersOn(d, chapters)
	t.Basis.defaultsOn(d)
	cautionsOn(d, &t.Basis)
	return d.Bytes()
}

// stripsOn draws a day after the other.
func (t *Timeline) stripsOn(d *paper.Document) {
	names := make([]string, len(t.Spacecraft))
	for i, name := range t.Spacecraft {
		names[i] = letter(i) + " " + name
	}
	d.Small(strings.Join(names, ", ") + ". Full: contact; with a frame inside: fixed. Slanted strokes: set-up and tear-down. Low and empty: a window that is not taken. Crossed: closed.")
	for day := t.From.UTC().Truncate(24 * time.Hour); day.Before(t.To); day = day.Add(24 * time.Hour) {
		rows := t.strips(day)
		for len(rows) > 0 {
			n := min(len(rows), stripsOfDrawing)
			s := &vector.Strips{X: t.hours(day), Rows: rows[:n]}
			d.Figures([]paper.Figure{{Title: day.Format("Monday, 2006-01-02"), Height: s.Height(), Wide: true, Draw: s.Draw}})
			rows = rows[n:]
		}
	}
}

// shortPlan is up to how many hours a plan is drawn over its own time alone.
const shortPlan = 12

// hours is the axis of a day: the whole of it, but for a short plan.
func (t *Timeline) hours(day time.Time) vector.Axis {
	a, step := vector.Axis{Name: "UTC", To: 24}, 3.0
	if t.To.Sub(t.From) <= shortPlan*time.Hour {
		a.From, a.To = math.Floor(max(0, t.From.Sub(day).Hours())), math.Ceil(min(24, t.To.Sub(day).Hours()))
		switch span := a.To - a.From; {
		case span <= 2:
			step = 0.25
		case span <= 4:
			step = 0.5
		default:
			step = 1
		}
	}
	for h := a.From; h <= a.To; h += step {
		a.Ticks = append(a.Ticks, vector.Tick{At: h, Label: fmt.Sprintf("%02d:%02.0f", int(h), 60*(h-math.Floor(h)))})
	}
	return a
}

// strips are the antennas on a day, in hours.
func (t *Timeline) strips(day time.Time) []vector.Strip {
	out := make([]vector.Strip, len(t.Antennas))
	add := func(antenna int, from, to time.Time, kind vector.BarKind, label string) {
		a, b := from.Sub(day).Hours(), to.Sub(day).Hours()
		if b > 0 && a < 24 && b > a {
			out[antenna].Bars = append(out[antenna].Bars, vector.Bar{From: a, To: b, Kind: kind, Label: label})
		}
	}
	for i, name := range t.Antennas {
		out[i].Name = name
	}
	for _, c := range t.Closed {
		add(c.Antenna, c.From, c.To, vector.ShutDown, "")
	}
	for i := range t.Windows {
		w := &t.Windows[i]
		add(w.Antenna, w.Start, w.End, vector.LeftOut, "")
	}
	for i := range t.Contacts {
		c := &t.Contacts[i]
		kind := vector.Taken
		if c.Fixed {
			kind = vector.Held
		}
		add(c.Antenna, c.SetUp, c.Start, vector.Around, "")
		add(c.Antenna, c.End, c.TearDown, vector.Around, "")
		add(c.Antenna, c.Start, c.End, kind, letter(c.Spacecraft))
	}
	return out
}

func (t *Timeline) contactsOn(d *paper.Document) {
	table := paper.Table{Corner: "spacecraft", Heads: []string{"start, UTC", "end, UTC", "antenna", "value"}, First: 0.36, Left: true, Numbers: 1}
	for i := range t.Contacts {
		c := &t.Contacts[i]
		remark := c.Links
		if c.Request != "" {
			remark = c.Request + "; " + remark
		}
		if c.Fixed {
			remark = "fixed; " + remark
		}
		table.Rows = append(table.Rows, paper.Row{Name: letter(c.Spacecraft) + " " + t.Spacecraft[c.Spacecraft], Remark: remark,
			Cells: []string{dayClock(c.Start), clock(c.End), t.Antennas[c.Antenna], grouped(c.Value)}})
	}
	d.Table(table)
}

func (t *Timeline) volumesOn(d *paper.Document) {
	rows := t.volumes()
	table := paper.Table{Corner: rows[0][0], Heads: rows[0][1:], First: 0.3}
	for _, r := range rows[1:] {
		table.Rows = append(table.Rows, paper.Row{Name: r[0], Cells: r[1:]})
	}
	d.Table(table)
}

func (t *Timeline) recordersOn(d *paper.Document) {
	base := midnight(t.From)
	axis := timeAxis{From: t.From.Sub(base).Seconds(), To: t.To.Sub(base).Seconds(), Date: base.Format("2006-01-02")}
	axis.Step = clockStep(axis.To - axis.From)
	var list []paper.Figure
	for i := range t.Recorders {
		r := &t.Recorders[i]
		line := vector.Line{Name: "stored", Tone: vector.First, Width: 1.4}
		for _, p := range r.Points {
			line.X, line.Y = append(line.X, p.At.Sub(base).Seconds()), append(line.Y, p.Stored/1e9)
		}
		l := &vector.Lines{X: clockAxis(&axis, base), Left: vector.NewAxis("stored, GB", 0, max(greatestOf(line.Y), 1e-6), true), Lines: []vector.Line{line}}
		list = append(list, paper.Figure{Title: t.Spacecraft[r.Spacecraft], Caption: fmt.Sprintf("What the recorder holds over UTC, of %.4g GB.", r.Capacity/1e9), Height: sketchHeight, Wide: true, Draw: l.Draw})
	}
	d.Figures(list)
}

func (t *Timeline) windowsOn(d *paper.Document) {
	table := paper.Table{Corner: "spacecraft, antenna", Heads: []string{"window, UTC", "why"}, First: 0.28, Left: true}
	for i := range min(len(t.Windows), windowsOnPaper) {
		w := &t.Windows[i]
		table.Rows = append(table.Rows, paper.Row{Name: letter(w.Spacecraft) + " " + t.Spacecraft[w.Spacecraft], Remark: t.Antennas[w.Antenna],
			Cells: []string{dayClock(w.Start) + " to " + clock(w.End), shortened(w.Why, reasonOnPaper)}})
	}
	d.Table(table)
	if more := len(t.Windows) - windowsOnPaper; more > 0 {
		d.Paragraph(fmt.Sprintf("%d more windows are not taken; the plan’s page and its JSON list all of them.", more))
	}
}

// shortened cuts a text after a word where it is longer than so many letters.
func shortened(text string, most int) string {
	letters := []rune(text)
	if len(letters) <= most {
		return text
	}
	short := string(letters[:most])
	if i := strings.LastIndexByte(short, ' '); i > most/2 {
		short = short[:i]
	}
	return strings.TrimRight(short, " ,;:") + "…"
}
