package propagation

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"testing"
)

// sheet is a file of published figures below testdata, whose SOURCES.md says where
// they come from.
type sheet struct {
	t    *testing.T
	name string
	head map[string]int
	rows [][]string
}

func openSheet(t *testing.T, name string) *sheet {
	t.Helper()
	f, err := os.Open(filepath.Join("testdata", name))
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = f.Close() }()
	records, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return newSheet(t, name, records)
}

func newSheet(t *testing.T, name string, records [][]string) *sheet {
	s := &sheet{t: t, name: name, head: map[string]int{}, rows: records[1:]}
	for i, h := range records[0] {
		s.head[h] = i
	}
	return s
}

// sheetRow is a row with its line number in the file.
type sheetRow struct {
	s     *sheet
	line  int
	cells []string
}

func (s *sheet) each(do func(r sheetRow)) {
	s.t.Helper()
	if len(s.rows) == 0 {
		s.t.Fatalf("%s: no rows", s.name)
	}
	for i, cells := range s.rows {
		do(sheetRow{s, i + 2, cells})
	}
}

func (r sheetRow) text(column string) string {
	r.s.t.Helper()
	i, ok := r.s.head[column]
	if !ok {
		r.s.t.Fatalf("%s: no column %s", r.s.name, column)
	}
	return r.cells[i]
}

func (r sheetRow) number(column string) float64 {
	r.s.t.Helper()
	v, err := strconv.ParseFloat(r.text(column), 64)
	if err != nil {
		r.s.t.Fatalf("%s: line %d: %s: %v", r.s.name, r.line, column, err)
	}
	return v
}

// worst keeps the largest differences of a sheet and fails on those that exceed both
// tolerances: relative to the published figure, and absolute for figures so small
// that their printed digits end first.
type worst struct {
	rel, abs       float64
	maxRel, maxAbs float64
}

func (w *worst) check(r sheetRow, what string, got, want float64) {
	r.s.t.Helper()
	d := math.Abs(got - want)
	rel := d / math.Abs(want)
	if want == 0 {
		rel = 0
	}
	w.maxAbs = math.Max(w.maxAbs, d)
	if d > w.abs { // below the last printed digit a relative difference says nothing
		w.maxRel = math.Max(w.maxRel, rel)
	}
	if !(d <= w.abs || rel <= w.rel) {
		r.s.t.Errorf("%s: line %d: %s: got %.12g, want %.12g, difference %.3g, relative %.3g over %g",
			r.s.name, r.line, what, got, want, d, rel, w.rel)
	}
}

func (w *worst) report(t *testing.T, name string) {
	t.Helper()
	t.Logf("%s: worst difference %.2g, relative %.2g", name, w.maxAbs, w.maxRel)
}
