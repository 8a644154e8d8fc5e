package sizing

import (
	"cmp"
	"math"
	"slices"

	"slantwise/orbit/unit"
)

// Sensitivity is what a small change of the design costs.
type Sensitivity struct {
	Name        string      // "1 dB less transmit power"
	BytesPerDay float64     // change of the mean bytes a day with the diameter held
	Diameter    unit.Length // how much greater the least diameter becomes; NaN where none meets all any more
}

// changes are the steps of the sensitivities. Noise is changed by ten kelvins and told
// for one, in which it is almost straight.
var changes = []struct {
	name  string
	of    float64 // so many of what the name says are in the variant
	apply func(*Variant)
}{
	{"1 dB more pointing loss", 1, func(v *Variant) { v.Pointing++ }},
	{"1 dB less transmit power", 1, func(v *Variant) { v.Power-- }},
	{"1 K more noise", 10, func(v *Variant) { v.Noise += 10 }},
	{"1 deg higher least elevation", 1, func(v *Variant) { v.Raise += unit.Degree }},
}

// Sensitivities changes one thing after the other at a diameter, the dearest first by
// the bytes. Without requirements the diameters are NaN.
func (s *Study) Sensitivities(d unit.Length, r Range, progress func(done, total int)) ([]Sensitivity, error) {
	base, err := s.Outcome(Variant{Diameter: d})
	if err != nil {
		return nil, err
	}
	needs := s.spec.Needs.List()
	var out []Sensitivity
	for i, c := range changes {
		if progress != nil {
			progress(i, len(changes))
		}
		v := Variant{Diameter: d}
		c.apply(&v)
		o, err := s.outcome(v, planned)
		if err != nil {
			return nil, err
		}
		one := Sensitivity{Name: c.name, BytesPerDay: (o.BytesPerDay - base.BytesPerDay) / c.of, Diameter: unit.Length(math.NaN())}
		if len(needs) > 0 {
			// From the diameter that sufficed on: what costs something never needs less.
			near := r
			near.Low, near.Steps = min(d, 0.999*r.High), 8
			f, err := s.LeastOf(needs, near, v)
			if err != nil {
				return nil, err
			}
			if f.Diameter > 0 {
				one.Diameter = (f.Diameter - d) / unit.Length(c.of)
			}
		}
		out = append(out, one)
	}
	slices.SortStableFunc(out, func(a, b Sensitivity) int { return cmp.Compare(a.BytesPerDay, b.BytesPerDay) })
	return out, nil
}
