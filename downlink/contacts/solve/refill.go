package solve

import (
	"math"

	"slantwise/downlink/contacts"
)

// replanChain plans the free time of an antenna, or of a spacecraft, within a span by
// dynamic programming, with the guide's prices for what it takes from others, and adds
// what fits.
func (s *search) replanChain(windows []int, in contacts.Span, craft bool) {
	base, end := ms(math.MaxInt64), ms(math.MinInt64)
	for _, i := range windows {
		w := &s.b.m.windows[i]
		base = min(base, max(w.from, in.From)-w.setUp)
		end = max(end, min(w.to, in.To)+w.tearDown)
	}
	if base > end {
		return
	}
	cell := s.cell
	for (end-base)/cell > 4000 { // long spans are planned more coarsely, and grown
		cell *= 2
	}
	first := floor(base, cell) - 1
	s.slots, s.refs, s.gains = s.slots[:0], s.refs[:0], s.gains[:0]
	last := s.fillSlots(windows, in, craft, cell, first)
	if len(s.slots) == 0 {
		return
	}
	sortSlots(s.slots, s.refs)
	_, picks := s.chain.run(s.slots, last)
	for k := len(picks) - 1; k >= 0; k-- {
		x := picks[k]
		w := &s.b.m.windows[s.refs[x.slot]]
		c := contacts.Contact{Candidate: w.candidate, Span: contacts.Span{From: (ms(x.s) + first) * cell, To: (ms(x.e) + first) * cell}}
		if s.b.addPaying(c) {
			continue
		}
		s.open = s.b.openings(w, c.Span, s.open[:0])
		for _, o := range s.open {
			s.b.try(w, o, false)
		}
	}
	for _, i := range windows {
		for _, x := range s.b.groups[s.b.m.windows[i].group] {
			if x.Candidate == s.b.m.windows[i].candidate {
				s.b.grow(x)
				break
			}
		}
	}
}

// fillSlots lays out the openings of windows as slots and returns the last cell.
func (s *search) fillSlots(windows []int, in contacts.Span, craft bool, cell, first ms) int {
	last := 0
	up := func(t ms) int { return int(-floor(-t, cell)) }
	for _, i := range windows {
		w := &s.b.m.windows[i]
		if !s.b.m.split && len(s.b.groups[w.group]) > 0 {
			continue
		}
		s.open = s.b.openings(w, in, s.open[:0])
		for _, o := range s.open {
			from, to := -floor(-o.From, cell), floor(o.To, cell)
			most := s.b.wanted(w, o)
			x := slot{from: int(from - first), to: int(to - first), least: max(1, up(w.least)), most: int(floor(most, cell)), setUp: up(w.setUp), tearDown: up(w.tearDown), fixed: s.d.once(i, s.guide)}
			if craft {
				x.setUp, x.tearDown = 0, up(s.b.m.p.Spacecraft[w.craft].Between)
			}
			if most == 0 || x.to-x.from < x.least || x.most < x.least || x.from < x.setUp {
				continue
			}
			at := len(s.gains)
			s.gains = s.d.cumulative(w, i, s.guide, from, int(to-from), cell, s.gains)
			x.begin = s.gains[at:len(s.gains):len(s.gains)]
			x.end = x.begin
			last = max(last, x.to+x.tearDown)
			s.slots, s.refs = append(s.slots, x), append(s.refs, i)
		}
	}
	return last
}

// sortSlots orders slots by their begin, with the windows that they stand for.
func sortSlots(slots []slot, refs []int) {
	for k := 1; k < len(slots); k++ {
		for j := k; j > 0 && slots[j].from < slots[j-1].from; j-- {
			slots[j], slots[j-1] = slots[j-1], slots[j]
			refs[j], refs[j-1] = refs[j-1], refs[j]
		}
	}
}
