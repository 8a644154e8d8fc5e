package rateplan

import "math"

// Series holds rates and margin along a pass, for a chart; columns of the length of the
// track.
type Series struct {
	RateBps    []float64 // net rate of the mode that is sent from the sample on; 0: silent
	MarginDB   []float64 // C/N0 over what that mode needs, guards not taken off; NaN: silent, or not usable
	FreeBps    []float64 // net rate of the best mode that closes at the sample, without guards
	ShannonBps []float64 // Shannon's limit at the sample
}

// Series follows a plan along its track.
func (p *Planner) Series(t Track, plan *Plan) (Series, error) {
	if err := p.checkTrack(&t); err != nil {
		return Series{}, err
	}
	n := len(t.Seconds)
	s := Series{make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n)}
	step := 0
	for i, c := range t.CN0DBHz {
		s.FreeBps[i], s.ShannonBps[i], s.MarginDB[i] = p.freeRate(c), shannonRate(c, p.rules.Band.Hertz()), math.NaN()
		at := t.at(t.Seconds[i])
		for step < len(plan.Steps) && !at.Before(plan.Steps[step].To) {
			step++
		}
		if step == len(plan.Steps) || at.Before(plan.Steps[step].From) || plan.Steps[step].Mode == silence {
			continue
		}
		m := &p.modes[plan.Steps[step].Mode]
		s.RateBps[i], s.MarginDB[i] = m.NetRate.BitsPerSecond(), c-m.NeedDBHz
	}
	return s, nil
}
