package tolerance

import (
	"math"

	"slantwise/orbit/unit"
)

// Chance is the distribution of the sum of a table's deviations from its design values,
// in dB: the laws convolved with one another, terms independent of one another.
type Chance struct {
	low  float64   // of the first point
	upTo []float64 // probability of less than low + i chanceStep
}

// chanceStep is the width in dB to which the laws are cut; within it all lies in its
// middle, so that a probability is right to what the density holds in half a step.
const chanceStep = 0.005

// widestChance bounds the width of all tolerances together in dB.
const widestChance = 100

// NewChance works out the distribution of items that Check accepts. Items without a
// tolerance do not matter. The error is a *unit.RangeError where the tolerances are
// wider than 100 dB together, or that of Check.
func NewChance(items []Item) (*Chance, error) {
	if err := Check(items, nil); err != nil {
		return nil, err
	}
	density, low, width := []float64{1}, 0.0, 0.0
	for i := range items {
		it := &items[i]
		if it.Law == SingleValue || it.Favourable == it.Adverse {
			continue
		}
		if width += float64(it.Favourable - it.Adverse); width > widestChance {
			return nil, &unit.RangeError{Quantity: "width of all tolerances together", Value: width, Unit: "dB", Allowed: "at most 100 dB"}
		}
		d, from := it.density()
		density, low = convolve(density, d), low+from
	}
	c := &Chance{low: low - chanceStep/2, upTo: make([]float64, len(density)+1)}
	for i, p := range density {
		c.upTo[i+1] = c.upTo[i] + p
	}
	return c, nil
}

// density returns the probability of each step of an item's deviation, and the middle of
// the first step.
func (it *Item) density() ([]float64, float64) {
	a, f := float64(it.Adverse), float64(it.Favourable)
	low, high := a, f
	if it.Law == Gaussian { // limits at three sigma, not cut there
		low, high = a-(f-a), f+(f-a)
	}
	n := int(math.Ceil((high-low)/chanceStep)) + 1
	first := math.Floor(low/chanceStep) * chanceStep
	out := make([]float64, n+1)
	total := 0.0
	for i := range out {
		x := first + float64(i)*chanceStep
		out[i] = it.Law.upTo(x+chanceStep/2, f, a) - it.Law.upTo(x-chanceStep/2, f, a)
		total += out[i]
	}
	for i := range out {
		out[i] /= total
	}
	return out, first
}

// upTo is the probability of a deviation less than x.
func (l Law) upTo(x, f, a float64) float64 {
	switch {
	case l == Gaussian:
		return 0.5 * math.Erfc((0.5*(f+a)-x)/((f-a)/6*math.Sqrt2))
	case x <= a:
		return 0
	case x >= f:
		return 1
	}
	switch l {
	case Uniform:
		return (x - a) / (f - a)
	case Triangular: // top at the design value, 0
		if x < 0 {
			return (x - a) * (x - a) / ((f - a) * -a)
		}
		return 1 - (f-x)*(f-x)/((f-a)*f)
	}
	return 0.5 + math.Asin((2*x-f-a)/(f-a))/math.Pi // arcsine
}

func convolve(a, b []float64) []float64 {
	out := make([]float64, len(a)+len(b)-1)
	for i, p := range a {
		if p == 0 {
			continue
		}
		for k, q := range b {
			out[i+k] += p * q
		}
	}
	return out
}

// Below returns the probability that the sum of the deviations is less than x dB.
func (c *Chance) Below(x float64) float64 {
	at := (x - c.low) / chanceStep
	switch {
	case !(at > 0):
		return 0
	case at >= float64(len(c.upTo)-1):
		return 1
	}
	i := int(at)
	return min(1, c.upTo[i]+(at-float64(i))*(c.upTo[i+1]-c.upTo[i]))
}

// Reached returns the deviation in dB that is reached or surpassed with a probability in
// (0, 1).
func (c *Chance) Reached(probability float64) float64 {
	low, high := c.low, c.low+float64(len(c.upTo)-1)*chanceStep
	for high-low > 1e-6 {
		if mid := (low + high) / 2; 1-c.Below(mid) >= probability {
			low = mid
		} else {
			high = mid
		}
	}
	return low
}
