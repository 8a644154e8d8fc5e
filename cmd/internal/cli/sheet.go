package cli

import (
	"bytes"
	"encoding/json"
	"fmt"
	"io"
	"math"
)

// sheet is a result of rows that goes out as a table, as CSV or as JSON, always with
// the same columns. A cell is a string or a float64; NaN does not exist.
type sheet struct {
	name    string // of the list in JSON
	columns []sheetColumn
	rows    [][]any
	notes   []string // what the answer takes for granted, for people and for JSON
}

type sheetColumn struct {
	name     string // in CSV and JSON, with its unit
	head     string // in a table
	text     bool
	decimals int
	onlyJSON bool // added after the columns of tables and CSV were promised
}

func wordsAs(name, head string) sheetColumn { return sheetColumn{name: name, head: head, text: true} }

func numbersAs(name, head string, decimals int) sheetColumn {
	return sheetColumn{name: name, head: head, decimals: decimals}
}

// cell returns the text of a cell, empty for a number that does not exist.
func (s *sheet) cell(column int, v any) string {
	if text, ok := v.(string); ok {
		return text
	}
	return fixed(v.(float64), s.columns[column].decimals)
}

func (s *sheet) texts(row []any) []string {
	out := make([]string, 0, len(row))
	for i, v := range row {
		if !s.columns[i].onlyJSON {
			out = append(out, s.cell(i, v))
		}
	}
	return out
}

// write writes the sheet in a format. Notes follow a table and CSV on stderr, and
// stand in JSON.
func (s *sheet) write(env *Env, f format) error {
	var err error
	switch f {
	case formatJSON:
		return writeJSON(env.Out, s)
	case formatCSV:
		err = s.writeCSV(env)
	default:
		err = s.writeTable(env)
	}
	if err != nil {
		return err
	}
	for _, n := range s.notes {
		env.note("%s", printable(n))
	}
	return nil
}

func (s *sheet) writeTable(env *Env) error {
	var columns []column
	for _, c := range s.columns {
		if !c.onlyJSON {
			columns = append(columns, column{head: c.head, text: c.text})
		}
	}
	rows := make([][]string, len(s.rows))
	for i, r := range s.rows {
		rows[i] = s.texts(r)
	}
	return writeTable(env.Out, env.outWidth(), columns, rows)
}

func (s *sheet) writeCSV(env *Env) error { return s.csv(env.Out) }

func (s *sheet) csv(w io.Writer) error {
	var header []string
	for _, c := range s.columns {
		if !c.onlyJSON {
			header = append(header, c.name)
		}
	}
	return writeCSV(w, header, func(yield func([]string) bool) {
		for _, r := range s.rows {
			if !yield(s.texts(r)) {
				return
			}
		}
	})
}

// MarshalJSON writes {"NAME": [rows], "notes": [texts]}, keys in the order of the
// columns.
func (s *sheet) MarshalJSON() ([]byte, error) {
	rows, err := s.jsonRows()
	if err != nil {
		return nil, err
	}
	notes, err := json.Marshal(append([]string{}, s.notes...))
	if err != nil {
		return nil, err
	}
	return fmt.Appendf(nil, "{%q:%s,\"notes\":%s}", s.name, rows, notes), nil
}

// jsonRows is the list of the rows alone.
func (s *sheet) jsonRows() (json.RawMessage, error) {
	b := bytes.NewBufferString("[")
	for i, r := range s.rows {
		if i > 0 {
			b.WriteByte(',')
		}
		row, err := s.rowJSON(r)
		if err != nil {
			return nil, err
		}
		b.Write(row)
	}
	b.WriteByte(']')
	return b.Bytes(), nil
}

// rowJSON writes a row as an object.
func (s *sheet) rowJSON(row []any) ([]byte, error) {
	var b bytes.Buffer
	b.WriteByte('{')
	for j, v := range row {
		if j > 0 {
			b.WriteByte(',')
		}
		text, err := s.jsonCell(j, v)
		if err != nil {
			return nil, err
		}
		fmt.Fprintf(&b, "%q:%s", s.columns[j].name, text)
	}
	b.WriteByte('}')
	return b.Bytes(), nil
}

func (s *sheet) jsonCell(column int, v any) ([]byte, error) {
	if x, ok := v.(float64); ok {
		return num(x, s.columns[column].decimals).MarshalJSON()
	}
	if v == "" {
		return []byte("null"), nil
	}
	return json.Marshal(v)
}

// none is a number that does not exist.
var none = math.NaN()
