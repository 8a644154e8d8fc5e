package measured

import (
	"errors"
	"fmt"
	"math"
)

// addedNoiseName names the noise temperature that a receiving system has over the predicted one.
const addedNoiseName = "added noise temperature"

// addedNoise is the noise temperature ΔT over the predicted T: 10 log10(1 + ΔT/T) dB of
// noise, with sign -1 for what it does to a ratio of carrier to noise.
func addedNoise(sign float64) levelTerm {
	return levelTerm{Parameter: Parameter{Name: addedNoiseName, Unit: "K"}, curved: true, at: func(p *Point, b float64) (float64, float64) {
		r := max(1+b/p.NoiseK, 0.02)
		return sign * 10 * math.Log10(r), sign * 10 / math.Ln10 / (p.NoiseK * r)
	}}
}

// knowsNoise tells whether the prediction has a noise temperature wherever it has a level.
func knowsNoise(points []Point) bool {
	some := false
	for i := range points {
		p := &points[i]
		if !math.IsNaN(p.CN0DBHz) && math.IsNaN(p.NoiseK) {
			return false
		}
		some = some || !math.IsNaN(p.NoiseK)
	}
	return some
}

// errNoPair says that the log does not hold what tells noise from level.
var errNoPair = errors.New("noise cannot be told from level without received power and a ratio of carrier to noise in the same samples, and a predicted noise")

// FitNoise fits the noise of the receiving system from what a log holds in pairs: received
// power (or relative power) and C/N0 (or Eb/N0). Their difference is free of the transmitter, the path and
// what the antenna's aim costs. Of relative power the unknown scale is a parameter, so that
// only the change of the noise with elevation tells. Where the prediction has a measured
// G/T in place of noise, the result is in dB.
func FitNoise(points []Point) (*Fit, error) {
	power, ratio := pairOf(points, PowerDBm, RelativePowerDB), pairOf(points, CN0DBHz, EbN0DB)
	if power == noQuantity || ratio == noQuantity || !knowsNoise(points) {
		return nil, errNoPair
	}
	m := &levelModel{o: LevelOptions{Quantity: ratio}, points: points, known: func(*Point) float64 { return 0 }}
	m.mark()
	for i := range points {
		p := &points[i]
		y := p.Residual(power) - p.Residual(ratio)
		if p.State != Used || math.IsNaN(y) {
			continue
		}
		m.data.t, m.data.y, m.index = append(m.data.t, p.At.Sub(points[0].At).Seconds()), append(m.data.y, y), append(m.index, i)
	}
	if len(m.data.y) < least(1) {
		return nil, errNoPair
	}
	if power == RelativePowerDB {
		m.terms = append(m.terms, linearTerm("offset of the receiver's scale", "dB", func(*Point) float64 { return 1 }))
	}
	m.terms = append(m.terms, addedNoise(1))
	stay, told := leaveOut(m.data.rows(m.at, len(m.terms)), m.names())
	m.keep(stay)
	f, err := m.data.solveCurved(m.at, m.linear(), m.names())
	if err != nil {
		return nil, fmt.Errorf("fit of the noise: %w", err)
	}
	f.mark(points, m.index)
	f.Advice = append(f.Advice, told...)
	f.Advice = append(f.Advice, fmt.Sprintf("from %s less %s: the transmitter, the path and the aim are not in it, a wrong scale of the power meter is", power, ratio))
	return f, nil
}

// pairOf returns the first of the quantities that the points hold, noQuantity for none.
func pairOf(points []Point, quantities ...Quantity) Quantity {
	for _, q := range quantities {
		for i := range points {
			if !math.IsNaN(points[i].Get(q)) {
				return q
			}
		}
	}
	return noQuantity
}
