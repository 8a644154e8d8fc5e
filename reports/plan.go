package reports

import (
	"time"

	"slantwise/orbit/unit"
)

// Plan is which mode is sent when in a pass, to bring down the most bytes under the
// spacecraft's rules. Bytes and rates are the user's, after sync markers and headers.
type Plan struct {
	Steps   []PlanStep // one after another; empty where nothing can be brought down
	Bytes   float64
	Changes int

	// Bounds: free switching among the modes, and Shannon's limit. The shares are 0 to 1,
	// NaN where a bound is nothing.
	FreeBytes, ShannonBytes     float64
	ShareOfFree, ShareOfShannon float64

	SingleMode  string // that by itself brings the most; empty: none
	SingleBytes float64

	// By sample: the rate that is sent, 0 where it is silent; the margin of its mode, NaN
	// where it is silent; the bounds' rates; the bytes so far.
	RateBps, MarginDB, FreeBps, ShannonBps, SoFar []float64
}

// PlanStep is a part of a plan in one mode.
type PlanStep struct {
	From, To        time.Time
	Mode            string
	SymbolRate      unit.Frequency // 0: not known, or silent
	InformationRate unit.BitRate
	NetRate         unit.BitRate
	LeastMarginDB   float64 // NaN: silent, or not usable somewhere
	Bytes           float64
}

// planView is what the page shows of a plan.
type planView struct {
	Bytes, Free, Shannon  string
	FreeShare, Share      string // of the bounds, in percent
	Changes               string
	SingleMode, SingleTop string
	Steps                 []stepView
}

type stepView struct{ From, To, Mode, SymbolRate, Rate, NetRate, Margin, Volume string }

// newPlanView returns nil without a plan.
func newPlanView(p *Pass) *planView {
	plan := p.Radio.Plan
	if plan == nil {
		return nil
	}
	v := &planView{
		Bytes: withUnit(plan.Bytes, byteScales), Free: withUnit(plan.FreeBytes, byteScales), Shannon: withUnit(plan.ShannonBytes, byteScales),
		FreeShare: fixed(100*plan.ShareOfFree, 1), Share: fixed(100*plan.ShareOfShannon, 1),
		Changes: changesText(plan.Changes), SingleMode: plan.SingleMode, SingleTop: withUnit(plan.SingleBytes, byteScales),
	}
	for _, s := range plan.Steps {
		one := stepView{From: utcClock(s.From, layoutOf(p)), To: utcClock(s.To, layoutOf(p)), Mode: s.Mode,
			Margin: fixed(s.LeastMarginDB, 1), Volume: withUnit(s.Bytes, byteScales)}
		if s.SymbolRate > 0 {
			one.SymbolRate = withUnit(s.SymbolRate.Hertz(), baudScales)
		}
		if s.InformationRate > 0 {
			one.Rate, one.NetRate = withUnit(s.InformationRate.BitsPerSecond(), rateScales), withUnit(s.NetRate.BitsPerSecond(), rateScales)
		}
		v.Steps = append(v.Steps, one)
	}
	return v
}

func changesText(n int) string {
	switch n {
	case 0:
		return "no change"
	case 1:
		return "1 change"
	}
	return fixed(float64(n), 0) + " changes"
}

// planFigure shows the margin of the mode that is sent, and its rate.
func planFigure(p *Pass, fr *frame) timeFigure {
	plan := p.Radio.Plan
	sc := scaleFor(maxOf(plan.FreeBps, plan.RateBps), rateScales)
	fig := timeFigure{
		id: "plan", title: "Planned modes", quantity: "margin", unit: "dB", right: axisName("net rate", sc.unit), rightUnit: sc.unit, bare: true,
		caption: "Margin of the mode that is sent at the time, in dB over UTC (left, solid), and its net rate in " + sc.unit +
			" (right, dashed), beside that of free switching among the modes (right, dotted). The words over it say which mode.",
		series: []series{
			{name: "margin of the mode", short: "planned margin", dash: solid, values: plan.MarginDB, divisor: 1, decimals: 2},
			{name: "rate", short: "planned rate", dash: dashed, values: plan.RateBps, divisor: sc.divisor, right: true, decimals: decimalsFor(maxOf(plan.FreeBps) / sc.divisor)},
			{name: "free switching", dash: dotted, values: plan.FreeBps, divisor: sc.divisor, right: true, still: true, decimals: decimalsFor(maxOf(plan.FreeBps) / sc.divisor)},
		},
	}
	for _, s := range plan.Steps {
		fig.marks = append(fig.marks, chartMark{s.From.Sub(fr.base).Seconds(), s.To.Sub(fr.base).Seconds(), s.Mode})
	}
	return fig
}

// planColumns are the samples of a plan.
func planColumns(plan *Plan) []column {
	return []column{
		{"plan_rate_bps", 0, plan.RateBps}, {"plan_margin_db", 3, plan.MarginDB}, {"plan_bytes", 0, plan.SoFar},
		{"free_switching_rate_bps", 0, plan.FreeBps}, {"shannon_rate_bps", 0, plan.ShannonBps},
	}
}

type planJSON struct {
	Bytes          number     `json:"bytes"`
	Changes        int        `json:"changes"`
	FreeBytes      number     `json:"free_switching_bytes"`
	ShareOfFree    number     `json:"share_of_free_switching_percent"`
	ShannonBytes   number     `json:"shannon_bytes"`
	ShareOfShannon number     `json:"share_of_shannon_percent"`
	SingleMode     string     `json:"single_mode"`
	SingleBytes    number     `json:"single_mode_bytes"`
	Steps          []stepJSON `json:"steps"`
}

type stepJSON struct {
	FromUTC         string `json:"from_utc"`
	ToUTC           string `json:"to_utc"`
	Mode            string `json:"mode"`
	SymbolRate      number `json:"symbol_rate_baud"`
	InformationRate number `json:"information_rate_bps"`
	NetRate         number `json:"net_rate_bps"`
	LeastMargin     number `json:"least_margin_db"`
	Bytes           number `json:"bytes"`
}

func planOf(plan *Plan) *planJSON {
	if plan == nil {
		return nil
	}
	h := &planJSON{
		Bytes: number{plan.Bytes, 0}, Changes: plan.Changes, FreeBytes: number{plan.FreeBytes, 0}, ShareOfFree: number{100 * plan.ShareOfFree, 2},
		ShannonBytes: number{plan.ShannonBytes, 0}, ShareOfShannon: number{100 * plan.ShareOfShannon, 2},
		SingleMode: plan.SingleMode, SingleBytes: number{plan.SingleBytes, 0}, Steps: []stepJSON{},
	}
	for _, s := range plan.Steps {
		h.Steps = append(h.Steps, stepJSON{utcText(s.From), utcText(s.To), s.Mode, number{s.SymbolRate.Hertz(), 0}, number{s.InformationRate.BitsPerSecond(), 0},
			number{s.NetRate.BitsPerSecond(), 0}, number{s.LeastMarginDB, 3}, number{s.Bytes, 0}})
	}
	return h
}
