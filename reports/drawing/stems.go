package drawing

import "math"

// Stem is a value that stands by itself: a symbol on a foot that reaches down, or up, to
// zero; with a plus-minus a bar of that half length through the symbol.
type Stem struct {
	X, Y   float64
	Spread float64 // 0 or NaN: none
}

// StemSet are stems of one kind, told from the others by symbol and dash.
type StemSet struct {
	Name   string
	Symbol Symbol
	Tone   Tone
	Dash   []float64 // of the feet
	Stems  []Stem
}

// Stems is a chart of single values over one quantity.
type Stems struct {
	X, Left Axis
	Sets    []StemSet
}

// besides is how far apart the feet of two sets stand at the same place, in points.
const besides = 4.0

// Draw draws the chart into the w by h points at the canvas's origin.
func (s *Stems) Draw(c Canvas, w, h float64) {
	b := box{left: edgeLeft, right: w - edgeRight, top: nameSize + 8, bottom: h - edgeBelow}
	c.Write(Text{At: Point{0, nameSize}, Text: s.Left.Name, Size: nameSize})
	if len(s.Sets) > 1 {
		b.top = s.legend(c, w)
	}
	(&Lines{X: s.X, Left: s.Left}).grid(c, b)
	zero := clip(s.Left.place(0))
	if zero > 0 {
		c.Line([]Point{b.at(0, zero), b.at(1, zero)}, Stroke{Tone: Soft, Width: 0.7})
	}
	for k, set := range s.Sets {
		aside := besides * (float64(k) - float64(len(s.Sets)-1)/2)
		for _, v := range set.Stems {
			if !math.IsNaN(v.Y) {
				s.stem(c, b, &set, v, zero, aside)
			}
		}
	}
}

func (s *Stems) stem(c Canvas, b box, set *StemSet, v Stem, zero, aside float64) {
	x := s.X.place(v.X)
	at := func(y float64) Point { p := b.at(x, y); return Point{p.X + aside, p.Y} }
	top := at(clip(s.Left.place(v.Y)))
	if foot := at(zero); math.Abs(foot.Y-top.Y) > 0.5 {
		c.Line([]Point{foot, top}, Stroke{Tone: set.Tone, Width: 1, Dash: set.Dash})
	}
	if v.Spread > 0 {
		low, high := at(clip(s.Left.place(v.Y-v.Spread))), at(clip(s.Left.place(v.Y+v.Spread)))
		for _, end := range []Point{low, high} {
			c.Line([]Point{{end.X - 3, end.Y}, {end.X + 3, end.Y}}, Stroke{Tone: Ink, Width: 0.8})
		}
		c.Line([]Point{low, high}, Stroke{Tone: Ink, Width: 0.8})
	}
	Mark(c, set.Symbol, top, 2.8, set.Tone)
}

// legend writes the names of the sets with their symbols and returns where the field begins.
func (s *Stems) legend(c Canvas, w float64) float64 {
	x, y := 0.0, nameSize+2+labelSize+4
	for _, set := range s.Sets {
		long := swatch + 4 + c.Width(set.Name, labelSize)
		if x > 0 && x+long > w {
			x, y = 0, y+labelSize+4
		}
		c.Line([]Point{{x, y - 2.6}, {x + swatch, y - 2.6}}, Stroke{Tone: set.Tone, Width: 1, Dash: set.Dash})
		Mark(c, set.Symbol, Point{x + swatch/2, y - 2.6}, 2.8, set.Tone)
		c.Write(Text{At: Point{x + swatch + 4, y}, Text: set.Name, Size: labelSize})
		x += long + 10
	}
	return y + 8
}
