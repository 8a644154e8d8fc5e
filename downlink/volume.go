package downlink

import (
	"math"
	"time"
)

// volume integrates the rates over the samples. The achievable rate goes by the
// trapezoidal rule; the chosen mode counts while the margin is at least what is
// required, from crossing to crossing, linear between samples. Where the antenna
// points outside its main lobe the achievable rate is 0, and the mode does not count
// from the last usable sample to the next.
func (p *Profile) volume() Volume {
	var v Volume
	bits := 0.0
	for i := 1; i < len(p.Seconds); i++ {
		dt := p.Seconds[i] - p.Seconds[i-1]
		bits += dt * (p.AchievableRateBps[i-1] + p.AchievableRateBps[i]) / 2
		from, to, ok := p.closing(i)
		if !ok {
			continue
		}
		v.Closes = p.appendInterval(v.Closes, p.Seconds[i-1]+from*dt, p.Seconds[i-1]+to*dt)
	}
	v.AchievableBytes = bits / 8
	seconds := 0.0
	for _, c := range v.Closes {
		seconds += c.To.Sub(c.From).Seconds()
	}
	v.ModeBytes = float64(p.DataRate) * seconds / 8
	if p.DataRate == 0 {
		v.ModeBytes = math.NaN()
	}
	return v
}

// closing returns the part of the step before sample i, from 0 to 1, over which the
// link closes; ok is false when it is none of it.
func (p *Profile) closing(i int) (from, to float64, ok bool) {
	if !p.Usable[i-1] || !p.Usable[i] {
		return 0, 0, false
	}
	a, b := p.MarginOverDB[i-1], p.MarginOverDB[i]
	switch {
	case a >= 0 && b >= 0:
		return 0, 1, true
	case a >= 0 && b < 0:
		return 0, a / (a - b), true
	case a < 0 && b >= 0:
		return a / (a - b), 1, true
	}
	return 0, 0, false // NaN too: without a data rate nothing closes
}

// appendInterval adds a span, joined to the one before where they touch.
func (p *Profile) appendInterval(list []Interval, from, to float64) []Interval {
	at := func(s float64) time.Time { return p.Start.Add(time.Duration(math.Round(s * 1e9))) }
	if n := len(list); n > 0 && list[n-1].To.Equal(at(from)) {
		list[n-1].To = at(to)
		return list
	}
	if !at(to).After(at(from)) {
		return list
	}
	return append(list, Interval{at(from), at(to)})
}
