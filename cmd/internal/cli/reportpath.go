package cli

import (
	"strings"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/reports"
)

// addPath adds to a page what its numbers of the path are, the contributors, and the
// pass under a clear sky.
func addPath(r *reports.Radio, s *scenario.Scenario, craft *reportCraft, page *reportPage, best *modeOnPass) error {
	c, f := best.link, best.profile
	choice := &s.Path
	r.Path = reports.PathInfo{ClearSky: choice.ClearSky, ExceededPercent: choice.Exceedance.Percents(), Missing: c.sky.missing}
	if len(c.sky.missing) > 0 {
		r.Path.MissingText = missingText(c.sky.missing)
	}
	for i, t := range f.Terms {
		if ofThePath(t) {
			r.PathParts = append(r.PathParts, reports.Contributor{Name: t.Name, Values: f.TermValues[i], Sign: -t.Sign})
		}
	}
	r.PathTotalDB = totalOf(r.PathParts, len(f.Seconds))
	for i, n := range f.NoiseParts {
		r.NoiseParts = append(r.NoiseParts, reports.Contributor{Name: n.Name, Values: f.NoiseK[i], Sign: 1})
	}
	if c.clear == nil {
		return nil
	}
	fine, err := c.clear.Profile(craft.ephemeris, page.AOS, page.LOS, sampleStep(page.Duration()))
	if err != nil {
		return err
	}
	if _, _, err := keepToLimits(s, c, fine); err != nil { // told with the profile of the weather
		return err
	}
	r.ClearSky = fine
	r.ClearAchievableBytes, r.ClearModeBytes = fine.VolumeSoFar()
	r.ClearLeast, r.ClearGreatest = extremes(fine)
	return nil
}

// totalOf adds the contributors sample by sample; nil for none.
func totalOf(parts []reports.Contributor, samples int) []float64 {
	if len(parts) == 0 {
		return nil
	}
	total := make([]float64, samples)
	for _, p := range parts {
		for i, v := range p.Values {
			total[i] += float64(p.Sign) * v
		}
	}
	return total
}

// ofThePath tells whether a term is one of the air's or the ionosphere's.
func ofThePath(t downlink.TermInfo) bool {
	switch t.Name {
	case "gas attenuation", "cloud attenuation", "rain attenuation", "scintillation", "atmospheric combination":
		return true
	}
	return strings.HasPrefix(t.Name, "ionospheric ")
}
