package reports

import (
	"strconv"
	"time"

	vector "slantwise/reports/drawing"
)

// Sizes of drawings over the whole width of a page without script, in points.
const (
	wideHeight = 150.0
)

// before and after are told apart by symbol and dash.
var sideLooks = [2]vector.StemSet{
	{Name: "before", Symbol: vector.Ring, Tone: vector.Second, Dash: vector.Dotted},
	{Name: "after", Symbol: vector.Diamond, Tone: vector.First},
}

// figures draws, for each spacecraft, the volumes and margins of its passes before and
// after, and how far AOS moved. What is nowhere known has no drawing.
func (c *Comparison) figures() []figureView {
	var list []figureView
	for n, craft := range distinctPasses(c.Passes) {
		var own []*ComparedPass
		for i := range c.Passes {
			if c.Passes[i].Spacecraft == craft {
				own = append(own, &c.Passes[i])
			}
		}
		id := "-" + strconv.Itoa(n+1)
		var most float64
		for _, p := range own {
			most = max(most, maxOf(p.Bytes[:]))
		}
		sc := scaleFor(most, byteScales)
		list = c.pairs(list, own, "volume"+id, "Volume of each pass, "+craft, "volume", sc.unit, sc.divisor, func(p *ComparedPass) [2]float64 { return p.Bytes })
		list = c.pairs(list, own, "margin"+id, "Greatest margin of each pass, "+craft, "margin", "dB", 1, func(p *ComparedPass) [2]float64 { return p.MarginDB })
		if c.Uplink {
			list = c.pairs(list, own, "uplink"+id, "Greatest margin of the uplink, "+craft, "margin", "dB", 1, func(p *ComparedPass) [2]float64 { return p.UplinkMarginDB })
		}
		list = c.shifts(list, own, "shift"+id, craft)
	}
	return list
}

func distinctPasses(passes []ComparedPass) []string {
	var list []string
	seen := map[string]bool{}
	for i := range passes {
		if s := passes[i].Spacecraft; !seen[s] {
			seen[s] = true
			list = append(list, s)
		}
	}
	return list
}

// clockOver is the axis of time over the windows.
func clockOver(from, to time.Time) (axis vector.Axis, base time.Time) {
	base = midnight(from)
	t := timeAxis{From: from.Sub(base).Seconds(), To: to.Sub(base).Seconds(), Date: base.Format("2006-01-02")}
	t.Step = clockStep(t.To - t.From)
	return clockAxis(&t, base), base
}

// pairs draws a quantity of each pass before and after.
func (c *Comparison) pairs(list []figureView, own []*ComparedPass, id, title, quantity, unit string, divisor float64, of func(*ComparedPass) [2]float64) []figureView {
	axis, base := clockOver(c.From, c.To)
	chart := &vector.Stems{X: axis, Sets: sideLooks[:]}
	chart.Sets = append([]vector.StemSet{}, sideLooks[:]...)
	var all []float64
	for _, p := range own {
		values := of(p)
		for i, v := range values {
			if finite(v) {
				all = append(all, v/divisor)
				chart.Sets[i].Stems = append(chart.Sets[i].Stems, vector.Stem{X: p.AOS[i].Sub(base).Seconds(), Y: v / divisor})
			}
		}
	}
	if len(all) == 0 {
		return list
	}
	chart.Left = vector.NewAxis(axisName(quantity, unit), min(leastOf(all), 0), max(greatestOf(all), 0), true)
	caption := "A pair a pass, at its AOS in UTC, in " + unit + ": the circle on a dotted foot is before, the diamond on a solid foot after. The same numbers stand in the table of all passes."
	s := sketch{draw: chart.Draw}
	return append(list, figureOf(id, title, caption, wideHeight, &s))
}

// shifts draws how far AOS moved, with one standard deviation where it is known.
func (c *Comparison) shifts(list []figureView, own []*ComparedPass, id, craft string) []figureView {
	axis, base := clockOver(c.From, c.To)
	chart := &vector.Stems{X: axis, Sets: []vector.StemSet{{Symbol: vector.Circle, Tone: vector.First}}}
	var all []float64
	sure := false
	for _, p := range own {
		if !finite(p.AOSShift) {
			continue
		}
		one := vector.Stem{X: p.AOS[0].Sub(base).Seconds(), Y: p.AOSShift, Spread: p.PlusMinus[0]}
		all = append(all, p.AOSShift)
		if one.Spread > 0 {
			sure = true
			all = append(all, p.AOSShift-one.Spread, p.AOSShift+one.Spread)
		}
		chart.Sets[0].Stems = append(chart.Sets[0].Stems, one)
	}
	if len(all) == 0 || maxOf(all) == 0 {
		return list
	}
	chart.Left = vector.NewAxis("AOS moves by, s", min(leastOf(all), 0), max(greatestOf(all), 0), true)
	caption := "By how much AOS comes later (up) or earlier (down) after than before, in s, over AOS before in UTC."
	if sure {
		caption += " The bar is one standard deviation of AOS before: what lies within it was to be expected."
	}
	s := sketch{draw: chart.Draw}
	return append(list, figureOf(id, "Shift of AOS, "+craft, caption, wideHeight, &s))
}
