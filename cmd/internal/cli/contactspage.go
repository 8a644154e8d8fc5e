package cli

import (
	"context"
	"encoding/json"
	"fmt"
	"io"
	"path/filepath"
	"strings"
	"time"

	"slantwise/cmd/internal/atomicfile"
	"slantwise/cmd/internal/planfiles"
	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/change"
	"slantwise/downlink/contacts/explain"
	"slantwise/reports"
)

// mostExplained is how many windows a page explains: each needs a plan of its own.
const mostExplained = 400

// planPage is what the page shows beyond the plan.
type planPage struct {
	Windows   []pageWindow   `json:"windows_not_taken"`
	Recorders []pageRecorder `json:"recorders"`
	Volumes   []pageVolume   `json:"volumes"`
}

type pageWindow struct {
	Name       string  `json:"name"`
	Spacecraft string  `json:"spacecraft"`
	Station    string  `json:"station"`
	Antenna    string  `json:"antenna"`
	Start      string  `json:"start_utc"`
	End        string  `json:"end_utc"`
	Cost       number  `json:"cost"`
	Why        *string `json:"why"`
}

type pageRecorder struct {
	Spacecraft string      `json:"spacecraft"`
	Capacity   number      `json:"capacity_bytes"`
	Points     []pagePoint `json:"points"`
}

type pagePoint struct {
	At     string `json:"utc"`
	Stored number `json:"stored_bytes"`
	Unsent number `json:"unsent_bytes"`
}

type pageVolume struct {
	Spacecraft string `json:"spacecraft"`
	Day        string `json:"day_utc"`
	Bytes      number `json:"bytes"`
}

// writeDrawn writes the page and the paper, of the same content.
func (a *planAnswer) writeDrawn(ctx context.Context, f *planOutputs) error {
	base := strings.TrimSuffix(f.page, filepath.Ext(f.page))
	if f.page != "" && base == f.page {
		return inputErrorf("--page: %q has no ending; let it end in .html", f.page)
	}
	t, data, err := a.timeline(ctx)
	if err != nil {
		return err
	}
	if f.pdf != "" {
		content, err := reports.TimelinePaper(t)
		if err != nil {
			return err
		}
		if err := writeWhole(f.pdf, content); err != nil {
			return err
		}
	}
	if f.page == "" {
		return nil
	}
	return a.writePage(t, data, f.page, base)
}

// basis is what the plan stands on. Windows from outside fly nothing.
func (a *planAnswer) basis() reports.Basis {
	s := a.p.scenario
	if len(a.p.flown) > 0 {
		return basisOf(s, allCraft(s), reports.CautionPlan)
	}
	b := basisOf(s, nil, reports.CautionPlan)
	b.Models = nil
	if s.Demo {
		b.Scenario, b.Defaults = "none: windows and requests from files", nil
	}
	return b
}

// writePage writes the page, and the plan as CSV and all numbers as JSON beside it.
func (a *planAnswer) writePage(t *reports.Timeline, data *planPage, file, base string) error {
	t.Files = []string{filepath.Base(base) + ".csv", filepath.Base(base) + ".json"}
	page, err := reports.TimelinePage(t)
	if err != nil {
		return err
	}
	whole := struct {
		planJSON
		planPage
	}{a.json(), *data}
	text, err := json.MarshalIndent(whole, "", "  ")
	if err != nil {
		return fmt.Errorf("write the JSON: %w", err)
	}
	for _, f := range []struct {
		name  string
		write func(io.Writer) error
	}{
		{base + ".csv", func(w io.Writer) error { return writeCSV(w, planfiles.PlanColumns, a.csv()) }},
		{base + ".json", func(w io.Writer) error { _, err := w.Write(append(text, '\n')); return err }},
		{file, func(w io.Writer) error { _, err := w.Write(page); return err }},
	} {
		if err := atomicfile.Write(f.name, 0o644, f.write); err != nil {
			return err
		}
	}
	return nil
}

// timeline makes the page's content, and its numbers.
func (a *planAnswer) timeline(ctx context.Context) (*reports.Timeline, *planPage, error) {
	p, r := a.p, a.result
	t := &reports.Timeline{
		Head: "Contact plan", From: p.At(0), To: p.At(p.Length), Answer: a.gain() + "; " + gapText(r) + ".",
		Lines: []string{
			"Value " + fixed(r.Value, 0) + ", and no plan is worth more than " + fixed(r.Bound, 0) + ".",
			fmt.Sprintf("Planned at %s for %s to %s.", utc(p.At(p.Now)), utc(p.At(0)), utc(p.At(p.Length))),
		}, Notes: p.notes, Basis: a.basis(),
	}
	if !r.Proven && len(r.Left) > 0 {
		t.Lines = append(t.Lines, "The bound does not know of some rules that the plan keeps, and may be loose by them: "+strings.Join(r.Left, ", ")+".")
	}
	for i := range p.Spacecraft {
		t.Spacecraft = append(t.Spacecraft, p.Spacecraft[i].Name)
	}
	for i := range p.Antennas {
		t.Antennas = append(t.Antennas, p.Stations[p.Antennas[i].Station].Name+", "+p.Antennas[i].Name)
		for _, s := range append(p.Stations[p.Antennas[i].Station].Closed, p.Antennas[i].Closed...) {
			t.Closed = append(t.Closed, reports.TimelineSpan{Antenna: i, From: p.At(s.From), To: p.At(s.To)})
		}
	}
	for i := range a.changes {
		if a.changes[i].Kind != change.Kept {
			t.Changes = append(t.Changes, differenceText(&a.changes[i]))
		}
	}
	a.pageContacts(t)
	data := &planPage{Windows: []pageWindow{}, Recorders: []pageRecorder{}, Volumes: []pageVolume{}}
	if err := a.pageWindows(ctx, t, data); err != nil {
		return nil, nil, err
	}
	a.pageVolumes(t, data)
	return t, data, a.pageRecorders(t, data)
}

// pageContacts takes over the contacts with their links.
func (a *planAnswer) pageContacts(t *reports.Timeline) {
	for i := range a.rows {
		r := &a.rows[i]
		if n := len(t.Contacts); n > r.PlanContact {
			t.Contacts[n-1].Links += ", " + linkText(r)
			t.Contacts[n-1].Value += r.Value
			continue
		}
		w := &a.p.Candidates[a.result.Plan.Contacts[r.PlanContact].Candidate]
		t.Contacts = append(t.Contacts, reports.TimelineContact{Spacecraft: w.Spacecraft, Antenna: w.Antenna, Name: r.Contact, Request: r.Request,
			SetUp: r.SetUpStart, Start: r.Start, End: r.End, TearDown: r.TearDownEnd, Fixed: r.Fixed, Links: linkText(r), Value: r.Value})
	}
}

// pageWindows explains the windows that are not taken, the first ones where they are many.
func (a *planAnswer) pageWindows(ctx context.Context, t *reports.Timeline, data *planPage) error {
	p := a.p
	taken := map[int]bool{}
	for _, c := range a.result.Plan.Contacts {
		taken[c.Candidate] = true
	}
	only := []int{}
	for i := range p.Candidates {
		if !taken[i] && len(only) < mostExplained {
			only = append(only, i)
		}
	}
	list, err := explain.Windows(ctx, p.Problem, a.result.Plan, only)
	if err != nil {
		return err
	}
	said := map[int]*explain.Untaken{}
	for i := range list {
		said[list[i].Candidate] = &list[i]
	}
	for i := range p.Candidates {
		if taken[i] {
			continue
		}
		w := &p.Candidates[i]
		antenna := &p.Antennas[w.Antenna]
		out := pageWindow{Name: w.Name, Spacecraft: p.Spacecraft[w.Spacecraft].Name, Station: p.Stations[antenna.Station].Name, Antenna: antenna.Name,
			Start: utc(p.At(w.Window.From)), End: utc(p.At(w.Window.To)), Cost: num(none, 0)}
		why := "not looked into here: slantwise contacts explain tells"
		if u := said[i]; u != nil {
			why = u.Text
			if u.Priced {
				out.Cost = num(u.Cost, 3)
			}
		}
		out.Why = orNull(why)
		data.Windows = append(data.Windows, out)
		t.Windows = append(t.Windows, reports.TimelineWindow{Spacecraft: w.Spacecraft, Antenna: w.Antenna, Name: w.Name, Start: p.At(w.Window.From), End: p.At(w.Window.To), Why: why})
	}
	return nil
}

// pageVolumes adds the bytes by spacecraft and the UTC day in which a contact begins.
func (a *planAnswer) pageVolumes(t *reports.Timeline, data *planPage) {
	p := a.p
	for i := range p.Spacecraft {
		at := map[time.Time]int{}
		for k := range a.rows {
			r := &a.rows[k]
			if r.Spacecraft != p.Spacecraft[i].Name || !r.HasVolume {
				continue
			}
			day := r.Start.UTC().Truncate(24 * time.Hour)
			n, ok := at[day]
			if !ok {
				n = len(t.Volumes)
				at[day] = n
				t.Volumes = append(t.Volumes, reports.TimelineVolume{Spacecraft: i, Day: day})
			}
			t.Volumes[n].Bytes += r.VolumeBytes
		}
	}
	for _, v := range t.Volumes {
		data.Volumes = append(data.Volumes, pageVolume{p.Spacecraft[v.Spacecraft].Name, v.Day.Format("2006-01-02"), num(v.Bytes, 3)})
	}
}

// pageRecorders follows the recorders through the plan.
func (a *planAnswer) pageRecorders(t *reports.Timeline, data *planPage) error {
	for i := range a.p.Spacecraft {
		if i >= len(a.p.scenario.Spacecraft) || a.p.scenario.Spacecraft[i].Recorder == nil {
			continue
		}
		plan, r, err := a.p.throughRecorder(i, contacts.Plan{Contacts: a.result.Plan.Contacts})
		if err != nil {
			return fmt.Errorf("recorder of %s: %w", a.p.Spacecraft[i].Name, err)
		}
		one := reports.TimelineRecorder{Spacecraft: i, Capacity: plan.Capacity}
		out := pageRecorder{Spacecraft: a.p.Spacecraft[i].Name, Capacity: num(plan.Capacity, 0), Points: []pagePoint{}}
		for _, c := range r.Course {
			at := after(plan.Start, c.Seconds)
			one.Points = append(one.Points, reports.TimelinePoint{At: at, Stored: c.Stored})
			out.Points = append(out.Points, pagePoint{utc(at), num(c.Stored, 0), num(c.Unsent, 0)})
		}
		t.Recorders, data.Recorders = append(t.Recorders, one), append(data.Recorders, out)
	}
	return nil
}
