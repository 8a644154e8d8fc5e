package propagation

import (
	"fmt"
	"math"

	"slantwise/orbit/unit"
)

// Climate is what a site states of its air, rain and clouds. All but the place may be
// left out: Path fills it by a rule that stands in its notes, or leaves the term out
// and says so.
type Climate struct {
	Latitude unit.Angle
	Height   unit.Length // of the station above mean sea level, -0.5 to 9 km

	Atmosphere *Atmosphere // nil: the reference atmosphere of the latitude and Season
	Season     Season
	Surface    Surface // air at the station as far as it is known
	Vapour     Curve   // integrated water vapour exceeded, kg/m²

	Rate001    *RainRate  // rain rate exceeded for 0.01 % of an average year; before Months
	Months     *[12]Month // January to December, for the rain rate by P.837-7
	RainHeight *unit.Length

	CloudWater     Curve           // integrated cloud liquid water exceeded, kg/m²; before CloudLogNormal
	CloudLogNormal *CloudLogNormal // in place of CloudWater

	WetRefractivity *float64 // median, N-units
	LowPath         *LowPath // for scintillation under 5°
}

// profile returns the air above the site at its ordinary humidity.
func (c *Climate) profile(n *notes) (Atmosphere, error) {
	a := c.Atmosphere
	if a == nil {
		chosen, err := ReferenceAtmosphere(c.Latitude, c.Season)
		if err != nil {
			return Atmosphere{}, err
		}
		a = &chosen
		n.add(Default, "no atmosphere is stated: %s stands in", chosen.Name())
	}
	if c.Height.Kilometres() < 0 {
		n.add(Warning, "the station lies %s m under the sea's level, where the reference atmospheres are continued by their formulas", number(-c.Height.Metres()))
	}
	if c.Surface == (Surface{}) {
		return *a, nil
	}
	return a.WithSurface(c.Height, c.Surface)
}

// humid returns the air with the vapour that is exceeded for p %.
func (c *Climate) humid(clear Atmosphere, pPct float64, n *notes) (Atmosphere, error) {
	if c.Vapour.Empty() {
		n.add(Default, "no integrated water vapour by percentage is stated: gas is the mean one at every percentage, as P.618-14 §2.5 allows")
		return clear, nil
	}
	v, err := c.Vapour.At(Exceedance(pPct) * Percent)
	if err != nil {
		return Atmosphere{}, fmt.Errorf("integrated water vapour: %w", err)
	}
	return clear.WithColumn(c.Height, Column(v))
}

// rain returns the rain site, or false where neither a rate nor the months say how
// much it rains.
func (c *Climate) rain(n *notes) (rainSite, bool, error) {
	s := rainSite{latDeg: c.Latitude.Degrees(), stationKm: c.Height.Kilometres()}
	switch {
	case c.Rate001 != nil:
		s.rateMmH = c.Rate001.MillimetresPerHour()
	case c.Months != nil:
		year, err := NewRain(*c.Months)
		if err != nil {
			return s, false, err
		}
		rate, err := year.Rate(0.01 * Percent)
		if err != nil {
			return s, false, err
		}
		s.rateMmH = rate.MillimetresPerHour()
		n.add(Assumption, "rain rate exceeded for 0.01 %%: %s mm/h by P.837-7 Annex 1 from the months", number(s.rateMmH))
	default:
		n.add(Warning, "rain is missing: neither the rain rate exceeded for 0.01 %% nor monthly temperatures and rainfalls are stated")
		return s, false, nil
	}
	if c.RainHeight != nil {
		s.rainKm = c.RainHeight.Kilometres()
	} else {
		h, err := RainHeightByLatitude(c.Latitude)
		if err != nil {
			return s, false, err
		}
		s.rainKm = h.Kilometres()
		n.add(Default, "no rain height is stated: %s km by the latitude rule of the superseded P.839-1", number(s.rainKm))
	}
	return s, true, s.check()
}

// liquid returns the cloud liquid water exceeded for p % in kg/m², or false where
// nothing is stated.
func (c *Climate) liquid(pPct float64, n *notes) (float64, bool, error) {
	switch {
	case !c.CloudWater.Empty():
		v, err := c.CloudWater.At(Exceedance(pPct) * Percent)
		if err != nil {
			return 0, false, fmt.Errorf("cloud liquid water: %w", err)
		}
		return v, true, nil
	case c.CloudLogNormal != nil:
		l := c.CloudLogNormal
		err := firstError(within("mean of ln of the cloud liquid water", l.Mean, "", -30, 10, ""), positive("sigma of ln of the cloud liquid water", l.Sigma, ""),
			within("probability of cloud liquid water", l.Probability.Percents(), "%", 0, 100, ""))
		return liquidLogNormal(pPct, l.Mean, l.Sigma, l.Probability.Percents()), err == nil, err
	}
	n.add(Warning, "cloud is missing: no cloud liquid water is stated")
	return 0, false, nil
}

// wet returns the median wet refractivity in N-units.
func (c *Climate) wet(clear Atmosphere, n *notes) float64 {
	if c.WetRefractivity != nil {
		return *c.WetRefractivity
	}
	s := clear.at(c.Height.Kilometres())
	w := wetTerm(vapourPressure(s.rho, s.tK), s.tK)
	n.add(Default, "no wet refractivity is stated: %s N-units from the air at the surface by P.453-14, within 5 %% at sea level and low at high sites", number(w))
	return w
}

// lastPercent returns the highest percentage that the curves of the climate reach,
// 50 % at most.
func (c *Climate) lastPercent() float64 {
	last := 50.0
	for _, q := range []Curve{c.Vapour, c.CloudWater} {
		if n := len(q.points); n > 0 {
			last = math.Min(last, q.points[n-1].P.Percents())
		}
	}
	return last
}

// galaxyAndCosmos returns what lies behind the air.
func galaxyAndCosmos(f unit.Frequency) (float64, error) {
	g, err := GalacticBrightness(f)
	if err != nil {
		return 0, err
	}
	return g.Kelvins() + CosmicBackground.Kelvins(), nil
}
