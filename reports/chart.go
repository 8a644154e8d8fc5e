package reports

import (
	"cmp"
	"encoding/json"
	"strings"

	"github.com/go-echarts/go-echarts/v2/charts"
	"github.com/go-echarts/go-echarts/v2/opts"
)

// drawing is a chart as the page's script gets it: the chart's own options, and what
// options cannot say because it would take a function.
type drawing struct {
	ID     string         `json:"id"`
	Kind   string         `json:"kind"` // time, curve, sky or overview
	Option map[string]any `json:"option"`
	Axis   *timeAxis      `json:"axis,omitempty"`
	Reads  []reading      `json:"reads,omitempty"`
	Links  []string       `json:"links,omitempty"` // overview: the page behind each point, by the third value
	Names  []string       `json:"names,omitempty"` // overview: the text of each point
	Many   bool           `json:"many,omitempty"`  // many lines, which have symbols
	Marks  []chartMark    `json:"marks,omitempty"` // spans of the x axis with a word in them
	Bare   bool           `json:"bare,omitempty"`  // the spans have edges and no dots: they fill the axis
}

// chartMark is a span of the x axis that is marked with a word.
type chartMark struct {
	From  float64 `json:"from"`
	To    float64 `json:"to"`
	Label string  `json:"label"`
}

// reading tells the page's script how to write a series at the cursor.
type reading struct {
	Series   int    `json:"series"`
	Label    string `json:"label"`
	Unit     string `json:"unit"`
	Decimals int    `json:"decimals"`
}

// timeAxis is the axis that the charts of a page share: seconds since the midnight
// (UTC) that starts the day of AOS.
type timeAxis struct {
	From float64 `json:"from"`
	To   float64 `json:"to"`
	Step float64 `json:"step"` // between labels
	Date string  `json:"date"` // the day that second 0 stands at
}

// Series styles, told apart without colour: solid and dashed.
const (
	solid  = "solid"
	dashed = "dashed"
	dotted = "dotted"
)

// series is one line of a chart.
type series struct {
	name     string
	dash     string
	values   []float64 // in the unit of the axis times divisor
	divisor  float64
	decimals int
	right    bool   // on the second y axis
	still    bool   // a constant: nothing to read at the cursor
	short    string // at the cursor; empty: name
	symbol   string // on some of its points, where dashes are too few; empty: none

	tableOnly bool // too small to be drawn
}

// marshalDrawings returns the drawings as JSON that may stand in a page: markup in
// names is escaped, and a number that does not exist is an error, never a chart that
// silently stays empty.
func marshalDrawings(data any) ([]byte, error) { return json.Marshal(data) }

// points returns the series' points at the samples, with null where there is no
// value: a gap in the line.
func points(x []float64, s series, samples []int) json.RawMessage {
	dst := make([]byte, 0, 16*len(samples)+2)
	dst = append(dst, '[')
	for k, i := range samples {
		dst = comma(dst, k)
		dst = append(dst, '[')
		dst = appendFixed(dst, x[i], 3)
		dst = append(dst, ',')
		dst = appendJSONNumber(dst, s.values[i]/s.divisor, s.decimals)
		dst = append(dst, ']')
	}
	return append(dst, ']')
}

// lineSeries returns a series of the line kind without markers.
func lineSeries(s series, data json.RawMessage) charts.SingleSeries {
	one := charts.SingleSeries{
		Name: s.name, Type: "line", Data: data,
		Symbol:    cmp.Or(s.symbol, "none"), // in the legend too
		LineStyle: &opts.LineStyle{Type: s.dash, Width: 2},
	}
	if s.right {
		one.YAxisIndex = 1
	}
	return one
}

// plain takes the options of a chart and drops the empty parts that would switch on
// what the page does itself.
func plain(m map[string]any) map[string]any {
	for _, k := range []string{"title", "toolbox", "tooltip", "color"} {
		delete(m, k)
	}
	return m
}

// described gives a chart the words that stand for it where it cannot be seen.
func described(text string) charts.GlobalOpts {
	return func(bc *charts.BaseConfiguration) {
		bc.Aria = &opts.Aria{Enabled: opts.Bool(true), Label: &opts.AriaLabel{Enabled: opts.Bool(true), Description: text}}
	}
}

// axisName writes a quantity with its unit as axes and table heads carry it.
func axisName(quantity, unit string) string {
	if unit == "" {
		return quantity
	}
	return strings.Join([]string{quantity, unit}, ", ")
}
