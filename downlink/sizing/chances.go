package sizing

import (
	"math"

	"slantwise/downlink/tolerance"
	"slantwise/orbit/unit"
)

// Assurance is a probability with the diameter that meets all with it.
type Assurance struct {
	Probability float64
	Diameter    unit.Length // 0: none of the range does
}

// Chance tells with what probability a bought dish meets all, every tolerance of a
// design control table in it.
type Chance struct {
	Diameter    unit.Length // of the dish that is asked about
	Slack       unit.DB     // by which its links may be worse than designed
	Probability float64     // that they are not
	Assured     []Assurance
}

// assured are the probabilities for which diameters are sought.
var assured = []float64{0.5, 0.8, 0.9, 0.95, 0.99}

// Chance asks about a dish, and for the diameters of some probabilities. The deviation
// of the table is taken as one for all links and the whole year: what was bought.
// Progress is told how much of the work is done; nil: nobody asks.
func (s *Study) Chance(of *tolerance.Chance, d unit.Length, r Range, progress func(done, total int)) (*Chance, error) {
	needs := s.spec.Needs.List()
	slack, err := s.Slack(needs, Variant{Diameter: d})
	if err != nil {
		return nil, err
	}
	out := &Chance{Diameter: d, Slack: slack, Probability: 1 - of.Below(-float64(slack))}
	if math.IsNaN(float64(slack)) {
		out.Probability = math.NaN()
	}
	r.Steps = 12
	if half := d / 2; half > r.Low && out.Probability >= assured[0] { // no dish that is so much worse meets all that often
		worse, err := s.Meets(needs, Variant{Diameter: half, Power: unit.DB(of.Reached(assured[0]))})
		if err != nil {
			return nil, err
		}
		if !worse {
			r.Low = half
		}
	}
	for i, p := range assured {
		if progress != nil {
			progress(1+i, 1+len(assured))
		}
		f, err := s.LeastOf(needs, r, Variant{Power: unit.DB(math.Round(of.Reached(p)*1e4) / 1e4)})
		if err != nil {
			return nil, err
		}
		out.Assured = append(out.Assured, Assurance{p, f.Diameter})
		if f.Diameter > 0 && f.Diameter < 0.99*r.High {
			r.Low = f.Diameter // more probability never takes less
		}
	}
	return out, nil
}
