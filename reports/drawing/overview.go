package drawing

// Dot is a pass of the overview.
type Dot struct {
	At     float64 // on the time axis
	Row    int
	Symbol Symbol
	Tone   Tone
}

// Kind names a symbol in the legend.
type Kind struct {
	Name   string
	Symbol Symbol
	Tone   Tone
}

// Overview is a window of time with a row of symbols for each station.
type Overview struct {
	X     Axis
	Rows  []string
	Kinds []Kind
	Dots  []Dot
}

// Height returns how high it wants to be, in points.
func (o *Overview) Height() float64 { return 26 + 18*float64(len(o.Rows)) + edgeBelow }

// Draw draws the overview into the w by h points at the canvas's origin.
func (o *Overview) Draw(c Canvas, w, h float64) {
	left := 0.0
	for _, r := range o.Rows {
		left = max(left, c.Width(r, labelSize))
	}
	left = min(left, w/3)
	b := box{left: left + 8, right: w - edgeRight, top: 20, bottom: h - edgeBelow}
	x := 0.0
	for _, k := range o.Kinds {
		Mark(c, k.Symbol, Point{x + 4, labelSize - 2.6}, 3, k.Tone)
		c.Write(Text{At: Point{x + 11, labelSize}, Text: k.Name, Size: labelSize})
		x += 25 + c.Width(k.Name, labelSize)
	}
	row := func(i int) float64 { return 1 - (float64(i)+0.5)/float64(len(o.Rows)) }
	for i, name := range o.Rows {
		c.Line([]Point{b.at(0, row(i)), b.at(1, row(i))}, Stroke{Tone: Rule, Width: 0.5})
		at := b.at(0, row(i))
		c.Write(Text{At: Point{at.X - 6, at.Y + 2.6}, Text: cut(c, name, left), Size: labelSize, Align: End})
	}
	upright(c, b, &o.X)
	for _, d := range o.Dots {
		Mark(c, d.Symbol, b.at(o.X.place(d.At), row(d.Row)), 3, d.Tone)
	}
}

// cut shortens a text to a width.
func cut(c Canvas, text string, width float64) string {
	if c.Width(text, labelSize) <= width {
		return text
	}
	runes := []rune(text)
	for n := len(runes) - 1; n > 1; n-- {
		if short := string(runes[:n]) + "…"; c.Width(short, labelSize) <= width {
			return short
		}
	}
	return string(runes[:1])
}
