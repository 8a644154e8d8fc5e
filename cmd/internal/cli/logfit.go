package cli

import (
	"context"
	"errors"
	"fmt"
	"math"
	"time"

	"github.com/spf13/cobra"

	"slantwise/downlink/measured"
	"slantwise/orbit/elements"
	"slantwise/orbit/unit"
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
cannot tell apart. What stands out is offered as values for the scenario, each with the
margin in the middle of the log and the bytes of the window's passes before and after.`,
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

type whoseOptions struct {
	in                logInput
	candidates        string
	noiseHz, offsetHz float64
	format            format
}

func newLogWhose(env *Env) *cobra.Command {
	var o whoseOptions
	cmd := &cobra.Command{
		Use:   "whose FILE",
		Short: "Which of several element sets the logged frequency belongs to",
		Long: `Rank the objects of a file of element sets by how well each explains the frequencies in
FILE, all equally likely before. The transmitter's offset is left open within
--offset-hz (one standard deviation), and --noise-hz is the standard deviation of a
sample with what the elements miss. It says that it cannot tell where no object has 95 %
or the best does not explain the log.`,
		Example: `  slantwise log whose rehearsal.csv --candidates plans/summer.tle --spacecraft "Wagtail 1" --station "Skerry Point"`,
		RunE:    func(*cobra.Command, []string) error { return runLogWhose(env, &o) },
	}
	o.in.addTo(cmd)
	fs := cmd.Flags()
	fs.StringVar(&o.candidates, "candidates", "", "`FILE` of element sets (TLE or OMM)")
	fs.Float64Var(&o.noiseHz, "noise-hz", 100, "standard deviation of a sample in `HZ`")
	fs.Float64Var(&o.offsetHz, "offset-hz", 5000, "standard deviation of the transmitter's offset in `HZ`")
	addFormat(cmd, &o.format)
	return cmd
}

func runLogWhose(env *Env, o *whoseOptions) error {
	switch {
	case o.candidates == "":
		return inputErrorf("--candidates: left out; give a file of element sets")
	case !(o.noiseHz > 0 && o.noiseHz < 1e9):
		return inputErrorf("--noise-hz: %g is not allowed; it must be greater than 0", o.noiseHz)
	case !(o.offsetHz > 0 && o.offsetHz < 1e9):
		return inputErrorf("--offset-hz: %g is not allowed; it must be greater than 0", o.offsetHz)
	}
	sets, warnings, err := elements.ReadFile(o.candidates)
	if err != nil {
		return &InputError{Err: err}
	}
	for _, w := range warnings {
		env.note("warning: %s", printable(w.String()))
	}
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	l, _, err := o.in.readLog(env, s)
	if err != nil {
		return err
	}
	if !l.Has(measured.FrequencyHz) {
		return inputErrorf("%s: there is no frequency in it; give a column frequency_hz", o.in.file)
	}
	craft, err := pick("spacecraft", o.in.who.spacecraft, s.Spacecraft, spacecraftName)
	if err != nil {
		return err
	}
	site, err := pick("station", o.in.who.station, s.Stations, stationName)
	if err != nil {
		return err
	}
	sender, err := pick("transmitter", o.in.who.transmitter, craft.Transmitters, transmitterName)
	if err != nil {
		return err
	}
	first, last := l.Samples[0].At, l.Samples[len(l.Samples)-1].At
	var candidates []measured.Candidate
	var failed []error
	for _, set := range sets {
		name := fmt.Sprintf("%s (%d, %s)", set.Name, set.CatalogNumber, utc(set.Epoch))
		eph, err := newEphemerisOf(set, first, last, s.Earth)
		if err != nil {
			env.note("%s is left out: %v", printable(name), err)
			failed = append(failed, err)
			continue
		}
		p := &measured.Prediction{Orbit: eph, Frame: site.Site.Frame(), Carrier: func(time.Time) unit.Frequency { return sender.Frequency }}
		points, err := p.Over(l.Samples)
		if err != nil {
			return err
		}
		candidates = append(candidates, measured.Candidate{Name: name, Points: points})
	}
	if len(candidates) == 0 {
		return &InputError{Err: fmt.Errorf("%s: no set can be flown: %w", o.candidates, errors.Join(failed...))}
	}
	ranked, answer := measured.Rank(candidates, measured.RankOptions{NoiseHz: o.noiseHz, OffsetHz: o.offsetHz})
	return whoseSheet(ranked, answer).write(env, o.format)
}

func whoseSheet(ranked []measured.Ranked, answer bool) *sheet {
	out := &sheet{name: "candidates", columns: []sheetColumn{wordsAs("object", "object"), numbersAs("probability", "probability", 4), numbersAs("rms_hz", "RMS Hz", 1),
		numbersAs("offset_hz", "offset Hz", 1), numbersAs("samples", "samples", 0), numbersAs("heard_below_horizon", "heard below horizon", 0), wordsAs("explains", "explains the log")}}
	for _, r := range ranked {
		says := "no"
		if r.Explains {
			says = "yes"
		}
		out.rows = append(out.rows, []any{r.Name, r.Probability, r.RMSHz, r.OffsetHz, float64(r.Samples), float64(r.Below), says})
	}
	best := ranked[0]
	switch {
	case answer:
		out.notes = append(out.notes, fmt.Sprintf("it is %s, if it is one of these and each was equally likely before", best.Name))
	case !best.Explains:
		out.notes = append(out.notes, "cannot tell: no candidate explains the log within the stated noise, so it may be none of them")
	default:
		out.notes = append(out.notes, fmt.Sprintf("cannot tell: the best has %.0f %%, and 95 %% are asked for; another pass will tell more", math.Floor(100*best.Probability)))
	}
	return out
}
