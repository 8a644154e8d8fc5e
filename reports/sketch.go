package reports

import (
	"math"
	"slices"
	"time"

	vector "slantwise/reports/drawing"
)

// sketch is a chart as it is drawn without script: for PDF and static pages.
type sketch struct {
	id, title, caption string
	high               bool // many lines, or the sky
	wide               bool
	tall               float64 // points; 0: by high
	draw               func(c vector.Canvas, w, h float64)
}

// Heights of charts without script, in points.
const (
	sketchHeight = 128.0
	sketchHigh   = 200.0
)

func (s *sketch) height() float64 {
	if s.high {
		return sketchHigh
	}
	return sketchHeight
}

// sketches returns the charts of a pass, in the order of its page.
func sketches(p *Pass, fr *frame) []sketch {
	var list []sketch
	for _, fig := range timeFigures(p, fr) {
		l := fr.lines(&fig)
		list = append(list, sketch{id: fig.id, title: fig.title, caption: fig.caption, high: fig.many, draw: l.Draw})
	}
	sky := skySketch(p, fr)
	return slices.Insert(list, max(len(list)-1, 0), sketch{id: "sky", title: "Track on the sky", caption: skyText(p), high: true, draw: sky.Draw})
}

var strokes = map[string][]float64{solid: nil, dashed: vector.Dashed, dotted: vector.Dotted}

var sketchSymbols = map[string]vector.Symbol{
	"circle": vector.Circle, "triangle": vector.Triangle, "rect": vector.Square, "diamond": vector.Diamond,
	"emptyCircle": vector.Ring, "emptyTriangle": vector.OpenTriangle, "emptyRect": vector.OpenSquare, "emptyDiamond": vector.OpenDiamond,
}

// toneOf gives lines the colours that the page's script gives them.
func toneOf(i int, many bool) (vector.Tone, float64) {
	if many {
		if i == 0 {
			return vector.Ink, 1.8
		}
		return [...]vector.Tone{vector.First, vector.Second}[i%2], 1
	}
	return [...]vector.Tone{vector.First, vector.Second}[i%2], 1.4
}

// lines returns the chart of a figure to be drawn without script.
func (fr *frame) lines(fig *timeFigure) *vector.Lines {
	l := &vector.Lines{X: fr.clockAxis()}
	least, greatest := [2]float64{math.NaN(), math.NaN()}, [2]float64{math.NaN(), math.NaN()}
	for _, s := range fig.series {
		if s.tableOnly {
			continue
		}
		tone, width := toneOf(len(l.Lines), fig.many)
		one := vector.Line{Name: s.name, Dash: strokes[s.dash], Symbol: sketchSymbols[s.symbol], Tone: tone, Width: width, Right: s.right && fig.right != ""}
		side := 0
		if one.Right {
			side = 1
		}
		for _, i := range fr.samples {
			one.X, one.Y = append(one.X, fr.x[i]), append(one.Y, s.values[i]/s.divisor)
		}
		least[side], greatest[side] = lesser(least[side], leastOf(one.Y)), -lesser(-greatest[side], -greatestOf(one.Y))
		l.Lines = append(l.Lines, one)
	}
	name := axisName(fig.quantity, fig.unit)
	switch {
	case fig.logFrom > 0:
		l.Left = vector.NewLogAxis(name, fig.logFrom, max(greatest[0], fig.logFrom))
	case !fig.fromZero && greatest[0]-least[0] < 1:
		l.Left = vector.NewAxis(name, math.Floor(least[0])-1, math.Ceil(greatest[0])+1, false)
	default:
		l.Left = vector.NewAxis(name, least[0], greatest[0], fig.fromZero)
	}
	if fig.right != "" && finite(least[1]) {
		right := vector.NewAxis(fig.right, least[1], greatest[1], false)
		l.Right = &right
	}
	for _, s := range fig.below {
		l.Hatched = append(l.Hatched, vector.Span{From: s.from, To: s.to})
	}
	for _, m := range fig.marks {
		l.Marked = append(l.Marked, vector.Span{From: m.From, To: m.To, Label: m.Label})
	}
	return l
}

// clockAxis is the axis of time that all charts of a pass share.
func (fr *frame) clockAxis() vector.Axis { return clockAxis(&fr.axis, fr.base) }

// clockAxis labels a time axis with the clock in UTC, over a day with the day at midnight.
func clockAxis(t *timeAxis, base time.Time) vector.Axis {
	a := vector.Axis{Name: "UTC on " + t.Date, From: t.From, To: t.To}
	days := t.To-t.From > 86400
	if days {
		a.Name = "UTC, month-day at midnight"
	}
	if a.To <= a.From {
		a.To = a.From + 1
	}
	a.Ticks = vector.Steps(a.From, a.To, t.Step)
	for i := range a.Ticks {
		at := base.Add(time.Duration(a.Ticks[i].At * float64(time.Second)))
		layout := "15:04"
		switch {
		case days && at.Equal(midnight(at)):
			layout = "01-02"
		case t.Step < 60:
			layout = clockLayout
		}
		a.Ticks[i].Label = utcClock(at, layout)
	}
	return a
}

// skySketch is the sky track to be drawn without script.
func skySketch(p *Pass, fr *frame) *vector.Sky {
	s := &vector.Sky{}
	for _, i := range fr.samples {
		s.Track = append(s.Track, vector.Place{Azimuth: p.Profile.AzimuthDeg[i], Elevation: p.Profile.ElevationDeg[i]})
	}
	for _, d := range p.Horizon {
		s.Mask = append(s.Mask, vector.Place{Azimuth: d.AzimuthDeg, Elevation: max(d.ElevationDeg, 0)})
	}
	all := events(p)
	for i, e := range all {
		one := vector.Event{At: vector.Place{Azimuth: e.azimuthDeg, Elevation: e.elevationDeg}, Symbol: eventSymbols[i]}
		if i == 1 || !together(e, all[1]) {
			one.Lines = []string{e.short, clock(e.at)}
		}
		s.Events = append(s.Events, one)
	}
	if p.Ground == nil {
		return s
	}
	for _, b := range p.Ground.Sky { // at the culmination
		if b.ElevationDeg < 0 {
			continue
		}
		symbol := vector.Diamond
		if b.Name == "Sun" {
			symbol = vector.Ring
		}
		s.Events = append(s.Events, vector.Event{At: vector.Place{Azimuth: b.AzimuthDeg, Elevation: b.ElevationDeg}, Symbol: symbol, Lines: []string{b.Name}})
	}
	return s
}

// overviewSketch is the chart of the index to be drawn without script.
func overviewSketch(r *Report, rows []row) *vector.Overview {
	base := midnight(r.From)
	axis := timeAxis{From: r.From.Sub(base).Seconds(), To: r.To.Sub(base).Seconds(), Date: base.Format("2006-01-02")}
	axis.Step = clockStep(axis.To - axis.From)
	o := &vector.Overview{X: clockAxis(&axis, base), Rows: distinct(rows, func(r *row) string { return r.station })}
	looks := []struct {
		symbol vector.Symbol
		tone   vector.Tone
	}{{vector.Circle, vector.First}, {vector.Diamond, vector.Second}, {vector.Ring, vector.First}, {vector.OpenTriangle, vector.Soft}}
	for k, kind := range overviewKinds {
		found := false
		for i := range rows {
			if slices.Contains(kind.states, rows[i].verdict.state) {
				found = true
				o.Dots = append(o.Dots, vector.Dot{At: rows[i].culmination.Sub(base).Seconds(), Row: slices.Index(o.Rows, rows[i].station), Symbol: looks[k].symbol, Tone: looks[k].tone})
			}
		}
		if found {
			o.Kinds = append(o.Kinds, vector.Kind{Name: kind.name, Symbol: looks[k].symbol, Tone: looks[k].tone})
		}
	}
	return o
}
