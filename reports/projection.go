package reports

import (
	"math"
	"strconv"

	vector "slantwise/reports/drawing"
)

// plane is a map around a place: distance and direction from the middle are true
// (the azimuthal equidistant projection on the sphere), so the azimuth on the map is
// the antenna's.
//
// Source: J. P. Snyder, Map Projections: A Working Manual, USGS Professional Paper
// 1395, 1987, eqs. (5-3), (22-4), (22-5) and (25-2).
type plane struct {
	sinLat, cosLat, lonDeg float64
	reach                  float64 // central angle at the rim, rad
	radius, x, y           float64 // of the rim and its middle, in the drawing's units
}

func newPlane(middle Place, reachDeg, radius float64) *plane {
	s, c := math.Sincos(middle.LatitudeDeg * math.Pi / 180)
	return &plane{s, c, middle.LongitudeDeg, reachDeg * math.Pi / 180, radius, radius, radius}
}

// polar returns the central angle and the azimuth of a place from the middle, rad.
func (m *plane) polar(q Place) (angle, azimuth float64) {
	s, c := math.Sincos(q.LatitudeDeg * math.Pi / 180)
	sl, cl := math.Sincos((q.LongitudeDeg - m.lonDeg) * math.Pi / 180)
	e, n := c*sl, m.cosLat*s-m.sinLat*c*cl
	return math.Atan2(math.Hypot(e, n), m.sinLat*s+m.cosLat*c*cl), math.Atan2(e, n)
}

// at places a polar position.
func (m *plane) at(angle, azimuth float64) (x, y float64) {
	s, c := math.Sincos(azimuth)
	r := m.radius * angle / m.reach
	return m.x + r*s, m.y - r*c
}

func (m *plane) point(q Place) (x, y float64) { return m.at(m.polar(q)) }

// path draws a line through places, left out where it runs outside of the rim.
func (m *plane) path(list []Place) string { return svgPath(m.lines(list), false) }

// lines is a line through places in pieces, left out where it runs outside of the rim.
func (m *plane) lines(list []Place) [][]vector.Point {
	var pieces [][]vector.Point
	var piece []vector.Point
	down := false
	for i, q := range list {
		angle, azimuth := m.polar(q)
		inside := angle <= m.reach*1.05
		if inside && !down && i > 0 {
			piece = append(piece, m.spot(m.polar(list[i-1])))
			down = true
		}
		if inside || down {
			piece = append(piece, m.spot(angle, azimuth))
		}
		if down = inside; !down && piece != nil {
			pieces, piece = append(pieces, piece), nil
		}
	}
	if piece != nil {
		pieces = append(pieces, piece)
	}
	return pieces
}

func (m *plane) spot(angle, azimuth float64) vector.Point {
	x, y := m.at(angle, azimuth)
	return vector.Point{X: x, Y: y}
}

// svgPath writes lines as the path of a drawing.
func svgPath(lines [][]vector.Point, closed bool) string {
	var b []byte
	for _, line := range lines {
		letter := byte('M')
		for _, q := range line {
			b = strconv.AppendFloat(append(b, letter), q.X, 'f', 1, 64)
			b = strconv.AppendFloat(append(b, ' '), q.Y, 'f', 1, 64)
			letter = 'L'
		}
		if closed {
			b = append(b, 'z')
		}
	}
	return string(b)
}

// beyond is how far out, in reaches, everything farther is drawn: chords of turn rad
// between points there do not come into the map.
const beyond, turn = 1.6, 0.35

// area draws the inside of rings, as rings says.
func (m *plane) area(rings [][]Place, hit bool) string { return svgPath(m.rings(rings, hit), true) }

// rings returns rings of the map, of which an odd number goes around what is inside; hit tells whether
// the middle is. What lies beyond the map is drawn together outside the rim. A ring around the antipode
// comes out as its complement: then a frame around all turns inside and outside.
func (m *plane) rings(rings [][]Place, hit bool) [][]vector.Point {
	var out [][]vector.Point
	odd := false
	for _, ring := range rings {
		drawn, winds := m.ring(ring)
		if drawn != nil {
			out = append(out, drawn)
		}
		odd = odd != winds
	}
	if odd != hit {
		far := m.radius * 2 * beyond
		out = append(out, []vector.Point{{X: m.x - far, Y: m.y - far}, {X: m.x + far, Y: m.y - far}, {X: m.x + far, Y: m.y + far}, {X: m.x - far, Y: m.y + far}})
	}
	return out
}

// ring draws one ring and tells whether it goes around the middle on the map. One that
// lies wholly outside and does not is left out.
func (m *plane) ring(ring []Place) (drawn []vector.Point, winds bool) {
	seen, total := false, 0.0
	var kept float64 // azimuth of the last point drawn beyond
	was := false     // the last point lies beyond
	put := func(angle, azimuth float64) {
		far := angle > m.reach*beyond
		if far && was && len(drawn) > 0 && math.Abs(math.Remainder(azimuth-kept, 2*math.Pi)) < turn/3 {
			return
		}
		seen = seen || angle <= m.reach
		drawn = append(drawn, m.spot(min(angle, m.reach*beyond), azimuth))
		was, kept = far, azimuth
	}
	for i := range ring {
		from, to := ring[i], ring[(i+1)%len(ring)]
		total += m.edge(from, to, 0, put)
	}
	winds = math.Abs(total) > math.Pi
	if !seen && !winds {
		return nil, false
	}
	return drawn, winds
}

// longest is the longest piece of a ring that is drawn straight, in degrees of latitude
// or longitude.
const longest = 6

// edge draws from a place up to the next, evenly in latitude and longitude the shorter
// way round, in pieces that are short and turn little around the middle. It returns by
// how much it turns.
func (m *plane) edge(from, to Place, depth int, put func(angle, azimuth float64)) float64 {
	a, azimuth := m.polar(from)
	c, next := m.polar(to)
	by := math.Remainder(next-azimuth, 2*math.Pi)
	north, east := to.LatitudeDeg-from.LatitudeDeg, math.Remainder(to.LongitudeDeg-from.LongitudeDeg, 360)
	if depth < 12 && (math.Abs(by) > turn && max(a, c) > m.reach || max(math.Abs(north), math.Abs(east)) > longest) {
		mid := Place{from.LatitudeDeg + north/2, from.LongitudeDeg + east/2}
		return m.edge(from, mid, depth+1, put) + m.edge(mid, to, depth+1, put)
	}
	put(a, azimuth)
	return by
}

// holds tells whether an odd number of rings goes around a place: how often the
// meridian from it to the north pole, which must lie outside, is crossed.
func holds(rings [][]Place, q Place) bool {
	in := false
	for _, ring := range rings {
		for i := range ring {
			a, b := ring[i], ring[(i+1)%len(ring)]
			from := math.Remainder(a.LongitudeDeg-q.LongitudeDeg, 360)
			to := from + math.Remainder(b.LongitudeDeg-a.LongitudeDeg, 360)
			if (from > 0) != (to > 0) && a.LatitudeDeg-from/(to-from)*(b.LatitudeDeg-a.LatitudeDeg) > q.LatitudeDeg {
				in = !in
			}
		}
	}
	return in
}
