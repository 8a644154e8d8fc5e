package drawing

import "math"

// Map is a round map: lengths in radii of its rim, from its middle to the right and down.
type Map struct {
	Land, Night           [][]Point // rings; an odd number of them goes around what is inside
	Grid, Beside, Reached [][]Point // lines
	Track                 [][]Point
	Events                []MapEvent
}

// MapEvent is a marked place with a word of one or two lines.
type MapEvent struct {
	At     Point
	Symbol Symbol
	Lines  []string // empty: no label
}

// mapRoom is the room around a map for the directions' names, points.
const mapRoom = 12.0

// Draw draws the map into the w by h points at the canvas's origin.
func (m *Map) Draw(c Canvas, w, h float64) {
	middle, r := Point{w / 2, h / 2}, min(w, h)/2-mapRoom
	at := func(p Point) Point { return Point{middle.X + r*p.X, middle.Y + r*p.Y} }
	scaled := func(list [][]Point) [][]Point {
		out := make([][]Point, 0, len(list))
		for _, line := range list {
			one := make([]Point, len(line))
			for i, p := range line {
				one[i] = at(p)
			}
			if len(one) > 1 {
				out = append(out, one)
			}
		}
		return out
	}
	rim := make([]Point, 0, 120)
	for i := range 120 {
		s, cos := math.Sincos(float64(i) * math.Pi / 60)
		rim = append(rim, Point{middle.X + r*s, middle.Y - r*cos})
	}
	whole := []Point{{middle.X - r, middle.Y - r}, {middle.X + r, middle.Y - r}, {middle.X + r, middle.Y + r}, {middle.X - r, middle.Y + r}}
	strokes := func(list [][]Point, s Stroke) {
		for _, line := range scaled(list) {
			c.Line(line, s)
		}
	}
	track := scaled(m.Track)
	c.Inside([][]Point{rim}, func() {
		if land := scaled(m.Land); len(land) > 0 {
			c.Inside(land, func() { c.Area(whole, Land, nil) })
			for _, ring := range land {
				c.Line(append(ring, ring[0]), Stroke{Tone: Soft, Width: 0.35})
			}
		}
		strokes(m.Grid, Stroke{Tone: Rule, Width: 0.4})
		if night := scaled(m.Night); len(night) > 0 {
			c.Inside(night, func() { slanted(c, whole[0], 2*r) })
		}
		strokes(m.Reached, Stroke{Tone: Ink, Width: 0.9, Dash: Dotted})
		strokes(m.Beside, Stroke{Tone: First, Width: 0.9, Dash: []float64{3, 2}})
		for _, line := range track {
			c.Line(line, Stroke{Tone: First, Width: 1.7})
		}
	})
	c.Line(append(rim, rim[0]), Stroke{Tone: Soft, Width: 0.8})
	m.marks(c, w, h, middle, r, at, track)
}

// marks draws what has words: events, the station in the middle, the directions.
func (m *Map) marks(c Canvas, w, h float64, middle Point, r float64, at func(Point) Point, track [][]Point) {
	l := &labels{c: c, w: w, h: h}
	for _, line := range track {
		l.follow(line)
	}
	for i, name := range []string{"N", "E", "S", "W"} {
		s, cos := math.Sincos(float64(i) * math.Pi / 2)
		p := Point{middle.X + (r+mapRoom/2)*s, middle.Y - (r+mapRoom/2)*cos + 2.6}
		l.take(around(Point{p.X, p.Y - 2.6}, 4))
		c.Write(Text{At: p, Text: name, Size: labelSize, Align: Middle, Bold: true})
	}
	Mark(c, Upright, middle, 4, Ink)
	l.take(around(middle, 4))
	for _, e := range m.Events {
		Mark(c, e.Symbol, at(e.At), symbolRadius, First)
		l.take(around(at(e.At), symbolRadius))
	}
	for _, e := range m.Events {
		l.put(at(e.At), symbolRadius, e.Lines, labelSize, e.At.X > 0)
	}
}

// slanted draws slanted strokes over a square.
func slanted(c Canvas, corner Point, side float64) {
	const apart = 3.5
	for k := apart; k < 2*side; k += apart {
		from := Point{corner.X + max(0, k-side), corner.Y + min(k, side)}
		to := Point{corner.X + min(k, side), corner.Y + max(0, k-side)}
		c.Line([]Point{from, to}, Stroke{Tone: Hatch, Width: 0.3})
	}
}
