package cli

import (
	"fmt"
	"slices"
	"time"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/rateplan"
	"slantwise/orbit"
	"slantwise/station/pass"
)

// rateFlight is a pass as a rate plan needs it: C/N0 does not depend on the mode, so
// that one profile serves all.
type rateFlight struct {
	station *scenario.Station
	link    *chosenLink
	eph     *orbit.Ephemeris
	pass    *pass.Pass
	profile *downlink.Profile // kept to the licences
	track   rateplan.Track
	cut     bool // whether a licence takes time of it
}

// rateFlights flies all passes of a spacecraft over stations, in the order of AOS,
// with notes of what is left out or taken by licences.
func rateFlights(s *scenario.Scenario, c *scenario.Spacecraft, tx *downlink.Transmitter, stations []scenario.Station) ([]rateFlight, []string, error) {
	var all []rateFlight
	var notes []string
	if len(tx.Modes) == 0 {
		return nil, []string{"transmitter " + tx.Name + " has no mode"}, nil
	}
	sky := newSkies(s)
	for i := range stations {
		st := &stations[i]
		link, why := linkOver(sky, c, st, tx)
		if link == nil {
			notes = append(notes, fmt.Sprintf("no contact over %s: %s", st.Site.Name, why))
			continue
		}
		if why != "" {
			notes = append(notes, fmt.Sprintf("over %s: %s", st.Site.Name, why))
		}
		eph, found, err := passesOver(s, c, st)
		if err != nil {
			return nil, nil, err
		}
		for k := range found {
			f := rateFlight{station: st, link: link, eph: eph, pass: &found[k]}
			told, err := f.fly(s)
			if untold(err) {
				notes = append(notes, fmt.Sprintf("no contact over %s at %s: %v", st.Site.Name, utc(f.pass.AOS), err))
				continue
			}
			if err != nil {
				return nil, nil, err
			}
			for _, n := range told {
				if text := fmt.Sprintf("pass over %s at %s: %s", st.Site.Name, utc(f.pass.AOS), n.Text); !slices.Contains(notes, text) {
					notes = append(notes, text)
				}
			}
			all = append(all, f)
		}
	}
	slices.SortStableFunc(all, func(a, b rateFlight) int { return a.pass.AOS.Compare(b.pass.AOS) })
	return all, notes, nil
}

// fly makes the profile of the pass and keeps it to the licences.
func (f *rateFlight) fly(s *scenario.Scenario) ([]downlink.Note, error) {
	p := f.pass
	var err error
	if f.profile, err = f.link.link.Profile(f.eph, p.AOS, p.LOS, volumeStep(p.Duration())); err != nil {
		return nil, &InputError{Err: fmt.Errorf("%s over %s: %w", f.link.spacecraft.Name, f.station.Site.Name, err)}
	}
	told, _, err := keepToLimits(s, f.link, f.profile)
	f.cut = slices.ContainsFunc(f.profile.Seconds, func(at float64) bool { return !f.profile.Permits(at) })
	f.track = rateplan.FromProfile(f.profile)
	return told, err
}

// linkOver prepares the transmitter's first mode to the first antenna of the station
// that takes it. why tells that there is none, or which of several it is.
func linkOver(sky *skies, c *scenario.Spacecraft, st *scenario.Station, tx *downlink.Transmitter) (link *chosenLink, why string) {
	if len(st.Antennas) == 0 {
		return nil, "it has no antenna"
	}
	alone := *c // its orbit and how uncertain that is stay
	alone.Transmitters = []downlink.Transmitter{*tx}
	found := linksBetween(sky, &alone, &reportSite{Station: st}, tx.Modes[0].Name)
	if len(found.links) == 0 {
		return nil, "no antenna takes the transmitter"
	}
	if first, n := found.links[0].antenna.Name, len(found.links); n > 1 {
		why = fmt.Sprintf("of %d antennas that take %s the first is counted, %s; set another one first to count that", n, tx.Name, first)
	}
	return &found.links[0].modes[0], why
}

// passFrom returns the flight of the pass under way at an instant or the next, all of
// them for the zero time.
func passFrom(flights []rateFlight, at time.Time) []rateFlight {
	if at.IsZero() {
		return flights
	}
	for i := range flights {
		if !flights[i].pass.LOS.Before(at) {
			return flights[i : i+1]
		}
	}
	return nil
}
