package measured

import (
	"math"
	"slices"
	"sort"
)

// Candidate is an orbit that may be the one heard, with the log over its prediction.
type Candidate struct {
	Name   string
	Points []Point
	// Late puts the log over the same orbit flown so many seconds later, or earlier where less than
	// 0; nil where that orbit does not cover the log. A nil function: no time offset is looked for.
	Late func(seconds float64) []Point
}

// Ranked is how well a candidate explains a frequency log.
type Ranked struct {
	Name        string
	Probability float64 // among the candidates, which are equally likely before
	RMSHz       float64 // after the transmitter's offset, without outliers
	OffsetHz    float64 // of the transmitter, if it is this one
	LateS       float64 // how late the spacecraft is on the candidate's orbit, if it is this one
	Samples     int     // within its passes
	Below       int     // heard while it was below the horizon
	Explains    bool    // no worse than the stated noise allows
	logEvidence float64
}

// sure is the probability from which on an answer is given.
const sure = 0.95

// RankOptions state the noise and what was known before.
type RankOptions struct {
	NoiseHz  float64 // standard deviation of a sample, with what the elements miss beside the time
	OffsetHz float64 // standard deviation of the transmitter's offset before the log
	LateS    float64 // standard deviation of the time offset of a candidate before the log; 0: none is looked for
}

// latest is how many standard deviations of the time offset are searched.
const latest = 3

// Rank weighs candidates against a frequency log, best first. The transmitter's offset and the
// time offset of each candidate are integrated out over Gaussian priors (Laplace's approximation
// around the best, Kass and Raftery 1995, section 4.1), a sample counts by how independent it is of
// its neighbours, and one that a candidate could not have sent costs as one five standard
// deviations off; farther ones cost no more, so that a few wrong samples do not decide.
// answer is false where no candidate has 95 % or the best does not explain the log.
func Rank(candidates []Candidate, o RankOptions) (ranked []Ranked, answer bool) {
	var list []match
	for i := range candidates {
		list = append(list, closest(&candidates[i], o))
	}
	if len(list) == 0 {
		return nil, false
	}
	// One worth for all: that of the best, whose residuals are noise the most.
	best := slices.MaxFunc(list, func(a, b match) int { return compareFloats(a.evidence(o, 1), b.evidence(o, 1)) })
	worth := best.worth()
	for i := range list {
		r := list[i].ranked(candidates[i].Name, o)
		r.logEvidence = list[i].evidence(o, worth)
		ranked = append(ranked, r)
	}
	sort.SliceStable(ranked, func(a, b int) bool { return ranked[a].logEvidence > ranked[b].logEvidence })
	sum := 0.0
	for i := range ranked {
		ranked[i].Probability = math.Exp(ranked[i].logEvidence - ranked[0].logEvidence)
		sum += ranked[i].Probability
	}
	for i := range ranked {
		ranked[i].Probability /= sum
	}
	return ranked, ranked[0].Probability >= sure && ranked[0].Explains
}

func compareFloats(a, b float64) int {
	switch {
	case a < b:
		return -1
	case a > b:
		return 1
	}
	return 0
}

// coarse is how many seconds apart time offsets are tried, at most; a pass over a low orbit bends
// its frequency over a minute or more.
const coarse = 5.0

// closest fits the offsets of a candidate.
func closest(c *Candidate, o RankOptions) match {
	if o.LateS <= 0 || c.Late == nil {
		return fitted(c.Points, 0, o.NoiseHz, RankOptions{NoiseHz: o.NoiseHz, OffsetHz: o.OffsetHz})
	}
	// Between two offsets that are tried the frequency is off by the steepest rate times half the step:
	// so wide the noise is taken in the search, and made narrower from a good place on.
	step := min(coarse, o.LateS/2)
	wide := max(o.NoiseHz, steepest(c.Points)*step/3)
	var tried []match
	for k := math.Floor(-latest * o.LateS / step); k*step <= latest*o.LateS+step/2; k++ {
		if points := c.Late(k * step); points != nil {
			tried = append(tried, fitted(points, k*step, wide, o))
		}
	}
	sort.SliceStable(tried, func(a, b int) bool { return tried[a].cost < tried[b].cost })
	var best match
	for i, start := range tried[:min(len(tried), 3)] {
		if m := narrowed(c, start, wide, o); i == 0 || m.evidence(o, 1) > best.evidence(o, 1) {
			best = m
		}
	}
	if len(tried) == 0 {
		return fitted(c.Points, 0, o.NoiseHz, RankOptions{NoiseHz: o.NoiseHz, OffsetHz: o.OffsetHz})
	}
	return best
}

// narrowed goes on from a match until the time offset stays, the noise halved each time.
func narrowed(c *Candidate, m match, noise float64, o RankOptions) match {
	at := m.late
	for range 30 {
		at = min(max(at, -latest*o.LateS), latest*o.LateS)
		points := c.Late(at)
		if points == nil {
			return m
		}
		noise = max(o.NoiseHz, noise/2)
		m = fitted(points, at, noise, o)
		if noise == o.NoiseHz && math.Abs(m.late-at) < 1e-3 {
			break
		}
		at = m.late
	}
	return m
}

func steepest(points []Point) float64 {
	most := 0.0
	for i := range points {
		if r := math.Abs(points[i].FrequencyRateHzS); r > most {
			most = r
		}
	}
	return most
}

// match is a candidate with fitted offsets.
type match struct {
	offset, late float64
	noise        float64
	z            []float64 // residuals in standard deviations
	below        int
	cost         float64
	// What the samples within reach tell of offset and lateness: sums of 1, of the rate and of its
	// square, over the noise squared.
	n, r, rr float64
	timed    bool // late was fitted
}

// fitted fits the transmitter's offset, and the time offset where o states one, to points that
// stand for an orbit that is at seconds late; to first order in what it is more.
func fitted(points []Point, at, noise float64, o RankOptions) match {
	m := match{noise: noise, late: at, timed: o.LateS > 0}
	var r, rate []float64
	for i := range points {
		p := &points[i]
		switch v := p.Residual(FrequencyHz); {
		case math.IsNaN(p.Get(FrequencyHz)) || p.State == Dropout:
		case p.State == Outside || math.IsNaN(v) || m.timed && math.IsNaN(p.FrequencyRateHzS):
			m.below++
		default:
			r, rate = append(r, v), append(rate, p.FrequencyRateHzS)
		}
	}
	m.offset = median(r)
	more := 0.0
	// By repeated least squares of what lies within reach: residual = offset - rate * more.
	for range 12 {
		n, x, xx := 1/(o.OffsetHz*o.OffsetHz), 0.0, 0.0
		y, xy := 0.0, 0.0
		if m.timed {
			xx, xy = 1/(o.LateS*o.LateS), -at/(o.LateS*o.LateS)
		}
		for i, v := range r {
			if math.Abs(v-m.offset+rateOf(rate, i, m.timed)*more) < farthest*noise {
				w, g := 1/(noise*noise), -rateOf(rate, i, m.timed)
				n, x, xx, y, xy = n+w, x+w*g, xx+w*g*g, y+w*v, xy+w*g*v
			}
		}
		if !m.timed {
			m.offset = y / n
			continue
		}
		if det := n*xx - x*x; det > 0 {
			m.offset, more = (y*xx-xy*x)/det, (n*xy-x*y)/det
		}
	}
	m.late += more
	m.cost = float64(m.below) * farthest * farthest
	for i, v := range r {
		g := rateOf(rate, i, m.timed)
		z := (v - m.offset + g*more) / noise
		m.z = append(m.z, z)
		m.cost += min(z*z, farthest*farthest)
		if math.Abs(z) < farthest {
			m.n, m.r, m.rr = m.n+1/(noise*noise), m.r+g/(noise*noise), m.rr+g*g/(noise*noise)
		}
	}
	return m
}

func rateOf(rate []float64, i int, timed bool) float64 {
	if !timed {
		return 0
	}
	return rate[i]
}

// farthest is from how many standard deviations on a sample costs no more.
const farthest = 5

// evidence returns the logarithm of the marginal likelihood, a sample counted as worth of one.
func (m *match) evidence(o RankOptions, worth float64) float64 {
	prior := m.offset * m.offset / (o.OffsetHz * o.OffsetHz)
	a, d := 1+worth*m.n*o.OffsetHz*o.OffsetHz, 1.0
	off := 0.0
	if m.timed {
		prior += m.late * m.late / (o.LateS * o.LateS)
		d, off = 1+worth*m.rr*o.LateS*o.LateS, worth*m.r*o.OffsetHz*o.LateS
	}
	return -(worth*m.cost + prior + math.Log(max(a*d-off*off, 1))) / 2
}

// worth is that of a sample by its correlation with the next, whose estimate is too low by about
// (1 + 3 rho)/n after a mean was fitted and (2 + 4 rho)/n after a slope, too (Kendall 1954 for the
// mean; from memory).
func (m *match) worth() float64 {
	var lag, own float64
	for i := 1; i < len(m.z); i++ {
		if math.Abs(m.z[i]) >= farthest || math.Abs(m.z[i-1]) >= farthest {
			continue // a spur has no neighbour, and would make the rest look independent
		}
		v, before := max(min(m.z[i], 3), -3), max(min(m.z[i-1], 3), -3)
		lag, own = lag+v*before, own+(v*v+before*before)/2
	}
	rho := 0.0
	if own > 0 {
		rho = lag / own
		lost := 1 + 3*rho
		if m.timed {
			lost = 2 + 4*rho
		}
		rho = min(max(rho+lost/float64(len(m.z)), 0), 0.95)
	}
	return (1 - rho) / (1 + rho)
}

func (m *match) ranked(name string, o RankOptions) Ranked {
	out := Ranked{Name: name, OffsetHz: m.offset, LateS: m.late, Samples: len(m.z), Below: m.below, RMSHz: math.NaN()}
	squares, near := 0.0, 0
	for _, z := range m.z {
		if math.Abs(z) < farthest {
			squares, near = squares+z*z, near+1
		}
	}
	if near > 0 {
		out.RMSHz = o.NoiseHz * math.Sqrt(squares/float64(near))
	}
	out.Explains = near >= 5 && float64(near) >= 0.8*float64(len(m.z)+m.below) && squares/float64(near) < 2.25
	return out
}

func median(v []float64) float64 {
	if len(v) == 0 {
		return 0
	}
	s := slices.Sorted(slices.Values(v))
	return s[len(s)/2]
}
