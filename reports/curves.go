package reports

import (
	"bytes"
	"encoding/json"
	"fmt"
	"html/template"
	"math"

	"github.com/go-echarts/go-echarts/v2/charts"
	"github.com/go-echarts/go-echarts/v2/opts"
)

// Curves is a page of charts over one quantity that is not time.
type Curves struct {
	Title      string
	Lines      []string // what the page is about, a sentence each
	Warnings   []string // shown at the head
	X          Axis
	Charts     []CurveChart
	Notes      []Note
	Basis      Basis
	Scriptless bool // the charts are drawn in the page
}

// Axis is the quantity along the charts.
type Axis struct {
	Name, Unit  string
	Values      []float64 // rising; the points
	Logarithmic bool
	Decimals    int
}

// CurveChart is one chart of a Curves page.
type CurveChart struct {
	ID             string // of letters and dashes, each once
	Title, Caption string
	Quantity, Unit string
	Curves         []Curve
	Mark           *Mark // nil: none
}

// Mark is a place on the axis that stands out as an upright line.
type Mark struct {
	Name string
	At   float64
}

// Curve is one line: a value at each point of the axis, NaN for a gap.
type Curve struct {
	Name   string
	Values []float64
}

// curveView is what the template shows.
type curveView struct {
	pageView
	Lines, Warnings []string
	Figures         []figureView
	Notes           []Note
}

// CurvesPage returns the page as one file of HTML that holds everything inside.
func CurvesPage(c *Curves) ([]byte, error) {
	if err := c.check(); err != nil {
		return nil, err
	}
	w := newWriter(&Report{}, Options{OneFile: true, Static: c.Scriptless}, chartScript(), nil)
	v := curveView{pageView: w.page("", c.Title), Lines: c.Lines, Warnings: c.Warnings, Notes: c.Notes}
	v.foot(&c.Basis, "")
	var drawings []drawing
	for i := range c.Charts {
		one := &c.Charts[i]
		if !c.Scriptless {
			drawings = append(drawings, c.draw(one))
		}
		v.Figures = append(v.Figures, c.view(one, c.Scriptless))
	}
	var err error
	if v.Data, err = w.drawn(drawings); err != nil {
		return nil, err
	}
	var out bytes.Buffer
	err = pageTemplates().ExecuteTemplate(&out, "curves.html", v)
	return out.Bytes(), err
}

// check refuses charts that cannot be drawn.
func (c *Curves) check() error {
	if len(c.X.Values) == 0 {
		return fmt.Errorf("report: an axis of %s without points", c.X.Name)
	}
	for i := range c.Charts {
		for _, k := range c.Charts[i].Curves {
			if len(k.Values) != len(c.X.Values) {
				return fmt.Errorf("report: chart %q: %q has %d values for %d points", c.Charts[i].ID, k.Name, len(k.Values), len(c.X.Values))
			}
		}
	}
	return nil
}

// view is a chart as the template shows it, drawn where the page has no script.
func (c *Curves) view(one *CurveChart, static bool) figureView {
	v := figureView{ID: one.ID, Title: one.Title, Caption: one.Caption, Table: c.table(one), Many: len(one.Curves) > len(fewDashes)}
	if static {
		s := c.sketch(one)
		v.Drawing = s.markup(one.Title + ". " + one.Caption)
	}
	return v
}

// drawn holds the charts for the page's script; nothing where there is none.
func (w *writer) drawn(drawings []drawing) (template.HTML, error) {
	if w.options.Static {
		return "", nil
	}
	data, err := marshalDrawings(map[string]any{"drawings": drawings})
	if err != nil {
		return "", err
	}
	return dataElement(data), nil
}

// fewDashes tell up to three lines apart; more of them need symbols.
var fewDashes = [...]string{solid, dotted, dashed}

func (c *Curves) draw(one *CurveChart) drawing {
	x := opts.XAxis{Type: "value", Name: axisName(c.X.Name, c.X.Unit), Min: c.X.Values[0], Max: c.X.Values[len(c.X.Values)-1]}
	if c.X.Logarithmic {
		x.Type = "log"
	}
	line := charts.NewLine()
	line.SetGlobalOptions(described(one.Caption), charts.WithAnimation(false), charts.WithXAxisOpts(x),
		charts.WithYAxisOpts(opts.YAxis{Type: "value", Name: axisName(one.Quantity, one.Unit)}),
		charts.WithLegendOpts(opts.Legend{Show: opts.Bool(len(one.Curves) > 1)}))
	all := make([]int, len(c.X.Values))
	for i := range all {
		all[i] = i
	}
	for i, k := range one.Curves {
		look := looks[i%len(looks)]
		if len(one.Curves) <= len(fewDashes) {
			look.dash, look.symbol = fewDashes[i], ""
		}
		s := series{name: k.Name, dash: look.dash, symbol: look.symbol, values: k.Values, divisor: 1, decimals: 3}
		line.MultiSeries = append(line.MultiSeries, lineSeries(s, points(c.X.Values, s, all)))
	}
	if m := one.Mark; m != nil {
		line.MultiSeries = append(line.MultiSeries, lineSeries(series{name: m.Name, dash: solid, symbol: "diamond"}, upright(one, m.At)))
		line.Legend.Show = opts.Bool(true)
	}
	line.Validate()
	return drawing{ID: one.ID, Kind: "curve", Many: len(one.Curves) > len(fewDashes), Option: plain(line.JSON())}
}

// upright is a line from the least to the greatest value of a chart.
func upright(one *CurveChart, at float64) json.RawMessage {
	low, high := math.NaN(), math.NaN()
	for _, k := range one.Curves {
		if v := leastOf(k.Values); !(v >= low) {
			low = v
		}
		if v := greatestOf(k.Values); !(v <= high) {
			high = v
		}
	}
	ends := series{values: []float64{low, high}, divisor: 1, decimals: 3}
	return points([]float64{at, at}, ends, []int{0, 1})
}

// table writes the numbers of a chart, a row a point.
func (c *Curves) table(one *CurveChart) template.HTML {
	dst := []byte(`<table><caption>` + template.HTMLEscapeString(axisName(one.Title, one.Unit)) + `</caption><thead><tr><th scope="col">`)
	dst = append(dst, template.HTMLEscapeString(axisName(c.X.Name, c.X.Unit))...)
	dst = append(dst, "</th>"...)
	for _, k := range one.Curves {
		dst = append(append(append(dst, `<th scope="col">`...), template.HTMLEscapeString(k.Name)...), "</th>"...)
	}
	dst = append(dst, "</tr></thead><tbody>\n"...)
	for i, x := range c.X.Values {
		dst = append(append(append(dst, `<tr><th scope="row">`...), fixed(x, c.X.Decimals)...), "</th>"...)
		for _, k := range one.Curves {
			dst = append(append(append(dst, "<td>"...), fixed(k.Values[i], 2)...), "</td>"...)
		}
		dst = append(dst, "</tr>\n"...)
	}
	return template.HTML(append(dst, "</tbody></table>"...))
}
