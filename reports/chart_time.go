package reports

import (
	"cmp"
	"encoding/json"
	"math"
	"slices"
	"time"

	"github.com/go-echarts/go-echarts/v2/charts"
	"github.com/go-echarts/go-echarts/v2/opts"

	"slantwise/downlink"
)

// timeFigure is what a chart over time is made from.
type timeFigure struct {
	id, title string
	caption   string
	unit      string // of the left axis
	quantity  string
	series    []series
	right     string // name with unit of the second axis; empty: none
	rightUnit string
	below     []axisSpan
	marks     []chartMark
	bare      bool    // marks have edges and no dots
	many      bool    // many lines, with symbols
	logFrom   float64 // the left axis is logarithmic and begins here; 0: linear
	fromZero  bool
}

// axisSpan is a span of the time axis to be marked, in its seconds.
type axisSpan struct{ from, to float64 }

// frame is what the time charts of one pass share.
type frame struct {
	x       []float64 // seconds since base, by sample
	samples []int
	axis    timeAxis
	base    time.Time
}

func newFrame(p *Pass) *frame {
	f := p.Profile
	base := midnight(f.Start)
	start := f.Start.Sub(base).Seconds()
	fr := &frame{x: make([]float64, len(f.Seconds)), samples: thinned(p, chartPoints), base: base}
	for i, s := range f.Seconds {
		fr.x[i] = start + s
	}
	fr.axis = timeAxis{
		From: math.Round(fr.x[0]*1000) / 1000,
		To:   math.Round(fr.x[len(fr.x)-1]*1000) / 1000,
		Date: base.Format("2006-01-02"),
	}
	fr.axis.Step = clockStep(fr.axis.To - fr.axis.From)
	return fr
}

// position returns where a sample stands among those that are drawn.
func (fr *frame) position(sample int) int {
	i, _ := slices.BinarySearch(fr.samples, sample)
	return i
}

// clockStep returns the least round step of a clock that makes at most eight labels.
func clockStep(length float64) float64 {
	for _, s := range []float64{1, 2, 5, 10, 20, 30, 60, 120, 300, 600, 1200, 1800, 3600, 7200, 10800, 21600, 43200} {
		if length <= 8*s {
			return s
		}
	}
	return 86400 * math.Ceil(length/(8*86400))
}

// draw returns the chart of a figure.
func (fr *frame) draw(fig *timeFigure) drawing {
	line := charts.NewLine()
	line.SetGlobalOptions(described(fig.caption), charts.WithAnimation(false),
		charts.WithXAxisOpts(opts.XAxis{
			Type: "value", Name: "UTC on " + fr.axis.Date,
			Min: fr.axis.From, Max: fr.axis.To, MinInterval: fr.axis.Step, MaxInterval: fr.axis.Step,
		}),
		charts.WithYAxisOpts(fig.leftAxis()),
		charts.WithLegendOpts(opts.Legend{Show: opts.Bool(len(fig.series) > 1)}),
	)
	if fig.right != "" {
		line.ExtendYAxis(opts.YAxis{Type: "value", Name: fig.right, Scale: opts.Bool(true), Position: "right", AlignTicks: opts.Bool(true)})
	}
	d := drawing{ID: fig.id, Kind: "time", Axis: &fr.axis, Marks: fig.marks, Bare: fig.bare, Many: fig.many}
	k := -1
	for _, s := range fig.series {
		if s.tableOnly {
			continue
		}
		k++
		one := lineSeries(s, points(fr.x, s, fr.samples))
		if k == 0 && len(fig.below) > 0 {
			one.MarkAreas = markBelow(fig.below)
		}
		line.MultiSeries = append(line.MultiSeries, one)
		unit := fig.unit
		if s.right {
			unit = fig.rightUnit
		}
		if !s.still {
			d.Reads = append(d.Reads, reading{Series: k, Label: cmp.Or(s.short, s.name), Unit: unit, Decimals: s.decimals})
		}
	}
	line.Validate()
	d.Option = plain(line.JSON())
	return d
}

// lesser returns the lesser of two numbers, or the one that exists.
func lesser(a, b float64) float64 {
	if !(a <= b) && finite(b) {
		return b
	}
	return a
}

// leftAxis returns the axis of all series but those on the right. A level that hardly moves gets a
// unit of room on either side, where the chart's own choice would be half the value.
func (fig *timeFigure) leftAxis() opts.YAxis {
	axis := opts.YAxis{Type: "value", Name: axisName(fig.quantity, fig.unit), Scale: opts.Bool(!fig.fromZero)}
	if fig.logFrom > 0 {
		axis.Type, axis.Min = "log", fig.logFrom
	}
	if fig.fromZero {
		return axis
	}
	least, greatest := math.NaN(), math.NaN()
	for _, s := range fig.series {
		if !s.right {
			least, greatest = lesser(least, leastOf(s.values)/s.divisor), -lesser(-greatest, -greatestOf(s.values)/s.divisor)
		}
	}
	if greatest-least < 1 {
		axis.Min, axis.Max = math.Floor(least)-1, math.Ceil(greatest)+1
	}
	return axis
}

// markBelow marks spans; the page's script hatches them, so that they show without
// colour.
func markBelow(spans []axisSpan) *opts.MarkAreas {
	areas := &opts.MarkAreas{}
	for _, s := range spans {
		areas.Data = append(areas.Data, []opts.MarkAreaData{{XAxis: json.Number(axisNumber(s.from))}, {XAxis: json.Number(axisNumber(s.to))}})
	}
	return areas
}

func axisNumber(v float64) string { return string(appendFixed(nil, v, 3)) }

// outside returns the spans of the pass that intervals leave: those of closing, the time
// in which the margin is under what is required.
func (fr *frame) outside(intervals []downlink.Interval) []axisSpan {
	var spans []axisSpan
	at := fr.axis.From
	for _, c := range intervals {
		if from := c.From.Sub(fr.base).Seconds(); from > at {
			spans = append(spans, axisSpan{at, from})
		}
		at = c.To.Sub(fr.base).Seconds()
	}
	if at < fr.axis.To {
		spans = append(spans, axisSpan{at, fr.axis.To})
	}
	return spans
}
