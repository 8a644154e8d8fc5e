package solve

import (
	"cmp"
	"slices"

	"slantwise/downlink/contacts"
)

type ms = contacts.Ms

// window is a part of a candidate in which a contact may lie.
type window struct {
	candidate  int
	antenna    int
	craft      int
	group      int // contacts of one group: a request, or a pass
	from, to   ms
	least      ms
	most       ms // no contact needs to be longer
	setUp      ms
	tearDown   ms
	first, end int // pieces
}

// model is the problem made ready for both sides.
type model struct {
	p       *contacts.Problem
	step    ms
	windows []window // by antenna, begin, candidate
	byCand  [][]int  // windows of each candidate
	groups  int
	station []int // of each candidate
	held    []contacts.Contact
	heldBy  map[int][]contacts.Contact // held ones, by antenna, and by -1 - spacecraft
	heldIn  map[int]bool               // groups that have one
	inForce map[int][]contacts.Contact
	split   bool
}

// newModel prepares a problem that has passed its check.
func newModel(p *contacts.Problem) *model {
	m := &model{p: p, step: p.Resolution(), split: p.Split, groups: len(p.Requests) + len(p.Candidates)}
	m.held, m.heldBy = fixed(p), map[int][]contacts.Contact{}
	m.heldIn, m.inForce = map[int]bool{}, map[int][]contacts.Contact{}
	for _, f := range p.InForce {
		m.inForce[f.Candidate] = append(m.inForce[f.Candidate], f)
	}
	for _, h := range m.held {
		c := &p.Candidates[h.Candidate]
		m.heldBy[c.Antenna] = append(m.heldBy[c.Antenna], h)
		m.heldBy[-1-c.Spacecraft] = append(m.heldBy[-1-c.Spacecraft], h)
		m.heldIn[m.group(h.Candidate)] = true
	}
	for i := range p.Candidates {
		m.station = append(m.station, p.Antennas[p.Candidates[i].Antenna].Station)
	}
	for i := range p.Candidates {
		m.addWindows(i)
	}
	slices.SortFunc(m.windows, func(a, b window) int {
		return cmp.Or(cmp.Compare(a.antenna, b.antenna), cmp.Compare(a.from, b.from), cmp.Compare(a.candidate, b.candidate))
	})
	m.byCand = make([][]int, len(p.Candidates))
	for i, w := range m.windows {
		m.byCand[w.candidate] = append(m.byCand[w.candidate], i)
	}
	return m
}

// fixed returns what must be in the plan: what is held, and what can no longer be
// cancelled.
func fixed(p *contacts.Problem) []contacts.Contact {
	out := slices.Clone(p.Held)
	for _, c := range p.InForce {
		s := &p.Stations[p.Antennas[p.Candidates[c.Candidate].Antenna].Station]
		late := s.Notice > 0 && p.Busy(c).From < p.Now+s.Notice && p.Stands(c)
		if late && !slices.ContainsFunc(out, func(h contacts.Contact) bool { return h.Candidate == c.Candidate && h.Span == c.Span }) {
			c.Fixed = false // it stays, and is not held by anyone
			out = append(out, c)
		}
	}
	p.Sort(out)
	return out
}

// before returns the plan in force with what is fixed; nothing where none is in force.
func (m *model) before() []contacts.Contact {
	if len(m.p.InForce) == 0 {
		return nil
	}
	out := slices.Clone(m.p.InForce)
	for _, h := range m.p.Held {
		if !slices.ContainsFunc(out, func(c contacts.Contact) bool { return c.Candidate == h.Candidate && c.Span == h.Span }) {
			out = append(out, h)
		}
	}
	return out
}

// group returns the group of a candidate: its request, or the pass itself.
func (m *model) group(candidate int) int {
	if r := m.p.Candidates[candidate].Request; r >= 0 {
		return r
	}
	return len(m.p.Requests) + candidate
}

// addWindows appends the parts of a candidate that what is fixed leaves. A contact in
// force may stay although its station could no longer book it.
func (m *model) addWindows(i int) {
	c := &m.p.Candidates[i]
	if !m.split && m.heldIn[m.group(i)] {
		return
	}
	most := m.mostUseful(c)
	add := func(s contacts.Span, least ms) {
		for _, f := range s.Without(m.takenByFixed(i)) {
			if f.Length() >= least {
				m.windows = append(m.windows, window{
					candidate: i, antenna: c.Antenna, craft: c.Spacecraft, group: m.group(i),
					from: f.From, to: f.To, least: least, most: min(max(most, least), f.Length()), setUp: c.SetUp, tearDown: c.TearDown,
				})
			}
		}
	}
	spans := m.p.Available(i)
	for _, s := range spans {
		add(s, c.Least)
	}
	for _, f := range m.inForce[i] {
		if m.p.Stands(f) && !slices.ContainsFunc(spans, func(s contacts.Span) bool { return s.Holds(f.Span) }) {
			add(f.Span, f.Length()) // as it is, or not at all
		}
	}
}

// mostUseful returns the length beyond which a contact is worth no more. Where overlaps
// have a least length, or commands an age, longer contacts may help others.
func (m *model) mostUseful(c *contacts.Candidate) ms {
	most := c.LongestContact()
	if s := &m.p.Spacecraft[c.Spacecraft]; c.Request >= 0 && s.HandOver.Least == 0 && s.Command == nil {
		most = min(most, max(c.Least, m.p.Requests[c.Request].Desired))
	}
	return most
}

// takenByFixed returns the times that fixed contacts take from contacts of a candidate.
func (m *model) takenByFixed(i int) []contacts.Span {
	c := &m.p.Candidates[i]
	craft := &m.p.Spacecraft[c.Spacecraft]
	var out []contacts.Span
	for _, h := range m.heldBy[c.Antenna] {
		b := m.p.Busy(h)
		out = append(out, contacts.Span{From: b.From - c.TearDown, To: b.To + c.SetUp})
	}
	if craft.AtOnce < 2 {
		for _, h := range m.heldBy[-1-c.Spacecraft] {
			gap := m.gap(i, h.Candidate)
			out = append(out, contacts.Span{From: h.From - gap, To: h.To + gap})
		}
	}
	return out
}

// gap returns the least time between contacts of one spacecraft in two candidates.
func (m *model) gap(a, b int) ms {
	craft := &m.p.Spacecraft[m.p.Candidates[a].Spacecraft]
	if m.station[a] != m.station[b] {
		return max(craft.Between, craft.Repoint)
	}
	return craft.Between
}
