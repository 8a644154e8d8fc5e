package cli

import (
	"fmt"
	"slices"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/rateplan"
)

type ratesOptions struct {
	spacecraft, transmitter string
	set                     string
	stations, only          []string
	pass                    time.Time
	rules                   rateRules
	what                    string
	format                  format
}

// What the command may write.
var ratesSheets = []string{"steps", "passes", "series", "volumes"}

func newRates(env *Env) *cobra.Command {
	var o ratesOptions
	cmd := &cobra.Command{
		Use:   "rates",
		Short: "Which mode to send when: the schedule that brings down the most bytes",
		Long: `Plan the modes along every pass of the window, or with --pass UTC along the one under
way then or the next: the schedule that brings down the most bytes under the rules of
the scenario's rate_plan, each of which a flag replaces. It is the optimum over all
schedules that change at the samples of the pass, a second apart.

  --show steps    when which mode is sent, with its least margin and its bytes
  --show passes   the bytes of each pass, its share of two bounds (free switching among
                  the modes, Shannon's limit), and what one mode alone would bring
  --show series   margin and rates along the passes, for a chart
  --show volumes  how sure the bytes are: the distribution of each pass by the
                  statistics of its path, and of their sum, once with the weather of
                  each pass by itself and once with one weather for all

With --set the passes are divided among the links of a link set of the scenario, each
downlink by the schedule that it would have alone: what each link gets, and what it would
get with the pass to itself.

Bytes are the user's: coding, sync markers and frame headers are taken off. With a
range of symbol rates the codings of the transmitter's modes are sent at any of them
that fits the allotted bandwidth. Licences are kept to.`,
		Example: `  slantwise rates --spacecraft "Wagtail 1" --station "Skerry Point" --pass 2026-09-15T00:50:00Z
  slantwise rates --spacecraft "Wagtail 1" --most-changes 2 --show passes --format csv
  slantwise rates --spacecraft "Wagtail 1" --station "Skerry Point" --show volumes
  slantwise rates --spacecraft "Wagtail 1" --station "Skerry Point" --set "commands first"`,
		Args: noArgs,
	}
	fs := cmd.Flags()
	fs.StringVar(&o.spacecraft, "spacecraft", "", "`NAME` of the spacecraft")
	fs.StringVar(&o.transmitter, "transmitter", "", "`NAME` of the transmitter")
	fs.StringVar(&o.set, "set", "", "divide the passes among the links of the link set of this `NAME`")
	fs.StringArrayVar(&o.stations, "station", nil, "`NAME` of a station (again for more; left out: all)")
	fs.StringArrayVar(&o.only, "mode", nil, "`NAME` of a mode that may be sent (again for more; left out: all)")
	addTime(fs, &o.pass, "pass", "the pass under way then, or the next one of the window")
	o.rules.add(fs)
	fs.StringVar(&o.what, "show", "steps", "`WHAT` to write: steps, passes, series or volumes")
	addFormat(cmd, &o.format)
	cmd.RunE = func(cmd *cobra.Command, _ []string) error {
		o.rules.silentGiven = cmd.Flags().Changed("silent")
		return runRates(env, &o)
	}
	return cmd
}

func runRates(env *Env, o *ratesOptions) error {
	show, err := pick("show", o.what, ratesSheets, func(s *string) string { return *s })
	if err != nil {
		return inputErrorf("--show: %q is not allowed; it must be %s", o.what, quotedList(ratesSheets))
	}
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	craft, err := pick("spacecraft", o.spacecraft, s.Spacecraft, spacecraftName)
	if err != nil {
		return err
	}
	if o.set != "" {
		return ratesOfSet(env, o, s, craft)
	}
	tx, err := pick("transmitter", o.transmitter, craft.Transmitters, transmitterName)
	if err != nil {
		return err
	}
	stations, err := pickMany("station", o.stations, s.Stations, stationName)
	if err != nil {
		return err
	}
	rules, err := o.rules.over(craft.RatePlan)
	if err != nil {
		return err
	}
	planner, err := newRatePlanner(tx, &rules, o.only)
	if err != nil {
		return err
	}
	all, notes, err := rateFlights(s, craft, tx, stations)
	if err != nil {
		return err
	}
	if err := planner.settle(tracksOf(all)); err != nil {
		return &InputError{Err: err}
	}
	flights := passFrom(all, o.pass)
	if len(flights) == 0 {
		env.note("there is no such pass in the window %s to %s", utc(s.Window.Start), utc(s.Window.End))
	}
	plans, err := planAll(planner, flights)
	if err != nil {
		return err
	}
	job := ratesJob{scenario: s, craft: craft, tx: tx, flights: flights, plans: plans}
	out, err := map[string]func(*ratesJob) (*sheet, error){
		"steps": ratesSteps, "passes": ratesPasses, "series": ratesSeries, "volumes": ratesVolumes,
	}[*show](&job)
	if err != nil {
		return err
	}
	if !rules.Rules.Silent && slices.ContainsFunc(flights, func(f rateFlight) bool { return f.cut }) {
		notes = append(notes, "steps go on through the time that a licence takes; where it forbids to radiate the spacecraft has to be silent, which --silent (silent: true in the rate plan) plans")
	}
	out.notes = append(append(rulesNotes(&rules, tx), notes...), out.notes...)
	return out.write(env, o.format)
}

// ratesJob is what the command writes of.
type ratesJob struct {
	scenario *scenario.Scenario
	craft    *scenario.Spacecraft
	tx       *downlink.Transmitter
	flights  []rateFlight
	plans    []*ratedPass // of the flights
}

func tracksOf(flights []rateFlight) []rateplan.Track {
	out := make([]rateplan.Track, len(flights))
	for i := range flights {
		out[i] = flights[i].track
	}
	return out
}

func planAll(p *ratePlanner, flights []rateFlight) ([]*ratedPass, error) {
	var out []*ratedPass
	for i := range flights {
		r, err := p.plan(flights[i].track)
		if err != nil {
			return nil, &InputError{Err: fmt.Errorf("pass over %s at %s: %w", flights[i].station.Site.Name, utc(flights[i].pass.AOS), err)}
		}
		out = append(out, r)
	}
	return out, nil
}
