package cli

import (
	"time"

	"slantwise/station/mount"
)

// mountJSON is how a mount takes a pass.
type mountJSON struct {
	LowerAxis       string           `json:"lower_axis"`
	UpperAxis       string           `json:"upper_axis"`
	StartLowerDeg   number           `json:"start_lower_deg"`
	StartUpperDeg   number           `json:"start_upper_deg"`
	EndLowerDeg     number           `json:"end_lower_deg"`
	EndUpperDeg     number           `json:"end_upper_deg"`
	FollowingError  number           `json:"following_error_deg"`
	NotFollowedS    number           `json:"not_followed_s"`
	NotFollowed     []budgetInterval `json:"not_followed"`
	LostModeBytes   number           `json:"lost_mode_bytes"`
	LostAchievable  number           `json:"lost_achievable_bytes"`
	ChasedS         number           `json:"not_followed_without_plan_s"`
	LargestErrorDeg number           `json:"largest_error_deg"`
	LowerRate       number           `json:"greatest_lower_rate_deg_s"`
	UpperRate       number           `json:"greatest_upper_rate_deg_s"`
	Slews           []mountSlewJSON  `json:"slews"`
}

type mountSlewJSON struct {
	budgetInterval
	TurnOver bool `json:"turn_over"`
}

// mountOut makes the JSON of a mount; nil for none.
func mountOut(m *mountOnPass, aos time.Time) *mountJSON {
	if m == nil {
		return nil
	}
	p := m.plan
	of := p.Mount()
	lower, upper := of.AxisNames()
	out := &mountJSON{
		LowerAxis: lower, UpperAxis: upper,
		StartLowerDeg: num(p.Start.Lower.Degrees(), 3), StartUpperDeg: num(p.Start.Upper.Degrees(), 3),
		EndLowerDeg: num(p.End.Lower.Degrees(), 3), EndUpperDeg: num(p.End.Upper.Degrees(), 3),
		FollowingError: num(m.tolerance.Degrees(), 4), NotFollowedS: num(p.LostSeconds(), 3), NotFollowed: spansOut(aos, p.Lost),
		LostModeBytes: num(m.lostModeBytes, 0), LostAchievable: num(m.lostAchievableBytes, 0),
		ChasedS: num(m.chase.LostSeconds(), 3), LargestErrorDeg: num(p.Largest.Degrees(), 3),
		LowerRate: num(p.GreatestLower.DegreesPerSecond(), 3), UpperRate: num(p.GreatestUpper.DegreesPerSecond(), 3),
		Slews: []mountSlewJSON{},
	}
	for _, s := range p.Slews {
		out.Slews = append(out.Slews, mountSlewJSON{spansOut(aos, []mount.Span{s.Span})[0], s.TurnOver})
	}
	return out
}

func spansOut(aos time.Time, spans []mount.Span) []budgetInterval {
	out := []budgetInterval{}
	for _, s := range spans {
		out = append(out, budgetInterval{utc(after(aos, s.From)), utc(after(aos, s.To))})
	}
	return out
}
