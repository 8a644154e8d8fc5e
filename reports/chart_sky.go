package reports

import (
	"math"

	"github.com/go-echarts/go-echarts/v2/charts"
	"github.com/go-echarts/go-echarts/v2/opts"
)

const skyCaption = "Track on the sky as seen from the station: north is up, east is to the right, the zenith in the middle, the horizon at the rim; elevation in degrees. The shaded rim lies under the horizon mask or the minimum elevation."

// drawSky returns the sky track: azimuth clockwise from north, elevation from the
// rim inwards, with the horizon mask where the station has one.
func drawSky(p *Pass, fr *frame) drawing {
	f := p.Profile
	line := charts.NewLine()
	line.SetGlobalOptions(described(skyText(p)), charts.WithAnimation(false),
		charts.WithPolarOps(opts.Polar{}),
		charts.WithAngleAxisOps(opts.AngleAxis{
			PolarAxisBase: opts.PolarAxisBase{Type: "value", StartAngle: 90, Max: 360, Interval: 30},
			Clockwise:     opts.Bool(true),
		}),
		charts.WithRadiusAxisOps(opts.RadiusAxis{
			PolarAxisBase: opts.PolarAxisBase{Type: "value", Max: 90, Interval: 30},
			Inverse:       opts.Bool(true),
		}),
		charts.WithLegendOpts(opts.Legend{Show: opts.Bool(len(p.Horizon) > 0)}),
	)
	track := skySeries("track", solid, f.ElevationDeg, f.AzimuthDeg, fr.samples)
	line.MultiSeries = append(line.MultiSeries, track)
	if len(p.Horizon) > 0 {
		line.MultiSeries = append(line.MultiSeries, maskSeries(p.Horizon))
	}
	line.MultiSeries = append(line.MultiSeries, eventMarks(p))
	if bodies := bodyMarks(p); bodies != nil {
		line.MultiSeries = append(line.MultiSeries, *bodies)
	}
	line.Validate()
	m := plain(line.JSON())
	// The binding leaves out a minimum of 0, and the axes must not choose their own.
	m["radiusAxis"] = map[string]any{"type": "value", "min": 0, "max": 90, "interval": 30, "inverse": true}
	m["angleAxis"] = map[string]any{"type": "value", "min": 0, "max": 360, "interval": 30, "startAngle": 90, "clockwise": true}
	m["legend"] = map[string]any{"show": len(p.Horizon) > 0, "data": []string{"track", "least elevation"}}
	return drawing{
		ID: "sky", Kind: "sky", Option: m,
		Reads: []reading{{Series: 0, Label: "elevation", Unit: "deg", Decimals: 1}, {Series: 0, Label: "azimuth", Unit: "deg", Decimals: 1}},
	}
}

func skySeries(name, dash string, elevation, azimuth []float64, samples []int) charts.SingleSeries {
	dst := []byte{'['}
	for k, i := range samples {
		dst = comma(dst, k)
		dst = append(dst, '[')
		dst = appendJSONNumber(dst, elevation[i], 2)
		dst = append(dst, ',')
		dst = appendJSONNumber(dst, azimuth[i], 2)
		dst = append(dst, ']')
	}
	s := lineSeries(series{name: name, dash: dash}, append(dst, ']'))
	s.CoordSystem = "polar"
	return s
}

// maskSeries closes the mask around the whole circle.
func maskSeries(horizon []Direction) charts.SingleSeries {
	n := len(horizon)
	el, az, all := make([]float64, n+1), make([]float64, n+1), make([]int, n+1)
	for i := range all {
		d := horizon[i%n]
		el[i], az[i], all[i] = max(d.ElevationDeg, 0), d.AzimuthDeg, i
	}
	s := skySeries("least elevation", dashed, el, az, all)
	s.AreaStyle = &opts.AreaStyle{Origin: "start", Opacity: opts.Float(0.25)}
	return s
}

// eventMarks puts a symbol of its own on AOS, culmination and LOS.
func eventMarks(p *Pass) charts.SingleSeries {
	symbols := [...]string{"triangle", "circle", "rect"}
	data := make([]any, 0, len(symbols))
	all := events(p)
	for i, e := range all {
		data = append(data, map[string]any{
			"name":   e.short + "\n" + clock(e.at),
			"value":  []number{{e.elevationDeg, 2}, {e.azimuthDeg, 2}},
			"symbol": symbols[i],
			"label":  map[string]any{"position": labelSide(e, i == 1), "show": i == 1 || !together(e, all[1])},
		})
	}
	return charts.SingleSeries{
		Name: "events", Type: "scatter", CoordSystem: "polar", Data: data, SymbolSize: 11,
		Label: &opts.Label{Show: opts.Bool(true), Formatter: "{b}"},
	}
}

// bodyMarks puts the Sun and the Moon where they stand at the culmination; nil where
// neither is up.
func bodyMarks(p *Pass) *charts.SingleSeries {
	if p.Ground == nil {
		return nil
	}
	var data []any
	for _, b := range p.Ground.Sky {
		if b.ElevationDeg < 0 {
			continue
		}
		symbol := "diamond"
		if b.Name == "Sun" {
			symbol = "emptyCircle"
		}
		data = append(data, map[string]any{
			"name": b.Name, "value": []number{{b.ElevationDeg, 2}, {b.AzimuthDeg, 2}}, "symbol": symbol,
			"label": map[string]any{"position": "bottom", "show": true},
		})
	}
	if data == nil {
		return nil
	}
	return &charts.SingleSeries{
		Name: "Sun and Moon", Type: "scatter", CoordSystem: "polar", Data: data, SymbolSize: 15,
		Label: &opts.Label{Show: opts.Bool(true), Formatter: "{b}"},
	}
}

// together tells whether two events are so close that their labels would cover each
// other, as of a spacecraft that stands still.
func together(a, b event) bool {
	turn := math.Abs(math.Mod(a.azimuthDeg-b.azimuthDeg+540, 360) - 180)
	return math.Abs(a.elevationDeg-b.elevationDeg) < 4 && turn*math.Cos(b.elevationDeg*math.Pi/180) < 4
}

// labelSide keeps the labels apart: those of AOS and LOS outwards, that of the
// culmination inwards.
func labelSide(e event, inwards bool) string {
	if inwards {
		return [...]string{"bottom", "left", "top", "right"}[int(math.Mod(e.azimuthDeg+45, 360)/90)]
	}
	if e.azimuthDeg < 180 {
		return "right"
	}
	return "left"
}

// skyText describes the track in words.
func skyText(p *Pass) string {
	ev := events(p)
	text := skyCaption + " The track"
	for i, e := range ev {
		text += []string{" begins in the ", ", culminates in the ", " and ends in the "}[i] +
			compass(e.azimuthDeg) + " at azimuth " + fixed(e.azimuthDeg, 0) + " deg, elevation " + fixed(e.elevationDeg, 1) + " deg"
	}
	text += "."
	if p.Ground != nil {
		for _, b := range p.Ground.Sky {
			text += " " + b.String()
		}
	}
	return text
}
