package sizing

import (
	"math"
	"slices"

	"slantwise/orbit/unit"
)

// nearest returns the outcome whose worst requirement is missed by the least share, and where
// diameters are alike in that the next worst, by the grid and a search around its best.
func (q *search) nearest() (*Outcome, error) {
	var best *Outcome
	var least []float64
	at := 0
	look := func(d unit.Length) ([]float64, error) {
		o, err := q.study.outcome(q.at(d), q.parts)
		if err != nil {
			return nil, err
		}
		m := q.misses(o)
		if best == nil || nearer(m, least) {
			best, least = o, m
		}
		return m, nil
	}
	for i, d := range q.grid {
		before := best
		if _, err := look(d); err != nil {
			return nil, err
		}
		if best != before {
			at = i
		}
	}
	low, high := q.grid[max(at-1, 0)].Metres(), q.grid[min(at+1, len(q.grid)-1)].Metres()
	const golden = 0.6180339887498949
	for high-low > 0.01*high {
		c, d := high-golden*(high-low), low+golden*(high-low)
		mc, err := look(unit.Length(c))
		if err != nil {
			return nil, err
		}
		md, err := look(unit.Length(d))
		if err != nil {
			return nil, err
		}
		if nearer(md, mc) {
			low = c
		} else {
			high = d
		}
	}
	return best, nil
}

// over returns how far an outcome is over a requirement, as a share of what is required; decibels as
// tenths of ten.
func over(n *Need, o *Outcome) float64 {
	scale := math.Abs(n.Required)
	if n.Unit == "dB" || scale == 0 {
		scale = 10
	}
	return n.Over(o) / scale
}

// worst returns the greatest miss of an outcome as a negative share of what is required, or the
// least that it is over.
func (q *search) worst(o *Outcome) float64 {
	worst := math.Inf(1)
	for i := range q.needs {
		worst = min(worst, over(&q.needs[i], o))
	}
	return worst
}

// misses returns by which share each requirement is missed, as numbers of 0 and less, the worst
// first. What is met by however much counts as 0.
func (q *search) misses(o *Outcome) []float64 {
	out := make([]float64, len(q.needs))
	for i := range q.needs {
		if out[i] = min(over(&q.needs[i], o), 0); math.IsNaN(out[i]) {
			out[i] = math.Inf(-1)
		}
	}
	slices.Sort(out)
	return out
}

// alike is how far two misses may lie apart, as a share of what is required, and still count as the
// same: a requirement that no diameter helps must not decide by its last digits.
const alike = 1e-5

// nearer tells whether misses a are less than b, the worst first.
func nearer(a, b []float64) bool {
	for i := range a {
		switch {
		case a[i] > b[i]+alike:
			return true
		case a[i] < b[i]-alike:
			return false
		}
	}
	return false
}
