package passvolume

import (
	"math"
)

// Dependent returns the distribution of the sum when one weather holds for all passes:
// each has the volume of the same probability. No distributions sum to 0.
func Dependent(of []Distribution) Distribution {
	at := make([]int, len(of))       // the atom of each
	left := make([]float64, len(of)) // of its probability
	for i, d := range of {
		left[i] = d[0].Probability
	}
	var out Distribution
	for total := 0.0; total < 1-1e-12; {
		step, bytes := 1-total, 0.0
		for i, d := range of {
			bytes += d[at[i]].Bytes
			step = min(step, left[i])
		}
		out = append(out, Atom{bytes, step})
		total += step
		for i, d := range of {
			left[i] -= step
			for left[i] <= 1e-15 && at[i] < len(d)-1 {
				at[i]++
				left[i] += d[at[i]].Probability
			}
			if at[i] == len(d)-1 && left[i] <= 1e-15 {
				left[i] = 1 // rounding left the last one short
			}
		}
	}
	return tidy(out)
}

// bins is how finely Independent counts: the greatest sum is so many bins.
const bins = 4096

// Independent returns the distribution of the sum of independent volumes, on a grid of
// 1/4096 of the greatest sum. An atom between two points of the grid is shared out so
// that the mean stays exact; the variance grows by at most a quarter of a squared
// step for each pass.
func Independent(of []Distribution) Distribution {
	most := 0.0
	for _, d := range of {
		most += d[len(d)-1].Bytes
	}
	if most == 0 {
		return Distribution{{0, 1}}
	}
	step := most / bins
	// Each volume may be shared up to the next point.
	sum := make([]float64, bins+2+len(of))
	next := make([]float64, bins+2+len(of))
	sum[0] = 1
	used := 1 // so many points of sum hold anything
	for _, d := range of {
		clear(next)
		shares := onGrid(d, step)
		for _, s := range shares {
			for j, v := range sum[:used] {
				next[j+s.at] += v * s.probability
			}
		}
		used += shares[len(shares)-1].at
		sum, next = next, sum
	}
	out := make(Distribution, 0, used)
	for i, v := range sum[:used] {
		out = append(out, Atom{float64(i) * step, v})
	}
	return tidy(out)
}

// share is a probability at a point of the grid.
type share struct {
	at          int
	probability float64
}

// onGrid shares atoms out to the points of a grid, in their order, each point once.
func onGrid(d Distribution, step float64) []share {
	var out []share
	add := func(at int, probability float64) {
		if n := len(out); n > 0 && out[n-1].at == at {
			out[n-1].probability += probability
		} else if n > 1 && out[n-2].at == at {
			out[n-2].probability += probability
		} else {
			out = append(out, share{at, probability})
		}
	}
	for _, a := range d {
		whole, part := math.Modf(a.Bytes / step)
		add(int(whole), a.Probability*(1-part))
		if part > 0 {
			add(int(whole)+1, a.Probability*part)
		}
	}
	return out
}
