package propagation

import (
	"fmt"
	"math"
	"sort"

	"slantwise/orbit/unit"
)

// Exceeded is a value with the fraction of an average year during which it is
// exceeded.
type Exceeded struct {
	P     Exceedance
	Value float64
}

// Curve holds values exceeded for several percentages and gives those between
// linearly in the logarithm of the percentage, as Recs. ITU-R P.836-6 and P.840-9 §4
// do between their maps. The zero Curve is empty.
type Curve struct{ points []Exceeded }

// NewCurve checks and sorts points: percentages in (0, 100 %] that differ, values 0
// or greater that do not rise with the percentage.
func NewCurve(quantity, unitName string, points ...Exceeded) (Curve, error) {
	sorted := append([]Exceeded(nil), points...)
	sort.SliceStable(sorted, func(i, j int) bool { return sorted[i].P < sorted[j].P })
	for i, q := range sorted {
		if err := firstError(checkPercent(q.P.Percents()), notNegative(quantity, q.Value, unitName)); err != nil {
			return Curve{}, fmt.Errorf("%s: %w", quantity, err)
		}
		if i == 0 {
			continue
		}
		if before := sorted[i-1]; q.P == before.P || q.Value > before.Value {
			return Curve{}, fmt.Errorf("%s: %s at %s %% after %s at %s %%: a value that is exceeded more often cannot be larger, and each percentage stands once",
				quantity, withUnit(q.Value, unitName), number(q.P.Percents()), withUnit(before.Value, unitName), number(before.P.Percents()))
		}
	}
	return Curve{sorted}, nil
}

// Empty tells whether the curve has no points.
func (c Curve) Empty() bool { return len(c.points) == 0 }

// At returns the value exceeded for p, which must lie between the curve's first and
// last percentage: nothing is known beyond them.
func (c Curve) At(p Exceedance) (float64, error) {
	const roundOff = 1e-12 // percentages written as sums or products may miss a node by this much
	n := len(c.points)
	if n == 0 {
		return 0, fmt.Errorf("no values by percentage are given")
	}
	first, last := c.points[0], c.points[n-1]
	switch {
	case math.Abs(float64(p/first.P)-1) < roundOff:
		return first.Value, nil
	case math.Abs(float64(p/last.P)-1) < roundOff:
		return last.Value, nil
	case !(p > first.P && p < last.P):
		return 0, &unit.RangeError{Quantity: "exceeded percentage", Value: p.Percents(), Unit: "%",
			Allowed: number(first.P.Percents()) + " to " + number(last.P.Percents()) + " %", Next: "give the value at this percentage too"}
	}
	i := sort.Search(n, func(i int) bool { return c.points[i].P > p })
	a, b := c.points[i-1], c.points[i]
	w := math.Log(float64(p/a.P)) / math.Log(float64(b.P/a.P))
	return a.Value + w*(b.Value-a.Value), nil
}
