package modem

import "math"

// Bit error rates of uncoded modulations over white Gaussian noise; g is the linear
// Eb/N0. Formulas of the textbooks (Proakis, Digital Communications; Sklar, Digital
// Communications), checked against published simulations and tabulated points in the
// tests.

// ringLimit is the bit error rate up to which the nearest neighbours on a ring are all
// that counts, to 0.001 dB.
const ringLimit = 1e-3

// theory returns the bit error rate of an uncoded modulation, nil where no formula is
// known, and what the formula is.
func theory(modulation string) (rate func(g float64) float64, what string) {
	switch modulation {
	case "bpsk", "qpsk", "oqpsk", "msk":
		return coherent, "Q(sqrt(2 Eb/N0))"
	case "8psk":
		return func(g float64) float64 { return ringRate(8, g) }, "Gray map, (2/3) Q(sqrt(6 Eb/N0) sin(pi/8))"
	case "16psk":
		return func(g float64) float64 { return ringRate(16, g) }, "Gray map, (1/2) Q(sqrt(8 Eb/N0) sin(pi/16))"
	case "16qam":
		return func(g float64) float64 { return gridRate(4, g) }, "Gray map, all decisions between the levels counted"
	case "64qam":
		return func(g float64) float64 { return gridRate(8, g) }, "Gray map, all decisions between the levels counted"
	case "debpsk":
		return func(g float64) float64 { p := coherent(g); return 2 * p * (1 - p) }, "2p(1-p), p = Q(sqrt(2 Eb/N0))"
	case "dbpsk":
		return func(g float64) float64 { return math.Exp(-g) / 2 }, "exp(-Eb/N0)/2"
	case "dqpsk":
		return differentialQuaternary, "Marcum's Q function, Gray map"
	case "2fsk":
		return func(g float64) float64 { return math.Exp(-g/2) / 2 }, "exp(-Eb/(2 N0))/2, orthogonal tones, non-coherent"
	case "2fsk-coherent":
		return func(g float64) float64 { return tail(math.Sqrt(g)) }, "Q(sqrt(Eb/N0)), orthogonal tones, coherent"
	case "4fsk":
		return quaternaryTones, "orthogonal tones, non-coherent"
	}
	return nil, ""
}

// tail is the Gaussian tail Q(x).
func tail(x float64) float64 { return math.Erfc(x/math.Sqrt2) / 2 }

func coherent(g float64) float64 { return tail(math.Sqrt(2 * g)) }

// ringRate is the bit error rate of m phases with Gray map, by its nearest neighbours:
// (2/k) Q(sqrt(2 k g) sin(π/m)), k = log2 m. Exact to 0.001 dB from a rate of 1e-3 down.
func ringRate(m, g float64) float64 {
	k := math.Log2(m)
	return 2 / k * tail(math.Sqrt(2*k*g)*math.Sin(math.Pi/m))
}

// gridRate is the bit error rate of a square constellation of side × side points with
// Gray map on each axis: every decision counts by the bits that it turns.
func gridRate(side int, g float64) float64 {
	bits := math.Log2(float64(side))
	// Levels ±1, ±3, … have the mean square (side² - 1)/3 an axis; an axis carries half
	// of the bits and half of the energy.
	sigma := math.Sqrt((float64(side*side) - 1) / 3 / (2 * bits * g))
	sum := 0.0
	for sent := range side {
		for decided := range side {
			turned := grayDistance(sent, decided)
			if turned == 0 {
				continue
			}
			// The edges of a decision lie one to either side of its level.
			from, to := math.Abs(float64(2*(decided-sent)))-1, math.Abs(float64(2*(decided-sent)))+1
			p := tail(from / sigma)
			if decided > 0 && decided < side-1 {
				p -= tail(to / sigma)
			}
			sum += turned * p
		}
	}
	return sum / (float64(side) * bits)
}

// grayDistance returns in how many bits the Gray codes of two numbers differ.
func grayDistance(a, b int) float64 {
	n := 0
	for d := (a ^ a>>1) ^ (b ^ b>>1); d != 0; d &= d - 1 {
		n++
	}
	return float64(n)
}

// quaternaryTones is the bit error rate of four orthogonal tones without phase: 2/3 of
// the symbol error rate Σ (-1)^(n+1) C(3,n)/(n+1) exp(-n/(n+1) · 2g), n = 1, 2, 3.
func quaternaryTones(g float64) float64 {
	e := 2 * g
	return 2.0 / 3 * (1.5*math.Exp(-e/2) - math.Exp(-2*e/3) + 0.25*math.Exp(-3*e/4))
}

// differentialQuaternary is the bit error rate of differentially detected four phases
// with Gray map: Q1(a, b) - I0(ab) exp(-(a² + b²)/2)/2, a, b = sqrt(2g (1 ∓ 1/√2)).
func differentialQuaternary(g float64) float64 {
	a, b := math.Sqrt(2*g*(1-math.Sqrt2/2)), math.Sqrt(2*g*(1+math.Sqrt2/2))
	// Q1(a,b) = exp(-(a-b)²/2) Σ_{k≥0} (a/b)^k Ie_k(ab), with Ie_k = exp(-x) I_k(x).
	scaled := scaledBessel(a * b)
	sum, power := -scaled[0]/2, 1.0
	for _, v := range scaled {
		sum += power * v
		power *= a / b
	}
	return math.Exp(-(a-b)*(a-b)/2) * sum
}

// scaledBessel returns exp(-x) I_k(x) for k = 0, 1, … as far as they count, by downward
// recurrence (J. C. P. Miller), scaled so that I_0 + 2 Σ I_k = exp(x).
func scaledBessel(x float64) []float64 {
	n := 40 + int(3*math.Sqrt(40*x)) // I_k(x) has fallen below 1e-16 of I_0 there
	out := make([]float64, n+2)
	out[n] = 1e-300
	sum := 2 * out[n]
	for k := n; k > 0; k-- {
		out[k-1] = out[k+1] + 2*float64(k)/x*out[k]
		if out[k-1] > 1e200 {
			for i := k - 1; i < len(out); i++ {
				out[i] *= 1e-200
			}
			sum *= 1e-200
		}
		sum += 2 * out[k-1]
	}
	sum -= out[0]
	for k := range out {
		out[k] /= sum
	}
	return out
}
