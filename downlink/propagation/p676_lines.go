package propagation

import (
	"embed"
	"encoding/csv"
	"fmt"
	"strconv"
	"sync"
)

// The spectroscopic lines of oxygen and of water vapour: frequency in GHz and six
// coefficients each. Source: Rec. ITU-R P.676-13 (08/2022), Annex 1, Tables 1 and 2.
//
//go:embed data/p676_13_oxygen_lines.csv data/p676_13_water_vapour_lines.csv
var lineTables embed.FS

// line is a row of one of the tables; a[0] to a[5] are a1 to a6 or b1 to b6.
type line struct {
	fGHz float64
	a    [6]float64
}

var (
	oxygenLines = sync.OnceValue(func() []line { return readLines("data/p676_13_oxygen_lines.csv", 44) })
	vapourLines = sync.OnceValue(func() []line { return readLines("data/p676_13_water_vapour_lines.csv", 35) })
)

// readLines reads an embedded table. A table that does not read is a broken build,
// so it panics.
func readLines(name string, rows int) []line {
	f, err := lineTables.Open(name)
	if err != nil {
		panic(err)
	}
	records, err := csv.NewReader(f).ReadAll()
	if err != nil || len(records) != rows+1 {
		panic(fmt.Sprintf("%s: %d rows read, want %d: %v", name, len(records)-1, rows, err))
	}
	lines := make([]line, rows)
	for i, record := range records[1:] {
		var v [7]float64
		for k := range v {
			if v[k], err = strconv.ParseFloat(record[k], 64); err != nil {
				panic(fmt.Sprintf("%s: row %d: %v", name, i+1, err))
			}
		}
		lines[i] = line{v[0], [6]float64(v[1:])}
	}
	return lines
}
