package paper

import (
	"slantwise/reports/drawing"
	"slantwise/reports/paper/pdf"
)

// Figure is a chart with its title and caption.
type Figure struct {
	Title, Caption string
	Height         float64 // of the drawing, points
	Wide           bool    // over the whole width
	Draw           func(c drawing.Canvas, w, h float64)
}

const gutter = 20.0

// Sizes of a figure's words.
const (
	captionSize = smallSize - 0.5
	captionLine = 8.5
	titleRoom   = 16.0
)

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
		for i, f := range row {
			d.figure(f, margin+float64(i)*(width+gutter), d.y, width)
		}
		d.y += high
	}
}

func (d *Document) figureHeight(f Figure, width float64) float64 {
	d.font("", captionSize, soft)
	return titleRoom + f.Height + 3 + captionLine*float64(len(d.split(f.Caption, width))) + 10
}

func (d *Document) figure(f Figure, x, y, width float64) {
	d.font("B", textSize, ink)
	d.put(x, y+10, d.fit(f.Title, width))
	f.Draw(canvas{d, x, y + titleRoom}, width, f.Height)
	d.font("", captionSize, soft)
	for i, line := range d.split(f.Caption, width) {
		d.put(x, y+titleRoom+f.Height+9+captionLine*float64(i), line)
	}
}

// canvas is a part of a page.
type canvas struct {
	d    *Document
	x, y float64
}

// tones are the colours of the pages in print; they differ in grey too.
var tones = [...]pdf.Colour{
	drawing.Ink: ink, drawing.Soft: soft, drawing.Rule: rule, drawing.First: {0x0a, 0x4a, 0x86},
	drawing.Second: {0xb6, 0x5a, 0x00}, drawing.Hatch: {0x7a, 0x82, 0x8b}, drawing.Paper: {255, 255, 255}, drawing.Land: {0xe3, 0xe6, 0xe0},
}

func (c canvas) pen(s *drawing.Stroke) { c.d.page.Pen(tones[s.Tone], s.Width, s.Dash...) }

func (c canvas) path(points []drawing.Point) {
	p := c.d.page
	p.Move(c.x+points[0].X, c.y+points[0].Y)
	for _, q := range points[1:] {
		p.Line(c.x+q.X, c.y+q.Y)
	}
}

// Line implements drawing.Canvas.
func (c canvas) Line(points []drawing.Point, s drawing.Stroke) {
	c.pen(&s)
	c.path(points)
	c.d.page.Draw()
}

// colours sets how a closed shape is painted, and tells whether it has an edge.
func (c canvas) colours(fill drawing.Tone, s *drawing.Stroke) bool {
	c.d.page.Fill(tones[fill])
	if s != nil {
		c.pen(s)
	}
	return s != nil
}

// Area implements drawing.Canvas.
func (c canvas) Area(points []drawing.Point, fill drawing.Tone, s *drawing.Stroke) {
	edge := c.colours(fill, s)
	c.path(points)
	c.d.page.Close()
	c.d.page.Paint(edge)
}

// Disc implements drawing.Canvas.
func (c canvas) Disc(at drawing.Point, r float64, fill drawing.Tone, s *drawing.Stroke) {
	edge := c.colours(fill, s)
	c.d.page.Circle(c.x+at.X, c.y+at.Y, r)
	c.d.page.Paint(edge)
}

// Inside implements drawing.Canvas.
func (c canvas) Inside(rings [][]drawing.Point, draw func()) {
	p := c.d.page
	p.Save()
	for _, ring := range rings {
		c.path(ring)
		p.Close()
	}
	p.Clip()
	draw()
	p.Restore()
}

// Write implements drawing.Canvas.
func (c canvas) Write(t drawing.Text) {
	style := ""
	if t.Bold {
		style = "B"
	}
	c.d.font(style, t.Size, tones[t.Tone])
	x := c.x + t.At.X - [...]float64{drawing.Start: 0, drawing.Middle: 0.5, drawing.End: 1}[t.Align]*c.d.width(t.Text)
	c.d.put(x, c.y+t.At.Y, t.Text)
}

// Width implements drawing.Canvas.
func (c canvas) Width(text string, size float64) float64 { return c.d.fonts[0].Width(text, size) }
