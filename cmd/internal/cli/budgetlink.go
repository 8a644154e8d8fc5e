package cli

import (
	"fmt"
	"slices"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/modem"
	"slantwise/station"
)

// chosenLink is one link of the scenario, prepared.
type chosenLink struct {
	spacecraft  *scenario.Spacecraft
	station     *scenario.Station
	transmitter *downlink.Transmitter
	antenna     *station.Antenna
	mode        *modem.Mode // nil: the transmitter has none
	link        *downlink.Link
}

// chooseLink finds what the names name and prepares the link. What the scenario
// holds several of must be named, but for a transmitter without modes.
func chooseLink(s *scenario.Scenario, n linkNames) (*chosenLink, error) {
	var c chosenLink
	var err error
	if c.spacecraft, err = pick("spacecraft", n.spacecraft, s.Spacecraft, func(v *scenario.Spacecraft) string { return v.Name }); err != nil {
		return nil, err
	}
	if c.station, err = pick("station", n.station, s.Stations, func(v *scenario.Station) string { return v.Site.Name }); err != nil {
		return nil, err
	}
	if c.transmitter, err = pick("transmitter", n.transmitter, c.spacecraft.Transmitters, func(v *downlink.Transmitter) string { return v.Name }); err != nil {
		return nil, err
	}
	if c.antenna, err = pick("antenna", n.antenna, c.station.Antennas, func(v *station.Antenna) string { return v.Name }); err != nil {
		return nil, err
	}
	if len(c.transmitter.Modes) > 0 || n.mode != "" {
		if c.mode, err = pick("mode", n.mode, c.transmitter.Modes, func(v *modem.Mode) string { return v.Name }); err != nil {
			return nil, err
		}
	}
	if c.link, err = makeLink(c.station, c.transmitter, c.antenna, c.mode); err != nil {
		return nil, &InputError{Err: err}
	}
	return &c, nil
}

// notes gathers what an answer about the link takes for granted: the link's own
// notes and the defaults of the scenario that touch it. The scenario lists every
// default with its key, so that the link's own list of them is left out.
func (c *chosenLink) notes(s *scenario.Scenario, flown bool) []downlink.Note {
	var out []downlink.Note
	for _, n := range c.link.Notes() {
		if n.Kind != downlink.Default {
			out = append(out, n)
		}
	}
	for _, n := range s.Assumptions {
		if c.touchedBy(n.About) || flown && n.About == "earth" {
			out = append(out, downlink.Note{Kind: downlink.Default, Text: n.String()})
		}
	}
	return out
}

// touchedBy tells whether a note of the scenario is about a part of the link.
func (c *chosenLink) touchedBy(about string) bool {
	craft := "spacecraft " + c.spacecraft.Name
	transmitter := craft + ", transmitter " + c.transmitter.Name
	site := "station " + c.station.Site.Name
	parts := []string{craft, transmitter, site, site + ", antenna " + c.antenna.Name}
	if c.mode != nil {
		parts = append(parts, transmitter+", mode "+c.mode.Name)
	}
	return slices.Contains(parts, about)
}

// makeLink prepares a link with the site's frame and refraction.
func makeLink(st *scenario.Station, t *downlink.Transmitter, a *station.Antenna, m *modem.Mode) (*downlink.Link, error) {
	frame := st.Site.Frame()
	refraction, err := station.NewRefraction(st.Site.Altitude - st.Site.GeoidHeight)
	if err != nil {
		return nil, fmt.Errorf("station %s: %w", st.Site.Name, err)
	}
	return downlink.NewLink(downlink.LinkSpec{Transmitter: *t, Mode: m, Frame: &frame, Refraction: refraction, Antenna: a})
}
