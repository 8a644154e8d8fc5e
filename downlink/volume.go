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
			seconds += at - begun
			v.Closes = append(v.Closes, Interval{p.at(begun), p.at(at)})
		}
		begun = math.NaN()
	}
	for i := 1; i < len(p.Seconds); i++ {
		a, b := p.Seconds[i-1], p.Seconds[i]
		bits += (b - a) * (p.AchievableRateBps[i-1] + p.AchievableRateBps[i]) / 2
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

// VolumeSoFar returns the bytes that have come down by each sample, at the achievable
// rate and in the chosen mode; the last of each is the pass's Volume but for the
// rounding of Closes to nanoseconds. NaN where there is no such rate.
func (p *Profile) VolumeSoFar() (achievable, mode []float64) {
	achievable, mode = make([]float64, len(p.Seconds)), make([]float64, len(p.Seconds))
	bits := 0.0
	for i, t := range p.Seconds {
		if i > 0 {
			bits += (t - p.Seconds[i-1]) * (p.AchievableRateBps[i-1] + p.AchievableRateBps[i]) / 2
		}
		achievable[i] = bits / 8
		mode[i] = float64(p.DataRate) * p.closedBy(t) / 8
		if p.DataRate == 0 {
			mode[i] = math.NaN()
		}
	}
	return achievable, mode
}

// closedBy returns for how many seconds the link has closed by t seconds after the
// start.
func (p *Profile) closedBy(t float64) float64 {
	sum := 0.0
	for _, c := range p.Volume.Closes {
		from, to := c.From.Sub(p.Start).Seconds(), c.To.Sub(p.Start).Seconds()
		sum += max(0, min(t, to)-from)
	}
	return sum
}
