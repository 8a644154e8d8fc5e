package mount

import (
	"math"

	"slantwise/orbit"
	"slantwise/station"
)

// samples are a course as the axes see it, in the way of no turn, and what of it they
// can follow. Step i goes from sample i to i+1.
type samples struct {
	at           []float64 // s, rising
	lower, upper []float64 // rad; lower without jumps of a turn
	lowerRate    []float64 // rad/s
	upperRate    []float64
	lowerBroken  []int // how many of the steps before sample i the axis cannot follow
	upperBroken  []int
}

// Steps of the search: one a second, fine ones where the lower axis turns at a third of
// its rate and more, fewer of both where a course is so long.
const (
	coarseStep  = 1.0
	fineStep    = 0.1
	mostSamples = 4000
	closeToRate = 0.3
)

func (d *Drive) sample(c *Course, fine float64) *samples {
	step := max(coarseStep, c.length/mostSamples*2)
	if !(fine > 0) {
		fine = fineStep
	}
	for {
		at := d.times(c, step, fine)
		if len(at) <= mostSamples {
			return d.sampleAt(c, at)
		}
		fine *= 2
	}
}

// times returns the instants of the samples.
func (d *Drive) times(c *Course, step, fine float64) []float64 {
	n := max(1, int(math.Ceil(c.length/step)))
	var at []float64
	limit := closeToRate * float64(d.mount.Lower.Rate)
	look := func(s float64) (lower float64, fast bool) {
		dir, v := c.at(s)
		rate, _ := d.frame.rates(dir, v)
		return float64(d.frame.angles(dir).Lower), math.Abs(rate) > limit
	}
	lower, before := look(0)
	for i := range n {
		from, to := c.length*float64(i)/float64(n), c.length*float64(i+1)/float64(n)
		at = append(at, from)
		next, after := look(to)
		leaps := math.Abs(math.Remainder(next-lower, 2*math.Pi)) > limit*(to-from)
		if parts := int(math.Ceil((to - from) / fine)); (before || after || leaps) && parts > 1 {
			for k := 1; k < parts; k++ {
				at = append(at, from+(to-from)*float64(k)/float64(parts))
			}
		}
		lower, before = next, after
	}
	return append(at, c.length)
}

func (d *Drive) sampleAt(c *Course, at []float64) *samples {
	n := len(at)
	all := make([]float64, 4*n)
	counts := make([]int, 2*n)
	s := &samples{at: at, lower: all[:n], upper: all[n : 2*n], lowerRate: all[2*n : 3*n], upperRate: all[3*n:],
		lowerBroken: counts[:n], upperBroken: counts[n:]}
	for i, t := range at {
		dir, v := c.at(t)
		a := d.frame.angles(dir)
		s.lower[i], s.upper[i] = float64(a.Lower), float64(a.Upper)
		s.lowerRate[i], s.upperRate[i] = d.frame.rates(dir, v)
		if i == 0 {
			continue
		}
		s.lower[i] = s.lower[i-1] + d.turned(c, at[i-1], t, s.lower[i-1], s.lower[i], 0)
		dt := t - at[i-1]
		s.lowerBroken[i] = s.lowerBroken[i-1] + broken(d.mount.Lower, s.lower[i]-s.lower[i-1], s.lowerRate[i-1], s.lowerRate[i], dt)
		s.upperBroken[i] = s.upperBroken[i-1] + broken(d.mount.Upper, s.upper[i]-s.upper[i-1], s.upperRate[i-1], s.upperRate[i], dt)
	}
	return s
}

// broken is 1 where a step asks more of an axis than it has: of its rate at the ends and
// on average, or of its acceleration on average.
func broken(a station.Axis, way, before, after, dt float64) int {
	v := float64(a.Rate) * (1 + 1e-9)
	if math.Abs(way) <= v*dt && math.Abs(before) <= v && math.Abs(after) <= v &&
		math.Abs(after-before) <= float64(a.Acceleration)*dt*(1+1e-9) {
		return 0
	}
	return 1
}

// turned returns how far the lower angle turns from one instant to another. Where that
// could be either way round it looks between.
func (d *Drive) turned(c *Course, from, to, before, after float64, depth int) float64 {
	diff := math.Remainder(after-before, 2*math.Pi)
	const sure, deepest = math.Pi / 3, 30
	if math.Abs(diff) < sure || depth == deepest {
		return diff
	}
	middle := (from + to) / 2
	var dir orbit.Vec3
	dir, _ = c.at(middle)
	m := float64(d.frame.angles(dir).Lower)
	return d.turned(c, from, middle, before, m, depth+1) + d.turned(c, middle, to, m, after, depth+1)
}
