package cli

import (
	"fmt"
	"slices"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/modem"
	"slantwise/station"
	"slantwise/station/pass"
)

// chosenLink is one link of the scenario, prepared.
type chosenLink struct {
	spacecraft  *scenario.Spacecraft
	station     *scenario.Station
	transmitter *downlink.Transmitter // or what the uplink shares with one
	uplink      *downlink.Receiver    // nil: the spacecraft sends
	antenna     *station.Antenna
	mode        *modem.Mode // nil: the transmitter has none
	link        *downlink.Link
	sky         *skyLink
	refraction  *station.Refraction  // of the station; nil: not traced yet
	orbit       *downlink.OrbitError // nil: the position is taken as exact
	clear       *downlink.Link       // the same under a clear sky; nil where link is that already
}

// chooseLink finds what the names name and prepares the link. What the scenario
// holds several of must be named, but for a transmitter without modes. flight is when its orbit is
// flown; zero for none, which has no error either.
func chooseLink(s *scenario.Scenario, n linkNames, flight pass.Window) (*chosenLink, error) {
	var c chosenLink
	var err error
	if c.spacecraft, err = pick("spacecraft", n.spacecraft, s.Spacecraft, spacecraftName); err != nil {
		return nil, err
	}
	if c.station, err = pick("station", n.station, s.Stations, stationName); err != nil {
		return nil, err
	}
	if err := c.pickEnd(n); err != nil {
		return nil, err
	}
	if err := c.pickAntenna(n.antenna); err != nil {
		return nil, err
	}
	if len(c.transmitter.Modes) > 0 || n.mode != "" {
		if c.mode, err = pick("mode", n.mode, c.transmitter.Modes, func(v *modem.Mode) string { return v.Name }); err != nil {
			return nil, err
		}
	}
	k := newSkies(s)
	k.flight = flight
	if err := c.prepare(k); err != nil {
		return nil, &InputError{Err: err}
	}
	return &c, nil
}

// notes gathers what an answer about the link takes for granted: the link's own
// notes and the defaults of the scenario that touch it. The scenario lists every
// default with its key, so that the link's own list of them is left out.
func (c *chosenLink) notes(s *scenario.Scenario, flown bool) []downlink.Note {
	var out []downlink.Note
	for _, n := range c.linkNotes() {
		if n.Kind != downlink.Default {
			out = append(out, n)
		}
	}
	for _, n := range s.Assumptions {
		if c.touchedBy(n.About) || flown && n.About == "earth" || n.About == "path" || flown && n.About == "position uncertainty" {
			out = append(out, downlink.Note{Kind: downlink.Default, Text: n.String()})
		}
	}
	return out
}

// touchedBy tells whether a note of the scenario is about a part of the link.
func (c *chosenLink) touchedBy(about string) bool {
	craft := "spacecraft " + c.spacecraft.Name
	transmitter := craft + ", " + c.kind() + " " + c.transmitter.Name
	site := "station " + c.station.Site.Name
	parts := []string{craft, craft + ", position uncertainty", transmitter, transmitter + ", antenna", site, site + ", antenna " + c.antenna.Name,
		site + ", antenna " + c.antenna.Name + ", mount"}
	if c.uplink != nil {
		parts = append(parts, site+", antenna "+c.antenna.Name+", transmit")
	}
	if c.mode != nil {
		parts = append(parts, transmitter+", mode "+c.mode.Name)
	}
	return slices.Contains(parts, about)
}

// linkNotes are those of the link with those of its sky.
func (c *chosenLink) linkNotes() []downlink.Note {
	return append(append([]downlink.Note(nil), c.link.Notes()...), c.sky.notes...)
}

// prepare makes the link with the site's frame and refraction, under the weather that
// the scenario asks for and under a clear sky.
func (c *chosenLink) prepare(k *skies) error {
	if err := c.takesFrequency(); err != nil {
		return err
	}
	clear := k.scenario.Path.ClearSky
	var err error
	if c.orbit, err = k.orbitError(c.spacecraft); err != nil {
		return err
	}
	if c.sky, err = c.skyOf(k, clear); err != nil {
		return err
	}
	if c.link, err = c.make(k, c.sky, clear); err != nil || clear {
		return err
	}
	fine, err := c.skyOf(k, true)
	if err != nil {
		return err
	}
	c.clear, err = c.make(k, fine, true)
	return err
}

func (c *chosenLink) make(k *skies, sky *skyLink, clear bool) (*downlink.Link, error) {
	spec, err := c.bareSpec()
	if err != nil {
		return nil, err
	}
	spec.PathModels, spec.NoiseModels, spec.CrossPolar = sky.paths, sky.noise, sky.cross
	spec.Bodies, spec.Sun, spec.Moon, spec.ClearSky = k.bodies, sky.sun, sky.moon, clear
	return downlink.NewLink(spec)
}

// bareSpec is the link in free space.
func (c *chosenLink) bareSpec() (downlink.LinkSpec, error) {
	site := &c.station.Site
	frame := site.Frame()
	if c.refraction == nil {
		var err error
		if c.refraction, err = station.NewRefraction(site.HeightAboveSea()); err != nil {
			return downlink.LinkSpec{}, fmt.Errorf("station %s: %w", site.Name, err)
		}
	}
	return downlink.LinkSpec{Transmitter: *c.transmitter, Receiver: c.uplink, Mode: c.mode, Frame: &frame, Refraction: c.refraction, Antenna: c.antenna, Orbit: c.orbit}, nil
}
