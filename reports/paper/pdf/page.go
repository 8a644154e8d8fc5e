package pdf

import "math"

// Colour is red, green and blue.
type Colour [3]uint8

// Page is a page in the making: points, from its upper left corner to the right and down. Its state
// (colours, pen, font) holds until it is set anew, and is written only where it changes.
type Page struct {
	file          *File
	width, height float64
	out           []byte
	links         []link
	state         pen
	depth         []pen // of Save
}

type pen struct {
	stroke, fill       Colour
	strokeSet, fillSet bool
	width              float64
	dashed             bool
	font               *Font
	size               float64
}

type link struct {
	left, top, width, height float64
	to                       *Target
}

// Target is a place that links and bookmarks lead to.
type Target struct {
	page *Page
	y    float64
}

// number appends v with two decimals at most.
func number(dst []byte, v float64) []byte {
	n := int64(math.Round(v * 100))
	if n < 0 {
		dst, n = append(dst, '-'), -n
	}
	dst = whole(dst, n/100)
	if f := n % 100; f != 0 {
		dst = append(dst, '.', byte('0'+f/10))
		if f%10 != 0 {
			dst = append(dst, byte('0'+f%10))
		}
	}
	return dst
}

func whole(dst []byte, n int64) []byte {
	var digits [20]byte
	i := len(digits)
	for ok := true; ok; ok = n > 0 {
		i--
		digits[i] = byte('0' + n%10)
		n /= 10
	}
	return append(dst, digits[i:]...)
}

// op appends numbers and the operator that takes them.
func (p *Page) op(name string, values ...float64) {
	for _, v := range values {
		p.out = append(number(p.out, v), ' ')
	}
	p.out = append(append(p.out, name...), '\n')
}

func (p *Page) y(v float64) float64 { return p.height - v }

func (p *Page) colour(c Colour, name string) {
	for _, v := range c {
		p.out = append(appendShare(p.out, v), ' ')
	}
	p.out = append(append(p.out, name...), '\n')
}

// appendShare appends v of 255 as a number from 0 to 1.
func appendShare(dst []byte, v uint8) []byte {
	n := (int64(v)*1000 + 127) / 255
	if n == 1000 {
		return append(dst, '1')
	}
	return append(dst, '0', '.', byte('0'+n/100), byte('0'+n/10%10), byte('0'+n%10))
}

// Fill sets the colour of shapes and text.
func (p *Page) Fill(c Colour) {
	if s := &p.state; !s.fillSet || s.fill != c {
		s.fill, s.fillSet = c, true
		p.colour(c, "rg")
	}
}

// Pen sets the colour and the width of lines, and their dashes: on, off and so on; none: solid.
func (p *Page) Pen(c Colour, width float64, dash ...float64) {
	s := &p.state
	if !s.strokeSet || s.stroke != c {
		s.stroke, s.strokeSet = c, true
		p.colour(c, "RG")
	}
	if s.width != width {
		s.width = width
		p.op("w", width)
	}
	if len(dash) == 0 && !s.dashed {
		return
	}
	s.dashed = len(dash) > 0
	p.out = append(p.out, '[')
	for _, d := range dash {
		p.out = append(number(p.out, d), ' ')
	}
	p.out = append(p.out, "] 0 d\n"...)
}

// Move begins a path, or a further part of it.
func (p *Page) Move(x, y float64) { p.op("m", x, p.y(y)) }

// Line leads the path on.
func (p *Page) Line(x, y float64) { p.op("l", x, p.y(y)) }

// Close leads the path back to where its part began.
func (p *Page) Close() { p.op("h") }

// kappa makes a quarter of a circle of a cubic curve: 4/3 (√2 - 1).
const kappa = 0.5522847498

// Circle adds a circle to the path.
func (p *Page) Circle(x, y, r float64) {
	y = p.y(y)
	k := kappa * r
	p.op("m", x+r, y)
	p.op("c", x+r, y+k, x+k, y+r, x, y+r)
	p.op("c", x-k, y+r, x-r, y+k, x-r, y)
	p.op("c", x-r, y-k, x-k, y-r, x, y-r)
	p.op("c", x+k, y-r, x+r, y-k, x+r, y)
	p.op("h")
}

// Rectangle adds a rectangle to the path.
func (p *Page) Rectangle(x, y, w, h float64) { p.op("re", x, p.y(y+h), w, h) }

// Draw draws the path's line.
func (p *Page) Draw() { p.op("S") }

// Paint fills the path, and draws its line too where edge is set. Parts within others are holes:
// the rule of odd and even.
func (p *Page) Paint(edge bool) {
	if edge {
		p.op("B*")
		return
	}
	p.op("f*")
}

// Clip keeps all that follows inside the path, until Restore.
func (p *Page) Clip() { p.op("W n") }

// Save keeps the state until Restore; calls come in pairs.
func (p *Page) Save() {
	p.depth = append(p.depth, p.state)
	p.op("q")
}

// Restore brings back the state of the last Save.
func (p *Page) Restore() {
	last := len(p.depth) - 1
	p.state, p.depth = p.depth[last], p.depth[:last]
	p.op("Q")
}

// Text writes a line of text on its base line, in the colour of Fill.
func (p *Page) Text(x, y float64, f *Font, size float64, text string) {
	if text == "" {
		return
	}
	p.out = append(p.out, "BT "...)
	if s := &p.state; s.font != f || s.size != size {
		s.font, s.size = f, size
		p.out = append(append(p.out, "/F"...), byte('0'+f.object), ' ')
		p.out = append(number(p.out, size), " Tf "...)
	}
	p.out = append(number(p.out, x), ' ')
	p.out = append(number(p.out, p.y(y)), " Td "...)
	p.out = append(f.appendText(p.out, text), " Tj ET\n"...)
}

// Link makes a field lead to a place.
func (p *Page) Link(x, y, w, h float64, to *Target) { p.links = append(p.links, link{x, y, w, h, to}) }
