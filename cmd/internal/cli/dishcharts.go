package cli

import (
	"math"

	"slantwise/downlink/sizing"
	"slantwise/reports"
)

// giga is the bytes that the charts count in.
const giga = 1e9

// tradeCharts are the curves over the diameter.
func (r *dishReport) tradeCharts() []reports.Curves {
	a := r.answer
	x := reports.Axis{Name: "diameter", Unit: "m", Decimals: 3}
	for _, o := range a.Trade {
		x.Values = append(x.Values, o.Variant.Diameter.Metres())
	}
	column := func(of func(*sizing.Outcome) float64) []float64 {
		out := make([]float64, len(a.Trade))
		for i, o := range a.Trade {
			out[i] = of(o)
		}
		return out
	}
	var mark *reports.Mark
	if d := a.Together.Diameter; d > 0 {
		mark = &reports.Mark{Name: "least that meets all", At: d.Metres()}
	}
	required := func(curves []reports.Curve, k sizing.Kind, scale float64) []reports.Curve {
		for i := range a.Verdicts {
			if v := &a.Verdicts[i]; v.Kind == k {
				level := make([]float64, len(x.Values))
				for n := range level {
					level[n] = v.Required / scale
				}
				curves = append(curves, reports.Curve{Name: "required", Values: level})
			}
		}
		return curves
	}
	var out []reports.Curves
	chart := func(id, title, quantity, unit, caption string, curves []reports.Curve) {
		var there []reports.Curve
		for _, c := range curves {
			if some(c.Values) {
				there = append(there, c)
			}
		}
		if len(there) > 0 {
			out = append(out, reports.Curves{X: x, Charts: []reports.CurveChart{{ID: id, Title: title, Quantity: quantity, Unit: unit, Caption: caption, Curves: there, Mark: mark}}})
		}
	}
	chart("bytes", "Bytes a day", "bytes a day", "GB", "Mean bytes a day over the diameter, and those of the seven days in a row that bring the least.", required([]reports.Curve{
		{Name: "mean of the year", Values: column(func(o *sizing.Outcome) float64 { return o.BytesPerDay / giga })},
		{Name: "worst week", Values: column(func(o *sizing.Outcome) float64 { return o.WorstWeekBytesPerDay / giga })},
	}, sizing.Bytes, giga))
	chart("margin", "Margin", "margin", "dB", "Margin at the elevation that is asked for, the least of the sites.", required([]reports.Curve{
		{Name: "margin", Values: column(func(o *sizing.Outcome) float64 { return o.MarginDB })}}, sizing.MarginThere, 1))
	chart("availability", "Availability", "contact time", "%", "Share of the contact time in which the mode's required margin is there.", required([]reports.Curve{
		{Name: "average year", Values: column(func(o *sizing.Outcome) float64 { return o.AvailabilityPercent })},
		{Name: "worst month", Values: column(func(o *sizing.Outcome) float64 { return o.WorstMonthAvailabilityPercent })}}, sizing.AvailableShare, 1))
	chart("gap", "Longest gap", "gap", "h", "Longest time between two contacts that close.", required([]reports.Curve{
		{Name: "longest gap", Values: column(func(o *sizing.Outcome) float64 { return o.LongestGapH })}}, sizing.Gap, 1))
	chart("age", "Age of the data", "age", "h", "Age at delivery of 95 % of the data.", required([]reports.Curve{
		{Name: "95 %", Values: column(func(o *sizing.Outcome) float64 { return o.LatencyH })}}, sizing.Age, 1))
	priceUnit := ""
	if p := r.study.sizing.Family.Price; p != nil {
		priceUnit = p.Unit
	}
	chart("price", "Price of one dish", "price", priceUnit, "By the planner's own law.", []reports.Curve{
		{Name: "price", Values: column(func(o *sizing.Outcome) float64 { return o.Price })}})
	return out
}

// some tells whether any value exists.
func some(values []float64) bool {
	for _, v := range values {
		if !math.IsNaN(v) {
			return true
		}
	}
	return false
}

// mapCharts are the maps: lines of equal bytes a day, and where all is just met.
func (r *dishReport) mapCharts() []reports.Curves {
	var out []reports.Curves
	for _, p := range r.planes {
		axis := mapAxes[p.Axis]
		c := reports.CurveChart{ID: "map-" + string(p.Axis), Title: "Map: diameter and " + axis.name, Quantity: "diameter", Unit: "m",
			Caption: "The diameter at which all is just met, and lines of equal bytes a day; " + mapNote(p) + "."}
		if some(p.Just) {
			c.Curves = append(c.Curves, reports.Curve{Name: "all just met", Values: p.Just})
		}
		for _, level := range r.levels() {
			if v := p.Level(level); some(v) {
				c.Curves = append(c.Curves, reports.Curve{Name: bytesText(level) + " a day", Values: v})
			}
		}
		if len(c.Curves) == 0 {
			continue
		}
		out = append(out, reports.Curves{X: reports.Axis{Name: axis.name, Unit: axis.unit, Values: p.Values, Decimals: 1}, Charts: []reports.CurveChart{c}})
	}
	return out
}

// levels are the bytes a day of a map's lines: shares of what is required, or of the
// most that the trade curve reaches.
func (r *dishReport) levels() []float64 {
	base := r.study.sizing.Needs.BytesPerDay
	if math.IsNaN(base) {
		base = 0
		for _, o := range r.answer.Trade {
			base = max(base, o.BytesPerDay)
		}
	}
	var out []float64
	for _, share := range []float64{0.25, 0.5, 0.75} {
		out = append(out, base*share)
	}
	return out
}
