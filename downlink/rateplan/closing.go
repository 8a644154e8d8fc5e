package rateplan

import "math"

// prepare computes, for every mode, what it would bring down by each sample, with the
// guards applied.
func (p *Planner) prepare(t *Track, guardSeconds float64) {
	n := len(t.Seconds)
	p.size(n)
	p.seconds = t.Seconds
	p.guardTrack(t, guardSeconds)
	for m := range p.modes {
		row := m * n
		p.fill(&p.modes[m], p.bits[row:row+n], p.locked[row:row+n], p.begins[row:row+n])
	}
	stay, k := p.rules.LeastStay.Seconds(), 0
	for j, s := range p.seconds {
		for k < j && s-p.seconds[k] >= stay-1e-9 {
			k++
		}
		p.eligible[j] = k
	}
}

// guardTrack takes for every sample the least C/N0 from the guard in time before it to
// the guard after it, linear between samples, within the track: at its ends nothing is
// switched. NaN where any of it is.
func (p *Planner) guardTrack(t *Track, guard float64) {
	if guard == 0 {
		copy(p.guarded, t.CN0DBHz)
		return
	}
	last := len(t.Seconds) - 1
	low, high := 0, 0
	for i, s := range t.Seconds {
		for t.Seconds[low] < s-guard { // stops at i at the latest
			low++
		}
		for high < last && t.Seconds[high+1] <= s+guard {
			high++
		}
		high = max(high, i)
		least := math.Inf(1)
		for k := low; k <= high; k++ {
			least = lesser(least, t.CN0DBHz[k])
		}
		if t.Seconds[low] > s-guard && low > 0 {
			least = lesser(least, t.between(low-1, s-guard))
		}
		if high < last {
			least = lesser(least, t.between(high, s+guard))
		}
		p.guarded[i] = least
	}
}

// between returns C/N0 at an instant after sample i and at or before the next.
func (t *Track) between(i int, s float64) float64 {
	if s <= t.Seconds[i] {
		return t.CN0DBHz[i]
	}
	part := (s - t.Seconds[i]) / (t.Seconds[i+1] - t.Seconds[i])
	return t.CN0DBHz[i] + part*(t.CN0DBHz[i+1]-t.CN0DBHz[i])
}

// lesser is the lesser of two numbers, NaN where one of them is.
func lesser(a, b float64) float64 {
	if b < a || b != b {
		return b
	}
	return a
}

// fill computes the columns of one mode. Bits flow in an interval that closes at both
// ends, from the time to lock again after its run of closing has begun.
func (p *Planner) fill(m *Mode, bits, locked []float64, begins []int) {
	need, rate := m.NeedDBHz+float64(p.rules.Guard), m.NetRate.BitsPerSecond()
	relock := p.rules.Relock.Seconds()
	bits[0], begins[0] = 0, -1
	run := -1
	for j := 1; j < len(p.seconds); j++ {
		bits[j], begins[j] = bits[j-1], -1
		if !(p.guarded[j-1] >= need && p.guarded[j] >= need) {
			run = -1
			continue
		}
		if run < 0 {
			run = j - 1
		}
		begins[j] = run
		from := max(p.seconds[j-1], p.seconds[run]+relock)
		if d := p.seconds[j] - from; d > 0 {
			bits[j] += rate * d
		}
	}
	p.lock(bits, locked, begins, rate, relock)
}

// lock computes the bits up to each sample and the time to lock again after it. Within
// an interval bits flow to its end, from its start or from when its run has locked.
func (p *Planner) lock(bits, locked []float64, begins []int, rate, relock float64) {
	last := len(p.seconds) - 1
	j := 0 // the first sample at or after the instant
	for k, s := range p.seconds {
		at := s + relock
		for j < last && p.seconds[j] < at {
			j++
		}
		locked[k] = bits[j]
		if j > 0 && p.seconds[j] > at && begins[j] >= 0 {
			from := max(at, p.seconds[begins[j]]+relock)
			if d := p.seconds[j] - from; d > 0 {
				locked[k] -= rate * d
			}
		}
	}
}
