package scenario

import (
	"slantwise/cmd/internal/scenario/tree"
	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
	"slantwise/station"
)

var (
	climateKeys = []string{
		"surface_temperature_k", "surface_pressure_hpa", "surface_water_vapour_density_g_m3",
		"reference_atmosphere", "season", "measured_profile",
		"rain_rate_001_mm_h", "monthly_temperature_c", "monthly_rainfall_mm", "rain_height_km", "zero_degree_isotherm_height_km",
		"cloud_liquid_water_kg_m2", "cloud_lognormal", "integrated_water_vapour_kg_m2", "wet_refractivity_n_units",
		"low_path", "noise_environment",
	}
	levelKeys     = []string{"height_m", "temperature_k", "pressure_hpa", "water_vapour_density_g_m3"}
	lognormalKeys = []string{"mean_ln_kg_m2", "sigma", "probability_percent"}
	lowPathKeys   = []string{"refractivity_gradient_percent", "water_fraction", "worst_month"}
)

// Ranges of the air at a station; the widest that weather reaches, with some to spare.
var (
	airKelvin  = span{low: 180, high: 340, unit: "K", next: "give it in kelvin: deg C plus 273.15"}
	airHPa     = span{low: 200, high: 1100, unit: "hPa", next: "give the pressure at the station, not reduced to sea level"}
	vapourGM3  = atLeast(0, 60, "g/m3")
	heightKm   = span{low: -1, high: 10, unit: "km", next: "give kilometres above mean sea level"}
	percentage = above(0, 100, "%")
)

// climate reads what a station states of its air, rain and clouds. What is left out
// is noted with the rule that stands in for it. The environment is nil where the
// climate states none.
func (o object) climate(s *station.Site) (propagation.Climate, *propagation.Environment) {
	c := propagation.Climate{Latitude: s.Latitude, Height: s.HeightAboveSea()}
	k := o.child("climate", climateKeys)
	if k.node == nil {
		k.node = &tree.Node{Kind: tree.Map} // what is left out is noted the same way
	}
	k.surface(&c)
	k.atmosphere(&c, o)
	k.rain(&c, o)
	k.clouds(&c, o)
	c.Vapour = k.curve("integrated_water_vapour_kg_m2", atLeast(0, 200, "kg/m2"))
	if !k.has("integrated_water_vapour_kg_m2") {
		o.assume("climate.integrated_water_vapour_kg_m2 left out: gas attenuation is that of the atmosphere at every percentage")
	}
	if v, ok := k.number("wet_refractivity_n_units", atLeast(0, 400, "N-units")); ok {
		c.WetRefractivity = &v
	} else if !k.has("wet_refractivity_n_units") {
		o.assume("climate.wet_refractivity_n_units left out: from the air at the surface by P.453-14, within 5 %% at sea level and low at high sites")
	}
	k.lowPath(&c)
	if c.LowPath == nil {
		o.assume("climate.low_path left out: scintillation under 5 deg is that of higher elevations continued, without the deep fades of low paths")
	}
	return c, k.environment()
}

// surface reads the air at the station.
func (o object) surface(c *propagation.Climate) {
	if v, ok := o.number("surface_temperature_k", airKelvin); ok {
		t := unit.Temperature(v)
		c.Surface.Temperature = &t
	}
	if v, ok := o.number("surface_pressure_hpa", airHPa); ok {
		p := propagation.Pressure(v) * propagation.Hectopascal
		c.Surface.Pressure = &p
	}
	if v, ok := o.number("surface_water_vapour_density_g_m3", vapourGM3); ok {
		d := propagation.VapourDensity(v) * propagation.GramPerCubicMetre
		c.Surface.Vapour = &d
	}
	keys := []string{"surface_temperature_k", "surface_pressure_hpa", "surface_water_vapour_density_g_m3"}
	if len(o.present(keys...)) == 0 {
		return
	}
	for _, key := range keys {
		if !o.has(key) {
			o.assume("climate.%s left out: that of the atmosphere at the station's height", key)
		}
	}
}

// atmosphere reads the profile of the air: measured, the mean annual global one, or
// that of the latitude and season.
func (o object) atmosphere(c *propagation.Climate, site object) {
	if o.has("measured_profile") {
		o.useless("beside measured_profile", "reference_atmosphere", "season")
		o.profile(c)
		return
	}
	word, given := o.word("reference_atmosphere", "latitude", "global")
	if given && word == "global" {
		o.useless("with reference_atmosphere: global, which has no seasons", "season")
		a, err := propagation.MeanAnnualGlobal(7.5 * propagation.GramPerCubicMetre)
		o.addAll(o.get("reference_atmosphere"), "reference_atmosphere", err)
		c.Atmosphere = &a
		return
	}
	season, _ := o.word("season", "year", "summer", "winter")
	c.Season = map[string]propagation.Season{"year": propagation.Year, "summer": propagation.Summer, "winter": propagation.Winter}[season]
	if !o.has("reference_atmosphere") {
		if a, err := propagation.ReferenceAtmosphere(c.Latitude, c.Season); err == nil { // a latitude out of range has its fault
			site.assume("climate.reference_atmosphere left out: %s, by the latitude", a.Name())
		}
	}
}

func (o object) profile(c *propagation.Climate) {
	before := o.r.faults.count()
	var levels []propagation.Level
	for _, it := range o.objects("measured_profile", "levels of rising height", maxRows, levelKeys) {
		levels = append(levels, propagation.Level{
			Height:      unit.Length(it.required("height_m", span{low: -500, high: 100_000, unit: "m"}, "the level's height above mean sea level")),
			Temperature: unit.Temperature(it.required("temperature_k", above(100, 400, "K"), "the level's temperature")),
			Pressure:    propagation.Pressure(it.required("pressure_hpa", above(0, 1100, "hPa"), "the level's pressure")) * propagation.Hectopascal,
			Vapour:      propagation.VapourDensity(it.required("water_vapour_density_g_m3", vapourGM3, "the level's water vapour")) * propagation.GramPerCubicMetre,
		})
	}
	if o.r.faults.count() > before {
		return
	}
	a, err := propagation.MeasuredProfile(levels)
	o.addAll(o.get("measured_profile"), "measured_profile", err)
	c.Atmosphere = &a
}

// rain reads a rate, or twelve months from which it follows.
func (o object) rain(c *propagation.Climate, site object) {
	switch {
	case o.has("rain_rate_001_mm_h"):
		o.useless("beside rain_rate_001_mm_h, which says it", "monthly_temperature_c", "monthly_rainfall_mm")
		if v, ok := o.number("rain_rate_001_mm_h", atLeast(0, 300, "mm/h")); ok {
			r := propagation.RainRate(v)
			c.Rate001 = &r
		}
	case o.has("monthly_temperature_c") || o.has("monthly_rainfall_mm"):
		c.Months = o.months()
	default:
		site.assume("climate states neither rain_rate_001_mm_h nor monthly_temperature_c with monthly_rainfall_mm: rain is left out of every budget of the station")
	}
	which, _ := o.exclusive("rain_height_km", "zero_degree_isotherm_height_km")
	switch {
	case which == "rain_height_km":
		if v, ok := o.number(which, heightKm); ok {
			h := unit.Length(v) * unit.Kilometre
			c.RainHeight = &h
		}
	case which != "":
		if v, ok := o.number(which, heightKm); ok {
			h, err := propagation.RainHeight(unit.Length(v) * unit.Kilometre)
			o.addAll(o.get(which), which, err)
			c.RainHeight = &h
		}
	case c.Rate001 != nil || c.Months != nil:
		if h, err := propagation.RainHeightByLatitude(c.Latitude); err == nil {
			site.assume("climate.rain_height_km left out: %.2f km, by the latitude rule of the superseded P.839-1", h.Kilometres())
		}
	}
}

func (o object) months() *[12]propagation.Month {
	temperatures, okT := o.twelve("monthly_temperature_c", span{low: -80, high: 60, unit: "deg C", next: "give deg C, January first"})
	rainfalls, okR := o.twelve("monthly_rainfall_mm", atLeast(0, 5000, "mm"))
	if !okT || !okR {
		return nil
	}
	var months [12]propagation.Month
	for i := range months {
		months[i] = propagation.Month{Temperature: unit.Temperature(temperatures[i] + 273.15), Rainfall: rainfalls[i]}
	}
	if _, err := propagation.NewRain(months); err != nil {
		o.addAll(o.get("monthly_rainfall_mm"), "monthly_rainfall_mm", err)
		return nil
	}
	return &months
}

// clouds reads the liquid water of clouds.
func (o object) clouds(c *propagation.Climate, site object) {
	switch which, _ := o.exclusive("cloud_liquid_water_kg_m2", "cloud_lognormal"); which {
	case "cloud_liquid_water_kg_m2":
		c.CloudWater = o.curve(which, atLeast(0, 50, "kg/m2"))
	case "cloud_lognormal":
		l := o.child(which, lognormalKeys)
		c.CloudLogNormal = &propagation.CloudLogNormal{
			Mean:        l.required("mean_ln_kg_m2", span{low: -30, high: 10}, "the mean of the logarithm of the content in kg/m2"),
			Sigma:       l.required("sigma", above(0, 10, ""), "the deviation of that logarithm"),
			Probability: propagation.Exceedance(l.required("probability_percent", span{low: 0, high: 100, unit: "%"}, "the share of the year with cloud liquid water")) * propagation.Percent,
		}
	default:
		site.assume("climate states no cloud_liquid_water_kg_m2: cloud is left out of every budget of the station")
	}
}

func (o object) lowPath(c *propagation.Climate) {
	l := o.child("low_path", lowPathKeys)
	if l.node == nil {
		return
	}
	c.LowPath = &propagation.LowPath{
		GradientExceeded: propagation.Exceedance(l.required("refractivity_gradient_percent", span{low: 0, high: 100, unit: "%"},
			"the share of the worst month in which refractivity falls by more than 100 N/km in the lowest 100 m")) * propagation.Percent,
		WaterFraction: l.zeroLeftOut("water_fraction", span{low: 0, high: 1}),
		WorstMonth:    l.flag("worst_month"),
	}
}
