package cli

import (
	"fmt"

	"slantwise/cmd/internal/scenario"
)

// commandLinks holds the uplinks of a spacecraft to the stations that can send them, each
// in its slowest to fastest mode as the scenario has them.
type commandLinks struct {
	sky   *skies
	craft *scenario.Spacecraft
	by    map[string][]chosenLink // by station; none where nothing is known of its uplink
}

func newCommandLinks(s *scenario.Scenario, c *scenario.Spacecraft) *commandLinks {
	return &commandLinks{sky: newSkies(s), craft: c, by: map[string][]chosenLink{}}
}

// of returns the uplinks of a station in every mode.
func (k *commandLinks) of(st *scenario.Station) []chosenLink {
	links, known := k.by[st.Site.Name]
	if known {
		return links
	}
	for u := range k.craft.Uplinks {
		up := &k.craft.Uplinks[u]
		for a := range st.Antennas {
			for m := range up.Modes {
				l := chosenLink{spacecraft: k.craft, station: st, transmitter: &up.Transmitter, uplink: up, antenna: &st.Antennas[a], mode: &up.Modes[m]}
				if st.Antennas[a].Transmit == nil || l.prepare(k.sky) != nil {
					break
				}
				links = append(links, l)
			}
		}
	}
	k.by[st.Site.Name] = links
	return links
}

// works tells whether an uplink of the scenario works at any time of a pass; known is
// false where the scenario says nothing of one, so that the station's word counts.
func (k *commandLinks) works(s *scenario.Scenario, f *rateFlight) (works, known bool, err error) {
	links := k.of(f.station)
	for i := range links {
		p, err := links[i].link.Profile(f.eph, f.pass.AOS, f.pass.LOS, volumeStep(f.pass.Duration()))
		if err != nil {
			return false, true, &InputError{Err: fmt.Errorf("uplink %s over %s: %w", links[i].uplink.Name, f.station.Site.Name, err)}
		}
		if _, _, err := keepToLimits(s, &links[i], p); err != nil {
			return false, true, err
		}
		if len(p.Volume.Closes) > 0 {
			return true, true, nil
		}
	}
	return false, len(links) > 0, nil
}
