package drawing

import (
	"html"
	"math"
	"strconv"
)

// SVG is a canvas that makes a drawing to stand in a page. Its colours are the page's style
// variables, so that light, dark and print hold for it too; it has no ids, so that many may stand
// in one page.
type SVG struct {
	width, height float64
	body          []byte
}

// NewSVG returns an empty drawing of w by h points.
func NewSVG(w, h float64) *SVG { return &SVG{width: w, height: h} }

// variables are the names in the page's style sheet, by tone.
var variables = [...]string{Ink: "ink", Soft: "soft", Rule: "rule", First: "line-1", Second: "line-2", Hatch: "hatch", Paper: "paper", Land: "land"}

// Bytes returns the drawing with a name for readers that do not see it.
func (s *SVG) Bytes(name string) []byte {
	out := []byte(`<svg xmlns="http://www.w3.org/2000/svg" role="img" viewBox="0 0 `)
	out = append(number(out, s.width), ' ')
	out = append(number(out, s.height), `" aria-label="`...)
	out = append(append(out, html.EscapeString(name)...), `">`...)
	return append(append(out, s.body...), "</svg>"...)
}

// number writes with two decimals at most.
func number(dst []byte, v float64) []byte {
	v = math.Round(v*100) / 100
	if v == 0 {
		v = 0 // never minus nought
	}
	return strconv.AppendFloat(dst, v, 'f', -1, 64)
}

func (s *SVG) points(list []Point) {
	for i, p := range list {
		if i > 0 {
			s.body = append(s.body, ' ')
		}
		s.body = append(number(s.body, p.X), ',')
		s.body = number(s.body, p.Y)
	}
}

func (s *SVG) stroke(k *Stroke) {
	if k == nil {
		return
	}
	s.body = append(append(append(s.body, ` stroke="var(--`...), variables[k.Tone]...), `)" stroke-width="`...)
	s.body = append(number(s.body, k.Width), '"')
	if k.Dash != nil {
		s.body = append(s.body, ` stroke-dasharray="`...)
		for i, d := range k.Dash {
			if i > 0 {
				s.body = append(s.body, ' ')
			}
			s.body = number(s.body, d)
		}
		s.body = append(s.body, '"')
	}
}

// Line implements Canvas.
func (s *SVG) Line(points []Point, k Stroke) {
	s.body = append(s.body, `<polyline fill="none" points="`...)
	s.points(points)
	s.body = append(s.body, '"')
	s.stroke(&k)
	s.body = append(s.body, "/>"...)
}

// Area implements Canvas.
func (s *SVG) Area(points []Point, fill Tone, k *Stroke) {
	s.body = append(s.body, `<polygon points="`...)
	s.points(points)
	s.fill(fill)
	s.stroke(k)
	s.body = append(s.body, "/>"...)
}

func (s *SVG) fill(t Tone) {
	s.body = append(append(append(s.body, `" fill="var(--`...), variables[t]...), `)"`...)
}

// Disc implements Canvas.
func (s *SVG) Disc(at Point, r float64, fill Tone, k *Stroke) {
	s.body = append(number(append(s.body, `<circle cx="`...), at.X), `" cy="`...)
	s.body = append(number(s.body, at.Y), `" r="`...)
	s.body = number(s.body, r)
	s.fill(fill)
	s.stroke(k)
	s.body = append(s.body, "/>"...)
}

// Inside implements Canvas, with a basic shape in place of an element of a name: CSS Masking 1,
// section 5.
func (s *SVG) Inside(rings [][]Point, draw func()) {
	s.body = append(s.body, `<g clip-path="path(evenodd,'`...)
	for _, ring := range rings {
		letter := byte('M')
		for _, p := range ring {
			s.body = append(number(append(s.body, letter), p.X), ' ')
			s.body = number(s.body, p.Y)
			letter = 'L'
		}
		s.body = append(s.body, 'Z')
	}
	s.body = append(s.body, `') view-box">`...)
	draw()
	s.body = append(s.body, "</g>"...)
}

// Write implements Canvas.
func (s *SVG) Write(t Text) {
	s.body = append(number(append(s.body, `<text x="`...), t.At.X), `" y="`...)
	s.body = append(number(s.body, t.At.Y), `" font-size="`...)
	s.body = number(s.body, t.Size)
	s.fill(t.Tone)
	if t.Align != Start {
		s.body = append(append(append(s.body, ` text-anchor="`...), [...]string{Middle: "middle", End: "end"}[t.Align]...), '"')
	}
	if t.Bold {
		s.body = append(s.body, ` font-weight="bold"`...)
	}
	s.body = append(append(append(s.body, '>'), html.EscapeString(t.Text)...), "</text>"...)
}

// Width implements Canvas by the advances of DejaVu Sans, the widest of the fonts that pages ask for.
func (s *SVG) Width(text string, size float64) float64 { return size * advance(text) }
