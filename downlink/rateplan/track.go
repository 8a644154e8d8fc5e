package rateplan

import (
	"fmt"
	"math"
	"time"

	"slantwise/downlink"
)

// Track is C/N0 along a pass.
type Track struct {
	Start   time.Time // Seconds counts from here
	Seconds []float64 // rising, two or more
	CN0DBHz []float64 // of the same length; NaN: the link is not usable
}

// FromProfile returns the track of a profile. Samples at which the antenna does not
// follow are not usable.
func FromProfile(p *downlink.Profile) Track {
	t := Track{Start: p.Start, Seconds: p.Seconds, CN0DBHz: make([]float64, len(p.CN0DBHz))}
	copy(t.CN0DBHz, p.CN0DBHz)
	for i, usable := range p.Usable {
		if !usable {
			t.CN0DBHz[i] = math.NaN()
		}
	}
	return t
}

// longestTrack bounds the samples of a track: a day at ten a second.
const longestTrack = 864_000

func (t *Track) check() error {
	if n := len(t.Seconds); n < 2 || n > longestTrack || len(t.CN0DBHz) != n {
		return fmt.Errorf("track: %d instants and %d values of C/N0; there must be as many of both, 2 to %d", n, len(t.CN0DBHz), longestTrack)
	}
	for i, s := range t.Seconds {
		if !(math.Abs(s) <= 1e9) || i > 0 && !(s > t.Seconds[i-1]) {
			return fmt.Errorf("track: sample %d is at %g s; instants must rise and lie within 1e9 s of the start", i+1, s)
		}
		if c := t.CN0DBHz[i]; math.Abs(c) > 1000 {
			return fmt.Errorf("track: C/N0 of sample %d is %g dBHz; it must be -1000 to 1000 dBHz, or NaN where the link is not usable", i+1, c)
		}
	}
	return nil
}

// mostCells bounds modes times samples and changes times samples, for memory's sake (a
// day at 1 s with 300 modes is half of it).
const mostCells = 50_000_000

// checkTrack checks a track and whether the planner has room for it.
func (p *Planner) checkTrack(t *Track) error {
	if err := t.check(); err != nil {
		return err
	}
	if n := len(t.Seconds); n*len(p.modes) > mostCells || n*(p.rules.Changes+1) > mostCells {
		return fmt.Errorf("track: %d samples with %d modes and %d changes are too many; samples times modes, and times changes, must be at most %d: take wider steps, or leave out modes that others surpass",
			n, len(p.modes), p.rules.Changes, mostCells)
	}
	return nil
}

// at returns the instant some seconds after the start, to the nanosecond.
func (t *Track) at(seconds float64) time.Time {
	return t.Start.Add(time.Duration(math.Round(seconds * 1e9)))
}
