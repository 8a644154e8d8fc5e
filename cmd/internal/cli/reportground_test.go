package cli

import (
	"math"
	"testing"
	"time"

	"slantwise/orbit"
	"slantwise/orbit/unit"
	"slantwise/reports"
	"slantwise/station"
)

// Where the edge of the night runs, a site sees the Sun's centre in its horizon, but for
// the parallax of 9 seconds of arc; the Sun culminates over the point under it. At the
// June solstice 2026 (21 June, 08:24 UTC, Astronomical Almanac, from memory) that point
// lies 23.44 deg north, the obliquity of date.
func TestNightEdge(t *testing.T) {
	sun := orbit.SunPosition(time.Date(2026, 6, 21, 8, 24, 0, 0, time.UTC), orbit.EarthOrientation{})
	under, edge := nightEdge(sun)
	elevation := func(q reports.Place) float64 {
		site := station.Site{Latitude: unit.Angle(q.LatitudeDeg) * unit.Degree, Longitude: unit.Angle(q.LongitudeDeg) * unit.Degree}
		frame := site.Frame()
		_, el, _ := frame.Direction(sun)
		return el.Degrees()
	}
	if math.Abs(under.LatitudeDeg-23.44) > 0.005 {
		t.Errorf("the Sun culminates over %v, want 23.44 deg north", under.LatitudeDeg)
	}
	if el := elevation(under); el < 89.99 {
		t.Errorf("under the Sun it stands %v deg high", el)
	}
	if len(edge) != 120 {
		t.Fatalf("%d points", len(edge))
	}
	for _, q := range edge {
		if el := elevation(q); math.Abs(el) > 10.0/3600 {
			t.Errorf("at %v the Sun stands %v deg high", q, el)
		}
	}
}
