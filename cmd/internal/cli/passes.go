package cli

import (
	"context"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/orbit"
	"slantwise/station"
	"slantwise/station/pass"
)

type passesOptions struct {
	spacecraft, stations []string
	leastElevationDeg    *float64 // nil: any
	leastDuration        time.Duration
	sunlit               bool
	plusMinus            bool
	mount                bool
	sort                 passOrder
	workers              int
	format               format
}

func newPasses(env *Env) *cobra.Command {
	var o passesOptions
	cmd := &cobra.Command{
		Use:   "passes",
		Short: "List the passes of the window",
		Long: `List when each spacecraft stands above the horizon of each station within the window
of the scenario: the uninterrupted time above the minimum elevation and the horizon
mask, to the millisecond. A pass that the window cuts is marked, and its time is the
window's edge. Elevations in the list are geometric.

Where the scenario states position_uncertainty, the table and the JSON tell how sure the
passes are: one standard deviation of AOS, LOS and the greatest elevation, and the
probability that the pass takes place at all, under one where it grazes the horizon.
--plus-minus asks for it in the CSV, too, and takes a rule by the age of the element
sets where the scenario states none.

--mount adds how the mount of the station's antenna takes each pass: how long it does not
follow, planned and without a plan, and where its lower axis begins and ends, as the
cable counts it.`,
		Example: `  slantwise passes
  slantwise passes --station "Skerry Point" --least-elevation-deg 30 --sort elevation
  slantwise passes --plus-minus --spacecraft "Wagtail 1"
  slantwise passes --mount --station "Tussock Bay"
  slantwise passes --sunlit --format csv > passes.csv`,
		Args: noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error { return runPasses(cmd.Context(), env, o) },
	}
	fs := cmd.Flags()
	fs.StringArrayVar(&o.spacecraft, "spacecraft", nil, "only this spacecraft, by `NAME`; may be repeated")
	fs.StringArrayVar(&o.stations, "station", nil, "only this station, by `NAME`; may be repeated")
	addNumber(fs, &o.leastElevationDeg, "least-elevation-deg", "only passes that culminate at least so `HIGH`, geometric, in degrees")
	addDuration(fs, &o.leastDuration, "least-duration", 0, "only passes that last at least so long")
	fs.BoolVar(&o.sunlit, "sunlit", false, "only passes at whose culmination the spacecraft is in full sunlight")
	fs.BoolVar(&o.plusMinus, "plus-minus", false, "with the plus-minus by the orbit's error, in four more columns")
	fs.BoolVar(&o.mount, "mount", false, "with how the antenna's mount takes each pass, in eight more columns")
	o.sort = orderAOS
	fs.Var(&o.sort, "sort", "by aos, elevation (highest first), duration (longest first), spacecraft or station")
	addWorkers(fs, &o.workers, "spacecraft are searched")
	addFormat(cmd, &o.format)
	return cmd
}

func (o *passesOptions) check() error {
	if least := o.leastElevationDeg; least != nil && !(*least >= -90 && *least <= 90) {
		return inputErrorf("--least-elevation-deg: %g deg is not allowed; it must be -90 to 90 deg", *least)
	}
	return nil
}

// passSearch is what a list of passes is about, with the list.
type passSearch struct {
	window     pass.Window
	decides    station.ElevationKind
	spacecraft []scenario.Spacecraft
	stations   []scenario.Station
	list       *pass.List
	sure       *sureList  // nil: nothing is known of it
	mounts     *mountList // nil: not asked for
}

func runPasses(ctx context.Context, env *Env, o passesOptions) error {
	if err := o.check(); err != nil {
		return err
	}
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	p := passSearch{window: pass.Window{From: s.Window.Start, To: s.Window.End}, decides: s.Horizon}
	if p.spacecraft, err = pickMany("spacecraft", o.spacecraft, s.Spacecraft, spacecraftName); err != nil {
		return err
	}
	if p.stations, err = pickMany("station", o.stations, s.Stations, stationName); err != nil {
		return err
	}
	env.tellHorizon(s.Horizon, p.stations)
	if len(s.Licences) > 0 {
		env.note("passes are listed whole; slantwise licence tells what the scenario's licences take from them")
	}
	if p.sure, err = p.newSureList(env, s, o.plusMinus); err != nil {
		return &InputError{Err: err}
	}
	if o.mount {
		if p.mounts, err = p.newMountList(env); err != nil {
			return &InputError{Err: err}
		}
	}
	if err := p.search(ctx, env, s, o); err != nil {
		return err
	}
	if p.sure != nil {
		p.sure.tellBasis(env, &p)
	}
	return p.write(env, o)
}

func spacecraftName(c *scenario.Spacecraft) string   { return c.Name }
func stationName(s *scenario.Station) string         { return s.Site.Name }
func transmitterName(t *downlink.Transmitter) string { return t.Name }

// tellHorizon says which elevation decides AOS and LOS, and which masks are compared
// in the other kind.
func (e *Env) tellHorizon(decides station.ElevationKind, stations []scenario.Station) {
	e.note("%s elevation decides AOS and LOS", decides)
	var other []string
	for i := range stations {
		if m := stations[i].Site.Mask; m != nil && m.Kind() != decides {
			other = append(other, stations[i].Site.Name)
		}
	}
	if len(other) > 0 {
		kind := station.Apparent
		if decides == station.Apparent {
			kind = station.Geometric
		}
		e.note("the horizon mask is compared in %s elevation, as it was made, at %s", kind, quotedList(other))
	}
}

// search fills the list. Spacecraft without a state in the window are told of and
// passed over; when that is all of them, it is an error.
func (p *passSearch) search(ctx context.Context, env *Env, s *scenario.Scenario, o passesOptions) error {
	bar := env.startProgress("passes", len(p.spacecraft))
	faults := make([]error, len(p.spacecraft))
	done := 0
	job := pass.Job{
		Spacecraft: len(p.spacecraft),
		Ephemeris: func(i int, scratch *orbit.Ephemeris) (*orbit.Ephemeris, error) {
			e, err := s.Ephemeris(&p.spacecraft[i], p.window.From, p.window.To, scratch)
			if ended(err) {
				return nil, nil // no passes, and the scenario's warning says why
			}
			if err != nil {
				faults[i] = err
				return nil, nil
			}
			if cut := e.Truncated(); cut != nil {
				faults[i] = cut
			}
			return e, nil
		},
		Window: p.window, Decides: p.decides, Keep: p.mounts.measuring(p.sure.measuring(o.keep())), Workers: o.workers,
		Progress: func(n int) { bar.add(n - done); done = n },
	}
	for i := range p.stations {
		job.Sites = append(job.Sites, &p.stations[i].Site)
	}
	var err error
	p.list, err = pass.SearchAll(ctx, job)
	bar.stop()
	if err != nil {
		return err
	}
	if p.mounts != nil && p.mounts.fault != nil {
		return p.mounts.fault
	}
	return p.tellFaults(env, faults)
}

func (p *passSearch) tellFaults(env *Env, faults []error) error {
	failed := 0
	for i, err := range faults {
		if err != nil {
			failed++
			env.note("warning: spacecraft %s: passes end where its orbit does: %v", printable(p.spacecraft[i].Name), err)
		}
	}
	if failed == len(faults) && failed > 0 && p.list.Len() == 0 {
		return inputErrorf("no spacecraft has an orbit in the window; see the warnings")
	}
	return nil
}

// keep returns the filter of the options, nil where all is kept.
func (o *passesOptions) keep() func(*orbit.Ephemeris, *pass.Found) bool {
	least := angleOf(o.leastElevationDeg)
	if least == nil && o.leastDuration == 0 && !o.sunlit {
		return nil
	}
	return func(e *orbit.Ephemeris, f *pass.Found) bool {
		if least != nil && f.MaxElevation < *least || f.Duration() < o.leastDuration {
			return false
		}
		return !o.sunlit || e.LightAt(min(max(e.Seconds(f.Culmination), 0), e.Span())) == orbit.Sunlit
	}
}

// write writes the list in the order and format asked for.
func (p *passSearch) write(env *Env, o passesOptions) error {
	at := p.ordered(o.sort)
	switch o.format {
	case formatCSV:
		return p.writeCSV(env.Out, at, o.plusMinus)
	case formatJSON:
		return p.writeJSON(env.Out, at)
	}
	return p.writeTable(env, at)
}
