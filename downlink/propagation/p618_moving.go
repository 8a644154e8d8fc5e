package propagation

import (
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// ElevationShare is the share of contact time that a satellite spends in an interval
// of elevation, and a geometric elevation that stands for the interval.
type ElevationShare struct {
	Elevation unit.Angle
	Share     float64
}

// Moving holds what a path takes over the elevations of a moving satellite and over
// the percentages of an average year, for the statistics of Rec. ITU-R P.618-14 §8.
// They are marginals: how often in all, not when, and not together with what.
type Moving struct {
	shares  []ElevationShare
	percent []float64
	samples [][]Sample // by percentage, then by interval
	skies   [][]Sky
	notes   notes
}

// movingPercents are the percentages at which a path is evaluated, P.618's total from
// end to end. Rain counts to 5 % and no further: what falls there must not be drawn out
// to the next percentage.
var movingPercents = []float64{0.001, 0.002, 0.003, 0.005, 0.01, 0.02, 0.03, 0.05, 0.1, 0.2, 0.3, 0.5,
	1, 1.5, 2, 3, 4, 5, 5.0001, 7, 10, 14, 20, 30, 50}

// NewMoving evaluates the path of a spec, whose Exceedance is not used, for all
// intervals and percentages. Where a curve by percentage of the climate ends under
// 50 %, so do the statistics.
func NewMoving(s PathSpec, shares []ElevationShare) (*Moving, error) {
	if err := checkShares(shares); err != nil {
		return nil, err
	}
	m := &Moving{shares: shares}
	top := s.Climate.lastPercent()
	var model *pathModel
	for _, p := range movingPercents {
		if p > top*(1+1e-12) {
			m.notes.add(Assumption, "statistics end at %s %% of the year, where the climate's curves do", number(top))
			break
		}
		s.Exceedance = Exceedance(p) * Percent
		next, err := newPathModelLike(s, model)
		if err != nil {
			return nil, fmt.Errorf("at %s %%: %w", number(p), err)
		}
		model = next
		if err := m.evaluate(s, model); err != nil {
			return nil, err
		}
		m.percent = append(m.percent, p)
		for _, n := range model.notes {
			m.notes.add(n.Kind, "%s", n.Text)
		}
	}
	m.notes.add(Assumption, "P.618-14 §8: marginals of an average year over the share of contact time at each elevation; no correlation in time")
	return m, nil
}

func checkShares(shares []ElevationShare) error {
	var sum float64
	for _, s := range shares {
		if err := within("share of contact time", s.Share, "", 0, 1, "give a fraction"); err != nil {
			return err
		}
		sum += s.Share
	}
	return within("sum of the shares of contact time", sum, "", 1-1e-9, 1+1e-9, "give shares that make up the whole")
}

func (m *Moving) evaluate(s PathSpec, model *pathModel) error {
	p, err := newPathOf(s, model)
	if err != nil {
		return err
	}
	samples, skies := make([]Sample, len(m.shares)), make([]Sky, len(m.shares))
	for i, share := range m.shares {
		el := share.Elevation.Degrees()
		if err := p.check(el); err != nil {
			return err
		}
		var v [columns]float64
		el = math.Max(model.horizon(), math.Min(90, el))
		model.fill(&v, el, model.gas.at(el), model.clearGas.at(el))
		samples[i], skies[i] = sample(&v), p.sky(&v)
	}
	m.samples, m.skies = append(m.samples, samples), append(m.skies, skies)
	return nil
}

// Notes tells what the statistics assume.
func (m *Moving) Notes() []Note { return append([]Note(nil), m.notes...) }

// Span is a fraction of contact time that is known to lie between Low and High. They
// differ where some elevations exceed the level at the highest percentage evaluated,
// or reach it only under the lowest.
type Span struct{ Low, High float64 }

// Exceeding returns the fraction of contact time during which excess is above 0, P.618-14
// §8 steps d) to f). excess gets the interval's index and what the path takes there
// at one percentage; it should fall as the percentage grows. Where it does not, as
// P.618's rain for small attenuations, the highest percentage counts at which it is
// above 0.
func (m *Moving) Exceeding(excess func(interval int, s Sample, k Sky) float64) Span {
	var total Span
	for i, share := range m.shares {
		one := m.interval(i, excess)
		total.Low += share.Share * one.Low
		total.High += share.Share * one.High
	}
	return total
}

// interval finds the percentage at which the excess of one interval ends.
func (m *Moving) interval(i int, excess func(int, Sample, Sky) float64) Span {
	last := len(m.percent) - 1
	var after float64
	for k := last; k >= 0; k-- {
		e := excess(i, m.samples[k][i], m.skies[k][i])
		if e > 0 {
			if k == last {
				return Span{m.percent[last] / 100, 1}
			}
			w := e / (e - after) // straight in the logarithm of the percentage
			p := m.percent[k] * math.Pow(m.percent[k+1]/m.percent[k], w) / 100
			return Span{p, p}
		}
		after = e
	}
	return Span{0, m.percent[0] / 100}
}

// ExceedingTotal returns the fraction of contact time during which the total
// attenuation exceeds a.
func (m *Moving) ExceedingTotal(a unit.DB) Span {
	return m.Exceeding(func(_ int, s Sample, _ Sky) float64 { return float64(s.Total - a) })
}

// Total returns the total attenuation that is exceeded during a fraction of contact
// time, to 1e-6 dB. The fraction must be one that the percentages evaluated can
// tell.
func (m *Moving) Total(fraction float64) (unit.DB, error) {
	low, high := unit.DB(0), unit.DB(1e4)
	known := m.ExceedingTotal(low)
	if err := within("fraction of contact time", fraction, "", m.percent[0]/100, known.Low, "the statistics end there"); err != nil {
		return 0, err
	}
	for high-low > 1e-6 {
		if mid := (low + high) / 2; m.ExceedingTotal(mid).High > fraction {
			low = mid
		} else {
			high = mid
		}
	}
	return (low + high) / 2, nil
}
