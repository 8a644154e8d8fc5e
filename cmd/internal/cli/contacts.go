package cli

import (
	"context"
	"os"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/planfiles"
	"slantwise/cmd/internal/scenario"
	"slantwise/downlink/contacts/solve"
)

// planSource says of what a contact plan is.
type planSource struct {
	windows string
	split   bool
	now     time.Time
	closed  []string
	inForce string
}

type contactsOptions struct {
	planSource
	limit      time.Duration
	iterations int
	change     *float64
	files      planOutputs
	format     format
}

func newContacts(env *Env) *cobra.Command {
	var o contactsOptions
	cmd := &cobra.Command{
		Use:   "contacts",
		Short: "Which contacts to take: a plan by bytes under the scenario's rules, with a proven bound",
		Long: `Plan the contacts of the window: which passes are taken, by which antenna, from when to
when, so that the plan is worth the most and keeps the rules of the scenario's block
contact_plan. Each pass counts by the bytes of its rate plan, in any part of it. The
bound is proven: no plan is worth more. The gap is the share by which it lies above.

With --windows the candidates come from a file, a row a window:
request,spacecraft,station,antenna,window_start_utc,window_end_utc,minimum_s,desired_s,
setup_s,teardown_s,value_per_s. The horizon is the scenario's window; where no scenario
is named or lies here, it is the time that the windows span.

The search ends with the proof, with --time-limit, counted from the start of the command,
or after so many --iterations: then the plan is the same on every machine. An interrupt
ends it, too: the best plan so far is written whole, which is said, and the exit code is 0.

--calendar and --calendars write iCalendar files (RFC 5545). A file that is there is
revised: events keep their UID, SEQUENCE counts the exports, a dropped contact follows as
cancelled. Events begin and end on whole seconds, rounded outwards.

With --in-force a plan is planned again: what is fixed or under way at --now stays, other
changes cost what the scenario's weights say, and the changes are listed.

Exit codes beside those of slantwise --help: contacts verify gives 1 where the plan breaks
a rule.`,
		Example: `  slantwise contacts --iterations 10
  slantwise contacts --iterations 10 --save plan.csv --calendar plan.ics --page plan.html --pdf plan.pdf
  slantwise contacts --iterations 10 --now 2026-09-15T12:00:00Z --in-force plan.csv --save later.csv`,
		Args: noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error { return runContacts(cmd.Context(), env, &o) },
	}
	ps := cmd.PersistentFlags()
	ps.StringVar(&o.windows, "windows", "", "CSV `FILE` of windows from outside, in place of the passes")
	ps.BoolVar(&o.split, "split", false, "a request may get several contacts, and a pass too")
	addTime(ps, &o.now, "now", "the instant of planning (left out: the start of the window)")
	ps.StringArrayVar(&o.closed, "closed", nil, "`FILE` of outages and reserved times, CSV or .ics, beside the scenario's (again for more)")
	fs := cmd.Flags()
	addDuration(fs, &o.limit, "time-limit", 20*time.Second, "how long the command may search, as 60s")
	fs.IntVar(&o.iterations, "iterations", 0, "end after so many `ROUNDS`, with the same plan everywhere (without --time-limit there is no other end)")
	ps.StringVar(&o.inForce, "in-force", "", "`FILE` of the plan in force, as --save writes it")
	addNumber(fs, &o.change, "change-price", "value that each change against the plan in force costs, in place of the scenario's weight")
	o.files.add(fs)
	addFormat(cmd, &o.format)
	cmd.PreRunE = func(cmd *cobra.Command, _ []string) error {
		if o.iterations < 0 {
			return inputErrorf("--iterations: %d is not allowed; it must be 1 or more", o.iterations)
		}
		if o.iterations > 0 && !cmd.Flags().Changed("time-limit") {
			o.limit = 0
		}
		return nil
	}
	cmd.AddCommand(newContactsVerify(env, &o.planSource), newContactsExplain(env, &o.planSource), newContactsCompare(env), newContactsSchema(env))
	return cmd
}

func runContacts(ctx context.Context, env *Env, o *contactsOptions) error {
	began, whole := time.Now(), ctx
	p, err := o.problem(ctx, env)
	if err != nil {
		return err
	}
	if o.change != nil {
		p.Weights.Change = *o.change
	}
	for _, why := range p.Unserved() {
		p.note("%v", why)
	}
	for _, r := range p.Remarks() {
		p.note("%s", r)
	}
	if o.limit > 0 {
		var cancel context.CancelFunc
		ctx, cancel = context.WithDeadline(ctx, began.Add(o.limit))
		defer cancel()
	}
	env.finishes.Store(true) // an interrupt from here on ends the search, not the command
	result, err := solve.Solve(ctx, p.Problem, solve.Options{Rounds: o.iterations, Start: p.force.start(), Progress: env.tellSearch()})
	if err != nil {
		return &InputError{Err: err}
	}
	if result.Stop == solve.Cancelled {
		env.note("stopped: the plan is the best one so far, whole")
	}
	a := newPlanAnswer(p, &result)
	if err := a.writeFiles(whole, &o.files); err != nil {
		return err
	}
	return a.write(env, o.format)
}

// tellSearch tells every two seconds how far a search is.
func (e *Env) tellSearch() func(solve.Progress) {
	last := time.Now()
	return func(p solve.Progress) {
		if time.Since(last) < patienceBeforeBar {
			return
		}
		last = time.Now()
		e.note("round %d: value %s, no plan is worth more than %s, gap %s %%", p.Round, fixed(p.Value, 0), fixed(p.Bound, 0), fixed(p.GapPercent, 3))
	}
}

// scenario reads the scenario. Windows from outside need none: then nothing of the demo
// counts, and it stays unsaid.
func (o *planSource) scenario(env *Env) (*scenario.Scenario, error) {
	if o.windows == "" {
		return env.load(needOrbits)
	}
	s, err := env.open(scenario.NeedPlan) // no spacecraft is flown
	if err == nil && !s.Demo {
		env.warn(s)
	}
	return s, err
}

// problem makes the problem of the flags and the scenario.
func (o *planSource) problem(ctx context.Context, env *Env) (*planProblem, error) {
	s, err := o.scenario(env)
	if err != nil {
		return nil, err
	}
	var rows []windowRow
	if o.windows != "" {
		if rows, err = readPlanFile(o.windows, planfiles.Windows); err != nil {
			return nil, err
		}
		if err := o.horizon(env, s, rows); err != nil {
			return nil, err
		}
	}
	now := o.now
	if now.IsZero() {
		now = s.Window.Start
	}
	if o.windows != "" { // whose value does not depend on what is on board
		for i := range s.Spacecraft {
			s.Spacecraft[i].Recorder = nil
		}
	}
	p, err := newPlanProblem(s, now)
	if err != nil {
		return nil, err
	}
	if o.split {
		p.Split = true
	}
	if o.windows != "" {
		known := len(p.Antennas)
		if err := p.AddWindows(rows); err != nil {
			return nil, &InputError{Err: err}
		}
		tellStrangeAntennas(env, p, known)
	} else {
		if err := p.passes(ctx, env); err != nil {
			return nil, err
		}
		p.clashes()
	}
	return p, o.finish(p)
}

// tellStrangeAntennas names the antennas of the windows that the scenario does not have:
// someone else's, or a name written otherwise.
func tellStrangeAntennas(env *Env, p *planProblem, known int) {
	if known == 0 {
		return
	}
	var strange []string
	for _, a := range p.Antennas[known:] {
		strange = append(strange, p.Stations[a.Station].Name+" "+a.Name)
	}
	if len(strange) > 0 {
		env.note("warning: the scenario does not have %s of the windows: counted as antennas of their own, without the scenario's rules", quotedList(strange))
	}
}

// finish takes limits and outages into a problem that has its candidates.
func (o *planSource) finish(p *planProblem) error {
	if err := p.limit(); err != nil {
		return err
	}
	closed := append([]planfiles.Outage{}, p.plan.Closed...)
	for _, file := range o.closed {
		f, err := os.Open(file)
		if err != nil {
			return inputErrorf("%s: %v", file, plainFileError(err))
		}
		list, err := planfiles.Closed(file, f, scenario.ParseUTC)
		f.Close()
		if err != nil {
			return &InputError{Err: err}
		}
		closed = append(closed, list...)
	}
	if err := p.closeTimes(closed); err != nil {
		return err
	}
	if err := p.Check(); err != nil {
		return &InputError{Err: err}
	}
	p.keepPast()
	return p.carry(o.inForce)
}
