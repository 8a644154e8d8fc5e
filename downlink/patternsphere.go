package downlink

import (
	"math"

	"slantwise/orbit/unit"
)

// RadiatedShare returns the mean of the gain over the sphere, as a ratio: the power
// that the pattern radiates to the power that it is fed. No antenna has more than 1.
// Where the pattern is not known (WholeSphere) nothing is taken to be radiated, so
// that the share is a lower bound.
func (p *Pattern) RadiatedShare() float64 {
	switch p.Kind {
	case Isotropic:
		return p.PeakGain.Ratio()
	case CosinePower:
		share := p.PeakGain.Ratio() / (2 * (p.Exponent + 1)) // ½ ∫ cosⁿ θ sin θ dθ over the front
		if p.BackLobe != nil {
			share += p.BackLobe.Ratio() / 2
		}
		return share
	case GainGrid:
		return p.Grid.share
	}
	share := 0.0
	for i := 1; i < len(p.Table); i++ {
		share += segmentShare(p.Table[i-1], p.Table[i])
	}
	return share
}

// segmentShare integrates ½ e^(kθ+c) sin θ between two points: the gain in dB is
// linear in θ, and the antiderivative is e^(kθ+c) (k sin θ - cos θ)/(k²+1).
func segmentShare(a, b PatternPoint) float64 {
	ta, tb := a.OffBoresight.Radians(), b.OffBoresight.Radians()
	k := float64(b.Gain-a.Gain) / 10 * math.Ln10 / (tb - ta)
	sa, ca := math.Sincos(ta)
	sb, cb := math.Sincos(tb)
	return (b.Gain.Ratio()*(k*sb-cb) - a.Gain.Ratio()*(k*sa-ca)) / (2 * (k*k + 1))
}

// GainExceeded returns the gain in dBi that is reached or exceeded with probability q
// in (0, 1) when every direction is equally likely: the greatest g for which the
// share of the sphere with a gain of at least g is at least q. The pattern must be
// known over the whole sphere; where it radiates nothing over more than 1-q of it
// the gain is -Inf.
func (p *Pattern) GainExceeded(q float64) unit.DB {
	switch p.Kind {
	case Isotropic:
		return p.PeakGain
	case CosinePower:
		return p.cosineExceeded(q)
	case GainGrid:
		return p.Grid.exceededWith(q)
	}
	return p.tableExceeded(q)
}

// cosineExceeded: in front the cosine is uniform in (0, 1), so that the share of the
// sphere above x times the peak is (1 - x^(1/n))/2; the back is one half with one
// gain.
func (p *Pattern) cosineExceeded(q float64) unit.DB {
	front := func(cos float64) float64 { return float64(p.PeakGain) + 10*p.Exponent*math.Log10(cos) }
	back := math.Inf(-1)
	if p.BackLobe != nil {
		back = float64(*p.BackLobe)
	}
	whole := float64(p.PeakGain)
	if p.Exponent > 0 && q > 0.5 {
		whole = front(2 * (1 - q)) // the back counts in full
	}
	best := min(back, whole)
	if q <= 0.5 {
		best = max(best, back) // the back alone is enough
		switch {
		case p.Exponent == 0:
			best = max(best, whole)
		case q < 0.5:
			best = max(best, front(1-2*q)) // the front alone is enough
		}
	}
	return unit.DB(best)
}

// tableExceeded halves between the table's least and greatest gain.
func (p *Pattern) tableExceeded(q float64) unit.DB {
	low, high := math.Inf(1), math.Inf(-1)
	for _, t := range p.Table {
		low, high = min(low, float64(t.Gain)), max(high, float64(t.Gain))
	}
	if p.shareAbove(high) >= q {
		return unit.DB(high)
	}
	for {
		mid := low + (high-low)/2
		if mid <= low || mid >= high {
			return unit.DB(low)
		}
		if p.shareAbove(mid) >= q {
			low = mid
		} else {
			high = mid
		}
	}
}

// shareAbove returns the share of the sphere where the table's gain is at least g.
func (p *Pattern) shareAbove(g float64) float64 {
	share := 0.0
	for i := 1; i < len(p.Table); i++ {
		a, b := p.Table[i-1], p.Table[i]
		ga, gb := float64(a.Gain), float64(b.Gain)
		ta, tb := a.OffBoresight.Radians(), b.OffBoresight.Radians()
		switch {
		case ga < g && gb < g:
			continue
		case ga < g: // rises through g
			ta += (tb - ta) * (g - ga) / (gb - ga)
		case gb < g: // falls through g
			tb = ta + (tb-ta)*(g-ga)/(gb-ga)
		}
		share += (math.Cos(ta) - math.Cos(tb)) / 2
	}
	return share
}
