package cli

import (
	"errors"
	"io"
	"os"
	"strings"

	"github.com/spf13/pflag"

	"slantwise/downlink/propagation"
)

// batchOptions asks for one model over the rows of a table.
type batchOptions struct {
	model, file          string
	edition              []string
	lognormal, keepGoing bool
}

func (o *batchOptions) flags(fs *pflag.FlagSet) {
	fs.StringVar(&o.model, "model", "", "`MODEL` of a batch: "+strings.Join(propagation.BatchModels(), ", "))
	fs.StringVar(&o.file, "batch", "", "`FILE` in CSV whose rows are answered, - for the standard input")
	fs.StringSliceVar(&o.edition, "edition", nil, "`EDITION` of a Recommendation in place of the newest, as 676-12; may be repeated")
	fs.BoolVar(&o.lognormal, "lognormal", false, "cloud by the log-normal approximation in place of the direct method")
	fs.BoolVar(&o.keepGoing, "keep-going", false, "answer the rows that are good, and leave the results of the others empty")
}

func (o *batchOptions) given() bool { return o.model != "" || o.file != "" }

func (o *batchOptions) check(f format) error {
	switch {
	case o.file == "":
		return inputErrorf("--model goes with --batch FILE, the table whose rows are answered (- for the standard input)")
	case o.model == "":
		return inputErrorf("--batch needs --model, one of %s", strings.Join(propagation.BatchModels(), ", "))
	case f == formatJSON:
		return inputErrorf("--format: a batch is written as CSV, like its input; leave the flag out or give csv")
	}
	return nil
}

// runPathBatch answers a table. Rows that are bad are told on stderr, and so is what
// lies outside a stated range.
func runPathBatch(env *Env, o *pathOptions) error {
	b := &o.batch
	editions, err := propagation.EditionsNamed(b.edition)
	if err != nil {
		return inputErrorf("--edition: %w", err)
	}
	in := env.In
	if b.file != "-" {
		f, err := os.Open(b.file)
		if err != nil {
			return inputErrorf("--batch: %v; name a table in CSV that is there", err)
		}
		defer f.Close()
		in = f
	}
	out := &failing{to: env.Out}
	report, err := propagation.RunBatch(propagation.BatchOptions{Model: b.model, Editions: editions, LogNormal: b.lognormal}, in, out, b.keepGoing)
	if out.err != nil {
		return out.err
	}
	if err != nil {
		next := ""
		if len(report.Bad) > 0 {
			next = "\nnothing is written; with --keep-going the other rows are answered"
		}
		return inputErrorf("%s: %w%s", b.file, err, next)
	}
	for i, bad := range report.Bad {
		if i == warningLimit {
			env.note("and %d more rows without a result", len(report.Bad)-i)
			break
		}
		env.note("no result: %s", printable(bad.Error()))
	}
	for _, name := range propagation.EditionsWithoutPart(b.edition, b.model) {
		env.note("warning: edition %s has no part in model %s", printable(name), b.model)
	}
	for _, w := range report.Warnings {
		env.note("%s: %s", w.Kind, printable(w.Text))
	}
	return nil
}

// failing keeps the error of a writer, which is no fault of the input.
type failing struct {
	to  io.Writer
	err error
}

// Write passes p on.
func (w *failing) Write(p []byte) (int, error) {
	n, err := w.to.Write(p)
	w.err = errors.Join(w.err, err)
	return n, err
}
