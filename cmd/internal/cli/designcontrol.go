package cli

import (
	"slices"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/tolerance"
	"slantwise/station/pass"
)

type controlOptions struct {
	who    linkNames
	at     time.Time
	stated statedOptions
	format format
}

func newDesignControl(env *Env) *cobra.Command {
	var o controlOptions
	cmd := &cobra.Command{
		Use:   "design-control",
		Short: "Every term of a link with its tolerances, and the margins that follow",
		Long: `Write the design control table of a link (with --uplink of the other direction) at one geometry: every term of the margin with
its design value, favourable and adverse tolerance, law, mean and variance from the
scenario's design_control, then the nominal, mean, worst-case, root-sum-square and
mean-less-sigmas margins against its criteria. Terms without a tolerance are taken as
exact. Criteria are the scenario's own; no standard stands behind them here.`,
		Example: `  slantwise design-control --spacecraft "Wagtail 1" --station "Skerry Point" --mode safe --range-km 1200 --elevation-deg 20
  slantwise design-control --spacecraft "Wagtail 1" --station "Skerry Point" --uplink command --mode slow --range-km 1200 --elevation-deg 20`,
		Args: noArgs,
	}
	fs := cmd.Flags()
	addLinkNames(cmd, &o.who)
	addTime(fs, &o.at, "at", "one instant")
	rangeKm := fs.Float64("range-km", 0, "stated slant range in `KM`, with --elevation-deg")
	elevation := fs.Float64("elevation-deg", 0, "stated elevation in `DEG`, with --range-km")
	addFormat(cmd, &o.format)
	cmd.RunE = func(cmd *cobra.Command, _ []string) error {
		if cmd.Flags().Changed("range-km") {
			o.stated.rangeKm = rangeKm
		}
		if cmd.Flags().Changed("elevation-deg") {
			o.stated.elevationDeg = elevation
		}
		return runDesignControl(env, &o)
	}
	return cmd
}

func runDesignControl(env *Env, o *controlOptions) error {
	need := needOrbits
	switch {
	case o.stated.given() == !o.at.IsZero():
		return inputErrorf("the table is of one geometry: give --at, or --range-km and --elevation-deg")
	case o.stated.given() && (o.stated.rangeKm == nil || o.stated.elevationDeg == nil):
		return inputErrorf("a stated geometry needs --range-km and --elevation-deg, both")
	case o.stated.given():
		need = needRadio
	}
	s, err := env.load(need)
	if err != nil {
		return err
	}
	flight := pass.Window{}
	if !o.stated.given() {
		flight = flightAt(o.at)
	}
	c, err := chooseLink(s, o.who, flight)
	if err != nil {
		return err
	}
	var r *budgetResult
	if o.stated.given() {
		r, err = statedBudget(s, c, &o.stated)
	} else {
		r, err = budgetAt(s, c, o.at)
	}
	if err != nil {
		return err
	}
	table, err := designControl(s, c, r.samples[0])
	if err != nil {
		return &InputError{Err: err}
	}
	return controlSheet(table, r.notes).write(env, o.format)
}

// designControl works the table of a budget out.
func designControl(s *scenario.Scenario, c *chosenLink, b *downlink.Budget) (*tolerance.Table, error) {
	items, err := tolerance.FromBudget(b, c.transmitter.ImplementationLoss, spreadsOf(s, c))
	if err != nil {
		return nil, err
	}
	return tolerance.Evaluate(items, s.Control.Criteria)
}

// controlSheet lays the table out: a row a term, then a row a margin, then a row a
// criterion.
func controlSheet(t *tolerance.Table, notes []downlink.Note) *sheet {
	out := &sheet{name: "rows", columns: []sheetColumn{
		wordsAs("row", "row"), wordsAs("name", "name"), numbersAs("design_db", "design dB", 4), numbersAs("favourable_db", "favourable dB", 4),
		numbersAs("adverse_db", "adverse dB", 4), wordsAs("law", "law"), numbersAs("mean_db", "mean dB", 4), numbersAs("variance_db2", "variance dB2", 6),
		numbersAs("margin_db", "margin dB", 4), numbersAs("least_db", "least dB", 4), numbersAs("distance_db", "over dB", 4), wordsAs("outcome", "outcome"), wordsAs("source", "from"),
	}}
	for _, r := range t.Rows {
		out.rows = append(out.rows, []any{"term", r.Name, float64(r.Design), float64(r.Favourable), float64(r.Adverse), r.Law.String(),
			float64(r.Mean), r.Variance, none, none, none, "", r.Source})
	}
	margin := func(name string, v float64) {
		out.rows = append(out.rows, []any{"margin", name, none, none, none, "", none, none, v, none, none, "", ""})
	}
	margin("nominal", float64(t.Nominal))
	margin("mean", float64(t.Mean))
	margin("sigma", float64(t.Sigma))
	margin("mean less 2 sigma", float64(t.MeanLess(2)))
	margin("mean less 3 sigma", float64(t.MeanLess(3)))
	margin("worst case", float64(t.Worst))
	margin("worst case, root sum square", float64(t.WorstRSS))
	margin("worst case, root sum square from the mean", float64(t.WorstRSSFromMean))
	for _, v := range t.Verdicts {
		outcome := "fail"
		if v.Met {
			outcome = "pass"
		}
		out.rows = append(out.rows, []any{"criterion", v.Name + ": " + v.Statement.String(), none, none, none, "", none, none,
			float64(v.Reached), float64(v.Least), float64(v.Distance), outcome, v.Source})
	}
	for _, n := range notes {
		out.notes = append(out.notes, n.Kind.String()+": "+n.Text)
	}
	return out
}

// termsOfOneDirection are those that a budget of the other direction never has.
var termsOfOneDirection = map[downlink.Direction][]string{
	downlink.Down: {"EIRP", "transmit antenna gain", "feed loss"},
	downlink.Up:   {"transmit line loss", "receive antenna gain"},
}

// spreadsOf are the scenario's tolerances without those of terms that only the other
// direction has: of a spacecraft with uplinks one list serves both.
func spreadsOf(s *scenario.Scenario, c *chosenLink) []tolerance.Spread {
	if len(c.spacecraft.Uplinks) == 0 {
		return s.Control.Spreads
	}
	other := termsOfOneDirection[downlink.Up]
	if c.uplink != nil {
		other = termsOfOneDirection[downlink.Down]
	}
	var out []tolerance.Spread
	for _, x := range s.Control.Spreads {
		if !slices.Contains(other, x.Term) || slices.ContainsFunc(c.link.Terms(), func(t downlink.TermInfo) bool { return t.Name == x.Term }) {
			out = append(out, x)
		}
	}
	return out
}
