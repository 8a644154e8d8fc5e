package reports

import (
	"html/template"
	"math"
	"strconv"
	"time"

	vector "slantwise/reports/drawing"
)

func itoa(n int64) string { return strconv.FormatInt(n, 10) }

// measuredDots is how many samples of a log a drawing shows at most, about; the file holds all.
const measuredDots = 240

// measuredHeight is how high a drawing of measurements is, in points.
const measuredHeight = 140.0

// sketches returns two drawings a quantity: measured over predicted, and the difference. entry is
// the place of the log among those of the pass.
func (m *Measured) sketches(fr *frame, entry int) []sketch {
	var out []sketch
	for i := range m.Quantities {
		q := &m.Quantities[i]
		id := "measured-" + strconv.Itoa(entry+1) + "-" + underscored(q.Key)
		over, unlike := q.over(fr), q.unlike(fr)
		out = append(out,
			sketch{id: id, title: q.Title + ", measured over predicted", caption: q.overText(fr, over), tall: measuredHeight, draw: over.Draw},
			sketch{id: id + "-difference", title: q.Title + ", measured less predicted", caption: q.unlikeText(unlike), tall: measuredHeight, draw: unlike.Draw})
	}
	return out
}

// drawn is how many samples apart two that are drawn lie.
func (q *MeasuredQuantity) drawn() int { return 1 + (len(q.Times)-1)/measuredDots }

// over draws the measured samples over the predicted curve.
func (q *MeasuredQuantity) over(fr *frame) *vector.Lines {
	l := q.dots(fr, q.Measured, q.shown)
	curve := vector.Line{Name: "predicted", Tone: vector.First, Width: 1.4}
	for i := range q.Times {
		curve.X, curve.Y = append(curve.X, fr.seconds(q.Times[i])), append(curve.Y, q.shown(q.Predicted[i]))
	}
	least, greatest := lesser(leastOf(curve.Y), leastOf(l.Lines[0].Y)), -lesser(-greatestOf(curve.Y), -greatestOf(l.Lines[0].Y))
	name := axisName(q.Title, q.Unit)
	if q.BaseText != "" {
		name = axisName(q.Title+" less "+q.BaseText, q.Unit)
	}
	l.Left = roomy(name, least, greatest, q.DifferenceUnit)
	l.Lines = append([]vector.Line{curve}, l.Lines...)
	return l
}

// unlike draws measured less predicted, with 0 as a line.
func (q *MeasuredQuantity) unlike(fr *frame) *vector.Lines {
	l := q.dots(fr, q.Difference, func(v float64) float64 { return v })
	least, greatest := min(0, leastOf(l.Lines[0].Y)), max(0, greatestOf(l.Lines[0].Y))
	l.Left = roomy(axisName("measured less predicted", q.DifferenceUnit), least, greatest, q.DifferenceUnit)
	nought := vector.Line{Name: "no difference", Tone: vector.Soft, Width: 0.9, Dash: vector.Dashed, X: []float64{l.X.From, l.X.To}, Y: []float64{0, 0}}
	lines := []vector.Line{nought}
	if b := q.bias(); b != nil {
		lines = append(lines, vector.Line{Name: "bias", Tone: vector.First, Width: 1.2, X: nought.X, Y: []float64{b.Value, b.Value}})
	}
	l.Lines = append(lines, l.Lines...)
	return l
}

// dots returns a chart of the samples that count and of those that do not, thinned.
func (q *MeasuredQuantity) dots(fr *frame, values []float64, scaled func(float64) float64) *vector.Lines {
	counted := vector.Line{Name: "measured", Tone: vector.Second, Symbol: vector.Circle, Dots: true}
	left := vector.Line{Name: "measured, not counted", Tone: vector.Soft, Symbol: vector.OpenTriangle, Dots: true}
	for i, step := 0, q.drawn(); i < len(q.Times); i += step {
		one := &counted
		if q.States[i] != usedState {
			one = &left
		}
		one.X, one.Y = append(one.X, fr.seconds(q.Times[i])), append(one.Y, scaled(values[i]))
	}
	l := &vector.Lines{X: fr.clockAxis(), Lines: []vector.Line{counted}}
	if len(left.X) > 0 {
		l.Lines = append(l.Lines, left)
	}
	return l
}

// seconds is where an instant stands on the axis of time.
func (fr *frame) seconds(t time.Time) float64 { return t.Sub(fr.base).Seconds() }

// roomy is an axis that shows one unit of decibels at least, so that a good log does not look wild.
func roomy(name string, least, greatest float64, unit string) vector.Axis {
	switch {
	case !finite(least) || !finite(greatest):
		least, greatest = 0, 1
	case unit == "dB" && greatest-least < 1:
		least, greatest = math.Floor(least)-1, math.Ceil(greatest)+1
	}
	return vector.NewAxis(name, least, greatest, false)
}

// beyondField counts the dots that lie outside the field of a chart.
func beyondField(l *vector.Lines) int {
	n := 0
	for _, s := range l.Lines {
		if !s.Dots {
			continue
		}
		for i, x := range s.X {
			if finite(s.Y[i]) && !(x >= l.X.From && x <= l.X.To && s.Y[i] >= l.Left.From && s.Y[i] <= l.Left.To) {
				n++
			}
		}
	}
	return n
}

func (q *MeasuredQuantity) overText(fr *frame, l *vector.Lines) string {
	text := q.Title + " in " + q.Unit + " over UTC"
	if q.BaseText != "" {
		text += ", less " + q.BaseText
	}
	text += ": each dot a sample of the log"
	if step := q.drawn(); step > 1 {
		text += ", 1 in " + strconv.Itoa(step) + " drawn"
	}
	return text + "; the line is what was predicted for it when it was taken into the logbook." + leftText(l)
}

func (q *MeasuredQuantity) unlikeText(l *vector.Lines) string {
	text := "Measured less predicted in " + q.DifferenceUnit + " over UTC; dashed: no difference."
	if b := q.bias(); b != nil {
		text += " Solid: the bias, " + withSign(b.Value, b.decimals()) + " ± " + fixed(b.Span, b.decimals()) + " " + b.Unit + " (95 %)."
	}
	if n := q.outOf(); n > 0 {
		text += " " + itoa(int64(n)) + " of " + itoa(int64(len(q.States))) + " samples do not count (triangles): outside the pass, not in lock or the like; the file says of each why."
	}
	return text + leftText(l)
}

// leftText says what a chart has no room for.
func leftText(l *vector.Lines) string {
	n := beyondField(l)
	switch {
	case n == 0:
		return ""
	case n == 1:
		return " One more lies outside this drawing."
	}
	return " " + itoa(int64(n)) + " more lie outside this drawing."
}

// table holds the numbers of the two drawings, thinned.
func (q *MeasuredQuantity) table(p *Pass) template.HTML {
	decimals := 2
	dst := []byte("<table><caption>" + template.HTMLEscapeString(q.Title) + "</caption><thead><tr><th scope=\"col\">UTC</th><th scope=\"col\">" +
		template.HTMLEscapeString(axisName("measured", q.Unit)) + "</th><th scope=\"col\">" + template.HTMLEscapeString(axisName("predicted", q.Unit)) +
		"</th><th scope=\"col\">" + template.HTMLEscapeString(axisName("difference", q.DifferenceUnit)) + "</th><th scope=\"col\">state</th></tr></thead><tbody>\n")
	for i, step := 0, 1+(len(q.Times)-1)/tableRows; i < len(q.Times); i += step {
		dst = append(append(append(dst, "<tr><th scope=\"row\">"...), utcClock(q.Times[i], layoutOf(p))...), "</th>"...)
		for _, v := range []float64{q.Measured[i], q.Predicted[i], q.Difference[i]} {
			dst = append(append(append(dst, "<td>"...), fixed(v, decimals)...), "</td>"...)
		}
		dst = append(append(append(dst, "<td>"...), template.HTMLEscapeString(q.States[i])...), "</td></tr>\n"...)
	}
	return template.HTML(append(dst, "</tbody></table>"...))
}
