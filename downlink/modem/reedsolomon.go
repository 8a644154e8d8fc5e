package modem

import "math"

// reedSolomon is a Reed-Solomon code over octets with bounded-distance decoding, behind
// hard decisions on BPSK or QPSK: a codeword of n octets is right while at most t of
// them are wrong, each with the probability 1 - (1-p)^8.
type reedSolomon struct{ n, t int }

func (c reedSolomon) rate() float64 { return float64(c.n-2*c.t) / float64(c.n) }

// channel returns the error rates of bits and octets ahead of the decoder.
func (c reedSolomon) channel(g float64) (bit, octet float64) {
	bit = coherent(c.rate() * g)
	return bit, -math.Expm1(8 * math.Log1p(-bit))
}

// codewordErrorRate is Σ C(n,j) s^j (1-s)^(n-j) over j > t.
func (c reedSolomon) codewordErrorRate(g float64) float64 {
	_, octet := c.channel(g)
	return c.sum(octet, func(int) float64 { return 1 })
}

// bitErrorRate takes the octets that stay wrong, j of n with j over t wrong ones, and
// in each the share of wrong bits that the channel has made.
func (c reedSolomon) bitErrorRate(g float64) float64 {
	bit, octet := c.channel(g)
	if octet == 0 {
		return 0
	}
	return bit / octet * c.sum(octet, func(j int) float64 { return float64(j) / float64(c.n) })
}

// frameErrorRate is that of a frame of codewords that are all needed.
func (c reedSolomon) frameErrorRate(codewords int, g float64) float64 {
	return -math.Expm1(float64(codewords) * math.Log1p(-c.codewordErrorRate(g)))
}

// sum adds weighted binomial probabilities over j > t, from the largest term down so
// that none of them underflows before it counts.
func (c reedSolomon) sum(p float64, weight func(j int) float64) float64 {
	if p == 0 {
		return 0
	}
	term := math.Exp(c.logChoose(c.t+1) + float64(c.t+1)*math.Log(p) + float64(c.n-c.t-1)*math.Log1p(-p))
	odds, total := p/(1-p), 0.0
	for j := c.t + 1; j <= c.n; j++ {
		total += weight(j) * term
		term *= odds * float64(c.n-j) / float64(j+1)
	}
	return total
}

func (c reedSolomon) logChoose(j int) float64 {
	a, _ := math.Lgamma(float64(c.n + 1))
	b, _ := math.Lgamma(float64(j + 1))
	d, _ := math.Lgamma(float64(c.n - j + 1))
	return a - b - d
}
