package rateplan

import "slices"

// search fills best and choice: for so many changes and each sample, the most bits of
// all schedules of that many changes whose last mode may end there, and which mode that
// is. A mode begun at sample k and kept to j brings bits[j] - locked[k]; where that is
// negative, it would not have locked in time, and a schedule without it is better.
// The cost is changes × modes × samples, as the best beginning only moves on.
func (p *Planner) search() {
	n := len(p.seconds)
	for c := range p.rules.Changes + 1 {
		row := p.best[c*n : c*n+n]
		for j := range row {
			row[j] = nothing
			p.choice[c*n+j] = silence
		}
		var before []float64 // nil: nothing was before
		if c > 0 {
			before = p.best[(c-1)*n : c*n]
		}
		for m := range p.modes {
			p.extend(c, m, before)
		}
		if p.rules.Silent && c > 0 {
			p.extendSilence(c, before)
		}
	}
}

// extend tries a mode as the last of a schedule.
func (p *Planner) extend(c, m int, before []float64) {
	n := len(p.seconds)
	row, choice := p.best[c*n:c*n+n], p.choice[c*n:c*n+n]
	bits, locked, begins := p.bits[m*n:m*n+n], p.locked[m*n:m*n+n], p.begins[m*n:m*n+n]
	silent := p.rules.Silent
	start, k := nothing, 0 // the best beginning so far, and the next to be looked at
	for j := 1; j < n; j++ {
		if silent {
			if begins[j] < 0 { // the mode may not be sent here; it begins anew at j or later
				start, k = nothing, j
				continue
			}
		}
		for ; k < p.eligible[j]; k++ {
			v := -locked[k]
			switch {
			case before != nil:
				v += before[k]
			case !silent && k > 0:
				v = nothing // sending begins with the track
			}
			start = max(start, v)
		}
		if v := start + bits[j]; v > row[j] {
			row[j], choice[j] = v, int16(m)
		}
	}
}

// extendSilence tries a silence within the contact.
func (p *Planner) extendSilence(c int, before []float64) {
	n := len(p.seconds)
	row, choice := p.best[c*n:c*n+n], p.choice[c*n:c*n+n]
	start, k := nothing, 0
	for j := 1; j < n; j++ {
		for ; k < p.eligible[j]; k++ {
			start = max(start, before[k])
		}
		if start > row[j] {
			row[j], choice[j] = start, silence
		}
	}
}

// trace returns the best schedule that search has found, the fewest changes first; none
// where none brings anything.
func (p *Planner) trace() []span {
	n := len(p.seconds)
	most, changes, end := 0.0, -1, 0
	for c := range p.rules.Changes + 1 {
		for j := 1; j < n; j++ {
			if !p.rules.Silent && j < n-1 {
				continue // sending ends with the track
			}
			if v := p.best[c*n+j]; v > most*(1+1e-12) {
				most, changes, end = v, c, j
			}
		}
	}
	spans := p.spans[:0] // from the last to the first
	for c, j := changes, end; c >= 0; c-- {
		s := p.lastSpan(c, j)
		if n := len(spans); n > 0 && spans[n-1].mode == s.mode { // a tie of changing to itself
			spans[n-1].from = s.from
			spans[n-1].bits += s.bits
		} else {
			spans = append(spans, s)
		}
		j = s.from
	}
	slices.Reverse(spans)
	p.spans = spans
	return spans
}

// lastSpan finds again how the last mode of a best schedule has begun.
func (p *Planner) lastSpan(c, j int) span {
	n := len(p.seconds)
	m := int(p.choice[c*n+j])
	s := span{mode: m, to: j}
	first := 0
	if m != silence && p.rules.Silent {
		first = p.begins[m*n+j]
	}
	start := nothing
	for k := first; k < p.eligible[j]; k++ {
		v := 0.0
		if m != silence {
			v = -p.locked[m*n+k]
		}
		if c > 0 {
			v += p.best[(c-1)*n+k]
		} else if !p.rules.Silent && k > 0 {
			break
		}
		if v > start {
			start, s.from = v, k
		}
	}
	if m != silence {
		s.bits = p.bits[m*n+j] - p.locked[m*n+s.from]
	}
	return s
}
