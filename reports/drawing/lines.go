package drawing

import "math"

// Line is a line of a chart: Y at each X, NaN for a gap.
type Line struct {
	Name   string
	X, Y   []float64
	Dash   []float64
	Symbol Symbol // on some of its points
	Tone   Tone
	Width  float64
	Right  bool // on the right axis
	Dots   bool // the symbol at each point, and no line between them
}

// Span is a stretch of the x axis, with a word over it where it has one.
type Span struct {
	From, To float64
	Label    string
}

// Lines is a chart of lines over one quantity.
type Lines struct {
	X, Left Axis
	Right   *Axis // nil: none
	Lines   []Line
	Hatched []Span // struck out
	Marked  []Span // bounded, with a word over them
}

// Sizes of text and room, in points.
const (
	labelSize = 7.5
	nameSize  = 8.0
	edgeLeft  = 36.0
	edgeRight = 12.0
	edgeBelow = 30.0
	swatch    = 22.0
	dotSize   = 1.5 // of a mark among many
)

// box is the field of a chart inside its axes.
type box struct{ left, top, right, bottom float64 }

func (b box) at(x, y float64) Point {
	return Point{b.left + x*(b.right-b.left), b.bottom - y*(b.bottom-b.top)}
}

// Draw draws the chart into the w by h points at the canvas's origin.
func (l *Lines) Draw(c Canvas, w, h float64) {
	b := box{left: edgeLeft, right: w - edgeRight, bottom: h - edgeBelow}
	if l.Right != nil {
		b.right = w - edgeLeft
	}
	b.top = l.legend(c, w) + 6
	if len(l.Marked) > 0 {
		b.top += labelSize + 1
	}
	c.Write(Text{At: Point{0, nameSize}, Text: l.Left.Name, Size: nameSize})
	if l.Right != nil {
		c.Write(Text{At: Point{w, nameSize}, Text: l.Right.Name, Size: nameSize, Align: End})
	}
	for _, s := range l.Hatched {
		l.hatch(c, b, s)
	}
	l.grid(c, b)
	for _, s := range l.Marked {
		l.marked(c, b, s)
	}
	for i := range l.Lines {
		l.line(c, b, i)
	}
}

// legend writes the names of two lines or more under the axes' names and returns where it ends.
func (l *Lines) legend(c Canvas, w float64) float64 {
	y := nameSize + 2
	if len(l.Lines) < 2 {
		return y
	}
	x := 0.0
	y += labelSize + 4
	for _, s := range l.Lines {
		long := swatch + 4 + c.Width(s.Name, labelSize)
		if x > 0 && x+long > w {
			x, y = 0, y+labelSize+4
		}
		if !s.Dots {
			c.Line([]Point{{x, y - 2.6}, {x + swatch, y - 2.6}}, Stroke{s.Tone, s.Width, s.Dash})
		}
		Mark(c, s.Symbol, Point{x + swatch/2, y - 2.6}, 2.6, s.Tone)
		c.Write(Text{At: Point{x + swatch + 4, y}, Text: s.Name, Size: labelSize})
		x += long + 10
	}
	return y + 2
}

func (l *Lines) grid(c Canvas, b box) {
	for _, t := range l.Left.Ticks {
		y := l.Left.place(t.At)
		c.Line([]Point{b.at(0, y), b.at(1, y)}, Stroke{Tone: Rule, Width: 0.5})
		at := b.at(0, y)
		c.Write(Text{At: Point{at.X - 4, at.Y + 2.6}, Text: t.Label, Size: labelSize, Align: End})
	}
	if l.Right != nil {
		for _, t := range l.Right.Ticks {
			at := b.at(1, l.Right.place(t.At))
			c.Line([]Point{at, {at.X + 3, at.Y}}, Stroke{Tone: Soft, Width: 0.5})
			c.Write(Text{At: Point{at.X + 5, at.Y + 2.6}, Text: t.Label, Size: labelSize})
		}
	}
	upright(c, b, &l.X)
}

// upright draws the x axis with its name and those labels that do not touch.
func upright(c Canvas, b box, x *Axis) {
	c.Line([]Point{b.at(0, 0), b.at(1, 0)}, Stroke{Tone: Soft, Width: 0.7})
	free := math.Inf(-1)
	for _, t := range x.Ticks {
		at := b.at(x.place(t.At), 0)
		c.Line([]Point{at, {at.X, at.Y + 3}}, Stroke{Tone: Soft, Width: 0.7})
		half := c.Width(t.Label, labelSize) / 2
		if at.X-half < free {
			continue
		}
		free = at.X + half + 4
		c.Write(Text{At: Point{at.X, at.Y + 4 + labelSize}, Text: t.Label, Size: labelSize, Align: Middle})
	}
	c.Write(Text{At: Point{(b.left + b.right) / 2, b.bottom + edgeBelow - 6}, Text: x.Name, Size: nameSize, Align: Middle})
}

// hatch strikes a span out with slanted strokes.
func (l *Lines) hatch(c Canvas, b box, s Span) {
	x0, x1 := b.at(clip(l.X.place(s.From)), 0).X, b.at(clip(l.X.place(s.To)), 0).X
	const apart = 6.0
	// A stroke rises to the right: x - x0 + y - top stays constant along it.
	high := b.bottom - b.top
	for k := apart; k < x1-x0+high; k += apart {
		from := Point{x0 + max(0, k-high), b.top + min(k, high)}
		to := Point{x0 + min(k, x1-x0), b.top + max(0, k-(x1-x0))}
		c.Line([]Point{from, to}, Stroke{Tone: Hatch, Width: 0.35})
	}
}

func clip(v float64) float64 { return min(max(v, 0), 1) }

// marked bounds a span and writes its word over it.
func (l *Lines) marked(c Canvas, b box, s Span) {
	from, to := clip(l.X.place(s.From)), clip(l.X.place(s.To))
	for _, x := range []float64{from, to} {
		c.Line([]Point{b.at(x, 0), b.at(x, 1)}, Stroke{Tone: Soft, Width: 0.6, Dash: Dotted})
	}
	at := b.at((from+to)/2, 1)
	if c.Width(s.Label, labelSize-1) <= max(24, b.at(to, 0).X-b.at(from, 0).X) {
		c.Write(Text{At: Point{at.X, at.Y - 2}, Text: s.Label, Size: labelSize - 1, Align: Middle})
	}
}

// line draws line i, broken at its gaps and where it leaves the field.
func (l *Lines) line(c Canvas, b box, i int) {
	s := &l.Lines[i]
	axis := &l.Left
	if s.Right {
		axis = l.Right
	}
	var run []Point
	flush := func() {
		if len(run) > 1 {
			c.Line(run, Stroke{s.Tone, s.Width, s.Dash})
		} else if len(run) == 1 && s.Symbol == NoSymbol { // between gaps
			c.Disc(run[0], s.Width, s.Tone, nil)
		}
		run = run[:0]
	}
	step := max(1, len(s.X)/9)
	for k := range s.X {
		x, y := l.X.place(s.X[k]), axis.place(s.Y[k])
		if !(x >= -1e-9 && x <= 1+1e-9 && y >= -1e-9 && y <= 1+1e-9) {
			flush()
			continue
		}
		if s.Dots {
			Mark(c, s.Symbol, b.at(x, y), dotSize, s.Tone)
			continue
		}
		run = append(run, b.at(x, y))
		if s.Symbol != NoSymbol && (k+2*i)%step == step/2 {
			Mark(c, s.Symbol, b.at(x, y), 2.6, s.Tone)
		}
	}
	flush()
}
