package reports

import (
	"slices"

	"slantwise/downlink"
)

// timeFigures lists the charts over time of a pass, in the order of the page.
func timeFigures(p *Pass, fr *frame) []timeFigure {
	var list []timeFigure
	if p.Radio != nil {
		list = append(list, powerFigure(p), marginFigure(p, fr), rateFigure(p, fr))
	}
	if p.Radio != nil && p.Radio.Plan != nil {
		list = append(list, planFigure(p, fr))
	}
	list = append(list, heightFigure(p))
	if p.Radio != nil && p.Surety != nil {
		list = append(list, beamFigure(p))
	}
	if p.Radio != nil {
		list = append(list, pathFigure(p), noiseFigure(p, fr), dopplerFigure(p))
		if finite(p.Profile.Volume.AchievableBytes) {
			list = append(list, volumeFigure(p))
		}
		list = append(list, mountFigures(p, fr)...)
	}
	list = append(list, uplinkFigures(p, fr)...)
	kept := list[:0]
	for _, f := range list {
		if f.drawable(len(p.Profile.Seconds)) {
			kept = append(kept, f)
		}
	}
	return kept
}

// drawable tells whether there is anything to draw: columns of the full length, and
// in the first of them a number.
func (fig *timeFigure) drawable(samples int) bool {
	if len(fig.series) == 0 {
		return false
	}
	for _, s := range fig.series {
		if len(s.values) != samples {
			return false
		}
	}
	for _, v := range fig.series[0].values {
		if finite(v) {
			return true
		}
	}
	return false
}

func powerFigure(p *Pass) timeFigure {
	fig := timeFigure{
		id: "power", title: "Received power", quantity: "received power", unit: "dBm",
		caption: "Received power at the input of the first amplifier, whole carrier, in dBm over UTC." + besideClear(p),
		series:  []series{{name: "received power", short: "power", dash: solid, values: p.Profile.ReceivedPowerDBm, divisor: 1, decimals: 2}},
	}
	if c := p.Radio.ClearSky; c != nil {
		fig.series[0].name = exceededName(p)
		fig.series = append(fig.series, clearSeries("power", c.ReceivedPowerDBm, 1, 2))
	}
	return fig
}

func marginFigure(p *Pass, fr *frame) timeFigure {
	f := p.Profile
	fig := timeFigure{
		id: "margin", title: "Margin", quantity: "margin", unit: "dB", fromZero: true, marks: fr.inBeam(p),
		caption: "Margin of mode " + p.Radio.Mode + " in dB over UTC, with the required " + fixed(f.RequiredMarginDB, 1) +
			" dB as a dashed line. Hatched: the time in which the margin is less than required." + besideClear(p),
		series: []series{
			{name: "margin", dash: solid, values: f.MarginDB, divisor: 1, decimals: 2},
			{name: "required", dash: dashed, values: constant(f.RequiredMarginDB, len(f.Seconds)), divisor: 1, decimals: 2, still: true},
		},
		below: fr.outside(f.Volume.Closes),
	}
	if c := p.Radio.ClearSky; c != nil {
		fig.series[0].name, fig.series[0].short = exceededName(p), "margin"
		fig.series = slices.Insert(fig.series, 1, clearSeries("margin", c.MarginDB, 1, 2))
	}
	return fig
}

func rateFigure(p *Pass, fr *frame) timeFigure {
	f := p.Profile
	rate := f.DataRate.BitsPerSecond()
	clear := p.Radio.ClearSky
	greatest := maxOf(f.AchievableRateBps, []float64{rate})
	if clear != nil {
		greatest = max(greatest, maxOf(clear.AchievableRateBps))
	}
	sc := scaleFor(greatest, rateScales)
	fig := timeFigure{
		id: "rate", title: "Achievable rate", quantity: "information rate", unit: sc.unit, fromZero: true, marks: fr.inBeam(p),
		caption: "Highest information rate that the link carries with the required margin, in " + sc.unit + " over UTC" + limitText(f) +
			". Dashed: the rate of mode " + p.Radio.Mode + "." + besideClear(p),
		series: []series{{name: "achievable", short: "best rate", dash: solid, values: f.AchievableRateBps, divisor: sc.divisor}},
	}
	if clear != nil {
		fig.series[0].name = exceededName(p)
		fig.series = append(fig.series, clearSeries("best rate", clear.AchievableRateBps, sc.divisor, 0))
	}
	if rate > 0 {
		fig.series = append(fig.series, series{name: "mode " + p.Radio.Mode, dash: dashed, values: constant(rate, len(f.Seconds)), divisor: sc.divisor, still: true})
	}
	setDecimals(fig.series)
	return fig
}

// limitText names what holds the achievable rate anywhere in the pass, beside the
// power received.
func limitText(f *downlink.Profile) string {
	var bandwidth, transmitter bool
	for _, l := range f.AchievableLimit {
		bandwidth = bandwidth || l == downlink.LimitBandwidth
		transmitter = transmitter || l == downlink.LimitTransmitter
	}
	switch {
	case bandwidth && transmitter:
		return "; held down in part by the allotted bandwidth and by the transmitter's highest rate"
	case bandwidth:
		return "; held down in part by the allotted bandwidth"
	case transmitter:
		return "; held down in part by the transmitter's highest rate"
	}
	return ""
}

func heightFigure(p *Pass) timeFigure {
	f := p.Profile
	return timeFigure{
		id: "height", title: "Elevation and range", quantity: "elevation", unit: "deg", fromZero: true, right: "range, km", rightUnit: "km",
		caption: "Geometric elevation in degrees (left, solid) and slant range in km (right, dashed) over UTC.",
		series: []series{
			{name: "elevation", dash: solid, values: f.ElevationDeg, divisor: 1, decimals: 2},
			{name: "range", dash: dashed, values: f.RangeKm, divisor: 1, decimals: 1, right: true},
		},
	}
}

func dopplerFigure(p *Pass) timeFigure {
	f := p.Profile
	sc := scaleFor(maxOf(f.DopplerHz), freqScales)
	fig := timeFigure{
		id: "doppler", title: "Doppler shift", quantity: "Doppler shift", unit: sc.unit,
		caption: "Doppler shift of the carrier of " + withUnit(p.Radio.Frequency.Hertz(), freqScales) + " in " + sc.unit +
			" over UTC; positive while the spacecraft approaches.",
		series: []series{{name: "Doppler shift", short: "Doppler", dash: solid, values: f.DopplerHz, divisor: sc.divisor}},
	}
	setDecimals(fig.series)
	return fig
}

func volumeFigure(p *Pass) timeFigure {
	r := p.Radio
	sc := scaleFor(maxOf(r.AchievableBytes, r.ModeBytes), byteScales)
	fig := timeFigure{
		id: "volume", title: "Volume so far", quantity: "volume", unit: sc.unit, fromZero: true,
		caption: "Information bytes since AOS in " + sc.unit + " over UTC: at the achievable rate (solid) and in mode " + r.Mode +
			" while its margin is at least what is required (dashed).",
		series: []series{
			{name: "achievable rate", short: "volume at best rate", dash: solid, values: r.AchievableBytes, divisor: sc.divisor},
			{name: "mode " + r.Mode, short: "volume in mode", dash: dashed, values: r.ModeBytes, divisor: sc.divisor},
		},
	}
	setDecimals(fig.series)
	return fig
}

// setDecimals gives all series of a chart the same decimals, enough for the greatest.
func setDecimals(list []series) {
	greatest := 0.0
	for _, s := range list {
		greatest = max(greatest, maxOf(s.values)/s.divisor)
	}
	for i := range list {
		list[i].decimals = decimalsFor(greatest)
	}
}

func constant(v float64, n int) []float64 {
	c := make([]float64, n)
	for i := range c {
		c[i] = v
	}
	return c
}
