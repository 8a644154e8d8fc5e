package measured

import (
	"math"
)

// curve is a model that is not linear in its parameters: value and slopes by the parameters at row i.
type curve func(i int, b []float64, slopes []float64) float64

// mostTurns is how often a curved model is made straight anew.
const mostTurns = 12

// solveCurved fits y = f(b) + noise by straightening f around the last b, from zero. linear
// says that the slopes do not hang on b, so that once is enough.
func (d *series) solveCurved(f curve, linear bool, names []Parameter) (*Fit, error) {
	k := len(names)
	b := make([]float64, k)
	straight := &series{t: d.t, y: make([]float64, len(d.y)), x: make([][]float64, len(d.y)), independent: d.independent}
	for turn := 0; ; turn++ {
		room := make([]float64, k*len(d.y))
		for i := range d.y {
			slopes := room[i*k : (i+1)*k]
			straight.y[i] = d.y[i] - f(i, b, slopes)
			for j := range k {
				straight.y[i] += slopes[j] * b[j]
			}
			straight.x[i] = slopes
		}
		fit, err := straight.search(names)
		if err != nil {
			return nil, err
		}
		moved := 0.0
		for j, p := range fit.Parameters {
			moved = max(moved, math.Abs(p.Value-b[j])/p.Sigma)
			b[j] = p.Value
		}
		if linear || turn == mostTurns || moved < 0.01 {
			fit.advise()
			return fit, nil
		}
	}
}

// rows returns the design at parameters of zero.
func (d *series) rows(f curve, k int) [][]float64 {
	out := make([][]float64, len(d.y))
	at := make([]float64, k)
	for i := range out {
		out[i] = make([]float64, k)
		f(i, at, out[i])
	}
	return out
}
