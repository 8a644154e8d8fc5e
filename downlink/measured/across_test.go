package measured

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
	"time"
)

// TestAcrossCoverage: passes with a bias that wanders from one to the next and drifts over the
// days; the intervals hold the truth in 95 % of trials, of few passes too.
func TestAcrossCoverage(t *testing.T) {
	start := time.Date(2026, 9, 14, 0, 0, 0, 0, time.UTC)
	for _, n := range []int{3, 8, 25} {
		draw := func(rng *rand.Rand) Across {
			var list []PassFigure
			for i := range n {
				f := PassFigure{At: start.Add(time.Duration(i*7) * time.Hour), Sigma: 0.05 + 0.1*rng.Float64()}
				days := f.At.Sub(start).Hours() / 24
				f.Value = -1.5 + 0.03*days + 0.2*rng.NormFloat64() + f.Sigma*rng.NormFloat64()
				list = append(list, f)
			}
			return AcrossPasses(list)
		}
		middle := -1.5 + 0.03*float64(n-1)/2*7/24
		covered(t, fmt.Sprintf("mean of %d passes", n), 600, func(rng *rand.Rand) (bool, error) {
			a := draw(rng)
			return math.Abs(a.Mean-middle) <= a.MeanSpan, nil
		})
		covered(t, fmt.Sprintf("trend over %d passes", n), 600, func(rng *rand.Rand) (bool, error) {
			a := draw(rng)
			return math.Abs(a.PerDay-0.03) <= a.PerDaySpan, nil
		})
	}
}

// TestAcrossByHand: three passes of one noise, 1, 2 and 4, a day apart. The mean is 7/3, the
// sample variance 7/3, so that the interval is 4.3027 sqrt(7/9); the slope is 1.5, its rest 1/6, the
// interval 12.7062 sqrt(1/12). Quantiles of Student's law for 2 and 1 degrees of freedom, from memory.
func TestAcrossByHand(t *testing.T) {
	var list []PassFigure
	for i, v := range []float64{1, 2, 4} {
		list = append(list, PassFigure{At: time.Date(2026, 9, 14+i, 0, 0, 0, 0, time.UTC), Value: v, Sigma: 0.1, Span: 0.2})
	}
	a := AcrossPasses(append(list, PassFigure{Value: 99}, PassFigure{Value: math.NaN(), Sigma: 1}))
	for _, c := range []struct {
		name      string
		got, want float64
	}{{"mean", a.Mean, 7.0 / 3}, {"span", a.MeanSpan, 4.3027 * math.Sqrt(7.0/9)}, {"slope", a.PerDay, 1.5}, {"its span", a.PerDaySpan, 12.7062 * math.Sqrt(1.0/12)},
		{"between", a.Between, math.Sqrt(7.0/3 - 0.01)}} {
		if math.Abs(c.got-c.want) > 1e-3 {
			t.Errorf("%s %.5f, want %.5f", c.name, c.got, c.want)
		}
	}
	if a.Passes != 3 {
		t.Errorf("%d passes", a.Passes)
	}
	if one := AcrossPasses(list[:1]); one.Mean != 1 || one.MeanSpan != 0.2 || !math.IsNaN(one.PerDay) {
		t.Errorf("one pass: %+v", one)
	}
	if two := AcrossPasses(list[:2]); !math.IsNaN(two.PerDay) || two.Mean != 1.5 {
		t.Errorf("two passes: %+v", two)
	}
}
