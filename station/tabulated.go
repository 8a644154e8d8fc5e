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
