package pdf

import "codeberg.org/go-pdf/fpdf"

// Colour is red, green and blue.
type Colour [3]uint8

// Page is a page in the making: points, from its upper left corner to the right and down. Its state
// (colours, pen) holds until it is set anew, and is written only where it changes.
type Page struct {
	file   *File
	number int
	state  pen
	depth  []pen // of Save
}

type pen struct {
	stroke, fill       Colour
	strokeSet, fillSet bool
	width              float64
	dashed             bool
}

// Target is a place that links and bookmarks lead to.
type Target struct {
	page *Page
	y    float64
	link int // of the file; -1 before the first link to it
}

func (p *Page) out() *fpdf.Fpdf { return p.file.turnTo(p) }

// Fill sets the colour of shapes and text.
func (p *Page) Fill(c Colour) {
	if s := &p.state; !s.fillSet || s.fill != c {
		s.fill, s.fillSet = c, true
		r, g, b := int(c[0]), int(c[1]), int(c[2])
		p.out().SetFillColor(r, g, b)
		p.out().SetTextColor(r, g, b)
	}
}

// Pen sets the colour and the width of lines, and their dashes: on, off and so on; none: solid.
func (p *Page) Pen(c Colour, width float64, dash ...float64) {
	s, out := &p.state, p.out()
	if !s.strokeSet || s.stroke != c {
		s.stroke, s.strokeSet = c, true
		out.SetDrawColor(int(c[0]), int(c[1]), int(c[2]))
	}
	if s.width != width {
		s.width = width
		out.SetLineWidth(width)
	}
	if len(dash) > 0 || s.dashed {
		s.dashed = len(dash) > 0
		out.SetDashPattern(dash, 0)
	}
}

// Move begins a path, or a further part of it.
func (p *Page) Move(x, y float64) { p.out().MoveTo(x, y) }

// Line leads the path on.
func (p *Page) Line(x, y float64) { p.out().LineTo(x, y) }

// Close leads the path back to where its part began.
func (p *Page) Close() { p.out().ClosePath() }

// kappa makes a quarter of a circle of a cubic curve: 4/3 (√2 - 1).
const kappa = 0.5522847498

// Circle adds a circle to the path.
func (p *Page) Circle(x, y, r float64) {
	k, out := kappa*r, p.out()
	out.MoveTo(x+r, y)
	out.CurveBezierCubicTo(x+r, y-k, x+k, y-r, x, y-r)
	out.CurveBezierCubicTo(x-k, y-r, x-r, y-k, x-r, y)
	out.CurveBezierCubicTo(x-r, y+k, x-k, y+r, x, y+r)
	out.CurveBezierCubicTo(x+k, y+r, x+r, y+k, x+r, y)
	out.ClosePath()
}

// Rectangle adds a rectangle to the path.
func (p *Page) Rectangle(x, y, w, h float64) {
	out := p.out()
	out.MoveTo(x, y)
	out.LineTo(x+w, y)
	out.LineTo(x+w, y+h)
	out.LineTo(x, y+h)
	out.ClosePath()
}

// Draw draws the path's line.
func (p *Page) Draw() { p.out().DrawPath("S") }

// Paint fills the path, and draws its line too where edge is set. Parts within others are holes:
// the rule of odd and even.
func (p *Page) Paint(edge bool) {
	if edge {
		p.out().DrawPath("B*")
		return
	}
	p.out().DrawPath("f*")
}

// Clip keeps all that follows inside the path, until Restore; parts within others are holes.
func (p *Page) Clip() { p.out().RawWriteStr("W* n") }

// Save keeps the state until Restore; calls come in pairs.
func (p *Page) Save() {
	p.depth = append(p.depth, p.state)
	p.out().RawWriteStr("q")
}

// Restore brings back the state of the last Save.
func (p *Page) Restore() {
	last := len(p.depth) - 1
	p.state, p.depth = p.depth[last], p.depth[:last]
	p.out().RawWriteStr("Q")
	p.file.font = "" // the page's is that of Save
}

// Text writes a line of text on its base line, in the colour of Fill.
func (p *Page) Text(x, y float64, f *Font, size float64, text string) {
	if text == "" {
		return
	}
	out := p.out()
	for _, one := range f.pieces(shown(text)) {
		p.file.family(f, one.whole, size)
		out.Text(x, y, one.text)
		x += f.Width(one.text, size)
	}
}

// Link makes a field lead to a place.
func (p *Page) Link(x, y, w, h float64, to *Target) {
	if to.link < 0 {
		to.link = p.file.out.AddLink()
		p.file.out.SetLink(to.link, to.y, to.page.number)
	}
	p.out().Link(x, y, w, h, to.link)
}
