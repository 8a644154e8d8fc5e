package orbit

import (
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// coordinates are mean motion (rev/day), the two components of the eccentricity along
// and across the origin of longitudes, mean longitude, inclination and node (rad).
// Near the equator SGP4's lunar and solar terms turn with the node, so that the state
// is no smooth function of the orbit's pole: there it is one of the inclination and the node.
type coordinates [6]float64

func coordinatesOf(el *Elements) coordinates {
	node := el.RAAN.Radians()
	perigee := node + el.ArgPerigee.Radians()
	sin, cos := math.Sincos(perigee)
	return coordinates{el.MeanMotion, el.Eccentricity * cos, el.Eccentricity * sin,
		perigee + el.MeanAnomaly.Radians(), el.Inclination.Radians(), node}
}

func (x coordinates) elements() Elements {
	if x[4] < 0 {
		x[4], x[5] = -x[4], x[5]+math.Pi
	}
	perigee := math.Atan2(x[2], x[1])
	return Elements{
		MeanMotion:   x[0],
		Eccentricity: math.Hypot(x[1], x[2]),
		Inclination:  unit.Angle(x[4]),
		RAAN:         unit.Angle(x[5]).Wrapped(),
		ArgPerigee:   unit.Angle(perigee - x[5]).Wrapped(),
		MeanAnomaly:  unit.Angle(x[3] - perigee).Wrapped(),
	}
}

// newton corrects by the inverse of the Jacobian: for what the simple correction does
// not reach, orbits whose perigee is deep in the ground, or that lie in the equator.
// Of several starts it takes the first that arrives.
func (c *corrector) newton(start Elements) (Elements, error) {
	least := math.Inf(1)
	nearest := phase{}
	for k := range newtonStarts {
		x := coordinatesOf(&start)
		x[5] += float64(k) * 2 * math.Pi / newtonStarts
		el, miss, err := c.descend(x)
		if err == nil && miss.small() {
			return el, nil
		}
		if err == nil && miss.size() < least {
			least, nearest = miss.size(), miss
		}
		if start.Inclination > lyddaneLimit && math.Pi-start.Inclination > lyddaneLimit {
			break // another node is no start where the orbit is tilted
		}
	}
	e := &StateError{Reason: StateNotReproduced}
	if !math.IsInf(least, 1) {
		e.Detail = fmt.Sprintf("the nearest miss it by %.3f m and %.6f m/s", nearest.p.Norm(), nearest.v.Norm())
	}
	return Elements{}, e
}

const (
	newtonStarts = 12
	// lyddaneLimit is the inclination under which SGP4 adds lunar and solar terms in
	// another form (0.2 rad, AIAA 2006-6753).
	lyddaneLimit = 0.2
)

// descend takes steps, halved as long as they make it worse.
func (c *corrector) descend(x coordinates) (Elements, phase, error) {
	el, miss, err := c.missOf(x)
	if err != nil {
		return el, miss, err
	}
	for range newtonSteps {
		if miss.small() {
			break
		}
		step, ok := c.newtonStep(x, miss)
		if !ok {
			break
		}
		better := false
		for range 12 {
			next := x
			for i := range next {
				next[i] += step[i]
				step[i] /= 2
			}
			if e, m, err := c.missOf(next); err == nil && m.size() < miss.size() {
				x, el, miss, better = next, e, m, true
				break
			}
		}
		if !better {
			break
		}
	}
	return el, miss, nil
}

func (c *corrector) missOf(x coordinates) (Elements, phase, error) {
	el, err := c.complete(x.elements())
	if err != nil {
		return el, phase{}, err
	}
	m, err := c.miss(&el)
	return el, m, err
}

// size is the greater of the two misses, in m, a m/s counted as 1000 m.
func (s phase) size() float64 { return math.Max(s.p.Norm(), 1000*s.v.Norm()) }

// newtonStep solves for the change that removes the miss.
func (c *corrector) newtonStep(x coordinates, miss phase) (coordinates, bool) {
	steps := coordinates{1e-6 * x[0], 1e-6, 1e-6, 1e-5, 1e-5, 1e-5}
	var a [6][7]float64
	for j := range x {
		moved := x
		moved[j] += steps[j]
		_, m, err := c.missOf(moved)
		if err != nil {
			return x, false
		}
		g := phase{miss.p.Sub(m.p), miss.v.Sub(m.v)}
		for i, v := range g.row() {
			a[i][j] = v / steps[j]
		}
	}
	for i, v := range miss.row() {
		a[i][6] = v
	}
	return solve6(a)
}

func (s phase) row() [6]float64 {
	return [6]float64{s.p.X, s.p.Y, s.p.Z, s.v.X, s.v.Y, s.v.Z}
}

// solve6 solves six linear equations by elimination with the greatest pivot of each
// column; false where there is none.
func solve6(a [6][7]float64) (x [6]float64, ok bool) {
	for c := range 6 {
		best := c
		for r := c + 1; r < 6; r++ {
			if math.Abs(a[r][c]) > math.Abs(a[best][c]) {
				best = r
			}
		}
		a[c], a[best] = a[best], a[c]
		if !(math.Abs(a[c][c]) > 0) {
			return x, false
		}
		for r := c + 1; r < 6; r++ {
			f := a[r][c] / a[c][c]
			for k := c; k < 7; k++ {
				a[r][k] -= f * a[c][k]
			}
		}
	}
	for c := 5; c >= 0; c-- {
		x[c] = a[c][6]
		for k := c + 1; k < 6; k++ {
			x[c] -= a[c][k] * x[k]
		}
		x[c] /= a[c][c]
	}
	return x, true
}
