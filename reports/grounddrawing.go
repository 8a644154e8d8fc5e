package reports

import (
	"fmt"
	"html/template"
	"math"
	"strings"

	vector "slantwise/reports/drawing"
)

// The map's radius in its own units, and the room around it for the names of the sky's
// directions.
const mapRadius, mapRoom = 200.0, 16.0

// groundDrawing draws the map: land, night, meridians and parallels, the circle of
// visibility, the track with its hours. Nothing in it is text of the scenario.
func groundDrawing(p *Pass) template.HTML {
	g := p.Ground
	m := newPlane(g.Station, mapReach(g), mapRadius)
	var b strings.Builder
	put := func(format string, args ...any) { fmt.Fprintf(&b, format, args...) }
	side := 2 * (mapRadius + mapRoom)
	put(`<svg class="map" viewBox="%g %g %g %g" role="img" aria-labelledby="ground-title" aria-describedby="ground-caption">`, -mapRoom, -mapRoom, side, side)
	put(`<defs><clipPath id="map-rim"><circle cx="%g" cy="%g" r="%g"/></clipPath>`, mapRadius, mapRadius, mapRadius)
	put(`<pattern id="map-night" width="5" height="5" patternUnits="userSpaceOnUse" patternTransform="rotate(45)"><path d="M0 0V5"/></pattern></defs>`)
	put(`<circle class="sea" cx="%g" cy="%g" r="%g"/><g clip-path="url(#map-rim)">`, mapRadius, mapRadius, mapRadius)
	if land := m.near(coastOutlines()); land != nil {
		put(`<path class="land" d="%s"/>`, m.area(land, holds(land, g.Station)))
	}
	put(`<path class="grid" d="%s"/>`, graticule(m, g.Station))
	put(`<path class="night" d="%s"/>`, m.area([][]Place{g.Night}, g.NightHere))
	put(`<path class="reach" d="%sz"/>`, m.path(g.Circle))
	put(`<path class="beside" d="%s"/>`, m.path(append(append([]Place{}, g.Before...), g.Track[0])))
	put(`<path class="beside" d="%s"/>`, m.path(append([]Place{g.Track[len(g.Track)-1]}, g.After...)))
	put(`<path class="track" d="%s"/>`, m.path(mapTrack(p)))
	b.WriteString(trackMarks(p, m))
	put(`</g><circle class="rim" cx="%g" cy="%g" r="%g"/>`, mapRadius, mapRadius, mapRadius)
	for i, name := range []string{"N", "E", "S", "W"} {
		s, c := math.Sincos(float64(i) * math.Pi / 2)
		r := mapRadius + mapRoom/2
		put(`<text x="%.1f" y="%.1f" text-anchor="middle">%s</text>`, mapRadius+r*s, mapRadius-r*c+4, name)
	}
	b.WriteString("</svg>")
	return template.HTML(b.String()) // numbers alone
}

// mapReach is the central angle that the map shows, deg: a fifth more than the circle
// and the track need, at most the whole Earth.
func mapReach(g *Ground) float64 {
	m := newPlane(g.Station, 180, mapRadius)
	most := 0.05
	for _, list := range [][]Place{g.Circle, g.Track} {
		for _, q := range list {
			angle, _ := m.polar(q)
			most = max(most, angle)
		}
	}
	return min(1.2*most*180/math.Pi, 180)
}

// mapTrack is the track thinned to the points of a drawing.
func mapTrack(p *Pass) []Place {
	var list []Place
	for _, i := range thinned(p, chartPoints) {
		list = append(list, p.Ground.Track[i])
	}
	return list
}

// trackMarks puts the events of the pass on the track, with the symbols of the sky
// track, and the station into the middle.
func trackMarks(p *Pass, m *plane) string {
	var b strings.Builder
	all := events(p)
	for i, e := range all {
		x, y := m.point(p.Ground.Track[e.sample])
		switch e.key {
		case "aos":
			fmt.Fprintf(&b, `<path class="mark" d="M%.1f %.1fl-5.5 10h11z"/>`, x, y-6)
		case "culmination":
			fmt.Fprintf(&b, `<circle class="mark" cx="%.1f" cy="%.1f" r="5"/>`, x, y)
		default:
			fmt.Fprintf(&b, `<rect class="mark" x="%.1f" y="%.1f" width="9" height="9"/>`, x-4.5, y-4.5)
		}
		if i == 1 && (together(e, all[0]) || together(e, all[2])) {
			continue
		}
		anchor, dx := "start", 9.0
		if x > m.x {
			anchor, dx = "end", -9
		}
		fmt.Fprintf(&b, `<text x="%.1f" y="%.1f" text-anchor="%s">%s %s</text>`, x+dx, y+4, anchor, e.short, clock(e.at))
	}
	fmt.Fprintf(&b, `<path class="here" d="M%.1f %.1fm-6 0h12m-6 -6v12"/>`, m.x, m.y)
	return b.String()
}

// graticule draws meridians and parallels, at steps that fit the map.
func graticule(m *plane, middle Place) string { return svgPath(graticuleLines(m, middle), false) }

func graticuleLines(m *plane, middle Place) [][]vector.Point {
	step := 10.0
	for _, s := range []float64{20, 30} {
		if m.reach*180/math.Pi > 2*s {
			step = s
		}
	}
	var lines [][]vector.Point
	for lat := -90 + step; lat < 90; lat += step {
		var line []Place
		for lon := -180.0; lon <= 180; lon += 3 {
			line = append(line, Place{lat, middle.LongitudeDeg + lon})
		}
		lines = append(lines, m.lines(line)...)
	}
	for lon := -180.0; lon < 180; lon += step {
		var line []Place
		for lat := -90 + step; lat <= 90-step; lat += 3 {
			line = append(line, Place{lat, lon})
		}
		lines = append(lines, m.lines(append(line, Place{90 - step, lon}))...)
	}
	return lines
}
