package modem

import (
	"fmt"
	"math"
	"sort"

	"slantwise/orbit/unit"
)

// Curve is an error rate against Eb/N0, falling.
type Curve struct {
	Metric     Metric
	Low, High  float64 // the error rates from which to which it is known
	Provenance string
	Source     string

	rate    func(ebn0 float64) float64 // of the linear Eb/N0; nil: by points
	db, log []float64                  // points: Eb/N0 rising, natural logarithm of the error rate falling
}

// Point is a point of a curve.
type Point struct {
	EbN0      unit.DB
	ErrorRate float64
}

// NewCurve returns a curve through points, straight between them in the logarithm of
// the error rate against decibels. There must be two or more, with Eb/N0 rising and error
// rates falling, in (0, 1].
func NewCurve(metric Metric, points []Point, provenance, source string) (Curve, error) {
	if len(points) < 2 {
		return Curve{}, fmt.Errorf("%d points are no curve; give two or more", len(points))
	}
	c := Curve{Metric: metric, Provenance: provenance, Source: source}
	for i, p := range points {
		if !(p.ErrorRate > 0 && p.ErrorRate <= 1) || !(math.Abs(float64(p.EbN0)) <= 100) {
			return Curve{}, fmt.Errorf("point %d: an error rate of %g at %g dB is not allowed; it must be greater than 0 and at most 1, at -100 to 100 dB", i+1, p.ErrorRate, float64(p.EbN0))
		}
		if i > 0 && !(p.EbN0 > points[i-1].EbN0 && p.ErrorRate < points[i-1].ErrorRate) {
			return Curve{}, fmt.Errorf("point %d: an error rate of %g at %g dB does not follow on %g at %g dB; Eb/N0 must rise and the error rate fall",
				i+1, p.ErrorRate, float64(p.EbN0), points[i-1].ErrorRate, float64(points[i-1].EbN0))
		}
		c.db = append(c.db, float64(p.EbN0))
		c.log = append(c.log, math.Log(p.ErrorRate))
	}
	c.Low, c.High = points[len(points)-1].ErrorRate, points[0].ErrorRate
	return c, nil
}

// holds tells whether the curve reaches an error rate.
func (c *Curve) holds(rate float64) bool {
	return rate >= c.Low && rate <= c.High
}

// usual returns the error rate that one asks for first and that the curve reaches.
func (c *Curve) usual() float64 {
	for _, rate := range []float64{1e-5, 1e-4, 1e-3, 1e-2} {
		if c.holds(rate) {
			return rate
		}
	}
	return c.Low
}

// ErrorRate returns the error rate at an Eb/N0. Beyond the ends of the curve it is a
// *unit.RangeError.
func (c *Curve) ErrorRate(ebn0 unit.DB) (float64, error) {
	var rate float64
	if c.rate != nil {
		if rate = c.rate(ebn0.Ratio()); c.holds(rate) {
			return rate, nil
		}
	} else if x := float64(ebn0); x >= c.db[0] && x <= c.db[len(c.db)-1] {
		i := max(1, sort.SearchFloat64s(c.db, x))
		return math.Exp(between(x, c.db[i-1], c.db[i], c.log[i-1], c.log[i])), nil
	}
	low, high := c.ends()
	return 0, &unit.RangeError{Quantity: "Eb/N0 of a curve of the " + string(c.Metric), Value: float64(ebn0), Unit: "dB", Allowed: fmt.Sprintf("%.2f to %.2f dB", low, high)}
}

// EbN0 returns the least Eb/N0 with which the error rate is no more than rate. Beyond
// the ends of the curve it is a *unit.RangeError.
func (c *Curve) EbN0(rate float64) (unit.DB, error) {
	if !c.holds(rate) {
		return 0, &unit.RangeError{Quantity: string(c.Metric), Value: rate, Allowed: fmt.Sprintf("%.2g to %.2g, the ends of the curve", c.Low, c.High)}
	}
	if c.rate != nil {
		return unit.DB(invert(c.rate, rate)), nil
	}
	want := math.Log(rate)
	i := sort.Search(len(c.log), func(i int) bool { return c.log[i] <= want })
	i = min(max(1, i), len(c.log)-1)
	return unit.DB(between(want, c.log[i-1], c.log[i], c.db[i-1], c.db[i])), nil
}

// ends returns the Eb/N0 in decibels from which to which the curve is known.
func (c *Curve) ends() (low, high float64) {
	if c.rate != nil {
		return invert(c.rate, c.High), invert(c.rate, c.Low)
	}
	return c.db[0], c.db[len(c.db)-1]
}

func between(x, x0, x1, y0, y1 float64) float64 {
	return y0 + (x-x0)/(x1-x0)*(y1-y0)
}

// invert finds the decibels where a falling rate of the linear Eb/N0 comes down to a
// value: the secant rule on the logarithm, held in a bracket, to 1e-10 dB. Halving the
// value at the end that stays keeps both ends moving.
func invert(rate func(float64) float64, want float64) float64 {
	at := func(db float64) float64 { return math.Log(rate(math.Pow(10, db/10))) - math.Log(want) }
	low, high := -30.0, 40.0
	for high-low > 1 { // a rate may be 0 up there, its logarithm -Inf
		mid := (low + high) / 2
		if at(mid) > 0 {
			low = mid
		} else {
			high = mid
		}
	}
	fLow, fHigh := at(low), at(high)
	for range 200 {
		mid := low + (high-low)*fLow/(fLow-fHigh)
		if !(mid > low && mid < high) { // an end of -Inf too
			mid = (low + high) / 2
		}
		f := at(mid)
		if math.Abs(f) < 1e-12 || high-low < 1e-10 {
			return mid
		}
		if f > 0 {
			low, fLow, fHigh = mid, f, fHigh/2
		} else {
			high, fHigh, fLow = mid, f, fLow/2
		}
	}
	return (low + high) / 2
}
