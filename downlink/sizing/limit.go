package sizing

import (
	"cmp"
	"math"
	"slices"

	"slantwise/orbit/unit"
)

// Limit is the diameter beyond which more dish stops helping.
type Limit struct {
	Peak      unit.Length // at which gain less pointing and surface loss is greatest; 0: it grows on beyond MostDiameter
	By        []Taker     // what takes more than the aperture gives beyond, the greatest first
	Saturated unit.Length // the least diameter of the range that brings 99 % of the most bytes; 0: nothing comes down
	// Turning is the diameter of the range beyond which what the mounts do not follow, by the
	// keyhole and their rates, grows by more than a greater dish brings; 0: it does not.
	Turning unit.Length
}

// Taker is one of the losses that end the growth of the gain at its summit.
type Taker struct {
	Loss  string      // "pointing" or "surface"
	Share float64     // of what all of them take there from the next bit of diameter, 0 to 1
	Alone unit.Length // where the summit would be with this loss alone; 0: there is none up to MostDiameter
}

// MostDiameter is how far the limit is looked for.
const MostDiameter unit.Length = 200

// leastTaker is the share under which a loss is not named.
const leastTaker = 0.01

// limit finds where more dish stops helping.
func (s *Study) limit(trade []*Outcome, r Range) (Limit, error) {
	var l Limit
	most := 0.0
	for _, o := range trade {
		most = max(most, o.BytesPerDay)
	}
	if most > 0 {
		ask := None()
		ask.BytesPerDay = 0.99 * most
		f, err := s.Least(ask.List(), r)
		if err != nil {
			return l, err
		}
		l.Saturated = f.Diameter
	}
	var err error
	if l.Turning, err = s.turningLimit(trade); err != nil {
		return l, err
	}
	both := func(pointing, surface float64) float64 { return pointing + surface }
	if l.Peak, err = s.summit(both); err != nil || l.Peak == 0 {
		return l, err
	}
	const step = 1.01
	_, p1, s1, err := s.gainAt(l.Peak, both)
	if err != nil {
		return l, err
	}
	_, p2, s2, err := s.gainAt(step*l.Peak, both)
	if err != nil {
		return l, err
	}
	for _, t := range []struct {
		name  string
		grows float64
		only  func(pointing, surface float64) float64
	}{
		{"pointing", p2 - p1, func(pointing, _ float64) float64 { return pointing }},
		{"surface", s2 - s1, func(_, surface float64) float64 { return surface }},
	} {
		share := t.grows / (p2 - p1 + s2 - s1)
		if !(share >= leastTaker) {
			continue
		}
		alone, err := s.summit(t.only)
		if err != nil {
			return l, err
		}
		l.By = append(l.By, Taker{t.name, share, alone})
	}
	slices.SortStableFunc(l.By, func(a, b Taker) int { return cmp.Compare(b.Share, a.Share) })
	return l, nil
}

// turningShare is the share of the bytes a day by which more dish must bring less before
// the mount is said to end the growth: plans are made of samples, and bytes waver by less.
const turningShare = 1e-4

// turningLimit finds where mounts make the bytes a day fall with the diameter that would have grown
// on without them; 0 where they do not.
func (s *Study) turningLimit(trade []*Outcome) (unit.Length, error) {
	top := 0
	for i, o := range trade {
		if o.BytesPerDay > trade[top].BytesPerDay {
			top = i
		}
	}
	if top+1 >= len(trade) {
		return 0, nil
	}
	at, end := trade[top], trade[len(trade)-1]
	falls := at.BytesPerDay - end.BytesPerDay
	free := at.BytesPerDay + at.MountLostBytesPerDay - end.BytesPerDay - end.MountLostBytesPerDay
	if falls < turningShare*at.BytesPerDay || free > falls/2 { // it falls as much with no mount
		return 0, nil
	}
	low, high := trade[max(0, top-1)].Variant.Diameter.Metres(), trade[top+1].Variant.Diameter.Metres()
	bytes := func(d float64) (float64, error) {
		o, err := s.outcome(Variant{Diameter: unit.Length(d)}, planned)
		if err != nil {
			return 0, err
		}
		return o.BytesPerDay, nil
	}
	const golden = 0.6180339887498949
	for high-low > 0.01*high {
		c, d := high-golden*(high-low), low+golden*(high-low)
		bc, err := bytes(c)
		if err != nil {
			return 0, err
		}
		bd, err := bytes(d)
		if err != nil {
			return 0, err
		}
		if bc >= bd {
			high = d
		} else {
			low = c
		}
	}
	return unit.Length((low + high) / 2), nil
}

// summit returns the diameter at which the gain less some of the losses is greatest, at
// the site where it is least; 0 where it grows on to MostDiameter.
func (s *Study) summit(of func(pointing, surface float64) float64) (unit.Length, error) {
	low, high := math.Log(0.01), math.Log(MostDiameter.Metres())
	const golden = 0.6180339887498949
	for high-low > 1e-5 {
		c, d := high-golden*(high-low), low+golden*(high-low)
		gc, _, _, err := s.gainAt(unit.Length(math.Exp(c)), of)
		if err != nil {
			return 0, err
		}
		gd, _, _, err := s.gainAt(unit.Length(math.Exp(d)), of)
		if err != nil {
			return 0, err
		}
		if gc >= gd {
			high = d
		} else {
			low = c
		}
	}
	at := math.Exp((low + high) / 2)
	if at > 0.99*MostDiameter.Metres() {
		return 0, nil
	}
	return unit.Length(at), nil
}

// gainAt returns 20 log D less some of what pointing and surface take, in dB, and both of these, at the
// site where that is least.
func (s *Study) gainAt(d unit.Length, of func(pointing, surface float64) float64) (gain, pointing, surface float64, err error) {
	gain = math.Inf(1)
	for _, i := range s.spec.Sites {
		a, err := s.antenna(i, Variant{Diameter: d})
		if err != nil {
			return 0, 0, 0, err
		}
		p, f := losses(a, s.spec.Places[i].Clear.Transmitter.Frequency)
		if g := 20*math.Log10(d.Metres()) - of(p, f); g < gain {
			gain, pointing, surface = g, p, f
		}
	}
	return gain, pointing, surface, nil
}
