package planfiles

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"
	"time"

	"slantwise/cmd/internal/nearest"
)

// mostBytes is the largest file that is read.
const mostBytes = 64 << 20

// mostFaults is how many faults of a file are told.
const mostFaults = 50

// Clock reads an instant as it stands in a file.
type Clock func(string) (time.Time, error)

// table reads a CSV file with a header by the names of its columns.
type table struct {
	file    string
	clock   Clock
	columns map[string]int
	header  []string
	faults  []error
}

// row is a row of a table.
type row struct {
	t     *table
	line  int
	cells []string
}

// fault adds a fault of the file; those beyond mostFaults are dropped.
func (t *table) fault(line int, format string, args ...any) {
	if len(t.faults) < mostFaults {
		t.faults = append(t.faults, fmt.Errorf("%s: line %d: %s", t.file, line, fmt.Sprintf(format, args...)))
	}
}

// readTable reads a file whose columns are known ones, each at most once, among them
// those that must be there. Blank lines do not count.
func readTable(file string, r io.Reader, clock Clock, must, may []string) (*table, []row, error) {
	text, err := readAll(file, r)
	if err != nil {
		return nil, nil, err
	}
	t := &table{file: file, clock: clock, columns: map[string]int{}}
	c := csv.NewReader(bytes.NewReader(bytes.TrimPrefix(text, []byte("\uFEFF"))))
	c.FieldsPerRecord = -1
	t.header, err = c.Read()
	if errors.Is(err, io.EOF) {
		return nil, nil, fmt.Errorf("%s: line 1: the file is empty; its first line must name the columns %s", file, strings.Join(must, ","))
	}
	if err != nil {
		return nil, nil, fmt.Errorf("%s: %w", file, err)
	}
	t.head(must, may)
	if len(t.faults) > 0 {
		return nil, nil, errors.Join(t.faults...)
	}
	rows, err := t.rows(c)
	return t, rows, err
}

// head finds the columns.
func (t *table) head(must, may []string) {
	known := append(slices.Clone(must), may...)
	for i, name := range t.header {
		name = strings.TrimSpace(name)
		if _, twice := t.columns[name]; twice {
			t.fault(1, "column %q stands twice; remove one", name)
			continue
		}
		if !slices.Contains(known, name) {
			next := "it must be one of " + strings.Join(known, ", ")
			if near := nearest.Names(name, known, 1); len(near) > 0 {
				next = fmt.Sprintf("did you mean %q?", near[0])
			}
			t.fault(1, "column %q is not known; %s", name, next)
			continue
		}
		t.columns[name] = i
	}
	for _, name := range must {
		if _, ok := t.columns[name]; !ok {
			t.fault(1, "column %q is missing; the columns are %s", name, strings.Join(must, ","))
		}
	}
}

// rows reads what follows the header.
func (t *table) rows(c *csv.Reader) ([]row, error) {
	var out []row
	for {
		cells, err := c.Read()
		if errors.Is(err, io.EOF) {
			return out, nil
		}
		if err != nil {
			return nil, fmt.Errorf("%s: %w", t.file, err)
		}
		line, _ := c.FieldPos(0)
		if len(cells) != len(t.header) {
			t.fault(line, "the row has %d cells and the header %d; give each column its cell", len(cells), len(t.header))
			continue
		}
		out = append(out, row{t, line, cells})
	}
}

// err returns all faults joined, or nil.
func (t *table) err() error { return errors.Join(t.faults...) }

// place is where a row stands, for errors.
func (r row) place() string { return fmt.Sprintf("%s: line %d", r.t.file, r.line) }

// text returns a cell, empty where there is no such column.
func (r row) text(column string) string {
	if i, ok := r.t.columns[column]; ok {
		return strings.TrimSpace(r.cells[i])
	}
	return ""
}

// instant reads an instant that must be there.
func (r row) instant(column string) time.Time {
	s := r.text(column)
	t, err := r.t.clock(s)
	if err != nil {
		r.t.fault(r.line, "%s: %v", column, err)
	}
	return t
}

// instantOrZero reads an instant that may be left out.
func (r row) instantOrZero(column string) time.Time {
	if r.text(column) == "" {
		return time.Time{}
	}
	return r.instant(column)
}

// number reads a finite number that must be there.
func (r row) number(column string) float64 {
	s := r.text(column)
	v, err := strconv.ParseFloat(s, 64)
	if err != nil || math.IsInf(v, 0) || math.IsNaN(v) || strings.ContainsAny(s, "xXpP_") {
		r.t.fault(r.line, "%s: %q is not allowed; it must be a number", column, s)
		return 0
	}
	return v
}

// numberOrNaN reads a number that may be left out.
func (r row) numberOrNaN(column string) float64 {
	if r.text(column) == "" {
		return math.NaN()
	}
	return r.number(column)
}

// readAll reads a file that is not larger than any of its kind.
func readAll(file string, r io.Reader) ([]byte, error) {
	text, err := io.ReadAll(io.LimitReader(r, mostBytes+1))
	if err != nil {
		return nil, fmt.Errorf("%s: it cannot be read: %w", file, err)
	}
	if len(text) > mostBytes {
		return nil, fmt.Errorf("%s: the file is larger than %d MB; split it", file, mostBytes>>20)
	}
	return text, nil
}
