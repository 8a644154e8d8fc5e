package station

import (
	"fmt"
	"math"
	"slices"

	"slantwise/orbit/unit"
)

// Tabulated is a quantity given as one figure, or as a table over elevation, or
// over elevation and frequency: linear between its nodes, held at its ends (Span
// tells where they are, so that a caller can say it). It is immutable.
type Tabulated struct {
	elevations  []float64   // deg, rising; at least one
	frequencies []float64   // MHz, rising; at least one
	values      [][]float64 // by frequency, then by elevation
	flat        bool        // one figure for every elevation and frequency
}

// Constant returns the quantity that is v at every elevation and frequency.
func Constant(v float64) *Tabulated {
	return &Tabulated{elevations: []float64{0}, frequencies: []float64{0}, values: [][]float64{{v}}, flat: true}
}

// TabulateElevation returns the quantity given by rows of elevation in deg and
// value. Elevations lie in [-90, 90] and rise strictly; the error names the row.
func TabulateElevation(rows [][2]float64) (*Tabulated, error) {
	grid := make([][3]float64, len(rows))
	for i, r := range rows {
		grid[i] = [3]float64{r[0], 0, r[1]}
		if i > 0 && !(r[0] > rows[i-1][0]) {
			return nil, fmt.Errorf("row %d: elevation %g deg does not rise over %g deg; sort the rows by elevation, each once", i+1, r[0], rows[i-1][0])
		}
	}
	return TabulateGrid(grid)
}

// TabulateGrid returns the quantity given by rows of elevation in deg, frequency in
// MHz and value, in any order: every elevation with every frequency, each once.
func TabulateGrid(rows [][3]float64) (*Tabulated, error) {
	if len(rows) == 0 {
		return nil, fmt.Errorf("the table has no rows; give at least one")
	}
	t := &Tabulated{}
	for i, r := range rows {
		for _, v := range r {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				return nil, fmt.Errorf("row %d: %v holds a value that is not a finite number", i+1, r)
			}
		}
		if !(r[0] >= -90 && r[0] <= 90) {
			return nil, fmt.Errorf("row %d: %w", i+1, &unit.RangeError{Quantity: "elevation", Value: r[0], Unit: "deg", Allowed: "-90 to 90 deg"})
		}
		t.elevations = append(t.elevations, r[0])
		t.frequencies = append(t.frequencies, r[1])
	}
	t.elevations, t.frequencies = sortedOnce(t.elevations), sortedOnce(t.frequencies)
	t.values = make([][]float64, len(t.frequencies))
	for i := range t.values {
		t.values[i] = slices.Repeat([]float64{math.NaN()}, len(t.elevations))
	}
	for i, r := range rows {
		e, _ := slices.BinarySearch(t.elevations, r[0])
		f, _ := slices.BinarySearch(t.frequencies, r[1])
		if !math.IsNaN(t.values[f][e]) {
			return nil, fmt.Errorf("row %d: elevation %g deg with frequency %g MHz stands twice", i+1, r[0], r[1])
		}
		t.values[f][e] = r[2]
	}
	for f := range t.values {
		for e, v := range t.values[f] {
			if math.IsNaN(v) {
				return nil, fmt.Errorf("no row for elevation %g deg with frequency %g MHz; give every elevation with every frequency", t.elevations[e], t.frequencies[f])
			}
		}
	}
	return t, nil
}

func sortedOnce(v []float64) []float64 {
	slices.Sort(v)
	return slices.Compact(v)
}

// AtFrequency returns the quantity over elevation alone, at frequency f.
func (t *Tabulated) AtFrequency(f unit.Frequency) *Tabulated {
	if t.flat || len(t.frequencies) == 1 {
		return t
	}
	i, j, w := bracket(t.frequencies, f.Megahertz())
	row := make([]float64, len(t.elevations))
	for k := range row {
		row[k] = mix(t.values[i][k], t.values[j][k], w)
	}
	return &Tabulated{elevations: t.elevations, frequencies: []float64{f.Megahertz()}, values: [][]float64{row}}
}

// Value returns the quantity at an elevation, of the first frequency of a table that
// holds several (AtFrequency picks another).
func (t *Tabulated) Value(elevation unit.Angle) float64 {
	row := t.values[0]
	if len(row) == 1 {
		return row[0]
	}
	i, j, w := bracket(t.elevations, elevation.Degrees())
	return mix(row[i], row[j], w)
}

// IsConstant tells whether the quantity is one figure for every elevation and
// frequency.
func (t *Tabulated) IsConstant() bool { return t.flat }

// Span returns the first and the last elevation of the table.
func (t *Tabulated) Span() (low, high unit.Angle) {
	n := len(t.elevations)
	return unit.Angle(t.elevations[0]) * unit.Degree, unit.Angle(t.elevations[n-1]) * unit.Degree
}

// HoldsFrequency tells whether f lies within the table, which a table without
// frequencies always does.
func (t *Tabulated) HoldsFrequency(f unit.Frequency) bool {
	n := len(t.frequencies)
	if t.flat || n == 1 && t.frequencies[0] == 0 {
		return true
	}
	return f.Megahertz() >= t.frequencies[0] && f.Megahertz() <= t.frequencies[n-1]
}

// bounds returns the least and the greatest value of the table.
func (t *Tabulated) bounds() (least, greatest float64) {
	least, greatest = math.Inf(1), math.Inf(-1)
	for _, row := range t.values {
		least, greatest = min(least, slices.Min(row)), max(greatest, slices.Max(row))
	}
	return least, greatest
}

// bracket finds the nodes i and j around x and how far x lies from i to j; beyond
// the ends it stays on the end.
func bracket(nodes []float64, x float64) (i, j int, w float64) {
	last := len(nodes) - 1
	switch {
	case x <= nodes[0]:
		return 0, 0, 0
	case x >= nodes[last]:
		return last, last, 0
	}
	for nodes[j] <= x { // tables are short: a scan beats a search
		j++
	}
	i = j - 1
	return i, j, (x - nodes[i]) / (nodes[j] - nodes[i])
}

// mix returns a at w = 0 and b at w = 1, exactly.
func mix(a, b, w float64) float64 { return a*(1-w) + b*w }
