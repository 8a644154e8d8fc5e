package reports

import (
	"slices"

	vector "slantwise/reports/drawing"
)

// sketch is a chart of curves as it is drawn without script.
func (c *Curves) sketch(one *CurveChart) sketch {
	l := c.lines(one)
	many := len(one.Curves) > len(fewDashes)
	return sketch{id: one.ID, title: one.Title, caption: one.Caption, high: many, draw: l.Draw}
}

// axis runs from the first to the last point, as that of the page's script.
func (a *Axis) axis() vector.Axis {
	first, last := a.Values[0], a.Values[len(a.Values)-1]
	if last <= first {
		return vector.NewAxis(axisName(a.Name, a.Unit), first, last, false)
	}
	x := vector.NewAxis(axisName(a.Name, a.Unit), first, last, false)
	if a.Logarithmic {
		x = vector.NewLogAxis(axisName(a.Name, a.Unit), first, last)
	}
	x.From, x.To = first, last
	x.Ticks = slices.DeleteFunc(x.Ticks, func(t vector.Tick) bool { return t.At < first*(1-1e-9) || t.At > last*(1+1e-9) })
	return x
}

func (c *Curves) lines(one *CurveChart) *vector.Lines {
	l := &vector.Lines{X: c.X.axis()}
	var all []float64
	for _, k := range one.Curves {
		all = append(all, k.Values...)
	}
	least, greatest := leastOf(all), greatestOf(all)
	if !finite(least) {
		least, greatest = 0, 1
	}
	l.Left = vector.NewAxis(axisName(one.Quantity, one.Unit), least, greatest, false)
	for i, k := range one.Curves {
		tone, width := toneOf(i, len(one.Curves) > len(fewDashes))
		look := looks[i%len(looks)]
		if len(one.Curves) <= len(fewDashes) {
			look.dash, look.symbol = fewDashes[i], ""
		}
		l.Lines = append(l.Lines, vector.Line{Name: k.Name, X: c.X.Values, Y: k.Values, Dash: strokes[look.dash], Symbol: sketchSymbols[look.symbol], Tone: tone, Width: width})
	}
	if m := one.Mark; m != nil {
		l.Lines = append(l.Lines, vector.Line{Name: m.Name, X: []float64{m.At, m.At}, Y: []float64{l.Left.From, l.Left.To}, Symbol: vector.Diamond, Tone: vector.Ink, Width: 0.8})
	}
	return l
}
