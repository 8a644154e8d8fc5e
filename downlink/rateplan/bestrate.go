package rateplan

import (
	"cmp"
	"errors"
	"fmt"
	"math"
	"slices"
	"time"

	"slantwise/orbit/unit"
)

// interval is the time between two samples with the lesser C/N0 of both.
type interval struct {
	track   int
	at      int // its first sample
	level   float64
	seconds float64
}

// Best returns the symbol rate and coding that bring down the most in all the passes
// together, sent throughout them, and the bytes. It is the exact optimum over the
// range or list: the bits grow with the symbol rate until an interval between samples
// closes no more, so that only those rates are candidates. guard is added to the C/N0
// that is needed; relock is without data whenever the mode begins to close. The mode
// has the empty name where nothing can be brought down.
func (f *Family) Best(tracks []Track, guard unit.DB, relock time.Duration) (Mode, float64, error) {
	rules := Rules{Guard: guard, Relock: relock}
	members, err := f.members()
	faults := []error{err, rules.check()}
	if len(tracks) == 0 {
		faults = append(faults, errors.New("no passes; give one or more"))
	}
	for i := range tracks {
		if err := tracks[i].check(); err != nil {
			faults = append(faults, fmt.Errorf("pass %d: %w", i+1, err))
		}
	}
	if err := errors.Join(faults...); err != nil {
		return Mode{}, 0, err
	}
	s := rateSearch{family: f, tracks: tracks, guard: float64(guard), relock: relock.Seconds()}
	s.gather()
	for i := range members {
		s.try(&members[i])
	}
	if !(s.bits > 0) {
		return Mode{}, 0, nil
	}
	return s.best.mode(s.rate), s.bits / 8, nil
}

type rateSearch struct {
	family *Family
	tracks []Track
	guard  float64
	relock float64

	intervals []interval // by falling level
	best      *member
	rate      float64
	bits      float64
}

func (s *rateSearch) gather() {
	for i := range s.tracks {
		t := &s.tracks[i]
		for k := 1; k < len(t.Seconds); k++ {
			if level := lesser(t.CN0DBHz[k-1], t.CN0DBHz[k]); !math.IsNaN(level) {
				s.intervals = append(s.intervals, interval{i, k - 1, level, t.Seconds[k] - t.Seconds[k-1]})
			}
		}
	}
	slices.SortStableFunc(s.intervals, func(a, b interval) int { return cmp.Compare(b.level, a.level) })
}

// try looks for a better symbol rate of one member. What it brings without the time to
// lock bounds what it brings, so that few candidates are counted out.
func (s *rateSearch) try(m *member) {
	total := 0.0
	for i, v := range s.intervals {
		total += v.seconds
		if i+1 < len(s.intervals) && s.intervals[i+1].level == v.level {
			continue
		}
		// A hair below the rate at which the interval just closes: rounding must not open it.
		rate := s.offered(m, math.Pow(10, (v.level-m.needES-s.guard)/10)*(1-1e-12))
		if rate == 0 {
			continue
		}
		if bound := rate * m.net * total; bound > s.bits*(1+1e-12) {
			if bits := s.count(m, rate); bits > s.bits {
				s.best, s.rate, s.bits = m, rate, bits
			}
		}
	}
}

// offered returns the highest symbol rate that the family offers and that is no more
// than the given one, 0 where there is none.
func (s *rateSearch) offered(m *member, most float64) float64 {
	f := s.family
	most = min(most, m.high)
	if len(f.Rates) == 0 {
		if most < f.Low.Hertz() {
			return 0
		}
		return most
	}
	best := 0.0
	for _, r := range f.Rates {
		if v := r.Hertz(); v <= most && v > best {
			best = v
		}
	}
	return best
}

// count returns the bits of a member at a symbol rate in all passes.
func (s *rateSearch) count(m *member, rate float64) float64 {
	need := m.needES + 10*math.Log10(rate) + s.guard
	seconds := 0.0
	for i := range s.tracks {
		t := &s.tracks[i]
		lock := math.Inf(-1) // when the present run of closing has locked
		closing := false
		for k := 1; k < len(t.Seconds); k++ {
			if !(t.CN0DBHz[k-1] >= need && t.CN0DBHz[k] >= need) {
				closing = false
				continue
			}
			if !closing {
				closing, lock = true, t.Seconds[k-1]+s.relock
			}
			seconds += max(0, t.Seconds[k]-max(t.Seconds[k-1], lock))
		}
	}
	return seconds * rate * m.net
}
