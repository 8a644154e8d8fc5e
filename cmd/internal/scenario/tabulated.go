package scenario

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"slantwise/cmd/internal/scenario/tree"
	"slantwise/station"
)

// tabulated reads one figure, or a table of [elevation, value] or of [elevation,
// frequency, value]; nil where the key is not there or wrong.
func (o object) tabulated(key string, in span) *station.Tabulated {
	n := o.get(key)
	if n == nil {
		return nil
	}
	if n.Kind != tree.List {
		if v, ok := o.numberAt(n, key, in); ok {
			return station.Constant(v)
		}
		return nil
	}
	of := fmt.Sprintf("[elevation in deg, %s] or [elevation in deg, frequency in MHz, %s]", in.unit, in.unit)
	before := o.r.faults.count()
	var flat [][2]float64
	var grid [][3]float64
	for i, row := range o.items(key, of, maxRows) {
		name := fmt.Sprintf("%s[%d]", key, i)
		if row.Kind != tree.List || len(row.Items) < 2 || len(row.Items) > 3 {
			o.fault(row, name, "%s is not allowed; it must be %s", "", showRow(row), of)
			continue
		}
		last := len(row.Items) - 1
		elevation, _ := o.numberAt(row.Items[0], name+"[0]", span{low: -90, high: 90, unit: "deg"})
		value, _ := o.numberAt(row.Items[last], fmt.Sprintf("%s[%d]", name, last), in)
		if last == 1 {
			flat = append(flat, [2]float64{elevation, value})
			continue
		}
		mhz, _ := o.numberAt(row.Items[1], name+"[1]", frequencyMHz)
		grid = append(grid, [3]float64{elevation, mhz, value})
	}
	if o.r.faults.count() > before {
		return nil
	}
	return o.makeTable(n, key, flat, grid)
}

func (o object) makeTable(n *tree.Node, key string, flat [][2]float64, grid [][3]float64) *station.Tabulated {
	if len(flat) > 0 && len(grid) > 0 {
		o.fault(n, key, "some rows have a frequency and some have none", "give it in all rows or in none")
		return nil
	}
	make := func() (*station.Tabulated, error) { return station.TabulateElevation(flat) }
	if len(grid) > 0 {
		make = func() (*station.Tabulated, error) { return station.TabulateGrid(grid) }
	}
	t, err := make()
	o.addAll(n, key, err)
	return t
}

// parsePlain returns the value of a text that plainNumber matches; too large a one
// is infinite.
func parsePlain(s string) float64 {
	v, err := strconv.ParseFloat(strings.ReplaceAll(s, "_", ""), 64)
	if err != nil && !math.IsInf(v, 0) {
		return math.NaN()
	}
	return v
}

// roundTo takes off what a subtraction adds beyond the digits that were written.
func roundTo(v, scale float64) float64 { return math.Round(v*scale) / scale }
