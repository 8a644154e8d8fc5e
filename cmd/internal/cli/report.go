package cli

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"runtime/debug"

	"github.com/spf13/cobra"

	"slantwise/reports"
)

// reportOptions is what the command line says.
type reportOptions struct {
	into                 string
	oneFile, pdf, static bool
	spacecraft, stations []string
	mode, log            string
	logNamed             bool // false: log is the default
	workers              int
}

func newReport(env *Env) *cobra.Command {
	return newReportRunning(env, runReport)
}

// newReportRunning takes the function that does the work, so that a test can look at
// the flags alone.
func newReportRunning(env *Env, run func(context.Context, *Env, reportOptions) error) *cobra.Command {
	var o reportOptions
	cmd := &cobra.Command{
		Use:   "report",
		Short: "Write a report for the browser: an index and a page for each pass",
		Long: `Write a folder with an index over all passes of the window and a page for each pass:
when, how high, how strong, whether the link closes and from when to when, how many
bytes; charts along the pass; the link budget at AOS, at culmination and at the least
margin; for each uplink that the station can send when commanding works, its margin, the
frequency to send and how much the antenna radiates; assumptions and cautions. The numbers of each page lie beside it as CSV and
JSON. A summary of the window adds up volume, contact time and passes worth taking by day
(and by week, where it is longer), by spacecraft and by station, says how the days differ
and how old the element sets are, and names the passes that bring most and least, and why.

A pass gets a page for each transmitter of the spacecraft that an antenna of the
station takes, and a page of geometry where there is none. Volumes and margins are
those of one mode of the transmitter: the one that brings the most bytes in the pass,
or --mode.

With --pdf each page has a PDF of A4 beside it, and the window has passes.pdf: the same
words and numbers, charts as vectors, and text that can be searched; no browser is needed
for them. With --static the pages have no script: the same charts are drawn into them, for
mail and closed machines.

What was measured stands on the pages over what was predicted: of the logbook that --log
names, else of slantwise.logbook in this folder where log add has made it.

The folder appears whole or not at all. In a folder with an earlier report the files
of that report are replaced, and all others stay; a folder that holds something else
is refused. Standard output names the file to open.`,
		Example: `  slantwise report
  slantwise report --station "Skerry Point" --mode fast --into friday
  slantwise report --pdf --spacecraft "Wagtail 1" --into print
  slantwise report --static --station "Skerry Point" --into plain
  slantwise report --one-file --spacecraft "Wagtail 1"   # pages to be mailed`,
		Args: noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error {
			if o.into == "" {
				return inputErrorf("--into: the name of the folder is empty; give one, or leave the flag out for slantwise-report")
			}
			o.logNamed = cmd.Flags().Changed("log")
			return run(cmd.Context(), env, o)
		},
	}
	fs := cmd.Flags()
	fs.StringVar(&o.into, "into", "slantwise-report", "write into this `FOLDER`")
	fs.BoolVar(&o.oneFile, "one-file", false, "put everything inside each page, to be mailed")
	fs.BoolVar(&o.static, "static", false, "pages without script, their charts drawn in them: for mail and closed machines")
	fs.BoolVar(&o.pdf, "pdf", false, "put a PDF beside each page, for print")
	fs.StringArrayVar(&o.spacecraft, "spacecraft", nil, "only this spacecraft, by `NAME`; may be repeated")
	fs.StringArrayVar(&o.stations, "station", nil, "only this station, by `NAME`; may be repeated")
	fs.StringVar(&o.mode, "mode", "", "take the mode of this `NAME` where a transmitter has it")
	fs.StringVar(&o.log, "log", defaultBook, "put the measurements of this logbook `FILE` onto the pages; an empty name: none")
	addWorkers(fs, &o.workers, "pages are made")
	return cmd
}

// reportGCPercent lets the heap grow to four times what is in use: the demo's report with PDFs takes
// 0.3 s less of 3.4 s of CPU, and 125 MB instead of 66 MB.
const reportGCPercent = 300

func runReport(ctx context.Context, env *Env, o reportOptions) error {
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	plan, err := planReport(ctx, s, o)
	if err != nil {
		return err
	}
	if err := plan.openBook(ctx, env, o.log, o.logNamed); err != nil {
		return err
	}
	if err := plan.addSets(); err != nil {
		return err
	}
	for _, w := range plan.warnings {
		env.note("warning: %s", w)
	}
	if os.Getenv("GOGC") == "" { // pages are made and dropped: room is cheaper than looking for it
		defer debug.SetGCPercent(debug.SetGCPercent(reportGCPercent))
	}
	bar := env.startProgress("pages", len(plan.pages))
	index, err := reports.Write(ctx, o.into, plan.report(), reports.Options{
		OneFile: o.oneFile, PDF: o.pdf, Static: o.static, Version: version(), Workers: o.workers, Progress: func(int, int) { bar.add(1) },
	})
	bar.stop()
	var folder *reports.FolderError
	switch {
	case errors.As(err, &folder):
		return inputErrorf("--into: %w", err)
	case errors.As(err, new(*fs.PathError)) || errors.As(err, new(*os.LinkError)):
		return fmt.Errorf("--into %s: %w", o.into, err)
	case err != nil:
		return err
	}
	env.note("%s on %s; open this file in a browser:", counted(plan.passes, "pass", "passes"), counted(len(plan.pages), "page", "pages"))
	_, err = fmt.Fprintln(env.Out, index)
	return err
}

// counted writes a number of things.
func counted(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, many)
}
