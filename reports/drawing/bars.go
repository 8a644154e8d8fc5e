package drawing

import "math"

// Fill is how the face of a bar is told from others without colour.
type Fill int

// Fills.
const (
	Full Fill = iota
	Slanted
	Blank
	Dots
)

// BarSet is a bar in each group, NaN for none.
type BarSet struct {
	Name   string
	Tone   Tone
	Fill   Fill
	Values []float64 // by group
}

// Bars is a chart of groups of bars that stand on zero; values are not negative.
type Bars struct {
	Name   string   // of the groups
	Groups []string // their labels
	Left   Axis     // from zero
	Sets   []BarSet
}

// Draw draws the chart into the w by h points at the canvas's origin.
func (s *Bars) Draw(c Canvas, w, h float64) {
	b := box{left: edgeLeft, right: w - edgeRight, top: nameSize + 8, bottom: h - edgeBelow}
	c.Write(Text{At: Point{0, nameSize}, Text: s.Left.Name, Size: nameSize})
	if len(s.Sets) > 1 {
		b.top = s.legend(c, w)
	}
	n := float64(len(s.Groups))
	x := Axis{Name: s.Name, From: 0, To: n}
	for i, g := range s.Groups {
		x.Ticks = append(x.Ticks, Tick{float64(i) + 0.5, g})
	}
	(&Lines{X: x, Left: s.Left}).grid(c, b)
	wide := min((b.right-b.left)/n*0.8/float64(len(s.Sets)), 24)
	for i := range s.Groups {
		middle := b.at(x.place(float64(i)+0.5), 0).X
		for k, set := range s.Sets {
			v := set.Values[i]
			if math.IsNaN(v) {
				continue
			}
			left := middle + wide*(float64(k)-float64(len(s.Sets))/2)
			bar(c, left+wide*0.06, left+wide*0.94, b.at(0, clip(s.Left.place(v))).Y, b.bottom, &set)
		}
	}
}

// bar draws one bar.
func bar(c Canvas, x0, x1, y0, y1 float64, set *BarSet) {
	if y1-y0 < 0.3 { // nothing, but known: a line on the foot
		c.Line([]Point{{x0, y1}, {x1, y1}}, Stroke{Tone: set.Tone, Width: 1.2})
		return
	}
	edge := &Stroke{Tone: set.Tone, Width: 0.9}
	face := Paper
	if set.Fill == Full {
		face = set.Tone
	}
	c.Area([]Point{{x0, y1}, {x0, y0}, {x1, y0}, {x1, y1}}, face, edge)
	switch set.Fill {
	case Slanted: // a stroke rises to the right: x - x0 + y - y0 stays constant along it
		for k := 3.5; k < x1-x0+y1-y0; k += 3.5 {
			from, to := Point{x0 + max(0, k-(y1-y0)), min(y1, y0+k)}, Point{x0 + min(k, x1-x0), y0 + max(0, k-(x1-x0))}
			c.Line([]Point{from, to}, Stroke{Tone: set.Tone, Width: 0.8})
		}
	case Dots:
		for y := y1 - 3; y > y0+1; y -= 4 {
			for x := x0 + 2.5; x < x1-1; x += 4 {
				c.Disc(Point{x, y}, 0.8, set.Tone, nil)
			}
		}
	}
}

// legend writes the names of the sets with their faces and returns where the field begins.
func (s *Bars) legend(c Canvas, w float64) float64 {
	x, y := 0.0, nameSize+2+labelSize+4
	for i := range s.Sets {
		set := &s.Sets[i]
		long := swatch/2 + 4 + c.Width(set.Name, labelSize)
		if x > 0 && x+long > w {
			x, y = 0, y+labelSize+4
		}
		bar(c, x, x+swatch/2, y-7, y, set)
		c.Write(Text{At: Point{x + swatch/2 + 4, y}, Text: set.Name, Size: labelSize})
		x += long + 12
	}
	return y + 8
}
