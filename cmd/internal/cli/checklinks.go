package cli

import (
	"errors"
	"slices"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
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
					warnOfLink(s, k, chosenLink{spacecraft: c, transmitter: &c.Transmitters[t], station: &s.Stations[j], antenna: &s.Stations[j].Antennas[a]})
				}
			}
		}
		for u := range c.Uplinks {
			for j := range s.Stations {
				for a := range s.Stations[j].Antennas {
					if s.Stations[j].Antennas[a].Transmit != nil {
						warnOfLink(s, k, chosenLink{spacecraft: c, transmitter: &c.Uplinks[u].Transmitter, uplink: &c.Uplinks[u], station: &s.Stations[j], antenna: &s.Stations[j].Antennas[a]})
					}
				}
			}
		}
	}
}

// warnOfLink adds the warnings of one transmitter or uplink and one antenna in all modes.
func warnOfLink(s *scenario.Scenario, k *skies, c chosenLink) {
	about := "spacecraft " + c.spacecraft.Name + ", " + c.kind() + " " + c.transmitter.Name + " to station " + c.station.Site.Name + ", antenna " + c.antenna.Name
	add := func(text string) {
		n := scenario.Note{About: about, Text: text}
		if !slices.Contains(s.Warnings, n) {
			s.Warnings = append(s.Warnings, n)
		}
	}
	for _, m := range competing(c.transmitter.Modes, "") {
		l := c
		l.mode = m
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
