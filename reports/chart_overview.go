package reports

import (
	"encoding/json"
	"strconv"

	"github.com/go-echarts/go-echarts/v2/charts"
	"github.com/go-echarts/go-echarts/v2/opts"
)

const overviewCaption = "Every pass at its culmination: a row a station, time in UTC from left to right; the symbol tells what becomes of the link."

// overviewKinds are the series of the overview, with a symbol of their own each.
var overviewKinds = []struct {
	name, symbol string
	states       []state
}{
	{"closes throughout", "circle", []state{closesThrough}},
	{"closes in part", "diamond", []state{closesPartly}},
	{"does not close", "emptyCircle", []state{neverCloses}},
	{"no data link", "emptyTriangle", []state{noMargin, noRadio}},
}

// drawOverview returns the chart of the index.
func drawOverview(r *Report, rows []row) drawing {
	stations := distinct(rows, func(r *row) string { return r.station })
	at := make(map[string]int, len(stations))
	for i, s := range stations {
		at[s] = i
	}
	base := midnight(r.From)
	axis := timeAxis{From: r.From.Sub(base).Seconds(), To: r.To.Sub(base).Seconds(), Date: base.Format("2006-01-02")}
	axis.Step = clockStep(axis.To - axis.From)
	scatter := charts.NewScatter()
	scatter.SetGlobalOptions(described(overviewCaption), charts.WithAnimation(false),
		charts.WithXAxisOpts(opts.XAxis{Type: "value", Name: "UTC", Min: axis.From, Max: axis.To, MinInterval: axis.Step, MaxInterval: axis.Step}),
		charts.WithYAxisOpts(opts.YAxis{Type: "category", Data: stations, Inverse: opts.Bool(true)}),
	)
	d := drawing{ID: "overview", Kind: "overview", Axis: &axis}
	for _, kind := range overviewKinds {
		data := []byte{'['}
		for i := range rows {
			for _, s := range kind.states {
				if rows[i].verdict.state == s {
					data = append(comma(data, len(data)-1), '[')
					data = appendFixed(data, rows[i].culmination.Sub(base).Seconds(), 0)
					data = strconv.AppendInt(append(data, ','), int64(at[rows[i].station]), 10)
					data = append(strconv.AppendInt(append(data, ','), int64(i), 10), ']')
				}
			}
		}
		if len(data) == 1 {
			continue
		}
		scatter.MultiSeries = append(scatter.MultiSeries, charts.SingleSeries{
			Name: kind.name, Type: "scatter", Symbol: kind.symbol, SymbolSize: 9, Data: json.RawMessage(append(data, ']')),
		})
	}
	for i := range rows {
		d.Links = append(d.Links, passFolder+"/"+rows[i].page+".html")
		d.Names = append(d.Names, rows[i].spacecraft+", "+dayClock(rows[i].aos)+" UTC, "+fixed(rows[i].maxElevationDeg, 0)+"°")
	}
	scatter.Validate()
	d.Option = plain(scatter.JSON())
	return d
}
