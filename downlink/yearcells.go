package downlink

import (
	"math"
	"sort"

	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
)

// ContactCells sorts the time of contacts under a clear sky by elevation and C/N0, so
// that a year of them is some hundred cells. The zero value is empty.
type ContactCells struct {
	seconds float64
	cells   map[cellKey]*contactCell
}

// The width of a cell, whose mean elevation and C/N0 stand for it. A cell is under a
// margin or not as a whole, so that a margin is told to a tenth of a dB.
const (
	cellDegrees  = 0.25
	cellDecibels = 0.1
)

type cellKey struct {
	elevation, cn0 int
	usable         bool
}

// contactCell holds sums of its samples, weighted by their time.
type contactCell struct{ seconds, elevation, cn0, noise float64 }

// Add adds the samples of a contact: each stands for the time half-way to its
// neighbours. The profile must be that of a link under a clear sky.
func (c *ContactCells) Add(p *Profile) {
	if c.cells == nil {
		c.cells = map[cellKey]*contactCell{}
	}
	last := len(p.Seconds) - 1
	for i, s := range p.Seconds {
		from, to := s, s
		if i > 0 {
			from = (p.Seconds[i-1] + s) / 2
		}
		if i < last {
			to = (s + p.Seconds[i+1]) / 2
		}
		w, el, cn0 := to-from, p.ElevationDeg[i], p.CN0DBHz[i]
		if w == 0 || math.IsNaN(cn0) {
			continue // one instant, or a ray that the ground blocks
		}
		k := cellKey{int(math.Floor(el / cellDegrees)), int(math.Floor(cn0 / cellDecibels)), p.Usable[i]}
		cell := c.cells[k]
		if cell == nil {
			cell = &contactCell{}
			c.cells[k] = cell
		}
		cell.seconds += w
		cell.elevation += w * el
		cell.cn0 += w * cn0
		cell.noise += w * p.SystemNoiseK[i]
		c.seconds += w
	}
}

// ordered returns the keys in rising order: sums must not depend on a map's order.
func (c *ContactCells) ordered() []cellKey {
	keys := make([]cellKey, 0, len(c.cells))
	for k := range c.cells {
		keys = append(keys, k)
	}
	sort.Slice(keys, func(i, j int) bool {
		a, b := keys[i], keys[j]
		switch {
		case a.elevation != b.elevation:
			return a.elevation < b.elevation
		case a.cn0 != b.cn0:
			return a.cn0 < b.cn0
		}
		return !a.usable && b.usable
	})
	return keys
}

// shares returns the share of contact time of every cell with its mean elevation, and
// the cells in the same order.
func (c *ContactCells) shares() ([]propagation.ElevationShare, []meanCell) {
	var shares []propagation.ElevationShare
	var means []meanCell
	for _, k := range c.ordered() {
		x := c.cells[k]
		shares = append(shares, propagation.ElevationShare{Elevation: unit.Angle(x.elevation/x.seconds) * unit.Degree, Share: x.seconds / c.seconds})
		means = append(means, meanCell{x.cn0 / x.seconds, x.noise / x.seconds, k.usable})
	}
	return shares, means
}

// meanCell is a cell under a clear sky.
type meanCell struct {
	cn0, noise float64 // dBHz, K
	usable     bool
}
