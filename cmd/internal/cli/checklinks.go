package cli

import (
	"errors"
	"slices"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/station"
)

// warnOfLinks prepares every link that the antennas' bands allow, as budget and report will,
// and adds what may make their answers wrong to the scenario's warnings, each once. A
// link that cannot be made for another reason than its band is such a warning, too.
func warnOfLinks(s *scenario.Scenario) {
	k := newSkies(s)
	for i := range s.Spacecraft {
		c := &s.Spacecraft[i]
		for t := range c.Transmitters {
			for j := range s.Stations {
				for a := range s.Stations[j].Antennas {
					warnOfLink(s, k, c, &c.Transmitters[t], &s.Stations[j], &s.Stations[j].Antennas[a])
				}
			}
		}
	}
}

// warnOfLink adds the warnings of one transmitter and one antenna in all modes.
func warnOfLink(s *scenario.Scenario, k *skies, c *scenario.Spacecraft, t *downlink.Transmitter, st *scenario.Station, a *station.Antenna) {
	about := "spacecraft " + c.Name + ", transmitter " + t.Name + " to station " + st.Site.Name + ", antenna " + a.Name
	add := func(text string) {
		n := scenario.Note{About: about, Text: text}
		if !slices.Contains(s.Warnings, n) {
			s.Warnings = append(s.Warnings, n)
		}
	}
	for _, m := range competing(t.Modes, "") {
		l := chosenLink{spacecraft: c, station: st, transmitter: t, antenna: a, mode: m}
		err := l.prepare(k)
		var band *downlink.BandError
		switch {
		case errors.As(err, &band):
			return
		case err != nil:
			add("there is no link: " + err.Error())
			return
		}
		for _, n := range l.linkNotes() {
			if n.Kind == downlink.Warning {
				add(n.Text)
			}
		}
	}
}
