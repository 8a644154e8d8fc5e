package station

import (
	"fmt"

	"slantwise/orbit/unit"
)

// Transmit is what an antenna sends with: the transmit side of a station.
type Transmit struct {
	Power        unit.Level    // at the output of the power amplifier
	LineLoss     unit.DB       // from there to the antenna, 0 or greater
	Bands        []Band        // empty: any frequency
	Gain         *Tabulated    // dBi as measured in the transmit band; nil: the antenna's
	Beamwidth    unit.Angle    // as measured in the transmit band; 0: the antenna's
	Polarization *Polarization // nil: the antenna's
}

// Validate returns every fault of the transmit side at once.
func (t *Transmit) Validate() error {
	var c checker
	c.within("transmit power", t.Power.DBW(), -200, 100, "dBW")
	c.within("transmit line loss", float64(t.LineLoss), 0, 100, "dB")
	c.within("transmit beamwidth", t.Beamwidth.Degrees(), 0, 360, "deg")
	c.bands("transmit band", t.Bands)
	if t.Polarization != nil {
		t.Polarization.check(&c)
	}
	return c.joined()
}

// Sending returns the antenna as it sends at a frequency: with the bands, the gain,
// the beamwidth and the polarisation of its transmit side, without noise and G/T, which
// are of the receiver. A gain or a beamwidth that was measured counts for sending only
// within the antenna's own bands, as it says nothing of others; a diameter with an
// efficiency serves every frequency. The error says what is missing.
func (a *Antenna) Sending(f unit.Frequency) (*Antenna, error) {
	t := a.Transmit
	if t == nil {
		return nil, fmt.Errorf("antenna %q: it has no transmit side; give transmit with its power", a.Name)
	}
	out := *a
	out.Bands, out.Noise, out.GOverT, out.GOverTElevation, out.Measurement = t.Bands, nil, nil, nil, nil
	received := len(a.Bands) == 0
	for _, b := range a.Bands {
		received = received || b.Holds(f)
	}
	switch {
	case t.Gain != nil:
		out.Gain = t.Gain
	case a.Gain != nil && !received:
		return nil, fmt.Errorf("antenna %q: its gain was measured in the bands that it receives, and %g MHz lies outside them; give transmit.gain_dbi", a.Name, f.Megahertz())
	case a.Gain == nil && !a.hasAperture():
		return nil, fmt.Errorf("antenna %q: its gain for sending is not known; give transmit.gain_dbi, or diameter and efficiency", a.Name)
	}
	switch {
	case t.Beamwidth > 0:
		out.Beamwidth = t.Beamwidth
	case a.Beamwidth > 0 && !received && a.Diameter > 0:
		out.Beamwidth = 0 // from the diameter
	case a.Beamwidth > 0 && !received:
		return nil, fmt.Errorf("antenna %q: its beamwidth was measured in the bands that it receives, and %g MHz lies outside them; give transmit.beamwidth_deg", a.Name, f.Megahertz())
	}
	if t.Polarization != nil {
		out.Polarization = t.Polarization
	}
	return &out, nil
}
