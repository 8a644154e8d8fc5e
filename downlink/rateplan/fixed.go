package rateplan

import (
	"errors"
	"fmt"
)

// singleGuard is the guard in time of a schedule of one mode: a spacecraft that goes on
// sending changes nothing and needs none.
func (p *Planner) singleGuard() float64 {
	if p.rules.Silent {
		return p.rules.GuardTime.Seconds()
	}
	return 0
}

// single returns the best schedule of one mode, which no least stay binds. It prepares
// the track.
func (p *Planner) single(t *Track) span {
	p.prepare(t, p.singleGuard())
	var best span
	for m := range p.modes {
		if s := p.singleOf(m); s.bits > best.bits {
			best = s
		}
	}
	return best
}

// singleOf returns what one mode brings by itself: sent throughout, or with silence
// where nothing closes in the best of its runs of closing.
func (p *Planner) singleOf(m int) span {
	n := len(p.seconds)
	bits := p.bits[m*n : m*n+n]
	if !p.rules.Silent {
		return span{mode: m, to: n - 1, bits: bits[n-1]}
	}
	begins := p.begins[m*n : m*n+n]
	best := span{mode: m}
	for j := 1; j < n; j++ {
		if begins[j] < 0 {
			continue
		}
		if v := bits[j] - bits[begins[j]]; v > best.bits {
			best = span{mode: m, from: begins[j], to: j, bits: v}
		}
	}
	return best
}

// alone returns the schedule of one span, an empty one where it brings nothing.
func (s span) alone() []span {
	if !(s.bits > 0) {
		return nil
	}
	return []span{s}
}

// Fixed returns the plan of the one mode that brings down the most in a pass.
func (p *Planner) Fixed(t Track) (Plan, error) {
	if err := p.checkTrack(&t); err != nil {
		return Plan{}, err
	}
	return p.report(&t, p.single(&t).alone()), nil
}

// Common is one mode for several passes.
type Common struct {
	Mode  int    // index among the planner's modes; -1 where none brings anything
	Plans []Plan // of each pass in that mode
	Bytes float64
}

// Common returns the one mode that brings down the most in all passes together. Faults
// of tracks come at once.
func (p *Planner) Common(tracks []Track) (Common, error) {
	if len(tracks) == 0 {
		return Common{}, errors.New("no passes; a common mode needs one or more")
	}
	var faults []error
	sums := make([]float64, len(p.modes))
	for i := range tracks {
		if err := p.checkTrack(&tracks[i]); err != nil {
			faults = append(faults, fmt.Errorf("pass %d: %w", i+1, err))
			continue
		}
		p.prepare(&tracks[i], p.singleGuard())
		for m := range p.modes {
			sums[m] += p.singleOf(m).bits
		}
	}
	if len(faults) > 0 {
		return Common{}, errors.Join(faults...)
	}
	c := Common{Mode: silence, Plans: make([]Plan, len(tracks))}
	most := 0.0
	for m, v := range sums {
		if v > most {
			c.Mode, most = m, v
		}
	}
	c.Bytes = most / 8
	for i := range tracks {
		var spans []span
		p.prepare(&tracks[i], p.singleGuard())
		if c.Mode != silence {
			spans = p.singleOf(c.Mode).alone()
		}
		c.Plans[i] = p.report(&tracks[i], spans)
	}
	return c, nil
}
