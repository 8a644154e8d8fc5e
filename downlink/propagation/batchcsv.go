package propagation

import (
	"bufio"
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
)

// BatchReport tells how a batch went.
type BatchReport struct {
	Rows     int          // evaluated
	Bad      []*CellError // rows without a result
	Warnings []Note       // beyond a stated range, by line
}

// RunBatch reads a table in CSV and writes it with the model's results behind. A bad
// row stops it before anything is written, with all bad rows in the error; with
// keepGoing the row's results stay empty and the bad rows are in the report alone.
func RunBatch(o BatchOptions, in io.Reader, out io.Writer, keepGoing bool) (BatchReport, error) {
	var report BatchReport
	reader := csv.NewReader(withoutMark(in))
	reader.FieldsPerRecord = -1 // Row counts, and says which line
	header, err := reader.Read()
	if errors.Is(err, io.EOF) {
		return report, errors.New("the table is empty; give a header line and rows")
	}
	if err != nil {
		return report, fmt.Errorf("header: %w", err)
	}
	b, err := NewBatch(o, header)
	if err != nil {
		return report, err
	}
	var held bytes.Buffer
	writer := csv.NewWriter(&held)
	record := func(cells, results []string) error {
		return writer.Write(append(append([]string(nil), cells...), results...))
	}
	if err := record(header, b.Results()); err != nil {
		return report, err
	}
	empty := make([]string, len(b.Results()))
	for {
		cells, err := reader.Read()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			return report, err // the reader names the line; what follows it cannot be told apart
		}
		line, _ := reader.FieldPos(0)
		results, err := b.Row(line, cells)
		var bad *CellError
		switch {
		case errors.As(err, &bad):
			report.Bad = append(report.Bad, bad)
			results = empty
		case err != nil:
			return report, err
		default:
			report.Rows++
		}
		if err := record(cells, results); err != nil {
			return report, err
		}
	}
	report.Warnings = b.Warnings()
	if len(report.Bad) > 0 && !keepGoing {
		var all []error
		for _, bad := range report.Bad {
			all = append(all, bad)
		}
		return report, errors.Join(all...)
	}
	writer.Flush()
	if err := writer.Error(); err != nil {
		return report, err
	}
	_, err = out.Write(held.Bytes())
	return report, err
}

// withoutMark drops a byte order mark, which spreadsheets put in front.
func withoutMark(in io.Reader) io.Reader {
	r := bufio.NewReader(in)
	if mark, err := r.Peek(3); err == nil && string(mark) == "\ufeff" {
		_, _ = r.Discard(3) // what was peeked can be discarded
	}
	return r
}
