package station

import (
	"math"

	"slantwise/orbit/unit"
)

// ErrorQuantile tells how far off a direction is at most with a stated probability,
// for an error that is normal along two axes. It is immutable.
type ErrorQuantile struct {
	probability float64
	factors     [quantileNodes]float64 // square of the error over the variances' sum, by share of the minor one
}

// quantileNodes is how many shares of the minor variance, from 0 to a half, are worked
// out; between them the factor is taken in proportion: within 1e-3 of it.
const quantileNodes = 129

// NewErrorQuantile prepares a probability, above 0 and below 1.
func NewErrorQuantile(probability float64) (*ErrorQuantile, error) {
	if !(probability > 0 && probability < 1) {
		return nil, &unit.RangeError{Quantity: "probability of the pointing error", Value: probability, Allowed: "above 0 and below 1"}
	}
	q := &ErrorQuantile{probability: probability}
	near := 1.0
	for i := range q.factors {
		minor := 0.5 * float64(i) / (quantileNodes - 1)
		near = solveError(probability, 1-minor, minor, near)
		q.factors[i] = near
	}
	return q, nil
}

// solveError returns the s at which errorProbability(s, a, b) is p, sought about a value
// near it: a bracket, then the rule of false position in the form that halves the kept
// end (Illinois), which comes to the last digits in some ten steps.
func solveError(p, a, b, near float64) float64 {
	off := func(s float64) float64 { return errorProbability(s, a, b) - p }
	low, high := near*0.98, near*1.02
	atLow, atHigh := off(low), off(high)
	for atLow > 0 {
		high, atHigh = low, atLow
		low /= 2
		atLow = off(low)
	}
	for atHigh < 0 {
		low, atLow = high, atHigh
		high *= 2
		atHigh = off(high)
	}
	for kept := 0; high-low > 1e-13*high; {
		s := high - atHigh*(high-low)/(atHigh-atLow)
		at := off(s)
		switch {
		case at == 0 || !(s > low && s < high):
			return s
		case at < 0:
			low, atLow = s, at
			if kept == 1 {
				atHigh /= 2
			}
			kept = 1
		default:
			high, atHigh = s, at
			if kept == 2 {
				atLow /= 2
			}
			kept = 2
		}
		if math.Abs(at) < 1e-14 {
			return s
		}
	}
	return (low + high) / 2
}

// Probability returns the probability that q was made for.
func (q *ErrorQuantile) Probability() float64 { return q.probability }

// Of returns the angle that the error does not exceed with the probability; major and
// minor are the standard deviations along the axes of its ellipse, in either order.
func (q *ErrorQuantile) Of(major, minor unit.Angle) unit.Angle {
	a, b := major.Radians()*major.Radians(), minor.Radians()*minor.Radians()
	if a < b {
		a, b = b, a
	}
	if a == 0 {
		return 0
	}
	x := b / (a + b) * 2 * (quantileNodes - 1)
	i := min(int(x), quantileNodes-2)
	f := q.factors[i] + (q.factors[i+1]-q.factors[i])*(x-float64(i))
	return unit.Angle(math.Sqrt(f * (a + b)))
}

// errorProbability returns the probability that a x² + b y² stays below s, for
// independent standard normal x and y and a >= b >= 0: the integral over y of the
// probability that x leaves room for, with y = sqrt(s/b) sin u.
func errorProbability(s, a, b float64) float64 {
	inner := func(rest float64) float64 { return math.Erf(math.Sqrt(rest / (2 * a))) }
	if b < 1e-12*a {
		return inner(s)
	}
	reach := math.Sqrt(s / b)
	// Simpson's rule over u in [0, π/2], no wider than 8 standard deviations of y.
	end := math.Pi / 2
	if reach > 8 {
		end = math.Asin(8 / reach)
	}
	const n = 400
	sum := 0.0
	for i := range n + 1 {
		sin, cos := math.Sincos(end * float64(i) / n)
		y := reach * sin
		v := inner(s*cos*cos) * math.Exp(-y*y/2) * reach * cos
		switch {
		case i == 0 || i == n:
		case i%2 == 1:
			v *= 4
		default:
			v *= 2
		}
		sum += v
	}
	return 2 / math.Sqrt(2*math.Pi) * sum * end / n / 3
}
