package propagation

import (
	"math"
	"sort"
)

// gasCurve is the attenuation of gases against the geometric elevation at one
// frequency, from the horizon up: rays traced at many apparent elevations, and a
// polynomial through the six nearest between them. The nodes lie closer near the
// horizon, evenly in the square root of the elevation above it.
type gasCurve struct {
	layers     *Layers
	absorption []float64
	radiusKm   float64   // of the satellite, infinite for one far away
	horizonDeg float64   // geometric elevation of what appears at 0°
	root, dB   []float64 // square root of the elevation above the horizon in deg, and the attenuation
	below      []belowNode
	fGHz       float64 // of the rays below, 0 without gas
}

// belowNode is a ray from under the horizontal; nodes rise in elevation, the last
// appears at 0°.
type belowNode struct{ apparent, geometric, dB float64 }

const gasNodes = 256

// newGasCurve traces the nodes; absorption is in dB/km by shell, the radius in km.
func newGasCurve(l *Layers, absorption []float64, satelliteRadiusKm float64) *gasCurve {
	c := &gasCurve{layers: l, absorption: absorption, radiusKm: satelliteRadiusKm,
		root: make([]float64, gasNodes+1), dB: make([]float64, gasNodes+1)}
	for i := range c.root {
		u := float64(i) / gasNodes
		apparent := 90 * u * u
		a, centre, exit := l.trace(c.absorption, apparent)
		el := l.straight(apparent, centre, exit, satelliteRadiusKm)
		if i == 0 {
			c.horizonDeg = el
		}
		c.root[i], c.dB[i] = math.Sqrt(math.Max(0, el-c.horizonDeg)), a
	}
	return c
}

// lowestDeg returns the lowest geometric elevation of the curve.
func (c *gasCurve) lowestDeg() float64 {
	if len(c.below) > 0 {
		return c.below[0].geometric
	}
	return c.horizonDeg
}

// at interpolates at an elevation between lowestDeg and 90°.
func (c *gasCurve) at(elDeg float64) float64 {
	if elDeg < c.horizonDeg && len(c.below) > 0 {
		return c.belowAt(elDeg)
	}
	y := math.Sqrt(math.Max(0, elDeg-c.horizonDeg))
	i := max(0, min(sort.SearchFloat64s(c.root, y)-3, gasNodes-5))
	return lagrange(c.root[i:i+6], c.dB[i:i+6], y)
}

// direct traces the ray itself.
func (c *gasCurve) direct(elDeg float64) (float64, error) {
	if elDeg < c.horizonDeg && len(c.below) > 0 {
		return c.belowDirect(elDeg)
	}
	apparent, err := c.layers.apparentDeg(elDeg, c.radiusKm)
	if err != nil {
		return 0, err
	}
	return c.layers.attenuation(c.absorption, apparent), nil
}

// lagrange returns the polynomial through the points at x.
func lagrange(xs, ys []float64, x float64) float64 {
	var sum float64
	for i, xi := range xs {
		term := ys[i]
		for k, xk := range xs {
			if k != i {
				term *= (x - xk) / (xi - xk)
			}
		}
		sum += term
	}
	return sum
}
