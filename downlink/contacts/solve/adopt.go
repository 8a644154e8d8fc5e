package solve

import (
	"cmp"
	"slices"

	"slantwise/downlink/contacts"
)

// load puts a plan on the board in place of what is there.
func (s *search) load(plan contacts.Plan) {
	s.empty()
	for _, c := range plan.Contacts {
		if !slices.ContainsFunc(s.b.m.held, func(h contacts.Contact) bool { return h.Candidate == c.Candidate && h.Span == c.Span }) {
			s.b.add(c)
		}
	}
	s.b.log = s.b.log[:0]
}

// begin puts what can stand of a plan on the board, in its order, and keeps it where
// filling it up costs more in changes than it gains.
func (s *search) begin(plan contacts.Plan) {
	list := slices.Clone(plan.Contacts)
	slices.SortFunc(list, func(a, b contacts.Contact) int {
		return cmp.Or(cmp.Compare(a.From, b.From), cmp.Compare(a.Candidate, b.Candidate))
	})
	for _, c := range list {
		for _, i := range s.b.m.byCand[c.Candidate] {
			if w := &s.b.m.windows[i]; w.from <= c.From && c.To <= w.to && c.From%s.b.m.step == 0 && c.To%s.b.m.step == 0 && s.b.fits(c) {
				s.b.add(c)
				break
			}
		}
	}
	s.b.settle()
	s.keep()
	s.copy()
}

// empty takes off all that can be.
func (s *search) empty() {
	for _, list := range s.b.antennas {
		for _, x := range slices.Clone(list) {
			if !x.must {
				s.b.remove(x)
			}
		}
	}
}

// adopt makes a plan of what the relaxed problem has chosen: contacts by their worth at
// the prices, as far as they fit or a part of them, then the rest as the first plan. It
// stays on the board where it is no worse than the best by much.
func (s *search) adopt(list []chosen) {
	s.empty()
	s.guideBy(full)
	m := s.b.m
	type ranked struct {
		chosen
		rank float64
	}
	var order []ranked
	for _, c := range list {
		if c.window >= 0 {
			order = append(order, ranked{c, s.density(c.window)})
		}
	}
	slices.SortStableFunc(order, func(a, b ranked) int { return cmp.Compare(b.rank, a.rank) })
	for _, x := range order {
		w := &m.windows[x.window]
		for _, o := range s.b.openings(w, contacts.Span{From: x.from, To: x.to}, nil) {
			s.b.try(w, o, false)
		}
	}
	s.greedy()
	s.b.settle()
	if s.b.total > s.bestValue {
		s.keep()
		s.copy()
	} else {
		s.load(s.best)
	}
	s.b.log = s.b.log[:0]
}
