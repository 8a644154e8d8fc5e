package cli

import (
	"time"

	"slantwise/cmd/internal/scenario"
	"slantwise/downlink"
	"slantwise/reports"
)

// modeOnPass is a mode's link along a pass, with what all modes of it bring.
type modeOnPass struct {
	link    *chosenLink
	profile *downlink.Profile
	results []reports.ModeResult
	limits  []downlink.Note // what licences and the mount take from the pass
	mount   *mountOnPass    // nil where nothing is said of it
}

// bestMode flies the pass with every mode that competes and returns the one that
// brings the most bytes; of equals, as where none closes, the first in the scenario.
func (page *reportPage) bestMode(s *scenario.Scenario, craft *reportCraft, step time.Duration) (*modeOnPass, error) {
	var best *modeOnPass
	var results []reports.ModeResult
	chosen := 0
	for i := range page.link.modes {
		c := &page.link.modes[i]
		f, err := c.link.Profile(craft.ephemeris, page.AOS, page.LOS, step)
		if err != nil {
			return nil, err
		}
		told, turned, err := keepToLimits(s, c, f)
		if err != nil {
			return nil, err
		}
		if c.mode != nil {
			results = append(results, modeResult(c, f))
		}
		if best == nil || f.Volume.ModeBytes > best.profile.Volume.ModeBytes {
			best, chosen = &modeOnPass{link: c, profile: f, limits: told, mount: turned}, i
		}
	}
	if len(results) > 0 {
		results[chosen].Chosen = true
	}
	best.results = results
	return best, nil
}

func modeResult(c *chosenLink, f *downlink.Profile) reports.ModeResult {
	r := reports.ModeResult{
		Name: c.mode.Name, Text: c.mode.Modulation + ", " + c.mode.Coding, Rate: f.DataRate, Bytes: f.Volume.ModeBytes,
	}
	for _, span := range f.Volume.Closes {
		r.Closed += span.To.Sub(span.From)
	}
	least, greatest := extremes(f)
	r.LeastMarginDB, r.GreatestMarginDB = least.Value, greatest.Value
	return r
}
