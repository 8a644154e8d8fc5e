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
}

// Ranked is how well a candidate explains a frequency log.
type Ranked struct {
	Name        string
	Probability float64 // among the candidates, which are equally likely before
	RMSHz       float64 // after the transmitter's offset, without outliers
	OffsetHz    float64 // of the transmitter, if it is this one
	Samples     int     // within its passes
	Below       int     // heard while it was below the horizon
	Explains    bool    // no worse than the stated noise allows
	logEvidence float64
	worth       float64 // of a sample, by its correlation with the next
}

// sure is the probability from which on an answer is given.
const sure = 0.95

// RankOptions state the noise.
type RankOptions struct {
	NoiseHz  float64 // standard deviation of a sample, with what the elements miss
	OffsetHz float64 // standard deviation of the transmitter's offset before the log
}

// Rank weighs candidates against a frequency log, best first. The transmitter's offset is
// integrated out over a Gaussian prior, a sample counts by how independent it is of its
// neighbours, and one that a candidate could not have sent costs as one five standard
// deviations off; farther ones cost no more, so that a few wrong samples do not decide.
// answer is false where no candidate has 95 % or the best does not explain the log.
func Rank(candidates []Candidate, o RankOptions) (ranked []Ranked, answer bool) {
	for i := range candidates {
		ranked = append(ranked, weigh(&candidates[i], o))
	}
	sort.SliceStable(ranked, func(a, b int) bool { return ranked[a].logEvidence > ranked[b].logEvidence })
	if len(ranked) == 0 {
		return nil, false
	}
	worth := ranked[0].worth // one for all: that of the best, whose residuals are noise the most
	sum := 0.0
	for i := range ranked {
		ranked[i].Probability = math.Exp(worth * (ranked[i].logEvidence - ranked[0].logEvidence))
		sum += ranked[i].Probability
	}
	for i := range ranked {
		ranked[i].Probability /= sum
	}
	return ranked, ranked[0].Probability >= sure && ranked[0].Explains
}

// farthest is from how many standard deviations on a sample costs no more.
const farthest = 5

func weigh(c *Candidate, o RankOptions) Ranked {
	out := Ranked{Name: c.Name}
	var r []float64
	for i := range c.Points {
		p := &c.Points[i]
		switch v := p.Residual(FrequencyHz); {
		case math.IsNaN(p.Get(FrequencyHz)) || p.State == Dropout:
		case p.State == Outside || math.IsNaN(v):
			out.Below++
		default:
			r = append(r, v)
		}
	}
	out.Samples = len(r)
	// The offset by repeated means of what lies within reach of the median.
	mean := median(r)
	for range 10 {
		sum, n := 0.0, 1/(o.OffsetHz*o.OffsetHz/(o.NoiseHz*o.NoiseHz))
		for _, v := range r {
			if math.Abs(v-mean) < farthest*o.NoiseHz {
				sum, n = sum+v, n+1
			}
		}
		mean = sum / n
	}
	cost, squares, near := float64(out.Below)*farthest*farthest, 0.0, 0
	var lag, own float64
	for i, v := range r {
		z := (v - mean) / o.NoiseHz
		cost += min(z*z, farthest*farthest)
		if math.Abs(z) < farthest {
			squares, near = squares+z*z, near+1
		}
		if i > 0 {
			before := (r[i-1] - mean) / o.NoiseHz
			lag += max(min(z, 3), -3) * max(min(before, 3), -3)
			own += max(min(z, 3), -3) * max(min(z, 3), -3)
		}
	}
	prior := mean / o.OffsetHz
	out.logEvidence = -(cost + prior*prior + math.Log(1+float64(near)*o.OffsetHz*o.OffsetHz/(o.NoiseHz*o.NoiseHz))) / 2
	out.OffsetHz = mean
	out.RMSHz = math.NaN()
	if near > 0 {
		out.RMSHz = o.NoiseHz * math.Sqrt(squares/float64(near))
	}
	all := len(r) + out.Below
	out.Explains = near >= 5 && float64(near) >= 0.8*float64(all) && squares/float64(near) < 2.25
	rho := 0.0
	if own > 0 {
		rho = min(max(lag/own, 0), 0.95)
	}
	out.worth = (1 - rho) / (1 + rho)
	return out
}

func median(v []float64) float64 {
	if len(v) == 0 {
		return 0
	}
	s := slices.Sorted(slices.Values(v))
	return s[len(s)/2]
}
