package reports

import (
	"encoding/json"
	"math"
	"sync"
)

// coast returns the rings of the land that go generate brings, nil where it has not:
// longitude, latitude, longitude ... in hundredths of a degree. A map without it has
// everything but the coastline, and says so.
var coast = sync.OnceValue(func() [][]int {
	text, err := assets.ReadFile("assets/coastline.json")
	if err != nil {
		return nil
	}
	if _, err := assets.ReadFile("assets/coastline-licence.txt"); err != nil {
		return nil // never hand it on without saying whose it is
	}
	var rings [][]int
	if json.Unmarshal(text, &rings) != nil {
		return nil
	}
	return rings
})

// places makes a ring of the coast one of places.
func places(ring []int) []Place {
	list := make([]Place, len(ring)/2)
	for i := range list {
		list[i] = Place{LatitudeDeg: float64(ring[2*i+1]) / 100, LongitudeDeg: float64(ring[2*i]) / 100}
	}
	return list
}

// outline is a ring of the land with a circle around it.
type outline struct {
	ring     []Place
	middle   Place
	angleRad float64 // from the middle to the farthest point
}

// coastOutlines returns the rings of the land; nil where there are none.
var coastOutlines = sync.OnceValue(func() []outline {
	var land []outline
	for _, r := range coast() {
		land = append(land, outlineOf(places(r)))
	}
	return land
})

// outlineOf puts a circle around a ring: around the mean of its points on the sphere.
func outlineOf(ring []Place) outline {
	var x, y, z float64
	for _, q := range ring {
		s, c := math.Sincos(q.LatitudeDeg * math.Pi / 180)
		sl, cl := math.Sincos(q.LongitudeDeg * math.Pi / 180)
		x, y, z = x+c*cl, y+c*sl, z+s
	}
	o := outline{ring: ring, middle: Place{math.Atan2(z, math.Hypot(x, y)) * 180 / math.Pi, math.Atan2(y, x) * 180 / math.Pi}}
	m := newPlane(o.middle, 180, 1)
	for i, q := range ring {
		angle, _ := m.polar(q)
		// The ring goes on to its next point evenly in latitude and longitude: from the nearer of both no
		// farther than half that way.
		next := ring[(i+1)%len(ring)]
		wide := math.Cos(min(math.Abs(q.LatitudeDeg), math.Abs(next.LatitudeDeg)) * math.Pi / 180)
		if q.LatitudeDeg*next.LatitudeDeg < 0 {
			wide = 1
		}
		way := math.Hypot(next.LatitudeDeg-q.LatitudeDeg, wide*math.Remainder(next.LongitudeDeg-q.LongitudeDeg, 360)) * math.Pi / 180
		o.angleRad = max(o.angleRad, angle+way/2)
	}
	return o
}

// near returns those rings of the land that can come into a map: the others lie wholly outside and go
// around neither its middle nor the antipode.
func (m *plane) near(land []outline) [][]Place {
	var out [][]Place
	for i := range land {
		o := &land[i]
		if angle, _ := m.polar(o.middle); angle-o.angleRad > m.reach*beyond && math.Pi-angle > o.angleRad {
			continue
		}
		out = append(out, o.ring)
	}
	return out
}
