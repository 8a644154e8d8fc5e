package cli

import (
	"fmt"

	"github.com/spf13/cobra"
)

// format is how a result is written.
type format string

// Formats of results.
const (
	formatTable format = "table"
	formatCSV   format = "csv"
	formatJSON  format = "json"
)

// String returns the format's name.
func (f *format) String() string { return string(*f) }

// Type names the value in the help text.
func (f *format) Type() string { return "FORMAT" }

// Set takes table, csv or json.
func (f *format) Set(s string) error {
	switch format(s) {
	case formatTable, formatCSV, formatJSON:
		*f = format(s)
		return nil
	}
	return fmt.Errorf("%q is not allowed; it must be table, csv or json", s)
}

// addFormat adds the flag --format, table by default.
func addFormat(cmd *cobra.Command, f *format) {
	*f = formatTable
	cmd.Flags().Var(f, "format", "table, csv or json")
}
