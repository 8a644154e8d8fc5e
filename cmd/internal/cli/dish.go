package cli

import (
	"bytes"
	"context"
	"fmt"
	"slices"

	"github.com/spf13/cobra"

	"slantwise/downlink/sizing"
	"slantwise/orbit"
	"slantwise/orbit/elements"
)

type dishOptions struct {
	show, axis string
	report     string   // folder; empty: none
	elementSet string   // file; empty: none
	days       *float64 // nil: the scenario's
	diameter   *float64 // nil: see dishStudy.chosen
	pdf        string
	static     bool
	format     format
}

// What the command may write.
var dishSheets = []string{"answer", "trade", "map", "sensitivities", "chances", "limits"}

func newDish(env *Env) *cobra.Command {
	o := dishOptions{}
	cmd := &cobra.Command{
		Use:   "dish",
		Short: "Which dish the stations need, from a year of their passes",
		Long: `Answer the question of the scenario's sizing block: whether the antennas suffice, the
least diameter that meets all requirements, which of them binds, and beyond which
diameter more dish stops helping. The year is flown on a kept orbit, every pass planned
by the spacecraft's modes and rate rules, and what is sent counts by the statistics of
the weather.

  --show answer  what each requirement says (JSON: the whole answer)
  --show trade   bytes, margins, availability, gaps and price over the diameter
  --show map     bytes a day over diameter and a second parameter, and where all is just met
  --show sensitivities  what a dB, a kelvin and a degree cost, in bytes and in dish
  --show chances the probability that the dish meets all, with the tolerances of design_control
  --show limits  what the dish allows: power, rate, range, altitude, G/T, least elevation

Sensitivities and chances are of the least dish that meets all, limits of the scenario's
own dishes and of that one; --diameter-m asks about another.`,
		Example: `  slantwise dish --days 28
  slantwise dish --days 28 --show trade --format csv
  slantwise dish --days 28 --report dish --pdf dish.pdf
  slantwise dish --days 28 --show map --axis noise
  slantwise dish --days 28 --show sensitivities --diameter-m 9`,
		Args: noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error { return runDish(cmd.Context(), env, &o) },
	}
	cmd.Flags().StringVar(&o.show, "show", "answer", "`WHAT` to write: answer, trade, map, sensitivities, chances or limits")
	cmd.Flags().StringVar(&o.axis, "axis", string(sizing.PowerAxis), "second parameter of the map: `power`, elevation, noise or frequency")
	addNumber(cmd.Flags(), &o.diameter, "diameter-m", "ask about a dish of so many `METRES`")
	addNumber(cmd.Flags(), &o.days, "days", "how many `DAYS` are flown, in place of the scenario's")
	cmd.Flags().StringVar(&o.report, "report", "", "write a page with charts, and its numbers as CSV and JSON, into the folder `DIR`")
	cmd.Flags().BoolVar(&o.static, "static", false, "write the page of --report without script, its charts drawn in it")
	cmd.Flags().StringVar(&o.pdf, "pdf", "", "write the answer with its charts into the PDF `FILE`, for print")
	cmd.Flags().StringVar(&o.elementSet, "element-set", "", "write the element set of the orbit that is flown, without drag, into `FILE` as two lines, for anyone to check")
	addFormat(cmd, &o.format)
	return cmd
}

func runDish(ctx context.Context, env *Env, o *dishOptions) error {
	show, err := pick("show", o.show, dishSheets, func(s *string) string { return *s })
	if err != nil {
		return inputErrorf("--show: %q is not allowed; it must be %s", o.show, quotedList(dishSheets))
	}
	if err := o.check(); err != nil {
		return err
	}
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	if o.days != nil && s.Sizing != nil {
		s.Sizing.Days = *o.days
	}
	d, err := newDishStudy(ctx, env, s)
	if err != nil {
		return err
	}
	if o.elementSet != "" {
		if err := d.writeElementSet(env, o.elementSet); err != nil {
			return err
		}
	}
	a, err := d.answer(env)
	if err != nil {
		return err
	}
	if o.report != "" || o.pdf != "" {
		if err := writeDishReport(ctx, env, d, a, o); err != nil {
			return err
		}
	}
	if *show == "answer" {
		return d.writeAnswer(env, a, o.format)
	}
	out, err := d.sheet(ctx, env, a, *show, o)
	if err != nil {
		return err
	}
	return d.withNotes(out).write(env, o.format)
}

// check says what is wrong with the flags.
func (o *dishOptions) check() error {
	if !slices.Contains(sizing.Axes, sizing.Axis(o.axis)) {
		return inputErrorf("--axis: %q is not allowed; it must be power, elevation, noise or frequency", o.axis)
	}
	if o.static && o.report == "" {
		return inputErrorf("--static goes with --report")
	}
	if err := checkDays(o.days); err != nil {
		return err
	}
	if m := o.diameter; m != nil && !(*m > 0 && *m <= 1000) {
		return inputErrorf("--diameter-m: %g m is not allowed; it must be greater than 0 and at most 1000 m", *m)
	}
	if used := []string{"sensitivities", "chances", "limits"}; o.diameter != nil && o.report == "" && o.pdf == "" && !slices.Contains(used, o.show) {
		return inputErrorf("--diameter-m goes with --show sensitivities, chances or limits, --report or --pdf; --show %s is about all diameters", o.show)
	}
	return nil
}

// checkDays says what is wrong with --days.
func checkDays(days *float64) error {
	if d := days; d != nil && !(*d >= sizing.LeastDays && *d <= sizing.MostDays) {
		return inputErrorf("--days: %g d is not allowed; it must be %g to %g d", *d, sizing.LeastDays, sizing.MostDays)
	}
	return nil
}

// sheet is one of dishSheets but the answer.
func (d *dishStudy) sheet(ctx context.Context, env *Env, a *sizing.Answer, show string, o *dishOptions) (*sheet, error) {
	if (show == "chances" || show == "limits") && len(a.Verdicts) == 0 {
		return nil, inputErrorf("sizing.requirements: nothing is required, and --show %s is about requirements; give one", show)
	}
	switch show {
	case "map":
		p, err := d.plane(env, sizing.Axis(o.axis))
		if err != nil {
			return nil, err
		}
		return mapSheet(p), nil
	case "sensitivities":
		list, err := d.sensitivities(env, a, o.diameter)
		if err != nil {
			return nil, err
		}
		return sensitivitySheet(list), nil
	case "chances":
		c, err := d.chance(env, a, o.diameter)
		if err != nil {
			return nil, err
		}
		if c == nil {
			return nil, inputErrorf("design_control: the scenario gives no tolerances, and without them there is no probability; add some")
		}
		return chanceSheet(c), nil
	case "limits":
		return d.limitSheet(ctx, env, a, o.diameter)
	}
	return d.tradeSheet(a), nil
}

func (d *dishStudy) answer(env *Env) (*sizing.Answer, error) {
	bar := env.startShares("trying diameters")
	defer bar.stop()
	a, err := d.study.Answer(d.sizing.Range, bar.tell)
	if err != nil {
		return nil, &InputError{Err: err}
	}
	return a, nil
}

// writeElementSet writes the kept orbit's mean elements at their epoch.
func (d *dishStudy) writeElementSet(env *Env, file string) error {
	var b bytes.Buffer
	warnings, err := elements.WriteTLE(&b, []orbit.Elements{d.kept.Elements()})
	if err != nil {
		return &InputError{Err: fmt.Errorf("spacecraft %s: %w", d.spacecraft.Name, err)}
	}
	for _, w := range warnings {
		env.note("warning: %s", printable(w.String()))
	}
	return writeWhole(file, b.Bytes())
}

// withNotes gives a sheet the notes of the study.
func (d *dishStudy) withNotes(s *sheet) *sheet {
	for _, n := range d.notes {
		s.notes = append(s.notes, n.Kind.String()+": "+n.Text)
	}
	return s
}

// tradeSheet is the trade curve, a row a diameter.
func (d *dishStudy) tradeSheet(a *sizing.Answer) *sheet {
	out := &sheet{name: "trade", columns: []sheetColumn{
		numbersAs("diameter_m", "diameter m", 4), numbersAs("bytes_per_day", "bytes a day", 0), numbersAs("clear_sky_bytes_per_day", "clear sky", 0),
		numbersAs("worst_week_bytes_per_day", "worst week", 0), numbersAs("worst_month_bytes_per_day", "worst month", 0),
		numbersAs("margin_at_elevation_db", "margin dB", 3), numbersAs("margin_for_contact_share_db", "margin for share dB", 3),
		numbersAs("availability_percent", "available %", 4), numbersAs("worst_month_availability_percent", "worst month %", 4),
		numbersAs("longest_gap_h", "longest gap h", 3), numbersAs("latency_p95_h", "95 % age h", 3), numbersAs("price", "price", 2), wordsAs("satisfies", "all met"),
		numbersAs("mount_lost_bytes_per_day", "mount takes", 0), numbersAs("not_followed_s_per_day", "not followed s", 1),
	}}
	for _, o := range a.Trade {
		met := "yes"
		for i := range a.Verdicts {
			if !a.Verdicts[i].Met(o) {
				met = "no"
			}
		}
		if len(a.Verdicts) == 0 {
			met = ""
		}
		out.rows = append(out.rows, []any{o.Variant.Diameter.Metres(), o.BytesPerDay, o.ClearBytesPerDay, o.WorstWeekBytesPerDay, o.WorstMonthBytesPerDay,
			o.MarginDB, o.ShareMarginDB, o.AvailabilityPercent, o.WorstMonthAvailabilityPercent, o.LongestGapH, o.LatencyH, o.Price, met, o.MountLostBytesPerDay, o.NotFollowedSPerDay})
	}
	return out
}

// metres writes a diameter to the centimetre.
func metres(d float64) string { return fmt.Sprintf("%.2f m", d) }
