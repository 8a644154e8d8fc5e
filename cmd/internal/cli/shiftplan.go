package cli

import (
	"errors"
	"fmt"
	"slices"
	"time"

	"slantwise/cmd/internal/planfiles"
)

// planContact is a contact of a plan: its rows are its links.
type planContact struct {
	row          planfiles.PlanRow
	transmitters []string
	bytes        float64
}

// fromPlan finds the passes of the plan's contacts.
func (j *shiftJob) fromPlan() ([]shiftChoice, error) {
	var contacts []planContact
	for _, r := range j.rows {
		i := slices.IndexFunc(contacts, func(c planContact) bool {
			return c.row.Spacecraft == r.Spacecraft && c.row.Antenna == r.Antenna && c.row.Start.Equal(r.Start) && c.row.End.Equal(r.End)
		})
		if i < 0 {
			i, contacts = len(contacts), append(contacts, planContact{row: r})
		}
		if r.Transmitter != "" {
			contacts[i].transmitters = append(contacts[i].transmitters, r.Transmitter)
		}
		contacts[i].bytes += r.VolumeBytes
	}
	var list []shiftChoice
	var faults []error
	for i := range contacts {
		one, err := j.contactOf(&contacts[i])
		if errors.As(err, new(*InputError)) {
			faults = append(faults, err)
			continue
		}
		if err != nil {
			return nil, err
		}
		list = append(list, *one)
	}
	return list, joinInput(faults)
}

// contactOf is a contact of the plan on the pass that it shares the most time with.
func (j *shiftJob) contactOf(k *planContact) (*shiftChoice, error) {
	r := &k.row
	var pages []*reportPage
	for i := range j.report.pages {
		p := &j.report.pages[i]
		if j.report.craft[p.Spacecraft].Name != r.Spacecraft || !p.LOS.After(r.Start) || !p.AOS.Before(r.End) || p.link != nil && p.link.antenna.Name != r.Antenna {
			continue
		}
		if p.link == nil || len(k.transmitters) == 0 || slices.Contains(k.transmitters, p.link.transmitter.Name) {
			pages = append(pages, p)
		}
	}
	if len(pages) == 0 {
		return nil, inputErrorf("%s: %s has no pass over %s, %s, from %s to %s; was the plan made of other elements or of another scenario?",
			r.Place, r.Spacecraft, r.Station, r.Antenna, utc(r.Start), utc(r.End))
	}
	one, err := j.weigh(pages)
	if err != nil {
		return nil, err
	}
	if one.why != "" {
		one.cautions = append(one.cautions, "The plan has this contact, and by the scenario "+one.why+".")
	}
	one.name, one.start, one.end = r.Contact, r.Start, r.End
	if k.bytes >= 0 {
		one.bytes = k.bytes
	}
	// A plan has whole seconds or so: what is cut off by less is no news.
	for _, e := range []struct {
		at    *time.Time
		bound time.Time
		early bool
		name  string
	}{{&one.start, one.page.AOS, true, "begins %s before AOS"}, {&one.end, one.page.LOS, false, "ends %s after LOS"}} {
		off := e.bound.Sub(*e.at)
		if !e.early {
			off = -off
		}
		if off <= 0 {
			continue
		}
		*e.at = e.bound
		if off > time.Second {
			one.cautions = append(one.cautions, fmt.Sprintf("The plan "+e.name+" by the elements of now: was it made of others?", off.Round(time.Second/10)))
		}
	}
	return one, nil
}
