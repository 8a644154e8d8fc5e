package passvolume

import (
	"cmp"
	"math"
	"slices"
)

// Atom is a volume with its probability.
type Atom struct{ Bytes, Probability float64 }

// Distribution is volumes, rising, each with its probability; together 1.
type Distribution []Atom

// Result is the volume of a pass.
type Result struct {
	ClearSkyBytes float64      // with no attenuation at all
	Volumes       Distribution // by the statistics; in clear sky alone the one volume
	// Uncovered is the share of the time below the least exceedance, in which nothing
	// counts; Held the share above the greatest, in which its attenuation is held.
	Uncovered, Held float64
}

// cells is into how many parts of equal ratio the time between two exceedances is cut.
const cells = 16

// Distribute returns the distribution of a pass's volume. Between exceedances the
// attenuation is straight over the logarithm of the exceedance.
func Distribute(p *Pass) (*Result, error) {
	if err := p.Check(); err != nil {
		return nil, err
	}
	r := &Result{ClearSkyBytes: p.bytes(nil)}
	q := p.ExceedancePercent
	if len(q) == 0 {
		r.Volumes, r.Held = Distribution{{r.ClearSkyBytes, 1}}, 1
		return r, nil
	}
	last := len(q) - 1
	r.Uncovered, r.Held = q[0]/100, 1-q[last]/100
	volumes := Distribution{{0, r.Uncovered}, {p.bytes(p.AttenuationDB[last]), r.Held}}
	between := make([]float64, len(p.Seconds))
	for i := 1; i < len(q); i++ {
		ratio := math.Pow(q[i]/q[i-1], 1.0/cells)
		low := q[i-1]
		for k := range cells {
			high := low * ratio
			if k == cells-1 {
				high = q[i]
			}
			w := (float64(k) + 0.5) / cells
			for j := range between {
				between[j] = p.AttenuationDB[i-1][j]*(1-w) + p.AttenuationDB[i][j]*w
			}
			volumes = append(volumes, Atom{p.bytes(between), (high - low) / 100})
			low = high
		}
	}
	r.Volumes = tidy(volumes)
	return r, nil
}

// tidy sorts atoms, joins equal volumes and drops those without probability.
func tidy(d Distribution) Distribution {
	slices.SortFunc(d, func(a, b Atom) int { return cmp.Compare(a.Bytes, b.Bytes) })
	out := d[:0]
	for _, a := range d {
		switch n := len(out); {
		case !(a.Probability > 0):
		case n > 0 && out[n-1].Bytes == a.Bytes:
			out[n-1].Probability += a.Probability
		default:
			out = append(out, a)
		}
	}
	return out
}

// Mean returns the mean volume.
func (d Distribution) Mean() float64 {
	sum := 0.0
	for _, a := range d {
		sum += a.Bytes * a.Probability
	}
	return sum
}

// Sigma returns the standard deviation.
func (d Distribution) Sigma() float64 {
	mean, sum := d.Mean(), 0.0
	for _, a := range d {
		sum += (a.Bytes - mean) * (a.Bytes - mean) * a.Probability
	}
	return math.Sqrt(sum)
}

// ReachedWith returns the greatest volume that is reached with at least a probability
// in (0, 1].
func (d Distribution) ReachedWith(probability float64) float64 {
	sum := 0.0
	for i := len(d) - 1; i >= 0; i-- {
		sum += d[i].Probability
		if sum >= probability-1e-12 {
			return d[i].Bytes
		}
	}
	return d[0].Bytes // rounding left the sum short
}
