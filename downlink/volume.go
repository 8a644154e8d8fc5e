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
	bits, seconds, begun := 0.0, 0.0, math.NaN()
	end := func(at float64) {
		if at > begun { // never where nothing has begun
			seconds += p.addClosed(&v, begun, at)
		}
		begun = math.NaN()
	}
	for i := 1; i < len(p.Seconds); i++ {
		a, b := p.Seconds[i-1], p.Seconds[i]
		bits += p.achieved(a, b, p.AchievableRateBps[i-1], p.AchievableRateBps[i])
		before, after := p.MarginOverDB[i-1], p.MarginOverDB[i]
		usable := p.Usable[i-1] && p.Usable[i]
		switch {
		case usable && before >= 0 && after >= 0:
			if math.IsNaN(begun) {
				begun = a
			}
		case usable && before >= 0 && after < 0:
			if math.IsNaN(begun) {
				begun = a
			}
			end(a + (b-a)*before/(before-after))
		case usable && before < 0 && after >= 0:
			begun = a + (b-a)*before/(before-after)
		default: // NaN too: without a data rate nothing closes
			end(a)
		}
	}
	end(p.Seconds[len(p.Seconds)-1])
	v.AchievableBytes = bits / 8
	v.ModeBytes = float64(p.DataRate) * seconds / 8
	if p.DataRate == 0 {
		v.ModeBytes = math.NaN()
	}
	return v
}

// at returns the instant s seconds after the start, to the nanosecond.
func (p *Profile) at(s float64) time.Time {
	return p.Start.Add(time.Duration(math.Round(s * 1e9)))
}

// VolumeSoFar returns, at each sample, the bytes since AOS at the achievable rate and
// in the chosen mode while its margin holds; the last are those of Volume. NaN where
// there is no such rate.
func (p *Profile) VolumeSoFar() (achievable, mode []float64) {
	n := len(p.Seconds)
	achievable, mode = make([]float64, n), make([]float64, n)
	closes := p.Volume.Closes
	before, next := 0.0, 0 // seconds of the intervals that are over, and the first that is not
	for i, s := range p.Seconds {
		if i > 0 {
			achievable[i] = achievable[i-1] + p.achieved(p.Seconds[i-1], s, p.AchievableRateBps[i-1], p.AchievableRateBps[i])/8
		}
		for next < len(closes) && closes[next].To.Sub(p.Start).Seconds() <= s {
			before += closes[next].To.Sub(closes[next].From).Seconds()
			next++
		}
		open := 0.0
		if next < len(closes) {
			open = max(0, s-closes[next].From.Sub(p.Start).Seconds())
		}
		mode[i] = float64(p.DataRate) * (before + open) / 8
		if p.DataRate == 0 {
			mode[i] = math.NaN()
		}
	}
	return achievable, mode
}
