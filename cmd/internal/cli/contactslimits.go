package cli

import (
	"errors"
	"fmt"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink/contacts"
)

// joinInput returns faults of the input as one error, or nil.
func joinInput(faults []error) error {
	if err := errors.Join(faults...); err != nil {
		return &InputError{Err: err}
	}
	return nil
}

// limit takes the limits of the scenario into the problem.
func (p *planProblem) limit() error {
	for i := range p.plan.Limits {
		p.Limits = append(p.Limits, p.limitOf(&p.plan.Limits[i]))
	}
	for _, x := range p.plan.Shared {
		out := contacts.Shared{Name: x.Name, Capacity: x.AtOnce, Busy: x.FromSetUp}
		for i := range p.Antennas {
			a := &p.Antennas[i]
			if p.Stations[a.Station].Name == x.Station && (len(x.Antennas) == 0 || contains(x.Antennas, a.Name)) {
				out.Antennas = append(out.Antennas, i)
			}
		}
		p.Shared = append(p.Shared, out)
	}
	for i := range p.scenario.Spacecraft {
		c := &p.scenario.Spacecraft[i]
		most := p.plan.Craft(c.Name).PerOrbit
		if most == 0 {
			continue
		}
		if c.Elements.CatalogNumber == 0 && c.Elements.Epoch.IsZero() {
			p.note("%s: the most contact time an orbit is not kept to, as its orbit is not read", c.Name)
			continue
		}
		facts, err := c.Elements.Facts()
		if err != nil {
			return &InputError{Err: fmt.Errorf("spacecraft %s: %w", c.Name, err)}
		}
		time := lengthMs(most)
		p.Limits = append(p.Limits, contacts.Limit{Name: "contact time an orbit of " + c.Name, Spacecraft: []int{i}, Rolling: lengthMs(facts.Period), Time: &time})
	}
	return nil
}

func (p *planProblem) limitOf(l *scenario.PlanLimit) contacts.Limit {
	out := contacts.Limit{Name: l.Name, Contract: l.Contract, Contacts: l.Contacts, Price: l.Price}
	if l.Minutes != nil {
		t := contacts.Ms(*l.Minutes * 60_000)
		out.Time = &t
	}
	for i := range p.Stations {
		if contains(l.Stations, p.Stations[i].Name) {
			out.Stations = append(out.Stations, i)
		}
	}
	for i := range p.Antennas {
		a := &p.Antennas[i]
		if l.Antenna != "" && a.Name == l.Antenna && contains(l.Stations, p.Stations[a.Station].Name) {
			out.Antennas = append(out.Antennas, i)
		}
	}
	for i := range p.Spacecraft {
		if contains(l.Spacecraft, p.Spacecraft[i].Name) {
			out.Spacecraft = append(out.Spacecraft, i)
		}
	}
	switch l.In {
	case scenario.UTCDay:
		out.Spans = p.UTCDays()
	case scenario.LocalDay:
		out.Spans = p.LocalDays(l.Zone)
	case scenario.Any24h:
		out.Rolling = contacts.Day
	}
	return out
}

func contains(list []string, word string) bool {
	for _, s := range list {
		if s == word {
			return true
		}
	}
	return false
}
