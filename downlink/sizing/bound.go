package sizing

import (
	"math"

	"slantwise/orbit/unit"
)

// possible tells whether any diameter between two that do not meet all could.
func (q *search) possible(a, b unit.Length) (bool, error) {
	more := 20 * math.Log10(b.Metres()/a.Metres())
	still, err := q.study.stiller(a, b)
	if err != nil {
		return false, err
	}
	more += still
	for _, d := range q.grid { // one that has as much more, and does not meet either, excludes it for nothing
		o := q.study.known[q.at(d)]
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
	return q.met(v)
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
