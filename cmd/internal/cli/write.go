package cli

import (
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io"
	"iter"
)

// writeCSV writes a header and the rows after it.
func writeCSV(w io.Writer, header []string, rows iter.Seq[[]string]) error {
	c := csv.NewWriter(w)
	if err := c.Write(header); err != nil {
		return fmt.Errorf("write the CSV: %w", err)
	}
	for row := range rows {
		if err := c.Write(row); err != nil {
			return fmt.Errorf("write the CSV: %w", err)
		}
	}
	c.Flush()
	if err := c.Error(); err != nil {
		return fmt.Errorf("write the CSV: %w", err)
	}
	return nil
}

// writeJSON writes v, indented, with a line end. Lists must not be nil: they would
// show as null instead of [].
func writeJSON(w io.Writer, v any) error {
	e := json.NewEncoder(w)
	e.SetIndent("", "  ")
	e.SetEscapeHTML(false)
	if err := e.Encode(v); err != nil {
		return fmt.Errorf("write the JSON: %w", err)
	}
	return nil
}
