package cli

import (
	"context"
	"fmt"
	"strings"

	"github.com/spf13/cobra"

	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/explain"
	"slantwise/downlink/contacts/solve"
	"slantwise/downlink/contacts/verify"
)

// What contacts explain may write.
var explainSheets = []string{"windows", "limits", "recorder"}

type explainOptions struct {
	*planSource
	file       string
	iterations int
	show       string
	format     format
}

func newContactsExplain(env *Env, source *planSource) *cobra.Command {
	o := explainOptions{planSource: source}
	cmd := &cobra.Command{
		Use:   "explain [PLAN.csv]",
		Short: "Why each pass is not taken, what taking it would cost, what limits are worth",
		Long: `Say of a contact plan why it is as it is. Without a plan one is made first.

  --show windows   each window that is not taken: what is in its way or which rule forbids
                   it, and what taking it would cost at most
  --show limits    what more of each limit that binds, and a second antenna, would bring at
                   least; no plan gains more than the last column says
  --show recorder  data of each spacecraft over the plan: received, lost, backlog, age at
                   the station

Costs come from plans that were tried: a better way may exist.`,
		Example: `  slantwise contacts explain plan.csv
  slantwise contacts explain plan.csv --show recorder`,
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) > 1 {
				return inputErrorf("%s takes one plan; %d given", cmd.CommandPath(), len(args))
			}
			o.file = strings.Join(args, "")
			return nil
		},
		RunE: func(cmd *cobra.Command, _ []string) error { return runContactsExplain(cmd.Context(), env, &o) },
	}
	cmd.Flags().StringVar(&o.show, "show", "windows", "`WHAT` to write: windows, limits or recorder")
	cmd.Flags().IntVar(&o.iterations, "iterations", 10, "`ROUNDS` of the search where no plan is given")
	addFormat(cmd, &o.format)
	return cmd
}

func runContactsExplain(ctx context.Context, env *Env, o *explainOptions) error {
	show, err := pick("show", o.show, explainSheets, func(s *string) string { return *s })
	if err != nil {
		return inputErrorf("--show: %q is not allowed; it must be %s", o.show, quotedList(explainSheets))
	}
	if o.iterations < 1 {
		return inputErrorf("--iterations: %d is not allowed; it must be 1 or more", o.iterations)
	}
	p, err := o.problem(ctx, env)
	if err != nil {
		return err
	}
	plan, err := o.plan(ctx, env, p)
	if err != nil {
		return err
	}
	var out *sheet
	switch *show {
	case "limits":
		out, err = p.limitsSheet(ctx, plan)
	case "recorder":
		out, err = p.recorderSheet(plan)
	default:
		out, err = p.windowsSheet(ctx, plan)
	}
	if err != nil {
		return err
	}
	out.notes = append(out.notes, p.notes...)
	return out.write(env, o.format)
}

// plan reads the plan, which must keep the rules, or makes one.
func (o *explainOptions) plan(ctx context.Context, env *Env, p *planProblem) (contacts.Plan, error) {
	if o.file == "" {
		r, err := solve.Solve(ctx, p.Problem, solve.Options{Rounds: o.iterations, Progress: env.tellSearch()})
		if err != nil {
			return contacts.Plan{}, &InputError{Err: err}
		}
		return r.Plan, nil
	}
	plan, err := p.planFromFile(o.file)
	if err != nil {
		return plan, err
	}
	if breaches := verify.Plan(p.Problem, plan); len(breaches) > 0 {
		return plan, inputErrorf("%s: the plan breaks rules in %d places, the first: %w; see slantwise contacts verify", o.file, len(breaches), breaches[0])
	}
	return plan, nil
}

func (p *planProblem) windowsSheet(ctx context.Context, plan contacts.Plan) (*sheet, error) {
	list, err := explain.Windows(ctx, p.Problem, plan, nil)
	if err != nil {
		return nil, &InputError{Err: err}
	}
	rows := p.Rows(plan, verify.Worth(p.Problem, plan))
	out := &sheet{name: "windows", columns: []sheetColumn{
		wordsAs("window", "window"), wordsAs("possible", "possible"), numbersAs("worth", "worth", 0), numbersAs("cost", "costs at most", 0), wordsAs("instead", "in its way"), wordsAs("why", "why"),
	}}
	for _, u := range list {
		cost, possible := none, "no"
		if u.Priced {
			cost = u.Cost
		}
		if u.Possible {
			possible = "yes"
		}
		out.rows = append(out.rows, []any{u.Name, possible, u.Worth, cost, strings.Join(contactNames(rows, u.Instead), "; "), u.Text})
	}
	return out, nil
}

// roundsALimit is the work for each limit.
const roundsALimit = 3

func (p *planProblem) limitsSheet(ctx context.Context, plan contacts.Plan) (*sheet, error) {
	list, err := explain.Limits(ctx, p.Problem, plan, roundsALimit)
	if err != nil {
		return nil, &InputError{Err: err}
	}
	out := &sheet{name: "limits", columns: []sheetColumn{
		wordsAs("limit", "limit"), wordsAs("more", "more of it"), numbersAs("gain", "gains at least", 0), numbersAs("at_most", "at most", 0),
		numbersAs("hours", "hours of contact", 3), numbersAs("gain_per_hour", "an hour", 0),
	}}
	for _, w := range list {
		hourly, hours := none, none
		if w.Hours > 0 {
			hours, hourly = w.Hours, w.Gain/w.Hours
		}
		out.rows = append(out.rows, []any{w.Name, w.More, w.Gain, w.AtMost, hours, hourly})
	}
	return out, nil
}

func (p *planProblem) recorderSheet(plan contacts.Plan) (*sheet, error) {
	out := &sheet{name: "recorder", columns: []sheetColumn{
		wordsAs("spacecraft", "spacecraft"), wordsAs("data", "data"), numbersAs("made_bytes", "made B", 0), numbersAs("received_bytes", "received B", 0), numbersAs("lost_full_bytes", "lost full B", 0),
		numbersAs("on_board_end_bytes", "on board B", 0), numbersAs("age_at_station_median_s", "median s", 0), numbersAs("age_at_station_p95_s", "95 % s", 0), numbersAs("age_at_station_worst_s", "worst s", 0),
	}}
	for i := range p.scenario.Spacecraft {
		c := &p.scenario.Spacecraft[i]
		if c.Recorder == nil {
			continue
		}
		_, r, err := p.throughRecorder(i, plan)
		if err != nil {
			return nil, &InputError{Err: fmt.Errorf("spacecraft %s: %w", c.Name, err)}
		}
		for _, k := range r.Classes {
			a := k.Latency.AtStation
			out.rows = append(out.rows, []any{c.Name, k.Name, k.Made, k.Received, k.LostFull, k.OnBoardEnd, a.Median, a.P95, a.Worst})
		}
	}
	if len(out.rows) == 0 {
		out.notes = append(out.notes, "no spacecraft of the plan has a recorder")
	}
	return out, nil
}
