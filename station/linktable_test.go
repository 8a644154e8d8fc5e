package station

import (
	"encoding/csv"
	"os"
	"strconv"
	"testing"

	"slantwise/orbit/unit"
)

// tableRow is a row of a CSV file of figures, by column.
type tableRow map[string]string

// readTable reads a file of testdata/link; testdata/SOURCES.md says where it is from.
func readTable(t *testing.T, name string) []tableRow {
	t.Helper()
	f, err := os.Open("../testdata/link/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil || len(rows) < 2 {
		t.Fatalf("%s: %d rows, %v", name, len(rows), err)
	}
	var out []tableRow
	for _, r := range rows[1:] {
		row := tableRow{}
		for i, column := range rows[0] {
			row[column] = r[i]
		}
		out = append(out, row)
	}
	return out
}

func (r tableRow) number(t *testing.T, column string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(r[column], 64)
	if err != nil {
		t.Fatalf("column %s of %v: %v", column, r, err)
	}
	return v
}

func db(v float64) *unit.DB { d := unit.DB(v); return &d }

func kelvin(v float64) *unit.Temperature { k := unit.Temperature(v); return &k }

func angle(deg float64) *unit.Angle { a := unit.Angle(deg) * unit.Degree; return &a }
