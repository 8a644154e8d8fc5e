package cli

import (
	"context"
	"errors"
	"io"
	"os"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/atomicfile"
	"slantwise/cmd/internal/logbook"
	"slantwise/cmd/internal/logbook/record"
)

func newLogExport(env *Env) *cobra.Command {
	var book, into string
	f := formatCSV
	cmd := &cobra.Command{
		Use:   "export",
		Short: "Write the whole logbook out as CSV or JSON",
		Long: `Write every pass of the logbook with every measurement, all digits, as CSV (a row a
measurement, its pass beside it) or JSON; log import reads both back. Of a damaged file
what can be read is written, it is said what is missing, and the exit code is 1.`,
		Example: `  slantwise log export > logbook.csv
  slantwise log export --format json --into logbook.json`,
		Args: noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error { return runLogExport(cmd.Context(), env, book, into, f) },
	}
	cmd.Flags().StringVar(&book, "book", defaultBook, "`FILE` of the logbook")
	cmd.Flags().StringVar(&into, "into", "", "write into this `FILE` instead of standard output")
	cmd.Flags().Var(&f, "format", "csv or json")
	return cmd
}

func runLogExport(ctx context.Context, env *Env, path, into string, f format) error {
	how := record.CSV
	switch f {
	case formatJSON:
		how = record.JSON
	case formatCSV:
	default:
		return inputErrorf("--format: a whole logbook is written as csv or json, not as a table; log show has tables")
	}
	book, err := readBook(ctx, path)
	if err != nil {
		return &InputError{Err: err}
	}
	defer book.close()
	var faults []error
	write := func(w io.Writer) error {
		x := record.NewExporter(w, how)
		for i := range book.entries {
			e := &book.entries[i]
			if err := book.fill(ctx, e); err != nil {
				faults = append(faults, err)
			}
			if err := x.Entry(e); err != nil {
				return err
			}
			e.Values = nil
		}
		return x.Close()
	}
	if into == "" {
		err = write(env.Out)
	} else {
		err = atomicfile.Write(into, 0o644, write)
	}
	return errors.Join(append([]error{err, book.fault}, faults...)...)
}

func newLogImport(env *Env) *cobra.Command {
	var book string
	cmd := &cobra.Command{
		Use:   "import FILE",
		Short: "Add the passes of an exported logbook to a logbook",
		Long: `Read FILE, which log export wrote, and add its passes to the logbook, which is made where
it is not there. A pass that is in it already is passed over; one that is not what was
written is told, and added with a remark that says so.`,
		Example: `  slantwise log import logbook.csv --book copy.logbook`,
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) != 1 {
				return inputErrorf("%s takes one FILE, %d are given", cmd.CommandPath(), len(args))
			}
			return nil
		},
		RunE: func(cmd *cobra.Command, args []string) error { return runLogImport(cmd.Context(), env, args[0], book) },
	}
	cmd.Flags().StringVar(&book, "book", defaultBook, "`FILE` of the logbook")
	return cmd
}

func runLogImport(ctx context.Context, env *Env, file, path string) error {
	f, err := os.Open(file)
	if err != nil {
		return &InputError{Err: err}
	}
	defer f.Close()
	list, err := record.Import(f, file)
	if err != nil {
		return &InputError{Err: err}
	}
	b, err := logbook.Open(ctx, path, true)
	if err != nil {
		return &InputError{Err: err}
	}
	defer b.Close()
	added, had := 0, 0
	for i := range list {
		e := &list[i]
		if err := e.Check(); err != nil {
			env.note("%s: %v", printable(file), err)
			e.Note = saidOf(e.Note, err)
		}
		switch _, err := b.Add(ctx, e); {
		case errors.Is(err, logbook.ErrTaken):
			had++
		case err != nil:
			return err
		default:
			added++
		}
	}
	env.note("%s added to %s, %d were in it already", counted(added, "pass", "passes"), printable(path), had)
	return nil
}

// saidOf puts a fault behind a remark.
func saidOf(remark string, fault error) string {
	if remark != "" {
		remark += "; "
	}
	return remark + fault.Error()
}
