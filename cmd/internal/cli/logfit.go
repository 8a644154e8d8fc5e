package cli

import (
	"context"

	"github.com/spf13/cobra"
)

type logFitOptions struct {
	in      logInput
	book    string
	entries []string
	points  *float64 // of the mask
	offers  bool
	format  format
}

func newLogFit(env *Env) *cobra.Command {
	var o logFitOptions
	cmd := &cobra.Command{
		Use:   "fit [FILE]",
		Short: "Fit what explains the difference between measurements and prediction",
		Long: `Fit, robustly and with the interval that holds the truth in 95 % of logs like this one,
FILE or passes of the logbook (those of one link together):

  level       an offset; the antenna's error where its beamwidth is known (with its angles
              logged while it scans, both axes with their signs); of relative power
              the slope of its scale, too
  noise       the noise temperature over the predicted one: from received power and C/N0
              in the same samples, or from C/N0 alone where the warm sky tells it
  frequency   the transmitter's offset and drift, and the time offset of the elements
              (greater than 0: the spacecraft is late)
  skyline     a horizon mask, from where signals appear and vanish (locked), and how long
              the receiver takes to lock

The noise of samples is taken as correlated from one to the next, and levels are
predicted under a clear sky. What is left out (outliers, dropouts, a saturated receiver,
rain by what was logged or by the look of it) is counted, and it is said what the data
cannot tell apart. What stands out is offered as values for the scenario, with the
margin in the middle of the log and the bytes of the window's passes before and after
where they change them.`,
		Example: `  slantwise log fit rehearsal.csv --spacecraft "Wagtail 1" --station "Skerry Point" --mode safe
  slantwise log fit --entry all`,
		RunE: func(cmd *cobra.Command, _ []string) error { return runLogFit(cmd.Context(), env, &o) },
	}
	o.in.addTo(cmd)
	cmd.Args = func(cmd *cobra.Command, args []string) error {
		switch {
		case len(args) == 1 && len(o.entries) == 0:
			o.in.file = args[0]
			return nil
		case len(args) == 0 && len(o.entries) > 0:
			return nil
		}
		return inputErrorf("%s takes one FILE of measurements or, with --entry, passes of the logbook", cmd.CommandPath())
	}
	fs := cmd.Flags()
	fs.StringSliceVar(&o.entries, "entry", nil, "`NUMBER` of a pass of the logbook, or all; may be repeated")
	fs.StringVar(&o.book, "book", defaultBook, "`FILE` of the logbook")
	addNumber(fs, &o.points, "mask-points", "how many points the mask has, `N` evenly around (left out: as many of 36 as the log carries)")
	fs.BoolVar(&o.offers, "offers", false, "with --format csv: the offered values in place of the fits")
	addFormat(cmd, &o.format)
	return cmd
}

func runLogFit(ctx context.Context, env *Env, o *logFitOptions) error {
	knots := 0
	if o.points != nil {
		if knots = int(*o.points); float64(knots) != *o.points || knots < 1 || knots > 72 {
			return inputErrorf("--mask-points: %g is not allowed; it must be a whole number from 1 to 72", *o.points)
		}
	}
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	groups, err := o.groups(ctx, env, s)
	if err != nil {
		return err
	}
	answer := newLogFitAnswer()
	var fitted []*groupFit
	for _, g := range groups {
		f := newGroupFit(g)
		f.fit()
		f.rows(answer.fits)
		fitted = append(fitted, f)
	}
	skylines := fitSkylines(fitted, knots)
	for _, h := range skylines {
		h.rows(answer.fits)
	}
	if err := answer.offer(s, fitted, skylines); err != nil {
		return err
	}
	return answer.write(env, o.format, o.offers)
}
