package cli

import (
	"context"
	"fmt"
	"strings"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/planfiles"
	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/verify"
)

// onePlan is the file that a command judges.
func onePlan(into *string) cobra.PositionalArgs {
	return func(cmd *cobra.Command, args []string) error {
		if len(args) != 1 {
			return inputErrorf("%s takes the CSV file of a plan; %d given", cmd.CommandPath(), len(args))
		}
		*into = args[0]
		return nil
	}
}

func newContactsVerify(env *Env, source *planSource) *cobra.Command {
	var file string
	var f format
	cmd := &cobra.Command{
		Use:   "verify PLAN.csv",
		Short: "Whether a contact plan keeps every rule, and what it is worth",
		Long: `Judge a plan, one of contacts or one made by hand: every rule of the problem that it
breaks, and its value worked out anew. The check shares nothing with the search. A plan
needs the columns station, antenna, spacecraft, start_utc and end_utc; it may have the
others of contacts --format csv. The windows are the passes of the scenario, or those of
--windows.

Exit codes: 0 the plan keeps all rules, 1 it breaks some, 2 the input is wrong.`,
		Example: `  slantwise contacts verify plan.csv`,
		Args:    onePlan(&file),
		RunE: func(cmd *cobra.Command, _ []string) error {
			return runContactsVerify(cmd.Context(), env, source, file, f)
		},
	}
	addFormat(cmd, &f)
	return cmd
}

// planFromFile finds the contacts of a file in the problem. They are taken as what holds,
// so that fixed ones need no other proof.
func (p *planProblem) planFromFile(file string) (contacts.Plan, error) {
	rows, err := readPlanFile(file, planfiles.Plan)
	if err != nil {
		return contacts.Plan{}, err
	}
	plain := make([]contacts.PlanRow, len(rows))
	for i := range rows {
		plain[i] = rows[i].PlanRow
	}
	list, err := p.FromRows(plain)
	if err != nil {
		return contacts.Plan{}, &InputError{Err: err}
	}
	return contacts.Plan{Contacts: list}, nil
}

func runContactsVerify(ctx context.Context, env *Env, source *planSource, file string, f format) error {
	p, err := source.problem(ctx, env)
	if err != nil {
		return err
	}
	plan, err := p.planFromFile(file)
	if err != nil {
		return err
	}
	breaches := verify.Plan(p.Problem, plan)
	worth := verify.Worth(p.Problem, plan)
	rows := p.Rows(plan, worth)
	if f == formatJSON {
		err = writeJSON(env.Out, struct {
			Kept     bool            `json:"kept"`
			Value    float64         `json:"value"`
			Worth    contacts.Worth  `json:"worth"`
			Contacts int             `json:"contacts"`
			Breaches []verify.Breach `json:"breaches"`
			Notes    []string        `json:"notes"`
		}{len(breaches) == 0, worth.Value, worth, len(plan.Contacts), breaches, append([]string{}, p.notes...)})
	} else {
		out := &sheet{name: "breaches", columns: []sheetColumn{wordsAs("rule", "rule"), wordsAs("contacts", "contacts"), wordsAs("found", "found")}, notes: p.notes}
		for _, b := range breaches {
			out.rows = append(out.rows, []any{b.Rule, strings.Join(contactNames(rows, b.Contacts), "; "), b.Text})
		}
		err = out.write(env, f)
	}
	if err != nil {
		return err
	}
	if len(breaches) > 0 {
		return fmt.Errorf("the plan of %s breaks rules in %d places", file, len(breaches))
	}
	env.note("the plan keeps all rules: %d contacts, value %s", len(plan.Contacts), fixed(worth.Value, 0))
	return nil
}

// contactNames returns what contacts of a plan are called in its rows.
func contactNames(rows []contacts.Row, places []int) []string {
	out := []string{}
	for _, i := range places {
		for k := range rows {
			if rows[k].PlanContact == i {
				out = append(out, rows[k].Contact)
				break
			}
		}
	}
	return out
}
