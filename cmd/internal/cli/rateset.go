package cli

import (
	"errors"
	"fmt"
	"slices"
	"time"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/linkset"
	"slantwise/orbit"
	"slantwise/station"
	"slantwise/station/pass"
)

// setFlight is a pass with what each link of a set gets of it.
type setFlight struct {
	station *scenario.Station // with the set's antenna alone
	pass    *pass.Pass
	links   []linkset.Link // along the pass, alone
	shares  []linkset.Share
}

// setFlights divides every pass over the stations among the links of a set, in the order
// of AOS. A station of which no antenna takes all links has none; the notes say so.
func setFlights(s *scenario.Scenario, c *scenario.Spacecraft, set *scenario.LinkSet, stations []scenario.Station) ([]setFlight, []string, error) {
	var able []scenario.Station
	var notes []string
	sky := newSkies(s)
	for i := range stations {
		one, why := stationFor(sky, c, set, &stations[i])
		if one == nil {
			notes = append(notes, fmt.Sprintf("no contact over %s: %s", stations[i].Site.Name, why))
			continue
		}
		able = append(able, *one)
	}
	all, eph, err := setPasses(s, c, able)
	if err != nil {
		return nil, nil, err
	}
	for _, name := range set.Links {
		var more []string
		var err error
		if u := c.Uplink(name); u != nil {
			more, err = addUpSpans(s, sky, c, u, eph, all)
		} else {
			i := slices.IndexFunc(c.Transmitters, func(t downlink.Transmitter) bool { return t.Name == name })
			more, err = addDownSpans(s, c, &c.Transmitters[i], able, all)
		}
		if err != nil {
			return nil, nil, err
		}
		notes = append(notes, more...)
	}
	for i := range all {
		f := &all[i]
		f.shares = linkset.Divide(set.Rule, f.pass.Duration().Seconds(), f.links)
	}
	slices.SortStableFunc(all, func(a, b setFlight) int { return a.pass.AOS.Compare(b.pass.AOS) })
	return all, notes, nil
}

// stationFor is a station with the first of its antennas that takes every link of a set.
func stationFor(sky *skies, c *scenario.Spacecraft, set *scenario.LinkSet, st *scenario.Station) (*scenario.Station, string) {
	for a := range st.Antennas {
		if takesAll(sky, c, set, st, &st.Antennas[a]) {
			one := *st
			one.Antennas = []station.Antenna{st.Antennas[a]}
			return &one, ""
		}
	}
	if len(st.Antennas) == 0 {
		return nil, "it has no antenna"
	}
	return nil, "no antenna takes all links of the set"
}

func takesAll(sky *skies, c *scenario.Spacecraft, set *scenario.LinkSet, st *scenario.Station, a *station.Antenna) bool {
	for _, name := range set.Links {
		link := chosenLink{spacecraft: c, station: st, antenna: a}
		if u := c.Uplink(name); u != nil {
			link.uplink, link.transmitter = u, &u.Transmitter
		} else {
			i := slices.IndexFunc(c.Transmitters, func(t downlink.Transmitter) bool { return t.Name == name })
			link.transmitter = &c.Transmitters[i]
		}
		if link.prepare(sky) != nil {
			return false
		}
	}
	return true
}

// setPasses finds the passes over the stations.
func setPasses(s *scenario.Scenario, c *scenario.Spacecraft, stations []scenario.Station) (all []setFlight, eph *orbit.Ephemeris, err error) {
	for i := range stations {
		var found []pass.Pass
		if eph, found, err = passesOver(s, c, &stations[i]); err != nil {
			return nil, nil, err
		}
		for k := range found {
			all = append(all, setFlight{station: &stations[i], pass: &found[k]})
		}
	}
	return all, eph, nil
}

// addDownSpans adds a transmitter to each pass, by the rate plan that it would have alone.
func addDownSpans(s *scenario.Scenario, c *scenario.Spacecraft, tx *downlink.Transmitter, stations []scenario.Station, all []setFlight) ([]string, error) {
	planner, err := newRatePlanner(tx, &c.RatePlan, nil)
	if err != nil {
		return nil, err
	}
	flights, notes, err := rateFlights(s, c, tx, stations)
	if err != nil {
		return nil, err
	}
	if err := planner.settle(tracksOf(flights)); err != nil {
		return nil, &InputError{Err: err}
	}
	plans, err := planAll(planner, flights)
	if err != nil {
		return nil, err
	}
	for i := range all {
		link := linkset.Link{Name: tx.Name}
		for k := range flights {
			if f := &flights[k]; f.station.Site.Name == all[i].station.Site.Name && f.pass.AOS.Equal(all[i].pass.AOS) {
				for _, r := range plans[k].plan.Receptions(f.track) {
					link.Spans = append(link.Spans, linkset.Span{From: r.From, To: r.To, BytesPerSecond: r.Bytes / (r.To - r.From)})
				}
			}
		}
		all[i].links = append(all[i].links, link)
	}
	return notes, nil
}

// addUpSpans adds an uplink to each pass, in the one mode that would carry the most.
func addUpSpans(s *scenario.Scenario, sky *skies, c *scenario.Spacecraft, u *downlink.Receiver, eph *orbit.Ephemeris, all []setFlight) ([]string, error) {
	if len(u.Modes) == 0 {
		return nil, inputErrorf("uplink %q has no mode, so that nothing is known of when it works", u.Name)
	}
	notes := []string{"uplink " + u.Name + ": in each pass the one mode that would carry the most bytes from AOS to LOS, framing not taken off"}
	byStation := map[string][]chosenLink{}
	for i := range all {
		f := &all[i]
		links, known := byStation[f.station.Site.Name]
		if !known {
			for m := range u.Modes {
				l := chosenLink{spacecraft: c, station: f.station, transmitter: &u.Transmitter, uplink: u, antenna: &f.station.Antennas[0], mode: &u.Modes[m]}
				if err := l.prepare(sky); err != nil {
					return nil, &InputError{Err: err}
				}
				links = append(links, l)
			}
			byStation[f.station.Site.Name] = links
		}
		best, err := bestUp(s, links, eph, f.pass)
		if untold(err) {
			notes = append(notes, fmt.Sprintf("pass over %s at %s: %v", f.station.Site.Name, utc(f.pass.AOS), err))
			f.links = append(f.links, linkset.Link{Name: u.Name, Up: true})
			continue
		}
		if err != nil {
			return nil, err
		}
		link := linkset.Link{Name: u.Name, Up: true}
		for _, w := range best.Volume.Closes {
			link.Spans = append(link.Spans, linkset.Span{From: w.From.Sub(f.pass.AOS).Seconds(), To: w.To.Sub(f.pass.AOS).Seconds(), BytesPerSecond: best.DataRate.BitsPerSecond() / 8})
		}
		f.links = append(f.links, link)
	}
	return notes, nil
}

func bestUp(s *scenario.Scenario, links []chosenLink, eph *orbit.Ephemeris, p *pass.Pass) (best *downlink.Profile, err error) {
	for i := range links {
		f, err := links[i].link.Profile(eph, p.AOS, p.LOS, volumeStep(p.Duration()))
		if err != nil {
			return nil, &InputError{Err: fmt.Errorf("uplink %s over %s: %w", links[i].uplink.Name, links[i].station.Site.Name, err)}
		}
		if _, _, err := keepToLimits(s, &links[i], f); err != nil {
			return nil, err
		}
		if best == nil || f.Volume.ModeBytes > best.Volume.ModeBytes {
			best = f
		}
	}
	if best == nil {
		return nil, errors.New("an uplink without a mode")
	}
	return best, nil
}

// ratesOfSet writes what each link of a set gets of the passes.
func ratesOfSet(env *Env, o *ratesOptions, s *scenario.Scenario, craft *scenario.Spacecraft) error {
	if o.transmitter != "" || len(o.only) > 0 || o.what != ratesSheets[0] || o.rules != (rateRules{}) {
		return inputErrorf("--set divides the passes among the links of a set by the scenario's rules; it goes with --spacecraft, --station and --pass alone")
	}
	set, err := pick("set", o.set, craft.LinkSets, func(l *scenario.LinkSet) string { return l.Name })
	if err != nil {
		return err
	}
	stations, err := pickMany("station", o.stations, s.Stations, stationName)
	if err != nil {
		return err
	}
	flights, notes, err := setFlights(s, craft, set, stations)
	if err != nil {
		return err
	}
	out := &sheet{name: "shares", columns: []sheetColumn{
		wordsAs("set", "set"), wordsAs("station", "station"), wordsAs("antenna", "antenna"), wordsAs("aos_utc", "AOS UTC"), wordsAs("los_utc", "LOS UTC"),
		wordsAs("link", "link"), wordsAs("direction", "direction"), numbersAs("seconds", "s", 1), numbersAs("bytes", "B", 0),
		numbersAs("alone_seconds", "alone s", 1), numbersAs("alone_bytes", "alone B", 0),
	}}
	if flights = setFrom(flights, o.pass); len(flights) == 0 {
		env.note("there is no such pass in the window %s to %s", utc(s.Window.Start), utc(s.Window.End))
	}
	for i := range flights {
		f := &flights[i]
		for _, x := range f.shares {
			direction := downlink.Down
			if x.Up {
				direction = downlink.Up
			}
			out.rows = append(out.rows, []any{set.Name, f.station.Site.Name, f.station.Antennas[0].Name, utc(f.pass.AOS), utc(f.pass.LOS),
				x.Link, direction.String(), x.Seconds, x.Bytes, x.AloneSeconds, x.AloneBytes})
		}
	}
	out.notes = append(setNotes(set), notes...)
	return out.write(env, o.format)
}

// setFrom returns the flight of the pass under way at an instant or the next, all of them
// for the zero time.
func setFrom(flights []setFlight, at time.Time) []setFlight {
	if at.IsZero() {
		return flights
	}
	i := slices.IndexFunc(flights, func(f setFlight) bool { return !f.pass.LOS.Before(at) })
	if i < 0 {
		return nil
	}
	return flights[i : i+1]
}

// setNotes says how a set shares a pass.
func setNotes(l *scenario.LinkSet) []string {
	return []string{fmt.Sprintf("set %s: %s", l.Name, ruleText(l)),
		"each downlink follows the schedule that it would have alone; a receiver that locks anew after each change loses that time on top"}
}

// ruleText is the rule of a set in words.
func ruleText(l *scenario.LinkSet) string {
	r := &l.Rule
	how := "all links at once; what one takes from the other in power or by interference is not counted"
	switch r.Order {
	case linkset.InTurns:
		how = fmt.Sprintf("in turns of %g s, %g %% of each up, from AOS on, with %g s without data at each change of direction", r.Turn, rounded(r.UpShare*100), r.Change)
	case linkset.UpFirst:
		until := fmt.Sprintf("has worked for %g s", r.UpSeconds)
		if r.UpBytes > 0 {
			until = fmt.Sprintf("has carried %g B", r.UpBytes)
		}
		how = fmt.Sprintf("up first: the downlink begins %g s after the uplink %s", r.Change, until)
	}
	return how
}
