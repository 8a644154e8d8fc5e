package reports

import (
	"math"

	vector "slantwise/reports/drawing"
)

// sightsText says what the drawings of sights show.
const sightsText = "Spacecraft (square), station (triangle) and the boresight lie in the plane of each drawing, to scale but for the arrow’s length; the shaded disc is what this plane cuts out of the Earth. " +
	"Solid: toward the station. Dashed: the boresight, or the axis that it spins about."

// draw draws a sight without script.
func (s *Sight) draw(c vector.Canvas, w, h float64) {
	l := s.plan()
	k := min(w/sightWidth, h/sightHeight)
	dx, dy := (w-k*sightWidth)/2, (h-k*sightHeight)/2
	at := func(x, y float64) vector.Point { return vector.Point{X: dx + k*x, Y: dy + k*y} }
	frame := []vector.Point{at(0, 0), at(sightWidth, 0), at(sightWidth, sightHeight), at(0, sightHeight)}
	line := vector.Stroke{Tone: vector.Ink, Width: 0.9}
	along := func(x, y float64) vector.Point { return at(l.ox+x, l.oy+y) }
	c.Inside([][]vector.Point{frame}, func() {
		c.Disc(at(l.ox, l.oy+s.EarthY.Kilometres()*l.scale), k*s.EarthRadius.Kilometres()*l.scale, vector.Land, &vector.Stroke{Tone: vector.Soft, Width: 0.9})
		c.Line([]vector.Point{along(0, 0), at(l.sx, l.sy)}, line)
	})
	bx, by := s.BoresightX, s.BoresightY
	c.Line([]vector.Point{along(0, 0), along(sightReach*bx, sightReach*by)}, vector.Stroke{Tone: vector.Ink, Width: 0.9, Dash: []float64{4, 3}})
	tip := func(forth, aside float64) vector.Point {
		return along((sightReach+forth)*bx-aside*by, (sightReach+forth)*by+aside*bx)
	}
	c.Area([]vector.Point{tip(6, 0), tip(-4, 4), tip(-4, -4)}, vector.Ink, nil)
	c.Line(s.arc(along), vector.Stroke{Tone: vector.Ink, Width: 0.6})
	mx, my := middleOf(s)
	p := along((sightArc+16)*mx, (sightArc+16)*my)
	c.Write(vector.Text{At: vector.Point{X: p.X, Y: p.Y + 3}, Text: fixed(s.Off.Degrees(), 1) + "°", Size: 8, Align: vector.Middle})
	vector.Mark(c, vector.Square, along(0, 0), 3.6, vector.Ink)
	vector.Mark(c, vector.Triangle, at(l.sx, l.sy), 3.6, vector.Ink)
	c.Line(append(frame, frame[0]), vector.Stroke{Tone: vector.Rule, Width: 0.6})
}

// arc goes from the boresight to the station, the shorter way.
func (s *Sight) arc(along func(x, y float64) vector.Point) []vector.Point {
	u, v := s.toStation()
	from, to := math.Atan2(s.BoresightY, s.BoresightX), math.Atan2(v, u)
	by := math.Remainder(to-from, 2*math.Pi)
	const pieces = 24
	list := make([]vector.Point, 0, pieces+1)
	for i := range pieces + 1 {
		sin, cos := math.Sincos(from + by*float64(i)/pieces)
		list = append(list, along(sightArc*cos, sightArc*sin))
	}
	return list
}
