package reports

import (
	"slices"

	"slantwise/downlink"
)

// Mount is how the antenna's mount takes a pass.
type Mount struct {
	LowerAxis, UpperAxis string // "azimuth", "elevation"; "X", "Y"

	StartLowerDeg, StartUpperDeg, EndLowerDeg, EndUpperDeg float64
	GreatestLowerDegS, GreatestUpperDegS                   float64 // commanded rates

	ToleranceDeg    float64 // the error up to which it counts as followed
	LargestErrorDeg float64
	Lost            []downlink.Interval // not followed
	Followed        []downlink.Interval // the rest of the pass
	LostSeconds     float64
	UnplannedS      float64 // not followed if it merely turned after the spacecraft
	Slews           []MountSlew

	LostModeBytes, LostAchievableBytes float64 // NaN: there is no such volume

	// By sample.
	LowerDeg, UpperDeg, ErrorDeg []float64
}

// MountSlew is a move in which the mount leaves the track to take it up again.
type MountSlew struct {
	downlink.Interval
	TurnOver bool
}

// mountView is what a page says of it.
type mountView struct {
	Followed             bool
	Lost, Unplanned      string
	Spans                []string // UTC
	Tolerance, Largest   string
	Lower, Upper         string
	From, To             string // of the lower axis
	LowerRate, UpperRate string
	LostMode, LostBest   string // empty: nothing, or not known
	Slews                []string
}

func newMountView(p *Pass) *mountView {
	m := p.Radio.Mount
	if m == nil {
		return nil
	}
	v := &mountView{Followed: len(m.Lost) == 0, Lost: fixed(m.LostSeconds, 1), Unplanned: fixed(m.UnplannedS, 1),
		Tolerance: fixed(m.ToleranceDeg, 3), Largest: fixed(m.LargestErrorDeg, 2), Lower: m.LowerAxis, Upper: m.UpperAxis,
		From: fixed(m.StartLowerDeg, 1), To: fixed(m.EndLowerDeg, 1), LowerRate: fixed(m.GreatestLowerDegS, 2), UpperRate: fixed(m.GreatestUpperDegS, 2)}
	clockSpan := func(i downlink.Interval) string {
		return utcClock(i.From, layoutOf(p)) + " to " + utcClock(i.To, layoutOf(p))
	}
	for _, l := range m.Lost {
		v.Spans = append(v.Spans, clockSpan(l))
	}
	for _, s := range m.Slews {
		what := "slews through the keyhole, "
		if s.TurnOver {
			what = "turns over, "
		}
		v.Slews = append(v.Slews, what+clockSpan(s.Interval))
	}
	if finite(m.LostModeBytes) && m.LostModeBytes > 0 {
		v.LostMode = withUnit(m.LostModeBytes, byteScales)
	}
	if finite(m.LostAchievableBytes) && m.LostAchievableBytes > 0 {
		v.LostBest = withUnit(m.LostAchievableBytes, byteScales)
	}
	return v
}

// mountColumns are the axes along the pass.
func mountColumns(p *Pass) []column {
	m := p.Radio.Mount
	if m == nil {
		return nil
	}
	return []column{{"lower_axis_deg", 4, m.LowerDeg}, {"upper_axis_deg", 4, m.UpperDeg}, {"following_error_deg", 4, m.ErrorDeg}}
}

// mountFigures draw the axes along the pass.
func mountFigures(p *Pass, fr *frame) []timeFigure {
	m := p.Radio.Mount
	if m == nil {
		return nil
	}
	fig := timeFigure{
		id: "mount", title: "Axes of the mount", quantity: "axis angle", unit: "deg",
		caption: "Where the axes of the mount are commanded, in degrees over UTC, as the cable counts them: " + m.LowerAxis + " solid, " + m.UpperAxis + " dashed.",
		series: []series{
			{name: m.LowerAxis, dash: solid, values: m.LowerDeg, divisor: 1, decimals: 2},
			{name: m.UpperAxis, dash: dashed, values: m.UpperDeg, divisor: 1, decimals: 2},
		},
	}
	if len(m.Lost) > 0 {
		fig.below = fr.outside(slices.Clone(m.Followed))
		fig.caption += " Hatched: the time in which the mount does not follow."
	}
	return []timeFigure{fig}
}

type mountJSON struct {
	LowerAxis      string         `json:"lower_axis"`
	UpperAxis      string         `json:"upper_axis"`
	StartLower     number         `json:"start_lower_deg"`
	StartUpper     number         `json:"start_upper_deg"`
	EndLower       number         `json:"end_lower_deg"`
	EndUpper       number         `json:"end_upper_deg"`
	Tolerance      number         `json:"following_error_deg"`
	LostS          number         `json:"not_followed_s"`
	Lost           []intervalJSON `json:"not_followed"`
	UnplannedS     number         `json:"not_followed_without_plan_s"`
	LostMode       number         `json:"lost_mode_bytes"`
	LostAchievable number         `json:"lost_achievable_bytes"`
	Largest        number         `json:"largest_error_deg"`
	LowerRate      number         `json:"greatest_lower_rate_deg_s"`
	UpperRate      number         `json:"greatest_upper_rate_deg_s"`
	Slews          []slewJSON     `json:"slews"`
}

type slewJSON struct {
	intervalJSON
	TurnOver bool `json:"turn_over"`
}

func mountOf(m *Mount) *mountJSON {
	if m == nil {
		return nil
	}
	out := &mountJSON{m.LowerAxis, m.UpperAxis, number{m.StartLowerDeg, 3}, number{m.StartUpperDeg, 3}, number{m.EndLowerDeg, 3}, number{m.EndUpperDeg, 3},
		number{m.ToleranceDeg, 4}, number{m.LostSeconds, 3}, intervals(m.Lost), number{m.UnplannedS, 3}, number{m.LostModeBytes, 0}, number{m.LostAchievableBytes, 0},
		number{m.LargestErrorDeg, 3}, number{m.GreatestLowerDegS, 3}, number{m.GreatestUpperDegS, 3}, []slewJSON{}}
	for _, s := range m.Slews {
		out.Slews = append(out.Slews, slewJSON{intervals([]downlink.Interval{s.Interval})[0], s.TurnOver})
	}
	return out
}
