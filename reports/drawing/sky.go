package drawing

import "math"

// Place is a direction of the sky, in degrees: azimuth clockwise from north, elevation.
type Place struct{ Azimuth, Elevation float64 }

// Event is a marked place of the sky with a word of one or two lines.
type Event struct {
	At     Place
	Symbol Symbol
	Lines  []string // empty: no label
}

// Sky is the sky over a station: north up, east to the right, the zenith in the middle.
type Sky struct {
	Track  []Place
	Mask   []Place // the least elevation that sees the sky, azimuth rising; empty: a bare horizon
	Events []Event
}

// Draw draws the sky into the w by h points at the canvas's origin.
func (s *Sky) Draw(c Canvas, w, h float64) {
	centre, r := Point{w / 2, h/2 + 4}, min(w, h)/2-24
	at := func(p Place) Point {
		d := r * (90 - max(p.Elevation, 0)) / 90
		sin, cos := math.Sincos(p.Azimuth * math.Pi / 180)
		return Point{centre.X + d*sin, centre.Y - d*cos}
	}
	for _, el := range []float64{0, 30, 60} {
		c.Line(ring(at, el), Stroke{Tone: Rule, Width: 0.6})
	}
	for az := 0.0; az < 180; az += 30 {
		c.Line([]Point{at(Place{az, 0}), at(Place{az + 180, 0})}, Stroke{Tone: Rule, Width: 0.4})
	}
	s.mask(c, at)
	track := make([]Point, len(s.Track))
	for i, p := range s.Track {
		track[i] = at(p)
	}
	if len(track) > 1 {
		c.Line(track, Stroke{Tone: First, Width: 1.6})
	}
	l := &labels{c: c, w: w, h: h}
	l.follow(track)
	l.follow(ring(at, 0))
	for az := 0.0; az < 360; az += 90 {
		s.rim(l, at, az)
	}
	for _, e := range s.Events {
		p := at(e.At)
		Mark(c, e.Symbol, p, symbolRadius, First)
		l.take(around(p, symbolRadius+0.5))
	}
	for _, e := range s.Events {
		p := at(e.At)
		l.put(p, symbolRadius, e.Lines, labelSize, p.X < centre.X)
	}
	for az := 30.0; az < 360; az += 30 {
		if math.Mod(az, 90) != 0 {
			s.rim(l, at, az)
		}
	}
	for _, el := range []float64{30, 60} {
		s.height(l, at, el)
	}
}

// symbolRadius is that of an event's mark.
const symbolRadius = 3.6

// ring is a circle of equal elevation.
func ring(at func(Place) Point, elevation float64) []Point {
	list := make([]Point, 0, 73)
	for az := 0.0; az <= 360; az += 5 {
		list = append(list, at(Place{az, elevation}))
	}
	return list
}

// rim writes the azimuth at the rim: the four directions always, the others where there is room.
func (s *Sky) rim(l *labels, at func(Place) Point, az float64) {
	text, bold := map[float64]string{0: "N", 90: "E", 180: "S", 270: "W"}[az], true
	if text == "" {
		text, bold = label(az, 0)+"°", false
	}
	p := at(Place{az, 0})
	sin, cos := math.Sincos(az * math.Pi / 180)
	p = Point{p.X + 11*sin, p.Y - 10*cos}
	half := l.c.Width(text, labelSize) / 2
	f := field{p.X - half, p.Y - labelSize/2, p.X + half, p.Y + labelSize/2}
	if !bold && !l.free(f) {
		return
	}
	l.take(f)
	l.c.Write(Text{At: Point{p.X, p.Y + 2.6}, Text: text, Size: labelSize, Align: Middle, Bold: bold})
}

// height writes the elevation of a circle where there is room, beginning in the north-east.
func (s *Sky) height(l *labels, at func(Place) Point, el float64) {
	text := label(el, 0) + "°"
	wide := l.c.Width(text, labelSize-0.5)
	for _, az := range []float64{15, 345, 165, 195, 75, 285, 105, 255} {
		p := at(Place{az, el})
		f := field{p.X, p.Y - labelSize, p.X + wide, p.Y + 1}
		if l.cost(f) > 0 {
			continue
		}
		l.take(f)
		l.c.Write(Text{At: p, Text: text, Size: labelSize - 0.5, Tone: Soft})
		return
	}
}

// mask shades what lies under the least elevation with spokes and bounds it with dashes.
func (s *Sky) mask(c Canvas, at func(Place) Point) {
	if len(s.Mask) == 0 {
		return
	}
	edge := make([]Point, 0, len(s.Mask)+1)
	for _, p := range s.Mask {
		edge = append(edge, at(p))
	}
	edge = append(edge, edge[0])
	for az := 0.0; az < 360; az += 2 {
		c.Line([]Point{at(Place{az, 0}), at(Place{az, s.least(az)})}, Stroke{Tone: Hatch, Width: 0.35})
	}
	c.Line(edge, Stroke{Tone: Second, Width: 1, Dash: []float64{3, 2}})
}

// least returns the mask at an azimuth, between its points.
func (s *Sky) least(az float64) float64 {
	n := len(s.Mask)
	for i := range n {
		a, b := s.Mask[i], s.Mask[(i+1)%n]
		if i == n-1 {
			b.Azimuth += 360
		}
		x := az
		if x < a.Azimuth {
			x += 360
		}
		if x >= a.Azimuth && x <= b.Azimuth && b.Azimuth > a.Azimuth {
			return a.Elevation + (b.Elevation-a.Elevation)*(x-a.Azimuth)/(b.Azimuth-a.Azimuth)
		}
	}
	return s.Mask[0].Elevation
}
