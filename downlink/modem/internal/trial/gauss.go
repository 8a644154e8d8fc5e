package trial

import "math"

// gaussian returns the response of a Gaussian filter to one bit, n samples a bit, over
// five bits with the bit in the middle; bt is its 3 dB bandwidth times the bit's length.
// The samples sum to n.
func gaussian(bt float64, n int) []float64 {
	const span = 5
	out := make([]float64, span*n)
	scale := math.Pi * bt * math.Sqrt(2/math.Ln2)
	for i := range out {
		at := (float64(i)+0.5)/float64(n) - span/2.0 // in bits from the middle
		out[i] = (math.Erf(scale*(at+0.5)) - math.Erf(scale*(at-0.5))) / 2
	}
	return out
}

// section is a second-order low-pass section for complex samples, in the transposed form.
type section struct {
	b0, b1, b2, a1, a2 float64
	s1, s2             complex128
}

// butterworth returns a fourth-order low-pass with its 3 dB point at a fraction of the
// sampling rate, by the bilinear transform.
func butterworth(fraction float64) [2]section {
	k := math.Tan(math.Pi * fraction)
	var out [2]section
	for i := range out {
		q := 1 / (2 * math.Cos(math.Pi*float64(2*i+1)/8))
		norm := 1 / (1 + k/q + k*k)
		out[i] = section{b0: k * k * norm, b1: 2 * k * k * norm, b2: k * k * norm, a1: 2 * (k*k - 1) * norm, a2: (1 - k/q + k*k) * norm}
	}
	return out
}

func (s *section) filter(x complex128) complex128 {
	y := times(s.b0, x) + s.s1
	s.s1 = times(s.b1, x) - times(s.a1, y) + s.s2
	s.s2 = times(s.b2, x) - times(s.a2, y)
	return y
}

func times(a float64, x complex128) complex128 { return complex(a*real(x), a*imag(x)) }
