package modem

import (
	"math"
	"strings"
)

// formulas returns the curves of a row that a formula gives.
func (r *Row) formulas(bounds map[string]*unionBound) []Curve {
	computed := func(m Metric, low, high float64, source string, rate func(float64) float64) Curve {
		return Curve{Metric: m, Low: low, High: high, Provenance: "computed", Source: source, rate: rate}
	}
	name := r.Coding.Name
	switch {
	case name == "none":
		if rate, what := theory(r.Modulation.Name); rate != nil {
			high := 0.1
			if name := r.Modulation.Name; name == "8psk" || name == "16psk" {
				high = ringLimit
			}
			return []Curve{computed(BitErrors, 1e-12, high, what+"; textbook formula", rate)}
		}
	case strings.HasPrefix(name, "ccsds-conv-") && !strings.Contains(name, "+"):
		source := "K = 7 (171,133) of CCSDS 131.0-B, soft decisions without quantization, union bound from the bit-weight spectrum"
		if r.Coding.RateText == "7/8" {
			source += "; a 60-bit decoding delay costs about 0.5 dB more (CCSDS 130.1-G-1 section 4.6)"
		}
		return []Curve{computed(BitErrors, 1e-12, 1e-4, source, bounds[r.Coding.RateText].bitErrorRate)}
	case strings.HasPrefix(name, "ccsds-rs-255-"):
		code := reedSolomon{n: 255, t: int(math.Round(255 * (1 - r.Coding.Rate) / 2))}
		source := "Reed-Solomon of CCSDS 131.0-B over hard decisions, bounded-distance formulas"
		return []Curve{
			computed(BitErrors, 1e-12, 1e-2, source, code.bitErrorRate),
			computed(CodewordErrors, 1e-12, 0.9, source, code.codewordErrorRate),
			computed(FrameErrors, 1e-12, 0.9, source+", five independent codewords", func(g float64) float64 { return code.frameErrorRate(5, g) }),
		}
	}
	return nil
}

// coded returns the curves of line codes over an uncoded modulation: a bit out of them
// is the sum of several received bits, and wrong where an odd number of those is. NRZI
// adds 2; under the self-synchronizing scrambler x^17 + x^12 + 1 the sum of the three
// taps for each of them is 6 bits, all different.
func (r *Row) coded(points []curveRow) []Curve {
	received, ok := map[string]float64{"ax25": 2, "ax25-scrambled": 6}[r.Coding.Name]
	if !ok {
		return nil
	}
	plain := Row{Modulation: r.Modulation, Coding: Coding{Name: "none", RateText: "1", Rate: 1}}
	plain.fill(nil, points, nil)
	var out []Curve
	for _, c := range plain.Curves {
		out = append(out, c.summed(received))
	}
	return out
}

// summed returns the curve of the sum of n bits with the error rate p of a curve, each
// wrong by itself: (1 - (1-2p)^n)/2.
func (c *Curve) summed(n float64) Curve {
	sum := func(p float64) float64 { return -math.Expm1(n*math.Log1p(-2*p)) / 2 }
	out := *c
	out.Low, out.High = sum(c.Low), sum(min(c.High, 0.1))
	out.Source += "; " + map[float64]string{2: "NRZI decoded, errors taken as independent and doubled", 6: "descrambled and NRZI decoded, errors taken as independent and sixfold"}[n]
	if c.rate != nil {
		out.rate = func(g float64) float64 { return sum(c.rate(g)) }
		return out
	}
	out.log = make([]float64, len(c.log))
	for i, l := range c.log {
		out.log[i] = math.Log(sum(math.Exp(l)))
	}
	out.High = math.Exp(out.log[0])
	return out
}
