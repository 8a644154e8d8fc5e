package cli

import (
	"context"
	"errors"
	"fmt"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/logbook"
)

func newLogShow(env *Env) *cobra.Command {
	var book string
	var number *float64
	var f format
	cmd := &cobra.Command{
		Use:   "show",
		Short: "List the passes of the logbook, or the measurements of one",
		Example: `  slantwise log show
  slantwise log show --number 1 --format csv`,
		Args: noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error { return runLogShow(cmd.Context(), env, book, number, f) },
	}
	cmd.Flags().StringVar(&book, "book", defaultBook, "`FILE` of the logbook")
	addNumber(cmd.Flags(), &number, "number", "the measurements of the pass of this `NUMBER`")
	addFormat(cmd, &f)
	return cmd
}

// runLogShow writes what can be read, and fails after it where that is not all.
func runLogShow(ctx context.Context, env *Env, path string, number *float64, f format) error {
	b, err := logbook.Open(ctx, path, false)
	if err != nil {
		return &InputError{Err: err}
	}
	defer b.Close()
	list, err := b.List(ctx)
	if number == nil {
		return errors.Join(bookSheet(list).write(env, f), err)
	}
	for i := range list {
		if float64(list[i].ID) == *number {
			err = errors.Join(err, b.Fill(ctx, &list[i]))
			return errors.Join(valueSheet(&list[i]).write(env, f), err)
		}
	}
	return errors.Join(inputErrorf("--number: there is no pass %g in %s, which holds %d", *number, path, len(list)), err)
}

func bookSheet(list []logbook.Entry) *sheet {
	out := &sheet{name: "passes", columns: []sheetColumn{numbersAs("number", "number", 0), wordsAs("spacecraft", "spacecraft"), wordsAs("station", "station"),
		wordsAs("first_utc", "first"), wordsAs("last_utc", "last"), wordsAs("source", "source"), wordsAs("elements", "elements"), wordsAs("remark", "remark"), wordsAs("added_utc", "added")}, rows: [][]any{}}
	for _, e := range list {
		out.rows = append(out.rows, []any{float64(e.ID), e.Spacecraft, e.Station, utc(e.First), utc(e.Last), e.Source, e.Elements, e.Note, utc(e.Taken)})
	}
	return out
}

func valueSheet(e *logbook.Entry) *sheet {
	out := &sheet{name: "measurements", columns: []sheetColumn{wordsAs("utc", "utc"), wordsAs("quantity", "quantity"), numbersAs("measured", "measured", 3),
		numbersAs("predicted", "predicted", 3), numbersAs("difference", "difference", 3), wordsAs("state", "state")}, rows: [][]any{}}
	for _, v := range e.Values {
		out.rows = append(out.rows, []any{utc(v.At), v.Quantity, v.Measured, v.Predicted, v.Measured - v.Predicted, v.State})
	}
	if e.Note != "" {
		out.notes = append(out.notes, fmt.Sprintf("remark: %s", e.Note))
	}
	return out
}
