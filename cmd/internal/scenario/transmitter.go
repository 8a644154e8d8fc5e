package scenario

import (
	"strings"

	"slantwise/downlink"
	"slantwise/orbit/unit"
)

var transmitterKeys = []string{
	"name", "frequency_mhz", "power_w", "power_dbm", "power_dbw", "eirp_dbw", "eirp_dbm", "line_loss_db", "antenna",
	"attitude", "attitude_probability", "attitude_file", "spin", "polarization", "axial_ratio_db", "polarization_tilt_deg", "modes",
	"other_polarization_in_use", "implementation_loss_db", "required_margin_db", "extra_losses", "allotted_bandwidth_mhz", "highest_data_rate_bps",
	"eirp_is_greatest", "spectrum_peak_db_hz", "oscillator", "coherent",
}

// Ranges of radio keys; the far ends keep every sum of decibels finite.
var (
	frequencyMHz = atLeast(0.003, 1e6, "MHz") // from the lowest radio band of the ITU on
	gainDBi      = span{low: -200, high: 200, unit: "dBi"}
	lossDB       = span{low: 0, high: 100, unit: "dB", next: "a loss is a positive number"}
	marginDB     = span{low: -100, high: 100, unit: "dB"}
	bitsASecond  = above(0, 1e15, "bit/s")
	fraction     = span{low: 0, high: 1, lowOpen: true}
)

func (r *reader) transmitters(owner object) []downlink.Transmitter {
	items := owner.objects("transmitters", "transmitters", maxParts, transmitterKeys)
	called := names("transmitter", items)
	var out []downlink.Transmitter
	for i, o := range items {
		o.about = owner.about + ", transmitter " + called[i]
		out = append(out, r.transmitter(o, called[i]))
	}
	return out
}

func (r *reader) transmitter(o object, name string) downlink.Transmitter {
	t := downlink.Transmitter{Name: name}
	t.Frequency = unit.Frequency(o.required("frequency_mhz", frequencyMHz, "the carrier's frequency")) * unit.Megahertz
	o.radiatedPower(&t)
	o.attitude(&t, r.need)
	t.Polarization = o.polarization()
	t.OtherPolarization = o.flag("other_polarization_in_use")
	t.Modes = o.modes()
	t.ImplementationLoss = unit.DB(o.zeroLeftOut("implementation_loss_db", lossDB))
	t.RequiredMargin = unit.DB(o.zeroLeftOut("required_margin_db", marginDB))
	for _, l := range o.losses(false) {
		t.ExtraLosses = append(t.ExtraLosses, downlink.Loss{Name: l.Name, Loss: l.Loss})
	}
	t.AllottedBandwidth = unit.Frequency(o.numberOr("allotted_bandwidth_mhz", above(0, 1e6, "MHz"), 0)) * unit.Megahertz
	t.HighestRate = unit.BitRate(o.numberOr("highest_data_rate_bps", bitsASecond, 0))
	t.Oscillator, t.Turnaround = o.oscillator(t.Frequency), o.coherent()
	t.EIRPIsGreatest = o.flag("eirp_is_greatest")
	if t.EIRP == nil {
		o.useless("without a stated EIRP", "eirp_is_greatest")
	}
	if v, ok := o.number("spectrum_peak_db_hz", span{low: -200, high: 0, unit: "dB(1/Hz)", next: "it is the peak density over the whole power"}); ok {
		peak := unit.DB(v)
		t.SpectrumPeak = &peak
	}
	return t
}

// required returns the number of a key that must be there, or 0 with a fault.
func (o object) required(key string, in span, what string) float64 {
	if !o.has(key) {
		o.missing(key, what+", "+in.allowed())
		return 0
	}
	return o.numberOr(key, in, 0)
}

// zeroLeftOut returns the number of a key; where it is left out it is 0, and that is
// noted.
func (o object) zeroLeftOut(key string, in span) float64 {
	if o.node != nil && !o.has(key) {
		o.assume("%s left out: 0 %s", key, in.unit)
	}
	return o.numberOr(key, in, 0)
}

// radiatedPower reads power, line loss and antenna, or the EIRP in their place.
func (o object) radiatedPower(t *downlink.Transmitter) {
	which, given := o.exclusive("power_w", "power_dbm", "power_dbw", "eirp_dbw", "eirp_dbm")
	if !given {
		o.missing("power_w", "one of power_w, power_dbm, power_dbw, eirp_dbw, eirp_dbm")
		return
	}
	if which == "eirp_dbw" || which == "eirp_dbm" {
		t.EIRP = o.level(which)
		o.useless("beside "+which+", which holds power, line loss and antenna gain", "line_loss_db", "antenna")
		return
	}
	t.Power = o.power(which)
	t.LineLoss = unit.DB(o.zeroLeftOut("line_loss_db", lossDB))
	t.Pattern, t.Body = o.pattern()
}

func (o object) power(key string) unit.Level {
	switch key {
	case "power_w":
		if v, ok := o.number(key, atLeast(1e-20, 1e9, "W")); ok {
			level, err := unit.LevelWatts(v)
			o.addAll(o.get(key), key, err)
			return level
		}
	case "power_dbm", "power_dbw":
		if l := o.level(key); l != nil {
			return *l
		}
	}
	return unit.Level{}
}

// level reads a power in dBm or dBW, by the end of its key, and tells the other and the
// watts; nil where it is not there or wrong.
func (o object) level(key string) *unit.Level {
	in, of := span{low: -200, high: 200, unit: "dBW"}, unit.LevelDBW
	if strings.HasPrefix(key, "power") {
		in.high = 90 // what a transmitter may have
	}
	if strings.HasSuffix(key, "_dbm") {
		in, of = span{low: in.low + 30, high: in.high + 30, unit: "dBm"}, unit.LevelDBm
	}
	v, ok := o.number(key, in)
	if !ok {
		return nil
	}
	l := of(v)
	o.assume("%s %s understood as %s dBm, %s dBW, %.4g W", key, figure(v), figure(roundTo(l.DBm(), 1e6)), figure(roundTo(l.DBW(), 1e6)), l.Watts())
	return &l
}
