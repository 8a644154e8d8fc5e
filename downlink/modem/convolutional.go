package modem

import (
	"fmt"
	"math"
	"strconv"
)

// unionBound bounds the bit error rate of a convolutional code with soft decisions that
// are not quantized over BPSK: Σ B_d Q(sqrt(2 d R g)) / P over the distances d, with
// B_d the wrong information bits of all paths of a puncturing period of P bits (A. J.
// Viterbi, 1971). It lies on the high side, the less so the lower the error rate.
type unionBound struct {
	rate, period float64
	distances    []float64
	bitErrors    []float64
}

func (u *unionBound) bitErrorRate(g float64) float64 {
	sum := 0.0
	for i, d := range u.distances {
		sum += u.bitErrors[i] * tail(math.Sqrt(2*d*u.rate*g))
	}
	return sum / u.period
}

// readSpectra returns the bound of each code rate, by its fraction.
func readSpectra(text string) (map[string]*unionBound, error) {
	rows, err := readTable(text, "rate,period,distance,bit_errors_per_period")
	if err != nil {
		return nil, err
	}
	out := map[string]*unionBound{}
	for i, r := range rows {
		var v [3]float64
		for j := range v {
			if v[j], err = strconv.ParseFloat(r[j+1], 64); err != nil || !(v[j] > 0 && v[j] <= 1e12) {
				return nil, fmt.Errorf("row %d (%s): %q is no number above 0", i+3, r[0], r[j+1])
			}
		}
		u := out[r[0]]
		if u == nil {
			u = &unionBound{period: v[0]}
			if u.rate, err = fraction(r[0]); err != nil || !(u.rate > 0 && u.rate <= 1) {
				return nil, fmt.Errorf("row %d: the code rate %q is no fraction above 0 and at most 1", i+3, r[0])
			}
			out[r[0]] = u
		}
		u.distances = append(u.distances, v[1])
		u.bitErrors = append(u.bitErrors, v[2])
	}
	return out, nil
}
