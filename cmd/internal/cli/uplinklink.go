package cli

import (
	"fmt"
	"slices"
	"strings"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/orbit/unit"
	"slantwise/station"
)

func uplinkName(u *downlink.Receiver) string { return u.Name }

// pickEnd finds the transmitter or the uplink of the spacecraft that the names name.
// A spacecraft that can only receive needs no --uplink where it has one alone.
func (c *chosenLink) pickEnd(n linkNames) error {
	var err error
	if n.uplink != "" && n.transmitter != "" {
		return inputErrorf("--transmitter names a downlink, --uplink an uplink; give one of the two")
	}
	if n.uplink == "" {
		c.transmitter, err = pick("transmitter", n.transmitter, c.spacecraft.Transmitters, transmitterName)
		if err != nil && n.transmitter == "" && len(c.spacecraft.Uplinks) > 0 {
			return inputErrorf("%w; or --uplink with one of %s", err, quotedList(uplinkNames(c.spacecraft)))
		}
		return err
	}
	if c.uplink, err = pick("uplink", n.uplink, c.spacecraft.Uplinks, uplinkName); err != nil {
		return err
	}
	c.transmitter = &c.uplink.Transmitter
	return nil
}

func uplinkNames(c *scenario.Spacecraft) []string {
	var out []string
	for i := range c.Uplinks {
		out = append(out, c.Uplinks[i].Name)
	}
	return out
}

// pickAntenna finds the antenna that a name names; of several without a name, in an
// uplink, the only one that can send.
func (c *chosenLink) pickAntenna(name string) error {
	all := c.station.Antennas
	if c.uplink != nil && name == "" {
		var able []station.Antenna
		for _, a := range all {
			if a.Transmit != nil {
				able = append(able, a)
			}
		}
		if len(able) == 0 {
			return inputErrorf("station %s: no antenna has a transmit side; give one transmit with its power", c.station.Site.Name)
		}
		all = able
	}
	found, err := pick("antenna", name, all, func(v *station.Antenna) string { return v.Name })
	if err != nil {
		return err
	}
	i := slices.IndexFunc(c.station.Antennas, func(a station.Antenna) bool { return a.Name == found.Name })
	c.antenna = &c.station.Antennas[i]
	return nil
}

// kind names the spacecraft's end of the link as notes of the scenario do.
func (c *chosenLink) kind() string {
	if c.uplink != nil {
		return "uplink"
	}
	return "transmitter"
}

// takesFrequency tells whether the side of the antenna that the link uses takes its
// frequency, before the path is prepared, which takes longer.
func (c *chosenLink) takesFrequency() error {
	bands := c.antenna.Bands
	if c.uplink != nil {
		if c.antenna.Transmit == nil {
			_, err := c.antenna.Sending(c.uplink.Frequency)
			return err
		}
		bands = c.antenna.Transmit.Bands
	}
	f := c.transmitter.Frequency
	if len(bands) > 0 && !slices.ContainsFunc(bands, func(b station.Band) bool { return b.Holds(f) }) {
		return &downlink.BandError{Antenna: c.antenna.Name, Frequency: f, Bands: bands}
	}
	return nil
}

// skyOf prepares what lies between the two ends: for an uplink the air alone, as the
// noise of the station's sky does not reach the spacecraft.
func (c *chosenLink) skyOf(k *skies, clear bool) (*skyLink, error) {
	if c.uplink == nil {
		return k.between(c.station, c.transmitter, c.antenna, clear)
	}
	sending, err := c.antenna.Sending(c.uplink.Frequency)
	if err != nil {
		return nil, err
	}
	wave := *c.transmitter // as the station sends it
	wave.Polarization = sending.Polarization
	return k.over(c.station, &wave, sending, clear)
}

// radiation is that of the station's antenna in an uplink; ok is false in a downlink.
func (c *chosenLink) radiation() (r station.Radiation, ok bool) {
	if c.uplink == nil {
		return r, false
	}
	sending, err := c.antenna.Sending(c.uplink.Frequency)
	if err != nil {
		return r, false
	}
	return sending.RadiationAt(c.uplink.Frequency)
}

// radiationCaution is what must stand wherever a station sends.
const radiationCaution = "Radiation: these figures hold on the axis of the main beam; side lobes, the feed and reflections come on top. Nobody may stand in the beam or near the feed until the power is off and locked off; local limits and a licensed person decide what is allowed, and no figure here is called safe."

// radiationDistances are those at which the power density is shown.
var radiationDistances = []unit.Length{10 * unit.Metre, 100 * unit.Metre, 1000 * unit.Metre}

// radiationText says how much the antenna radiates, a line each.
func radiationText(r *station.Radiation) []string {
	lines := []string{fmt.Sprintf("%.4g W reach the antenna; EIRP %.2f dBW (%s) on the axis", r.Fed.Watts(), r.EIRP.DBW(), scaled(r.EIRP.Watts(), "W"))}
	if r.NearFieldMost > 0 {
		lines = append(lines,
			fmt.Sprintf("near field to %.4g m (D²/4λ): at most %.4g W/m² (4P/A)", r.NearFieldEnd.Metres(), r.NearFieldMost),
			fmt.Sprintf("far field from %.4g m (2D²/λ): %.4g W/m² there, falling with the square of the distance", r.FarFieldFrom.Metres(), r.DensityAt(r.FarFieldFrom)))
	} else {
		lines = append(lines, "the size of the antenna is not known: no figure for its near field")
	}
	var at []string
	for _, d := range radiationDistances {
		at = append(at, fmt.Sprintf("%.4g W/m² at %g m", r.DensityAt(d), d.Metres()))
	}
	return append(lines, "power density: "+strings.Join(at, ", "))
}
