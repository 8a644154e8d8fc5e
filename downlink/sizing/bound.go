package sizing

import (
	"math"

	"slantwise/orbit/unit"
	"slantwise/station"
)

// possible tells whether any diameter between two that do not meet all could.
func (q *search) possible(a, b unit.Length) (bool, error) {
	more := 20 * math.Log10(b.Metres()/a.Metres())
	still, err := q.study.stiller(a, b)
	if err != nil {
		return false, err
	}
	more += still
	moved, _ := q.study.Moved()
	for _, d := range q.grid { // one that has as much more, and does not meet either, excludes it for nothing
		o := q.study.known[q.at(d)]
		if moved > 0 { // a greater dish may fail by its mount
			break
		}
		if d <= b || o == nil || q.parts&^o.done != 0 {
			continue
		}
		gain, err := q.study.gainOver(d, a)
		if err != nil {
			return false, err
		}
		if gain >= more {
			for i := range q.needs {
				if !q.needs[i].Met(o) {
					return false, nil
				}
			}
			break
		}
	}
	v := q.at(a)
	v.Power += unit.DB(more)
	v.follows = !q.study.slowing(a, b)
	return q.met(v)
}

// slowing tells that no mount follows more with any diameter up to b than with a: beams and
// tolerances narrow, and the rates do not rise.
func (s *Study) slowing(a, b unit.Length) bool {
	for _, i := range s.spec.Sites {
		m := s.spec.Places[i].Clear.Antenna.Mount
		if m == nil {
			continue
		}
		before, _ := m.ForDiameter(a)
		for _, d := range append(rowsWithin(m, a, b), b) {
			now, _ := m.ForDiameter(d)
			if now.Lower.Rate > before.Lower.Rate || now.Upper.Rate > before.Upper.Rate {
				return false
			}
			before = now
		}
	}
	return true
}

// rowsWithin lists the diameters between two at which the change of a mount's rates changes.
func rowsWithin(m *station.Mount, a, b unit.Length) []unit.Length {
	var out []unit.Length
	for _, r := range m.ByDiameter {
		if r.Diameter > a && r.Diameter < b {
			out = append(out, r.Diameter)
		}
	}
	return out
}

// stiller returns how much less the weather takes with the aperture of b than with that
// of a, at most, in dB: what scintillation loses by averaging.
func (s *Study) stiller(a, b unit.Length) (float64, error) {
	most := 0.0
	for _, i := range s.spec.Sites {
		fa, err := s.front(i, Variant{Diameter: a})
		if err != nil {
			return 0, err
		}
		fb, err := s.front(i, Variant{Diameter: b})
		if err != nil {
			return 0, err
		}
		for r := range fa.clear {
			most = max(most, (fa.clear[r]-fa.planned[r])-(fb.clear[r]-fb.planned[r]))
			if fa.losses == nil {
				continue
			}
			for k := range fa.losses[r] {
				most = max(most, fa.losses[r][k]-fb.losses[r][k])
			}
		}
	}
	return most, nil
}

// gainOver returns the least that a diameter gains over another at any site, elevation
// and percentage.
func (s *Study) gainOver(d, over unit.Length) (float64, error) {
	least := math.Inf(1)
	for _, i := range s.spec.Sites {
		fd, err := s.front(i, Variant{Diameter: d})
		if err != nil {
			return 0, err
		}
		fo, err := s.front(i, Variant{Diameter: over})
		if err != nil {
			return 0, err
		}
		if !fd.usable && fo.usable {
			return math.Inf(-1), nil
		}
		for r := range fd.clear {
			least = min(least, fd.clear[r]-fo.clear[r])
		}
	}
	return least, nil
}
