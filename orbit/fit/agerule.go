package fit

import (
	"math"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
)

const (
	ruleDays   = 7  // after the epoch that a rule by age is made for
	ruleAround = 12 // instants of a revolution that a day's spread is taken over
)

// AgeRule returns a rule by age that follows the uncertainty over a week after the epoch: the
// mean variance over the revolution after each day, by least squares relative to itself, with no part negative. Where
// SGP4 has no state so long, the days that there are count; without a first day the error
// is the propagation's.
func (u *Uncertainty) AgeRule() (orbit.AgeRule, error) {
	el := u.probe.middle.Elements()
	revolution := 24 / el.MeanMotion * float64(time.Hour)
	var variances [3][]float64 // radial, along, across; by days
	for d := range ruleDays + 1 {
		var sum [3]float64
		for k := range ruleAround {
			after := time.Duration(float64(d)*24*float64(time.Hour) + revolution*float64(k)/ruleAround)
			s, err := u.At(el.Epoch.Add(after))
			if err != nil && d > 1 {
				return ruleOf(variances), nil
			}
			if err != nil {
				return orbit.AgeRule{}, err
			}
			for c, x := range [3]unit.Length{s.Radial, s.Along, s.Across} {
				sum[c] += float64(x*x) / ruleAround
			}
		}
		for c := range sum {
			variances[c] = append(variances[c], sum[c])
		}
	}
	return ruleOf(variances), nil
}

func ruleOf(variances [3][]float64) orbit.AgeRule {
	return orbit.AgeRule{Radial: growthOf(variances[0]), Along: growthOf(variances[1]), Across: growthOf(variances[2])}
}

// growthOf finds the parts of a variance that goes with the days: the first is that of
// day 0; of d² and d⁴ the shares that miss least, in proportion, and are not negative.
func growthOf(variances []float64) orbit.Growth {
	var aa, ab, bb, ay, by float64
	for d := 1; d < len(variances); d++ {
		w := 1 / variances[d]
		a, b := w*float64(d*d), w*float64(d*d*d*d)
		y := w * math.Max(0, variances[d]-variances[0])
		aa, ab, bb, ay, by = aa+a*a, ab+a*b, bb+b*b, ay+a*y, by+b*y
	}
	g := orbit.Growth{AtEpoch: unit.Length(math.Sqrt(variances[0]))}
	det := aa*bb - ab*ab
	perDay, perDay2 := 0.0, 0.0
	if det > 1e-12*aa*bb {
		perDay, perDay2 = (ay*bb-by*ab)/det, (by*aa-ay*ab)/det
	}
	switch {
	case perDay < 0 && bb > 0:
		perDay, perDay2 = 0, by/bb
	case (perDay2 < 0 || perDay == 0 && perDay2 == 0) && aa > 0:
		perDay, perDay2 = ay/aa, 0
	}
	g.PerDay, g.PerDay2 = unit.Length(math.Sqrt(math.Max(0, perDay))), unit.Length(math.Sqrt(math.Max(0, perDay2)))
	return g
}
