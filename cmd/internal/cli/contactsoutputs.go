package cli

import (
	"context"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"time"

	"github.com/spf13/pflag"

	"slantwise/cmd/internal/atomicfile"
	"slantwise/cmd/internal/planfiles"
)

// planOutputs are the files that a plan is written to beside standard output.
type planOutputs struct {
	save, calendar, calendars, pointing, page, pdf string
}

func (f *planOutputs) add(fs *pflag.FlagSet) {
	fs.StringVar(&f.save, "save", "", "CSV `FILE` to write the plan to, too")
	fs.StringVar(&f.calendar, "calendar", "", "iCalendar `FILE` to write; one that is there is revised: events keep their UID, dropped ones are cancelled")
	fs.StringVar(&f.calendars, "calendars", "", "`FOLDER` of calendars to write or revise, one for each station and spacecraft")
	fs.StringVar(&f.page, "page", "", "HTML `FILE` to write the plan to over time, with a CSV and a JSON file of its numbers beside it")
	fs.StringVar(&f.pdf, "pdf", "", "PDF `FILE` to write the plan to for print, its charts as vectors")
	fs.StringVar(&f.pointing, "pointing", "", "`FOLDER` to write a pointing file for each contact to, a row a second")
}

// writeFiles writes the plan to the files asked for.
func (a *planAnswer) writeFiles(ctx context.Context, f *planOutputs) error {
	if f.save != "" {
		err := atomicfile.Write(f.save, 0o644, func(w io.Writer) error { return writeCSV(w, planfiles.PlanColumns, a.csv()) })
		if err != nil {
			return err
		}
	}
	stamp := a.p.At(a.p.Now)
	if f.calendar != "" {
		if err := writeCalendar(f.calendar, a.events(), stamp); err != nil {
			return err
		}
	}
	if f.calendars != "" {
		if err := writeCalendars(f.calendars, a.events(), stamp); err != nil {
			return err
		}
	}
	if f.page != "" || f.pdf != "" {
		if err := a.writeDrawn(ctx, f); err != nil {
			return err
		}
	}
	if f.pointing != "" {
		return a.writePointing(context.WithoutCancel(ctx), f.pointing)
	}
	return nil
}

// writePointing writes where the antenna points during each contact, by the elements of
// the scenario.
func (a *planAnswer) writePointing(ctx context.Context, dir string) error {
	if len(a.p.flown) == 0 && len(a.rows) > 0 {
		return inputErrorf("--pointing: windows from outside tell no orbit; leave it out, or plan the scenario's passes")
	}
	if err := os.MkdirAll(dir, 0o755); err != nil {
		return inputErrorf("%s: %v", dir, plainFileError(err))
	}
	last := -1
	for i := range a.rows {
		r := &a.rows[i]
		if r.PlanContact == last {
			continue
		}
		last = r.PlanContact
		p, err := newPointingRows(a.p.scenario, pointingOptions{spacecraft: r.Spacecraft, station: r.Station, transmitter: r.Transmitter, from: r.Start, to: r.End, step: time.Second})
		if err != nil {
			return fmt.Errorf("pointing of %s: %w", r.Contact, err)
		}
		name := fileName(r.Station, r.Antenna, r.Spacecraft, r.Start.UTC().Format("20060102T150405Z")) + ".csv"
		err = atomicfile.Write(filepath.Join(dir, name), 0o644, func(w io.Writer) error { return p.writeCSV(ctx, w, false) })
		if err != nil {
			return err
		}
	}
	return nil
}
