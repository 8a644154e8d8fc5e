package reports

import (
	"math"
	"strconv"
	"strings"

	"slantwise/downlink"
)

// looks tell many lines apart without colour: the first is the sum.
var looks = [...]struct{ dash, symbol string }{
	{solid, ""}, {solid, "circle"}, {dashed, "triangle"}, {dotted, "rect"}, {solid, "diamond"},
	{dashed, "emptyCircle"}, {dotted, "emptyTriangle"}, {solid, "emptyRect"}, {dashed, "emptyDiamond"}, {dotted, "circle"},
	{solid, "triangle"}, {dashed, "rect"},
}

// leastShare is how much of the sum, where that is least, a contributor must reach
// somewhere to have a line of its own in a drawing; its numbers are in the table all the
// same.
const leastShare = 0.01

// wideRatio is how far a sum must range for its parts to drown on a linear scale, as
// they do when the Sun comes into the beam.
const wideRatio = 5

// pathFigure shows what the air and the ionosphere take along the pass.
func pathFigure(p *Pass) timeFigure {
	r := p.Radio
	fig := timeFigure{
		id: "path", title: "Path attenuation by contributor", quantity: "attenuation", unit: "dB", fromZero: true, many: true,
		caption: "What the path takes beside free space, in dB over UTC: the total and its parts" + pathText(&r.Path) +
			". A part under the zero line is given back." + lacks(&r.Path),
	}
	fig.contributors("total", "path", r.PathTotalDB, r.PathParts, 2)
	return fig
}

// noiseFigure shows what the system noise is made of along the pass.
func noiseFigure(p *Pass, fr *frame) timeFigure {
	r := p.Radio
	fig := timeFigure{
		id: "noise", title: "Noise by contributor", quantity: "noise", unit: "K", fromZero: true, many: true, marks: fr.inBeam(p),
		caption: "System noise at the input of the first amplifier and its parts, in K over UTC" + pathText(&r.Path) + "." + lacks(&r.Path),
	}
	fig.contributors("system noise", "noise", p.Profile.SystemNoiseK, r.NoiseParts, 1)
	if maxOf(p.Profile.SystemNoiseK) > wideRatio*leastOf(p.Profile.SystemNoiseK) {
		fig.logFrom = 1
		fig.caption += " The scale is logarithmic from 1 K on, since the noise rises so far."
	}
	return fig
}

// contributors fills a figure with a sum and its parts. Parts that are small all along
// keep to the table.
func (fig *timeFigure) contributors(name, short string, sum []float64, parts []Contributor, decimals int) {
	if len(parts) == 0 {
		return
	}
	fig.series = append(fig.series, series{name: name, short: short, dash: solid, values: sum, divisor: 1, decimals: decimals})
	least, small := leastShare*leastOf(sum), 0
	for _, c := range parts {
		s := series{name: c.Name, values: c.Values, divisor: float64(c.Sign), decimals: decimals, still: true}
		if maxOf(c.Values) < least || len(fig.series)-small == len(looks) {
			s.tableOnly = true
			small++
		} else {
			look := looks[len(fig.series)-small]
			s.dash, s.symbol = look.dash, look.symbol
		}
		fig.series = append(fig.series, s)
	}
	if small > 0 {
		fig.caption += " Parts that stay under " + fixed(100*leastShare, 0) + " % of the least sum are in the table alone."
	}
}

// exceededName names what the path takes for a percentage of the year.
func exceededName(p *Pass) string { return "exceeded " + percentText(&p.Radio.Path) + " of the year" }

func percentText(i *PathInfo) string {
	return strconv.FormatFloat(i.ExceededPercent, 'g', -1, 64) + " %"
}

// pathText says under which sky the numbers of a caption are; empty without a path.
func pathText(i *PathInfo) string {
	switch {
	case i.ClearSky:
		return ", under a clear sky"
	case i.ExceededPercent > 0:
		return ", as exceeded " + percentText(i) + " of an average year"
	}
	return ""
}

// lacks is a sentence about the parts that are missing; empty: none.
func lacks(i *PathInfo) string {
	if len(i.Missing) == 0 {
		return ""
	}
	return " Missing: " + inWords(i.Missing) + "."
}

// besideClear is a sentence about the sky of the lines of a chart; empty without a path.
func besideClear(p *Pass) string {
	i := &p.Radio.Path
	switch {
	case p.Radio.ClearSky != nil:
		return " Solid: with the attenuation and noise exceeded " + percentText(i) + " of an average year; dotted: under a clear sky."
	case i.ClearSky:
		return " Under a clear sky."
	case i.ExceededPercent > 0:
		return " With the attenuation and noise exceeded " + percentText(i) + " of an average year."
	}
	return ""
}

// clearSeries is the line of the same quantity under a clear sky.
func clearSeries(short string, values []float64, divisor float64, decimals int) series {
	return series{name: "clear sky", short: short + ", clear sky", dash: dotted, values: values, divisor: divisor, decimals: decimals}
}

// inBeam marks when the Sun and the Moon are in the beam.
func (fr *frame) inBeam(p *Pass) []chartMark {
	var marks []chartMark
	add := func(label string, list []downlink.Interval) {
		for _, in := range list {
			marks = append(marks, chartMark{in.From.Sub(fr.base).Seconds(), in.To.Sub(fr.base).Seconds(), label})
		}
	}
	add("Sun", p.Profile.SunInBeam)
	add("Moon", p.Profile.MoonInBeam)
	return marks
}

// inWords lists names as a sentence does.
func inWords(names []string) string {
	if n := len(names); n > 1 {
		return strings.Join(names[:n-1], ", ") + " and " + names[n-1]
	}
	return strings.Join(names, "")
}

// exceeded is the percentage of an average year; it does not exist under a clear sky.
func exceeded(i *PathInfo) number {
	if i.ClearSky || !(i.ExceededPercent > 0) {
		return number{math.NaN(), 0}
	}
	return number{i.ExceededPercent, 4}
}
