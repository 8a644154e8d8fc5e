package cli

import (
	"encoding/json"

	"slantwise/reports"
)

// comparisonJSON is every number of the page of two scenarios.
type comparisonJSON struct {
	Answer      string           `json:"answer"`
	FromUTC     string           `json:"from_utc"`
	ToUTC       string           `json:"to_utc"`
	Before      comparedSideJSON `json:"before"`
	After       comparedSideJSON `json:"after"`
	Totals      []totalJSON      `json:"totals"`
	Passes      json.RawMessage  `json:"passes"`
	Differences []differingJSON  `json:"differences"`
	Notes       []string         `json:"notes"`
}

type comparedSideJSON struct {
	Scenario string          `json:"scenario"`
	Orbits   []flownJSON     `json:"orbits"`
	Models   []modelNameJSON `json:"models"`
	Defaults []string        `json:"defaults"`
}

// flownJSON is the orbit of a spacecraft; null: it has no epoch.
type flownJSON struct {
	Spacecraft  string  `json:"spacecraft"`
	Orbit       string  `json:"orbit"`
	EpochUTC    *string `json:"epoch_utc"`
	AgeFromDays number  `json:"age_at_start_days"`
	AgeToDays   number  `json:"age_at_end_days"`
}

type modelNameJSON struct {
	Of   string `json:"of"`
	Name string `json:"name"`
}

// totalJSON is a sum; spacecraft and station are null where it is over all.
type totalJSON struct {
	Spacecraft    *string `json:"spacecraft"`
	Station       *string `json:"station"`
	PassesBefore  int     `json:"passes_before"`
	PassesAfter   int     `json:"passes_after"`
	ContactBefore number  `json:"contact_before_s"`
	ContactAfter  number  `json:"contact_after_s"`
	BytesBefore   number  `json:"volume_before_bytes"`
	BytesAfter    number  `json:"volume_after_bytes"`
	MarginChange  number  `json:"median_margin_change_db"`
}

type differingJSON struct {
	Key    string  `json:"key"`
	Before *string `json:"before"`
	After  *string `json:"after"`
}

func (c *comparison) json(p *reports.Comparison, table *sheet) (*comparisonJSON, error) {
	rows, err := table.jsonRows()
	if err != nil {
		return nil, err
	}
	out := &comparisonJSON{Answer: p.Answer, FromUTC: utc(p.From), ToUTC: utc(p.To), Passes: rows,
		Before: sideJSON(&p.Basis[0]), After: sideJSON(&p.Basis[1]), Totals: []totalJSON{}, Differences: []differingJSON{}, Notes: append([]string{}, p.Notes...)}
	for _, t := range p.Totals {
		out.Totals = append(out.Totals, totalJSON{orNull(t.Spacecraft), orNull(t.Station), t.Passes[0], t.Passes[1],
			num(t.Contact[0].Seconds(), 3), num(t.Contact[1].Seconds(), 3), num(t.Bytes[0], 0), num(t.Bytes[1], 0), num(t.MarginChangeDB, 3)})
	}
	for _, d := range p.Differs {
		out.Differences = append(out.Differences, differingJSON{d.Key, orNull(d.Before), orNull(d.After)})
	}
	return out, nil
}

func sideJSON(b *reports.Basis) comparedSideJSON {
	out := comparedSideJSON{Scenario: b.Scenario, Orbits: []flownJSON{}, Models: []modelNameJSON{}, Defaults: []string{}}
	for _, o := range b.Orbits {
		one := flownJSON{Spacecraft: o.Spacecraft, Orbit: o.Orbit, EpochUTC: orNull(utc(o.Epoch)), AgeFromDays: num(none, 0), AgeToDays: num(none, 0)}
		if !o.Epoch.IsZero() {
			one.AgeFromDays, one.AgeToDays = num(o.AgeFrom.Hours()/24, 4), num(o.AgeTo.Hours()/24, 4)
		}
		out.Orbits = append(out.Orbits, one)
	}
	for _, m := range b.Models {
		out.Models = append(out.Models, modelNameJSON{m.Of, m.Name})
	}
	for _, n := range b.Defaults {
		out.Defaults = append(out.Defaults, n.About+": "+n.Text)
	}
	return out
}
