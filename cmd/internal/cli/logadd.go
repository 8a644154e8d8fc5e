package cli

import (
	"context"
	"errors"
	"fmt"
	"math"
	"path/filepath"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/logbook"
	"slantwise/downlink/measured"
)

// defaultBook is the logbook where none is named.
const defaultBook = "slantwise.logbook"

func newLogAdd(env *Env) *cobra.Command {
	var in logInput
	var book, note string
	var f format
	cmd := &cobra.Command{
		Use:   "add FILE",
		Short: "Put measurements over the prediction and keep both in the logbook",
		Long: `Read FILE, predict each sample with the scenario, tell the bias and the slopes of what
differs, and add all of it to the logbook (an SQLite file, made where it is not there)
with the element set used. The same file is not added twice.`,
		Example: `  slantwise log add rehearsal.csv --spacecraft "Wagtail 1" --station "Skerry Point" --mode safe --remark "light wind"`,
		RunE:    func(cmd *cobra.Command, _ []string) error { return runLogAdd(cmd.Context(), env, &in, book, note, f) },
	}
	in.addTo(cmd)
	cmd.Flags().StringVar(&book, "book", defaultBook, "`FILE` of the logbook")
	cmd.Flags().StringVar(&note, "remark", "", "`TEXT` to keep with the pass")
	addFormat(cmd, &f)
	return cmd
}

func runLogAdd(ctx context.Context, env *Env, in *logInput, path, note string, f format) error {
	o, err := in.over(env)
	if err != nil {
		return err
	}
	e := &logbook.Entry{Spacecraft: o.spacecraft.Name, Station: o.station.Site.Name, First: o.points[0].At, Last: o.points[len(o.points)-1].At,
		Source: filepath.Base(in.file), Elements: o.elements, Note: note, Digest: o.digest, Taken: env.Now()}
	for i := range o.points {
		p := &o.points[i]
		for q := range measured.All() {
			if v := p.Get(q); !math.IsNaN(v) {
				e.Values = append(e.Values, logbook.Value{At: p.At, Quantity: q.String(), State: p.State.String(), Measured: v, Predicted: p.Predicted(q)})
			}
		}
	}
	b, err := logbook.Open(ctx, path, true)
	if err != nil {
		return &InputError{Err: err}
	}
	defer b.Close()
	id, err := b.Add(ctx, e)
	if errors.Is(err, logbook.ErrTaken) {
		return &InputError{Err: err}
	}
	if err != nil {
		return err
	}
	env.note("added as number %d of %s", id, printable(path))
	return o.differences().write(env, f)
}

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
