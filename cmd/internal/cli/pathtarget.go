package cli

import (
	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// pathTarget is the path that a command asks about.
type pathTarget struct {
	scenario *scenario.Scenario
	station  *scenario.Station
	choice   *scenario.PathChoice
	spec     propagation.PathSpec
	linear   bool // both antennas, with a known angle between them
	notes    []downlink.Note
}

// target finds station, frequency, polarisation and antenna of the path.
func (o *pathOptions) target(s *scenario.Scenario) (*pathTarget, error) {
	st, err := pick("station", o.station, s.Stations, stationName)
	if err != nil {
		return nil, err
	}
	t, err := o.transmitterOf(s)
	if err != nil {
		return nil, err
	}
	sky := &skyLink{}
	k := newSkies(s)
	out := &pathTarget{scenario: s, station: st, choice: &s.Path, spec: k.spec(st, t.Frequency)}
	if o.tiltDeg != nil {
		out.spec.Tilt = unit.Angle(*o.tiltDeg) * unit.Degree
	} else {
		out.spec.Tilt = k.tilt(t, sky)
	}
	a, err := o.antennaOf(st, t.Frequency)
	if err != nil {
		return nil, err
	}
	if a != nil {
		out.spec.Aperture = apertureOf(a, t.Frequency)
		out.linear = bothLinear(t, a)
	}
	if o.diameterM != nil {
		out.spec.Aperture = &propagation.Aperture{Diameter: unit.Length(*o.diameterM), Efficiency: 0.5}
		if o.efficiency != nil {
			out.spec.Aperture.Efficiency = *o.efficiency
		}
	}
	out.notes = sky.notes
	return out, nil
}

// transmitterOf returns the transmitter that the flags name, or one of a frequency
// alone.
func (o *pathOptions) transmitterOf(s *scenario.Scenario) (*downlink.Transmitter, error) {
	if o.frequencyMHz != nil && o.spacecraft == "" && o.transmitter == "" {
		if !(*o.frequencyMHz > 0 && *o.frequencyMHz <= 1e6) {
			return nil, inputErrorf("--frequency-mhz: %g MHz is not allowed; it must be greater than 0 and at most 1000000 MHz", *o.frequencyMHz)
		}
		return &downlink.Transmitter{Frequency: unit.Frequency(*o.frequencyMHz) * unit.Megahertz}, nil
	}
	if o.frequencyMHz != nil {
		return nil, inputErrorf("--frequency-mhz stands in place of a transmitter; give one of the two")
	}
	if o.spacecraft == "" && o.transmitter == "" {
		return nil, inputErrorf("give --frequency-mhz, or --spacecraft whose transmitter has the frequency")
	}
	c, err := pick("spacecraft", o.spacecraft, s.Spacecraft, spacecraftName)
	if err != nil {
		return nil, err
	}
	return pick("transmitter", o.transmitter, c.Transmitters, transmitterName)
}

// antennaOf returns the antenna that the flags name, else the only one of the station
// that takes the frequency; nil where there is none or --diameter-m stands in its
// place.
func (o *pathOptions) antennaOf(st *scenario.Station, f unit.Frequency) (*station.Antenna, error) {
	if o.antenna != "" {
		return pick("antenna", o.antenna, st.Antennas, func(a *station.Antenna) string { return a.Name })
	}
	var found *station.Antenna
	for i := range st.Antennas {
		a := &st.Antennas[i]
		takes := len(a.Bands) == 0 || o.sweep.over == "frequency" // over all bands
		for _, b := range a.Bands {
			takes = takes || b.Holds(f)
		}
		if !takes {
			continue
		}
		if found != nil {
			return nil, nil // several: their size is not one
		}
		found = a
	}
	return found, nil
}
