package propagation

import "math"

// belowNodes is the number of intervals between the sea's edge and the horizontal.
const belowNodes = 24

// addBelow traces rays from under the horizontal, down to the edge of the sea, each
// through layers of its own (P.676-13 Annex 1 §2.2.2). A station at sea level has
// none.
func (c *gasCurve) addBelow(fGHz float64) error {
	least := c.layers.leastApparentDeg() * (1 - 1e-9) // a hair above the sea, for rounding
	if least >= -1e-3 {
		return nil
	}
	for i := range belowNodes + 1 {
		n, err := c.traceBelow(least*(1-float64(i)/belowNodes), fGHz)
		if err != nil {
			return err
		}
		c.below = append(c.below, n)
	}
	c.fGHz = fGHz
	return nil
}

func (c *gasCurve) traceBelow(apparentDeg, fGHz float64) (belowNode, error) {
	if apparentDeg >= 0 {
		return belowNode{0, c.horizonDeg, c.dB[0]}, nil
	}
	l, err := c.layers.belowHorizontal(apparentDeg)
	if err != nil {
		return belowNode{}, err
	}
	g := make([]float64, len(l.shells))
	if fGHz > 0 {
		g = l.absorption(fGHz)
	}
	near, down := l.belowTo(g, c.layers.baseKm)
	far, up, exit := l.trace(g, 0)
	el := straightLine(l.impact(0), c.layers.shells[0].rKm, down+up, exit, c.radiusKm)
	return belowNode{apparentDeg, el, near + far}, nil
}

// belowAt interpolates by the polynomial through the six nearest nodes.
func (c *gasCurve) belowAt(elDeg float64) float64 {
	i := 0
	for i < len(c.below)-6 && c.below[i+3].geometric < elDeg {
		i++
	}
	var xs, ys [6]float64
	for k := range xs {
		xs[k], ys[k] = c.below[i+k].geometric, c.below[i+k].dB
	}
	return lagrange(xs[:], ys[:], elDeg)
}

// belowDirect finds the ray as apparentDeg does: the geometric elevation rises with
// the apparent one, by 1 to 2 for 1.
func (c *gasCurve) belowDirect(elDeg float64) (float64, error) {
	low, high := c.below[0].apparent, 0.0
	guess := math.Min(0, math.Max(low, elDeg-c.horizonDeg))
	var n belowNode
	for range 60 {
		var err error
		if n, err = c.traceBelow(guess, c.fGHz); err != nil {
			return 0, err
		}
		diff := n.geometric - elDeg
		if math.Abs(diff) < 1e-9 {
			break
		}
		if diff > 0 {
			high = guess
		} else {
			low = guess
		}
		if guess -= diff / 1.5; guess <= low || guess >= high {
			guess = (low + high) / 2
		}
	}
	return n.dB, nil
}
