package contacts

import (
	"errors"
	"fmt"
	"time"
)

// Row is a link of a contact as plans are written: a row a link, and the rows of a
// contact share its name.
type Row struct {
	Contact     string // the candidate's name; where a candidate has several contacts the later ones end in " (2)", " (3)"
	Request     string // empty: an own pass
	Station     string
	Antenna     string
	Spacecraft  string
	Transmitter string // empty: the contact has no link of its own
	Start, End  time.Time
	SetUpStart  time.Time
	TearDownEnd time.Time
	VolumeBytes float64
	Value       float64 // the contact's, by the bytes of its links
	Fixed       bool
	PlanContact int // index into the plan
	HasVolume   bool
}

// Rows returns a plan as rows, in its order. The worth is that of the plan; without it
// (nil slices) value and volume are zero.
func (p *Problem) Rows(plan Plan, w Worth) []Row {
	out := []Row{}
	seen := map[int]int{}
	for i, c := range plan.Contacts {
		a := &p.Candidates[c.Candidate]
		seen[c.Candidate]++
		name := a.Name
		if n := seen[c.Candidate]; n > 1 {
			name = fmt.Sprintf("%s (%d)", name, n)
		}
		busy := p.Busy(c)
		r := Row{
			Contact: name, Station: p.Stations[p.Antennas[a.Antenna].Station].Name, Antenna: p.Antennas[a.Antenna].Name,
			Spacecraft: p.Spacecraft[a.Spacecraft].Name, Start: p.At(c.From), End: p.At(c.To),
			SetUpStart: p.At(busy.From), TearDownEnd: p.At(busy.To), Fixed: c.Fixed, PlanContact: i,
		}
		if a.Request >= 0 {
			r.Request = p.Requests[a.Request].Name
		}
		if i < len(w.ByContact) {
			r.Value = w.ByContact[i]
		}
		out = appendLinks(out, r, a, c, w)
	}
	return out
}

// appendLinks appends a contact's row for each link.
func appendLinks(out []Row, r Row, a *Candidate, c Contact, w Worth) []Row {
	if len(a.Links) == 0 {
		return append(out, r)
	}
	raw := a.Bytes(c.Span)
	value, counted := r.Value, raw
	if r.PlanContact < len(w.ByteShare) {
		counted = w.ByteShare[r.PlanContact]
	}
	for k := range a.Links {
		share := 1 / float64(len(a.Links))
		if raw > 0 {
			share = a.Links[k].Bytes(c.Span) / raw
		}
		r.Transmitter, r.VolumeBytes, r.Value, r.HasVolume = a.Links[k].Transmitter, counted*share, value*share, true
		out = append(out, r)
	}
	return out
}

// PlanRow is a row of a plan that was written elsewhere or by hand, as far as it says
// what is planned.
type PlanRow struct {
	Place               string // "plan.csv: line 7", leads the errors
	Contact             string
	Request, Spacecraft string
	Station, Antenna    string
	Start, End          time.Time
	Fixed               bool
}

// FromRows finds the contacts that rows mean: rows of one name are links of one contact,
// and the contact belongs to the candidate of its request, spacecraft and antenna with
// which it shares the most time, even where it does not lie wholly in it (the checker
// then says so). All faults are returned at once; contacts that could be read are
// returned beside them.
func (p *Problem) FromRows(rows []PlanRow) ([]Contact, error) {
	var out []Contact
	var faults []error
	seen := map[string]PlanRow{}
	for _, r := range rows {
		if !r.End.After(r.Start) {
			faults = append(faults, fmt.Errorf("%s: contact %q ends at %s and does not end after its start %s; are the two reversed?", r.Place, r.Contact, clock(r.End), clock(r.Start)))
			continue
		}
		if first, ok := seen[r.Contact]; ok && r.Contact != "" {
			if !first.Start.Equal(r.Start) || !first.End.Equal(r.End) || first.Antenna != r.Antenna || first.Station != r.Station {
				faults = append(faults, fmt.Errorf("%s: contact %q stands at other times or on another antenna than in %s; links of one contact share both", r.Place, r.Contact, first.Place))
			}
			continue
		}
		seen[r.Contact] = r
		c, err := p.locate(r)
		if err != nil {
			faults = append(faults, err)
			continue
		}
		out = append(out, c)
	}
	p.Sort(out)
	return out, errors.Join(faults...)
}

// locate finds the candidate of a row.
func (p *Problem) locate(r PlanRow) (Contact, error) {
	span := Span{p.Ms(r.Start), p.Ms(r.End)}
	best, most := -1, Ms(0)
	for i := range p.Candidates {
		c := &p.Candidates[i]
		a := &p.Antennas[c.Antenna]
		request := ""
		if c.Request >= 0 {
			request = p.Requests[c.Request].Name
		}
		if a.Name != r.Antenna || p.Stations[a.Station].Name != r.Station || p.Spacecraft[c.Spacecraft].Name != r.Spacecraft || request != r.Request {
			continue
		}
		if o := c.Window.Overlap(span); o > most {
			best, most = i, o
		}
	}
	if best < 0 {
		return Contact{}, fmt.Errorf("%s: contact %q: no window of spacecraft %q, request %q on antenna %q of station %q holds any of %s to %s; are the names and the day right?",
			r.Place, r.Contact, r.Spacecraft, r.Request, r.Antenna, r.Station, clock(r.Start), clock(r.End))
	}
	return Contact{Candidate: best, Span: span, Fixed: r.Fixed}, nil
}
