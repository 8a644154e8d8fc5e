package cli

import (
	"fmt"
	"slices"
	"time"

	"slantwise/cmd/internal/planfiles"
	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/change"
)

// forcePlan is the plan in force in a problem of its own.
type forcePlan struct {
	problem *contacts.Problem
	plan    contacts.Plan
	carried contacts.Plan // what of it stands in the new problem
}

// start is what a search begins with.
func (f *forcePlan) start() *contacts.Plan {
	if f == nil {
		return nil
	}
	return &f.carried
}

// keepPast lets no new contact begin before the instant of planning, where that lies in
// the window, and lets outages close what is still to come.
func (p *planProblem) keepPast() {
	if p.Now <= 0 {
		return
	}
	coming := func(spans []contacts.Span) (out []contacts.Span) {
		for _, s := range spans {
			if s.From = max(s.From, p.Now); s.Length() > 0 {
				out = append(out, s)
			}
		}
		return out
	}
	for i := range p.Stations {
		p.Stations[i].Lead = max(p.Stations[i].Lead, 1)
		p.Stations[i].Closed = coming(p.Stations[i].Closed)
	}
	for i := range p.Antennas {
		p.Antennas[i].Closed = coming(p.Antennas[i].Closed)
	}
	for i := range p.Spacecraft {
		p.Spacecraft[i].Closed = coming(p.Spacecraft[i].Closed)
	}
}

// breakOff gives up what is under way and cannot go on, since something has closed.
func (p *planProblem) breakOff() {
	p.Held = slices.DeleteFunc(p.Held, func(c contacts.Contact) bool {
		stops := p.Busy(c).From <= p.Now && p.Busy(c).To > p.Now && !p.Stands(c)
		if stops {
			p.note("%s is under way and cannot go on: what it needs is closed", p.Candidates[c.Candidate].Name)
		}
		return stops
	})
}

// carry takes the plan of a file into the problem: what is fixed or under way is held,
// every change of the rest has its price. Without a file there is none.
func (p *planProblem) carry(file string) error {
	if file == "" {
		return nil
	}
	rows, err := readPlanFile(file, planfiles.Plan)
	if err != nil {
		return err
	}
	old, plan, err := planOfRows(rows, p.Start)
	if err != nil {
		return &InputError{Err: err}
	}
	p.lend(old)
	for _, lost := range change.Carry(old, plan, p.Problem) {
		p.note("%s cannot stay: %s", lost.Name, lost.Why)
	}
	p.breakOff()
	if err := p.Check(); err != nil {
		return &InputError{Err: fmt.Errorf("with the plan of %s: %w", file, err)}
	}
	carried := append(slices.Clone(p.Held), p.InForce...)
	p.Sort(carried)
	p.force = &forcePlan{old, plan, contacts.Plan{Contacts: carried}}
	return nil
}

// lend gives the windows of a plan of a file what the file does not tell: directions,
// volumes and values of the window with which each shares the most time.
func (p *planProblem) lend(old *contacts.Problem) {
	for i := range old.Candidates {
		w := &old.Candidates[i]
		most := contacts.Ms(0)
		for k := range p.Candidates {
			c := &p.Candidates[k]
			shared := c.Window.Overlap(w.Window)
			if shared > most && p.sameOwners(c, old, w) {
				most = shared
				w.Course, w.Links, w.Uplink, w.Downlink, w.PerSecond = c.Course, c.Links, c.Uplink, c.Downlink, c.PerSecond
			}
		}
	}
}

// sameOwners tells whether two candidates are of the same spacecraft and antenna.
func (p *planProblem) sameOwners(c *contacts.Candidate, old *contacts.Problem, w *contacts.Candidate) bool {
	a, b := &p.Antennas[c.Antenna], &old.Antennas[w.Antenna]
	return a.Name == b.Name && p.Stations[a.Station].Name == old.Stations[b.Station].Name && p.Spacecraft[c.Spacecraft].Name == old.Spacecraft[w.Spacecraft].Name
}

// planOfRows makes a problem whose windows are the contacts of a plan.
func planOfRows(rows []planfiles.PlanRow, start time.Time) (*contacts.Problem, contacts.Plan, error) {
	p := &contacts.Problem{Start: start}
	b := rowNames{map[string]int{}, map[string]int{}, map[string]int{}, map[[2]string]int{}}
	plain := make([]contacts.PlanRow, len(rows))
	for i := range rows {
		plain[i] = rows[i].PlanRow
		b.window(p, &rows[i])
	}
	list, err := p.FromRows(plain)
	return p, contacts.Plan{Contacts: list}, err
}

// rowNames finds what a problem already calls by a name.
type rowNames struct {
	request, spacecraft, stations map[string]int
	antenna                       map[[2]string]int
}

func numbered[K comparable](known map[K]int, name K, add func()) int {
	i, ok := known[name]
	if !ok {
		i = len(known)
		known[name] = i
		add()
	}
	return i
}

// window appends a row as a window that it fills.
func (b *rowNames) window(p *contacts.Problem, r *planfiles.PlanRow) {
	span := contacts.Span{From: p.Ms(r.Start), To: p.Ms(r.End)}
	p.Length = max(p.Length, span.To)
	w := contacts.Candidate{Name: r.Contact, Request: -1, Window: span, Least: max(1, span.Length()), Downlink: true}
	if r.Request != "" {
		w.Request = numbered(b.request, r.Request, func() {
			p.Requests = append(p.Requests, contacts.Request{Name: r.Request, Desired: max(1, span.Length())})
		})
	}
	w.Spacecraft = numbered(b.spacecraft, r.Spacecraft, func() { p.Spacecraft = append(p.Spacecraft, contacts.Spacecraft{Name: r.Spacecraft}) })
	station := numbered(b.stations, r.Station, func() { p.Stations = append(p.Stations, contacts.Station{Name: r.Station}) })
	w.Antenna = numbered(b.antenna, [2]string{r.Station, r.Antenna}, func() {
		p.Antennas = append(p.Antennas, contacts.Antenna{Name: r.Antenna, Station: station})
	})
	if !r.SetUpStart.IsZero() {
		w.SetUp = max(0, span.From-p.Ms(r.SetUpStart))
	}
	if !r.TearDownEnd.IsZero() {
		w.TearDown = max(0, p.Ms(r.TearDownEnd)-span.To)
	}
	p.Candidates = append(p.Candidates, w)
}

// differenceJSON is a change between two plans.
type differenceJSON struct {
	Kind       string  `json:"kind"`
	Request    *string `json:"request"`
	Spacecraft string  `json:"spacecraft"`
	Station    string  `json:"station"`
	Antenna    string  `json:"antenna"`
	WasStart   *string `json:"was_start_utc"`
	WasEnd     *string `json:"was_end_utc"`
	IsStart    *string `json:"is_start_utc"`
	IsEnd      *string `json:"is_end_utc"`
}

func differencesJSON(list []change.Difference) []differenceJSON {
	out := []differenceJSON{}
	for i := range list {
		d := &list[i]
		out = append(out, differenceJSON{string(d.Kind), orNull(d.Request), d.Spacecraft, d.Station, d.Antenna,
			orNull(utc(d.WasStart)), orNull(utc(d.WasEnd)), orNull(utc(d.IsStart)), orNull(utc(d.IsEnd))})
	}
	return out
}

// differenceText is a change for people.
func differenceText(d *change.Difference) string {
	who := fmt.Sprintf("%s over %s %s", d.Spacecraft, d.Station, d.Antenna)
	if d.Request != "" {
		who = d.Request + ", " + who
	}
	switch d.Kind {
	case change.Added:
		return fmt.Sprintf("added: %s, %s to %s", who, utc(d.IsStart), utc(d.IsEnd))
	case change.Dropped:
		return fmt.Sprintf("dropped: %s, %s to %s", who, utc(d.WasStart), utc(d.WasEnd))
	case change.Moved:
		return fmt.Sprintf("moved: %s, from %s to %s, now %s to %s", who, utc(d.WasStart), utc(d.WasEnd), utc(d.IsStart), utc(d.IsEnd))
	}
	return fmt.Sprintf("kept: %s, %s to %s", who, utc(d.IsStart), utc(d.IsEnd))
}
