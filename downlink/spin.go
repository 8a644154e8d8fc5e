package downlink

import (
	"math"
	"slices"

	"slantwise/orbit/unit"
)

// SpinGain tells what the gain of a spinning spacecraft counts as, whose phase is not
// known.
type SpinGain int

// What a turn counts as.
const (
	SpinExceeded SpinGain = iota // the gain reached or exceeded with AttitudeProbability over a turn
	SpinMean                     // the mean of the power over a turn
	SpinWorst                    // the least gain of a turn
)

// String returns the word of the scenario.
func (s SpinGain) String() string { return [...]string{"exceeded", "mean", "worst"}[s] }

// spinNodes and spinPhases lay out a spin's curve: half a degree between nodes, a
// degree between phases.
const (
	spinNodes  = 361
	spinPhases = 360
)

// spinCurve is the gain in dBi of a pattern that turns about body z, over the angle of
// a direction to that axis. A node without gain is NaN.
type spinCurve struct{ gain [spinNodes]float64 }

// newSpinCurve lets the pattern turn in steps. A direction in which it has no gain
// counts as none at all in the mean, and below everything in a quantile.
func newSpinCurve(p *Pattern, b *Body, q float64) *spinCurve {
	c := &spinCurve{}
	ax, ay, az := b.antennaAxes()
	var turn [spinPhases]float64
	for i := range c.gain {
		off := unit.Angle(i) * 180 * unit.Degree / (spinNodes - 1)
		known := true
		for k := range turn {
			// Half a step off, so that a pattern that is even about a plane is not met twice.
			d := BodyDirection{OffZ: off, AroundZ: (unit.Angle(k) + 0.5) * 360 * unit.Degree / spinPhases}.vector()
			o, around := polar(d.Dot(ax), d.Dot(ay), d.Dot(az))
			g, ok := p.gainToward(o.Radians(), around.Radians())
			turn[k] = float64(g)
			if !ok {
				turn[k] = math.Inf(-1)
				known = known && p.Kind == CosinePower // which radiates nothing there; of a table nothing is known
			}
		}
		c.gain[i] = math.NaN()
		if known {
			c.gain[i] = overTurn(turn[:], b.SpinGain, q)
		}
	}
	return c
}

// overTurn sorts the gains of a turn and returns what they count as; NaN where that is
// no gain at all.
func overTurn(turn []float64, what SpinGain, q float64) float64 {
	slices.Sort(turn)
	g := turn[0]
	switch what {
	case SpinMean:
		sum := 0.0
		for _, v := range turn {
			sum += math.Pow(10, v/10)
		}
		g = 10 * math.Log10(sum/float64(len(turn)))
	case SpinExceeded:
		// At least the share q of the turn reaches it.
		g = turn[len(turn)-int(math.Ceil(q*float64(len(turn))))]
	}
	if math.IsInf(g, -1) {
		return math.NaN()
	}
	return g
}

// at returns the gain at an angle to the axis in [0, π], linear in dB between nodes.
func (c *spinCurve) at(off float64) (g unit.DB, ok bool) {
	x := off * (spinNodes - 1) / math.Pi
	if !(x >= 0) {
		return 0, false
	}
	i := min(int(x), spinNodes-2)
	w := min(x-float64(i), 1)
	v := c.gain[i]*(1-w) + c.gain[i+1]*w
	switch w { // a node without gain must not touch its neighbour
	case 0:
		v = c.gain[i]
	case 1:
		v = c.gain[i+1]
	}
	return unit.DB(v), !math.IsNaN(v)
}
