package downlink

import (
	"math"

	"slantwise/orbit/unit"
)

// rateCaps is what bounds the achievable rate, in bit/s; +Inf: no bound.
type rateCaps struct {
	bandwidth, transmitter float64
	needDB                 float64 // C/N0 less this is the power-limited rate in dB(bit/s)
}

func (l *Link) buildCaps() {
	t := &l.spec.Transmitter
	l.caps = rateCaps{bandwidth: math.Inf(1), transmitter: math.Inf(1)}
	if t.HighestRate > 0 {
		l.caps.transmitter = t.HighestRate.BitsPerSecond()
	}
	if l.mode == nil {
		return
	}
	l.caps.needDB = float64(t.ImplementationLoss + l.mode.Required + t.RequiredMargin)
	if rate, ok := l.mode.BandwidthRate(t.AllottedBandwidth); ok && t.AllottedBandwidth > 0 {
		l.caps.bandwidth = rate.BitsPerSecond()
	}
}

// achievable returns the information rate in bit/s that keeps the required margin at
// a C/N0, with the chosen mode's threshold, and what holds it.
func (l *Link) achievable(cn0 float64, usable bool) (float64, RateLimit) {
	switch {
	case l.mode == nil:
		return math.NaN(), LimitUnknown
	case !usable:
		return 0, LimitUnusable
	}
	rate, limit := math.Exp((cn0-l.caps.needDB)*(math.Ln10/10)), LimitPower // faster than Pow
	if l.caps.bandwidth < rate {
		rate, limit = l.caps.bandwidth, LimitBandwidth
	}
	if l.caps.transmitter < rate {
		rate, limit = l.caps.transmitter, LimitTransmitter
	}
	return rate, limit
}

// dataRate returns the chosen mode's information rate, 0 without one.
func (l *Link) dataRate() unit.BitRate {
	if l.mode == nil {
		return 0
	}
	return l.mode.InformationRate
}

// String says what holds the rate.
func (r RateLimit) String() string {
	return [...]string{"power", "bandwidth", "transmitter", "unusable", "unknown"}[r]
}
