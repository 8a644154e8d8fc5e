package cli

import (
	"context"
	"io"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/atomicfile"
	"slantwise/reports"
)

// shiftOptions is what the command line says.
type shiftOptions struct {
	station, antenna string
	from             time.Time
	hours            float64
	plan             string
	zone             string
	page, paper      string
	pages            int
	show             string
	format           format
}

func newShift(env *Env) *cobra.Command {
	var o shiftOptions
	cmd := &cobra.Command{
		Use:   "shift",
		Short: "One sheet for the next hours at a station: contacts, pointing, frequencies, what to do when",
		Long: `Write what the people at a station need for their next hours: the contacts in order, in
UTC and local time; where to point and what to receive and send at the start, the highest
point and the end; which mode from when; what is expected every minute; how to look for a
spacecraft that is late or early, by how uncertain its position is; and what may be wrong
when the signal is low, by how many dB each cause could take.

The contacts are those of --plan, as contacts --save writes it, else all passes of the
station that are worth taking: as long as the shortest contact of the scenario's
contact_plan, and something comes down or commanding works.

The sheet begins at --from, left out: now, or where that is outside of the window, with the
window. Elevations are geometric, as in passes and pointing. Local times are those of
--time-zone, else of the station's time_zone.

--into writes a page that prints on one sheet of A4, --pdf the sheet as PDF. What does not
fit on it is named at its foot; --pages gives it more room. --show says what the CSV holds:
contacts, minutes, steps of the rate plan, or causes of a low signal. JSON holds all.`,
		Example: `  slantwise shift --station "Skerry Point" --from 2026-09-15T06:00:00Z
  slantwise shift --station "Skerry Point" --hours 6 --into shift.html --pdf shift.pdf
  slantwise shift --station "Hoarfjord" --time-zone UTC --show minutes --format csv`,
		Args: noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error { return runShift(cmd.Context(), env, &o) },
	}
	fs := cmd.Flags()
	fs.StringVar(&o.station, "station", "", "`NAME` of the station (left out: the only one of the scenario or of the plan)")
	fs.StringVar(&o.antenna, "antenna", "", "only contacts of the antenna of this `NAME`")
	addTime(fs, &o.from, "from", "begin of the sheet (left out: now, where it lies in the window, else the window's start)")
	fs.Float64Var(&o.hours, "hours", 12, "length of the sheet in `HOURS`")
	fs.StringVar(&o.plan, "plan", "", "CSV `FILE` of a contact plan, as contacts --save writes it")
	fs.StringVar(&o.zone, "time-zone", "", "`ZONE` of the local times, as Europe/London, in place of the station's")
	fs.StringVar(&o.page, "into", "", "HTML `FILE` to write the sheet to, in place of standard output")
	fs.StringVar(&o.paper, "pdf", "", "PDF `FILE` to write the sheet to, in place of standard output")
	fs.IntVar(&o.pages, "pages", 1, "how many pages of A4 it may fill")
	fs.StringVar(&o.show, "show", "contacts", "`WHAT` the CSV holds: contacts, minutes, steps or causes")
	addFormat(cmd, &o.format)
	return cmd
}

// Bounds of the flags.
const (
	mostShiftHours = 72
	mostShiftPages = 20
)

func (o *shiftOptions) check() error {
	switch {
	case !(o.hours > 0 && o.hours <= mostShiftHours):
		return inputErrorf("--hours: %g h is not allowed; it must be greater than 0 and at most %d h", o.hours, mostShiftHours)
	case o.pages < 1 || o.pages > mostShiftPages:
		return inputErrorf("--pages: %d is not allowed; it must be 1 to %d", o.pages, mostShiftPages)
	case o.zone == "Local":
		return inputErrorf("--time-zone: %q would be another zone on each machine; give one by its name, as Europe/London", o.zone)
	}
	if _, err := pick("show", o.show, shiftSheetNames, func(s *string) string { return *s }); err != nil {
		return inputErrorf("--show: %q is not allowed; it must be %s", o.show, quotedList(shiftSheetNames))
	}
	return nil
}

func runShift(ctx context.Context, env *Env, o *shiftOptions) error {
	if err := o.check(); err != nil {
		return err
	}
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	job, err := newShiftJob(env, s, o)
	if err != nil {
		return err
	}
	sheet, err := job.sheet(ctx)
	if err != nil {
		return err
	}
	for _, f := range []struct {
		name, flag string
		make       func(*reports.Shift) ([]byte, error)
	}{{o.page, "--into", reports.ShiftPage}, {o.paper, "--pdf", reports.ShiftPaper}} {
		if f.name == "" {
			continue
		}
		data, err := f.make(sheet)
		if err != nil {
			return err
		}
		if err := atomicfile.Write(f.name, 0o644, func(w io.Writer) error { _, err := w.Write(data); return err }); err != nil {
			return inputErrorf("%s: %w", f.flag, err)
		}
		env.note("%s written to %s", counted(len(sheet.Contacts), "contact", "contacts"), f.name)
	}
	if (o.page != "" || o.paper != "") && o.format == formatTable {
		return nil
	}
	return writeShift(env, sheet, o)
}
