package scenario

import (
	"slantwise/downlink/sizing"
	"slantwise/orbit/unit"
)

var familyKeys = []string{
	"surface_rms_share", "pointing_error_deg", "wind_pointing_error_deg", "wind_diameter_m", "wind_exponent", "receiver_noise_k",
	"price_fixed", "price_factor", "price_exponent", "price_unit",
}

// antennaFamily reads how the antenna that is sought changes with its diameter.
func (o object) antennaFamily() sizing.Family {
	f := o.child("antenna_family", familyKeys)
	f.about = "sizing, antenna family"
	var out sizing.Family
	if f.node == nil {
		o.assume("antenna_family left out: surface error, pointing error and noise are the antenna's own at every diameter")
		return out
	}
	out.SurfaceShare = f.numberOr("surface_rms_share", above(0, 0.1, ""), 0)
	if v, ok := f.number("pointing_error_deg", atLeast(0, 90, "deg")); ok {
		e := unit.Angle(v) * unit.Degree
		out.Pointing = &e
	}
	out.Wind = f.wind()
	if v, ok := f.number("receiver_noise_k", above(0, 1e6, "K")); ok {
		k := unit.Temperature(v)
		out.Receiver = &k
	}
	out.Price = f.price()
	return out
}

func (o object) wind() *sizing.Wind {
	if !o.has("wind_pointing_error_deg") {
		o.useless("without wind_pointing_error_deg", "wind_diameter_m", "wind_exponent")
		return nil
	}
	w := &sizing.Wind{Error: unit.Angle(o.numberOr("wind_pointing_error_deg", atLeast(0, 90, "deg"), 0)) * unit.Degree}
	w.Diameter = unit.Length(o.required("wind_diameter_m", above(0, 1000, "m"), "the diameter of the dish that wind turns so far"))
	w.Exponent = o.required("wind_exponent", atLeast(0, 10, ""), "the power of the diameter with which the error grows")
	return w
}

func (o object) price() *sizing.Price {
	if !o.has("price_factor") {
		o.useless("without price_factor", "price_fixed", "price_exponent", "price_unit")
		return nil
	}
	p := &sizing.Price{Factor: o.numberOr("price_factor", atLeast(0, 1e12, ""), 0), Fixed: o.numberOr("price_fixed", atLeast(0, 1e12, ""), 0)}
	p.Exponent = o.required("price_exponent", atLeast(0, 10, ""), "the power of the diameter in metres with which the price grows")
	p.Unit, _ = o.text("price_unit")
	return p
}
