package cli

import (
	"fmt"
	"math"
	"slices"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/orbit"
	"slantwise/station/pass"
)

type compareOptions struct {
	before, after        string
	spacecraft, stations []string
	transmitter          string
	apart                time.Duration
	moved                bool
	format               format
}

func newCompare(env *Env) *cobra.Command {
	var o compareOptions
	cmd := &cobra.Command{
		Use:   "compare BEFORE AFTER",
		Short: "What another scenario changes in the passes: times, elevation, margin, bytes",
		Long: `Hold the passes of two scenario files against each other: another element set, a later
launch, another antenna. The passes of each spacecraft over each station are paired by
their culminations, in the order of time, and a row tells what became of each:

  same  AOS and LOS are the same to the millisecond
  moved it has a partner, and the columns tell by how much it moved
  gone  only the first file has it
  new   only the second file has it

Shifts are AFTER less BEFORE. Margin and bytes are those of one transmitter: the one
named, or the only one that the spacecraft has. The margin is the greatest along the
pass in the transmitter's first mode; the bytes are those of the rate plan, within the
licences. Where a file states how uncertain the positions are, one standard deviation of
AOS stands behind: what lies within it was to be expected.`,
		Example: `  slantwise compare before.yaml after.yaml --station "My station" --changed
  slantwise compare before.yaml after.yaml --format csv > changes.csv`,
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) != 2 {
				return inputErrorf("%s takes two scenario files, the one before and the one after; %d given", cmd.CommandPath(), len(args))
			}
			o.before, o.after = args[0], args[1]
			return nil
		},
		RunE: func(*cobra.Command, []string) error { return runCompare(env, &o) },
	}
	fs := cmd.Flags()
	fs.StringArrayVar(&o.spacecraft, "spacecraft", nil, "`NAME` of a spacecraft (again for more; left out: all that both files have)")
	fs.StringArrayVar(&o.stations, "station", nil, "`NAME` of a station (again for more; left out: all that both files have)")
	fs.StringVar(&o.transmitter, "transmitter", "", "`NAME` of the transmitter of margins and bytes")
	addDuration(fs, &o.apart, "apart", 45*time.Minute, "how far apart the culminations of one pass may lie in the two files")
	fs.BoolVar(&o.moved, "changed", false, "leave out passes that are the same")
	addFormat(cmd, &o.format)
	return cmd
}

func runCompare(env *Env, o *compareOptions) error {
	if env.Scenario != "" {
		return inputErrorf("--scenario does not go with compare; the two files stand behind the command")
	}
	var sides [2]*scenario.Scenario
	for i, file := range []string{o.before, o.after} {
		side := *env
		side.Scenario = file
		s, err := side.load(needOrbits)
		if err != nil {
			return err
		}
		sides[i] = s
	}
	out := &sheet{name: "passes", columns: []sheetColumn{
		wordsAs("spacecraft", "spacecraft"), wordsAs("station", "station"), wordsAs("change", "change"),
		wordsAs("aos_before_utc", "AOS before UTC"), wordsAs("aos_after_utc", "AOS after UTC"),
		numbersAs("aos_shift_s", "AOS by s", 3), numbersAs("los_shift_s", "LOS by s", 3), numbersAs("max_elevation_before_deg", "highest before deg", 2),
		numbersAs("max_elevation_after_deg", "after deg", 2), numbersAs("margin_before_db", "margin before dB", 2), numbersAs("margin_after_db", "after dB", 2),
		numbersAs("volume_before_bytes", "volume before B", 0), numbersAs("volume_after_bytes", "after B", 0),
		numbersAs("aos_plus_minus_before_s", "AOS ± before s", 2), numbersAs("aos_plus_minus_after_s", "after s", 2),
	}}
	craft, err := inBoth("spacecraft", o.spacecraft, sides[0].Spacecraft, sides[1].Spacecraft, spacecraftName, out)
	if err != nil {
		return err
	}
	stations, err := inBoth("station", o.stations, sides[0].Stations, sides[1].Stations, stationName, out)
	if err != nil {
		return err
	}
	if err := o.known(craft); err != nil {
		return err
	}
	for _, c := range craft {
		if err := o.compare(out, sides, c, stations); err != nil {
			return err
		}
	}
	return out.write(env, o.format)
}

// inBoth pairs what has the same name in both files, or only those named. What only
// one file has becomes a note.
func inBoth[T any](what string, named []string, before, after []T, name func(*T) string, out *sheet) ([][2]*T, error) {
	var found [][2]*T
	for i := range before {
		j := slices.IndexFunc(after, func(x T) bool { return name(&x) == name(&before[i]) })
		if j >= 0 {
			found = append(found, [2]*T{&before[i], &after[j]})
		} else {
			out.notes = append(out.notes, fmt.Sprintf("%s %s is only in the first file", what, name(&before[i])))
		}
	}
	for j := range after {
		if !slices.ContainsFunc(before, func(x T) bool { return name(&x) == name(&after[j]) }) {
			out.notes = append(out.notes, fmt.Sprintf("%s %s is only in the second file", what, name(&after[j])))
		}
	}
	if len(found) == 0 {
		return nil, inputErrorf("no %s has the same name in both files; names pair them", what)
	}
	return pickMany(what, named, found, func(p *[2]*T) string { return name(p[0]) })
}

// known refuses a transmitter that no spacecraft has.
func (o *compareOptions) known(craft [][2]*scenario.Spacecraft) error {
	if o.transmitter == "" {
		return nil
	}
	var all []string
	for _, c := range craft {
		for _, t := range append(slices.Clone(c[0].Transmitters), c[1].Transmitters...) {
			if !slices.Contains(all, t.Name) {
				all = append(all, t.Name)
			}
		}
	}
	_, err := pick("transmitter", o.transmitter, all, func(s *string) string { return *s })
	return err
}

// compared is a pass with what its link brings.
type compared struct {
	marginDB, bytes float64
}

// compare adds the rows of a spacecraft.
func (o *compareOptions) compare(out *sheet, sides [2]*scenario.Scenario, c [2]*scenario.Spacecraft, stations [][2]*scenario.Station) error {
	var by [2]*comparedSide
	for i := range sides {
		var err error
		over := make([]scenario.Station, len(stations))
		for k := range stations {
			over[k] = *stations[k][i]
		}
		if by[i], err = o.side(sides[i], c[i], over); err != nil {
			return err
		}
		for _, n := range by[i].notes {
			out.notes = append(out.notes, fmt.Sprintf("%s, %s: %s", sides[i].Label, c[i].Name, n))
		}
	}
	for _, st := range stations {
		var lists [2][]pass.Pass
		var sure [2]func(*pass.Pass) float64
		for i := range sides {
			var eph *orbit.Ephemeris
			var err error
			if eph, lists[i], err = passesOver(sides[i], c[i], st[i]); err != nil {
				return err
			}
			if sure[i], err = plusMinusOfAOS(sides[i], c[i], st[i], eph); err != nil {
				return err
			}
		}
		for _, p := range pass.Align(lists[0], lists[1], o.apart) {
			row, same := comparedRow(p, [2]compared{by[0].of(st[0], p.Before), by[1].of(st[1], p.After)})
			row = append(row, sure[0](p.Before), sure[1](p.After))
			if !same || !o.moved {
				out.rows = append(out.rows, append([]any{c[0].Name, st[0].Site.Name}, row...))
			}
		}
	}
	return nil
}

// plusMinusOfAOS returns a function that tells one standard deviation of a pass's AOS in
// s: a number that does not exist where the scenario states no uncertainty, or where the
// pass may not take place at all.
func plusMinusOfAOS(s *scenario.Scenario, c *scenario.Spacecraft, st *scenario.Station, eph *orbit.Ephemeris) (func(*pass.Pass) float64, error) {
	if c.Uncertainty == nil {
		return func(*pass.Pass) float64 { return none }, nil
	}
	uncertainty, _, err := s.AssumedUncertainty(c, s.Window.Start, s.Window.End)
	if err != nil {
		return nil, &InputError{Err: fmt.Errorf("spacecraft %s: %w", c.Name, err)}
	}
	gauge, err := pass.NewGauge(&st.Site, s.Horizon)
	if err != nil {
		return nil, err
	}
	return func(p *pass.Pass) float64 {
		if p == nil {
			return none
		}
		m, err := gauge.PlusMinus(eph, p, uncertainty)
		if err != nil { // the uncertainty is not known there
			return none
		}
		return m.AOS
	}, nil
}

// comparedRow is what follows the names in a row, and whether the pass stayed as it was.
func comparedRow(p pass.Pair, with [2]compared) (row []any, same bool) {
	change, aos, highest, shifts := "moved", [2]string{}, [2]float64{none, none}, [2]float64{none, none}
	for i, at := range []*pass.Pass{p.Before, p.After} {
		if at != nil {
			aos[i], highest[i] = utc(at.AOS), at.MaxElevation.Degrees()
		}
	}
	switch {
	case p.After == nil:
		change = "gone"
	case p.Before == nil:
		change = "new"
	default:
		shifts = [2]float64{p.After.AOS.Sub(p.Before.AOS).Seconds(), p.After.LOS.Sub(p.Before.LOS).Seconds()}
		if shifts == [2]float64{} {
			change = "same"
		}
	}
	same = change == "same" && sameNumber(with[0].marginDB, with[1].marginDB) && sameNumber(with[0].bytes, with[1].bytes)
	return []any{change, aos[0], aos[1], shifts[0], shifts[1], highest[0], highest[1],
		with[0].marginDB, with[1].marginDB, with[0].bytes, with[1].bytes}, same
}

func sameNumber(a, b float64) bool { return a == b || math.IsNaN(a) && math.IsNaN(b) }

// comparedSide are the links of one file's spacecraft, by station and AOS.
type comparedSide struct {
	links map[string]map[time.Time]compared
	notes []string
}

// of returns what the link of a pass brings, numbers that do not exist without one.
func (s *comparedSide) of(st *scenario.Station, p *pass.Pass) compared {
	if p != nil {
		if found, ok := s.links[st.Site.Name][p.AOS]; ok {
			return found
		}
	}
	return compared{none, none}
}

// side flies the transmitter of margins and bytes, if there is one.
func (o *compareOptions) side(s *scenario.Scenario, c *scenario.Spacecraft, stations []scenario.Station) (*comparedSide, error) {
	out := &comparedSide{links: map[string]map[time.Time]compared{}}
	tx, err := o.chosen(c)
	if tx == nil || err != nil {
		out.notes = append(out.notes, "no margins and bytes: name one of its transmitters by --transmitter")
		if len(c.Transmitters) == 0 {
			out.notes = []string{"no margins and bytes: it has no transmitter"}
		}
		return out, err
	}
	planner, err := newRatePlanner(tx, &c.RatePlan, nil)
	if err != nil {
		return nil, err
	}
	flights, notes, err := rateFlights(s, c, tx, stations)
	if err != nil {
		return nil, err
	}
	out.notes = notes
	if err := planner.settle(tracksOf(flights)); err != nil {
		return nil, &InputError{Err: err}
	}
	plans, err := planAll(planner, flights)
	if err != nil {
		return nil, err
	}
	for i := range flights {
		name := flights[i].station.Site.Name
		if out.links[name] == nil {
			out.links[name] = map[time.Time]compared{}
		}
		out.links[name][flights[i].pass.AOS] = compared{highestOf(flights[i].profile.MarginDB), plans[i].plan.Bytes}
	}
	return out, nil
}

// chosen is the transmitter named or the only one; nil: none is meant.
func (o *compareOptions) chosen(c *scenario.Spacecraft) (*downlink.Transmitter, error) {
	if o.transmitter == "" {
		if len(c.Transmitters) == 1 && len(c.Transmitters[0].Modes) > 0 {
			return &c.Transmitters[0], nil
		}
		return nil, nil
	}
	i := slices.IndexFunc(c.Transmitters, func(t downlink.Transmitter) bool { return t.Name == o.transmitter })
	if i < 0 || len(c.Transmitters[i].Modes) == 0 {
		return nil, nil
	}
	return &c.Transmitters[i], nil
}

func highestOf(values []float64) float64 {
	highest := none
	for _, v := range values {
		if !math.IsNaN(v) && !(v <= highest) {
			highest = v
		}
	}
	return highest
}
