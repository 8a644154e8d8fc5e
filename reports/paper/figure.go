package paper

import "slantwise/reports/drawing"

// Figure is a chart with its title and caption.
type Figure struct {
	Title, Caption string
	Height         float64 // of the drawing, points
	Wide           bool    // over the whole width
	Draw           func(c drawing.Canvas, w, h float64)
}

const gutter = 20.0

// Figures writes charts two beside each other, wide ones alone.
func (d *Document) Figures(list []Figure) {
	for len(list) > 0 {
		row, width := list[:1], fieldWidth
		if !list[0].Wide {
			width = (fieldWidth - gutter) / 2
			if len(list) > 1 && !list[1].Wide {
				row = list[:2]
			}
		}
		list = list[len(row):]
		high := 0.0
		for _, f := range row {
			high = max(high, d.figureHeight(f, width))
		}
		d.room(high)
		y := d.pdf.GetY()
		for i, f := range row {
			d.figure(f, margin+float64(i)*(width+gutter), y, width)
		}
		d.pdf.SetXY(margin, y+high)
	}
}

func (d *Document) figureHeight(f Figure, width float64) float64 {
	d.font("", smallSize-0.5, soft)
	return 16 + f.Height + 3 + 8.5*float64(len(d.pdf.SplitText(f.Caption, width))) + 10
}

func (d *Document) figure(f Figure, x, y, width float64) {
	d.font("B", textSize, ink)
	d.pdf.Text(x, y+10, d.fit(f.Title, width))
	f.Draw(canvas{d, x, y + 16}, width, f.Height)
	d.font("", smallSize-0.5, soft)
	for i, line := range d.pdf.SplitText(f.Caption, width) {
		d.pdf.Text(x, y+16+f.Height+9+8.5*float64(i), line)
	}
}

// canvas is a part of a page.
type canvas struct {
	d    *Document
	x, y float64
}

// tones are the colours of the pages in print; they differ in grey too.
var tones = [...]colour{
	drawing.Ink: ink, drawing.Soft: soft, drawing.Rule: rule, drawing.First: {0x0a, 0x4a, 0x86},
	drawing.Second: {0xb6, 0x5a, 0x00}, drawing.Hatch: {0x7a, 0x82, 0x8b}, drawing.Paper: {255, 255, 255},
}

func (c canvas) stroke(s *drawing.Stroke) {
	p, t := c.d.pdf, tones[s.Tone]
	p.SetDrawColor(t[0], t[1], t[2])
	p.SetLineWidth(s.Width)
	p.SetDashPattern(s.Dash, 0)
	p.SetLineJoinStyle("round")
}

// Line implements drawing.Canvas.
func (c canvas) Line(points []drawing.Point, s drawing.Stroke) {
	c.stroke(&s)
	p := c.d.pdf
	p.MoveTo(c.x+points[0].X, c.y+points[0].Y)
	for _, q := range points[1:] {
		p.LineTo(c.x+q.X, c.y+q.Y)
	}
	p.DrawPath("D")
	p.SetDashPattern(nil, 0)
}

// how returns how a closed shape is painted.
func (c canvas) how(fill drawing.Tone, s *drawing.Stroke) string {
	t := tones[fill]
	c.d.pdf.SetFillColor(t[0], t[1], t[2])
	if s == nil {
		return "F"
	}
	c.stroke(s)
	return "FD"
}

// Area implements drawing.Canvas.
func (c canvas) Area(points []drawing.Point, fill drawing.Tone, s *drawing.Stroke) {
	how, p := c.how(fill, s), c.d.pdf
	p.MoveTo(c.x+points[0].X, c.y+points[0].Y)
	for _, q := range points[1:] {
		p.LineTo(c.x+q.X, c.y+q.Y)
	}
	p.ClosePath()
	p.DrawPath(how)
}

// Disc implements drawing.Canvas.
func (c canvas) Disc(at drawing.Point, r float64, fill drawing.Tone, s *drawing.Stroke) {
	how := c.how(fill, s)
	c.d.pdf.Circle(c.x+at.X, c.y+at.Y, r, how)
}

// Write implements drawing.Canvas.
func (c canvas) Write(t drawing.Text) {
	style := ""
	if t.Bold {
		style = "B"
	}
	c.d.font(style, t.Size, tones[t.Tone])
	x := c.x + t.At.X - [...]float64{drawing.Start: 0, drawing.Middle: 0.5, drawing.End: 1}[t.Align]*c.d.pdf.GetStringWidth(t.Text)
	c.d.pdf.Text(x, c.y+t.At.Y, t.Text)
}

// Width implements drawing.Canvas.
func (c canvas) Width(text string, size float64) float64 {
	c.d.pdf.SetFont(family, "", size)
	return c.d.pdf.GetStringWidth(text)
}
