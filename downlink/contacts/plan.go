package contacts

import (
	"cmp"
	"slices"
)

// Contact is a time that is taken of a candidate.
type Contact struct {
	Candidate int
	Span
	Fixed bool // held by the problem
}

// Busy returns the time in which a contact takes its antenna, set-up and tear-down
// included.
func (p *Problem) Busy(c Contact) Span {
	w := &p.Candidates[c.Candidate]
	return Span{c.From - w.SetUp, c.To + w.TearDown}
}

// Plan is contacts in the order of Sort.
type Plan struct{ Contacts []Contact }

// Sort brings contacts into the order in which plans are written: by begin, then by
// antenna, then by candidate.
func (p *Problem) Sort(contacts []Contact) {
	slices.SortFunc(contacts, func(a, b Contact) int {
		return cmp.Or(cmp.Compare(a.From, b.From),
			cmp.Compare(p.Candidates[a.Candidate].Antenna, p.Candidates[b.Candidate].Antenna),
			cmp.Compare(a.Candidate, b.Candidate))
	})
}

// Worth is the value of a plan by its terms: Value = Contacts + Share - Price - Changes.
type Worth struct {
	Value    float64 `json:"value"`
	Contacts float64 `json:"contacts_value"` // worth of the contacts, every one by itself in ByContact
	Share    float64 `json:"share_value"`
	Price    float64 `json:"price_value"`
	Changes  float64 `json:"changes_value"`

	Money     float64   `json:"money"`
	Changed   int       `json:"changed"` // contacts dropped, added or moved against the plan in force
	Bytes     float64   `json:"bytes"`   // counted once
	ByContact []float64 `json:"-"`       // in the order of the plan
	ByteShare []float64 `json:"-"`       // bytes counted to each contact, in the order of the plan
}

// Price returns the money that a contact costs.
func (p *Problem) Price(c Contact) float64 {
	a := &p.Antennas[p.Candidates[c.Candidate].Antenna]
	return a.PerContact + a.PerMinute*c.Length().Seconds()/60
}

// Names returns whether the limit counts contacts of a candidate.
func (l *Limit) Names(p *Problem, candidate int) bool {
	c := &p.Candidates[candidate]
	a := &p.Antennas[c.Antenna]
	in := func(list []int, i int) bool { return len(list) == 0 || slices.Contains(list, i) }
	return in(l.Stations, a.Station) && in(l.Antennas, c.Antenna) && in(l.Spacecraft, c.Spacecraft) &&
		(l.Contract == "" || l.Contract == a.Contract || l.Contract == p.Spacecraft[c.Spacecraft].Contract)
}
