package cli

import (
	"errors"
	"math"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/downlink/propagation"
	"slantwise/orbit/unit"
	"slantwise/station"
)

// manMadeUpTo is where man-made noise ends to count beside a receiver's own.
const manMadeUpTo = unit.Gigahertz

// addNoise adds the noise of the sky: all of it where the antenna states its
// spill-over, else what the weather adds to a stated clear sky.
func (l *skyLink) addNoise(st *scenario.Station, t *downlink.Transmitter, a *station.Antenna, clear bool) error {
	n := a.Noise
	if n == nil || n.SpillOver == nil {
		if !clear && !noPath(l.path) {
			l.noise = append(l.noise, downlink.NewWeatherNoise(l.path))
		}
		if st.Environment != nil && t.Frequency <= manMadeUpTo && a.GOverT == nil {
			l.note(downlink.Assumption, "man-made noise is not added: the stated noise holds that of its place")
		}
		return nil
	}
	around := downlink.Surroundings{SpillOver: n.SpillOver.AtFrequency(t.Frequency), Ground: n.Ground()}
	switch {
	case st.Environment == nil && t.Frequency <= manMadeUpTo:
		l.note(downlink.Warning, "man-made noise is missing: the scenario states no noise_environment")
	case st.Environment != nil && t.Frequency > manMadeUpTo:
		l.note(downlink.Assumption, "man-made noise is left out above 1 GHz")
	case st.Environment != nil:
		k, notes, err := propagation.ManMadeNoise(t.Frequency, *st.Environment)
		if err != nil {
			return err
		}
		around.ManMade = k
		for _, note := range notes {
			l.note(downlink.Warning, "%s", note.Text)
		}
	}
	l.noise = append(l.noise, downlink.NewSkyNoise(l.path, clear, around))
	return nil
}

// noPath tells whether nothing of a path emits.
func noPath(p *propagation.Path) bool {
	parts := p.Parts()
	return !parts.Gas && !parts.Cloud && !parts.Rain
}

// addBodies adds the Sun and the Moon as the scenario wants them.
func (l *skyLink) addBodies(c *scenario.PathChoice, f unit.Frequency) error {
	if c.Moon {
		moon := propagation.Moon
		l.moon = &moon
	}
	if !c.Sun {
		return nil
	}
	if len(c.SunFlux) > 0 {
		flux, err := fluxAt(c.SunFlux, f)
		if err != nil {
			return err
		}
		sun, err := propagation.SunOfFlux(f, flux)
		l.sun = &sun
		return err
	}
	sun, err := propagation.QuietSun(f)
	var outside *unit.RangeError
	if errors.As(err, &outside) {
		l.note(downlink.Warning, "the Sun's noise is missing: %v", err)
		return nil
	}
	l.sun = &sun
	return err
}

// fluxAt returns the Sun's flux at a frequency, straight in the logarithms between the
// rows of the scenario.
func fluxAt(rows []scenario.FluxPoint, f unit.Frequency) (float64, error) {
	if len(rows) == 1 && rows[0].Frequency == 0 {
		return rows[0].Flux, nil
	}
	for i, r := range rows {
		if r.Frequency == f {
			return r.Flux, nil
		}
		if i > 0 && rows[i-1].Frequency < f && f < r.Frequency {
			a := rows[i-1]
			w := math.Log(float64(f/a.Frequency)) / math.Log(float64(r.Frequency/a.Frequency))
			return a.Flux * math.Pow(r.Flux/a.Flux, w), nil
		}
	}
	return 0, inputErrorf("path.sun_flux_sfu: the table reaches from %g to %g MHz and not to %g MHz; give the flux there too",
		rows[0].Frequency.Megahertz(), rows[len(rows)-1].Frequency.Megahertz(), f.Megahertz())
}
