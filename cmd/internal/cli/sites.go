package cli

import (
	"context"
	"fmt"
	"math"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/sizing"
	"slantwise/station"
)

type sitesOptions struct {
	stations []string
	most     int
	days     *float64 // nil: the scenario's
	format   format
}

// mostSetSize is the largest set that is looked for.
const mostSetSize = 8

func newSites(env *Env) *cobra.Command {
	var o sitesOptions
	cmd := &cobra.Command{
		Use:   "sites",
		Short: "Rank candidate sites by a year of passes, one by one and in sets",
		Long: `Rank candidate sites for the spacecraft and the antenna of the scenario's sizing block:
each alone, by bytes a day, and for each size up to --most the set that brings most of
all sets, which is searched for with a proven bound. Every candidate gets the antenna of
the block, as the first of the block's sites has it. The year is flown on a kept orbit,
as for dish; a site that the scenario's licences do not name brings nothing.

In a set the site that brings most counts at each instant, handed over without loss; the
column in order counts passes whole in the order of AOS instead, as dish does. Weather
that sites share does not change the mean bytes. It changes how often one of them at
least has the margin: one weather (they fail together) and independent weather (each by
itself) are both shown.`,
		Example: `  slantwise sites --days 14
  slantwise sites --days 14 --station "Skerry Point" --station Hoarfjord --station "Tussock Bay" --most 2 --format csv`,
		Args: noArgs,
		RunE: func(cmd *cobra.Command, _ []string) error { return runSites(cmd.Context(), env, &o) },
	}
	fs := cmd.Flags()
	fs.StringArrayVar(&o.stations, "station", nil, "`NAME` of a candidate (again for more; left out: all stations)")
	fs.IntVar(&o.most, "most", 3, "how many sites a set may have, a `NUMBER`")
	addNumber(fs, &o.days, "days", "how many `DAYS` are flown, in place of the scenario's")
	addFormat(cmd, &o.format)
	return cmd
}

func runSites(ctx context.Context, env *Env, o *sitesOptions) error {
	if o.most < 1 || o.most > mostSetSize {
		return inputErrorf("--most: %d is not allowed; it must be 1 to %d", o.most, mostSetSize)
	}
	if err := checkDays(o.days); err != nil {
		return err
	}
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	if s.Sizing == nil {
		return inputErrorf("sizing: the scenario holds no such block; add one that names spacecraft, transmitter and antenna, see slantwise dish --help")
	}
	candidates, err := pickMany("station", o.stations, s.Stations, stationName)
	if err != nil {
		return err
	}
	if err := candidatesOf(s, candidates, o); err != nil {
		return err
	}
	d, err := newDishStudy(ctx, env, s)
	if err != nil {
		return err
	}
	r := siteRanking{dish: d}
	if err := r.rank(env, o.most); err != nil {
		return &InputError{Err: err}
	}
	return r.sheet().write(env, o.format)
}

// candidatesOf makes the scenario hold the candidates alone, each with the antenna of the
// sizing block. What the block requires of the sites together does not rank them.
func candidatesOf(s *scenario.Scenario, candidates []scenario.Station, o *sitesOptions) error {
	z := *s.Sizing
	c, err := pick("sizing.spacecraft", z.Spacecraft, s.Spacecraft, spacecraftName)
	if err != nil {
		return err
	}
	t, err := pick("sizing.transmitter", z.Transmitter, c.Transmitters, transmitterName)
	if err != nil {
		return err
	}
	template := templateAntenna(s, t)
	if template == nil {
		return inputErrorf("sizing.antenna: no station has an antenna %q that takes %g MHz; give it to one", z.Antenna, t.Frequency.Megahertz())
	}
	z.Antenna, z.Sites = template.Name, nil
	stations := slices.Clone(candidates)
	for i := range stations {
		stations[i].Antennas = []station.Antenna{*template}
		z.Sites = append(z.Sites, stations[i].Site.Name)
	}
	s.Stations = stations
	z.Needs = sizing.None()
	if c.Recorder != nil {
		z.Needs.Latency = 24 // any, so that it is worked out
	}
	if o.days != nil {
		z.Days = *o.days
	}
	s.Sizing = &z
	return nil
}

// templateAntenna is the antenna that the sizing block is about: at its own sites first,
// and one that takes the frequency; nil for none.
func templateAntenna(s *scenario.Scenario, t *downlink.Transmitter) *station.Antenna {
	for _, own := range []bool{true, false} {
		for i := range s.Stations {
			if slices.Contains(s.Sizing.Sites, s.Stations[i].Site.Name) != own {
				continue
			}
			a := antennaNamed(&s.Stations[i], s.Sizing.Antenna)
			if a != nil && (len(a.Bands) == 0 || slices.ContainsFunc(a.Bands, func(b station.Band) bool { return b.Holds(t.Frequency) })) {
				return a
			}
		}
	}
	return nil
}

// siteRanking is the ranked sites and sets.
type siteRanking struct {
	dish *dishStudy
	rows []rankedSet
	sets []sizing.BestSet
}

type rankedSet struct {
	sites                   []int
	bytes                   float64 // a day, the best site at each instant
	oneWeather, independent float64
	outcome                 *sizing.Outcome
}

func (r *siteRanking) rank(env *Env, most int) error {
	d := r.dish
	yield, err := d.study.Yield(sizing.Variant{})
	if err != nil {
		return err
	}
	var all []int
	for i := range d.links {
		all = append(all, i)
	}
	r.sets = yield.BestSets(all, most)
	bar := env.startProgress("sites and sets", len(all)+len(r.sets))
	defer bar.stop()
	add := func(set []int) error {
		defer bar.add(1)
		row := rankedSet{sites: set, bytes: yield.Bytes(set)}
		row.oneWeather, row.independent = yield.Available(set)
		spec := d.spec
		spec.Sites = set
		study, err := sizing.NewStudy(spec)
		if err != nil {
			return err
		}
		if row.outcome, err = study.Outcome(sizing.Variant{}); err != nil {
			return err
		}
		r.rows = append(r.rows, row)
		return nil
	}
	for _, i := range all {
		if err := add([]int{i}); err != nil {
			return err
		}
	}
	slices.SortStableFunc(r.rows, func(a, b rankedSet) int {
		switch {
		case a.bytes > b.bytes:
			return -1
		case a.bytes < b.bytes:
			return 1
		}
		return 0
	})
	for _, s := range r.sets {
		if len(s.Sites) < 2 {
			continue
		}
		if err := add(s.Sites); err != nil {
			return err
		}
	}
	return nil
}

// sheet has a row a site, the best first, then a row a size of set.
func (r *siteRanking) sheet() *sheet {
	out := &sheet{name: "sites", columns: []sheetColumn{
		numbersAs("size", "sites", 0), numbersAs("rank", "rank", 0), wordsAs("stations", "stations"), numbersAs("bytes_per_day", "bytes a day", 0),
		numbersAs("bytes_per_day_in_order", "in order", 0), numbersAs("availability_one_weather_percent", "available, one weather %", 3),
		numbersAs("availability_independent_percent", "independent %", 3), numbersAs("longest_gap_h", "longest gap h", 3), numbersAs("latency_p95_h", "95 % age h", 3),
	}}
	for i, row := range r.rows {
		var names []string
		for _, k := range row.sites {
			names = append(names, r.dish.links[k].station.Site.Name)
		}
		rank := 1.0
		if len(row.sites) == 1 {
			rank = float64(i + 1)
		}
		out.rows = append(out.rows, []any{float64(len(row.sites)), rank, strings.Join(names, "; "), math.Round(row.bytes), row.outcome.BytesPerDay,
			100 * row.oneWeather, 100 * row.independent, row.outcome.LongestGapH, row.outcome.LatencyH})
	}
	out = r.dish.withNotes(out)
	for _, s := range r.sets {
		if n := len(s.Sites); n > 1 {
			out.notes = append(out.notes, fmt.Sprintf("%s: the set of %d was found with a bound over all others, %d sets and parts of sets looked at", downlink.Assumption, n, s.Tried))
		}
	}
	return out
}
