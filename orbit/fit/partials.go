package fit

import (
	"math"
	"time"

	"gonum.org/v1/gonum/mat"

	"slantwise/orbit"
)

// probe is a set of propagations around a point of the unknowns: at the point itself and
// a step to either side in each unknown, all rounded to the digits of a two-line set (see
// onDigits). The rounding costs nothing: what was really stepped is known, and the
// partials are solved from it.
type probe struct {
	middle      *orbit.Propagation
	offset      []float64 // from the middle, as rounded, to the point
	plus, minus []*orbit.Propagation
	inverse     *mat.Dense // of the matrix of steps, a column a step
	delta       [6][unknowns]float64
}

// steps returns how far the partials step to either side for data up to so many seconds
// from the epoch: about 300 m each, the mean motion at the far end; the orbit's pole no
// farther than half the way to the Earth's, about which SGP4's lunar and solar terms turn
// with the node. share is 1, or less where steps of that length leave the theory.
func (p *parameters) steps(farthest, share float64) (steps [unknowns]float64) {
	days := math.Max(farthest, 1) / 86400
	motion := math.Min(1e-4*p.v[atMotion], 2e-4/(2*math.Pi*days))
	pole := math.Min(2e-5, math.Hypot(p.v[atP], p.v[atQ])/2)
	steps = [unknowns]float64{motion, 2e-5, 2e-5, pole, pole, 4e-5, math.Max(1e-5, 0.01*math.Abs(p.v[atDrag]))}
	for j, least := range leastSteps {
		steps[j] = math.Max(least, share*steps[j])
	}
	return steps
}

// leastSteps are some steps of the digits that sets are rounded to.
var leastSteps = [unknowns]float64{2e-7, 1e-6, 1e-6, 2e-6, 2e-6, 4e-6, 1e-8}

// newProbe prepares the propagations. active are the unknowns that partials are wanted of;
// base gives what is not unknown, the epoch first of all.
func newProbe(p parameters, active []int, base orbit.Elements, farthest, share float64) (*probe, error) {
	drag := active[len(active)-1] == atDrag
	at := func(p parameters) (*orbit.Propagation, parameters, error) {
		el := base
		p.into(&el)
		onDigits(&el)
		if !drag {
			el.BStar = p.v[atDrag]
		}
		propagation, err := orbit.NewPropagation(el)
		return propagation, withFactor(&el, p.retrograde), err
	}
	b := &probe{}
	middle, rounded, err := at(p)
	if err != nil {
		return nil, err
	}
	b.middle = middle
	away := p.minus(&rounded)
	steps := p.steps(farthest, share)
	moved := mat.NewDense(len(active), len(active), nil)
	for column, j := range active {
		b.offset = append(b.offset, away[j])
		up, down := p, p
		up.v[j] += steps[j]
		down.v[j] -= steps[j]
		plus, upRounded, err := at(up)
		if err != nil {
			return nil, err
		}
		minus, downRounded, err := at(down)
		if err != nil {
			return nil, err
		}
		b.plus, b.minus = append(b.plus, plus), append(b.minus, minus)
		d := upRounded.minus(&downRounded)
		for row, i := range active {
			moved.Set(row, column, d[i])
		}
	}
	b.inverse = &mat.Dense{}
	if err := b.inverse.Inverse(moved); err != nil {
		return nil, err
	}
	return b, nil
}

// at returns the state at the point, and fills the partials: a row a component (m, m/s),
// a column an active unknown.
func (b *probe) at(t time.Time, partials *[6][unknowns]float64) (state [6]float64, err error) {
	state, err = components(b.middle, t)
	if err != nil {
		return state, err
	}
	m := len(b.plus)
	for k := range m {
		up, err := components(b.plus[k], t)
		if err != nil {
			return state, err
		}
		down, err := components(b.minus[k], t)
		if err != nil {
			return state, err
		}
		for i := range 6 {
			b.delta[i][k] = up[i] - down[i]
		}
	}
	inverse := b.inverse.RawMatrix()
	for i := range 6 {
		for j := range m {
			sum := 0.0
			for k := range m {
				sum += b.delta[i][k] * inverse.Data[k*inverse.Stride+j]
			}
			partials[i][j] = sum
			state[i] += sum * b.offset[j]
		}
	}
	return state, nil
}

func components(p *orbit.Propagation, t time.Time) (x [6]float64, err error) {
	r, v, err := p.At(t)
	return [6]float64{r.X, r.Y, r.Z, v.X, v.Y, v.Z}, err
}
