package cli

import (
	"context"
	"fmt"

	"github.com/spf13/cobra"

	"slantwise/downlink/sizing"
)

type dishOptions struct {
	show   string
	days   *float64 // nil: the scenario's
	format format
}

// What the command may write.
var dishSheets = []string{"answer", "trade"}

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
  --show trade   bytes, margins, availability, gaps and price over the diameter`,
		Example: `  slantwise dish --days 28
  slantwise dish --days 28 --show trade --format csv`,
		Args: noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error { return runDish(cmd.Context(), env, &o) },
	}
	cmd.Flags().StringVar(&o.show, "show", "answer", "`WHAT` to write: answer or trade")
	addNumber(cmd.Flags(), &o.days, "days", "how many `DAYS` are flown, in place of the scenario's")
	addFormat(cmd, &o.format)
	return cmd
}

func runDish(ctx context.Context, env *Env, o *dishOptions) error {
	show, err := pick("show", o.show, dishSheets, func(s *string) string { return *s })
	if err != nil {
		return inputErrorf("--show: %q is not allowed; it must be %s", o.show, quotedList(dishSheets))
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
	a, err := d.answer(env)
	if err != nil {
		return err
	}
	if *show == "trade" {
		return d.withNotes(d.tradeSheet(a)).write(env, o.format)
	}
	return d.writeAnswer(env, a, o.format)
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
			o.MarginDB, o.ShareMarginDB, o.AvailabilityPercent, o.WorstMonthAvailabilityPercent, o.LongestGapH, o.LatencyH, o.Price, met})
	}
	return out
}

// metres writes a diameter to the centimetre.
func metres(d float64) string { return fmt.Sprintf("%.2f m", d) }
