package rateplan

import (
	"math"
	"slices"
)

// Planner plans passes with one list of modes under one set of rules. It keeps its
// working memory from pass to pass, so that it must not be shared between goroutines.
type Planner struct {
	modes []Mode
	rules Rules
	bare  bool // no bounds

	seconds  []float64 // of the track at hand
	guarded  []float64 // C/N0, the least within the guard in time
	closes   []bool    // by interval, of the mode at hand
	bits     []float64 // by mode, then by sample: bits up to there, if the mode were sent all the time
	locked   []float64 // by mode, then by sample: bits up to there and the time to lock again after it
	begins   []int     // by mode, then by sample: the first sample of the run of closing that the interval before the sample belongs to; -1: it does not close
	eligible []int     // by sample: so many samples lie the least stay before it
	best     []float64 // by change, then by sample: most bits of schedules whose mode may end there
	choice   []int16   // the mode that ends there
	spans    []span    // of the best schedule
}

// silence is the index of the mode that sends nothing.
const silence = -1

// NewPlanner returns a planner. All faults come at once: modes with a rate of zero, with
// equal names or wider than the band, rules out of range.
func NewPlanner(modes []Mode, rules Rules) (*Planner, error) {
	if err := rules.check(); err != nil {
		return nil, err
	}
	if err := checkModes(modes, rules.Band); err != nil {
		return nil, err
	}
	return &Planner{modes: slices.Clone(modes), rules: rules}, nil
}

// Modes lists the modes.
func (p *Planner) Modes() []Mode { return slices.Clone(p.modes) }

// Plan returns the schedule that brings down the most bits. Of schedules that bring
// down as many it has one with the fewest changes.
func (p *Planner) Plan(t Track) (Plan, error) {
	if err := p.checkTrack(&t); err != nil {
		return Plan{}, err
	}
	single, guard := p.single(&t), p.rules.GuardTime.Seconds()
	if guard != p.singleGuard() {
		p.prepare(&t, guard)
	}
	p.search()
	spans := p.trace()
	if single.bits >= value(spans)*(1-1e-12) {
		spans = single.alone()
		if guard != p.singleGuard() {
			p.prepare(&t, p.singleGuard())
		}
	}
	return p.report(&t, spans), nil
}

// span is a part of a schedule between two samples.
type span struct {
	mode     int // or silence
	from, to int
	bits     float64
}

// value returns the bits of a schedule.
func value(spans []span) float64 {
	sum := 0.0
	for _, s := range spans {
		sum += s.bits
	}
	return sum
}

// size makes room for a track of n samples.
func (p *Planner) size(n int) {
	cells := len(p.modes) * n
	p.guarded, p.closes, p.eligible = grow(p.guarded, n), grow(p.closes, n), grow(p.eligible, n)
	p.bits, p.locked, p.begins = grow(p.bits, cells), grow(p.locked, cells), grow(p.begins, cells)
	p.best, p.choice = grow(p.best, (p.rules.Changes+1)*n), grow(p.choice, (p.rules.Changes+1)*n)
}

func grow[T any](s []T, n int) []T {
	if cap(s) < n {
		return make([]T, n)
	}
	return s[:n]
}

var nothing = math.Inf(-1) // the value of a schedule that cannot be
