package cli

import (
	"context"
	"errors"
	"fmt"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
	"slantwise/orbit"
	"slantwise/orbit/elements"
	"slantwise/orbit/fit"
)

// fitOptions are the flags of elements fit.
type fitOptions struct {
	file       string // empty: a spacecraft of the scenario
	object     string // of an OEM with several
	spacecraft string
	from, to   time.Time
	step       time.Duration
	frame      string

	epoch         string // last, middle, first, or an instant
	bStar         *float64
	positionsOnly bool
	rejectBeyond  *float64
	mostRMSKm     *float64

	name, designator string
	catalogNumber    *float64

	format  format
	convert string
	into    string
	loss    bool
}

func newElementsFit(env *Env) *cobra.Command {
	var o fitOptions
	cmd := &cobra.Command{
		Use:   "fit [FILE]",
		Short: "Fit an element set to positions, with residuals and what they leave open",
		Long: `Find the SGP4 mean elements that follow positions best, by least squares. FILE (- is
standard input) is a CCSDS orbit ephemeris message (OEM, KVN or XML), whose states are
taken as they stand, or a table as CSV with the columns
  utc                          ISO 8601 ending in Z
  x_km, y_km, z_km             position
  vx_km_s, vy_km_s, vz_km_s    velocity, where it is known
  frame                        teme, earth-fixed, pseudo-earth-fixed, true-of-date,
                               mean-of-date, j2000 or gcrf; or --frame for all rows
  position_sigma_m, velocity_sigma_m_s   weights, where the rows differ
in any order. Without FILE the positions are those of a spacecraft of the scenario, for
people whose own equipment takes element sets only.

B* is fitted, or stated by --b-star where the span is too short for it. The epoch is the
last datum's, moved back by less than 27 s to where a two-line set holds it exactly: age
then counts from the end of the data. No datum is left out unless --reject-beyond says
so. Data that cannot carry a set are refused, with what is missing.

--format csv gives the residual of each datum, json all there is. --convert writes the
set itself, to standard output or with --into into a file, which then comes beside the
report. SGP4 follows a real orbit to about a kilometre; that, not the data, is what most
residuals show.`,
		Example: `  slantwise elements fit --spacecraft "Wagtail 1"
  slantwise elements fit --spacecraft "Wagtail 1" --from 2026-09-15T06:00:00Z --to 2026-09-15T12:00:00Z --convert omm-xml --into fitted.xml
  slantwise elements fit positions.csv --name "Wagtail 1" --catalog-number 99001 --format json`,
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) > 1 {
				return inputErrorf("%s takes one FILE, %d are given", cmd.CommandPath(), len(args))
			}
			o.file = strings.Join(args, "")
			return o.check(cmd.Flags().Changed)
		},
		RunE: func(cmd *cobra.Command, _ []string) error { return runElementsFit(cmd.Context(), env, &o) },
	}
	fs := cmd.Flags()
	fs.StringVar(&o.spacecraft, "spacecraft", "", "`NAME` of the spacecraft whose positions are taken, without FILE")
	addTime(fs, &o.from, "from", "first instant of the data (left out: all of FILE, or the start of the window)")
	addTime(fs, &o.to, "to", "last instant of the data (left out: all of FILE, or a day from the first)")
	addDuration(fs, &o.step, "step", time.Minute, "between positions of a spacecraft")
	fs.StringVar(&o.frame, "frame", "", "`FRAME` of the rows of a table that name none")
	fs.StringVar(&o.object, "object", "", "`NAME` of the object, in an OEM of several")
	fs.StringVar(&o.epoch, "epoch", "last", "epoch of the set: last, middle or first datum, or an instant `UTC`")
	addNumber(fs, &o.bStar, "b-star", "drag term in 1/Earth radii, as stated (left out: fitted)")
	fs.BoolVar(&o.positionsOnly, "positions-only", false, "leave the velocities of the data out")
	addNumber(fs, &o.rejectBeyond, "reject-beyond", "leave out data farther from the fit than so many standard deviations, and name them")
	addNumber(fs, &o.mostRMSKm, "most-rms-km", "refuse a fit whose RMS distance in km is greater (left out: 5)")
	fs.StringVar(&o.name, "name", "", "`NAME` of the object in the set")
	addNumber(fs, &o.catalogNumber, "catalog-number", "catalogue number in the set")
	fs.StringVar(&o.designator, "designator", "", "international designator in the set, as `2026-001A`")
	addFormat(cmd, &o.format)
	fs.StringVar(&o.convert, "convert", "", "write the set as `KIND`: "+strings.Join(elementKinds(), ", "))
	fs.StringVar(&o.into, "into", "", "write the set into this `FILE`, whole or not at all")
	fs.BoolVar(&o.loss, "allow-loss", false, "let --into replace a file that holds other objects, newer sets or something else")
	return cmd
}

// check finds flags that do not go together or are out of range.
func (o *fitOptions) check(given func(string) bool) error {
	switch {
	case o.file != "" && o.spacecraft != "":
		return inputErrorf("--spacecraft is about a scenario's spacecraft, and FILE is given; give one of them")
	case o.file != "" && given("step"):
		return inputErrorf("--step is about positions of a spacecraft, and FILE has its own")
	case o.file == "" && o.frame != "":
		return inputErrorf("--frame is about a FILE, which is not given")
	case o.file == "" && o.object != "":
		return inputErrorf("--object is about a FILE, which is not given; --spacecraft names one of the scenario")
	case o.into != "" && o.convert == "":
		return inputErrorf("--into needs --convert, which says in which format")
	case o.loss && o.into == "":
		return inputErrorf("--allow-loss is about --into, which is not given")
	case given("format") && o.convert != "" && o.into == "":
		return inputErrorf("--format is about the report, and --convert without --into writes the set in its place; give --into, too")
	case !o.from.IsZero() && !o.to.IsZero() && !o.to.After(o.from):
		return inputErrorf("--to: %s is not after --from %s", utc(o.to), utc(o.from))
	case o.rejectBeyond != nil && !(*o.rejectBeyond >= 1):
		return inputErrorf("--reject-beyond: %g is not allowed; it must be 1 or more standard deviations", *o.rejectBeyond)
	case o.mostRMSKm != nil && !(*o.mostRMSKm > 0):
		return inputErrorf("--most-rms-km: %g is not allowed; it must be greater than 0", *o.mostRMSKm)
	case o.bStar != nil && !(*o.bStar >= -1 && *o.bStar <= 1):
		return inputErrorf("--b-star: %g is not allowed; it must be -1 to 1 per Earth radius", *o.bStar)
	case o.catalogNumber != nil && (*o.catalogNumber != float64(int(*o.catalogNumber)) || *o.catalogNumber < 0 || *o.catalogNumber > 999999999):
		return inputErrorf("--catalog-number: %g is not allowed; it must be a whole number, 0 to 999999999", *o.catalogNumber)
	}
	if o.convert != "" {
		if _, err := elements.ParseFormat(o.convert); err != nil {
			return inputErrorf("--convert: %w", err)
		}
	}
	switch o.epoch {
	case "last", "middle", "first":
		return nil
	}
	if _, err := scenario.ParseUTC(o.epoch); err != nil {
		return inputErrorf("--epoch: %q is neither last, middle, first nor an instant: %w", o.epoch, err)
	}
	return nil
}

func runElementsFit(ctx context.Context, env *Env, o *fitOptions) error {
	in, err := gatherPositions(env, o)
	if err != nil {
		return err
	}
	job := env.startProgress("fitting", 3*len(in.data))
	how := o.fitting(in.data)
	how.Progress = job.add
	r, err := fit.Fit(ctx, in.data, how)
	job.stop()
	var refused *fit.Refusal
	if errors.As(err, &refused) {
		return &InputError{Err: fmt.Errorf("%s: %w", in.from, err)}
	}
	if err != nil {
		return err
	}
	o.label(&r.Elements, in.like)
	out, err := newFitReport(o, in, r)
	if err != nil {
		return err
	}
	if o.convert == "" {
		return out.write(env, o.format)
	}
	if o.into != "" {
		if err := out.write(env, o.format); err != nil {
			return err
		}
	} else {
		env.note("%s", printable(out.summary()))
	}
	return convertElements(env, elementsOptions{convert: o.convert, into: o.into, loss: o.loss}, []orbit.Elements{r.Elements})
}

// fitting turns the flags into what the fit takes.
func (o *fitOptions) fitting(data []fit.Datum) fit.Options {
	f := fit.Options{From: o.from, To: o.to, BStar: o.bStar, Epoch: o.epochOf(data)}
	if o.rejectBeyond != nil {
		f.RejectBeyond = *o.rejectBeyond
	}
	if o.mostRMSKm != nil {
		f.MostRMS = *o.mostRMSKm * 1000
	}
	return f
}

// epochOf returns the instant that --epoch names; zero: the fit's own choice.
func (o *fitOptions) epochOf(data []fit.Datum) time.Time {
	var first, last time.Time
	for i := range data {
		t := data[i].Time
		if !o.from.IsZero() && t.Before(o.from) || !o.to.IsZero() && t.After(o.to) {
			continue
		}
		if first.IsZero() || t.Before(first) {
			first = t
		}
		if last.IsZero() || t.After(last) {
			last = t
		}
	}
	switch {
	case o.epoch == "last" || first.IsZero():
		return time.Time{}
	case o.epoch == "first":
		return fit.DefaultEpoch(first.Add(27*time.Second - time.Nanosecond))
	case o.epoch == "middle":
		return fit.DefaultEpoch(first.Add(last.Sub(first) / 2))
	}
	at, err := scenario.ParseUTC(o.epoch)
	if err != nil {
		return time.Time{} // check has seen it
	}
	return at
}

// label names the set: as the flags say, else as the object that the positions are of.
func (o *fitOptions) label(el *orbit.Elements, like orbit.Elements) {
	el.Name, el.CatalogNumber, el.InternationalDesignator = like.Name, like.CatalogNumber, like.InternationalDesignator
	el.Classification = "U"
	if o.name != "" {
		el.Name = o.name
	}
	if o.catalogNumber != nil {
		el.CatalogNumber = int(*o.catalogNumber)
	}
	if o.designator != "" {
		el.InternationalDesignator = o.designator
	}
}
