package solve

import (
	"cmp"
	"math"
	"slices"

	"slantwise/downlink/contacts"
)

// density returns what a millisecond of a window is worth, with set-up and tear-down, if
// all of it that is useful were taken.
func (s *search) density(i int) float64 {
	if v := s.densities[s.share][i]; !math.IsNaN(v) {
		return v
	}
	w := &s.b.m.windows[i]
	value := 0.0
	at := w.from
	for x := w.first; x < w.end; x++ {
		q := &s.d.pieces[x]
		gain, _ := s.d.slope(q, s.d.perMs[i], s.guide)
		value += gain * float64(q.to-at)
		at = q.to
	}
	value *= float64(w.most) / float64(w.to-w.from)
	v := (value - s.d.once(i, s.guide)) / float64(w.most+w.setUp+w.tearDown)
	s.densities[s.share][i] = v
	return v
}

// fill tries windows, best first by density times a factor that spread draws from
// [1-spread, 1], in every opening within a span.
func (s *search) fill(windows []int, in contacts.Span, spread float64) {
	type ranked struct {
		window int
		rank   float64
	}
	list := make([]ranked, len(windows))
	for k, i := range windows {
		list[k] = ranked{i, s.density(i) * (1 - spread*s.r.Float64())}
	}
	slices.SortFunc(list, func(a, b ranked) int { return cmp.Or(cmp.Compare(b.rank, a.rank), cmp.Compare(a.window, b.window)) })
	for _, x := range list {
		s.fillWindow(x.window, in)
	}
}

// fillWindow takes what it can of a window.
func (s *search) fillWindow(i int, in contacts.Span) {
	b := s.b
	w := &b.m.windows[i]
	if !b.m.split && len(b.groups[w.group]) > 0 {
		return
	}
	s.open = b.openings(w, in, s.open[:0])
	// The longest opening first; its side towards the nearest edge of the window.
	slices.SortStableFunc(s.open, func(x, y contacts.Span) int { return cmp.Compare(y.Length(), x.Length()) })
	for _, o := range s.open {
		right := w.to-o.To < o.From-w.from
		if s.r.IntN(4) == 0 {
			right = !right
		}
		if b.try(w, o, right) || b.try(w, o, !right) {
			if !b.m.split {
				return
			}
		}
	}
}

// greedy makes the first plan: all windows by density, then longer where there is room.
func (s *search) greedy() {
	all := make([]int, len(s.b.m.windows))
	for i := range all {
		all[i] = i
	}
	everywhere := contacts.Span{From: 0, To: s.b.m.p.Length}
	s.fill(all, everywhere, 0)
	s.growAll()
	if s.b.hasCommands() {
		s.fill(all, everywhere, 0) // uplinks of the first round let downlinks in
	}
}

func (s *search) growAll() {
	for _, list := range s.b.antennas {
		for _, x := range slices.Clone(list) {
			s.b.grow(x)
		}
	}
}

// hasCommands tells whether any spacecraft needs commands loaded.
func (b *board) hasCommands() bool {
	return slices.ContainsFunc(b.m.p.Spacecraft, func(s contacts.Spacecraft) bool { return s.Command != nil })
}
