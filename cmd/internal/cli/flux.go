package cli

import (
	"fmt"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/fluxdensity"
	"slantwise/downlink/modem"
	"slantwise/orbit/unit"
)

type fluxOptions struct {
	spacecraft   []string
	transmitters []string
	station      string
	format       format
}

func newFlux(env *Env) *cobra.Command {
	var o fluxOptions
	cmd := &cobra.Command{
		Use:   "flux",
		Short: "Power flux density on the ground against the limits of the band",
		Long: `Compare the power flux density of each spacecraft with the limits of its band: at every
point of the ground that sees it, and toward the geostationary orbit where a limit holds
there, in the worst geometry that the orbit may bring, and with --station along all its
passes over the station. The chosen transmitters of a spacecraft send at once, each in
the mode whose spectrum is densest.

An answer is pass, fail or not assessed: where a pattern is not known in a direction, or
no limit is known for the band, nothing passes. Limits that are recalled from memory say
so. Using a frequency needs a licence, and the national rules decide.`,
		Example: `  slantwise flux --spacecraft "Wagtail 1"
  slantwise flux --spacecraft "Wagtail 1" --transmitter X-band --station "Skerry Point" --format json`,
		Args: noArgs,
		RunE: func(*cobra.Command, []string) error { return runFlux(env, &o) },
	}
	fs := cmd.Flags()
	fs.StringArrayVar(&o.spacecraft, "spacecraft", nil, "`NAME` of a spacecraft (again for more; left out: all)")
	fs.StringArrayVar(&o.transmitters, "transmitter", nil, "`NAME` of a transmitter that sends (again for more; left out: all of the spacecraft)")
	fs.StringVar(&o.station, "station", "", "`NAME` of the station whose passes are looked at, too")
	addFormat(cmd, &o.format)
	return cmd
}

func runFlux(env *Env, o *fluxOptions) error {
	s, err := env.load(needOrbits)
	if err != nil {
		return err
	}
	craft, err := pickMany("spacecraft", o.spacecraft, s.Spacecraft, spacecraftName)
	if err != nil {
		return err
	}
	var st *scenario.Station
	if o.station != "" {
		if st, err = pick("station", o.station, s.Stations, stationName); err != nil {
			return err
		}
	}
	out := fluxSheet()
	for i := range craft {
		if err := fluxOfCraft(s, &craft[i], st, o.transmitters, out); err != nil {
			return err
		}
	}
	out.notes = append(out.notes, fluxdensity.Caution)
	return out.write(env, o.format)
}

func fluxSheet() *sheet {
	return &sheet{name: "findings", columns: []sheetColumn{
		wordsAs("spacecraft", "spacecraft"), wordsAs("geometry", "geometry"), wordsAs("place", "at"), wordsAs("transmitters", "transmitters"),
		wordsAs("outcome", "outcome"), numbersAs("distance_db", "left dB", 2), numbersAs("flux_density_dbw_m2", "flux dBW/m2", 2),
		numbersAs("limit_dbw_m2", "limit dBW/m2", 2), numbersAs("reference_bandwidth_hz", "in Hz", 0), numbersAs("arrival_deg", "arrival deg", 2),
		numbersAs("off_nadir_deg", "off nadir deg", 2), numbersAs("off_boresight_deg", "off boresight deg", 2), numbersAs("range_km", "range km", 1),
		numbersAs("altitude_km", "altitude km", 1), wordsAs("utc", "UTC"), wordsAs("rule", "rule"), wordsAs("known", "known"), wordsAs("reason", "why"),
	}}
}

// fluxOfCraft adds the findings of a spacecraft; one without transmitters has none.
func fluxOfCraft(s *scenario.Scenario, c *scenario.Spacecraft, st *scenario.Station, names []string, out *sheet) error {
	if len(c.Transmitters) == 0 {
		return nil
	}
	tx, err := pickMany("transmitter", names, c.Transmitters, func(t *downlink.Transmitter) string { return t.Name })
	if err != nil {
		return err
	}
	var emissions []fluxdensity.Emission
	for i := range tx {
		emissions = append(emissions, densest(&tx[i]))
	}
	o, err := orbitRange(s, c)
	if err != nil {
		return &InputError{Err: fmt.Errorf("spacecraft %s: %w", c.Name, err)}
	}
	o.LeastElevation = leastElevation(s, st)
	worst, err := fluxdensity.Worst(o, emissions)
	if err != nil {
		return &InputError{Err: fmt.Errorf("spacecraft %s: %w", c.Name, err)}
	}
	addFindings(out, c.Name, "worst of the orbit", worst)
	if st == nil {
		return nil
	}
	track, err := trackOver(s, c, st)
	if err != nil || len(track.Times) == 0 {
		return err
	}
	along, err := fluxdensity.Along(*track, emissions)
	if err != nil {
		return &InputError{Err: fmt.Errorf("spacecraft %s: %w", c.Name, err)}
	}
	addFindings(out, c.Name, "passes over "+st.Site.Name, along)
	return nil
}

// radiusStep is how far apart the instants are at which the orbit's radius is looked
// at, in seconds.
const radiusStep = 30.0

// orbitRange returns how near the Earth's centre and how far from it an orbit comes: by
// its mean elements, and in the window, where it swings some kilometres about them.
func orbitRange(s *scenario.Scenario, c *scenario.Spacecraft) (fluxdensity.Orbit, error) {
	facts, err := c.Elements.Facts()
	if err != nil {
		return fluxdensity.Orbit{}, err
	}
	const wgs72 = 6378135 * unit.Metre // what the heights of the facts count from
	o := fluxdensity.Orbit{Perigee: facts.Perigee + wgs72, Apogee: facts.Apogee + wgs72}
	eph, err := s.Ephemeris(c, s.Window.Start, s.Window.End, nil)
	if err != nil {
		return fluxdensity.Orbit{}, err
	}
	for _, s := range eph.Spans() {
		for t := s.From; t <= s.To; t += radiusStep {
			r := unit.Length(eph.PositionAt(t).Norm())
			o.Perigee, o.Apogee = min(o.Perigee, r), max(o.Apogee, r)
		}
	}
	return o, nil
}

// leastElevation is the least at which a station is tracked: its own minimum, the
// least of all stations where none is named, never below the horizon.
func leastElevation(s *scenario.Scenario, st *scenario.Station) unit.Angle {
	least := 90 * unit.Degree
	for i := range s.Stations {
		if st == nil || &s.Stations[i] == st {
			least = min(least, s.Stations[i].Site.MinimumElevation)
		}
	}
	return max(0, least)
}

// densest returns the emission of the transmitter's mode whose spectrum has the
// highest peak.
func densest(t *downlink.Transmitter) fluxdensity.Emission {
	var best *modem.Resolved
	share := -1.0
	for _, m := range t.Modes {
		r, err := m.Resolve()
		if err != nil {
			continue // the scenario was checked: all modes resolve
		}
		e := fluxdensity.FromTransmitter(t, &r)
		if v := e.Spectrum.Share(1); v > share {
			share, best = v, &r
		}
	}
	return fluxdensity.FromTransmitter(t, best)
}

// fluxStep is how far apart the instants of a pass are: the geometry changes by a
// degree or so.
const fluxStep = 10 * time.Second

// trackOver is where the spacecraft flies during its passes over a station.
func trackOver(s *scenario.Scenario, c *scenario.Spacecraft, st *scenario.Station) (*fluxdensity.Track, error) {
	eph, found, err := passesOver(s, c, st)
	if err != nil {
		return nil, err
	}
	frame := st.Site.Frame()
	t := &fluxdensity.Track{Station: &frame.Origin}
	add := func(at time.Time) {
		position := eph.PositionAt(max(0, min(eph.Seconds(at), eph.Span())))
		t.Times, t.Positions = append(t.Times, at), append(t.Positions, position)
	}
	for i := range found {
		for at := found[i].AOS; at.Before(found[i].LOS); at = at.Add(fluxStep) {
			add(at)
		}
		add(found[i].LOS)
	}
	return t, nil
}

func addFindings(out *sheet, craft, geometry string, all []fluxdensity.Finding) {
	for _, f := range all {
		place, rule, known, reference := "", "", "", none
		outcome := f.Outcome.String()
		if l := f.Limit; l != nil {
			place, rule, known, reference = l.Place.String(), l.Rule+" ("+l.Service+")", l.Provenance(), l.Reference.Hertz()
			if l.Coordination && f.Outcome == fluxdensity.Failed {
				outcome = "coordination needed"
			}
		}
		out.rows = append(out.rows, []any{
			craft, geometry, place, strings.Join(f.Transmitters, " + "), outcome, float64(f.Distance), f.FluxDBWM2, f.LimitDBWM2, reference,
			f.Arrival.Degrees(), f.OffNadir.Degrees(), f.OffBoresight.Degrees(), f.Range.Kilometres(), f.Altitude.Kilometres(), utc(f.Time), rule, known, f.Reason,
		})
	}
}
