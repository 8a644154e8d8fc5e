package solve

import (
	"slices"

	"slantwise/downlink/contacts"
)

// force puts a contact into a window whatever is in its way, and tries that elsewhere.
func (s *search) force(i int) {
	b := s.b
	w := &b.m.windows[i]
	length := w.most
	if w.group < len(b.m.p.Requests) && b.m.split {
		left := b.m.p.Requests[w.group].Desired
		for _, x := range b.groups[w.group] {
			left -= x.Length()
		}
		if left > 0 {
			length = min(length, max(w.least, left))
		}
	}
	length = max(-floor(-w.least, b.m.step)*b.m.step, floor(length, b.m.step)*b.m.step)
	if length > w.to-w.from {
		return
	}
	room := floor(w.to-w.from-length, b.m.step)
	from := w.from + ms(s.r.Int64N(int64(room)+1))*b.m.step
	switch s.r.IntN(4) {
	case 0:
		from = w.from
	case 1:
		from = w.from + room*b.m.step
	}
	c := contacts.Contact{Candidate: w.candidate, Span: contacts.Span{From: from, To: from + length}}
	lost := append(s.displace(w, c), w.group)
	for _, x := range slices.Clone(b.groups[w.group]) {
		if !x.must && (!b.m.split || s.r.IntN(3) == 0) {
			b.remove(x)
		}
	}
	if !b.fits(c) {
		s.elsewhere(lost)
		return
	}
	b.add(c)
	in := contacts.Span{From: c.From - w.setUp - 2*length, To: c.To + w.tearDown + 2*length}
	list := s.windowsIn(w.antenna, in)
	if s.r.IntN(2) == 0 {
		s.replanChain(list, in, false)
	}
	s.fill(list, contacts.Span{From: 0, To: b.m.p.Length}, 0.3)
	s.elsewhere(lost)
	for _, x := range slices.Clone(near(b.antennas[w.antenna], in)) {
		b.grow(x)
	}
}

// displace takes off what is in the way of a contact on its antenna, and on its
// spacecraft where that talks to one station at a time, and returns the groups.
func (s *search) displace(w *window, c contacts.Contact) []int {
	b := s.b
	busy := b.m.p.Busy(c)
	var lost []int
	away := func(list []*item, blocks func(x *item) bool) {
		for _, x := range slices.Clone(list) {
			if blocks(x) && !x.must {
				lost = append(lost, x.group)
				b.remove(x)
			}
		}
	}
	away(near(b.antennas[w.antenna], contacts.Span{From: busy.From - contacts.Day, To: busy.To + contacts.Day}), func(x *item) bool { return x.busy.Overlap(busy) > 0 })
	if b.m.p.Spacecraft[w.craft].AtOnce < 2 {
		away(b.crafts[w.craft], func(x *item) bool {
			gap := b.m.gap(w.candidate, x.Candidate)
			return x.From < c.To+gap && c.From < x.To+gap
		})
	}
	return lost
}
