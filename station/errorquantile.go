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
	for i := range q.factors {
		minor := 0.5 * float64(i) / (quantileNodes - 1)
		low, high := 0.0, 1.0
		for errorProbability(high, 1-minor, minor) < probability {
			high *= 2
		}
		for range 60 {
			mid := (low + high) / 2
			if errorProbability(mid, 1-minor, minor) < probability {
				low = mid
			} else {
				high = mid
			}
		}
		q.factors[i] = (low + high) / 2
	}
	return q, nil
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
