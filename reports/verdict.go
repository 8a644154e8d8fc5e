package reports

import (
	"time"
)

// state is what becomes of the link in a pass.
type state int

const (
	closesThrough state = iota
	closesPartly
	neverCloses
	noMargin // a carrier without data: power, but nothing to close
	noRadio
)

// verdict is the answer of a pass in a few words.
type verdict struct {
	state  state
	closed time.Duration // how long the margin is at least what is required
}

func verdictOf(p *Pass) verdict {
	if p.Radio == nil {
		return verdict{state: noRadio}
	}
	if !finite(p.Radio.Greatest.Value) {
		return verdict{state: noMargin}
	}
	v := verdict{state: neverCloses}
	for _, c := range p.Profile.Volume.Closes {
		v.closed += c.To.Sub(c.From)
	}
	switch {
	case v.closed <= 0:
	case v.closed >= p.Pass.Duration():
		v.state = closesThrough
	default:
		v.state = closesPartly
	}
	return v
}

// Symbol is a mark that tells the states apart without colour.
func (v verdict) Symbol() string { return [...]string{"●", "◐", "○", "–", "–"}[v.state] }

// Key names the state for style sheets, filters and files.
func (v verdict) Key() string {
	return [...]string{"throughout", "partly", "never", "no-margin", "no-radio"}[v.state]
}

// Words says the state.
func (v verdict) Words() string {
	return [...]string{"closes throughout", "closes in part", "does not close", "no data mode", "no radio"}[v.state]
}

// Closed tells for how long the link closes; empty where there is no link.
func (v verdict) Closed() string {
	if v.state > neverCloses {
		return ""
	}
	return span(v.closed)
}
