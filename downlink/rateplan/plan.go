package rateplan

import (
	"math"
	"time"

	"slantwise/orbit/unit"
)

// Plan is a schedule of a pass. Before its first and after its last step the spacecraft
// is silent.
type Plan struct {
	Steps        []Step // one after another; empty where nothing can be brought down
	Bytes        float64
	FreeBytes    float64   // bound: the best mode at every instant, without guards and rules
	SoFar        []float64 // bytes brought down by each sample of the track
	ShannonBytes float64   // bound: Shannon's limit, in the band where one is given, without margins
}

// Step is a part of a schedule in one mode.
type Step struct {
	From, To        time.Time
	Mode            int    // index among the planner's modes; -1: silent
	Name            string // of the mode; "silent"
	SymbolRate      unit.Frequency
	InformationRate unit.BitRate
	NetRate         unit.BitRate
	LeastMargin     unit.DB // least C/N0 over what the mode needs, at the samples; guards are not taken off; NaN: silent, or the link is not usable somewhere
	Bytes           float64
}

// Changes returns how often the mode changes.
func (p *Plan) Changes() int { return max(0, len(p.Steps)-1) }

// ShareOfFree returns the share of what free switching would bring down, NaN where that
// is nothing.
func (p *Plan) ShareOfFree() float64 { return share(p.Bytes, p.FreeBytes) }

// ShareOfShannon returns the share of Shannon's limit, NaN where that is nothing.
func (p *Plan) ShareOfShannon() float64 { return share(p.Bytes, p.ShannonBytes) }

func share(part, whole float64) float64 {
	if whole == 0 {
		return math.NaN()
	}
	return part / whole
}

func (p *Planner) report(t *Track, spans []span) Plan {
	plan := Plan{Steps: make([]Step, len(spans)), SoFar: make([]float64, len(t.Seconds))}
	plan.FreeBytes, plan.ShannonBytes = p.bounds(t)
	for i, s := range spans {
		step := Step{From: t.at(t.Seconds[s.from]), To: t.at(t.Seconds[s.to]), Mode: s.mode, Name: "silent", LeastMargin: unit.DB(math.NaN()), Bytes: s.bits / 8}
		if s.mode != silence {
			m := &p.modes[s.mode]
			step.Name, step.SymbolRate, step.InformationRate, step.NetRate = m.Name, m.SymbolRate, m.InformationRate, m.NetRate
			least := math.Inf(1)
			for _, c := range t.CN0DBHz[s.from : s.to+1] {
				least = lesser(least, c)
			}
			step.LeastMargin = unit.DB(least - m.NeedDBHz)
		}
		plan.Steps[i] = step
		p.addSoFar(plan.SoFar, s, plan.Bytes)
		plan.Bytes += step.Bytes
	}
	return plan
}

// addSoFar fills the bytes by each sample of a span and after it.
func (p *Planner) addSoFar(soFar []float64, s span, before float64) {
	n := len(soFar)
	for j := s.from; j < n; j++ {
		soFar[j] = before
		if s.mode != silence {
			soFar[j] += max(0, p.bits[s.mode*n+min(j, s.to)]-p.locked[s.mode*n+s.from]) / 8
		}
	}
}

// free returns the bits of free switching among the modes, without guards.
func (p *Planner) free(t *Track) float64 {
	sum := 0.0
	for i := 1; i < len(t.Seconds); i++ {
		sum += p.freeRate(lesser(t.CN0DBHz[i-1], t.CN0DBHz[i])) * (t.Seconds[i] - t.Seconds[i-1])
	}
	return sum
}

// freeRate returns the net rate of the best mode at a C/N0, 0 where none closes.
func (p *Planner) freeRate(cn0 float64) float64 {
	rate := 0.0
	for m := range p.modes {
		if cn0 >= p.modes[m].NeedDBHz {
			rate = max(rate, p.modes[m].NetRate.BitsPerSecond())
		}
	}
	return rate
}

// shannon returns the bits of Shannon's limit by the trapezoidal rule.
func shannon(t *Track, band float64) float64 {
	sum, before := 0.0, shannonRate(t.CN0DBHz[0], band)
	for i := 1; i < len(t.Seconds); i++ {
		now := shannonRate(t.CN0DBHz[i], band)
		sum += (before + now) / 2 * (t.Seconds[i] - t.Seconds[i-1])
		before = now
	}
	return sum
}

// shannonRate is B log2(1 + C/(N0 B)) in a band of B hertz, C/N0 / ln 2 without one (0);
// 0 where the link is not usable.
func shannonRate(cn0DBHz, band float64) float64 {
	c := math.Exp(cn0DBHz * (math.Ln10 / 10))
	switch {
	case math.IsNaN(cn0DBHz):
		return 0
	case band > 0:
		return band * math.Log1p(c/band) / math.Ln2
	}
	return c / math.Ln2
}
