package scenario

import (
	"slantwise/downlink"
	"slantwise/orbit/unit"
	"slantwise/station"
)

var (
	uplinkKeys = []string{
		"name", "frequency_mhz", "line_loss_db", "antenna", "attitude", "attitude_probability", "spin",
		"polarization", "axial_ratio_db", "polarization_tilt_deg", "modes",
		"noise", "g_over_t_db_k", "sensitivity_dbm", "sensitivity_data_rate_bps", "sensitivity_mode",
		"implementation_loss_db", "required_margin_db", "extra_losses", "allotted_bandwidth_mhz", "highest_data_rate_bps", "oscillator",
	}
	transmitKeys = []string{
		"power_w", "power_dbm", "power_dbw", "line_loss_db", "bands_mhz", "gain_dbi", "beamwidth_deg",
		"polarization", "axial_ratio_db", "polarization_tilt_deg",
	}
)

// uplinks reads the receivers of a spacecraft. Their names differ from those of its
// transmitters, so that a licence and a link set can name either.
func (r *reader) uplinks(owner object, transmitters []downlink.Transmitter) []downlink.Receiver {
	items := owner.objects("uplinks", "uplinks", maxParts, uplinkKeys)
	called := names("uplink", items)
	var out []downlink.Receiver
	for i, o := range items {
		o.about = owner.about + ", uplink " + called[i]
		for _, t := range transmitters {
			if t.Name == called[i] && t.Name != "" {
				o.fault(o.get("name"), "name", "a transmitter of the spacecraft is named %s, too", "give the uplink a name of its own", quote(t.Name))
			}
		}
		out = append(out, r.uplink(o, called[i]))
	}
	return out
}

func (r *reader) uplink(o object, name string) downlink.Receiver {
	before := r.faults.count()
	u := downlink.Receiver{Transmitter: downlink.Transmitter{Name: name}}
	u.Frequency = unit.Frequency(o.required("frequency_mhz", frequencyMHz, "the carrier's frequency as the spacecraft receives it")) * unit.Megahertz
	o.receiverNoise(&u)
	o.receiveAntenna(&u)
	if u.AntennaUnknown {
		o.useless("without antenna", "attitude", "attitude_probability", "spin")
	} else {
		o.attitude(&u.Transmitter, r.need)
	}
	u.Polarization = o.polarization()
	u.Modes = o.modes()
	u.ImplementationLoss = unit.DB(o.zeroLeftOut("implementation_loss_db", lossDB))
	u.RequiredMargin = unit.DB(o.zeroLeftOut("required_margin_db", marginDB))
	for _, l := range o.losses(false) {
		u.ExtraLosses = append(u.ExtraLosses, downlink.Loss{Name: l.Name, Loss: l.Loss})
	}
	u.AllottedBandwidth = unit.Frequency(o.numberOr("allotted_bandwidth_mhz", above(0, 1e6, "MHz"), 0)) * unit.Megahertz
	u.HighestRate = unit.BitRate(o.numberOr("highest_data_rate_bps", bitsASecond, 0))
	u.Oscillator = o.oscillator(u.Frequency)
	if r.faults.count() == before && !r.codingsUnread {
		o.addAll(o.node, "", u.Validate())
	}
	if r.faults.count() == before && u.Sensitivity != nil {
		o.tellSensitivity(&u)
	}
	return u
}

// tellSensitivity shows a sensitivity as it was understood.
func (o object) tellSensitivity(u *downlink.Receiver) {
	o.assume("sensitivity_dbm understood as a system noise of %.4g K at the receiver's input: at %s bit/s the signal has there just the required Eb/N0 and the implementation loss",
		u.ImpliedNoise().Kelvins(), figure(u.Sensitivity.Rate.BitsPerSecond()))
}

// receiveAntenna reads the spacecraft's antenna, which a G/T alone can do without.
func (o object) receiveAntenna(u *downlink.Receiver) {
	if o.has("antenna") {
		u.LineLoss = unit.DB(o.zeroLeftOut("line_loss_db", lossDB))
		u.Pattern, u.Body = o.pattern()
		return
	}
	if u.GOverT == nil {
		o.missing("antenna", "the receive antenna, for instance antenna: {pattern: isotropic}")
		return
	}
	u.AntennaUnknown = true
	o.useless("without antenna, as g_over_t_db_k holds it", "line_loss_db")
	o.assume("antenna left out: g_over_t_db_k holds in every direction")
}

// receiverNoise reads how the noise of the receiver is known.
func (o object) receiverNoise(u *downlink.Receiver) {
	which, given := o.exclusive("noise", "g_over_t_db_k", "sensitivity_dbm")
	if which != "sensitivity_dbm" {
		o.useless("without sensitivity_dbm", "sensitivity_data_rate_bps", "sensitivity_mode")
	}
	switch {
	case !given:
		o.missing("noise", "one of noise, g_over_t_db_k, sensitivity_dbm with its data rate")
	case which == "noise":
		u.Noise = o.noise(false)
	case which == "g_over_t_db_k":
		if v, ok := o.number(which, span{low: -100, high: 100, unit: "dB/K"}); ok {
			ratio := unit.DB(v)
			u.GOverT = &ratio
		}
	default:
		u.Sensitivity = o.sensitivity()
	}
}

func (o object) sensitivity() *downlink.Sensitivity {
	s := &downlink.Sensitivity{}
	s.Power = unit.LevelDBm(o.numberOr("sensitivity_dbm", span{low: -250, high: 100, unit: "dBm"}, 0))
	s.Rate = unit.BitRate(o.required("sensitivity_data_rate_bps", bitsASecond, "the data rate that the sensitivity was found at, without which it says nothing"))
	s.Mode, _ = o.text("sensitivity_mode")
	return s
}

// transmit reads the transmit side of a station's antenna, nil where it receives alone.
func (o object) transmit() *station.Transmit {
	if !o.has("transmit") {
		return nil
	}
	c := o.child("transmit", transmitKeys)
	c.about = o.about + ", transmit"
	t := &station.Transmit{}
	which, given := c.exclusive("power_w", "power_dbm", "power_dbw")
	if !given {
		c.missing("power_w", "the power at the amplifier's output, or power_dbm, power_dbw")
	} else {
		t.Power = c.power(which)
	}
	t.LineLoss = unit.DB(c.zeroLeftOut("line_loss_db", lossDB))
	t.Bands = c.bands()
	t.Gain = c.tabulated("gain_dbi", gainDBi)
	t.Beamwidth = unit.Angle(c.numberOr("beamwidth_deg", above(0, 360, "deg"), 0)) * unit.Degree
	if c.has("polarization") {
		t.Polarization = c.polarization()
	} else if c.node != nil {
		c.useless("without polarization", "axial_ratio_db", "polarization_tilt_deg")
		c.assume("polarization left out: as the antenna receives")
	}
	return t
}

// canSend tells whether any antenna has a transmit side.
func canSend(antennas []station.Antenna) bool {
	for i := range antennas {
		if antennas[i].Transmit != nil {
			return true
		}
	}
	return false
}
