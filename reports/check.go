package reports

import (
	"errors"
	"fmt"
)

// checkPass refuses a pass that cannot be drawn: a programming error of the caller,
// which is better told than met as a panic half-way through a report.
func checkPass(p *Pass) error {
	if p == nil || p.Site == nil || p.Profile == nil {
		return errors.New("a pass needs a site and a profile")
	}
	f := p.Profile
	n := len(f.Seconds)
	if n < 2 {
		return fmt.Errorf("the profile has %d samples; it needs two at least, AOS and LOS", n)
	}
	for _, c := range []column{
		{name: "azimuth", values: f.AzimuthDeg}, {name: "elevation", values: f.ElevationDeg}, {name: "range", values: f.RangeKm},
	} {
		if len(c.values) != n {
			return fmt.Errorf("the profile has %d values of %s for %d samples", len(c.values), c.name, n)
		}
	}
	if len(f.TermValues) != len(f.Terms) {
		return fmt.Errorf("the profile has %d columns for %d terms", len(f.TermValues), len(f.Terms))
	}
	for _, u := range p.Uplinks {
		for _, c := range uplinkColumns(&u) {
			if len(c.values) != n {
				return fmt.Errorf("uplink %q has %d values of %s for %d samples", u.Name, len(c.values), c.name, n)
			}
		}
	}
	if err := checkMeasured(p.Measured); err != nil {
		return err
	}
	if p.Radio == nil {
		return nil
	}
	for _, c := range []column{{name: "received power", values: f.ReceivedPowerDBm}, {name: "margin", values: f.MarginDB}} {
		if len(c.values) != n {
			return fmt.Errorf("the profile has %d values of %s for %d samples", len(c.values), c.name, n)
		}
	}
	return checkSky(p.Radio, n)
}

// checkSky refuses columns of the path and of the clear sky that do not fit the
// samples.
func checkSky(r *Radio, n int) error {
	var list []column
	for _, parts := range [][]Contributor{r.PathParts, r.NoiseParts} {
		for _, c := range parts {
			list = append(list, column{name: c.Name, values: c.Values})
		}
	}
	if len(r.PathParts) > 0 {
		list = append(list, column{name: "path attenuation", values: r.PathTotalDB})
	}
	if c := r.ClearSky; c != nil {
		list = append(list, column{name: "received power under a clear sky", values: c.ReceivedPowerDBm},
			column{name: "margin under a clear sky", values: c.MarginDB}, column{name: "rate under a clear sky", values: c.AchievableRateBps})
	}
	for _, c := range list {
		if len(c.values) != n {
			return fmt.Errorf("the pass has %d values of %s for %d samples", len(c.values), c.name, n)
		}
	}
	return nil
}
