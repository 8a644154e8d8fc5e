package sizing

import (
	"math"

	"slantwise/downlink"
	"slantwise/orbit/unit"
)

// Meets tells whether a variant meets some needs.
func (s *Study) Meets(needs []Need, v Variant) (bool, error) {
	q := search{study: s, needs: needs}
	for _, n := range needs {
		q.parts |= n.part
	}
	return q.met(v)
}

// Worst returns the least share by which any of the needs is surpassed, negative where one is
// missed, tenths of 10 dB for decibels; -Inf where one has no value.
func (s *Study) Worst(needs []Need, v Variant) (float64, error) {
	q := search{study: s, needs: needs}
	for _, n := range needs {
		q.parts |= n.part
	}
	o, err := s.outcome(v, q.parts)
	if err != nil {
		return 0, err
	}
	return q.worst(o), nil
}

// mostSlack bounds what is looked for in decibels.
const mostSlack = 60.0

// Slack returns by how many dB every link may be worse than in a variant until the needs
// are met no more, to 0.01 dB; negative: so much is missing. NaN where 60 dB more do not
// help, or 60 dB less do not hurt.
func (s *Study) Slack(needs []Need, v Variant) (unit.DB, error) {
	with := func(x float64) Variant {
		w := v
		w.Power -= unit.DB(x)
		return w
	}
	low, high := -1.0, 1.0
	ok, err := s.Meets(needs, with(0))
	if err != nil {
		return 0, err
	}
	// Widen towards the edge, then halve.
	if ok {
		for low = 0; ; high *= 2 {
			still, err := s.Meets(needs, with(high))
			if err != nil {
				return 0, err
			}
			if !still {
				break
			}
			if low = high; low >= mostSlack {
				return unit.DB(math.NaN()), nil
			}
		}
	} else {
		for high = 0; ; low *= 2 {
			met, err := s.Meets(needs, with(low))
			if err != nil {
				return 0, err
			}
			if met {
				break
			}
			if high = low; high <= -mostSlack {
				return unit.DB(math.NaN()), nil
			}
		}
	}
	for high-low > 0.01 {
		mid := (low + high) / 2
		met, err := s.Meets(needs, with(mid))
		if err != nil {
			return 0, err
		}
		if met {
			low = mid
		} else {
			high = mid
		}
	}
	return unit.DB(low), nil
}

// HighestRaise returns by how much the least elevation may be raised until the needs are
// met no more, to 0.05 degrees up to 60; ok is false where they are not met at all.
func (s *Study) HighestRaise(needs []Need, v Variant) (raise unit.Angle, ok bool, err error) {
	if ok, err = s.Meets(needs, v); !ok || err != nil {
		return 0, false, err
	}
	low, high := 0.0, 60.0
	for high-low > 0.05 {
		mid := (low + high) / 2
		w := v
		w.Raise = unit.Angle(mid) * unit.Degree
		met, err := s.Meets(needs, w)
		if err != nil {
			return 0, false, err
		}
		if met {
			low = mid
		} else {
			high = mid
		}
	}
	return unit.Angle(low) * unit.Degree, true, nil
}

// GOverT returns the G/T of a site's antenna in a variant at an elevation under a clear
// sky, in dB/K, pointing loss not taken off.
func (s *Study) GOverT(site int, v Variant, elevation unit.Angle) (unit.DB, error) {
	spec := s.spec.Places[site].Clear
	var err error
	if spec.Antenna, err = s.antenna(site, v); err != nil {
		return 0, err
	}
	link, err := downlink.NewLink(spec)
	if err != nil {
		return 0, err
	}
	straight := unit.Angle(0)
	off := &straight
	if spec.Transmitter.Attitude == downlink.AttitudeTumbling {
		off = nil
	}
	g, err := link.StatedGeometry(standardRange, elevation, nil, off)
	if err != nil {
		return 0, err
	}
	b, err := link.At(g)
	if err != nil {
		return 0, err
	}
	return b.GOverT, nil
}
