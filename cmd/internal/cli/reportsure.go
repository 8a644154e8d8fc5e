package cli

import (
	"slantwise/orbit/unit"
	"slantwise/reports"
	"slantwise/station"
	"slantwise/station/pass"
)

// surety works out how sure a page's pass is; nil where the scenario states nothing. best is
// the link of the page, nil without one.
func (p *reportPlan) surety(craft *reportCraft, site *reportSite, page *reportPage, best *modeOnPass) (*reports.Surety, error) {
	w := p.scenario.Window
	u, err := p.scenario.UncertaintyOver(craft.Spacecraft, w.Start, w.End)
	if err != nil || u == nil {
		return nil, err
	}
	g, err := pass.NewGauge(&site.Site, p.scenario.Horizon)
	if err != nil {
		return nil, err
	}
	m, err := g.PlusMinus(craft.ephemeris, &page.Pass, u)
	if err != nil {
		return nil, err
	}
	out := &reports.Surety{AOS: m.AOS, LOS: m.LOS, MaxElevation: m.MaxElevation, Existence: m.Existence(), MayVanish: m.MayVanish(), Basis: u.Basis()}
	for i, look := range [3]station.LookSpread{m.AtAOS, m.Culminating, m.AtLOS} {
		out.Direction[i] = look.Total()
		if best != nil {
			out.Doppler[i] = unit.Frequency(best.link.link.Frequency().Hertz() * float64(look.RangeRate) / unit.SpeedOfLight)
		}
	}
	if best == nil || best.profile.BeamUnsure == nil {
		return out, nil
	}
	out.Led, out.Unsure, out.NarrowUntil = true, best.profile.BeamUnsure, w.End.Add(narrowAhead)
	l := best.link.link
	out.NarrowFrom, _ = l.TooNarrowFrom(l.LeastHeight(craft.ephemeris), w.Start, out.NarrowUntil)
	return out, nil
}
