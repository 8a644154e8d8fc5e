package drawing

// Point is a place on a canvas, in points.
type Point struct{ X, Y float64 }

// Tone is a colour by its use; each canvas has its own for it, all apart in lightness.
type Tone int

// Tones.
const (
	Ink    Tone = iota // text and sums
	Soft               // what stands back
	Rule               // grid
	First              // the first line
	Second             // the second line
	Hatch              // spans that are struck out
	Paper              // the ground
	Land               // the land of a map
)

// Stroke is how a line is drawn.
type Stroke struct {
	Tone  Tone
	Width float64   // points
	Dash  []float64 // on, off, …; nil: solid
}

// Dashes tell lines apart without colour.
var (
	Dashed = []float64{6, 3}
	Dotted = []float64{1.2, 2.4}
)

// Align says which end of a text stands at its place.
type Align int

// Aligns.
const (
	Start Align = iota
	Middle
	End
)

// Text is a line of text; At is on its base line.
type Text struct {
	At    Point
	Text  string
	Size  float64 // points
	Align Align
	Tone  Tone
	Bold  bool
}

// Canvas is what charts are drawn onto.
type Canvas interface {
	Line(points []Point, s Stroke)             // open, two points or more
	Area(points []Point, fill Tone, s *Stroke) // closed; s nil: no edge
	Disc(at Point, r float64, fill Tone, s *Stroke)
	Inside(rings [][]Point, draw func()) // what draw draws, kept inside an odd number of closed rings
	Write(t Text)
	Width(text string, size float64) float64 // how long a text is, points
}

// Symbol is the shape of a mark.
type Symbol int

// Symbols.
const (
	NoSymbol Symbol = iota
	Circle
	Triangle
	Square
	Diamond
	Ring         // an empty circle
	OpenTriangle // an empty one
	OpenSquare
	OpenDiamond
	Upright // a plus sign
)

// Mark draws a symbol of the given radius.
func Mark(c Canvas, kind Symbol, at Point, r float64, tone Tone) {
	edge := &Stroke{Tone: tone, Width: 0.9}
	fill := tone
	switch kind {
	case Ring, OpenTriangle, OpenSquare, OpenDiamond:
		fill = Paper
	}
	corners := func(list ...float64) {
		points := make([]Point, 0, len(list)/2)
		for i := 0; i < len(list); i += 2 {
			points = append(points, Point{at.X + r*list[i], at.Y + r*list[i+1]})
		}
		c.Area(points, fill, edge)
	}
	switch kind {
	case Circle, Ring:
		c.Disc(at, r, fill, edge)
	case Triangle, OpenTriangle:
		corners(0, -1, 0.95, 0.8, -0.95, 0.8)
	case Square, OpenSquare:
		corners(-0.85, -0.85, 0.85, -0.85, 0.85, 0.85, -0.85, 0.85)
	case Diamond, OpenDiamond:
		corners(0, -1.2, 1, 0, 0, 1.2, -1, 0)
	case Upright:
		c.Line([]Point{{at.X - r, at.Y}, {at.X + r, at.Y}}, *edge)
		c.Line([]Point{{at.X, at.Y - r}, {at.X, at.Y + r}}, *edge)
	}
}
