package cli

import (
	"slantwise/downlink"
	"slantwise/reports"
	"slantwise/station/mount"
)

// reportMount is what a page says of how the mount takes the pass; nil for none.
func reportMount(m *mountOnPass, f *downlink.Profile) *reports.Mount {
	if m == nil {
		return nil
	}
	p := m.plan
	of := p.Mount()
	lower, upper := of.AxisNames()
	out := &reports.Mount{
		LowerAxis: lower, UpperAxis: upper,
		StartLowerDeg: p.Start.Lower.Degrees(), StartUpperDeg: p.Start.Upper.Degrees(), EndLowerDeg: p.End.Lower.Degrees(), EndUpperDeg: p.End.Upper.Degrees(),
		GreatestLowerDegS: p.GreatestLower.DegreesPerSecond(), GreatestUpperDegS: p.GreatestUpper.DegreesPerSecond(),
		ToleranceDeg: m.tolerance.Degrees(), LargestErrorDeg: p.Largest.Degrees(), LostSeconds: p.LostSeconds(), UnplannedS: m.chase.LostSeconds(),
		LostModeBytes: m.lostModeBytes, LostAchievableBytes: m.lostAchievableBytes,
	}
	span := func(s mount.Span) downlink.Interval {
		return downlink.Interval{From: after(f.Start, s.From), To: after(f.Start, s.To)}
	}
	for _, l := range p.Lost {
		out.Lost = append(out.Lost, span(l))
	}
	for _, l := range p.Followed() {
		out.Followed = append(out.Followed, span(l))
	}
	for _, s := range p.Slews {
		out.Slews = append(out.Slews, reports.MountSlew{Interval: span(s.Span), TurnOver: s.TurnOver})
	}
	for _, t := range f.Seconds {
		at, _, _ := p.At(t)
		out.LowerDeg, out.UpperDeg = append(out.LowerDeg, at.Lower.Degrees()), append(out.UpperDeg, at.Upper.Degrees())
		out.ErrorDeg = append(out.ErrorDeg, p.ErrorAt(t).Degrees())
	}
	return out
}
