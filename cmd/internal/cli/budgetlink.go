package cli

import (
	"fmt"

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

// makeLink prepares a link with the site's frame and refraction.
func makeLink(st *scenario.Station, t *downlink.Transmitter, a *station.Antenna, m *modem.Mode) (*downlink.Link, error) {
	frame := st.Site.Frame()
	refraction, err := station.NewRefraction(st.Site.Altitude - st.Site.GeoidHeight)
	if err != nil {
		return nil, fmt.Errorf("station %s: %w", st.Site.Name, err)
	}
	return downlink.NewLink(downlink.LinkSpec{Transmitter: *t, Mode: m, Frame: &frame, Refraction: refraction, Antenna: a})
}
