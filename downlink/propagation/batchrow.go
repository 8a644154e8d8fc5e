package propagation

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"

	"slantwise/orbit/unit"
)

// CellError says what is wrong with a row of a batch.
type CellError struct {
	Line   int    // of the file, 1 is the header
	Column string // empty where no single column is at fault
	Err    error
}

// Error returns "line 7: column frequency_ghz: …".
func (e *CellError) Error() string {
	if e.Column == "" {
		return fmt.Sprintf("line %d: %v", e.Line, e.Err)
	}
	return fmt.Sprintf("line %d: column %s: %v", e.Line, e.Column, e.Err)
}

// Unwrap returns the cause.
func (e *CellError) Unwrap() error { return e.Err }

// batchRow reads the cells of one row; the first bad one is kept.
type batchRow struct {
	b     *Batch
	line  int
	cells []string
	bad   *CellError
	notes notes
}

// Row evaluates a row of the table. line is its number in the file. The results have
// 12 significant digits. Errors are *CellError.
func (b *Batch) Row(line int, cells []string) ([]string, error) {
	if len(cells) != len(b.header) {
		return nil, &CellError{Line: line, Err: fmt.Errorf("%d cells where the header has %d columns", len(cells), len(b.header))}
	}
	r := &batchRow{b: b, line: line, cells: cells}
	for _, c := range b.needed {
		r.number(c)
	}
	if r.bad != nil {
		return nil, r.bad
	}
	out := make([]float64, len(b.model.results))
	err := b.model.evaluate(b, r, out)
	if r.bad != nil {
		return nil, r.bad
	}
	if err != nil {
		return nil, r.fault(err)
	}
	b.warnings.add(line, r.notes)
	results := make([]string, len(out))
	for i, v := range out {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return nil, &CellError{Line: line, Err: fmt.Errorf("%s: the formula has no finite value for this row", b.model.results[i])}
		}
		results[i] = strconv.FormatFloat(v, 'g', 12, 64)
	}
	return results, nil
}

// number reads a cell of a column that the table has.
func (r *batchRow) number(column string) float64 {
	text := strings.TrimSpace(r.cells[r.b.column[column]])
	v, err := strconv.ParseFloat(text, 64)
	switch {
	case text == "":
		r.fail(column, errors.New("the cell is empty; give a number"))
	case err != nil, math.IsNaN(v), math.IsInf(v, 0), strings.ContainsAny(text, "_xX"): // Go's own spellings are no decimal numbers
		r.fail(column, fmt.Errorf("%q is not a finite number; give one with a decimal point", text))
	}
	return v
}

func (r *batchRow) fail(column string, err error) {
	if r.bad == nil {
		r.bad = &CellError{r.line, column, err}
	}
}

// fault turns a model's error into a CellError, with the needed column that holds the
// refused value; among several of that value the one named most like the quantity.
func (r *batchRow) fault(err error) error {
	var cell *CellError
	if errors.As(err, &cell) {
		return cell
	}
	var refused *unit.RangeError
	best, column := -1, ""
	if errors.As(err, &refused) {
		for _, c := range r.b.needed {
			if likeness := alike(c, refused.Quantity); r.number(c) == refused.Value && likeness > best {
				best, column = likeness, c
			}
		}
	}
	return &CellError{r.line, column, err}
}

// alike counts the words of a quantity whose beginnings stand in a column's name.
func alike(column, quantity string) (n int) {
	for _, word := range strings.Fields(quantity) {
		if strings.Contains(column, word[:min(len(word), 6)]) {
			n++
		}
	}
	return n
}
