package cli

import (
	"math"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/planfiles"
	"slantwise/downlink/contacts"
	"slantwise/downlink/contacts/change"
)

func newContactsCompare(env *Env) *cobra.Command {
	var was, is string
	var changed bool
	var f format
	cmd := &cobra.Command{
		Use:   "compare PLAN.csv OTHER.csv",
		Short: "How two contact plans differ: contacts kept, moved, dropped and added",
		Long: `List the contacts of two plans as contacts --save writes them, in order of time. Contacts
of one request, spacecraft and antenna are the same where they share time. Volumes are
those that the files state.`,
		Example: `  slantwise contacts compare plan.csv later.csv --changed`,
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) != 2 {
				return inputErrorf("%s takes two plans, the one before and the one after; %d given", cmd.CommandPath(), len(args))
			}
			was, is = args[0], args[1]
			return nil
		},
		RunE: func(*cobra.Command, []string) error { return runContactsCompare(env, was, is, changed, f) },
	}
	cmd.Flags().BoolVar(&changed, "changed", false, "leave out contacts that are kept as they were")
	addFormat(cmd, &f)
	return cmd
}

// filedPlan is a plan as a file tells it.
type filedPlan struct {
	problem *contacts.Problem
	plan    contacts.Plan
	bytes   []float64 // by contact, NaN where the file says nothing
}

func readFiledPlan(file string) (*filedPlan, error) {
	rows, err := readPlanFile(file, planfiles.Plan)
	if err != nil {
		return nil, err
	}
	start := time.Time{}
	for _, r := range rows {
		if start.IsZero() || r.Start.Before(start) {
			start = r.Start
		}
	}
	p, plan, err := planOfRows(rows, start.Truncate(time.Second))
	if err != nil {
		return nil, &InputError{Err: err}
	}
	out := &filedPlan{p, plan, make([]float64, len(plan.Contacts))}
	for i, c := range plan.Contacts {
		first := &rows[c.Candidate] // windows are in the order of the rows
		out.bytes[i] = first.VolumeBytes
		for k := range rows {
			if k != c.Candidate && rows[k].Contact != "" && rows[k].Contact == first.Contact {
				out.bytes[i] += rows[k].VolumeBytes
			}
		}
	}
	return out, nil
}

func (p *filedPlan) volume(contact int) float64 {
	if contact < 0 {
		return math.NaN()
	}
	return p.bytes[contact]
}

func runContactsCompare(env *Env, was, is string, changed bool, f format) error {
	a, err := readFiledPlan(was)
	if err != nil {
		return err
	}
	b, err := readFiledPlan(is)
	if err != nil {
		return err
	}
	out := &sheet{name: "changes", columns: []sheetColumn{
		wordsAs("kind", "kind"), wordsAs("request", "request"), wordsAs("spacecraft", "spacecraft"), wordsAs("station", "station"), wordsAs("antenna", "antenna"),
		wordsAs("was_start_utc", "was from UTC"), wordsAs("was_end_utc", "was to UTC"), wordsAs("is_start_utc", "is from UTC"), wordsAs("is_end_utc", "is to UTC"),
		numbersAs("was_bytes", "was B", 0), numbersAs("is_bytes", "is B", 0),
	}}
	count := map[change.Kind]int{}
	for _, d := range change.Compare(a.problem, a.plan, b.problem, b.plan) {
		count[d.Kind]++
		if changed && d.Kind == change.Kept {
			continue
		}
		out.rows = append(out.rows, []any{string(d.Kind), d.Request, d.Spacecraft, d.Station, d.Antenna,
			utc(d.WasStart), utc(d.WasEnd), utc(d.IsStart), utc(d.IsEnd), a.volume(d.WasContact), b.volume(d.IsContact)})
	}
	if err := out.write(env, f); err != nil {
		return err
	}
	env.note("%d kept, %d moved, %d dropped, %d added", count[change.Kept], count[change.Moved], count[change.Dropped], count[change.Added])
	return nil
}
