package elements

import (
	"encoding/csv"
	"errors"
	"io"
	"strings"
)

// readCSV reads a header row of keywords and a set a row.
func readCSV(text string, rep *report) []record {
	r := csv.NewReader(strings.NewReader(text))
	r.TrimLeadingSpace = true
	header, err := r.Read()
	if err != nil {
		rep.fault(csvFault(err))
		return nil
	}
	header = append([]string(nil), header...)
	for i := range header {
		header[i] = strings.Trim(header[i], " ")
	}
	if !checkHeads(header, rep) {
		return nil
	}
	r.ReuseRecord = true
	var records []record
	for {
		row, err := r.Read()
		if errors.Is(err, io.EOF) {
			return records
		}
		if err != nil {
			rep.fault(csvFault(err))
			if errors.Is(err, csv.ErrFieldCount) {
				continue
			}
			return records
		}
		line, _ := r.FieldPos(0)
		rec := record{line: line}
		for i, value := range row {
			line, column := r.FieldPos(i)
			rec.add(entry{key: header[i], value: strings.Trim(value, " "), line: line, column: column})
		}
		records = append(records, rec)
	}
}

func checkHeads(header []string, rep *report) bool {
	before := rep.faults.Total
	seen := map[string]bool{}
	for _, h := range header {
		if h == "" {
			rep.fault(Fault{Line: 1, Problem: "a column has no keyword in the header row", Next: "name it or take the column out"})
		} else if seen[h] {
			rep.fault(Fault{Line: 1, Field: "header row", Text: h, Problem: "two columns have this keyword", Next: "keep one of them"})
		}
		seen[h] = true
	}
	return rep.faults.Total == before
}

func csvFault(err error) Fault {
	f := Fault{Problem: err.Error(), Next: "correct the row"}
	var pe *csv.ParseError
	if errors.As(err, &pe) {
		f.Line, f.Column, f.Problem = pe.Line, pe.Column, pe.Err.Error()
	}
	if errors.Is(err, csv.ErrFieldCount) {
		f.Problem = "the row has another number of fields than the header row"
	}
	return f
}
