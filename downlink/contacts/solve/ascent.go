package solve

import "math"

// ascent looks for the prices with the least bound, by deflected subgradient steps whose
// length follows from the value of the best plan.
type ascent struct {
	g      *grid
	prices []float64
	course []float64 // direction of the last step, in scaled prices

	best      []float64 // prices of the best bound
	bound     float64   // on the grids so far
	length    float64   // share of the step
	worse     int       // steps since the bound fell
	lastBound float64
	last      answer
}

func newAscent(g *grid) *ascent {
	n := len(g.d.rows)
	a := &ascent{g: g, prices: make([]float64, n), course: make([]float64, n), best: make([]float64, n), bound: math.Inf(1), lastBound: math.Inf(1), length: 1}
	for r, row := range g.d.rows {
		if row.reward != nil {
			a.prices[r] = row.reward[0].each / 2
		}
	}
	return a
}

// moved tells the ascent that its grid has changed: steps are measured anew.
func (a *ascent) moved(g *grid) {
	a.g = g
	copy(a.prices, a.best)
	a.lastBound, a.worse, a.length = math.Inf(1), 0, min(1, 2*a.length)
	clear(a.course)
}

// step evaluates the prices and moves them towards a lower bound. value is that of the
// best plan known. It returns whether the steps have become too short to help.
func (a *ascent) step(value float64, workers int) (stalled bool) {
	a.last = a.g.evaluate(a.prices, workers)
	if a.last.value < a.bound {
		a.bound = a.last.value
	}
	if a.last.value < a.lastBound-1e-7*math.Abs(a.lastBound) || math.IsInf(a.lastBound, 1) {
		a.worse = 0
	} else {
		a.worse++
	}
	if a.last.value < a.lastBound {
		a.lastBound = a.last.value
		copy(a.best, a.prices)
	}
	if a.worse >= 12 {
		a.length, a.worse = a.length*0.6, 0
		copy(a.prices, a.best)
		clear(a.course)
		a.last = a.g.evaluate(a.prices, workers)
	}
	a.move(value)
	return a.length < 1e-5
}

// move takes a step. Directions are measured in scaled prices, a price times the use of a
// usual contact, so that seconds, bytes and counts weigh alike.
func (a *ascent) move(value float64) {
	d := a.g.d
	norm, along := 0.0, 0.0
	slack := make([]float64, len(d.rows))
	for r := range d.rows {
		s := d.slack(r, a.last.usage[r], a.prices[r]) / d.rows[r].scale
		if s > 0 && a.prices[r] <= 0 {
			s = 0 // the price would fall below nothing
		}
		if reward := d.rows[r].reward; s < 0 && reward != nil && a.prices[r] >= reward[0].each {
			s = 0 // nor above what anything is worth
		}
		slack[r] = s
		norm += s * s
		along += s * a.course[r]
	}
	if norm == 0 {
		return
	}
	// Deflection (Camerini, Fratta, Maffioli 1975, from memory): a step back is taken out.
	old := 0.0
	for _, c := range a.course {
		old += c * c
	}
	mix := 0.0
	if along < 0 && old > 0 {
		mix = -1.5 * along / old
	}
	norm = 0
	for r := range slack {
		a.course[r] = slack[r] + mix*a.course[r]
		norm += a.course[r] * a.course[r]
	}
	if norm == 0 {
		return
	}
	target := value
	if gap := a.last.value - target; gap < 1e-9*math.Abs(value) {
		target = a.last.value - 1e-9*math.Abs(value)
	}
	t := a.length * (a.last.value - target) / norm
	for r := range d.rows {
		a.prices[r] = max(0, a.prices[r]-t*a.course[r]/d.rows[r].scale)
		if reward := d.rows[r].reward; reward != nil {
			a.prices[r] = min(a.prices[r], reward[0].each)
		}
	}
}
