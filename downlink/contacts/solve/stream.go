package solve

import (
	"cmp"
	"slices"

	"slantwise/downlink/contacts"
)

// stretch is a time in which one contact of a spacecraft brings bytes at an even rate.
type stretch struct {
	from, to ms
	owner    int     // place in the list of contacts
	rate     float64 // bytes a second
	value    float64 // a second, without a recorder
}

// sharedValues returns what each of a spacecraft's passes is worth where that follows from
// all of them: with a recorder, or where data at the same time are the same.
func (m *model) sharedValues(craft int, list []*item) []float64 {
	values := make([]float64, len(list))
	s := &m.p.Spacecraft[craft]
	stream := m.stream(list, s.SameData, s.Recorder != nil)
	if s.Recorder != nil {
		newTank(s.Recorder, m.p.Length).run(stream, values)
		return values
	}
	for _, x := range stream {
		values[x.owner] += x.value * (x.to - x.from).Seconds()
	}
	return values
}

// stream cuts contacts into stretches, in order. Where data are the same, the one that
// brings most is left at each instant, by value or, with a recorder, by bytes.
func (m *model) stream(list []*item, sameData, recorded bool) []stretch {
	var out []stretch
	for i, x := range list {
		out = m.appendStretches(out, i, x.Contact)
	}
	if sameData {
		out = overlay(out, recorded)
	}
	slices.SortStableFunc(out, func(a, b stretch) int { return cmp.Compare(a.from, b.from) })
	return out
}

// appendStretches appends a contact, cut where the rate of a link changes.
func (m *model) appendStretches(out []stretch, owner int, c contacts.Contact) []stretch {
	w := &m.p.Candidates[c.Candidate]
	cuts := []ms{c.From, c.To}
	for _, l := range w.Links {
		for _, v := range l.Volume {
			if c.From < v.At && v.At < c.To {
				cuts = append(cuts, v.At)
			}
		}
	}
	slices.Sort(cuts)
	cuts = slices.Compact(cuts)
	for k := 1; k < len(cuts); k++ {
		x := stretch{from: cuts[k-1], to: cuts[k], owner: owner}
		seconds := (x.to - x.from).Seconds()
		for l := range w.Links {
			b := w.Links[l].Bytes(contacts.Span{From: x.from, To: x.to}) / seconds
			x.rate += b
			x.value += b * w.Links[l].PerByte
		}
		out = append(out, x)
	}
	return out
}

// overlay keeps at each instant the stretch that brings most, the first of equals.
func overlay(in []stretch, recorded bool) []stretch {
	cuts := make([]ms, 0, 2*len(in))
	for _, x := range in {
		cuts = append(cuts, x.from, x.to)
	}
	slices.Sort(cuts)
	cuts = slices.Compact(cuts)
	best := make([]int, len(cuts))
	for k := range best {
		best[k] = -1
	}
	more := func(a, b stretch) bool {
		if recorded || a.value == b.value {
			return a.rate > b.rate
		}
		return a.value > b.value
	}
	for i, x := range in {
		k, _ := slices.BinarySearch(cuts, x.from)
		for ; cuts[k] < x.to; k++ {
			if best[k] < 0 || more(x, in[best[k]]) {
				best[k] = i
			}
		}
	}
	var out []stretch
	for k, i := range best {
		if i >= 0 {
			x := in[i]
			x.from, x.to = cuts[k], cuts[k+1]
			out = append(out, x)
		}
	}
	return out
}
