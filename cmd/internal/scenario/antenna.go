package scenario

import (
	"fmt"
	"time"

	"slantwise/orbit/unit"
	"slantwise/station"
)

var antennaKeys = []string{
	"name", "kind", "diameter_m", "efficiency", "surface_rms_mm", "blockage_fraction", "beamwidth_factor_deg",
	"gain_dbi", "beamwidth_deg", "g_over_t_db_k", "g_over_t_elevation_deg", "measured_on", "measured_weather",
	"boresight_azimuth_deg", "boresight_elevation_deg", "pointing_error_deg", "follows",
	"polarization", "axial_ratio_db", "polarization_tilt_deg", "bands_mhz", "feed_loss_db", "extra_losses", "noise", "transmit",
	"mount",
}

func (o object) antennas() []station.Antenna {
	items := o.objects("antennas", "antennas", maxParts, antennaKeys)
	called := names("antenna", items)
	if !o.has("antennas") {
		o.assume("antennas left out: passes and pointing only")
	}
	var out []station.Antenna
	for i, it := range items {
		it.about = o.about + ", antenna " + called[i]
		out = append(out, it.antenna(called[i]))
	}
	return out
}

func (o object) antenna(name string) station.Antenna {
	before := o.r.faults.count()
	a := station.Antenna{Name: name}
	word, _ := o.word("kind", "dish", "directive", "fixed")
	if !o.has("kind") {
		o.missing("kind", "dish, directive or fixed")
	}
	a.Kind = map[string]station.AntennaKind{"dish": station.Dish, "directive": station.Directive, "fixed": station.Fixed}[word]
	o.aperture(&a)
	o.measured(&a)
	o.boresight(&a)
	a.PointingRMS = unit.Angle(o.zeroLeftOut("pointing_error_deg", atLeast(0, 180, "deg"))) * unit.Degree
	a.Follows = o.follows(a.Kind)
	a.Polarization = o.polarization()
	a.Bands = o.bands()
	a.FeedLoss = unit.DB(o.zeroLeftOut("feed_loss_db", lossDB))
	a.ExtraLosses = o.losses(true)
	a.Noise = o.noise(a.GOverT != nil)
	a.Transmit = o.transmit()
	a.Mount = o.mount(a.Kind)
	if o.r.faults.count() == before {
		o.addAll(o.node, "", a.Validate())
	}
	return a
}

// follows reads by what a steered antenna is led.
func (o object) follows(kind station.AntennaKind) station.Follows {
	if kind == station.Fixed {
		o.useless("with kind: fixed, which is not steered", "follows")
		return station.FollowsPrediction
	}
	if w, _ := o.word("follows", "prediction", "signal"); w == "signal" {
		return station.FollowsSignal
	}
	return station.FollowsPrediction
}

// aperture reads the keys from which a dish's gain and beamwidth are worked out.
func (o object) aperture(a *station.Antenna) {
	if a.Kind != station.Dish {
		o.useless(fmt.Sprintf("with kind: %s, whose gain is as measured", a.Kind),
			"diameter_m", "efficiency", "surface_rms_mm", "blockage_fraction", "beamwidth_factor_deg")
		return
	}
	if o.has("gain_dbi") {
		o.useless("beside gain_dbi, which holds it already", "efficiency", "surface_rms_mm", "blockage_fraction")
	}
	a.Diameter = unit.Length(o.numberOr("diameter_m", atLeast(0.001, 1000, "m"), 0))
	a.Efficiency = o.numberOr("efficiency", fraction, 0)
	a.SurfaceRMS = unit.Length(o.numberOr("surface_rms_mm", atLeast(0, 1000, "mm"), 0)) * unit.Millimetre
	a.BlockageFraction = o.numberOr("blockage_fraction", span{low: 0, high: 1, highOpen: true}, 0)
	a.BeamwidthFactor = unit.Angle(o.numberOr("beamwidth_factor_deg", above(0, 360, "deg"), 0)) * unit.Degree
	if o.has("diameter_m") && !o.has("gain_dbi") {
		for _, key := range []string{"surface_rms_mm", "blockage_fraction"} {
			if !o.has(key) {
				o.assume("%s left out: 0", key)
			}
		}
	}
	if o.has("beamwidth_deg") {
		o.useless("beside beamwidth_deg", "beamwidth_factor_deg")
	} else if o.has("diameter_m") && !o.has("beamwidth_factor_deg") {
		o.assume("beamwidth_factor_deg left out: the half-power beamwidth is %.0f deg times wavelength over diameter", station.DefaultBeamwidthFactor.Degrees())
	}
}

// measured reads gain, beamwidth and G/T as measured.
func (o object) measured(a *station.Antenna) {
	a.Gain = o.tabulated("gain_dbi", gainDBi)
	a.Beamwidth = unit.Angle(o.numberOr("beamwidth_deg", above(0, 360, "deg"), 0)) * unit.Degree
	a.GOverT = o.tabulated("g_over_t_db_k", span{low: -100, high: 100, unit: "dB/K"})
	if !o.has("g_over_t_db_k") {
		o.useless("without g_over_t_db_k", "g_over_t_elevation_deg")
	} else if v, ok := o.number("g_over_t_elevation_deg", span{low: -5, high: 90, unit: "deg"}); ok {
		elevation := unit.Angle(v) * unit.Degree
		a.GOverTElevation = &elevation
	}
	if len(o.present("gain_dbi", "beamwidth_deg", "g_over_t_db_k", "noise")) == 0 {
		o.useless("without a measured gain or G/T", "measured_on", "measured_weather")
		return
	}
	day, okDay := o.text("measured_on")
	weather, okWeather := o.text("measured_weather")
	if _, err := time.Parse(time.DateOnly, day); okDay && err != nil {
		o.fault(o.get("measured_on"), "measured_on", "%s is not a day", "give it as 2026-02-14", quote(day))
	}
	if okDay || okWeather {
		a.Measurement = &station.Measurement{Date: day, Weather: weather}
	}
}

func (o object) boresight(a *station.Antenna) {
	if a.Kind != station.Fixed {
		o.useless(fmt.Sprintf("with kind: %s, which follows the spacecraft", a.Kind), "boresight_azimuth_deg", "boresight_elevation_deg")
		return
	}
	a.Boresight.Azimuth = unit.Angle(o.required("boresight_azimuth_deg", span{low: 0, high: 360, unit: "deg"}, "the azimuth that it looks at")) * unit.Degree
	a.Boresight.Elevation = unit.Angle(o.required("boresight_elevation_deg", span{low: -5, high: 90, unit: "deg"}, "the elevation that it looks at")) * unit.Degree
}

func (o object) bands() []station.Band {
	if !o.has("bands_mhz") {
		o.assume("bands_mhz left out: any frequency is taken")
	}
	var out []station.Band
	for i, n := range o.items("bands_mhz", "bands, each [lowest, highest]", maxParts) {
		name := fmt.Sprintf("bands_mhz[%d]", i)
		b, ok := o.twoAt(n, name, frequencyMHz)
		if ok && !(b[1] > b[0]) {
			o.fault(n, name, "%g to %g MHz is not a band", "give the lower end first", b[0], b[1])
		}
		out = append(out, station.Band{Low: unit.Frequency(b[0]) * unit.Megahertz, High: unit.Frequency(b[1]) * unit.Megahertz})
	}
	return out
}
