package drawing

import "math"

// BarKind is what a bar of a strip stands for.
type BarKind int

// Kinds of bars, told apart by shape and strokes.
const (
	Taken    BarKind = iota // full
	Held                    // full, with a frame inside
	Around                  // struck with slanted strokes
	LeftOut                 // low and empty
	ShutDown                // crossed
)

// Bar is a time of a strip.
type Bar struct {
	From, To float64
	Kind     BarKind
	Label    string // over it, where there is room; empty: none
}

// Strip is a row of bars.
type Strip struct {
	Name string
	Bars []Bar
}

// Strips are rows of bars over one axis.
type Strips struct {
	X    Axis
	Rows []Strip
}

// Heights of a strip: the whole, the top of its bars, the top of a low bar, and their foot.
const (
	stripHeight = 26.0
	barTop      = 10.0
	lowTop      = 16.5
	barFoot     = 22.0
)

// Height returns how high they want to be, in points.
func (s *Strips) Height() float64 { return stripHeight*float64(len(s.Rows)) + edgeBelow }

// Draw draws the strips into the w by h points at the canvas's origin.
func (s *Strips) Draw(c Canvas, w, h float64) {
	left := 0.0
	for _, r := range s.Rows {
		left = max(left, c.Width(r.Name, labelSize))
	}
	left = min(left, w/4)
	b := box{left: left + 8, right: w - edgeRight, top: 0, bottom: h - edgeBelow}
	for _, t := range s.X.Ticks {
		x := b.at(s.X.place(t.At), 0).X
		c.Line([]Point{{x, b.top}, {x, b.bottom}}, Stroke{Tone: Rule, Width: 0.5})
	}
	for i, r := range s.Rows {
		y := stripHeight * float64(i)
		c.Line([]Point{{b.left, y + barFoot}, {b.right, y + barFoot}}, Stroke{Tone: Rule, Width: 0.5})
		c.Write(Text{At: Point{b.left - 6, y + barFoot - 2}, Text: cut(c, r.Name, left), Size: labelSize, Align: End})
		free := math.Inf(-1)
		for _, bar := range r.Bars {
			free = s.bar(c, b, y, bar, free)
		}
	}
	upright(c, b, &s.X)
}

// leastBar is how wide a bar is at least, points, so that a short one is seen.
const leastBar = 1.2

// bar draws a bar on a row, and its label right of free; it returns what is free then.
func (s *Strips) bar(c Canvas, b box, y float64, bar Bar, free float64) float64 {
	x0, x1 := b.at(clip(s.X.place(bar.From)), 0).X, b.at(clip(s.X.place(bar.To)), 0).X
	x1 = max(x1, x0+leastBar)
	top := y + barTop
	if bar.Kind == LeftOut {
		top = y + lowTop
	}
	frame := func(in float64) []Point {
		return []Point{{x0 + in, top + in}, {x1 - in, top + in}, {x1 - in, y + barFoot - in}, {x0 + in, y + barFoot - in}}
	}
	edge := &Stroke{Tone: Soft, Width: 0.5}
	switch bar.Kind {
	case Taken, Held:
		c.Area(frame(0), First, nil)
		if bar.Kind == Held && x1-x0 > 5 {
			inner := frame(1.5)
			c.Line(append(inner, inner[0]), Stroke{Tone: Paper, Width: 0.8})
		}
	case LeftOut:
		c.Area(frame(0), Paper, edge)
	default:
		c.Area(frame(0), Paper, edge)
		s.strike(c, frame(0), bar.Kind == ShutDown)
	}
	half := c.Width(bar.Label, labelSize) / 2
	if middle := (x0 + x1) / 2; bar.Label != "" && middle-half > free {
		c.Write(Text{At: Point{middle, y + barTop - 2}, Text: bar.Label, Size: labelSize, Align: Middle, Bold: true})
		free = middle + half + 1.5
	}
	return free
}

// strike draws slanted strokes inside a frame, and the other way too where it is crossed.
func (s *Strips) strike(c Canvas, frame []Point, crossed bool) {
	x0, y0, x1, y1 := frame[0].X, frame[0].Y, frame[2].X, frame[2].Y
	high := y1 - y0
	c.Inside([][]Point{frame}, func() {
		for x := x0; x < x1+high; x += 4 {
			c.Line([]Point{{x, y0}, {x - high, y1}}, Stroke{Tone: Hatch, Width: 0.5})
			if crossed {
				c.Line([]Point{{x - high, y0}, {x, y1}}, Stroke{Tone: Hatch, Width: 0.5})
			}
		}
	})
}
