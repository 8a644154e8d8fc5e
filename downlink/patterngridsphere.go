package downlink

import (
	"math"
	"slices"

	"slantwise/orbit/unit"
)

// Nodes and weights of the Gauss-Legendre rule of five points on [-1, 1] (Abramowitz
// and Stegun, Handbook of Mathematical Functions, 1964, table 25.4).
var (
	legendreNodes   = [5]float64{0, 0.538469310105683, -0.538469310105683, 0.906179845938664, -0.906179845938664}
	legendreWeights = [5]float64{0.568888888888889, 0.478628670499366, 0.478628670499366, 0.236926885056189, 0.236926885056189}
)

// finestCell is how wide a piece of a grid's cell is at most over which it is
// integrated or counted.
const finestCell = 15 * unit.Degree

// integrate returns the share of the power that the grid radiates: the mean of the
// gain over the sphere, nothing beyond its last angle. Within 1e-6 of a smooth
// pattern's own (TestGridRadiates).
func (g *PatternGrid) integrate() float64 {
	share := 0.0
	g.pieces(finestCell, finestCell, func(t0, t1, p0, p1 float64) {
		sum := 0.0
		for i, x := range legendreNodes {
			off := (t0+t1)/2 + x*(t1-t0)/2
			ring := 0.0
			for k, y := range legendreNodes {
				v, _ := g.at(off, (p0+p1)/2+y*(p1-p0)/2)
				ring += legendreWeights[k] * v.Ratio()
			}
			sum += legendreWeights[i] * ring * math.Sin(off)
		}
		share += sum * (t1 - t0) / 2 * (p1 - p0) / 2
	})
	return share / (4 * math.Pi)
}

// pieces cuts every cell into pieces of at most a width off and one around.
func (g *PatternGrid) pieces(off, around unit.Angle, each func(t0, t1, p0, p1 float64)) {
	cut := func(from, to float64, width unit.Angle) int {
		return max(1, int(math.Ceil((to-from)/width.Radians()-1e-9)))
	}
	for i := range len(g.Off) - 1 {
		a, b := g.Off[i].Radians(), g.Off[i+1].Radians()
		n := cut(a, b, off)
		for j := range g.Around {
			c, d := g.Around[j].Radians(), 2*math.Pi
			if j+1 < len(g.Around) {
				d = g.Around[j+1].Radians()
			}
			m := cut(c, d, around)
			for u := range n {
				for v := range m {
					each(a+(b-a)*float64(u)/float64(n), a+(b-a)*float64(u+1)/float64(n), c+(d-c)*float64(v)/float64(m), c+(d-c)*float64(v+1)/float64(m))
				}
			}
		}
	}
}

// quantiles is how many steps the curve of exceeded gains has.
const quantiles = 1000

// countExceeded returns the gain that is exceeded in a share i/quantiles of all
// directions, from pieces of half a degree off, each with its solid angle.
func (g *PatternGrid) countExceeded() []float64 {
	type piece struct{ gain, weight float64 }
	var all []piece
	total := 0.0
	g.pieces(unit.Degree/2, 4*unit.Degree, func(t0, t1, p0, p1 float64) {
		v, _ := g.at((t0+t1)/2, (p0+p1)/2)
		w := (math.Cos(t0) - math.Cos(t1)) * (p1 - p0)
		all = append(all, piece{float64(v), w})
		total += w
	})
	slices.SortFunc(all, func(a, b piece) int {
		switch {
		case a.gain > b.gain:
			return -1
		case a.gain < b.gain:
			return 1
		}
		return 0
	})
	out := make([]float64, quantiles+1)
	k, seen := 0, 0.0 // pieces before k are counted
	for i := range out {
		for k < len(all)-1 && seen+all[k].weight/2 < total*float64(i)/quantiles {
			seen += all[k].weight
			k++
		}
		out[i] = all[k].gain
	}
	return out
}

// exceededWith returns the gain reached or exceeded with probability q when every
// direction is equally likely; the grid must reach to 180°.
func (g *PatternGrid) exceededWith(q float64) unit.DB {
	g.counting.Do(func() { g.exceeded = g.countExceeded() })
	x := q * quantiles
	i := min(int(x), quantiles-1)
	w := x - float64(i)
	return unit.DB(g.exceeded[i]*(1-w) + g.exceeded[i+1]*w)
}

// bounds returns the least and the greatest gain.
func (g *PatternGrid) bounds() (least, greatest unit.DB) {
	least, greatest = g.Gain[0][0], g.Gain[0][0]
	for _, row := range g.Gain {
		least, greatest = min(least, slices.Min(row)), max(greatest, slices.Max(row))
	}
	return least, greatest
}

// Peak returns the greatest gain that the pattern is known to have in any direction.
func (p *Pattern) Peak() unit.DB {
	switch p.Kind {
	case GainTable:
		peak := p.Table[0].Gain
		for _, q := range p.Table {
			peak = max(peak, q.Gain)
		}
		return peak
	case GainGrid:
		_, greatest := p.Grid.bounds()
		return greatest
	}
	if p.BackLobe != nil {
		return max(p.PeakGain, *p.BackLobe)
	}
	return p.PeakGain
}
